//! The tables of a ground source as they are written. Doc comments here are the text of the published schema.

use schemars::JsonSchema;
use serde::Deserialize;

use crate::document::{Leaf, Word};
use crate::source::Antifreeze;
use crate::units::{
    BoreholeResistance, Conductivity, Diffusivity, Energy, Length, Power, Share, Temperature,
    TemperatureDifference, TemperatureGradient, VolumeFlow,
};

/// The ground about bores or trenches.
#[derive(Debug, Deserialize, JsonSchema)]
pub(in crate::brief) struct GroundTable {
    /// A class of soil or rock by name.
    pub soil: Option<Leaf<String>>,
    /// Thermal conductivity, in place of soil; give diffusivity with it.
    pub conductivity: Option<Leaf<Conductivity>>,
    /// Thermal diffusivity.
    pub diffusivity: Option<Leaf<Diffusivity>>,
    /// Mean temperature of the surface; else that of the weather.
    pub surface_mean: Option<Leaf<Temperature>>,
    /// Half the difference between the surface's warmest and coldest of the year; else that of the weather.
    pub surface_swing: Option<Leaf<TemperatureDifference>>,
    /// Day of the year, from 1, on which the surface is coldest; else that of the weather.
    pub coldest_day: Option<Leaf<i64>>,
    /// Warming with depth.
    pub gradient: Option<Leaf<TemperatureGradient>>,
    /// Heat put back each year, evenly over the 120 warmest days.
    pub recharge: Option<Leaf<Energy>>,
}

/// What flows in bores or trenches.
#[derive(Debug, Deserialize, JsonSchema)]
pub(in crate::brief) struct BrineTable {
    /// Antifreeze, or water.
    pub fluid: Option<Leaf<(Antifreeze,)>>,
    /// Share of antifreeze by mass.
    pub share: Option<Leaf<Share>>,
    /// Flow through the machine; else such that the brine cools by 3 K at the rating point.
    pub flow: Option<Leaf<VolumeFlow>>,
    /// Electric power of the pump for the loop, beyond what the machine's test holds; else computed from the pipes.
    pub pump: Option<Leaf<Power>>,
    /// Efficiency of the pump from the plug to the water.
    pub pump_efficiency: Option<Leaf<Share>>,
}

/// The pipe of bores or trenches.
#[derive(Debug, Deserialize, JsonSchema)]
pub(in crate::brief) struct PipeTable {
    /// Outer diameter.
    pub outside: Option<Leaf<Length>>,
    /// Thickness of the wall.
    pub wall: Option<Leaf<Length>>,
    /// Thermal conductivity of the wall.
    pub conductivity: Option<Leaf<Conductivity>>,
}

/// What is in the bores.
#[derive(Debug, Deserialize, JsonSchema)]
pub(in crate::brief) struct BoreholeTable {
    /// Borehole resistance from wall to brine, in place of grout and spacing.
    pub resistance: Option<Leaf<BoreholeResistance>>,
    /// U-tubes in each bore, 1 or 2; two stand crosswise, side by side in the circuit.
    pub u_tubes: Option<Leaf<i64>>,
    /// Thermal conductivity of the grout.
    pub grout: Option<Leaf<Conductivity>>,
    /// Distance between the middles of the two legs of a U-tube; else evenly placed.
    pub spacing: Option<Leaf<Length>>,
}

/// One bore.
#[derive(Debug, Deserialize, JsonSchema)]
pub(in crate::brief) struct BoreTable {
    /// Place on the plot.
    pub x: Option<Leaf<Length>>,
    /// Place on the plot.
    pub y: Option<Leaf<Length>>,
    /// Length that takes heat.
    pub depth: Option<Leaf<Length>>,
    /// Depth of its upper end.
    pub buried: Option<Leaf<Length>>,
    /// Radius.
    pub radius: Option<Leaf<Length>>,
}

/// One trench: pipes side by side, one after the other in the circuit.
#[derive(Debug, Deserialize, JsonSchema)]
pub(in crate::brief) struct TrenchTable {
    /// Length of the trench.
    pub length: Option<Leaf<Length>>,
    /// Depth of the pipes.
    pub depth: Option<Leaf<Length>>,
    /// Pipes side by side.
    pub pipes: Option<Leaf<i64>>,
    /// Distance between them.
    pub spacing: Option<Leaf<Length>>,
    /// Place of the first pipe across all trenches.
    pub across: Option<Leaf<Length>>,
}

/// A well, a river or a lake.
#[derive(Debug, Deserialize, JsonSchema)]
pub(in crate::brief) struct WellTable {
    /// Temperature of the water, or its mean where there is a swing.
    pub temperature: Option<Leaf<Temperature>>,
    /// Half the difference between its warmest and coldest of the year.
    pub swing: Option<Leaf<TemperatureDifference>>,
    /// Day of the year, from 1, on which it is coldest; needed with a swing.
    pub coldest_day: Option<Leaf<i64>>,
    /// Hourly temperatures (CSV with a column "time" and one in °C), in place of temperature.
    pub file: Option<Leaf<String>>,
    /// Column of the file.
    pub column: Option<Leaf<String>>,
    /// Use the file's year for any year of the weather.
    pub every_year: Option<Leaf<bool>>,
    /// What an exchanger between water and machine takes.
    pub approach: Option<Leaf<TemperatureDifference>>,
    /// Flow while the machine runs.
    pub flow: Option<Leaf<VolumeFlow>>,
    /// Head of the pump, friction included.
    pub head: Option<Leaf<Length>>,
    /// Electric power of the pump, in place of head.
    pub pump: Option<Leaf<Power>>,
    /// Efficiency of the pump from the plug to the water.
    pub pump_efficiency: Option<Leaf<Share>>,
}

impl Word for Antifreeze {
    const NAME: &'static str = "a fluid";
    const WORDS: &'static [(&'static str, Self)] = &[
        ("water", Self::Water),
        ("ethylene glycol", Self::EthyleneGlycol),
        ("propylene glycol", Self::PropyleneGlycol),
    ];
}
