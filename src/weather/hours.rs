//! Readings onto whole hours: sorted, duplicates dropped, finer ones averaged, coarser ones joined by straight lines.

use std::sync::Arc;

use chrono::DateTime;

use super::clock::{ASIDE, Instants};
use super::order::{Times, minutes, phase};
use super::rows::Rows;
use super::values::Values;
use super::words::count;
use super::zone::Zone;
use crate::problem::{Finding, Place, Problem, Severity};

const HOUR_S: i64 = 3600;
/// Coarsest readings that can still be joined by straight lines.
const COARSEST_STEP_S: i64 = 6 * HOUR_S;
/// An hour needs this share of its finer readings, else it is missing.
const LEAST_SHARE: f64 = 0.5;
/// Readings may cover at least one in this many hours, else the stamps are wrong.
const SPARSEST: i64 = 20;

/// Hours in a row, still with holes. Missing is `NaN`; a line is 0 where no row fell into the hour.
#[derive(Debug, Clone)]
pub(super) struct Hours {
    /// The files, each with its first hour.
    pub files: Vec<(usize, Arc<str>)>,
    pub start_s: i64,
    pub outdoor_c: Vec<f64>,
    pub humidity: Option<Vec<f64>>,
    pub dew_point_c: Option<Vec<f64>>,
    pub global_w_per_m2: Option<Vec<f64>>,
    pub wind_m_per_s: Option<Vec<f64>>,
    pub line: Vec<u32>,
    pub zone: Zone,
    pub zone_known: bool,
    pub stitched: Option<[i32; 12]>,
    /// Whether the file calls itself a typical year.
    pub called_typical: bool,
    /// Hours in which an instant occurs more than once.
    pub duplicate_hours: usize,
    /// Hours made by joining coarser readings.
    pub joined_hours: usize,
}

impl Hours {
    /// The local time of an hour, for messages.
    pub(super) fn local(&self, i: usize) -> String {
        local(
            self.zone,
            self.start_s + i64::try_from(i).unwrap_or(0) * HOUR_S,
        )
    }

    /// The file and line of the hour, or of the last one before it that has any.
    pub(super) fn place(&self, i: usize) -> Place {
        let seen = self.line.get(..=i).unwrap_or(&self.line);
        let (at, line) = seen
            .iter()
            .enumerate()
            .rev()
            .find(|&(_, &line)| line > 0)
            .map_or((0, 1), |(at, &line)| (at, line));
        let file = self.files.iter().rev().find(|(from, _)| *from <= at);
        Place {
            file: file.map(|(_, name)| Arc::clone(name)),
            line: usize::try_from(line).ok(),
            ..Place::default()
        }
    }

    /// The place of the whole series: its first file.
    pub(super) fn whole(&self) -> Place {
        Place {
            file: self.files.first().map(|(_, name)| Arc::clone(name)),
            ..Place::default()
        }
    }

    /// One past the last hour, seconds since 1970.
    pub(super) fn end_s(&self) -> i64 {
        self.start_s + i64::try_from(self.outdoor_c.len()).unwrap_or(0) * HOUR_S
    }
}

/// A local time in words.
pub(super) fn local(zone: Zone, instant_s: i64) -> String {
    match DateTime::from_timestamp(instant_s, 0) {
        Some(instant) => zone.local(instant).format("%Y-%m-%d %H:%M").to_string(),
        None => format!("{instant_s} s"),
    }
}

/// The columns of a file on hours in a row.
struct Placed {
    start_s: i64,
    values: Values,
    line: Vec<u32>,
    duplicate_hours: usize,
}

