//! Seasonal rating by the bin method of EN 14825, from declared points or from the fitted machine.

mod bins;
mod climate;
mod points;

pub use bins::{Bin, RatedPoint, Rating, RatingCase, RatingPoint, cycling_cop, rate};
pub use climate::{Application, BALANCE_C, Climate, ModeHours};
pub use points::{DeclaredPoint, Rated, RatedFrom, RatingError, rate_declared, rate_machine};
