//! From text to columns of numbers: one pass over the rows, every row with its line.

use std::sync::Arc;

use super::date_form::{self, Decision, Fields, SAMPLED_ROWS};
use super::layout::{Layout, REMARK, shorten};
use super::number::{self, Reading};
use super::options::ReadOptions;
use super::time_stamp::Stamp;
use crate::problem::{Finding, Place, Problem, Problems, Severity};

/// Problems of one kind that are written out; the rest are counted.
const MOST_SHOWN: usize = 20;

/// The readings of one file, in its own units and on its own clock. Missing is `NaN`.
#[derive(Debug, Clone, Default)]
pub(super) struct Rows {
    pub line: Vec<u32>,
    pub stamp: Vec<Stamp>,
    pub temperature: Vec<f64>,
    pub humidity: Option<Vec<f64>>,
    pub dew_point: Option<Vec<f64>>,
    pub radiation: Option<Vec<f64>>,
    pub wind: Option<Vec<f64>>,
}

/// Reads every row.
///
/// # Errors
/// Rows whose time or temperature cannot be read, and rows with too few or too many fields; the first of each kind with
/// their lines, the others counted.
pub(super) fn rows(
    name: &Arc<str>,
    text: &str,
    layout: &Layout,
    options: &ReadOptions,
    findings: &mut Vec<Finding>,
) -> Result<Rows, Problems> {
    let place = Place::file(Arc::clone(name));
    let sample = sample(text, layout);
    let Some(Decision {
        form,
        order_guessed,
    }) = date_form::decide(&sample, &layout.columns, options)
    else {
        return Err(no_time(&place, layout, &sample).into());
    };
    if order_guessed {
        findings.push(
            Finding::new(
                Severity::Warning,
                "the dates can be read day first and month first",
                "read day first; declare the date order if that is wrong",
            )
            .at(&place.clone().at_line(layout.line)),
        );
    }
    let decimal_comma = options
        .decimal_comma
        .unwrap_or_else(|| has_decimal_comma(&sample, layout));
    let missing: Vec<Vec<u8>> = options
        .missing
        .iter()
        .map(|m| m.trim().as_bytes().to_vec())
        .collect();

    let columns = &layout.columns;
    let expected = text.len() / 24;
    let column = |wanted: bool| wanted.then(|| Vec::with_capacity(expected));
    let mut rows = Rows {
        line: Vec::with_capacity(expected),
        stamp: Vec::with_capacity(expected),
        temperature: Vec::with_capacity(expected),
        humidity: column(columns.humidity.is_some()),
        dew_point: column(columns.dew_point.is_some()),
        radiation: column(columns.radiation.is_some()),
        wind: column(columns.wind.is_some()),
    };
    let needed = form.columns.last().max(columns.temperature.at) + 1;
    let mut faults = Faults::new(place);
    let mut reader = reader(text, layout);
    let mut record = csv::ByteRecord::new();
    // Reading from memory cannot fail and rows may be of any length, so an error is the end.
    while reader.read_byte_record(&mut record).unwrap_or(false) {
        let line = line_of(text, layout, &record);
        if record.len() < needed {
            faults.short(line, &record, needed, layout);
            continue;
        }
        if record.len() > layout.fields
            && record
                .iter()
                .skip(layout.fields)
                .any(|f| !f.trim_ascii().is_empty())
        {
            faults.long(line, &record, layout, decimal_comma);
            continue;
        }
        let Some(stamp) = form.stamp(&record) else {
            faults.time(line, &form.text(&record), form.words(), &record, layout);
            continue;
        };
        let read = |at: usize| match record.get(at) {
            Some(field) => number::read(field, decimal_comma, &missing),
            None => Reading::Missing,
        };
        let temperature = match read(columns.temperature.at) {
            Reading::Number(number) => number,
            Reading::Missing => f64::NAN,
            Reading::Other => {
                let field = record.field(columns.temperature.at).unwrap_or_default();
                faults.temperature(line, &String::from_utf8_lossy(field), layout);
                continue;
            }
        };
        rows.line.push(u32::try_from(line).unwrap_or(u32::MAX));
        rows.stamp.push(stamp);
        rows.temperature.push(temperature);
        for (values, column) in [
            (&mut rows.humidity, &columns.humidity),
            (&mut rows.dew_point, &columns.dew_point),
            (&mut rows.radiation, &columns.radiation),
            (&mut rows.wind, &columns.wind),
        ] {
            if let (Some(values), Some(column)) = (values, column) {
                values.push(match read(column.at) {
                    Reading::Number(number) => number,
                    // A word in a column that is not needed is as good as nothing there.
                    Reading::Missing | Reading::Other => f64::NAN,
                });
            }
        }
    }
    faults.finish(rows)
}

