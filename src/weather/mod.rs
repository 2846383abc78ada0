//! Hourly weather: read, check, repair, describe.
//!
//! A file goes through the rooms of this folder in one direction: `bytes` makes text of it, `layout` finds the
//! columns, `rows` reads the numbers, `values` puts them in physical units, `clock` turns stamps into instants,
//! `hours` makes hours of them, `check` and `repair` see to faults and gaps. What comes out is a complete
//! [`Weather`]; every oddity met on the way is a finding with its line.

mod adjust;
mod bytes;
mod check;
mod clock;
mod clock_change;
mod columns;
mod date_form;
mod degree_days;
mod describe;
mod distribution;
mod faults;
mod heading;
mod hours;
mod humidity;
mod iso_stamp;
mod layout;
mod nominal_year;
mod number;
mod options;
mod order;
mod pass;
mod read;
mod repair;
mod row_reader;
mod rows;
mod temperature;
mod time_of_day;
mod time_stamp;
mod typical_year;
mod values;
mod whole_years;
mod words;
mod write;
mod zone;

use std::ops::Range;

use chrono::{DateTime, Datelike, Duration, Months, NaiveDate, Utc};

pub use adjust::{Adjusted, Adjustment, STANDARD_LAPSE_K_PER_KM};
pub use date_form::order_in_heading;
pub use degree_days::{Rule, degree_days};
pub use describe::{
    DegreeDays, Description, SPELL_DAYS, Spell, YearFigures, coldest_days, describe,
    unfit_for_peak_load,
};
pub use options::{
    Column, ColumnChoice, DateOrder, Delimiter, Encoding, MAX_EXPANDED_BYTES, PartColumns,
    ReadOptions, RepairPolicy, StampMarks, TemperatureUnit,
};
pub use read::{read, read_all, read_all_bytes, read_bytes};
pub use time_stamp::{DateForm, date};
pub use typical_year::{TypicalYear, typical_year};
pub use write::to_csv;
pub use zone::Zone;

use crate::calendar::HourAxis;
use crate::problem::Finding;

/// What kind of weather a series is.
#[derive(Debug, Clone, PartialEq, Eq)]
pub enum Kind {
    /// Years that happened, or a year taken as if it had.
    Measured,
    /// A typical year put together from months of different years: made for energy, not for peak load.
    Typical {
        /// The year that each month comes from, January first, where the file tells.
        source_years: Option<[i32; 12]>,
    },
}

/// A complete hourly series in UTC.
///
/// Every column has [`HourAxis::hours`] values and none is missing: gaps were filled and flagged, or the column is absent.
#[derive(Debug, Clone, PartialEq)]
pub struct Weather {
    /// The file as the user named it.
    pub file: String,
    /// The hours, in UTC.
    pub axis: HourAxis,
    /// The clock of the file, by which its days and years are counted.
    pub zone: Zone,
    /// Measured or typical.
    pub kind: Kind,
    /// Outdoor dry-bulb temperature, °C.
    pub outdoor_c: Vec<f64>,
    /// Relative humidity as a share of one, 0 to 1, over liquid water at all temperatures (WMO-No. 8).
    pub relative_humidity: Option<Vec<f64>>,
    /// Global radiation on the horizontal, hourly mean, W/m².
    pub global_w_per_m2: Option<Vec<f64>>,
    /// Wind speed, m/s.
    pub wind_m_per_s: Option<Vec<f64>>,
    /// Hours whose outdoor temperature was filled in.
    pub repaired: Vec<bool>,
    /// Hours that had no usable temperature.
    pub missing_hours: usize,
    /// Hours in which an instant occurred more than once.
    pub duplicate_hours: usize,
    /// Hours made by joining readings more than an hour apart.
    pub joined_hours: usize,
    /// What was odd, the gravest first.
    pub findings: Vec<Finding>,
}

impl Weather {
    /// How many hours were filled in.
    pub fn repaired_hours(&self) -> usize {
        self.repaired.iter().filter(|&&flag| flag).count()
    }

    /// The years of the series, each with its hours.
    ///
    /// A year runs from one anniversary of the first hour to the next on the file's own clock, so that a file from July
    /// to June holds one year and not two halves. It is named after the civil year of the day after it begins. The last
    /// one may be shorter.
    pub fn years(&self) -> Vec<(i32, Range<usize>)> {
        let first = self.zone.local(self.axis.start);
        let index_of_anniversary = |years: u32| {
            let local = first.checked_add_months(Months::new(12 * years))?;
            // The anniversary has the offset of the first hour, to within the hour that a clock change moves it.
            let offset = i64::from(self.zone.offset_s(self.axis.start));
            let instant = local.and_utc() - Duration::seconds(offset);
            usize::try_from((instant - self.axis.start).num_hours()).ok()
        };
        let mut years = Vec::new();
        let mut from = 0;
        for n in 1.. {
            let to = index_of_anniversary(n)
                .unwrap_or(usize::MAX)
                .min(self.axis.hours);
            if to <= from {
                break;
            }
            let name = self
                .zone
                .local(self.axis.at(from) + Duration::days(1))
                .year();
            years.push((name, from..to));
            from = to;
        }
        years
    }

    /// The days of the series on the file's own clock, each with its hours; the first and last may be short.
    pub fn days(&self) -> Vec<(NaiveDate, Range<usize>)> {
        const DAY_S: i64 = 86_400;
        let local_s = |i: usize| {
            let instant = self.axis.at(i);
            instant.timestamp() + i64::from(self.zone.offset_s(instant))
        };
        let mut days = Vec::with_capacity(self.axis.hours / 24 + 2);
        let mut from = 0;
        while from < self.axis.hours {
            let begin = local_s(from);
            let day = begin.div_euclid(DAY_S);
            // Where no clock changes the next day begins after the hours that are left; else it is looked for.
            let left = ((day + 1) * DAY_S - begin + 3599) / 3600;
            let mut to = from + usize::try_from(left).unwrap_or(24);
            while to > from + 1 && local_s(to - 1).div_euclid(DAY_S) != day {
                to -= 1;
            }
            while local_s(to).div_euclid(DAY_S) == day {
                to += 1;
            }
            let date = DateTime::from_timestamp(day * DAY_S, 0).map(|local| local.date_naive());
            days.push((date.unwrap_or_default(), from..to.min(self.axis.hours)));
            from = to;
        }
        days
    }

    /// The beginning of an hour on the file's own clock, as text.
    pub fn local_text(&self, i: usize) -> String {
        let instant: DateTime<Utc> = self.axis.at(i);
        self.zone
            .local(instant)
            .format("%Y-%m-%d %H:%M")
            .to_string()
    }
}
