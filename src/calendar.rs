//! The hour axis in UTC and the civil clock over it.
//!
//! An [`HourAxis`] counts whole hours from a UTC start. Everything that depends on the clock on the kitchen wall
//! (tariff bands, set points, days of standing charge) goes through [`CivilHour`], which the axis makes for a time
//! zone, so that both clock changes come out as they do on the wall: one civil day of 23 hours, one of 25.

mod column;

pub use column::HourColumn;

use chrono::{DateTime, Datelike, Duration, NaiveDate, TimeZone, Timelike, Utc, Weekday};
use chrono_tz::Tz;

/// Hours in a common year.
pub const HOURS_PER_YEAR: usize = 8760;
/// Hours in a leap year.
pub const HOURS_PER_LEAP_YEAR: usize = 8784;

/// Consecutive whole hours, counted from a start in UTC; hour `i` runs from `start + i h` to `start + (i+1) h`.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub struct HourAxis {
    /// The beginning of the first hour.
    pub start: DateTime<Utc>,
    /// How many hours there are.
    pub hours: usize,
}

/// The civil clock at the beginning of one hour.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub struct CivilHour {
    /// Civil date.
    pub date: NaiveDate,
    /// Hour on the wall clock, 0 to 23.
    pub hour: u8,
    /// Minutes on the wall clock: not 0 only in zones whose offset is not whole hours.
    pub minute: u8,
    /// Offset from UTC, seconds east.
    pub offset_s: i32,
}

impl CivilHour {
    /// Month from 0 (January) to 11.
    pub fn month0(&self) -> usize {
        self.date.month0() as usize
    }

    /// Civil year.
    pub fn year(&self) -> i32 {
        self.date.year()
    }

    /// Working day or weekend.
    pub fn day_type(&self) -> DayType {
        DayType::of(self.date)
    }
}

/// Kind of day as schedules and tariffs tell them apart.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash)]
pub enum DayType {
    /// Monday to Friday.
    Weekday,
    /// Saturday and Sunday.
    Weekend,
}

impl DayType {
    /// The kind of a date, public holidays not considered.
    pub fn of(date: NaiveDate) -> Self {
        match date.weekday() {
            Weekday::Sat | Weekday::Sun => Self::Weekend,
            _ => Self::Weekday,
        }
    }
}

impl HourAxis {
    /// The axis that covers a whole civil year of a zone, 8760 or 8784 hours.
    ///
    /// Returns nothing when the year or its first instant does not exist.
    pub fn civil_year(year: i32, zone: Tz) -> Option<Self> {
        let first = NaiveDate::from_ymd_opt(year, 1, 1)?.and_hms_opt(0, 0, 0)?;
        let next = NaiveDate::from_ymd_opt(year.checked_add(1)?, 1, 1)?.and_hms_opt(0, 0, 0)?;
        let start = zone
            .from_local_datetime(&first)
            .earliest()?
            .with_timezone(&Utc);
        let end = zone
            .from_local_datetime(&next)
            .earliest()?
            .with_timezone(&Utc);
        Some(Self {
            start,
            hours: usize::try_from((end - start).num_hours()).ok()?,
        })
    }

    /// The beginning of hour `i`, in UTC.
    pub fn at(&self, i: usize) -> DateTime<Utc> {
        self.start + Duration::hours(i64::try_from(i).unwrap_or(i64::MAX / 3_600_000))
    }

    /// The hour that contains an instant, if it is on the axis.
    pub fn index_of(&self, instant: DateTime<Utc>) -> Option<usize> {
        let index = usize::try_from((instant - self.start).num_seconds().div_euclid(3600)).ok()?;
        (index < self.hours).then_some(index)
    }

    /// The civil clock at the beginning of every hour.
    pub fn civil(&self, zone: Tz) -> Vec<CivilHour> {
        (0..self.hours)
            .map(|i| {
                let local = self.at(i).with_timezone(&zone);
                CivilHour {
                    date: local.date_naive(),
                    hour: u8::try_from(local.hour()).unwrap_or(0),
                    minute: u8::try_from(local.minute()).unwrap_or(0),
                    offset_s: chrono::Offset::fix(local.offset()).local_minus_utc(),
                }
            })
            .collect()
    }

    /// Length of the axis in years of 8760 hours, counting a leap year as one.
    pub fn years(&self) -> f64 {
        let days = self.hours as f64 / 24.0;
        // A span of n whole years holds n × 365 to n × 366 days: both count as n.
        let whole = (days / 365.25).round();
        if whole >= 1.0 && (days - whole * 365.25).abs() <= 1.0 {
            whole
        } else {
            days / 365.25
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn london() -> Tz {
        "Europe/London".parse().unwrap()
    }

    #[test]
    fn years_have_their_hours() {
        assert_eq!(
            HourAxis::civil_year(2023, london()).unwrap().hours,
            HOURS_PER_YEAR
        );
        assert_eq!(
            HourAxis::civil_year(2024, london()).unwrap().hours,
            HOURS_PER_LEAP_YEAR
        );
        assert_eq!(HourAxis::civil_year(2024, london()).unwrap().years(), 1.0);
    }

    /// Clock changes of 2023 in the European Union and the United Kingdom: 26 March and 29 October (Directive 2000/84/EC).
    #[test]
    fn clock_changes_make_a_day_of_23_and_one_of_25_hours() {
        let axis = HourAxis::civil_year(2023, london()).unwrap();
        let civil = axis.civil(london());
        let hours_on = |month, day| {
            let date = NaiveDate::from_ymd_opt(2023, month, day).unwrap();
            civil.iter().filter(|c| c.date == date).count()
        };
        assert_eq!(
            (hours_on(3, 26), hours_on(10, 29), hours_on(7, 1)),
            (23, 25, 24)
        );
        let doubled = NaiveDate::from_ymd_opt(2023, 10, 29).unwrap();
        assert_eq!(
            civil
                .iter()
                .filter(|c| c.date == doubled && c.hour == 1)
                .count(),
            2
        );
    }

    #[test]
    fn index_and_instant_are_inverse() {
        let axis = HourAxis::civil_year(2023, london()).unwrap();
        for i in [0, 1, 2000, 8759] {
            assert_eq!(axis.index_of(axis.at(i)), Some(i));
        }
        assert_eq!(axis.index_of(axis.at(8760)), None);
        assert_eq!(axis.index_of(axis.start - Duration::minutes(1)), None);
    }

    #[test]
    fn half_hour_zones_keep_their_minutes() {
        let zone: Tz = "Asia/Kolkata".parse().unwrap();
        let axis = HourAxis {
            start: Utc.with_ymd_and_hms(2023, 1, 1, 0, 0, 0).unwrap(),
            hours: 2,
        };
        assert_eq!(axis.civil(zone)[0].minute, 30);
    }
}
