//! The parts of a price list.

use crate::fault::{self, Fault};
use rust_decimal::Decimal;
use rust_decimal::prelude::{FromPrimitive, ToPrimitive};

use super::clock::When;
use crate::units::FuelUnit;

/// A price of fuel.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Rate {
    /// Currency units per unit of fuel.
    pub amount: Decimal,
    /// The unit that the supplier counts in.
    pub unit: FuelUnit,
    /// Gross kilowatt-hours in one of it.
    pub kwh_per_unit: f64,
}

impl Rate {
    /// A price per kilowatt-hour on gross calorific value, or of electricity.
    pub fn per_kwh(amount: Decimal) -> Self {
        Self {
            amount,
            unit: FuelUnit::KWH,
            kwh_per_unit: 1.0,
        }
    }

    /// Currency units per gross kilowatt-hour.
    pub fn per_gross_kwh(&self) -> f64 {
        self.amount.to_f64().unwrap_or(f64::NAN) / self.kwh_per_unit
    }

    /// Multiplies the price.
    pub(super) fn scale(&mut self, factor: f64) {
        let scaled = Decimal::from_f64(factor).and_then(|factor| self.amount.checked_mul(factor));
        if let Some(amount) = scaled {
            self.amount = amount;
        }
    }
}

/// A price that holds at certain times.
#[derive(Debug, Clone, PartialEq)]
pub struct Band {
    /// What the bill calls it.
    pub label: String,
    /// When it holds.
    pub when: When,
    /// What it costs.
    pub rate: Rate,
}

/// A stretch of the calendar: steps are counted and bills written by it.
#[derive(Debug, Clone, Copy, Default, PartialEq, Eq, Hash, PartialOrd, Ord)]
pub enum Span {
    /// A calendar month.
    Month,
    /// A quarter from January, April, July or October.
    Quarter,
    /// A calendar year.
    #[default]
    Year,
}

impl Span {
    /// The span of a name: `month`, `quarter` or `year`.
    pub fn from_name(name: &str) -> Option<Self> {
        match name {
            "month" => Some(Self::Month),
            "quarter" => Some(Self::Quarter),
            "year" => Some(Self::Year),
            _ => None,
        }
    }

    /// Its name.
    pub fn name(self) -> &'static str {
        match self {
            Self::Month => "month",
            Self::Quarter => "quarter",
            Self::Year => "year",
        }
    }

    /// How many make a year.
    pub fn per_year(self) -> f64 {
        match self {
            Self::Month => 12.0,
            Self::Quarter => 4.0,
            Self::Year => 1.0,
        }
    }

    /// Months from 0 that the one holding a month consists of.
    pub fn months(self, month0: usize) -> std::ops::Range<usize> {
        match self {
            Self::Month => month0..month0 + 1,
            Self::Quarter => month0 / 3 * 3..month0 / 3 * 3 + 3,
            Self::Year => 0..12,
        }
    }
}

/// A price up to an amount.
#[derive(Debug, Clone, PartialEq)]
pub struct Step {
    /// What the bill calls it.
    pub label: String,
    /// Gross kilowatt-hours in a full period up to which it holds; the last step has none.
    pub up_to_kwh: Option<f64>,
    /// What it costs.
    pub rate: Rate,
}

/// Prices by the amount used, cheapest first or dearest first, in the order they are used up.
#[derive(Debug, Clone, PartialEq)]
pub struct Steps {
    /// The period after which counting starts again.
    pub every: Span,
    /// From the first kilowatt-hour on.
    pub steps: Vec<Step>,
}

impl Steps {
    /// The step that the last of an amount falls in, when a period of full length has used it.
    pub fn reached(&self, kwh: f64) -> Option<&Step> {
        self.steps
            .iter()
            .find(|step| step.up_to_kwh.is_none_or(|up_to| kwh <= up_to))
            .or(self.steps.last())
    }
}

/// What a standing charge is counted by.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash)]
pub enum StandingSpan {
    /// A civil day.
    Day,
    /// A month, part months by their days.
    Month,
    /// A year, part years by their days.
    Year,
}

/// A charge for being connected.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub struct Standing {
    /// Currency units per day, month or year.
    pub amount: Decimal,
    /// What it is counted by.
    pub per: StandingSpan,
}

/// A charge for the highest hourly mean power of a month.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub struct Demand {
    /// Currency units per kilowatt and month.
    pub amount: Decimal,
    /// Hours that count.
    pub when: When,
}

/// What a tax is taken of.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub struct Covers {
    /// Bands, steps and hourly prices.
    pub energy: bool,
    /// The standing charge.
    pub standing: bool,
    /// The demand charge.
    pub demand: bool,
}

impl Covers {
    /// Everything that is charged.
    pub const ALL: Self = Self {
        energy: true,
        standing: true,
        demand: true,
    };
}

/// Tax.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub struct Tax {
    /// Share of the price without tax, where it is known.
    pub share: Option<Decimal>,
    /// What it is taken of.
    pub covers: Covers,
    /// Whether the rates already hold it, so that nothing is added.
    pub included: bool,
}

impl Tax {
    /// Rates that include whatever tax there is.
    pub const INCLUDED: Self = Self {
        share: None,
        covers: Covers::ALL,
        included: true,
    };

    /// The share that is added to the lines; none when the rates hold it already.
    pub fn added(&self) -> Option<Decimal> {
        self.share
            .filter(|_| !self.included || fault::on(Fault::TaxTwice))
    }

    /// What a price of energy is multiplied by.
    pub fn energy_factor(&self) -> f64 {
        let share = self.added().filter(|_| self.covers.energy);
        1.0 + share.and_then(|share| share.to_f64()).unwrap_or(0.0)
    }
}
