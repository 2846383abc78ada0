//! Whether the readings follow the clock changes of the zone they are declared in.

use std::collections::BTreeMap;

use chrono::{DateTime, Datelike, NaiveDateTime, Timelike, Weekday};

use super::words::count;
use super::zone::Zone;
use crate::problem::{Finding, Place, Severity};

const DAY_S: i64 = 86_400;
const HOUR_S: i64 = 3600;

/// Whether clocks could change at a local time: the small hours of a Sunday in spring or autumn, north or south.
pub(super) fn could_be(local: NaiveDateTime) -> bool {
    matches!(local.month(), 3 | 4 | 9 | 10 | 11)
        && local.weekday() == Weekday::Sun
        && local.hour() <= 3
}

/// What the readings do at the clock changes of a civil zone.
#[derive(Debug, Default)]
pub(super) struct Changes {
    /// By local day: rows in the first and in the second pass of the doubled hour, and the first line.
    doubled: BTreeMap<i64, (usize, usize, u32)>,
    /// By local day: rows in the hour that the clock skips, the first of them, and its line.
    skipped: BTreeMap<i64, (usize, i64, u32)>,
}

impl Changes {
    /// Takes down a row in the doubled hour.
    pub(super) fn doubled(&mut self, local: i64, second: bool, line: u32) {
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

    /// Takes down a row in the skipped hour.
    pub(super) fn skipped(&mut self, local: i64, line: u32) {
        let entry = self
            .skipped
            .entry(local.div_euclid(DAY_S))
            .or_insert((0, local, line));
        entry.0 += 1;
    }

    /// Says what does not fit the zone's clock.
    pub(super) fn report(self, place: &Place, zone: &Zone, findings: &mut Vec<Finding>) {
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
