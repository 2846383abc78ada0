//! A heating system as it is written: that of today or a choice.

use schemars::JsonSchema;
use serde::Deserialize;

use super::home::{EmitterTable, HotWaterTable, PatternTable, RoomTable};
use crate::brief::columns::{BoilerFuel, RuleWord};
use crate::brief::ground::{
    BoreTable, BoreholeTable, BrineTable, GroundTable, PipeTable, TrenchTable, WellTable,
};
use crate::brief::leaves::Capital;
use crate::brief::lifetime::OutlayTable;
use crate::brief::odds::ChoiceOddsTable;
use crate::document::{Leaf, Section, Word};
use crate::heater::StatedEfficiency;
use crate::plan::ShiftRule;
use crate::units::{
    Diffusivity, Fuel, HeatLossCoefficient, Length, LoopResistance, Mass, Power, Share,
    Temperature, TemperatureDifference,
};

/// A boiler kept beside a heat pump.
#[derive(Debug, Deserialize, JsonSchema)]
pub(in crate::brief) struct BoilerTable {
    /// What it burns: "gas", "heating-oil", "lpg" or "pellets".
    pub fuel: Option<Leaf<(BoilerFuel,)>>,
    /// Greatest output.
    pub output: Option<Leaf<Power>>,
    /// Seasonal efficiency as measured or officially rated, "84 % gross".
    pub efficiency: Option<Leaf<StatedEfficiency>>,
    /// What is kept of the ideal efficiency in a home.
    pub field_factor: Option<Leaf<Share>>,
    /// The flow temperature it is set to; without one it follows the load.
    pub fixed_flow: Option<Leaf<Temperature>>,
    /// Which of the two serves an hour: "by-outdoor", "by-cost" or "by-carbon".
    pub rule: Option<Leaf<(RuleWord,)>>,
    /// By outdoor temperature: the boiler serves below this.
    pub below: Option<Leaf<Temperature>>,
}

/// Rooms and store made warmer in cheap hours.
#[derive(Debug, Deserialize, JsonSchema)]
pub(in crate::brief) struct ShiftingTable {
    /// How the hours are chosen: "timer", or "best-day", which knows the day ahead and so is an upper bound.
    pub rule: Option<Leaf<(ShiftRule,)>>,
    /// How much warmer than the set point the rooms may be made.
    pub rooms_above: Option<Leaf<TemperatureDifference>>,
    /// How much cooler than the set point the rooms may be left.
    pub rooms_below: Option<Leaf<TemperatureDifference>>,
    /// How much hotter than its set point the store may be made.
    pub store_above: Option<Leaf<TemperatureDifference>>,
    /// How much cooler than its set point the store may be left.
    pub store_below: Option<Leaf<TemperatureDifference>>,
}

/// A heating system: that of today or a choice. What it does not say, it takes from the home.
#[derive(Debug, Deserialize, JsonSchema)]
pub(in crate::brief) struct SystemTable {
    /// What it is called.
    pub label: Option<Leaf<String>>,
    /// Kind of system.
    pub kind: Option<Leaf<(SystemKind,)>>,

    /// Heat pump: machine sheet, relative to the brief.
    pub machine: Option<Leaf<String>>,
    /// Heat pump: a typical machine by name, where there is no sheet; give rated_output with it.
    pub typical_machine: Option<Leaf<String>>,
    /// Heat pump: rated output to scale a typical machine to, or of a machine known by one point.
    pub rated_output: Option<Leaf<Power>>,
    /// Heat pump known by one point: its COP there.
    pub rated_cop: Option<Leaf<f64>>,
    /// Heat pump known by one point: source and flow temperature of that point.
    pub rated_at: Option<Leaf<String>>,
    /// Heat pump known by one point: its refrigerant.
    pub refrigerant: Option<Leaf<String>>,
    /// Heat pump: electric heater in the flow to the rooms.
    pub backup: Option<Leaf<Power>>,
    /// Heat pump: electric heater in the hot-water store.
    pub immersion: Option<Leaf<Power>>,
    /// Heat pump: pump of the heating circuit beyond what the machine's test holds.
    pub circulation_pump: Option<Leaf<Power>>,
    /// What is kept of laboratory performance in a home.
    pub field_factor: Option<Leaf<Share>>,

    /// Ground source: depth of the buried loop.
    pub loop_depth: Option<Leaf<Length>>,
    /// Ground source: how far the brine falls below the ground for each kilowatt drawn.
    pub loop_resistance: Option<Leaf<LoopResistance>>,
    /// Ground source: thermal diffusivity of the soil.
    pub soil_diffusivity: Option<Leaf<Diffusivity>>,
    /// Ground source: the ground about bores or trenches.
    pub ground: Option<Section<GroundTable>>,
    /// Ground source: what flows in bores or trenches.
    pub brine: Option<Section<BrineTable>>,
    /// Ground source: the pipe of bores or trenches.
    pub pipe: Option<Section<PipeTable>>,
    /// Ground source: what is in the bores.
    pub borehole: Option<Section<BoreholeTable>>,
    /// Ground source: a bore, one table each.
    #[serde(default)]
    pub bore: Vec<Section<BoreTable>>,
    /// Ground source: a trench, one table each.
    #[serde(default)]
    pub trench: Vec<Section<TrenchTable>>,
    /// Ground source: a well or surface water.
    pub well: Option<Section<WellTable>>,
    /// Ground source: year of the loop's life that is compared, from 1.
    pub shown_year: Option<Leaf<i64>>,

