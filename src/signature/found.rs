//! What is stated for a signature, and what is found.

use chrono::NaiveDate;

use super::days::Day;
use super::model::{Metered, quadratic};
use super::own_home::OwnHome;

/// What is stated about a heater and the load without heating.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Stated {
    /// Seasonal efficiency of the heater, gross.
    pub efficiency: f64,
    /// It lies within this of the truth with 95 % confidence.
    pub efficiency_within: f64,
    /// Part of the base load that is hot water and swings with the cold water.
    pub hot_water_share: f64,
    /// It lies within this of the truth with 95 % confidence.
    pub hot_water_share_within: f64,
    /// By how much hot water is above its mean when the cold water is coldest, as a share.
    pub hot_water_swing: f64,
}

/// A figure with its 95 % limits.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Limits {
    /// The figure.
    pub value: f64,
    /// Lower limit.
    pub low: f64,
    /// Upper limit.
    pub high: f64,
}

impl Limits {
    pub(super) fn around(value: f64, half: f64) -> Self {
        Self {
            value,
            low: value - half,
            high: value + half,
        }
    }

    /// Half the width of the limits.
    pub fn half(&self) -> f64 {
        (self.high - self.low) / 2.0
    }
}

/// One interval beside the fit.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Point {
    /// First day.
    pub from: NaiveDate,
    /// Day after the last.
    pub to: NaiveDate,
    /// Mean outdoor temperature, °C.
    pub mean_c: f64,
    /// Fuel a day, kWh.
    pub kwh_per_day: f64,
    /// Fuel a day by the fit, kWh.
    pub fitted_kwh_per_day: f64,
    /// How many standard deviations it lies off a fit without it (externally studentized residual).
    pub off: f64,
    /// Whether that is too much for chance (Bonferroni, 5 % over all intervals).
    pub odd: bool,
}

/// The signature of a home: a straight line, and beside it what the home's own model makes of the readings.
#[derive(Debug, Clone, PartialEq)]
pub struct Signature {
    /// Slope as an effective coefficient, W/K: it holds how the sun goes with the cold. Its limits hold the efficiency and the hot
    /// water too.
    pub heat_loss_w_per_k: Limits,
    /// Outdoor temperature below which it is heated, °C.
    pub base_temperature_c: Limits,
    /// Fuel that is used without heating, kWh a day.
    pub base_load_kwh_per_day: Limits,
    /// Fuel for each degree below the base temperature, kWh a day and kelvin.
    pub slope_kwh_per_k_day: f64,
    /// Whether the base temperature was fitted; else it was taken from published homes.
    pub base_temperature_fitted: bool,
    /// Share of the variance that is explained.
    pub r_squared: f64,
    /// Root mean square error over the mean, degrees of freedom counted.
    pub cv_rmse: f64,
    /// Every interval.
    pub points: Vec<Point>,
    /// The heat loss at which the home's own model uses what was metered, where the home is described.
    pub own_home: Option<OwnHome>,
    pub(super) swing: f64,
    pub(super) covariance: [[f64; 3]; 3],
    pub(super) t: f64,
}

/// Why there is no signature.
#[derive(Debug, Clone, PartialEq)]
pub enum FitProblem {
    /// Too few intervals.
    TooFew {
        /// How many there are.
        found: usize,
    },
    /// An interval is not inside the weather.
    OutsideWeather {
        /// First day.
        from: NaiveDate,
        /// Day after the last.
        to: NaiveDate,
        /// Its line in the file.
        line: usize,
    },
    /// Fuel does not rise when it is colder.
    NoHeating,
    /// The intervals do not tell where heating begins.
    BaseTemperatureOpen {
        /// Where the search ended, °C.
        at_c: f64,
    },
    /// The search did not converge.
    NotConverged,
}

impl Signature {
    /// The heat-loss coefficient of the home's own model, else the effective one of the line, W/K.
    pub fn heat_loss(&self) -> Limits {
        self.own_home
            .as_ref()
            .map_or(self.heat_loss_w_per_k, |own| own.heat_loss_w_per_k)
    }

    /// How many intervals it was made of.
    pub fn n(&self) -> usize {
        self.points.len()
    }

    /// Fuel of a stretch of days by the fit, kWh, with limits that hold the fit's own uncertainty.
    pub fn fuel_kwh(&self, days: &[Day]) -> Limits {
        let all = Metered::new(days, 0.0);
        let base_c = self.base_temperature_c.value;
        let number = days.len() as f64;
        let shape = [
            number * all.base_shape(self.swing),
            number * all.degrees(base_c),
            number * self.slope_kwh_per_k_day * all.colder(base_c),
        ];
        let kwh = self.base_load_kwh_per_day.value * shape[0] + self.slope_kwh_per_k_day * shape[1];
        Limits::around(
            kwh,
            self.t * quadratic(&shape, &self.covariance).max(0.0).sqrt(),
        )
    }

    /// Fuel of a mean day at an outdoor temperature (°C), kWh: the line of the picture.
    pub fn line_kwh_per_day(&self, outdoor_c: f64) -> f64 {
        let below_k = (self.base_temperature_c.value - outdoor_c).max(0.0);
        self.base_load_kwh_per_day.value + self.slope_kwh_per_k_day * below_k
    }
}