/// Puts the rows of a file on hours.
///
/// # Errors
/// Readings that are too far apart, or stamps that are spread over far more time than they can cover.
pub(super) fn hours(
    place: &Place,
    rows: Rows,
    values: Values,
    instants: Instants,
    findings: &mut Vec<Finding>,
) -> Result<Hours, Problem> {
    let step_s = instants.step_s;
    if step_s > COARSEST_STEP_S {
        return Err(Problem::new(
            place.clone(),
            format!(
                "the readings are {} apart",
                count(usize::try_from(step_s / HOUR_S).unwrap_or(0), "hour")
            ),
            "hourly or finer readings, or coarser ones up to every 6 hours",
            "use an hourly file",
        ));
    }
    let placed = if is_whole(&instants) {
        Placed {
            start_s: instants.begin_s.first().copied().unwrap_or(0),
            values,
            line: rows.line,
            duplicate_hours: 0,
        }
    } else {
        place_rows(place, &rows, &values, &instants, findings)?
    };
    let Placed {
        start_s,
        values,
        line,
        duplicate_hours,
    } = placed;
    let mut hours = Hours {
        files: place
            .file
            .iter()
            .map(|name| (0, Arc::clone(name)))
            .collect(),
        start_s,
        outdoor_c: values.outdoor_c,
        humidity: values.humidity,
        dew_point_c: values.dew_point_c,
        global_w_per_m2: values.global_w_per_m2,
        wind_m_per_s: values.wind_m_per_s,
        line,
        zone: instants.zone,
        zone_known: instants.zone_known,
        stitched: instants.stitched,
        called_typical: instants.called_typical,
        duplicate_hours,
        joined_hours: 0,
    };
    if step_s < HOUR_S {
        findings.push(
            Finding::new(
                Severity::Note,
                format!("the readings are {} apart", minutes(step_s)),
                "averaged over each hour; an hour with less than half its readings counts as missing",
            )
            .at(place),
        );
    } else if step_s > HOUR_S {
        let reach = usize::try_from((step_s + HOUR_S - 1) / HOUR_S).unwrap_or(1);
        let before = present(&hours.outdoor_c);
        for values in [
            Some(&mut hours.outdoor_c),
            hours.humidity.as_mut(),
            hours.dew_point_c.as_mut(),
            hours.global_w_per_m2.as_mut(),
            hours.wind_m_per_s.as_mut(),
        ]
        .into_iter()
        .flatten()
        {
            join(values, reach);
        }
        hours.joined_hours = present(&hours.outdoor_c) - before;
        findings.push(
            Finding::new(
                Severity::Warning,
                format!("the readings are {reach} hours apart"),
                format!(
                    "{} between them made by straight lines",
                    count(hours.joined_hours, "hour")
                ),
            )
            .at(place),
        );
    }
    Ok(hours)
}

/// Whether the rows are hours in a row already, each on the hour, as in most files.
fn is_whole(instants: &Instants) -> bool {
    let begins = &instants.begin_s;
    let on_the_hour = begins.first().is_some_and(|&first| {
        first != ASIDE && (first + phase(instants.zone, first)).rem_euclid(HOUR_S) == 0
    });
    on_the_hour
        && begins
            .windows(2)
            .all(|w| w[0] != ASIDE && w[1] == w[0] + HOUR_S)
}

