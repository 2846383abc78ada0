//! Tariffs: what a household is charged, as price columns before the run and as rules that `bill` follows after it.
//!
//! One vocabulary serves every fuel. What stands in a tariff adds up: the price of a kilowatt-hour is the rate of
//! the band of that minute, plus the rate of the step that the month has reached, plus the hourly price, each where
//! given. A flat tariff is one band that always holds.

mod clock;
mod coverage;
mod days;
mod file;
mod findings;
mod meter;
mod metering;
mod rate;
mod sort;

pub use clock::{MINUTES, When, Window, clock, parse_clock};
pub use coverage::{ClockDay, Flaw, clock_days, flaws};
pub use days::{Days, Holidays, Season, YearDay, month_name};
pub use file::TariffFields;
pub use meter::{Bucket, Meter, Reading, Segment};
pub use metering::{Flows, Metering};
pub use rate::{Band, Covers, Demand, Rate, Span, Standing, StandingSpan, Step, Steps, Tax};

use chrono::NaiveDate;
use chrono_tz::Tz;

use crate::calendar::{CivilHour, HourAxis};
use crate::problem::{Finding, Place, Problems};
use crate::series::Series;
use crate::units::{Currency, Fuel};

/// What one meter's energy costs.
#[derive(Debug, Clone, PartialEq)]
pub struct Tariff {
    /// What people call it.
    pub label: String,
    /// The file it came from.
    pub place: Place,
    /// What it sells.
    pub fuel: Fuel,
    /// What it is paid in.
    pub currency: Currency,
    /// The clock its bands follow; the home's where it says nothing.
    pub time_zone: Option<Tz>,
    /// Which electricity passes the meter.
    pub metering: Metering,
    /// How long one bill is.
    pub billing: Span,
    /// Days that count as Sundays.
    pub holidays: Holidays,
    /// Price lists in the order they come into force; the first also holds before its date.
    pub prices: Vec<Prices>,
    /// What was odd in the file.
    pub findings: Vec<Finding>,
}

/// One price list, in force from a date until the next.
#[derive(Debug, Clone, PartialEq)]
pub struct Prices {
    /// First day in force.
    pub valid_from: Option<NaiveDate>,
    /// Prices by the clock; empty when only steps or hourly prices are charged.
    pub bands: Vec<Band>,
    /// Prices by the amount used in a month, quarter or year.
    pub steps: Option<Steps>,
    /// Prices hour by hour.
    pub hourly: Option<Hourly>,
    /// Charge for being connected.
    pub standing: Option<Standing>,
    /// Charge for the highest hour of a month.
    pub demand: Option<Demand>,
    /// Tax on top, or within.
    pub tax: Tax,
    /// What is paid for each kilowatt-hour fed back.
    pub export: Option<Rate>,
}

/// A price for every hour.
#[derive(Debug, Clone, PartialEq)]
pub struct Hourly {
    /// File of the prices, relative to the tariff's folder.
    pub file: String,
    /// Currency units per gross kilowatt-hour, as the file gives them.
    pub per_kwh: Series,
    /// What they are multiplied by; a meter keeps them as given, so that it outlasts a change of price level.
    pub times: f64,
    /// Use the prices of the same day and hour (UTC) for any year.
    pub every_year: bool,
}

impl Tariff {
    /// The civil clock that this tariff's bands follow.
    pub fn civil(&self, axis: &HourAxis, home: Tz) -> Vec<CivilHour> {
        axis.civil(self.time_zone.unwrap_or(home))
    }

    /// The price list in force on a date, by its place in `prices`.
    pub fn in_force(&self, date: NaiveDate) -> usize {
        self.prices
            .iter()
            .rposition(|prices| prices.valid_from.is_some_and(|from| from <= date))
            .unwrap_or(0)
    }

    /// Price signal of every hour, currency units per gross kilowatt-hour with tax.
    ///
    /// Steps depend on what is used: the signal takes the step that the last kilowatt-hour of a period reaches when
    /// `expected_kwh_per_year` is spread evenly, or the first step when nothing is expected. [`Meter::signal_cost`]
    /// tells afterwards how far that was from the bill. A demand charge is not in the signal.
    ///
    /// # Errors
    /// When an hourly price is missing for an hour.
    pub fn price_column(
        &self,
        civil: &[CivilHour],
        expected_kwh_per_year: Option<f64>,
    ) -> Result<Vec<f64>, Problems> {
        Ok(self.meter(civil)?.price_column(self, expected_kwh_per_year))
    }

    /// The meter that counts under this tariff over the given hours.
    ///
    /// # Errors
    /// When an hourly price is missing for an hour.
    pub fn meter(&self, civil: &[CivilHour]) -> Result<Meter, Problems> {
        Meter::new(self, civil)
    }

    /// The same tariff with every price of a kilowatt-hour bought multiplied; standing, demand and export stay.
    ///
    /// Meters and readings made under the one hold for the other: buckets do not depend on rates.
    pub fn with_energy_times(&self, factor: f64) -> Self {
        let mut tariff = self.clone();
        for prices in &mut tariff.prices {
            let bands = prices.bands.iter_mut().map(|band| &mut band.rate);
            let steps = prices.steps.iter_mut().flat_map(|steps| &mut steps.steps);
            for rate in bands.chain(steps.map(|step| &mut step.rate)) {
                rate.scale(factor);
            }
            if let Some(hourly) = &mut prices.hourly {
                hourly.times *= factor;
            }
        }
        tariff
    }
}
