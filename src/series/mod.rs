//! One column of hourly values from a CSV file: prices, carbon intensity, household load, own generation.

use chrono::{DateTime, Datelike, TimeZone, Timelike, Utc};

use crate::calendar::CivilHour;

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

/// The instant of a count of hours.
fn instant(hour: i64) -> DateTime<Utc> {
    DateTime::from_timestamp(hour * 3600, 0).unwrap_or_default()
}
