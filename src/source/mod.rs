//! What the cold side offers: outdoor air, ground, water.
//!
//! Every source answers each hour with an [`Offer`]: the temperature it would give with nothing drawn, and how far it
//! falls per kilowatt drawn. The step solves machine and offer together and tells the source afterwards what was drawn; what the
//! ground remembers of that is its [`Memory`].
//!
//! `line`, `bores` and `trench` say how a wall falls when heat is taken; `response` makes a memory of that; `borehole`, `pipe`,
//! `brine` and `circuit` lead from the wall to the machine; `design` puts them together, `buried` goes through the hours.

mod borehole;
mod bores;
mod brine;
mod buried;
mod circuit;
mod design;
mod line;
mod pipe;
mod response;
mod soil;
mod trench;
mod undisturbed;
mod water;

pub use borehole::{UTube, UTubes};
pub use bores::{Bore, total_depth_m};
pub use brine::{Antifreeze, Brine, BrineProperties, GREATEST_SHARE};
pub use buried::{BuriedLoop, RECHARGE_DAYS};
pub use circuit::{BRINE_C, Circuit, Pump};
pub use design::{Filling, Layout, LoopDesign};
pub use line::EARLY_ERROR;
pub use pipe::{LAMINAR_BELOW, Pipe, PipeFlow};
pub use response::{Memory, NoResponse, Response};
pub use soil::{RuleOfThumb, SOILS, Soil, SoilClass};
pub use trench::{Trench, steady_response, total_pipe_m};
pub use undisturbed::{AnnualSwing, HOURS_PER_YEAR, TRENCH_DIFFUSIVITY_M2_PER_S, undisturbed_c};
pub use water::WaterSource;

use crate::calendar::HourColumn;

/// What a source gives in an hour.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Offer {
    /// Temperature entering the machine with nothing drawn, °C.
    pub open_c: f64,
    /// How far it falls for each kilowatt of heat drawn, K/kW.
    pub k_per_kw: f64,
}

/// Where the heat comes from.
#[derive(Debug, Clone, PartialEq)]
pub enum Source {
    /// Outdoor air, which nobody can draw down.
    OutdoorAir,
    /// A buried loop behind one steady resistance: the quick option, without memory.
    Ground(GroundLoop),
    /// Bores or trenches with their memory.
    Buried(Box<BuriedLoop>),
    /// A well or surface water.
    Water(WaterSource),
}

/// A buried loop: undisturbed ground hour by hour behind a steady loop resistance.
#[derive(Debug, Clone, PartialEq)]
pub struct GroundLoop {
    /// Undisturbed ground at loop depth for every hour of the axis, °C.
    pub undisturbed_c: HourColumn,
    /// How far the brine entering the machine falls below the ground for each kilowatt drawn, K/kW.
    pub resistance_k_per_kw: f64,
}

impl Source {
    /// The offer of an hour with an outdoor temperature (°C), after what the ground remembers.
    #[inline]
    pub fn offer(&self, hour: usize, outdoor_c: f64, memory: &Memory) -> Offer {
        match self {
            Self::OutdoorAir => Offer {
                open_c: outdoor_c,
                k_per_kw: 0.0,
            },
            Self::Ground(ground) => Offer {
                open_c: ground.undisturbed_c.get(hour).copied().unwrap_or(f64::NAN),
                k_per_kw: ground.resistance_k_per_kw,
            },
            Self::Buried(buried) => buried.offer(hour, memory),
            Self::Water(water) => water.offer(hour),
        }
    }

    /// Tells the source what was drawn from it in the hour, kWh.
    pub fn drawn(&self, hour: usize, extracted_kwh: f64, memory: &mut Memory) {
        if let Self::Buried(buried) = self {
            buried.drawn(hour, extracted_kwh, memory);
        }
    }

    /// Electricity of pumps outside the machine in the hour, kWh, beyond what the machine's tested points hold.
    pub fn pump_kwh(&self, hour: usize, running_hours: f64) -> f64 {
        match self {
            Self::OutdoorAir | Self::Ground(_) => 0.0,
            Self::Buried(buried) => buried.pump_kwh(hour, running_hours),
            Self::Water(water) => water.pump_kw * running_hours,
        }
    }

    /// Heat put back into the ground in the hour, kWh.
    pub fn returned_kwh(&self, hour: usize) -> f64 {
        match self {
            Self::Buried(buried) => buried.recharging_kw(hour),
            _ => 0.0,
        }
    }

    /// Whether years of draw change what it offers.
    pub fn remembers(&self) -> bool {
        matches!(self, Self::Buried(_))
    }

    /// What it offers on a cold night of an outdoor temperature (°C): ground and water are then taken at their coldest.
    pub fn cold_offer(&self, outdoor_c: f64, memory: &Memory) -> Offer {
        let coldest = |column: &[f64]| {
            let place = column.iter().enumerate().min_by(|a, b| a.1.total_cmp(b.1));
            place.map_or(0, |(hour, _)| hour)
        };
        let hour = match self {
            Self::OutdoorAir => 0,
            Self::Ground(ground) => coldest(&ground.undisturbed_c),
            Self::Buried(buried) => coldest(buried.undisturbed()),
            Self::Water(water) => coldest(&water.water_c),
        };
        self.offer(hour, outdoor_c, memory)
    }
}
