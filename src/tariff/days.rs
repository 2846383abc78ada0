//! Days of the week, parts of the year, and holidays.

use std::fmt;

use chrono::{Datelike, NaiveDate, Weekday};

use crate::locale::MONTHS;

/// Names of the days, Monday first.
const DAYS: [&str; 7] = [
    "Monday",
    "Tuesday",
    "Wednesday",
    "Thursday",
    "Friday",
    "Saturday",
    "Sunday",
];

/// Days of the week, as seven switches from Monday.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash)]
pub struct Days(u8);

impl Days {
    /// Every day.
    pub const ALL: Self = Self(0b111_1111);
    /// Monday to Friday.
    pub const WEEKDAYS: Self = Self(0b001_1111);
    /// Saturday and Sunday.
    pub const WEEKENDS: Self = Self(0b110_0000);

    /// Reads `"every day"`, `"weekdays"`, `"weekends"`, or day names with commas: `"Mon, Wed, Saturday"`.
    pub fn parse(text: &str) -> Option<Self> {
        match text.trim().to_lowercase().as_str() {
            "every day" | "all" => return Some(Self::ALL),
            "weekdays" | "weekday" => return Some(Self::WEEKDAYS),
            "weekends" | "weekend" => return Some(Self::WEEKENDS),
            _ => {}
        }
        text.split(',')
            .map(|name| named(name.trim(), &DAYS).map(|day| 1 << day))
            .try_fold(0, |all, day: Option<u8>| Some(all | day?))
            .map(Self)
    }

    /// Whether the day is one of them.
    pub fn holds(self, day: Weekday) -> bool {
        self.0 & (1 << day.num_days_from_monday()) != 0
    }

    /// The set with one more day.
    pub fn with(self, day: Weekday) -> Self {
        Self(self.0 | (1 << day.num_days_from_monday()))
    }

    /// No day.
    pub const fn none() -> Self {
        Self(0)
    }
}

impl fmt::Display for Days {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match *self {
            Self::ALL => return f.write_str("every day"),
            Self::WEEKDAYS => return f.write_str("Monday to Friday"),
            Self::WEEKENDS => return f.write_str("Saturday and Sunday"),
            _ => {}
        }
        let names: Vec<_> = DAYS
            .iter()
            .enumerate()
            .filter(|(day, _)| self.0 & (1 << day) != 0)
            .map(|(_, name)| *name)
            .collect();
        f.write_str(&names.join(", "))
    }
}

/// A day of the year without its year.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash, PartialOrd, Ord)]
pub struct YearDay {
    /// Month from 1.
    pub month: u8,
    /// Day from 1; 29 February is one.
    pub day: u8,
}

impl YearDay {
    /// The day of a date.
    pub fn of(date: NaiveDate) -> Self {
        Self {
            month: u8::try_from(date.month()).unwrap_or(1),
            day: u8::try_from(date.day()).unwrap_or(1),
        }
    }

    /// Every day of a leap year, in order.
    pub fn all() -> impl Iterator<Item = Self> {
        (1..=12).flat_map(|month| (1..=last_day(month)).map(move |day| Self { month, day }))
    }

    /// Reads `"1 Nov"` or `"25 December"`.
    pub fn parse(text: &str) -> Option<Self> {
        let (day, month) = text.trim().split_once(' ')?;
        let month = u8::try_from(named(month.trim(), &MONTHS)?).ok()? + 1;
        let day: u8 = day.parse().ok()?;
        (1..=last_day(month))
            .contains(&day)
            .then_some(Self { month, day })
    }
}

impl fmt::Display for YearDay {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        let month = MONTHS.get(usize::from(self.month) - 1).unwrap_or(&"");
        write!(f, "{} {month}", self.day)
    }
}

/// Name of a month from 0.
pub fn month_name(month0: usize) -> &'static str {
    MONTHS.get(month0).copied().unwrap_or("")
}

/// Last day of a month in a leap year.
fn last_day(month: u8) -> u8 {
    match month {
        2 => 29,
        4 | 6 | 9 | 11 => 30,
        _ => 31,
    }
}

