//! From text to columns of numbers: one pass over the rows, every row with its line.

use std::sync::Arc;

use super::date_form::{self, Decision, SAMPLED_ROWS, TimeForm};
use super::faults::Faults;
use super::layout::Layout;
use super::number::{self, Reading};
use super::options::ReadOptions;
use super::row_reader::{self, EachRow, Fields};
use super::time_stamp::Stamp;
use super::words::shorten;
use crate::problem::{Finding, Place, Problem, Problems, Severity};

/// The readings of one file, in its own units and on its own clock. Missing is `NaN`.
#[derive(Debug, Clone, Default)]
pub(super) struct Rows {
    pub line: Vec<u32>,
    /// Seconds since 1970-01-01 00:00 on the stamp's own clock.
    pub local_s: Vec<i64>,
    /// Offsets from UTC, seconds east, by row; empty when no stamp carries one.
    pub offset_s: Vec<Option<i32>>,
    /// The first row whose hour is written as 24.
    pub twenty_four: Option<usize>,
    pub temperature: Vec<f64>,
    pub humidity: Option<Vec<f64>>,
    pub dew_point: Option<Vec<f64>>,
    pub radiation: Option<Vec<f64>>,
    pub wind: Option<Vec<f64>>,
}

impl Rows {
    /// Takes down the time of the next row.
    fn put(&mut self, stamp: Stamp) {
        let row = self.local_s.len();
        self.local_s.push(stamp.local_s);
        if stamp.offset_s.is_some() || !self.offset_s.is_empty() {
            self.offset_s.resize(row, None);
            self.offset_s.push(stamp.offset_s);
        }
        if stamp.twenty_four && self.twenty_four.is_none() {
            self.twenty_four = Some(row);
        }
    }
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
    let sample = row_reader::sample(text, layout, SAMPLED_ROWS);
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
    let columns = &layout.columns;
    // Room for what rows of this length make, with a little over; a wrong guess costs a copy.
    let row_bytes = sample
        .iter()
        .map(|row| row.as_slice().len() + row.len())
        .sum::<usize>()
        / sample.len().max(1);
    let expected = text.len() / row_bytes.max(4) * 17 / 16 + 16;
    let column = |wanted: bool| wanted.then(|| Vec::with_capacity(expected));
    let mut pass = Pass {
        layout,
        form,
        decimal_comma: options
            .decimal_comma
            .unwrap_or_else(|| has_decimal_comma(&sample, layout)),
        missing: options
            .missing
            .iter()
            .map(|m| m.trim().as_bytes().to_vec())
            .collect(),
        needed: form.columns.last().max(columns.temperature.at) + 1,
        rows: Rows {
            line: Vec::with_capacity(expected),
            local_s: Vec::with_capacity(expected),
            offset_s: Vec::new(),
            twenty_four: None,
            temperature: Vec::with_capacity(expected),
            humidity: column(columns.humidity.is_some()),
            dew_point: column(columns.dew_point.is_some()),
            radiation: column(columns.radiation.is_some()),
            wind: column(columns.wind.is_some()),
        },
        faults: Faults::new(place),
    };
    row_reader::for_each_row(text, layout, &mut pass);
    pass.faults.finish(pass.rows)
}

/// The pass over the rows.
struct Pass<'a> {
    layout: &'a Layout,
    form: TimeForm,
    decimal_comma: bool,
    missing: Vec<Vec<u8>>,
    /// Fields a row must have.
    needed: usize,
    rows: Rows,
    faults: Faults,
}

impl EachRow for Pass<'_> {
    fn row(&mut self, line: usize, row: &impl Fields) {
        let (layout, columns) = (self.layout, &self.layout.columns);
        let number = row.number();
        if number < self.needed {
            self.faults.short(line, row, self.needed, layout);
            return;
        }
        let beyond = || (layout.fields..number).filter_map(|at| row.field(at));
        if number > layout.fields && beyond().any(|field| !field.trim_ascii().is_empty()) {
            self.faults.long(line, row, layout, self.decimal_comma);
            return;
        }
        let Some(stamp) = self.form.stamp(row) else {
            self.faults.time(line, &self.form, row, layout);
            return;
        };
        let read = |at: usize| match row.field(at) {
            Some(field) => number::read(field, self.decimal_comma, &self.missing),
            None => Reading::Missing,
        };
        let temperature = match read(columns.temperature.at) {
            Reading::Number(number) => number,
            Reading::Missing => f64::NAN,
            Reading::Other => {
                let field = row.field(columns.temperature.at).unwrap_or_default();
                self.faults
                    .temperature(line, &String::from_utf8_lossy(field), layout);
                return;
            }
        };
        let rows = &mut self.rows;
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
        rows.line.push(u32::try_from(line).unwrap_or(u32::MAX));
        rows.put(stamp);
        rows.temperature.push(temperature);
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
