//! Date and time as files write them, read from bytes.
//!
//! A stamp becomes seconds since 1970-01-01 00:00 on the file's own clock, and its offset from UTC when it carries one.

use chrono::NaiveDate;

use super::iso_stamp::iso;
use super::time_of_day::{Clock, clock, number};

/// Seconds in a day.
const DAY_S: i64 = 86_400;
/// Days from the start of the common era to 1970-01-01.
const EPOCH_DAY: i64 = 719_163;
/// Years that a stamp may have: outside them a number is not a date.
const YEARS: std::ops::RangeInclusive<i32> = 1800..=2200;
/// Two-digit years below this are in the 2000s (POSIX `strptime` `%y`: 00–68 are 2000–2068).
const CENTURY_TURN: i32 = 69;

/// How the date part of a file is written.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum DateForm {
    /// `2024-01-31`, `2024/01/31`: ISO 8601 or its order.
    YearFirst,
    /// `31/01/2024`, `31.1.24`, `31-Jan-2024`.
    DayFirst,
    /// `01/31/2024`.
    MonthFirst,
    /// `20240131`, with hours and minutes following: ISO 8601 basic form.
    Compact,
    /// Seconds since 1970-01-01 00:00 UTC.
    EpochSeconds,
    /// Milliseconds since 1970-01-01 00:00 UTC.
    EpochMilliseconds,
}

impl DateForm {
    /// The form as messages write it.
    pub fn words(self) -> &'static str {
        match self {
            Self::YearFirst => "YYYY-MM-DD HH:MM",
            Self::DayFirst => "DD/MM/YYYY HH:MM",
            Self::MonthFirst => "MM/DD/YYYY HH:MM",
            Self::Compact => "YYYYMMDDHHMM",
            Self::EpochSeconds => "seconds since 1970",
            Self::EpochMilliseconds => "milliseconds since 1970",
        }
    }
}

/// A moment as a file writes it.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(super) struct Stamp {
    /// Seconds since 1970-01-01 00:00 on the stamp's own clock.
    pub local_s: i64,
    /// Offset from UTC, seconds east, when the stamp carries one.
    pub offset_s: Option<i32>,
    /// Whether the hour was written as 24.
    pub twenty_four: bool,
}

/// Reads a date and the time of day in one field.
pub(super) fn stamp(text: &[u8], form: DateForm) -> Option<Stamp> {
    if form == DateForm::YearFirst
        && let Some(seconds) = iso(text)
    {
        return Some(Stamp {
            local_s: seconds,
            offset_s: None,
            twenty_four: false,
        });
    }
    let text = text.trim_ascii();
    match form {
        DateForm::EpochSeconds => epoch(text, 1),
        DateForm::EpochMilliseconds => epoch(text, 1000),
        _ => {
            let (day_s, rest) = date_prefix(text, form)?;
            if rest.is_empty() {
                return Some(at(day_s, Clock::default()));
            }
            let rest = match rest[0] {
                b'T' | b't' | b'_' | b',' | b':' | b' ' => rest[1..].trim_ascii_start(),
                _ if form == DateForm::Compact => rest,
                _ => return None,
            };
            Some(at(day_s, clock(rest)?))
        }
    }
}

/// Reads a date without a time of day.
pub fn date(text: &str, form: DateForm) -> Option<NaiveDate> {
    let (day_s, rest) = date_prefix(text.trim().as_bytes(), form)?;
    let days = i32::try_from(day_s / DAY_S + EPOCH_DAY).ok()?;
    rest.is_empty()
        .then(|| NaiveDate::from_num_days_from_ce_opt(days))
        .flatten()
}

/// Reads a date and a time of day from two fields.
pub(super) fn stamp_of_two(date: &[u8], time: &[u8], form: DateForm) -> Option<Stamp> {
    let (day_s, rest) = date_prefix(date.trim_ascii(), form)?;
    // A date field may carry a midnight of its own: "2024-01-31 00:00:00".
    let empty = rest
        .iter()
        .all(|b| matches!(b, b' ' | b'T' | b'0' | b':' | b'.' | b'Z'));
    if !empty {
        return None;
    }
    Some(at(day_s, clock(time.trim_ascii())?))
}

/// A stamp from numbers that stand in columns of their own; minute 60 of an hour counted from 1 is its end.
pub(super) fn stamp_of_parts(
    year: i64,
    month: i64,
    day: i64,
    hour: i64,
    minute: i64,
) -> Option<Stamp> {
    let year = i32::try_from(year).ok()?;
    let day_s = day_start(
        year,
        u32::try_from(month).ok()?,
        u32::try_from(day).ok()?,
        4,
    )?;
    let minute = if minute == 60 { 0 } else { minute };
    if !(0..=24).contains(&hour) || !(0..60).contains(&minute) || (hour == 24 && minute > 0) {
        return None;
    }
    Some(Stamp {
        local_s: day_s + hour * 3600 + minute * 60,
        offset_s: None,
        twenty_four: hour == 24,
    })
}

