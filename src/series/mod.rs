//! One column of hourly values from a CSV file: prices, carbon intensity, household load, own generation.

mod layout;
mod read;
mod time;

use std::path::Path;

pub use layout::{Layout, Stamp, WithinHour};
pub use read::{read_csv, read_text};

use chrono::{DateTime, Datelike, TimeZone, Timelike, Utc};

use crate::calendar::CivilHour;
use crate::limits::{LARGEST_DATA, read_at_most};
use crate::problem::{Place, Problem, Problems};

/// Consecutive hourly values from a UTC hour on.
#[derive(Debug, Clone, PartialEq)]
pub struct Series {
    /// Whole hours from the epoch to the first value.
    first_hour: i64,
    values: Vec<f64>,
}

impl Series {
    /// Values from the hour that holds an instant.
    pub fn new(start: DateTime<Utc>, values: Vec<f64>) -> Self {
        Self {
            first_hour: start.timestamp().div_euclid(3600),
            values,
        }
    }

    /// The values.
    pub fn values(&self) -> &[f64] {
        &self.values
    }

    /// Begin of the first hour.
    pub fn start(&self) -> DateTime<Utc> {
        instant(self.first_hour)
    }

    /// End of the last hour.
    pub fn end(&self) -> DateTime<Utc> {
        instant(self.first_hour + i64::try_from(self.values.len()).unwrap_or(0))
    }

    /// From when to when there are values, in words.
    pub fn covers(&self) -> String {
        format!("{} to {}", say(self.start()), say(self.end()))
    }

    /// Multiplies every value.
    pub fn scale(&mut self, factor: f64) {
        for value in &mut self.values {
            *value *= factor;
        }
    }

    /// The value of the hour in which a civil hour begins.
    pub fn at(&self, civil: &CivilHour) -> Option<f64> {
        self.at_hour(utc_hour(civil))
    }

    /// The value of the same month, day and hour in UTC, in the year of the series' middle.
    ///
    /// The 29th of February takes the 28th's where the series has no leap day.
    pub fn at_any_year(&self, civil: &CivilHour) -> Option<f64> {
        let wanted = instant(utc_hour(civil));
        let first = self.start().year();
        let last = self.end().year();
        (first..=last).find_map(|year| {
            let on = |day| {
                Utc.with_ymd_and_hms(year, wanted.month(), day, wanted.hour(), 0, 0)
                    .earliest()
            };
            let leap = (wanted.month(), wanted.day()) == (2, 29);
            let there = on(wanted.day()).or_else(|| on(28).filter(|_| leap))?;
            self.at_hour(there.timestamp().div_euclid(3600))
        })
    }

    fn at_hour(&self, hour: i64) -> Option<f64> {
        let index = usize::try_from(hour - self.first_hour).ok()?;
        self.values.get(index).copied()
    }
}

/// Whole hours from the epoch to the begin of a civil hour.
fn utc_hour(civil: &CivilHour) -> i64 {
    let midnight = civil
        .date
        .and_time(chrono::NaiveTime::MIN)
        .and_utc()
        .timestamp();
    let local = midnight + i64::from(civil.hour) * 3600 + i64::from(civil.minute) * 60;
    (local - i64::from(civil.offset_s)).div_euclid(3600)
}

/// An instant as messages write it.
pub fn say(instant: DateTime<Utc>) -> String {
    instant.format("%Y-%m-%d %H:%M UTC").to_string()
}

/// The instant of a count of hours.
fn instant(hour: i64) -> DateTime<Utc> {
    DateTime::from_timestamp(hour * 3600, 0).unwrap_or_default()
}

/// The text of a file.
fn open(path: &Path) -> Result<String, Problems> {
    let refuse = |found: String, allowed: &str| {
        let place = Place::file(path.display().to_string());
        Problems::from(Problem::new(place, found, allowed, "check the path"))
    };
    let bytes =
        read_at_most(path, LARGEST_DATA).map_err(|beyond| refuse(beyond.found, &beyond.allowed))?;
    let text =
        String::from_utf8(bytes).map_err(|_| refuse("not UTF-8".to_owned(), "text in UTF-8"))?;
    Ok(match text.strip_prefix('\u{feff}') {
        Some(rest) => rest.to_owned(),
        None => text,
    })
}

#[cfg(test)]
mod tests {
    use chrono_tz::Tz;

    use super::*;
    use crate::calendar::HourAxis;

    #[test]
    fn a_civil_hour_finds_its_instant() {
        let zone: Tz = "Europe/Berlin".parse().unwrap();
        let axis = HourAxis::civil_year(2024, zone).unwrap();
        let values: Vec<_> = (0..axis.hours).map(|i| i as f64).collect();
        let series = Series::new(axis.start, values.clone());
        let civil = axis.civil(zone);
        let found: Vec<_> = civil.iter().map(|hour| series.at(hour).unwrap()).collect();
        assert_eq!(found, values);
        let any: Vec<_> = civil
            .iter()
            .map(|hour| series.at_any_year(hour).unwrap())
            .collect();
        assert_eq!(any, values);
    }

    #[test]
    fn one_year_serves_any_other_and_leap_day_takes_the_day_before() {
        let start = "2023-01-01T00:00:00Z".parse().unwrap();
        let series = Series::new(start, (0..8760).map(|i| i as f64).collect());
        let axis = HourAxis {
            start: "2024-01-01T00:00:00Z".parse().unwrap(),
            hours: 8784,
        };
        let civil = axis.civil(Tz::UTC);
        let any: Vec<_> = civil
            .iter()
            .map(|hour| series.at_any_year(hour).unwrap())
            .collect();
        assert_eq!(any[58 * 24], 58.0 * 24.0);
        assert_eq!(any[59 * 24], 58.0 * 24.0);
        assert_eq!(any[60 * 24], 59.0 * 24.0);
        assert_eq!(series.at(&civil[0]), None);
    }
}
