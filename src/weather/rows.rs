//! From text to columns of numbers: one pass over the rows, every row with its line.

use std::sync::Arc;

use super::date_form::{self, Decision, FIRST_ROWS, SAMPLED_ROWS};
use super::layout::Layout;
use super::options::ReadOptions;
use super::pass::{self, How};
use super::row_reader;
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
    pub(super) fn put(&mut self, stamp: Stamp) {
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

    /// Appends the rows of a later piece of the text, which begins after `lines` lines.
    pub(super) fn append(&mut self, mut next: Self, lines: usize) {
        let rows = self.local_s.len();
        let lines = u32::try_from(lines).unwrap_or(u32::MAX);
        self.line
            .extend(next.line.iter().map(|line| line.saturating_add(lines)));
        self.local_s.append(&mut next.local_s);
        if !(self.offset_s.is_empty() && next.offset_s.is_empty()) {
            self.offset_s.resize(rows, None);
            self.offset_s.append(&mut next.offset_s);
            self.offset_s.resize(self.local_s.len(), None);
        }
        self.twenty_four = self.twenty_four.or(next.twenty_four.map(|row| row + rows));
        self.temperature.append(&mut next.temperature);
        for (values, next) in [
            (&mut self.humidity, next.humidity),
            (&mut self.dew_point, next.dew_point),
            (&mut self.radiation, next.radiation),
            (&mut self.wind, next.wind),
        ] {
            if let (Some(values), Some(mut next)) = (values.as_mut(), next) {
                values.append(&mut next);
            }
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
    let mut sample = row_reader::sample(text, layout, FIRST_ROWS);
    let mut decision = date_form::decide(&sample, &layout.columns, options);
    if decision.is_none_or(|decision| decision.form.day_and_month_may_be_swapped()) {
        sample = row_reader::sample(text, layout, SAMPLED_ROWS);
        decision = date_form::decide(&sample, &layout.columns, options);
    }
    let Some(Decision {
        form,
        order_guessed,
    }) = decision
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
    let how = How {
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
        needed: form.columns.last().max(layout.columns.temperature.at) + 1,
        row_bytes: sample
            .iter()
            .map(|row| row.as_slice().len() + row.len())
            .sum::<usize>()
            / sample.len().max(1),
    };
    let (rows, faults) = pass::over(
        text.as_bytes().get(layout.start..).unwrap_or_default(),
        &how,
        &place,
    );
    faults.finish(rows, findings)
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