/// Index of the name that a text of at least three letters abbreviates.
fn named(text: &str, names: &[&str]) -> Option<usize> {
    let text = text.to_lowercase();
    (text.chars().count() >= 3)
        .then(|| {
            names
                .iter()
                .position(|name| name.to_lowercase().starts_with(&text))
        })
        .flatten()
}

/// Part of the year, both ends included; over New Year when it ends before it starts.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash)]
pub struct Season {
    first: YearDay,
    last: YearDay,
}

impl Season {
    /// The whole year.
    pub const ALL_YEAR: Self = Self {
        first: YearDay { month: 1, day: 1 },
        last: YearDay { month: 12, day: 31 },
    };

    /// Reads `"1 Nov to 31 Mar"` or, for whole months, `"Nov to Mar"`.
    pub fn parse(text: &str) -> Option<Self> {
        let (first, last) = text.split_once(" to ")?;
        let month = |name: &str| {
            let index = named(name.trim(), &MONTHS)?;
            u8::try_from(index + 1).ok()
        };
        let first = YearDay::parse(first).or_else(|| {
            let month = month(first)?;
            Some(YearDay { month, day: 1 })
        })?;
        let last = YearDay::parse(last).or_else(|| {
            let month = month(last)?;
            Some(YearDay {
                month,
                day: last_day(month),
            })
        })?;
        Some(Self { first, last })
    }

    /// Whether a day lies inside.
    pub fn holds(self, day: YearDay) -> bool {
        if self.first <= self.last {
            (self.first..=self.last).contains(&day)
        } else {
            day >= self.first || day <= self.last
        }
    }
}

impl fmt::Display for Season {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        write!(f, "{} to {}", self.first, self.last)
    }
}

/// Days on which prices follow the Sunday's: dates, or days that return every year.
#[derive(Debug, Clone, Default, PartialEq, Eq)]
pub struct Holidays {
    dates: Vec<NaiveDate>,
    every_year: Vec<YearDay>,
}

impl Holidays {
    /// Adds `"2024-04-01"`, one date, or `"25 Dec"`, every year; false when it is neither.
    pub fn add(&mut self, text: &str) -> bool {
        if let Ok(date) = text.trim().parse() {
            self.dates.push(date);
        } else if let Some(day) = YearDay::parse(text) {
            self.every_year.push(day);
        } else {
            return false;
        }
        true
    }

    /// The day of the week that prices go by on a date.
    pub fn weekday(&self, date: NaiveDate) -> Weekday {
        if self.dates.contains(&date) || self.every_year.contains(&YearDay::of(date)) {
            Weekday::Sun
        } else {
            date.weekday()
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn seasons_wrap_over_new_year() {
        let winter = Season::parse("Nov to Mar").unwrap();
        assert_eq!(winter, Season::parse("1 November to 31 March").unwrap());
        let holds = |text| winter.holds(YearDay::parse(text).unwrap());
        assert!(holds("1 Nov") && holds("29 Feb") && holds("31 Mar"));
        assert!(!holds("31 Oct") && !holds("1 Apr"));
        for bad in [
            "Nov",
            "31 Apr to 1 May",
            "summer",
            "Ju to Au",
            "30 Feb to 1 Mar",
        ] {
            assert_eq!(Season::parse(bad), None, "{bad}");
        }
    }

    #[test]
    fn a_holiday_counts_as_a_sunday() {
        let mut holidays = Holidays::default();
        assert!(holidays.add("25 Dec") && holidays.add("2024-04-01") && !holidays.add("Easter"));
        let day = |text: &str| holidays.weekday(text.parse().unwrap());
        assert_eq!(day("2023-12-25"), Weekday::Sun);
        assert_eq!(day("2024-04-01"), Weekday::Sun);
        assert_eq!(day("2025-04-01"), Weekday::Tue);
    }

    #[test]
    fn days_are_read_and_said() {
        assert_eq!(
            Days::parse("Mon, sat").unwrap().to_string(),
            "Monday, Saturday"
        );
        assert_eq!(Days::parse("weekdays"), Some(Days::WEEKDAYS));
        assert_eq!(Days::parse("mo"), None);
        assert_eq!(Days::parse(""), None);
    }
}
