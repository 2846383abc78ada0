//! The home as it is written: its losses, its running pattern, its rooms, emitters and hot water.

use schemars::JsonSchema;
use serde::Deserialize;

use crate::brief::clock_leaves::{ClockHour, DaySpans, Spells, WeekDay};
use crate::brief::leaves::{ColdWater, HeatLossSource, HygieneBy, Line, SetBack};
use crate::document::{Leaf, LeafValue, Section, Word};
use crate::heater::StatedEfficiency;
use crate::home::{Construction, EmitterKind, TappingProfile, WarmUp};
use crate::units::{
    AirChangeRate, AirVolume, Area, Duration, Energy, HeatLossCoefficient, Power, Share,
    Temperature, TemperatureDifference, WaterVolume,
};

/// The home.
#[derive(Debug, Deserialize, JsonSchema)]
pub(in crate::brief) struct Home {
    /// What the home is called.
    pub label: Option<Leaf<String>>,
    /// Heat lost per kelvin between inside and outside, or { bills = "….csv" }; or give design_heat_load, or transmission and
    /// ventilation, or a room table.
    pub heat_loss: Option<Leaf<HeatLossSource>>,
    /// Heat lost through walls, roof, floor and windows, in place of heat_loss; give ventilation or air_changes with it.
    pub transmission: Option<Leaf<HeatLossCoefficient>>,
    /// Heat lost with the air that is exchanged.
    pub ventilation: Option<Leaf<HeatLossCoefficient>>,
    /// Air changes an hour, in place of ventilation; give volume with it.
    pub air_changes: Option<Leaf<AirChangeRate>>,
    /// Heated volume.
    pub volume: Option<Leaf<AirVolume>>,
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
    /// When the rooms are heated; without it the set point holds day and night.
    pub pattern: Option<Section<PatternTable>>,
    /// Radiators or floors.
    pub emitters: Option<Section<EmitterTable>>,
    /// Rooms, whose worst sets the flow temperature.
    #[serde(default)]
    pub room: Vec<Section<RoomTable>>,
    /// Hot water.
    pub hot_water: Option<Section<HotWaterTable>>,
    /// Meter readings of today's system.
    pub bills: Option<Section<BillsTable>>,
}

/// When the rooms are heated.
#[derive(Debug, Deserialize, JsonSchema)]
pub(in crate::brief) struct PatternTable {
    /// The set point holds day and night.
    pub continuous: Option<Leaf<bool>>,
    /// Heated spells of a working day, each at the indoor set point or at its own.
    pub weekdays: Option<Leaf<Spells>>,
    /// Heated spells of a Saturday or Sunday; those of a working day where none are given.
    pub weekends: Option<Leaf<Spells>>,
    /// Set point between the spells, or "off".
    pub set_back: Option<Leaf<SetBack>>,
    /// Heating season; outside it the rooms are only kept from freezing.
    pub season: Option<Leaf<DaySpans>>,
    /// Days away.
    pub holidays: Option<Leaf<DaySpans>>,
    /// Set point on days away.
    pub holiday: Option<Leaf<Temperature>>,
    /// How the rooms are warmed up again: "in time", "at the time", or so many hours ahead.
    pub warm_up: Option<Leaf<WarmUp>>,
}

/// One room at the design point.
#[derive(Debug, Deserialize, JsonSchema)]
pub(in crate::brief) struct RoomTable {
    /// What it is called.
    pub name: Option<Leaf<String>>,
    /// Heat it loses per kelvin between its own temperature and outdoors.
    pub heat_loss: Option<Leaf<HeatLossCoefficient>>,
    /// Heat it loses at the design point, in place of heat_loss.
    pub heat_load: Option<Leaf<Power>>,
    /// Its temperature; the indoor set point where none is given.
    pub temperature: Option<Leaf<Temperature>>,
    /// Output of its radiators at ΔT 50 K, as catalogues state it.
    pub radiator: Option<Leaf<Power>>,
}

/// Meter readings of today's system, and what is known about what they hold.
#[derive(Debug, Deserialize, JsonSchema)]
pub(in crate::brief) struct BillsTable {
    /// Readings (CSV), relative to the brief; needed where heat_loss does not name them.
    pub file: Option<Leaf<String>>,
    /// Hourly weather of the same period, relative to the brief; that of the brief where none is given.
    pub weather: Option<Leaf<String>>,
    /// Energy in a cubic metre of the fuel, on gross calorific value.
    pub calorific_value: Option<Leaf<String>>,
    /// Factor that brings a metered volume to the conditions of the calorific value.
    pub volume_correction: Option<Leaf<f64>>,
    /// Seasonal efficiency of today's heater, "82 % gross".
    pub efficiency: Option<Leaf<StatedEfficiency>>,
    /// The efficiency is within this many percentage points, with 95 % confidence.
    pub efficiency_within: Option<Leaf<Share>>,
    /// Part of the load without heating that is hot water.
    pub hot_water_share: Option<Leaf<Share>>,
    /// That part is within this many percentage points, with 95 % confidence.
    pub hot_water_share_within: Option<Leaf<Share>>,
    /// Set point and internal gains together are within this many kelvins of the set point, with 95 % confidence.
    pub indoor_within: Option<Leaf<TemperatureDifference>>,
    /// The solar gains are within this share, with 95 % confidence.
    pub sun_within: Option<Leaf<Share>>,
    /// Scale the heat loss of every system so that today's fuel is what was metered.
    pub scale: Option<Leaf<bool>>,
}