    /// Boiler or electric heater: greatest output.
    pub output: Option<Leaf<Power>>,
    /// Boiler: seasonal efficiency as measured or officially rated, "84 % gross".
    pub efficiency: Option<Leaf<StatedEfficiency>>,
    /// Boiler: the flow temperature it is set to; without one it follows the load.
    pub fixed_flow: Option<Leaf<Temperature>>,

    /// Something else in the home still burns gas, so that its standing charge stays.
    pub keeps_gas: Option<Leaf<bool>>,
    /// Another electricity tariff that comes with it, relative to the brief.
    pub electricity: Option<Leaf<String>>,
    /// Another tariff of the fuel it burns, relative to the brief.
    pub fuel: Option<Leaf<String>>,
    /// Heat pump: a boiler kept beside it, which makes it a hybrid.
    pub boiler: Option<Section<BoilerTable>>,
    /// Electric heating: rooms and store made warmer in cheap hours.
    pub shifting: Option<Section<ShiftingTable>>,
    /// Heat pump: refrigerant in it, to count what escapes.
    pub refrigerant_charge: Option<Leaf<Mass>>,
    /// Heat pump: share of the refrigerant that escapes in a year.
    pub leakage: Option<Leaf<Share>>,
    /// Heat pump: share of the refrigerant that escapes when it is taken out.
    pub leakage_at_end: Option<Leaf<Share>>,
    /// What it costs to put in, in one amount or part by part.
    pub capital: Option<Leaf<Capital>>,
    /// What it costs besides, and how long its parts last.
    pub outlay: Option<Section<OutlayTable>>,
    /// How far the choice may be off, in place of the usual ranges.
    pub odds: Option<Section<ChoiceOddsTable>>,

    /// Another heat-loss coefficient, when insulating is part of the choice; the emitters stay as they are.
    pub heat_loss: Option<Leaf<HeatLossCoefficient>>,
    /// Another transmission, where the home's is given apart.
    pub transmission: Option<Leaf<HeatLossCoefficient>>,
    /// Another ventilation, where the home's is given apart.
    pub ventilation: Option<Leaf<HeatLossCoefficient>>,
    /// Another indoor set point.
    pub indoor: Option<Leaf<Temperature>>,
    /// Another running pattern, in place of the whole of the home's.
    pub pattern: Option<Section<PatternTable>>,
    /// Rooms of the home, by name, whose radiators or losses change.
    #[serde(default)]
    pub room: Vec<Section<RoomTable>>,
    /// Other emitters.
    pub emitters: Option<Section<EmitterTable>>,
    /// Other hot water.
    pub hot_water: Option<Section<HotWaterTable>>,
}

/// Kind of heating system.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(in crate::brief) enum SystemKind {
    /// A gas boiler.
    GasBoiler,
    /// A boiler for heating oil.
    OilBoiler,
    /// A boiler for liquefied petroleum gas.
    LpgBoiler,
    /// A boiler for wood pellets.
    PelletBoiler,
    /// A heat pump that draws on outdoor air.
    AirSource,
    /// A heat pump that draws on a buried loop.
    GroundSource,
    /// Resistance heating.
    DirectElectric,
}

impl SystemKind {
    /// Its word in brief and results.
    pub fn word(self) -> &'static str {
        Self::WORDS
            .iter()
            .find(|(_, kind)| *kind == self)
            .map_or("", |(word, _)| word)
    }

    /// What it burns, where it is a boiler.
    pub fn burns(self) -> Option<Fuel> {
        match self {
            Self::GasBoiler => Some(Fuel::Gas),
            Self::OilBoiler => Some(Fuel::HeatingOil),
            Self::LpgBoiler => Some(Fuel::Lpg),
            Self::PelletBoiler => Some(Fuel::Pellets),
            Self::AirSource | Self::GroundSource | Self::DirectElectric => None,
        }
    }

    /// Whether it is a heat pump.
    pub fn is_heat_pump(self) -> bool {
        matches!(self, Self::AirSource | Self::GroundSource)
    }
}

impl Word for SystemKind {
    const NAME: &'static str = "a kind of heating system";
    const WORDS: &'static [(&'static str, Self)] = &[
        ("gas-boiler", Self::GasBoiler),
        ("oil-boiler", Self::OilBoiler),
        ("lpg-boiler", Self::LpgBoiler),
        ("pellet-boiler", Self::PelletBoiler),
        ("air-source", Self::AirSource),
        ("ground-source", Self::GroundSource),
        ("direct-electric", Self::DirectElectric),
    ];
}
