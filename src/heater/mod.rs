//! Everything but heat pumps that makes heat: gas boilers and direct electric heating.

mod boiler;
mod efficiency;

pub use boiler::{Boiler, BoilerEfficiency, FIELD_FACTOR, ideal_gross_efficiency};
pub use efficiency::{GrossEfficiency, NET_PER_GROSS_METHANE};
