//! The running pattern: which temperature is asked for at which hour of which day.

use chrono::{Datelike, NaiveDate};

use crate::calendar::{CivilHour, DayType};
use crate::units::as_set;

/// Set point outside the heating season, against frost, °C. Common practice, no source.
pub const FROST_C: f64 = 7.0;

/// A stretch of days of every year, both ends included; it may run over the new year.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub struct DaySpan {
    /// First day: month and day of the month, each from 1.
    pub from: (u32, u32),
    /// Last day.
    pub to: (u32, u32),
}

impl DaySpan {
    /// Whether a date lies in it.
    pub fn holds(&self, date: NaiveDate) -> bool {
        let day = (date.month(), date.day());
        if self.from <= self.to {
            (self.from..=self.to).contains(&day)
        } else {
            day >= self.from || day <= self.to
        }
    }
}

/// How the rooms are warmed up again before a heated spell.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum WarmUp {
    /// As late as the heating can still make it, without backup.
    InTime,
    /// Spread over this many hours before the spell, 1 to 12.
    Ahead(u8),
    /// Not before the spell begins, then with all the heat there is, as a thermostat switched by a clock does.
    AtTheTime,
}

/// Set points by hour and day type, set-back, holidays and season.
#[derive(Debug, Clone, PartialEq)]
pub struct Pattern {
    /// Set point of each clock hour of a working day, °C.
    pub weekday_c: [f64; 24],
    /// Set point of each clock hour of a Saturday or Sunday, °C.
    pub weekend_c: [f64; 24],
    /// Heating season; the whole year where there is none. Outside it the rooms are only kept from freezing.
    pub season: Option<DaySpan>,
    /// Days away.
    pub holidays: Vec<DaySpan>,
    /// Set point on days away, °C.
    pub holiday_c: f64,
    /// How the rooms are warmed up again.
    pub warm_up: WarmUp,
}

impl Pattern {
    /// One set point (°C) day and night.
    pub fn continuous(set_point_c: f64) -> Self {
        Self {
            weekday_c: [set_point_c; 24],
            weekend_c: [set_point_c; 24],
            season: None,
            holidays: Vec::new(),
            holiday_c: set_point_c,
            warm_up: WarmUp::InTime,
        }
    }

    /// The highest set point of the week, °C.
    pub fn comfort_c(&self) -> f64 {
        self.weekday_c
            .iter()
            .chain(&self.weekend_c)
            .copied()
            .fold(f64::NEG_INFINITY, f64::max)
    }

    /// The lowest set point of the week, °C.
    pub fn set_back_c(&self) -> f64 {
        self.weekday_c
            .iter()
            .chain(&self.weekend_c)
            .copied()
            .fold(f64::INFINITY, f64::min)
    }

    /// Hours a week at the highest set point.
    pub fn heated_hours_a_week(&self) -> usize {
        let comfort_c = self.comfort_c();
        let at = |day: &[f64; 24]| {
            day.iter()
                .filter(|&&set_point| set_point >= comfort_c)
                .count()
        };
        5 * at(&self.weekday_c) + 2 * at(&self.weekend_c)
    }

    /// Whether the same is asked for in every hour of the year.
    pub fn is_continuous(&self) -> bool {
        let first_c = self.weekday_c[0];
        let same = |set_point: &f64| *set_point == first_c;
        self.weekday_c.iter().all(same)
            && self.weekend_c.iter().all(same)
            && self.season.is_none()
            && self.holidays.is_empty()
    }

    /// Set point of an hour, °C.
    pub fn set_point_c(&self, hour: &CivilHour) -> f64 {
        if self.holidays.iter().any(|span| span.holds(hour.date)) {
            return self.holiday_c;
        }
        if self.season.is_some_and(|season| !season.holds(hour.date)) {
            return FROST_C;
        }
        let day = match hour.day_type() {
            DayType::Weekday => &self.weekday_c,
            DayType::Weekend => &self.weekend_c,
        };
        day[usize::from(hour.hour) % 24]
    }

    /// The pattern in a few words.
    pub fn words(&self) -> String {
        let comfort_c = self.comfort_c();
        let mut words = if self.is_continuous() {
            format!("{} °C all day", as_set(comfort_c))
        } else {
            let hours = |day: &[f64; 24]| day.iter().filter(|&&c| c >= comfort_c).count();
            let (weekday, weekend) = (hours(&self.weekday_c), hours(&self.weekend_c));
            let spells = if weekday == weekend {
                format!("{weekday} h a day")
            } else {
                format!("{weekday} h on working days, {weekend} h at weekends")
            };
            format!(
                "{} °C for {spells}, else {} °C",
                as_set(comfort_c),
                as_set(self.set_back_c())
            )
        };
        if self.season.is_some() {
            words.push_str(", in the heating season");
        }
        words
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::calendar::HourAxis;

    #[test]
    fn spans_run_over_the_new_year() {
        let christmas = DaySpan {
            from: (12, 24),
            to: (1, 2),
        };
        let date = |month, day| NaiveDate::from_ymd_opt(2023, month, day).unwrap();
        assert!(christmas.holds(date(12, 24)) && christmas.holds(date(1, 2)));
        assert!(!christmas.holds(date(1, 3)) && !christmas.holds(date(12, 23)));
        let season = DaySpan {
            from: (10, 1),
            to: (5, 15),
        };
        assert!(
            season.holds(date(1, 10)) && !season.holds(date(7, 1)) && season.holds(date(5, 15))
        );
    }

    /// 2023 has 260 working days and 105 days of weekend (calendar).
    #[test]
    fn a_year_follows_clock_day_type_holidays_and_season() {
        let zone: chrono_tz::Tz = "Europe/London".parse().unwrap();
        let civil = HourAxis::civil_year(2023, zone).unwrap().civil(zone);
        let mut pattern = Pattern::continuous(16.0);
        for hour in [7, 8, 16, 17, 18, 19, 20, 21, 22] {
            pattern.weekday_c[hour] = 20.0;
        }
        for hour in 7..23 {
            pattern.weekend_c[hour] = 20.0;
        }
        let count = |pattern: &Pattern, c: f64| {
            civil
                .iter()
                .filter(|hour| pattern.set_point_c(hour) == c)
                .count()
        };
        assert_eq!(count(&pattern, 20.0), 260 * 9 + 105 * 16);
        assert_eq!(pattern.heated_hours_a_week(), 45 + 32);
        assert!(!pattern.is_continuous() && Pattern::continuous(20.0).is_continuous());
        pattern.season = Some(DaySpan {
            from: (10, 1),
            to: (4, 30),
        });
        // May to September: 153 days, none of them with a clock change.
        assert_eq!(count(&pattern, FROST_C), 153 * 24);
        pattern.holidays = vec![DaySpan {
            from: (12, 24),
            to: (1, 2),
        }];
        pattern.holiday_c = 12.0;
        assert_eq!(count(&pattern, 12.0), 10 * 24);
        assert_eq!(
            pattern.words(),
            "20 °C for 9 h on working days, 16 h at weekends, else 16 °C, in the heating season"
        );
    }
}
