//! From stamps to instants: which end of the hour they mark, which clock they follow, which year a typical year lies on.

use std::collections::BTreeMap;

use chrono::{DateTime, Datelike, FixedOffset, NaiveDate};

use super::layout::Layout;
use super::options::{ReadOptions, StampMarks};
use super::rows::Rows;
use super::words::count;
use super::zone::{Instant, LocalClock, Zone};
use crate::problem::{Finding, Place, Severity};

const DAY_S: i64 = 86_400;
const HOUR_S: i64 = 3600;
/// The nominal years of a typical year: recent, so that today's clock-change dates hold.
const NOMINAL_YEAR: i32 = 2023;
const NOMINAL_LEAP_YEAR: i32 = 2024;
/// Steps looked at to tell how far apart readings are.
const SAMPLED_STEPS: usize = 2000;

/// Stands for a row that is not used: before any year that a stamp may have.
pub(super) const ASIDE: i64 = i64::MIN;

/// When each row of a file begins.
#[derive(Debug, Clone)]
pub(super) struct Instants {
    /// Seconds since 1970 in UTC at which the reading's span begins; [`ASIDE`] for a row that is set aside.
    pub begin_s: Vec<i64>,
    /// Seconds between readings.
    pub step_s: i64,
    /// The clock that the file's days follow.
    pub zone: Zone,
    /// Whether the zone was known or is the default.
    pub zone_known: bool,
    /// For a typical year, the year each month comes from, January first.
    pub stitched: Option<[i32; 12]>,
    /// Whether the file calls itself a typical year.
    pub called_typical: bool,
}

/// Resolves all stamps.
pub(super) fn instants(
    place: &Place,
    rows: &mut Rows,
    layout: &Layout,
    options: &ReadOptions,
    findings: &mut Vec<Finding>,
) -> Instants {
    let mut local = std::mem::take(&mut rows.local_s);
    let step_s = step(&local);
    let marks = marks(place, rows, &local, step_s, layout, options, findings);
    if marks == StampMarks::Ending {
        let span = step_s.min(HOUR_S);
        local.iter_mut().for_each(|local| *local -= span);
    }
    let stitched = stitched_years(&local);
    if let Some(years) = &stitched {
        place_on_nominal_year(place, rows, &mut local, years, options, findings);
    }
    let (zone, zone_known) = zone(place, rows, layout, options, findings);
    // A nominal year has no offset of its own days: there the zone holds.
    let own_offsets = stitched.is_none();
    let begin_s = begin(place, rows, local, own_offsets, zone, findings);
    Instants {
        begin_s,
        step_s,
        zone,
        zone_known,
        stitched,
        called_typical: layout.typical,
    }
}

/// Local times to instants, in place.
fn begin(
    place: &Place,
    rows: &Rows,
    mut local: Vec<i64>,
    own_offsets: bool,
    zone: Zone,
    findings: &mut Vec<Finding>,
) -> Vec<i64> {
    let mut clock = LocalClock::new(zone);
    let mut changes = Changes::default();
    let mut before = ASIDE;
    for (row, time) in local.iter_mut().enumerate() {
        if *time == ASIDE {
            continue;
        }
        let offset = rows
            .offset_s
            .get(row)
            .copied()
            .flatten()
            .filter(|_| own_offsets);
        let line = || rows.line.get(row).copied().unwrap_or(0);
        *time = match offset {
            Some(offset) => *time - i64::from(offset),
            None => match clock.instant(*time) {
                Instant::Once(instant) => instant,
                Instant::Twice(first, second) => {
                    // The first pass, unless the readings have already been there.
                    let instant = if first > before { first } else { second };
                    changes.doubled(*time, instant == second, line());
                    instant
                }
                Instant::Never => {
                    changes.skipped(*time, line());
                    ASIDE
                }
            },
        };
        before = before.max(*time);
    }
    changes.report(place, &zone, findings);
    local
}

/// The usual distance between readings, an hour when there is none.
fn step(local: &[i64]) -> i64 {
    let sample = &local[..local.len().min(SAMPLED_STEPS)];
    let usual = |times: &[i64]| {
        let mut steps: Vec<i64> = times
            .windows(2)
            .map(|w| w[1] - w[0])
            .filter(|&step| step > 0)
            .collect();
        let middle = steps.len() / 2;
        if steps.is_empty() {
            HOUR_S
        } else {
            *steps.select_nth_unstable(middle).1
        }
    };
    if sample.is_sorted() {
        return usual(sample);
    }
    // Rows out of order tell their distance only once they are in order, and all of them together.
    let mut sorted = local.to_vec();
    sorted.sort_unstable();
    usual(&sorted)
}

