//! What all systems share, and what a plan says hour by hour.

use std::ops::Range;

use crate::calendar::{CivilHour, HourAxis, HourColumn};
use crate::home::Fabric;

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
    /// Relative humidity, 0 to 1, over liquid water at all temperatures, where the weather has it.
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
    pub price: HourColumn,
    /// Carbon factor, kg CO2e/kWh.
    pub carbon_kg: HourColumn,
    /// Own generation that the household leaves over, where there is any.
    pub own: Option<OwnGeneration>,
}

/// What the home makes and its household does not use in the same hour.
#[derive(Debug, Clone, PartialEq)]
pub struct OwnGeneration {
    /// Left over in each hour, kWh.
    pub spare_kwh: HourColumn,
    /// What would be paid for feeding a kilowatt-hour back in each hour, and is forgone when it is used.
    pub price: HourColumn,
}

impl Signal {
    /// A signal without own generation.
    pub fn bought(price: Vec<f64>, carbon_kg: Vec<f64>) -> Self {
        Self {
            price: price.into(),
            carbon_kg: carbon_kg.into(),
            own: None,
        }
    }

    /// Shares the columns that are the same in another signal.
    fn share(&mut self, other: &Signal) {
        self.price.share(&other.price);
        self.carbon_kg.share(&other.carbon_kg);
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

/// How rooms that were let cool are warmed up again before a higher set point is due.
#[derive(Debug, Clone, PartialEq)]
pub struct Recovery {
    /// Hours until the set point rises, counted from the beginning of each hour; 0 where nothing is to be warmed up yet.
    pub hours_ahead: Vec<u8>,
    /// The set point that is due then, °C.
    pub target_c: HourColumn,
    /// The warm-up begins once it would take more than this, kW; 0 to begin at once.
    pub begins_above_kw: f64,
    /// Nothing is heated ahead; once a spell has begun, a thermostat asks for all the heat there is.
    pub at_the_time: bool,
}

impl Recovery {
    /// Heat that brings the rooms to the set point in time, kW; 0 while there is time yet.
    ///
    /// The even heat that arrives in time is asked for, so that a heat pump can run long and cool.
    pub fn heat_kw(
        &self,
        hour: usize,
        fabric: &Fabric,
        room_c: f64,
        outdoor_c: f64,
        gains_kw: f64,
        under_way: &mut bool,
    ) -> f64 {
        let hours = self.hours_ahead[hour];
        if hours == 0 || !fabric.stores_heat() {
            *under_way = false;
            return 0.0;
        }
        let target_c = self.target_c[hour];
        let even_kw = fabric.heat_to_reach_in_kw(hours, room_c, target_c, outdoor_c, gains_kw);
        *under_way |= even_kw > self.begins_above_kw;
        if *under_way { even_kw } else { 0.0 }
    }
}

/// Set points and signals hour by hour, made before the run.
#[derive(Debug, Clone, PartialEq)]
pub struct Plan {
    /// Indoor set point, °C.
    pub set_point_c: HourColumn,
    /// What the household asked for, °C, where the set points are shifted from it: rooms are short of heat against this.
    pub asked_c: Option<HourColumn>,
    /// The backup heater only keeps the rooms above this, °C.
    pub backup_below_c: HourColumn,
    /// How much hotter than its set point the hot-water store is made in an hour, K; nothing where it is never shifted.
    pub store_shift_k: Option<HourColumn>,
    /// The warm-up before a higher set point; none when the set point is the same all day.
    pub recovery: Option<Recovery>,
    /// Rooms are aired from a few kelvins above this, °C: the highest set point.
    pub comfort_c: f64,
    /// Electricity.
    pub electricity: Signal,
    /// The fuel the system burns, if it burns one.
    pub fuel: Option<Signal>,
}

impl Plan {
    /// Shares the columns that are the same in another plan.
    pub fn share(&mut self, other: &Plan) {
        self.set_point_c.share(&other.set_point_c);
        self.backup_below_c.share(&other.backup_below_c);
        self.electricity.share(&other.electricity);
        if let (Some(fuel), Some(other)) = (&mut self.fuel, &other.fuel) {
            fuel.share(other);
        }
    }

    /// The same signals with the set points of another plan.
    pub fn with_set_points_of(&self, other: &Plan) -> Plan {
        Plan {
            electricity: self.electricity.clone(),
            fuel: self.fuel.clone(),
            ..other.clone()
        }
    }
}
