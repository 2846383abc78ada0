//! The instant of a time as a file writes it.

use chrono::{DateTime, LocalResult, NaiveDate, NaiveDateTime, TimeZone, Utc};
use chrono_tz::Tz;

use crate::problem::{Place, Problem};

/// What is wrong with one field.
pub(super) struct Wrong {
    pub(super) found: String,
    pub(super) allowed: &'static str,
    pub(super) remedy: &'static str,
}

impl Wrong {
    /// The problem at its place.
    pub(super) fn at(self, place: Place) -> Problem {
        Problem::new(place, self.found, self.allowed, self.remedy)
    }
}

/// The instant of a time; a clock time that occurs twice is the second one when the first has gone by.
pub(super) fn instant(
    text: &str,
    zone: Tz,
    before: Option<DateTime<Utc>>,
) -> Result<DateTime<Utc>, Wrong> {
    let wrong = |found| Wrong {
        found,
        allowed: "a time such as 2024-01-31T15:00Z or 2024-01-31 15:00",
        remedy: "write year-month-day and hour:minute",
    };
    for form in [
        "%Y-%m-%dT%H:%M:%S%#z",
        "%Y-%m-%dT%H:%M%#z",
        "%Y-%m-%d %H:%M:%S%#z",
        "%Y-%m-%d %H:%M%#z",
    ] {
        if let Ok(instant) = DateTime::parse_from_str(text, form) {
            return Ok(instant.with_timezone(&Utc));
        }
    }
    let clock = [
        "%Y-%m-%dT%H:%M:%S",
        "%Y-%m-%dT%H:%M",
        "%Y-%m-%d %H:%M:%S",
        "%Y-%m-%d %H:%M",
    ]
    .iter()
    .find_map(|form| NaiveDateTime::parse_from_str(text, form).ok())
    .or_else(|| end_of_day(text))
    .ok_or_else(|| wrong(format!("\"{text}\" is not a time")))?;
    match zone.from_local_datetime(&clock) {
        LocalResult::Single(instant) => Ok(instant.with_timezone(&Utc)),
        LocalResult::Ambiguous(first, second) => {
            let first = first.with_timezone(&Utc);
            if before.is_none_or(|before| before < first) {
                Ok(first)
            } else {
                Ok(second.with_timezone(&Utc))
            }
        }
        LocalResult::None => Err(Wrong {
            found: format!("{text} does not exist in {zone}: the clock skips it"),
            allowed: "times that the clock shows",
            remedy: "set the time zone the file is really in, such as time_zone = \"UTC\"",
        }),
    }
}

/// `2024-01-31 24:00`, the midnight that ends the day.
fn end_of_day(text: &str) -> Option<NaiveDateTime> {
    let date = ["T24:00:00", " 24:00:00", "T24:00", " 24:00"]
        .iter()
        .find_map(|end| text.strip_suffix(end))?;
    let date: NaiveDate = date.parse().ok()?;
    date.succ_opt()?.and_hms_opt(0, 0, 0)
}
