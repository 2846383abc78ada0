//! How a file is laid out: its delimiter, its heading line, where the readings begin, what each column holds.

use std::sync::Arc;

use super::columns::{self, Columns, TimeColumns, Unclear, ValueColumn};
use super::date_form;
use super::options::{Column, ReadOptions};
use super::words::{count, shorten};
use crate::problem::{Finding, Place, Problem, Problems, Severity};

/// How many lines from the top may come before the readings, comments aside.
const MOST_LINES_ABOVE: usize = 60;
/// Lines looked at to tell the delimiter.
const SNIFFED_LINES: usize = 120;
/// Delimiters tried, the ones that are rarest inside a field first.
const DELIMITERS: [u8; 4] = [b'\t', b';', b'|', b','];
/// Lines that begin with this are remarks.
pub(super) const REMARK: u8 = b'#';

/// The layout of one file.
#[derive(Debug, Clone)]
pub(super) struct Layout {
    pub delimiter: u8,
    /// Byte at which the first reading's line begins, and the number of that line.
    pub start: usize,
    pub line: usize,
    pub headings: Vec<String>,
    /// Fields a row has.
    pub fields: usize,
    pub columns: Columns,
    /// Whether a line above the readings calls them a typical or reference year.
    pub typical: bool,
}

#[cfg(test)]
impl Layout {
    /// A layout of two columns, time and temperature.
    pub(super) fn for_test(delimiter: u8) -> Self {
        let headings = vec!["time".to_owned(), "temperature".to_owned()];
        Self {
            delimiter,
            start: 0,
            line: 1,
            fields: 2,
            columns: columns::settle(&headings, &Default::default()).unwrap(),
            headings,
            typical: false,
        }
    }
}

/// One line that is neither blank nor a remark.
#[derive(Debug, Clone, Copy)]
struct Line<'a> {
    number: usize,
    start: usize,
    text: &'a str,
}

/// Tells the layout from the first lines.
///
/// # Errors
/// No lines, no delimiter, no heading that names a time and a temperature.
pub(super) fn layout(
    name: &Arc<str>,
    text: &str,
    options: &ReadOptions,
    findings: &mut Vec<Finding>,
) -> Result<Layout, Problems> {
    let place = Place::file(Arc::clone(name));
    let skipped = options.skip_lines.unwrap_or(0);
    let lines = first_lines(text, skipped);
    let Some(&first) = lines.first() else {
        let found = if skipped > 0 {
            format!("nothing is left after the {skipped} lines to skip")
        } else {
            "the file holds no readings".to_owned()
        };
        return Err(Problem::new(place, found, "a heading line and one reading a line", "").into());
    };
    let Some(delimiter) = options.delimiter.or_else(|| sniff(&lines)) else {
        return Err(Problem::new(
            place.at_line(first.number),
            format!("\"{}\" has no delimiter", shorten(first.text)),
            "fields separated by a comma, a semicolon, a tab or a bar",
            "name the delimiter, or write a time and a temperature on each line",
        )
        .into());
    };
    let rows: Vec<Vec<String>> = lines
        .iter()
        .take(MOST_LINES_ABOVE + 1)
        .map(|line| split(line.text, delimiter))
        .collect();
    let from = |at: usize, headings: Vec<String>, columns: Columns| -> Result<Layout, Problems> {
        let Some(first) = lines.get(at) else {
            let last = lines.last().map_or(0, |line| line.number);
            return Err(Problem::new(
                place.clone().at_line(last),
                "no reading follows the heading",
                "a heading line and one reading a line",
                "",
            )
            .into());
        };
        let fields = if headings.is_empty() {
            rows.get(at).map_or(0, Vec::len)
        } else {
            headings.len()
        };
        Ok(Layout {
            delimiter,
            start: first.start,
            line: first.number,
            headings,
            fields,
            columns,
            typical: calls_itself_typical(text.get(..first.start).unwrap_or_default()),
        })
    };
    let mut layout = if all_numbered(options) {
        numbered(&rows, options, &from)
    } else {
        headed(&place, &lines, &rows, options, findings, &from)
    }?;
    for (what, names) in std::mem::take(&mut layout.columns.ties) {
        findings.push(
            Finding::new(
                Severity::Note,
                format!("several columns could be the {what}: {}", names.join(", ")),
                "the first is taken; name the column to choose another",
            )
            .at(&place),
        );
    }
    Ok(layout)
}