fn reader<'a>(text: &'a str, layout: &Layout) -> csv::Reader<&'a [u8]> {
    let body = text.as_bytes().get(layout.start..).unwrap_or_default();
    csv::ReaderBuilder::new()
        .delimiter(layout.delimiter)
        .has_headers(false)
        .flexible(true)
        .comment(Some(REMARK))
        .buffer_capacity(1 << 16)
        .from_reader(body)
}

/// The first rows, for deciding forms.
fn sample(text: &str, layout: &Layout) -> Vec<csv::ByteRecord> {
    reader(text, layout)
        .into_byte_records()
        .map_while(Result::ok)
        .take(SAMPLED_ROWS)
        .collect()
}

/// The line a record begins on. The position that the reader gives lies before the blank lines and remarks it passed over.
fn line_of(text: &str, layout: &Layout, record: &csv::ByteRecord) -> usize {
    let Some(position) = record.position() else {
        return layout.line;
    };
    let mut line = layout.line + usize::try_from(position.line()).unwrap_or(1) - 1;
    let bytes = text.as_bytes();
    let mut at = layout.start + usize::try_from(position.byte()).unwrap_or(0);
    loop {
        match bytes.get(at) {
            Some(b'\n') => {
                line += 1;
                at += 1;
            }
            Some(b'\r') => at += 1,
            Some(&REMARK) => at += bytes[at..].iter().take_while(|&&b| b != b'\n').count(),
            _ => return line,
        }
    }
}

fn has_decimal_comma(sample: &[csv::ByteRecord], layout: &Layout) -> bool {
    let fields = || {
        sample
            .iter()
            .filter_map(|row| row.get(layout.columns.temperature.at))
    };
    let with = |byte: u8| fields().filter(|field| field.contains(&byte)).count();
    with(b',') > with(b'.')
}

fn no_time(place: &Place, layout: &Layout, sample: &[csv::ByteRecord]) -> Problem {
    let at = match layout.columns.time.first() {
        Some(columns) => columns.last(),
        None => 0,
    };
    let field = sample
        .first()
        .and_then(|row| row.get(at))
        .map(String::from_utf8_lossy)
        .unwrap_or_default();
    let mut place = place.clone().at_line(layout.line);
    place.field = layout.headings.get(at).cloned();
    Problem::new(
        place,
        format!("\"{}\" is not a time in any known form", shorten(&field)),
        "ISO 8601, YYYY/MM/DD HH:MM, DD/MM/YYYY HH:MM, MM/DD/YYYY HH:MM, YYYYMMDDHHMM or seconds since 1970",
        "write the times in one of these, or say which column holds them",
    )
}

