//! From stamps to instants: which end of the hour they mark, which clock they follow, which year a typical year lies on.

use chrono::FixedOffset;

use super::clock_change::Changes;
use super::layout::Layout;
use super::nominal_year::{place_on_nominal_year, stitched_years};
use super::options::{ReadOptions, StampMarks};
use super::rows::Rows;
use super::zone::{Instant, LocalClock, Zone};
use crate::problem::{Finding, Place, Severity};

const DAY_S: i64 = 86_400;
const HOUR_S: i64 = 3600;
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
}
