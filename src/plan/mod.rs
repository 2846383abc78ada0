//! Set points and signals hour by hour, made before the run.

mod pattern;

pub use pattern::{Ability, following};