/// Faulty rows: the first of each kind are written out, the rest counted.
struct Faults {
    place: Place,
    problems: Problems,
    /// Kind, how many were seen, and the line of the last.
    seen: [(&'static str, usize, usize); 4],
}

impl Faults {
    fn new(place: Place) -> Self {
        let kinds = [
            "too few fields",
            "too many fields",
            "a time that cannot be read",
            "a temperature that cannot be read",
        ];
        Self {
            place,
            problems: Problems::new(),
            seen: kinds.map(|kind| (kind, 0, 0)),
        }
    }

    /// Counts a fault; whether it is still to be written out.
    fn count(&mut self, kind: usize, line: usize) -> bool {
        let (_, seen, last) = &mut self.seen[kind];
        *seen += 1;
        *last = line;
        *seen <= MOST_SHOWN
    }

    fn at(&self, line: usize, layout: &Layout, column: Option<usize>) -> Place {
        let mut place = self.place.clone().at_line(line);
        place.field = column.and_then(|at| layout.headings.get(at)).cloned();
        place
    }

    fn short(&mut self, line: usize, record: &csv::ByteRecord, needed: usize, layout: &Layout) {
        if !self.count(0, line) {
            return;
        }
        let longest = record.iter().map(<[u8]>::len).max().unwrap_or(0);
        let remedy = if longest > 1000 {
            "is a quotation mark left open?".to_owned()
        } else {
            format!(
                "separate the fields by {}, or delete the line",
                delimiter_words(layout.delimiter)
            )
        };
        self.problems.push(Problem::new(
            self.at(line, layout, None),
            format!(
                "the row \"{}\" has {}",
                row_text(record, layout),
                count(record.len(), "field")
            ),
            format!("at least {needed}, up to the last column that is needed"),
            remedy,
        ));
    }

    fn long(
        &mut self,
        line: usize,
        record: &csv::ByteRecord,
        layout: &Layout,
        decimal_comma: bool,
    ) {
        if !self.count(1, line) {
            return;
        }
        let remedy = if layout.delimiter == b',' && !decimal_comma {
            "if decimals are written with a comma, separate the fields by semicolons or quote them"
        } else {
            ""
        };
        self.problems.push(Problem::new(
            self.at(line, layout, None),
            format!(
                "the row \"{}\" has {}",
                row_text(record, layout),
                count(record.len(), "field")
            ),
            format!("{}, as on the first line", count(layout.fields, "field")),
            remedy,
        ));
    }

    fn time(
        &mut self,
        line: usize,
        text: &str,
        form: &str,
        record: &csv::ByteRecord,
        layout: &Layout,
    ) {
        if !self.count(2, line) {
            return;
        }
        let repeated = record
            .iter()
            .zip(&layout.headings)
            .all(|(field, heading)| String::from_utf8_lossy(field).trim() == heading.as_str());
        let found = if repeated && !layout.headings.is_empty() {
            "the heading is repeated here".to_owned()
        } else {
            format!("\"{}\" is not a time in the form {form}", shorten(text))
        };
        self.problems.push(Problem::new(
            self.at(
                line,
                layout,
                layout.columns.time.first().map(|columns| columns.last()),
            ),
            found,
            format!("times in the form {form}, as on the lines before"),
            "correct the line or delete it: a missing hour is repaired",
        ));
    }

    fn temperature(&mut self, line: usize, text: &str, layout: &Layout) {
        if !self.count(3, line) {
            return;
        }
        self.problems.push(Problem::new(
            self.at(line, layout, Some(layout.columns.temperature.at)),
            format!("\"{}\" is not a number", shorten(text)),
            "a number, or nothing where a reading is missing",
            "correct it, or declare it as the mark of a missing reading",
        ));
    }

    fn finish(mut self, rows: Rows) -> Result<Rows, Problems> {
        for (kind, seen, last) in self.seen {
            if seen > MOST_SHOWN {
                self.problems.push(Problem::new(
                    self.place.clone().at_line(last),
                    format!(
                        "{} more rows with {kind}, the last on this line",
                        seen - MOST_SHOWN
                    ),
                    "",
                    "",
                ));
            }
        }
        self.problems.or(rows)
    }
}

fn row_text(record: &csv::ByteRecord, layout: &Layout) -> String {
    let delimiter = char::from(layout.delimiter).to_string();
    let fields: Vec<_> = record.iter().map(String::from_utf8_lossy).collect();
    shorten(&fields.join(&delimiter))
}

fn delimiter_words(delimiter: u8) -> String {
    match delimiter {
        b',' => "commas".to_owned(),
        b';' => "semicolons".to_owned(),
        b'\t' => "tabs".to_owned(),
        b'|' => "bars".to_owned(),
        other => format!("\"{}\"", char::from(other)),
    }
}

/// `1 field`, `3 fields`.
pub(super) fn count(number: usize, what: &str) -> String {
    format!("{number} {what}{}", if number == 1 { "" } else { "s" })
}