/// Sorts the rows, drops what is there twice, and averages what falls into one hour.
fn place_rows(
    place: &Place,
    rows: &Rows,
    values: &Values,
    instants: &Instants,
    findings: &mut Vec<Finding>,
) -> Result<Placed, Problem> {
    let step_s = instants.step_s;
    let times = Times {
        place,
        line: &rows.line,
        begin_s: &instants.begin_s,
        zone: instants.zone,
        zone_known: instants.zone_known,
    };
    let order = times.sorted(findings);
    let (Some(&first), Some(&last)) = (order.first(), order.last()) else {
        return Err(Problem::new(
            place.clone(),
            "no row has a usable time",
            "hourly readings",
            "",
        ));
    };
    let shift = times.shift_to_hours(&order, step_s, findings) + times.phase(first);
    let hour_of = |row: u32| (times.at(row) + shift).div_euclid(HOUR_S);
    let base = hour_of(first);
    let number = hour_of(last) - base + 1;
    if number > SPARSEST * i64::try_from(order.len()).unwrap_or(i64::MAX) + 240 {
        return Err(Problem::new(
            times.place_of(widest(&order, &times)),
            format!(
                "{} are spread from {} to {}",
                count(order.len(), "reading"),
                times.text(first),
                times.text(last)
            ),
            "readings in a row",
            "is the order of day and month right? is a stamp mistyped?",
        ));
    }
    let number = usize::try_from(number).unwrap_or(0);
    let (order, doubled) = times.unique(order, &values.outdoor_c, findings);
    let hour: Vec<u32> = order
        .iter()
        .map(|&row| u32::try_from(hour_of(row) - base).unwrap_or(0))
        .collect();
    let mut duplicates: Vec<i64> = doubled.into_iter().map(hour_of).collect();
    duplicates.dedup();
    let expected = if step_s < HOUR_S {
        HOUR_S as f64 / step_s as f64
    } else {
        1.0
    };
    let mean = |values: &Vec<f64>| averaged(&order, &hour, values, number, expected);
    let mut line = vec![0; number];
    for (&row, &hour) in order.iter().zip(&hour).rev() {
        if let (Some(line), Some(&of_row)) =
            (line.get_mut(hour as usize), rows.line.get(row as usize))
        {
            *line = of_row;
        }
    }
    Ok(Placed {
        start_s: base * HOUR_S - times.phase(first),
        values: Values {
            outdoor_c: mean(&values.outdoor_c),
            humidity: values.humidity.as_ref().map(mean),
            dew_point_c: values.dew_point_c.as_ref().map(mean),
            global_w_per_m2: values.global_w_per_m2.as_ref().map(mean),
            wind_m_per_s: values.wind_m_per_s.as_ref().map(mean),
        },
        line,
        duplicate_hours: duplicates.len(),
    })
}

fn present(values: &[f64]) -> usize {
    values.iter().filter(|value| !value.is_nan()).count()
}

/// The row after the widest hole.
fn widest(order: &[u32], times: &Times) -> u32 {
    let steps = order
        .windows(2)
        .map(|w| (times.at(w[1]) - times.at(w[0]), w[1]));
    steps.max().map_or(0, |(_, row)| row)
}

/// Means by hour; the rows are in order of time.
fn averaged(order: &[u32], hour: &[u32], values: &[f64], number: usize, expected: f64) -> Vec<f64> {
    let mut hours = vec![f64::NAN; number];
    let mut in_hour: (u32, f64, u32) = (0, 0.0, 0);
    let mut put = |(hour, sum, n): (u32, f64, u32)| {
        if n > 0
            && f64::from(n) >= expected * LEAST_SHARE
            && let Some(slot) = hours.get_mut(hour as usize)
        {
            *slot = sum / f64::from(n);
        }
    };
    for (&row, &hour) in order.iter().zip(hour) {
        let value = values.get(row as usize).copied().unwrap_or(f64::NAN);
        if value.is_nan() {
            continue;
        }
        if hour != in_hour.0 {
            put(in_hour);
            in_hour = (hour, 0.0, 0);
        }
        in_hour.1 += value;
        in_hour.2 += 1;
    }
    put(in_hour);
    hours
}

/// Straight lines between readings that are no further apart than `reach` hours.
fn join(values: &mut [f64], reach: usize) {
    let mut before: Option<usize> = None;
    for i in 0..values.len() {
        if values[i].is_nan() {
            continue;
        }
        if let Some(from) = before
            && i - from <= reach
        {
            let (a, b) = (values[from], values[i]);
            for (k, value) in values[from + 1..i].iter_mut().enumerate() {
                *value = a + (b - a) * (k + 1) as f64 / (i - from) as f64;
            }
        }
        before = Some(i);
    }
}