/// Whether the user numbered the time and the temperature, so that no heading is needed.
fn all_numbered(options: &ReadOptions) -> bool {
    let numbered = |column: &Option<Column>| matches!(column, Some(Column::Numbered(_)));
    let choice = &options.columns;
    let time = match &choice.parts {
        Some(parts) => [&parts.year, &parts.month, &parts.day, &parts.hour]
            .iter()
            .all(|column| matches!(column, Column::Numbered(_))),
        None => numbered(&choice.time),
    };
    time && numbered(&choice.temperature)
}

fn numbered(
    rows: &[Vec<String>],
    options: &ReadOptions,
    from: &dyn Fn(usize, Vec<String>, Columns) -> Result<Layout, Problems>,
) -> Result<Layout, Problems> {
    let settled = |headings: &[String]| columns::settle(headings, &options.columns).ok();
    let without = settled(&[]);
    let first = rows.iter().position(|row| {
        without
            .as_ref()
            .is_some_and(|c| c.time.iter().any(|&t| date_form::is_time(row, t)))
    });
    // The line above the first reading may say the units.
    let at = first.unwrap_or(0);
    let above = at
        .checked_sub(1)
        .and_then(|i| rows.get(i))
        .cloned()
        .unwrap_or_default();
    let above = if above.len() == rows.get(at).map_or(0, Vec::len) {
        above
    } else {
        Vec::new()
    };
    match settled(&above).or(without) {
        Some(columns) => from(at, above, columns),
        None => Err(Problem::new(
            Place::field("columns"),
            "a column is named but the file has no headings",
            "column numbers from 1",
            "",
        )
        .into()),
    }
}

fn headed(
    place: &Place,
    lines: &[Line],
    rows: &[Vec<String>],
    options: &ReadOptions,
    findings: &mut Vec<Finding>,
    from: &dyn Fn(usize, Vec<String>, Columns) -> Result<Layout, Problems>,
) -> Result<Layout, Problems> {
    let mut nearest: Option<(usize, Vec<Unclear>)> = None;
    for (at, row) in rows.iter().enumerate() {
        if row.len() < 2 {
            continue;
        }
        match columns::settle(row, &options.columns) {
            Ok(columns) => return from(at + 1, row.clone(), columns),
            Err(unclear) => {
                // The line that leaves least unclear is the likeliest heading; a data line leaves everything so.
                let better = nearest
                    .as_ref()
                    .is_none_or(|(_, best)| unclear.len() < best.len());
                if better {
                    nearest = Some((at, unclear));
                }
            }
        }
    }
    let untouched = options.columns.time.is_none()
        && options.columns.parts.is_none()
        && options.columns.temperature.is_none();
    let first_reading = rows.iter().position(|row| {
        row.len() >= 2 && (0..row.len()).any(|i| date_form::is_time(row, TimeColumns::One(i)))
    });
    // Two fields, a time and a number, need no heading to be understood.
    if untouched
        && let Some(at) = first_reading
        && let [time, reading] = rows[at].as_slice()
        && date_form::is_time(&rows[at], TimeColumns::One(0))
        && !time.is_empty()
        && reading.replace(',', ".").parse::<f64>().is_ok()
        && nearest
            .as_ref()
            .is_none_or(|(i, unclear)| *i == at || unclear.len() > 1)
    {
        findings.push(
            Finding::new(
                Severity::Note,
                "the columns have no headings",
                "the first is taken as the time, the second as the temperature",
            )
            .at(&place.clone().at_line(lines[at].number)),
        );
        return from(
            at,
            Vec::new(),
            Columns {
                time: vec![TimeColumns::One(0)],
                temperature: ValueColumn {
                    at: 1,
                    unit: String::new(),
                },
                humidity: None,
                dew_point: None,
                radiation: None,
                wind: None,
                date_format: String::new(),
                utc: false,
                ending: None,
                ties: Vec::new(),
            },
        );
    }
    if untouched && first_reading == Some(0) {
        return Err(Problem::new(
            place.clone().at_line(lines[0].number),
            format!(
                "the file has no headings for its {}",
                count(rows[0].len(), "column")
            ),
            "a heading line above the readings",
            "say by their numbers which columns hold the time and the temperature",
        )
        .into());
    }
    let (at, unclear) = nearest.unwrap_or((0, vec![Unclear::None("time")]));
    let number = lines.get(at).map_or(1, |line| line.number);
    let headings = rows.get(at).map(|row| row.join(", ")).unwrap_or_default();
    let mut problems = Problems::new();
    for unclear in unclear {
        problems.push(explain(place.clone().at_line(number), &unclear, &headings));
    }
    Err(problems)
}

