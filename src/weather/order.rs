//! The rows of a file in order of time, each instant once.

use chrono::DateTime;

use super::clock::ASIDE;
use super::clock_change;
use super::hours::local;
use super::words::count;
use super::zone::Zone;
use crate::problem::{Finding, Place, Severity};

const HOUR_S: i64 = 3600;
/// Two readings of one instant further apart than this contradict each other, K.
const SAME_K: f64 = 0.05;

/// When the rows of a file begin, and where they stand in it.
#[derive(Debug, Clone, Copy)]
pub(super) struct Times<'a> {
    pub place: &'a Place,
    pub line: &'a [u32],
    pub begin_s: &'a [i64],
    pub zone: Zone,
    pub zone_known: bool,
}

impl Times<'_> {
    /// The instant of a row.
    pub(super) fn at(&self, row: u32) -> i64 {
        self.begin_s.get(row as usize).copied().unwrap_or(ASIDE)
    }

    /// The local time of a row, for messages.
    pub(super) fn text(&self, row: u32) -> String {
        local(self.zone, self.at(row))
    }

    fn line(&self, row: u32) -> usize {
        self.line
            .get(row as usize)
            .and_then(|&line| usize::try_from(line).ok())
            .unwrap_or(0)
    }

    /// The file and line of a row.
    pub(super) fn place_of(&self, row: u32) -> Place {
        self.place.clone().at_line(self.line(row))
    }

    /// Seconds that the hours of the file lie off those of UTC: none where its stamps are whole hours in UTC, else what the
    /// zone's own hours are off.
    pub(super) fn phase(&self, row: u32) -> i64 {
        phase(self.zone, self.at(row))
    }

    /// The rows that are used, in order of time; each step back is reported.
    pub(super) fn sorted(&self, findings: &mut Vec<Finding>) -> Vec<u32> {
        let all = 0..u32::try_from(self.begin_s.len()).unwrap_or(u32::MAX);
        let mut order: Vec<u32> = all.filter(|&row| self.at(row) != ASIDE).collect();
        let back: Vec<u32> = order
            .windows(2)
            .filter(|w| self.at(w[1]) < self.at(w[0]))
            .map(|w| w[1])
            .collect();
        let Some((&first, others)) = back.split_first() else {
            return order;
        };
        let times = if others.is_empty() {
            "once".to_owned()
        } else {
            format!("{} times", back.len())
        };
        findings.push(
            Finding::new(
                Severity::Warning,
                format!("the times step back {times}, first to {}", self.text(first)),
                "the rows are sorted by time",
            )
            .at(&self.place_of(first)),
        );
        for &row in others {
            let what = format!("the time steps back to {}", self.text(row));
            findings
                .push(Finding::new(Severity::Note, what, "sorted by time").at(&self.place_of(row)));
        }
        order.sort_by_key(|&row| self.at(row));
        order
    }

    /// Seconds by which hourly stamps that lie off the hour are moved so that each falls into its own hour.
    pub(super) fn shift_to_hours(
        &self,
        order: &[u32],
        step_s: i64,
        findings: &mut Vec<Finding>,
    ) -> i64 {
        let Some(&first) = order.first() else {
            return 0;
        };
        let phase = self.phase(first);
        let past = |row: u32| (self.at(row) + phase).rem_euclid(HOUR_S);
        let usual = past(first);
        if step_s != HOUR_S || usual == 0 {
            return 0;
        }
        let alike = order.iter().filter(|&&row| past(row) == usual).count();
        if alike * 2 < order.len() {
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
            .at(self.place),
        );
        if late { HOUR_S - usual } else { 0 }
    }

    /// Keeps one row of each instant, the first that has a temperature; also the rows kept where there were several.
    pub(super) fn unique(
        &self,
        order: Vec<u32>,
        outdoor_c: &[f64],
        findings: &mut Vec<Finding>,
    ) -> (Vec<u32>, Vec<u32>) {
        if order.windows(2).all(|w| self.at(w[0]) != self.at(w[1])) {
            return (order, Vec::new());
        }
        let reading = |row: u32| outdoor_c.get(row as usize).copied().unwrap_or(f64::NAN);
        let mut kept = Vec::with_capacity(order.len());
        let mut doubled = Vec::new();
        for group in order.chunk_by(|&a, &b| self.at(a) == self.at(b)) {
            let keep = group
                .iter()
                .copied()
                .find(|&row| !reading(row).is_nan())
                .unwrap_or(group[0]);
            kept.push(keep);
            if group.len() == 1 {
                continue;
            }
            doubled.push(keep);
            let when = self.text(keep);
            let clash = group
                .iter()
                .copied()
                .find(|&row| (reading(row) - reading(keep)).abs() > SAME_K);
            let (severity, what) = match clash {
                Some(row) => (
                    Severity::Warning,
                    format!(
                        "{when} is there again with {:.1} °C instead of {:.1} °C",
                        reading(row),
                        reading(keep)
                    ),
                ),
                None => (Severity::Note, format!("{when} is there again")),
            };
            let again = clash
                .or_else(|| group.iter().copied().find(|&row| row != keep))
                .unwrap_or(keep);
            let mut done = format!("line {} is kept", self.line(keep));
            let local =
                DateTime::from_timestamp(self.at(keep), 0).map(|instant| self.zone.local(instant));
            if !self.zone_known && local.is_some_and(clock_change::could_be) {
                done += "; do clocks go back here? declare the zone";
            }
            findings.push(Finding::new(severity, what, done).at(&self.place_of(again)));
        }
        (kept, doubled)
    }
}

/// Seconds that hours beginning at an instant lie off those of UTC, see [`Times::phase`].
pub(super) fn phase(zone: Zone, instant_s: i64) -> i64 {
    let off = DateTime::from_timestamp(instant_s, 0)
        .map_or(0, |instant| i64::from(zone.offset_s(instant)));
    if instant_s.rem_euclid(HOUR_S) == 0 {
        0
    } else {
        off.rem_euclid(HOUR_S)
    }
}

/// A span of time in words.
pub(super) fn minutes(span_s: i64) -> String {
    let (number, unit) = if span_s % 60 == 0 {
        (span_s / 60, "minute")
    } else {
        (span_s, "second")
    };
    count(usize::try_from(number).unwrap_or(0), unit)
}
