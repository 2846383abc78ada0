//! What a home's own meter says: base load, heat-loss coefficient and base temperature from readings and weather.
//!
//! [`Readings`] are read and checked, [`DailyWeather`] is the same period's weather, [`fit()`] makes a [`Signature`] of both
//! (the energy signature of Fels 1986), whose limits hold what the heater's efficiency and the hot water leave open.

mod dates;
mod days;
mod fit;
mod found;
mod model;
mod own_home;
mod pieces;
mod readings;
mod rows;

pub use days::{DailyWeather, Day};
pub use fit::{fit, fit_at_published_base};
pub use found::{FitProblem, Limits, Point, Signature, Stated};
pub use own_home::{Doubt, OwnHome, Tried, fit_own_home};
pub use readings::{Conversion, Interval, Readings};
