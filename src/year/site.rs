//! What all systems share, and what a plan says hour by hour.

use std::ops::Range;

use crate::calendar::{CivilHour, HourAxis};

/// Weather and clock of every hour of the axis; shared by all systems.
#[derive(Debug, Clone, PartialEq)]
pub struct Site {
    /// The hours.
    pub axis: HourAxis,
    /// The civil clock over them.
    pub civil: Vec<CivilHour>,
    /// Civil month of each hour, from 0.
    pub month0: Vec<u8>,
    /// The years of the weather, each with its hours of the axis.
    pub years: Vec<(i32, Range<usize>)>,
    /// Outdoor air, °C.
    pub outdoor_c: Vec<f64>,
    /// Relative humidity, 0 to 1, where the weather has it.
    pub relative_humidity: Option<Vec<f64>>,
    /// Global horizontal radiation, W/m², where the weather has it.
    pub global_w_per_m2: Option<Vec<f64>>,
    /// Hours whose weather was repaired.
    pub repaired: Vec<bool>,
}

/// Price and carbon of a kilowatt-hour in every hour of the axis.
#[derive(Debug, Clone, PartialEq)]
pub struct Signal {
    /// Marginal price, tax included, in the currency of the tariff.
    pub price: Vec<f64>,
    /// Carbon factor, kg CO2e/kWh.
    pub carbon_kg: Vec<f64>,
}

/// Set points and signals hour by hour, made before the run.
#[derive(Debug, Clone, PartialEq)]
pub struct Plan {
    /// Indoor set point, °C.
    pub set_point_c: Vec<f64>,
    /// The backup heater only keeps the rooms above this, °C.
    pub backup_below_c: Vec<f64>,
    /// Electricity.
    pub electricity: Signal,
    /// The fuel the system burns, if it burns one.
    pub fuel: Option<Signal>,
}
