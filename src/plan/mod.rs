//! Set points and signals hour by hour, made before the run.

mod shift;

pub use shift::{Latitude, ShiftRule, Shifting, best_day, timer};

use crate::year::{Plan, Signal};

/// A plan with one set point (°C) day and night; backup only keeps the rooms within a band (K) below it.
pub fn steady(
    hours: usize,
    set_point_c: f64,
    backup_band_k: f64,
    electricity: Signal,
    fuel: Option<Signal>,
) -> Plan {
    Plan {
        set_point_c: vec![set_point_c; hours],
        backup_below_c: vec![set_point_c - backup_band_k; hours],
        asked_c: None,
        store_shift_k: None,
        electricity,
        fuel,
    }
}
