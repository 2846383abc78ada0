//! Readings onto whole hours: sorted, duplicates dropped, finer ones averaged, coarser ones joined by straight lines.

use chrono::DateTime;

use super::clock::Instants;
use super::rows::{Rows, count};
use super::values::Values;
use super::zone::Zone;
use crate::problem::{Finding, Place, Problem, Severity};

const HOUR_S: i64 = 3600;
/// Coarsest readings that can still be joined by straight lines.
const COARSEST_STEP_S: i64 = 6 * HOUR_S;
/// An hour needs this share of its finer readings, else it is missing.
const LEAST_SHARE: f64 = 0.5;
/// Readings may cover at least one in this many hours, else the stamps are wrong.
const SPARSEST: i64 = 20;
/// Two readings of one instant further apart than this contradict each other, K.
const SAME_K: f64 = 0.05;

/// Hours in a row, still with holes. Missing is `NaN`; a line is 0 where no row fell into the hour.
#[derive(Debug, Clone)]
pub(super) struct Hours {
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

    /// The line of the hour, or of the last one before it that has any.
    pub(super) fn line_before(&self, i: usize) -> usize {
        let seen = self.line.get(..=i).unwrap_or(&self.line);
        let line = seen
            .iter()
            .rev()
            .find(|&&line| line > 0)
            .copied()
            .unwrap_or(1);
        usize::try_from(line).unwrap_or(1)
    }
}

/// A local time in words.
pub(super) fn local(zone: Zone, instant_s: i64) -> String {
    match DateTime::from_timestamp(instant_s, 0) {
        Some(instant) => zone.local(instant).format("%Y-%m-%d %H:%M").to_string(),
        None => format!("{instant_s} s"),
    }
}

