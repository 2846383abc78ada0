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
    /// Own generation that the household leaves over, where there is any.
    pub own: Option<OwnGeneration>,
}

/// What the home makes and its household does not use in the same hour.
#[derive(Debug, Clone, PartialEq)]
pub struct OwnGeneration {
    /// Left over in each hour, kWh.
    pub spare_kwh: Vec<f64>,
    /// What would be paid for feeding a kilowatt-hour back in each hour, and is forgone when it is used.
    pub price: Vec<f64>,
}

impl Signal {
    /// A signal without own generation.
    pub fn bought(price: Vec<f64>, carbon_kg: Vec<f64>) -> Self {
        Self {
            price,
            carbon_kg,
            own: None,
        }
    }

    /// How much of an amount (kWh) in an hour is bought, and what the rest forgoes.
    fn parts(&self, hour: usize, kwh: f64) -> (f64, f64) {
        self.own.as_ref().map_or((kwh, 0.0), |own| {
            let used_kwh = kwh.min(own.spare_kwh[hour]);
            (kwh - used_kwh, used_kwh * own.price[hour])
        })
    }

    /// What an amount (kWh) costs in an hour: own generation first, at what feeding it back would have paid.
    pub fn cost(&self, hour: usize, kwh: f64) -> f64 {
        let (bought_kwh, forgone) = self.parts(hour, kwh);
        bought_kwh * self.price[hour] + forgone
    }

    /// Carbon of an amount (kWh) in an hour, kg CO2e. Own generation counts none, and what is fed back earns none.
    pub fn carbon(&self, hour: usize, kwh: f64) -> f64 {
        self.parts(hour, kwh).0 * self.carbon_kg[hour]
    }
}

/// Set points and signals hour by hour, made before the run.
#[derive(Debug, Clone, PartialEq)]
pub struct Plan {
    /// Indoor set point, °C.
    pub set_point_c: Vec<f64>,
    /// What the household asked for, °C, where the set points are shifted from it: rooms are short of heat against this.
    pub asked_c: Option<Vec<f64>>,
    /// The backup heater only keeps the rooms above this, °C.
    pub backup_below_c: Vec<f64>,
    /// How much hotter than its set point the hot-water store is made in an hour, K; nothing where it is never shifted.
    pub store_shift_k: Option<Vec<f64>>,
    /// Electricity.
    pub electricity: Signal,
    /// The fuel the system burns, if it burns one.
    pub fuel: Option<Signal>,
}
