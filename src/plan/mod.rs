//! Set points and signals hour by hour, made before the run.

mod pattern;
mod shift;

pub use pattern::{Ability, following};
pub use shift::{Latitude, ShiftRule, Shifting, best_day, timer};