fn at(day_s: i64, clock: Clock) -> Stamp {
    Stamp {
        local_s: day_s + clock.seconds,
        offset_s: clock.offset_s,
        twenty_four: clock.twenty_four,
    }
}

fn epoch(text: &[u8], per_second: i64) -> Option<Stamp> {
    let text = text.strip_suffix(b".0").unwrap_or(text);
    let (negative, digits) = match text.strip_prefix(b"-") {
        Some(rest) => (true, rest),
        None => (false, text),
    };
    let (number, rest) = number(digits, 14)?;
    // 9 to 11 digits of seconds, 12 to 14 of milliseconds: a smaller number is a count, not a time.
    let enough = if per_second == 1 { 9..=11 } else { 12..=14 };
    if !rest.is_empty() || !enough.contains(&digits.len()) {
        return None;
    }
    let seconds = number / per_second;
    let local_s = if negative { -seconds } else { seconds };
    let year = 1970 + local_s / (DAY_S * 365);
    YEARS.contains(&i32::try_from(year).ok()?).then_some(Stamp {
        local_s,
        offset_s: Some(0),
        twenty_four: false,
    })
}

/// Reads a date off the front: the local second of its midnight, and what follows.
fn date_prefix(text: &[u8], form: DateForm) -> Option<(i64, &[u8])> {
    if form == DateForm::Compact {
        let digits = text.iter().take_while(|b| b.is_ascii_digit()).count();
        // Eight digits of date, then nothing, a separator, or more digits of time.
        if digits < 8 || !matches!(digits, 8 | 10 | 12 | 14) {
            return None;
        }
        let (year, _) = number(&text[0..4], 4)?;
        let (month, _) = number(&text[4..6], 2)?;
        let (day, _) = number(&text[6..8], 2)?;
        let day_s = day_start(
            i32::try_from(year).ok()?,
            u32::try_from(month).ok()?,
            u32::try_from(day).ok()?,
            4,
        )?;
        return Some((day_s, &text[8..]));
    }
    let (first, first_digits, rest) = number_or_month(text)?;
    let rest = separator(rest)?;
    let (second, second_digits, rest) = number_or_month(rest)?;
    let rest = separator(rest)?;
    let (third, after) = number(rest, 4)?;
    let third_digits = rest.len() - after.len();
    let named = |digits: usize| digits == 0;
    let (year, year_digits, month, month_digits, day, day_digits) = match form {
        DateForm::YearFirst => {
            if first_digits != 4 {
                return None;
            }
            (
                first,
                first_digits,
                second,
                second_digits,
                third,
                third_digits,
            )
        }
        // A named month stands where it stands, whatever the order of the numbers.
        DateForm::DayFirst | DateForm::MonthFirst if named(first_digits) => {
            (third, third_digits, first, 0, second, second_digits)
        }
        DateForm::DayFirst => (
            third,
            third_digits,
            second,
            second_digits,
            first,
            first_digits,
        ),
        DateForm::MonthFirst if named(second_digits) => {
            (third, third_digits, second, 0, first, first_digits)
        }
        DateForm::MonthFirst => (
            third,
            third_digits,
            first,
            first_digits,
            second,
            second_digits,
        ),
        _ => return None,
    };
    if day_digits == 0 || day_digits > 2 || month_digits > 2 || !matches!(year_digits, 2 | 4) {
        return None;
    }
    let day_s = day_start(
        i32::try_from(year).ok()?,
        u32::try_from(month).ok()?,
        u32::try_from(day).ok()?,
        year_digits,
    )?;
    Some((day_s, after))
}

/// The local second of a date's midnight.
fn day_start(year: i32, month: u32, day: u32, year_digits: usize) -> Option<i64> {
    let year = match year_digits {
        2 if year < CENTURY_TURN => year + 2000,
        2 => year + 1900,
        _ => year,
    };
    if !YEARS.contains(&year) {
        return None;
    }
    let date = NaiveDate::from_ymd_opt(year, month, day)?;
    let day = i64::from(chrono::Datelike::num_days_from_ce(&date));
    Some((day - EPOCH_DAY) * DAY_S)
}

fn separator(text: &[u8]) -> Option<&[u8]> {
    match text.first()? {
        b'-' | b'/' | b'.' | b' ' => Some(&text[1..]),
        _ => None,
    }
}

