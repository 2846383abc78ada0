//! The brief as it is written: flat tables of leaves. Doc comments here are the text of the published schema.

use schemars::JsonSchema;
use serde::Deserialize;

use crate::document::{Leaf, Section, Word};
use crate::heater::GrossEfficiency;
use crate::home::{Construction, EmitterKind};
use crate::locale::{DateOrder, Paper};
use crate::units::{
    Area, CarbonFactor, Diffusivity, Duration, Energy, HeatLossCoefficient, Length, LoopResistance,
    Power, Share, Temperature, TemperatureDifference, WaterVolume,
};

/// A home, its weather, its energy, what heats it today and the choices.
#[derive(Debug, Deserialize, JsonSchema)]
pub(super) struct Brief {
    /// The home.
    pub home: Option<Section<Home>>,
    /// The hourly weather.
    pub weather: Option<Section<Weather>>,
    /// Tariffs and carbon.
    pub energy: Option<Section<Energies>>,
    /// What heats the home today.
    pub today: Option<Section<SystemTable>>,
    /// How the report is written.
    pub report: Option<Section<ReportTable>>,
    /// What could heat it instead, one table a choice.
    #[serde(default)]
    pub choice: Vec<Section<SystemTable>>,
}

/// How the report is written. The currency is that of the tariffs.
#[derive(Debug, Deserialize, JsonSchema)]
pub(super) struct ReportTable {
    /// Mark between whole and fraction: "." or ",".
    pub decimal: Option<Leaf<String>>,
    /// Mark between thousands: ",", ".", "space" or "none".
    pub thousands: Option<Leaf<String>>,
    /// Order of a date: "day-first", "month-first" or "year-first".
    pub dates: Option<Leaf<(DateOrder,)>>,
    /// Paper it is printed on: "A4" or "letter".
    pub paper: Option<Leaf<(Paper,)>>,
}

impl Word for DateOrder {
    const NAME: &'static str = "an order of a date";
    const WORDS: &'static [(&'static str, Self)] = &[
        ("day-first", Self::DayFirst),
        ("month-first", Self::MonthFirst),
        ("year-first", Self::YearFirst),
    ];
}

impl Word for Paper {
    const NAME: &'static str = "a size of paper";
    const WORDS: &'static [(&'static str, Self)] = &[("A4", Self::A4), ("letter", Self::Letter)];
}

/// The home.
#[derive(Debug, Deserialize, JsonSchema)]
pub(super) struct Home {
    /// What the home is called.
    pub label: Option<Leaf<String>>,
    /// Heat lost per kelvin between inside and outside; or give design_heat_load.
    pub heat_loss: Option<Leaf<HeatLossCoefficient>>,
    /// Heat loss at the design outdoor temperature, in place of heat_loss.
    pub design_heat_load: Option<Leaf<Power>>,
    /// Outdoor temperature the home is designed for; else the 99.6 % temperature of the weather.
    pub design_outdoor: Option<Leaf<Temperature>>,
    /// Heated floor area.
    pub floor_area: Option<Leaf<Area>>,
    /// Indoor set point, day and night.
    pub indoor: Option<Leaf<Temperature>>,
    /// Time zone of the clock on the wall, by its identifier in the tz database.
    pub time_zone: Option<Leaf<String>>,
    /// How heavily the home is built; needs the floor area.
    pub construction: Option<Leaf<(Construction,)>>,
    /// Heat capacity over heat-loss coefficient, in place of construction; 0 h for a home without storage.
    pub time_constant: Option<Leaf<Duration>>,
    /// Constant heat of people and appliances.
    pub internal_gains: Option<Leaf<Power>>,
    /// Area that turns global horizontal radiation into heat indoors.
    pub solar_aperture: Option<Leaf<Area>>,
    /// Outdoor temperature at which no heating is needed, in place of internal_gains and solar_aperture.
    pub base_temperature: Option<Leaf<Temperature>>,
    /// Radiators or floors.
    pub emitters: Option<Section<EmitterTable>>,
    /// Hot water.
    pub hot_water: Option<Section<HotWaterTable>>,
}

/// Radiators or floors, sized once at their own design point.
#[derive(Debug, Deserialize, JsonSchema)]
pub(super) struct EmitterTable {
    /// Kind of emitter.
    pub kind: Option<Leaf<(EmitterKind,)>>,
    /// Flow temperature that carries the design heat load.
    pub flow: Option<Leaf<Temperature>>,
    /// Return temperature at the design heat load.
    #[serde(rename = "return")]
    pub return_: Option<Leaf<Temperature>>,
    /// Flow temperature that is never exceeded.
    pub greatest_flow: Option<Leaf<Temperature>>,
}

/// Hot water: what is drawn in a day and how it is kept ready.
#[derive(Debug, Deserialize, JsonSchema)]
pub(super) struct HotWaterTable {
    /// Volume drawn in a day at the drawn_at temperature.
    pub daily: Option<Leaf<WaterVolume>>,
    /// Heat drawn in a day, in place of daily.
    pub daily_energy: Option<Leaf<Energy>>,
    /// Temperature of the drawn water.
    pub drawn_at: Option<Leaf<Temperature>>,
    /// Temperature of the cold water.
    pub cold: Option<Leaf<Temperature>>,
    /// Volume of the store; "none" where a boiler heats the water as it is drawn.
    pub store: Option<Leaf<StoreVolume>>,
    /// Temperature the store is kept at.
    pub setpoint: Option<Leaf<Temperature>>,
    /// Greatest fall of the store before it is heated again.
    pub hysteresis: Option<Leaf<TemperatureDifference>>,
}

