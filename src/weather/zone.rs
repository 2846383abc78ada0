//! Which clock the stamps of a file follow, and how its local times become instants.

use std::fmt;
use std::str::FromStr;

use chrono::{DateTime, Duration, FixedOffset, LocalResult, NaiveDateTime, Offset, TimeZone, Utc};
use chrono_tz::Tz;

/// Seconds in a day.
const DAY_S: i64 = 86_400;
const HOUR_S: i64 = 3600;
const HOURS_A_DAY: usize = 24;

/// A fixed offset from UTC, or a civil clock that changes twice a year.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Zone {
    /// Always the same offset; UTC is the one of 0.
    Fixed(FixedOffset),
    /// A civil time zone with its doubled and its missing hour.
    Civil(Tz),
}

impl Zone {
    /// How to write one, for messages.
    pub const EXAMPLES: &str = "UTC, an offset such as +01:00, or a zone such as Europe/London";

    /// Universal time.
    pub fn utc() -> Self {
        Self::Fixed(Utc.fix())
    }

    /// Offset from UTC at an instant, seconds east.
    pub fn offset_s(&self, instant: DateTime<Utc>) -> i32 {
        match self {
            Self::Fixed(offset) => offset.local_minus_utc(),
            Self::Civil(zone) => zone
                .offset_from_utc_datetime(&instant.naive_utc())
                .fix()
                .local_minus_utc(),
        }
    }

    /// The local date and time at an instant.
    pub fn local(&self, instant: DateTime<Utc>) -> NaiveDateTime {
        instant.naive_utc() + Duration::seconds(i64::from(self.offset_s(instant)))
    }
}

impl FromStr for Zone {
    type Err = String;

    /// Reads `UTC`, `Z`, `+01:00`, `-05:00`, `UTC-5` or a zone identifier.
    ///
    /// # Errors
    /// What is accepted, when the text is none of them.
    fn from_str(text: &str) -> Result<Self, String> {
        let text = text.trim();
        let upper = text.to_ascii_uppercase();
        if matches!(upper.as_str(), "UTC" | "GMT" | "Z") {
            return Ok(Self::utc());
        }
        let rest = upper
            .strip_prefix("UTC")
            .or_else(|| upper.strip_prefix("GMT"))
            .unwrap_or(&upper);
        if let Some(offset) = offset(rest) {
            return Ok(Self::Fixed(offset));
        }
        text.parse()
            .map(Self::Civil)
            .map_err(|_| format!("allowed: {}", Self::EXAMPLES))
    }
}

/// Reads `+01:00`, `-0500`, `+5`.
fn offset(text: &str) -> Option<FixedOffset> {
    let east = match text.bytes().next()? {
        b'+' => 1,
        b'-' => -1,
        _ => return None,
    };
    let digits = text[1..].replace(':', "");
    if digits.is_empty() || digits.len() > 4 || !digits.bytes().all(|b| b.is_ascii_digit()) {
        return None;
    }
    let number: i32 = digits.parse().ok()?;
    let (hours, minutes) = if digits.len() <= 2 {
        (number, 0)
    } else {
        (number / 100, number % 100)
    };
    if hours > 14 || minutes > 59 {
        return None;
    }
    FixedOffset::east_opt(east * (hours * 3600 + minutes * 60))
}

impl fmt::Display for Zone {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match self {
            Self::Fixed(offset) if offset.local_minus_utc() == 0 => write!(f, "UTC"),
            Self::Fixed(offset) => write!(f, "UTC{offset}"),
            Self::Civil(zone) => write!(f, "{zone}"),
        }
    }
}

/// What a local time means on a zone's clock, as seconds since 1970 in UTC.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(super) enum Instant {
    /// One instant.
    Once(i64),
    /// The hour that the clock shows twice: its first and its second pass.
    Twice(i64, i64),
    /// An hour that the clock skips.
    Never,
}

/// Turns local times into instants, remembering the offset of the day it is in.
#[derive(Debug)]
pub(super) struct LocalClock {
    zone: Zone,
    /// The local day whose offset is the same from its first to its last second, and that offset.
    steady: Option<(i64, i64)>,
}

impl LocalClock {
    pub(super) fn new(zone: Zone) -> Self {
        Self { zone, steady: None }
    }

