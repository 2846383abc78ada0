//! Rows that cannot be used: the first of each kind are written out, the rest counted.

use super::date_form::TimeForm;
use super::layout::Layout;
use super::row_reader::Fields;
use super::rows::Rows;
use super::words::{count, shorten};
use crate::problem::{Finding, Place, Problem, Problems, Severity};

/// Problems of one kind that are written out; the rest are counted.
const MOST_SHOWN: usize = 5;

/// Faulty rows: the first of each kind are written out, the rest counted.
pub(super) struct Faults {
    place: Place,
    problems: Problems,
    /// Kind, how many were seen, and the line of the last.
    seen: [(&'static str, usize, usize); 4],
    /// Lines on which the heading stands again, as in files that were put together.
    repeated_headings: Vec<usize>,
}

impl Faults {
    pub(super) fn new(place: Place) -> Self {
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
            repeated_headings: Vec::new(),
        }
    }

    /// Whether there are none.
    pub(super) fn is_empty(&self) -> bool {
        self.problems.is_empty() && self.repeated_headings.is_empty()
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

    pub(super) fn short(&mut self, line: usize, row: &impl Fields, needed: usize, layout: &Layout) {
        if !self.count(0, line) {
            return;
        }
        let text = row_text(row, layout);
        let other = [b';', b'\t', b'|', b',']
            .into_iter()
            .find(|&d| d != layout.delimiter && text.contains(char::from(d)));
        let remedy = if fields(row).any(|field| field.contains(&b'\n') || field.len() > 1000) {
            "is a quotation mark left open?".to_owned()
        } else if let Some(other) = other {
            format!(
                "this row has {}, the lines before have {}: make them alike",
                delimiter_words(other),
                delimiter_words(layout.delimiter)
            )
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
                row_text(row, layout),
                count(row.number(), "field")
            ),
            format!("at least {needed}, up to the last column that is needed"),
            remedy,
        ));
    }

    pub(super) fn long(
        &mut self,
        line: usize,
        row: &impl Fields,
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
                row_text(row, layout),
                count(row.number(), "field")
            ),
            format!("{}, as on the first line", count(layout.fields, "field")),
            remedy,
        ));
    }

    pub(super) fn time(
        &mut self,
        line: usize,
        form: &TimeForm,
        row: &impl Fields,
        layout: &Layout,
    ) {
        let repeated = fields(row)
            .zip(&layout.headings)
            .all(|(field, heading)| String::from_utf8_lossy(field).trim() == heading.as_str());
        if repeated && !layout.headings.is_empty() {
            self.repeated_headings.push(line);
            return;
        }
        if !self.count(2, line) {
            return;
        }
        let words = form.words();
        self.problems.push(Problem::new(
            self.at(
                line,
                layout,
                layout.columns.time.first().map(|columns| columns.last()),
            ),
            format!(
                "\"{}\" is not a time in the form {words}",
                shorten(&form.text(row))
            ),
            format!("times in the form {words}, as on the lines before"),
            "correct the line or delete it: a missing hour is repaired",
        ));
    }

    pub(super) fn temperature(&mut self, line: usize, text: &str, layout: &Layout) {
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

    /// The rows when nothing is wrong with any, else the problems.
    pub(super) fn finish(
        mut self,
        rows: Rows,
        findings: &mut Vec<Finding>,
    ) -> Result<Rows, Problems> {
        for line in self.repeated_headings {
            findings.push(
                Finding::new(
                    Severity::Note,
                    "the heading is repeated here",
                    "passed over",
                )
                .at(&self.place.clone().at_line(line)),
            );
        }
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

/// The fields of a row.
fn fields(row: &impl Fields) -> impl Iterator<Item = &[u8]> {
    (0..row.number()).filter_map(|at| row.field(at))
}

fn row_text(row: &impl Fields, layout: &Layout) -> String {
    let delimiter = char::from(layout.delimiter).to_string();
    let fields: Vec<_> = fields(row).map(String::from_utf8_lossy).collect();
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