fn marks(
    place: &Place,
    rows: &Rows,
    local: &[i64],
    step_s: i64,
    layout: &Layout,
    options: &ReadOptions,
    findings: &mut Vec<Finding>,
) -> StampMarks {
    if let Some(marks) = options.stamp_marks {
        return marks;
    }
    if let Some(ending) = layout.columns.ending {
        return if ending {
            StampMarks::Ending
        } else {
            StampMarks::Beginning
        };
    }
    let mut note = |severity, line: Option<u32>, what: &str, done: &str| {
        let mut place = place.clone();
        place.line = line.and_then(|line| usize::try_from(line).ok());
        findings.push(Finding::new(severity, what, done).at(&place));
    };
    if let Some(i) = rows.twenty_four {
        note(
            Severity::Note,
            rows.line.get(i).copied(),
            "an hour is written 24:00",
            "stamps are read as the end of their hour",
        );
        return StampMarks::Ending;
    }
    let ends_at_midnight = local.last().is_some_and(|last| last.rem_euclid(DAY_S) == 0);
    if ends_at_midnight
        && local
            .first()
            .is_some_and(|first| first.rem_euclid(DAY_S) == step_s)
    {
        note(
            Severity::Note,
            rows.line.first().copied(),
            "the first stamp is one step after midnight and the last is at midnight",
            "stamps are read as the end of their hour; declare it if that is wrong",
        );
        return StampMarks::Ending;
    }
    note(
        Severity::Note,
        None,
        "nothing says which end of the hour a stamp marks",
        "stamps are read as the beginning of their hour; declare it if that is wrong",
    );
    StampMarks::Beginning
}

fn zone(
    place: &Place,
    rows: &Rows,
    layout: &Layout,
    options: &ReadOptions,
    findings: &mut Vec<Finding>,
) -> (Zone, bool) {
    if let Some(zone) = options.zone {
        return (zone, true);
    }
    // The offset of standard time is the least of those that occur.
    let least = rows.offset_s.iter().flatten().copied().min();
    if let Some(offset) = least.and_then(FixedOffset::east_opt) {
        return (Zone::Fixed(offset), true);
    }
    if layout.columns.utc {
        return (Zone::utc(), true);
    }
    findings.push(
        Finding::new(
            Severity::Warning,
            "nothing says which time zone the stamps are in",
            "read as UTC; declare the zone, or cheap hours and the sun are met at the wrong time",
        )
        .at(place),
    );
    (Zone::utc(), false)
}

/// The first local second of a month.
fn month_start(year: i32, month0: usize) -> Option<i64> {
    let month = u32::try_from(month0).ok()? + 1;
    Some(
        NaiveDate::from_ymd_opt(year, month, 1)?
            .and_time(chrono::NaiveTime::MIN)
            .and_utc()
            .timestamp(),
    )
}

/// Months of a file in the order they come, runs of the same month as one.
fn months(local: &[i64]) -> impl Iterator<Item = (i32, usize)> {
    let mut current: Option<(i64, i64)> = None;
    local.iter().filter_map(move |&at| {
        if current.is_some_and(|(from, to)| (from..to).contains(&at)) {
            return None;
        }
        let date = DateTime::from_timestamp(at, 0)?.date_naive();
        let (year, month0) = (date.year(), date.month0() as usize);
        let next = if month0 == 11 {
            month_start(year + 1, 0)
        } else {
            month_start(year, month0 + 1)
        };
        current = month_start(year, month0).zip(next);
        Some((year, month0))
    })
}

/// The source years when twelve calendar months follow each other in order but come from different years.
fn stitched_years(local: &[i64]) -> Option<[i32; 12]> {
    let runs: Vec<_> = months(local).take(13).collect();
    if runs.len() != 12 {
        return None;
    }
    let in_order = runs.windows(2).all(|w| w[1].1 == (w[0].1 + 1) % 12);
    let count = |(year, month0): (i32, usize)| i64::from(year) * 12 + month0 as i64;
    let one_stretch = runs.windows(2).all(|w| count(w[1]) == count(w[0]) + 1);
    if !in_order || one_stretch {
        return None;
    }
    let mut years = [0; 12];
    for (year, month0) in runs {
        years[month0] = year;
    }
    Some(years)
}

fn place_on_nominal_year(
    place: &Place,
    rows: &Rows,
    local: &mut [i64],
    years: &[i32; 12],
    options: &ReadOptions,
    findings: &mut Vec<Finding>,
) {
    let february = month_start(years[1], 1).unwrap_or(0);
    let leap = local.iter().any(|&at| {
        (february + 28 * DAY_S..february + 29 * DAY_S).contains(&at) && is_leap(years[1])
    });
    let nominal = options.nominal_year.unwrap_or(if leap {
        NOMINAL_LEAP_YEAR
    } else {
        NOMINAL_YEAR
    });
    let mut dropped = 0;
    for at in local.iter_mut() {
        let Some(date) = DateTime::from_timestamp(*at, 0).map(|t| t.date_naive()) else {
            continue;
        };
        let month0 = date.month0() as usize;
        let (Some(from), Some(to)) = (
            month_start(date.year(), month0),
            month_start(nominal, month0),
        ) else {
            continue;
        };
        if month0 == 1 && date.day() == 29 && !is_leap(nominal) {
            *at = ASIDE;
            dropped += 1;
        } else {
            *at += to - from;
        }
    }
    let mut sources: Vec<_> = years.to_vec();
    sources.sort_unstable();
    sources.dedup();
    let first = rows
        .line
        .first()
        .and_then(|&line| usize::try_from(line).ok());
    let mut top = place.clone();
    top.line = first;
    findings.push(
        Finding::new(
            Severity::Note,
            format!(
                "the months come from {} ({} to {}): a typical year",
                count(sources.len(), "year"),
                sources.first().unwrap_or(&nominal),
                sources.last().unwrap_or(&nominal),
            ),
            format!("placed on {nominal}"),
        )
        .at(&top),
    );
    if dropped > 0 {
        findings.push(
            Finding::new(
                Severity::Note,
                format!(
                    "29 February has {} but {nominal} has no such day",
                    count(dropped, "row")
                ),
                "set aside",
            )
            .at(place),
        );
    }
}

