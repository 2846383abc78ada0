//! Daily means of outdoor temperature by civil date.

use chrono::{Datelike, NaiveDate};

use crate::calendar::CivilHour;

/// One civil day.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Day {
    /// Date.
    pub date: NaiveDate,
    /// Mean outdoor temperature, °C.
    pub mean_c: f64,
}

impl Day {
    /// The season of the cold water: 1 where it is coldest, −1 half a year later.
    ///
    /// Coldest in mid-February, about a month after the air (common practice, no source).
    pub fn water_season(&self) -> f64 {
        const COLDEST_DAY: f64 = 46.0;
        let day = f64::from(self.date.ordinal());
        (std::f64::consts::TAU * (day - COLDEST_DAY) / 365.25).cos()
    }
}

/// Consecutive whole civil days.
#[derive(Debug, Clone, PartialEq)]
pub struct DailyWeather(Vec<Day>);

/// Hours that a civil day needs to be whole: one is missing when the clock is put forward.
const LEAST_HOURS: usize = 23;

impl DailyWeather {
    /// The whole civil days of an hourly column (°C); days cut off at either end are left out.
    pub fn of_hours(civil: &[CivilHour], outdoor_c: &[f64]) -> Self {
        let mut days = Vec::with_capacity(civil.len() / 24 + 1);
        let hours: Vec<_> = civil.iter().zip(outdoor_c).collect();
        for day in hours.chunk_by(|a, b| a.0.date == b.0.date) {
            if day.len() >= LEAST_HOURS {
                let mean_c = day.iter().map(|(_, c)| **c).sum::<f64>() / day.len() as f64;
                days.push(Day {
                    date: day[0].0.date,
                    mean_c,
                });
            }
        }
        Self(days)
    }

    /// Days as given; they must follow one another.
    pub fn of_days(days: Vec<Day>) -> Self {
        Self(days)
    }

    /// Every day.
    pub fn all(&self) -> &[Day] {
        &self.0
    }

    /// The days from a date to before another; nothing when any of them is not held.
    pub fn between(&self, from: NaiveDate, to: NaiveDate) -> Option<&[Day]> {
        let first = self.0.first()?.date;
        let begin = usize::try_from((from - first).num_days()).ok()?;
        let end = usize::try_from((to - first).num_days()).ok()?;
        let days = self.0.get(begin..end)?;
        (days.first()?.date == from).then_some(days)
    }

    /// First day and last day in words.
    pub fn covers(&self) -> String {
        match (self.0.first(), self.0.last()) {
            (Some(first), Some(last)) => format!("{} to {}", first.date, last.date),
            _ => "no whole day".to_owned(),
        }
    }
}