fn explain(place: Place, unclear: &Unclear, headings: &str) -> Problem {
    let headings = shorten(headings);
    match unclear {
        Unclear::None(what) => Problem::new(
            place,
            format!("no column is headed as the {what}; the headings are: {headings}"),
            format!("a heading that means the {what}"),
            format!("say which column holds the {what}, by its heading or its number"),
        ),
        Unclear::Several(what, names) => Problem::new(
            place,
            format!("several columns could be the {what}: {}", names.join(", ")),
            "one column",
            format!("say which column holds the {what}, by its heading or its number"),
        ),
        Unclear::NotThere(what, column) => Problem::new(
            place,
            format!("the {what} should be in {column}; the headings are: {headings}"),
            "a heading of this file, or a column number",
            "",
        ),
    }
}

/// The first lines that are neither blank nor remarks.
fn first_lines(text: &str, skipped: usize) -> Vec<Line<'_>> {
    let mut start = 0;
    let mut lines = Vec::new();
    for (i, with_end) in text.split_inclusive('\n').enumerate() {
        let line = Line {
            number: i + 1,
            start,
            text: with_end.trim_end_matches(['\n', '\r']),
        };
        start += with_end.len();
        let remark = line.text.as_bytes().first() == Some(&REMARK);
        if i >= skipped && !remark && !line.text.trim().is_empty() {
            lines.push(line);
            if lines.len() == SNIFFED_LINES {
                break;
            }
        }
    }
    lines
}

/// The delimiter that splits the most lines into the same number of fields.
fn sniff(lines: &[Line]) -> Option<u8> {
    let score = |delimiter: u8| {
        let counts: Vec<usize> = lines
            .iter()
            .map(|line| fields(line.text, delimiter))
            .collect();
        let most = counts
            .iter()
            .copied()
            .filter(|&n| n > 1)
            .max_by_key(|&n| (counts.iter().filter(|&&m| m == n).count(), n));
        most.map_or(0, |n| counts.iter().filter(|&&m| m == n).count())
    };
    // On equal scores the first of the list wins: `max_by_key` keeps the last, hence the reversal.
    let best = DELIMITERS
        .iter()
        .rev()
        .max_by_key(|&&delimiter| score(delimiter))?;
    (score(*best) > 0).then_some(*best)
}

/// Whether the text above the readings says that the year is a typical one.
fn calls_itself_typical(above: &str) -> bool {
    let above = above.to_lowercase();
    [
        "typical year",
        "typical meteorological year",
        "reference year",
    ]
    .iter()
    .any(|name| above.contains(name))
}

/// How many fields a delimiter would make of a line, quotes respected.
fn fields(line: &str, delimiter: u8) -> usize {
    let mut quoted = false;
    let delimiters = line.bytes().filter(|&byte| {
        quoted ^= byte == b'"';
        byte == delimiter && !quoted
    });
    delimiters.count() + 1
}

/// Splits one line, quotes respected.
fn split(line: &str, delimiter: u8) -> Vec<String> {
    if !line.contains('"') {
        return line
            .split(char::from(delimiter))
            .map(|field| field.trim().to_owned())
            .collect();
    }
    let mut reader = csv::ReaderBuilder::new()
        .delimiter(delimiter)
        .has_headers(false)
        .flexible(true)
        .from_reader(line.as_bytes());
    let mut record = csv::StringRecord::new();
    match reader.read_record(&mut record) {
        Ok(true) => record.iter().map(|field| field.trim().to_owned()).collect(),
        _ => Vec::new(),
    }
}