fn is_leap(year: i32) -> bool {
    NaiveDate::from_ymd_opt(year, 2, 29).is_some()
}

/// What the readings do at the clock changes of a civil zone.
#[derive(Debug, Default)]
struct Changes {
    /// By local day: rows in the first and in the second pass of the doubled hour, and the first line.
    doubled: BTreeMap<i64, (usize, usize, u32)>,
    /// By local day: rows in the hour that the clock skips, the first of them, and its line.
    skipped: BTreeMap<i64, (usize, i64, u32)>,
}

impl Changes {
    fn doubled(&mut self, local: i64, second: bool, line: u32) {
        let entry = self
            .doubled
            .entry(local.div_euclid(DAY_S))
            .or_insert((0, 0, line));
        if second {
            entry.1 += 1;
        } else {
            entry.0 += 1;
        }
    }

    fn skipped(&mut self, local: i64, line: u32) {
        let entry = self
            .skipped
            .entry(local.div_euclid(DAY_S))
            .or_insert((0, local, line));
        entry.0 += 1;
    }

    fn report(self, place: &Place, zone: &Zone, findings: &mut Vec<Finding>) {
        let at = |line: u32| place.clone().at_line(usize::try_from(line).unwrap_or(0));
        let date = |day: i64| {
            DateTime::from_timestamp(day * DAY_S, 0)
                .map(|t| t.date_naive())
                .unwrap_or_default()
        };
        let fixed = "if the file does not change its clock, declare a fixed offset instead";
        for (day, (rows, local, line)) in self.skipped {
            let hour = local.rem_euclid(DAY_S) / HOUR_S;
            findings.push(
                Finding::new(
                    Severity::Warning,
                    format!(
                        "{} at {hour:02}:00 on {}, an hour that the clock of {zone} skips",
                        count(rows, "reading"),
                        date(day)
                    ),
                    format!("set aside; {fixed}"),
                )
                .at(&at(line)),
            );
        }
        for (day, (first, second, line)) in self.doubled {
            if first > 0 && second > 0 {
                continue;
            }
            findings.push(
                Finding::new(
                    Severity::Warning,
                    format!(
                        "the hour that the clock of {zone} shows twice on {} is there once",
                        date(day)
                    ),
                    format!(
                        "taken as its {} pass; {fixed}",
                        if second == 0 { "first" } else { "second" }
                    ),
                )
                .at(&at(line)),
            );
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn hours(from: &str, number: i64) -> Vec<i64> {
        let from: chrono::NaiveDateTime = from.parse().unwrap();
        (0..number)
            .map(|i| from.and_utc().timestamp() + i * HOUR_S)
            .collect()
    }

    #[test]
    fn the_step_is_the_usual_distance() {
        let mut local = hours("2023-01-01T00:00:00", 50);
        assert_eq!(step(&local), HOUR_S);
        local.drain(10..20);
        assert_eq!(step(&local), HOUR_S);
        assert_eq!(step(&[]), HOUR_S);
    }

    #[test]
    fn months_from_different_years_are_a_typical_year_and_one_stretch_is_not() {
        let month = |year: i32, month0: usize| {
            let from = month_start(year, month0).unwrap();
            (0..28 * 24).map(move |h| from + h * HOUR_S)
        };
        let years = [
            1988, 1995, 1983, 1998, 1998, 1990, 2001, 1988, 1992, 2003, 1997, 2000,
        ];
        let stitched: Vec<i64> = years
            .iter()
            .enumerate()
            .flat_map(|(m, &y)| month(y, m))
            .collect();
        assert_eq!(stitched_years(&stitched), Some(years));
        let winter_to_winter: Vec<i64> = (0..12)
            .flat_map(|m| month(2010 + i32::from(m >= 6), (6 + m) % 12))
            .collect();
        assert_eq!(stitched_years(&winter_to_winter), None);
        assert_eq!(stitched_years(&hours("2010-01-01T00:00:00", 8760)), None);
    }
}