/// Puts the rows of a file on hours.
///
/// # Errors
/// Readings that are too far apart, or stamps that are spread over far more time than they can cover.
pub(super) fn hours(
    place: &Place,
    rows: &Rows,
    mut values: Values,
    instants: Instants,
    findings: &mut Vec<Finding>,
) -> Result<Hours, Problem> {
    let Instants {
        begin_s,
        step_s,
        zone,
        zone_known,
        stitched,
    } = instants;
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
    let order = sorted(place, rows, &begin_s, zone, findings);
    let at = |row: u32| begin_s.get(row as usize).copied().flatten().unwrap_or(0);
    let (Some(first), Some(last)) = (
        order.first().map(|&row| at(row)),
        order.last().map(|&row| at(row)),
    ) else {
        return Err(Problem::new(
            place.clone(),
            "no row has a usable time",
            "hourly readings",
            "",
        ));
    };
    let shift = off_the_hour(place, &order, at, zone, step_s, findings);
    let phase = DateTime::from_timestamp(first, 0)
        .map_or(0, |t| i64::from(zone.offset_s(t)).rem_euclid(HOUR_S));
    let hour_of = |begin: i64| (begin + shift + phase).div_euclid(HOUR_S);
    let number = hour_of(last) - hour_of(first) + 1;
    if number > SPARSEST * i64::try_from(order.len()).unwrap_or(i64::MAX) + 240 {
        return Err(Problem::new(
            place.clone(),
            format!(
                "{} are spread from {} to {}",
                count(order.len(), "reading"),
                local(zone, first),
                local(zone, last)
            ),
            "readings in a row",
            "is the order of day and month right? is a stamp mistyped?",
        ));
    }
    let number = usize::try_from(number).unwrap_or(0);
    let base = hour_of(first);
    let index = |row: u32| usize::try_from(hour_of(at(row)) - base).unwrap_or(0);
    let (order, duplicate_hours) = unique(
        place,
        rows,
        order,
        at,
        &index,
        &values.outdoor_c,
        zone,
        findings,
    );

    let expected = if step_s < HOUR_S {
        HOUR_S as f64 / step_s as f64
    } else {
        1.0
    };
    let fill = |values: &mut Vec<f64>| averaged(&order, &index, values, number, expected);
    let mut hours = Hours {
        start_s: base * HOUR_S - phase,
        outdoor_c: fill(&mut values.outdoor_c),
        humidity: values.humidity.as_mut().map(fill),
        dew_point_c: values.dew_point_c.as_mut().map(fill),
        global_w_per_m2: values.global_w_per_m2.as_mut().map(fill),
        wind_m_per_s: values.wind_m_per_s.as_mut().map(fill),
        line: vec![0; number],
        zone,
        zone_known,
        stitched,
        duplicate_hours,
        joined_hours: 0,
    };
    for &row in order.iter().rev() {
        if let (Some(line), Some(&of_row)) =
            (hours.line.get_mut(index(row)), rows.line.get(row as usize))
        {
            *line = of_row;
        }
    }
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

fn present(values: &[f64]) -> usize {
    values.iter().filter(|value| !value.is_nan()).count()
}

fn minutes(step_s: i64) -> String {
    if step_s % 60 == 0 {
        count(usize::try_from(step_s / 60).unwrap_or(0), "minute")
    } else {
        count(usize::try_from(step_s).unwrap_or(0), "second")
    }
}

/// The rows in order of time; disorder is reported in runs.
fn sorted(
    place: &Place,
    rows: &Rows,
    begin_s: &[Option<i64>],
    zone: Zone,
    findings: &mut Vec<Finding>,
) -> Vec<u32> {
    let key = |row: u32| {
        begin_s
            .get(row as usize)
            .copied()
            .flatten()
            .unwrap_or(i64::MIN)
    };
    let mut order: Vec<u32> = (0..u32::try_from(begin_s.len()).unwrap_or(u32::MAX))
        .filter(|&row| begin_s.get(row as usize).is_some_and(Option::is_some))
        .collect();
    let back: Vec<u32> = order
        .windows(2)
        .filter(|w| key(w[1]) < key(w[0]))
        .map(|w| w[1])
        .collect();
    let Some(&first) = back.first() else {
        return order;
    };
    let line = |row: u32| {
        rows.line
            .get(row as usize)
            .and_then(|&line| usize::try_from(line).ok())
            .unwrap_or(0)
    };
    findings.push(
        Finding::new(
            Severity::Warning,
            format!(
                "the times step back {}, first to {}",
                if back.len() == 1 {
                    "once".to_owned()
                } else {
                    format!("{} times", back.len())
                },
                local(zone, key(first))
            ),
            "the rows are sorted by time",
        )
        .at(&place.clone().at_line(line(first))),
    );
    for &row in back.iter().skip(1) {
        findings.push(
            Finding::new(
                Severity::Note,
                format!("the time steps back to {}", local(zone, key(row))),
                "sorted by time",
            )
            .at(&place.clone().at_line(line(row))),
        );
    }
    order.sort_by_key(|&row| key(row));
    order
}

/// Seconds by which stamps that lie off the hour are moved so that each falls into its own hour.
fn off_the_hour(
    place: &Place,
    order: &[u32],
    at: impl Fn(u32) -> i64,
    zone: Zone,
    step_s: i64,
    findings: &mut Vec<Finding>,
) -> i64 {
    if step_s != HOUR_S {
        return 0;
    }
    let Some(&first) = order.first() else {
        return 0;
    };
    let phase = DateTime::from_timestamp(at(first), 0)
        .map_or(0, |t| i64::from(zone.offset_s(t)).rem_euclid(HOUR_S));
    let past = |row: u32| (at(row) + phase).rem_euclid(HOUR_S);
    let usual = past(first);
    let alike = order.iter().filter(|&&row| past(row) == usual).count();
    if usual == 0 || alike * 2 < order.len() {
        return 0;
    }
    let late = usual > HOUR_S / 2;
    findings.push(
        Finding::new(
            Severity::Note,
            format!("the stamps lie {} past the hour", minutes(usual)),
            format!(
                "each reading is taken for the hour that {}",
                if late { "follows" } else { "holds it" }
            ),
        )
        .at(place),
    );
    if late { HOUR_S - usual } else { 0 }
}

/// Keeps one row of each instant, the first that has a temperature.
#[expect(
    clippy::too_many_arguments,
    reason = "one pass over one table; a struct would only rename the arguments"
)]
fn unique(
    place: &Place,
    rows: &Rows,
    order: Vec<u32>,
    at: impl Fn(u32) -> i64,
    index: &impl Fn(u32) -> usize,
    outdoor_c: &[f64],
    zone: Zone,
    findings: &mut Vec<Finding>,
) -> (Vec<u32>, usize) {
    if order.windows(2).all(|w| at(w[0]) != at(w[1])) {
        return (order, 0);
    }
    let reading = |row: u32| outdoor_c.get(row as usize).copied().unwrap_or(f64::NAN);
    let line = |row: u32| {
        rows.line
            .get(row as usize)
            .and_then(|&line| usize::try_from(line).ok())
            .unwrap_or(0)
    };
    let mut kept = Vec::with_capacity(order.len());
    let mut doubled: Vec<usize> = Vec::new();
    for group in order.chunk_by(|&a, &b| at(a) == at(b)) {
        let keep = group
            .iter()
            .copied()
            .find(|&row| !reading(row).is_nan())
            .unwrap_or(group[0]);
        kept.push(keep);
        if group.len() == 1 {
            continue;
        }
        doubled.push(index(keep));
        let clash = group
            .iter()
            .find(|&&row| (reading(row) - reading(keep)).abs() > SAME_K);
        let again = group
            .iter()
            .copied()
            .find(|&row| row != keep)
            .unwrap_or(keep);
        let (severity, what) = match clash {
            Some(&row) => (
                Severity::Warning,
                format!(
                    "{} is there again with {:.1} °C instead of {:.1} °C",
                    local(zone, at(keep)),
                    reading(row),
                    reading(keep)
                ),
            ),
            None => (
                Severity::Note,
                format!("{} is there again", local(zone, at(keep))),
            ),
        };
        findings.push(
            Finding::new(severity, what, format!("line {} is kept", line(keep)))
                .at(&place.clone().at_line(line(clash.copied().unwrap_or(again)))),
        );
    }
    doubled.dedup();
    (kept, doubled.len())
}

/// Means by hour; the rows are in order of time.
fn averaged(
    order: &[u32],
    index: &impl Fn(u32) -> usize,
    values: &mut [f64],
    number: usize,
    expected: f64,
) -> Vec<f64> {
    let mut hours = vec![f64::NAN; number];
    let mut in_hour: (usize, f64, usize) = (0, 0.0, 0);
    let mut put = |(hour, sum, n): (usize, f64, usize)| {
        if n > 0
            && n as f64 >= expected * LEAST_SHARE
            && let Some(slot) = hours.get_mut(hour)
        {
            *slot = sum / n as f64;
        }
    };
    for &row in order {
        let value = values.get(row as usize).copied().unwrap_or(f64::NAN);
        if value.is_nan() {
            continue;
        }
        let hour = index(row);
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
            for k in from + 1..i {
                values[k] = a + (b - a) * (k - from) as f64 / (i - from) as f64;
            }
        }
        before = Some(i);
    }
}