    /// The instant of a local time given as seconds since 1970-01-01 00:00 on the same clock.
    pub(super) fn instant(&mut self, local_s: i64) -> Instant {
        let zone = match self.zone {
            Zone::Fixed(offset) => {
                return Instant::Once(local_s - i64::from(offset.local_minus_utc()));
            }
            Zone::Civil(zone) => zone,
        };
        let day = local_s.div_euclid(DAY_S);
        if let Some((steady, offset)) = self.steady
            && steady == day
        {
            return Instant::Once(local_s - offset);
        }
        let (first, last) = (
            lookup(zone, day * DAY_S),
            lookup(zone, (day + 1) * DAY_S - 1),
        );
        if let (LocalResult::Single(a), LocalResult::Single(b)) = (first, last)
            && a == b
        {
            self.steady = Some((day, a));
            return Instant::Once(local_s - a);
        }
        match lookup(zone, local_s) {
            LocalResult::Single(offset) => Instant::Once(local_s - offset),
            LocalResult::Ambiguous(a, b) => {
                let (first, second) = (local_s - a, local_s - b);
                Instant::Twice(first.min(second), first.max(second))
            }
            LocalResult::None => Instant::Never,
        }
    }
}

/// The local time, as seconds since 1970 on the same clock, at which each of consecutive hours begins.
///
/// Offsets are looked up once a day; only on the days of a clock change hour by hour.
pub(super) fn local_hours(zone: Zone, start: DateTime<Utc>, hours: usize) -> Vec<i64> {
    let instant = |i: usize| start + Duration::hours(i64::try_from(i).unwrap_or(0));
    let offset = |i: usize| i64::from(zone.offset_s(instant(i)));
    let mut local = Vec::with_capacity(hours);
    let mut before = offset(0);
    let mut begin = start.timestamp();
    for from in (0..hours).step_by(HOURS_A_DAY) {
        let to = (from + HOURS_A_DAY).min(hours);
        let after = offset(to);
        for i in from..to {
            let of_hour = if before == after { before } else { offset(i) };
            local.push(begin + of_hour);
            begin += HOUR_S;
        }
        before = after;
    }
    local
}

/// The offsets, seconds east, that a local time may have.
fn lookup(zone: Tz, local_s: i64) -> LocalResult<i64> {
    match DateTime::from_timestamp(local_s, 0) {
        Some(local) => zone
            .offset_from_local_datetime(&local.naive_utc())
            .map(|offset| i64::from(offset.fix().local_minus_utc())),
        None => LocalResult::None,
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use chrono::NaiveDate;

    fn local(y: i32, m: u32, d: u32, h: u32) -> i64 {
        let date = NaiveDate::from_ymd_opt(y, m, d).unwrap();
        date.and_hms_opt(h, 0, 0).unwrap().and_utc().timestamp()
    }

    #[test]
    fn zones_are_read_in_the_usual_spellings() {
        for (text, words) in [
            ("UTC", "UTC"),
            ("z", "UTC"),
            ("+00:00", "UTC"),
            ("-05:00", "UTC-05:00"),
            ("UTC-5", "UTC-05:00"),
            ("+0530", "UTC+05:30"),
            ("Europe/London", "Europe/London"),
        ] {
            assert_eq!(text.parse::<Zone>().unwrap().to_string(), words, "{text}");
        }
        for text in ["", "+", "+15:00", "-5:99", "Mars/Olympus", "5"] {
            assert!(text.parse::<Zone>().is_err(), "{text}");
        }
    }

    /// Clock changes of 2023 under Directive 2000/84/EC: 26 March and 29 October at 01:00 UTC.
    #[test]
    fn the_civil_clock_skips_one_hour_and_doubles_one() {
        let mut clock = LocalClock::new("Europe/London".parse().unwrap());
        assert_eq!(clock.instant(local(2023, 3, 26, 1)), Instant::Never);
        let doubled = local(2023, 10, 29, 1);
        assert_eq!(
            clock.instant(doubled),
            Instant::Twice(doubled - 3600, doubled)
        );
        let summer = local(2023, 7, 1, 12);
        assert_eq!(clock.instant(summer), Instant::Once(summer - 3600));
        assert_eq!(clock.instant(summer + 3600), Instant::Once(summer));
    }
}