/// Radiators or floors, sized once at their own design point.
#[derive(Debug, Deserialize, JsonSchema)]
pub(in crate::brief) struct EmitterTable {
    /// Kind of emitter.
    pub kind: Option<Leaf<(EmitterKind,)>>,
    /// Flow temperature that carries the design heat load.
    pub flow: Option<Leaf<Temperature>>,
    /// Return temperature at the design heat load.
    #[serde(rename = "return")]
    pub return_: Option<Leaf<Temperature>>,
    /// Flow minus return at the design heat load, in place of return.
    pub spread: Option<Leaf<TemperatureDifference>>,
    /// Flow temperature that is never exceeded.
    pub greatest_flow: Option<Leaf<Temperature>>,
    /// Compensation line through two points "outdoor / flow"; without it the flow follows the load.
    pub line: Option<Leaf<Line>>,
    /// The same flow at every load.
    pub fixed_flow: Option<Leaf<Temperature>>,
    /// By how much a buffer or low-loss header lifts the machine's flow above that of the emitters.
    pub header: Option<Leaf<TemperatureDifference>>,
    /// Heated floor, for underfloor heating.
    pub floor: Option<Leaf<Area>>,
    /// Parts of the emitters that are of another kind or have other temperatures, in place of kind, flow and return.
    #[serde(default)]
    pub group: Vec<Section<GroupTable>>,
}

/// Part of the emitters.
#[derive(Debug, Deserialize, JsonSchema)]
pub(in crate::brief) struct GroupTable {
    /// Kind of emitter.
    pub kind: Option<Leaf<(EmitterKind,)>>,
    /// Share of the design heat load.
    pub share: Option<Leaf<Share>>,
    /// Flow temperature at the design heat load.
    pub flow: Option<Leaf<Temperature>>,
    /// Return temperature at the design heat load.
    #[serde(rename = "return")]
    pub return_: Option<Leaf<Temperature>>,
}

/// Hot water: what is drawn in a day and how it is kept ready.
#[derive(Debug, Deserialize, JsonSchema)]
pub(in crate::brief) struct HotWaterTable {
    /// Volume drawn in a day at the drawn_at temperature.
    pub daily: Option<Leaf<WaterVolume>>,
    /// Heat drawn in a day, in place of daily.
    pub daily_energy: Option<Leaf<Energy>>,
    /// Temperature of the drawn water.
    pub drawn_at: Option<Leaf<Temperature>>,
    /// Published tapping profile, "M", "L" or "XL": the hours of the draws, and their heat where no amount is given.
    pub profile: Option<Leaf<(TappingProfile,)>>,
    /// Temperature of the cold water, or twelve, January first; else that of the ground at the depth of a main.
    pub cold: Option<Leaf<ColdWater>>,
    /// Volume of the store; "none" where a boiler heats the water as it is drawn.
    pub store: Option<Leaf<StoreVolume>>,
    /// Temperature the store is kept at.
    pub setpoint: Option<Leaf<Temperature>>,
    /// Greatest fall of the store before it is heated again.
    pub hysteresis: Option<Leaf<TemperatureDifference>>,
    /// Clock hours in which the store is reheated, in place of a thermostat at all hours.
    pub reheat: Option<Leaf<Spells>>,
    /// Share of the store's hot content that reaches the taps before they run cool.
    pub usable: Option<Leaf<Share>>,
    /// Weekly heating of the store against legionella: "none", by the "machine", or by the "immersion" heater.
    pub hygiene: Option<Leaf<(HygieneBy,)>>,
    /// Temperature of the hygiene cycle.
    pub hygiene_temperature: Option<Leaf<Temperature>>,
    /// Day of the hygiene cycle.
    pub hygiene_day: Option<Leaf<(WeekDay,)>>,
    /// Clock hour at which it begins.
    pub hygiene_hour: Option<Leaf<ClockHour>>,
}

/// A store's volume, or that there is none.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(in crate::brief) enum StoreVolume {
    /// Water is heated as it is drawn.
    None,
    /// A store of a volume.
    Of(WaterVolume),
}

impl LeafValue for StoreVolume {
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
