//! How the years are counted.

use super::path::Path;
use crate::problem::{Place, Problem, Problems};

/// Lowest discount rate: below it money would double within two years by waiting.
pub const LOWEST_DISCOUNT_RATE: f64 = -0.5;
/// Longest span that is looked at, years: the life of a borehole.
pub const LONGEST_YEARS: usize = 100;

/// How many years are counted, and how money and prices go on through them.
#[derive(Debug, Clone, PartialEq)]
pub struct Terms {
    /// Years counted.
    pub years: usize,
    /// Real discount rate of a year, as a fraction.
    pub discount_rate: f64,
    /// Price of electricity, unit rates and standing charge alike.
    pub electricity: Path,
    /// Price of fuel, unit rates and standing charge alike.
    pub fuel: Path,
    /// Carbon of a kilowatt-hour of electricity.
    pub electricity_carbon: Path,
}

impl Terms {
    /// What today's money is worth when it is paid in a year: `(1 + rate)^-year`.
    pub fn discount(&self, year: usize) -> f64 {
        (1.0 + self.discount_rate).powi(-i32::try_from(year).unwrap_or(i32::MAX))
    }

    /// Checks what cannot be counted with.
    ///
    /// # Errors
    /// No years or more than [`LONGEST_YEARS`], a discount rate below [`LOWEST_DISCOUNT_RATE`], a price path shorter
    /// than the years.
    ///
    /// ```
    /// use winterledger::lifetime::{Path, Terms};
    /// let terms = Terms {
    ///     years: 20,
    ///     discount_rate: 0.035,
    ///     electricity: Path::STEADY,
    ///     fuel: Path::STEADY,
    ///     electricity_carbon: Path::STEADY,
    /// };
    /// assert!(terms.check().is_ok());
    /// assert!(Terms { years: 0, ..terms }.check().is_err());
    /// ```
    pub fn check(&self) -> Result<(), Problems> {
        let mut problems = Problems::new();
        if self.years == 0 || self.years > LONGEST_YEARS {
            problems.push(Problem::new(
                Place::field("lifetime.years"),
                format!("{} years", self.years),
                format!("1 to {LONGEST_YEARS} years"),
                "give the years over which the systems are compared, such as \"20 years\"",
            ));
        }
        if self.discount_rate.is_nan() || self.discount_rate < LOWEST_DISCOUNT_RATE {
            problems.push(Problem::new(
                Place::field("lifetime.discount_rate"),
                format!("{} %", self.discount_rate * 100.0),
                format!("a discount rate from {} %", LOWEST_DISCOUNT_RATE * 100.0),
                "give the rate above inflation, such as \"3.5 %\"",
            ));
        }
        let paths = [
            ("electricity_path", &self.electricity),
            ("gas_path", &self.fuel),
            ("electricity_carbon_path", &self.electricity_carbon),
        ];
        for (field, path) in paths {
            if let Some(given) = path.years()
                && given < self.years
            {
                problems.push(Problem::new(
                    Place::field(format!("lifetime.{field}")),
                    format!("a path of {given} years for a life of {} years", self.years),
                    format!("a value for each of the {} years", self.years),
                    "give the missing years, or compare over fewer years",
                ));
            }
        }
        problems.or(())
    }
}
