//! Quantities with their units.
//!
//! A quantity in an input file is text that carries its unit, `"212 W/K"`. Each kind of quantity is a type of its
//! own with one canonical unit, named by its accessor (`w_per_k()`), so a power cannot be read where a heat-loss
//! coefficient is meant. A bare number is refused with what to write.

mod fuel;
mod measures;
mod money;
mod text;

pub use fuel::{CalorificBasis, CalorificValue, Fuel, FuelUnit};
pub use measures::*;
pub use money::{Currency, Money, Price, parse_price};
pub use text::{Measure, Unit, UnitProblem, as_set, meant, parse, split_number};
