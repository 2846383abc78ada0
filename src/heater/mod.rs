//! Everything but heat pumps that makes heat: boilers, and the rule by which a boiler and a machine share the hours.

mod boiler;
mod efficiency;
mod flue;
mod share;

pub use boiler::{Boiler, BoilerEfficiency, DRAWN_WATER_FACTOR, FIELD_FACTOR};
pub use efficiency::{GrossEfficiency, StatedEfficiency};
pub use flue::Combustion;
pub use share::{Effort, HybridRule, Side};