/// Reads a number, or an English month name as its number with no digits.
fn number_or_month(text: &[u8]) -> Option<(i64, usize, &[u8])> {
    if let Some((value, rest)) = number(text, 4) {
        return Some((value, text.len() - rest.len(), rest));
    }
    let letters = text.iter().take_while(|b| b.is_ascii_alphabetic()).count();
    const MONTHS: [&[u8]; 12] = [
        b"january",
        b"february",
        b"march",
        b"april",
        b"may",
        b"june",
        b"july",
        b"august",
        b"september",
        b"october",
        b"november",
        b"december",
    ];
    let name = &text[..letters];
    let at = MONTHS.iter().position(|month| {
        letters >= 3 && letters <= month.len() && month[..letters].eq_ignore_ascii_case(name)
    })?;
    Some((i64::try_from(at).ok()? + 1, 0, &text[letters..]))
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;

    fn seconds(y: i32, m: u32, d: u32, h: u32, min: u32) -> i64 {
        let date = NaiveDate::from_ymd_opt(y, m, d).unwrap();
        date.and_hms_opt(h, min, 0).unwrap().and_utc().timestamp()
    }

    #[test]
    fn one_moment_in_every_form() {
        use DateForm::*;
        let moment = seconds(2024, 1, 31, 7, 30);
        for (text, form) in [
            ("2024-01-31T07:30", YearFirst),
            ("2024/01/31 07:30:00", YearFirst),
            ("2024.1.31 7:30", YearFirst),
            ("2024-01-31 07:30:00.000", YearFirst),
            ("2024-01-31 07:30:00 AM", YearFirst),
            ("31/01/2024 07:30", DayFirst),
            ("31.1.24 7:30", DayFirst),
            ("31-Jan-2024 07:30", DayFirst),
            ("January 31 2024 07:30", DayFirst),
            ("01/31/2024 07:30", MonthFirst),
            ("31 Jan 2024 07:30", MonthFirst),
            ("202401310730", Compact),
            ("20240131T073000", Compact),
            ("20240131:0730", Compact),
            ("20240131 0730", Compact),
            ("1706686200", EpochSeconds),
            ("1706686200.0", EpochSeconds),
            ("1706686200000", EpochMilliseconds),
        ] {
            let read = stamp(text.as_bytes(), form).map(|s| s.local_s);
            assert_eq!(read, Some(moment), "{text}");
        }
        let two = stamp_of_two(b"01/31/2024", b"07:30", MonthFirst);
        assert_eq!(two.map(|s| s.local_s), Some(moment));
        let parts = stamp_of_parts(2024, 1, 31, 7, 30);
        assert_eq!(parts.map(|s| s.local_s), Some(moment));
    }

    #[test]
    fn midnight_at_the_end_of_a_day_is_the_next_day() {
        let read = stamp(b"2023-12-31 24:00", DateForm::YearFirst).unwrap();
        assert_eq!(
            (read.local_s, read.twenty_four),
            (seconds(2024, 1, 1, 0, 0), true)
        );
        assert_eq!(stamp(b"2023-12-31 24:01", DateForm::YearFirst), None);
        assert_eq!(stamp(b"2023-12-31 25:00", DateForm::YearFirst), None);
        let ended = stamp_of_parts(2023, 12, 31, 24, 60).unwrap();
        assert!(ended.twenty_four && ended.local_s == read.local_s);
    }

    #[test]
    fn offsets_are_kept_beside_the_local_time() {
        for (text, offset) in [
            ("2024-01-31T07:30Z", Some(0)),
            ("2024-01-31T07:30:00+01:00", Some(3600)),
            ("2024-01-31 07:30 -0500", Some(-18_000)),
            ("2024-01-31T07:30", None),
        ] {
            let read = stamp(text.as_bytes(), DateForm::YearFirst).unwrap();
            assert_eq!(read.offset_s, offset, "{text}");
            assert_eq!(read.local_s, seconds(2024, 1, 31, 7, 30), "{text}");
        }
    }

    #[test]
    fn what_is_not_a_date_is_not_read_as_one() {
        for text in [
            "",
            "2023-02-29 00:00",
            "2023-13-01 00:00",
            "2023-01-01 12:60",
            "2023-01-01 noon",
            "2023-01-01X12:00",
            "9999-01-01 00:00",
            "2023-01",
            "12.5",
        ] {
            assert_eq!(stamp(text.as_bytes(), DateForm::YearFirst), None, "{text}");
        }
    }

    proptest! {
        #[test]
        fn any_bytes_are_read_or_not_but_never_panic(text in prop::collection::vec(any::<u8>(), 0..40)) {
            for form in [
                DateForm::YearFirst, DateForm::DayFirst, DateForm::MonthFirst,
                DateForm::Compact, DateForm::EpochSeconds, DateForm::EpochMilliseconds,
            ] {
                let _ = stamp(&text, form);
                let _ = stamp_of_two(&text, &text, form);
            }
        }
    }
}