/// A store's volume, or that there is none.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) enum StoreVolume {
    /// Water is heated as it is drawn.
    None,
    /// A store of a volume.
    Of(WaterVolume),
}

impl crate::document::LeafValue for StoreVolume {
    fn read(value: &toml::Value) -> Result<Self, crate::units::UnitProblem> {
        match value.as_str() {
            Some("none") => Ok(Self::None),
            _ => WaterVolume::read(value)
                .map(Self::Of)
                .map_err(|mut problem| {
                    problem.allowed.push_str(", or \"none\"");
                    problem
                }),
        }
    }

    fn schema() -> schemars::Schema {
        schemars::json_schema!({ "type": "string", "examples": ["200 L", "none"] })
    }
}

/// The hourly weather.
#[derive(Debug, Deserialize, JsonSchema)]
pub(super) struct Weather {
    /// Hourly file, relative to the brief.
    pub file: Option<Leaf<String>>,
    /// Clock of stamps without an offset: "UTC", "-05:00" or "Europe/London".
    pub time_zone: Option<Leaf<String>>,
    /// Which end of its hour a stamp marks: "beginning" or "ending".
    pub stamps: Option<Leaf<String>>,
    /// Order of day and month where the year comes last: "day-first" or "month-first".
    pub date_order: Option<Leaf<String>>,
    /// Column of the time, or of the date when there is a clock_column; by heading or number from 1.
    pub time_column: Option<Leaf<String>>,
    /// Column of the time of day.
    pub clock_column: Option<Leaf<String>>,
    /// Column of the outdoor temperature.
    pub temperature_column: Option<Leaf<String>>,
    /// Unit of the outdoor temperature: "°C", "°F", "K", "tenths of °C" or "tenths of °F".
    pub temperature_unit: Option<Leaf<String>>,
    /// Column of the relative humidity.
    pub humidity_column: Option<Leaf<String>>,
    /// Column of the global radiation.
    pub radiation_column: Option<Leaf<String>>,
    /// Lines to pass over at the beginning.
    pub skip_lines: Option<Leaf<i64>>,
    /// Fill gaps of more than a day from the days around them instead of refusing the file.
    pub fill_longer_gaps: Option<Leaf<bool>>,
}

/// Tariffs and carbon.
#[derive(Debug, Deserialize, JsonSchema)]
pub(super) struct Energies {
    /// Electricity tariff, relative to the brief.
    pub electricity: Option<Leaf<String>>,
    /// Gas tariff, relative to the brief.
    pub gas: Option<Leaf<String>>,
    /// Published set of carbon factors by name.
    pub carbon: Option<Leaf<String>>,
    /// Carbon of a kilowatt-hour of electricity; give carbon_scope with it.
    pub electricity_carbon: Option<Leaf<CarbonFactor>>,
    /// Carbon of a kilowatt-hour of gas on gross calorific value; give carbon_scope with it.
    pub gas_carbon: Option<Leaf<CarbonFactor>>,
    /// What both carbon factors count.
    pub carbon_scope: Option<Leaf<String>>,
}

/// A heating system: that of today or a choice. What it does not say, it takes from the home.
#[derive(Debug, Deserialize, JsonSchema)]
pub(super) struct SystemTable {
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

    /// Boiler or electric heater: greatest output.
    pub output: Option<Leaf<Power>>,
    /// Boiler: seasonal efficiency as measured or officially rated, "84 % gross".
    pub efficiency: Option<Leaf<GrossEfficiency>>,
    /// Boiler: the flow temperature it is set to; without one it follows the load.
    pub fixed_flow: Option<Leaf<Temperature>>,

    /// Something else in the home still burns gas, so that its standing charge stays.
    pub keeps_gas: Option<Leaf<bool>>,
    /// What it costs to put in.
    pub capital: Option<Leaf<String>>,

    /// Another heat-loss coefficient, when insulating is part of the choice; the emitters stay as they are.
    pub heat_loss: Option<Leaf<HeatLossCoefficient>>,
    /// Another indoor set point.
    pub indoor: Option<Leaf<Temperature>>,
    /// Other emitters.
    pub emitters: Option<Section<EmitterTable>>,
    /// Other hot water.
    pub hot_water: Option<Section<HotWaterTable>>,
}

/// Kind of heating system.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(super) enum SystemKind {
    /// A gas boiler.
    GasBoiler,
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
}

impl Word for SystemKind {
    const NAME: &'static str = "a kind of heating system";
    const WORDS: &'static [(&'static str, Self)] = &[
        ("gas-boiler", Self::GasBoiler),
        ("air-source", Self::AirSource),
        ("ground-source", Self::GroundSource),
        ("direct-electric", Self::DirectElectric),
    ];
}

impl Word for Construction {
    const NAME: &'static str = "a construction";
    const WORDS: &'static [(&'static str, Self)] = &[
        ("very light", Self::VeryLight),
        ("light", Self::Light),
        ("medium", Self::Medium),
        ("heavy", Self::Heavy),
        ("very heavy", Self::VeryHeavy),
    ];
}

impl Word for EmitterKind {
    const NAME: &'static str = "a kind of emitter";
    const WORDS: &'static [(&'static str, Self)] = &[
        ("radiators", Self::Radiators),
        ("underfloor", Self::Underfloor),
        ("fan convectors", Self::FanConvectors),
    ];
}
