//! The brief as it is written: flat tables of leaves. Doc comments here are the text of the published schema.

use schemars::JsonSchema;
use serde::Deserialize;

use super::clock_leaves::{ClockHour, DaySpans, Spells, WeekDay};
use super::columns::{BoilerFuel, ByMonth, DayShape, RuleWord, Stamps};
use super::ground::{
    BoreTable, BoreholeTable, BrineTable, GroundTable, PipeTable, TrenchTable, WellTable,
};
use super::leaves::{Capital, ColdWater, HeatLossSource, HygieneBy, Line, SetBack};
use super::lifetime::{LifetimeTable, OutlayTable};
use super::odds::{ChoiceOddsTable, OddsTable};
use crate::document::{Leaf, Section, Word};
use crate::heater::GrossEfficiency;
use crate::home::{Construction, EmitterKind, TappingProfile, WarmUp};
use crate::locale::{DateOrder, Paper};
use crate::plan::ShiftRule;
use crate::units::{
    AirChangeRate, AirVolume, Area, CarbonFactor, Diffusivity, Duration, Energy, Fuel,
    HeatLossCoefficient, Length, LoopResistance, Mass, Power, Share, Temperature,
    TemperatureDifference, WaterVolume,
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
    /// What the home uses and makes beside its heating.
    pub household: Option<Section<HouseholdTable>>,
    /// How the years of a system's life are counted.
    pub lifetime: Option<Section<LifetimeTable>>,
    /// How far home, supply and today's boiler may be off, in place of the usual ranges.
    pub odds: Option<Section<OddsTable>>,
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
    const WORDS: &'static [(&'static str, Self)] = &[("a4", Self::A4), ("letter", Self::Letter)];
}

/// The home.
#[derive(Debug, Deserialize, JsonSchema)]
pub(super) struct Home {
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
pub(super) struct PatternTable {
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
pub(super) struct RoomTable {
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
pub(super) struct BillsTable {
    /// Readings (CSV), relative to the brief; needed where heat_loss does not name them.
    pub file: Option<Leaf<String>>,
    /// Hourly weather of the same period, relative to the brief; that of the brief where none is given.
    pub weather: Option<Leaf<String>>,
    /// Energy in a cubic metre of the fuel, on gross calorific value.
    pub calorific_value: Option<Leaf<String>>,
    /// Factor that brings a metered volume to the conditions of the calorific value.
    pub volume_correction: Option<Leaf<f64>>,
    /// Seasonal efficiency of today's heater, "82 % gross".
    pub efficiency: Option<Leaf<GrossEfficiency>>,
    /// The efficiency is within this many percentage points, with 95 % confidence.
    pub efficiency_within: Option<Leaf<Share>>,
    /// Part of the load without heating that is hot water.
    pub hot_water_share: Option<Leaf<Share>>,
    /// That part is within this many percentage points, with 95 % confidence.
    pub hot_water_share_within: Option<Leaf<Share>>,
    /// Scale the heat loss of every system so that today's fuel is what was metered.
    pub scale: Option<Leaf<bool>>,
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
pub(super) struct GroupTable {
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
pub(super) struct HotWaterTable {
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
    /// Heating-oil tariff, relative to the brief.
    pub heating_oil: Option<Leaf<String>>,
    /// Tariff of liquefied petroleum gas, relative to the brief.
    pub lpg: Option<Leaf<String>>,
    /// Pellet tariff, relative to the brief.
    pub pellets: Option<Leaf<String>>,
    /// Published set of carbon factors by name.
    pub carbon: Option<Leaf<String>>,
    /// Carbon of a kilowatt-hour of electricity; give carbon_scope with it.
    pub electricity_carbon: Option<Leaf<CarbonFactor>>,
    /// Carbon of a kilowatt-hour of electricity in each month, January first; give carbon_scope with it.
    pub electricity_carbon_by_month: Option<Leaf<ByMonth>>,
    /// Carbon of a kilowatt-hour of gas on gross calorific value; give carbon_scope with it.
    pub gas_carbon: Option<Leaf<CarbonFactor>>,
    /// Carbon of a kilowatt-hour of heating oil on gross calorific value; give carbon_scope with it.
    pub heating_oil_carbon: Option<Leaf<CarbonFactor>>,
    /// Carbon of a kilowatt-hour of liquefied petroleum gas on gross calorific value; give carbon_scope with it.
    pub lpg_carbon: Option<Leaf<CarbonFactor>>,
    /// Carbon of a kilowatt-hour of pellets on gross calorific value; give carbon_scope with it.
    pub pellets_carbon: Option<Leaf<CarbonFactor>>,
    /// What the carbon factors given here count.
    pub carbon_scope: Option<Leaf<String>>,
    /// Carbon of electricity hour by hour; give carbon_scope with it.
    pub hourly_carbon: Option<Section<HourlyCarbon>>,
}

/// Carbon of electricity hour by hour.
#[derive(Debug, Deserialize, JsonSchema)]
pub(super) struct HourlyCarbon {
    /// Hourly CSV with a column "time", relative to the brief.
    pub file: Option<Leaf<String>>,
    /// Column of the values, when the file has several.
    pub column: Option<Leaf<String>>,
    /// Unit of the values: "kg/kWh" or "g/kWh".
    pub unit: Option<Leaf<String>>,
    /// Which end of its hour a stamp marks: "beginning" or "ending".
    pub stamps: Option<Leaf<(Stamps,)>>,
    /// Use the values of the same day and hour for any year.
    pub every_year: Option<Leaf<bool>>,
}

/// Electricity of the home beside heating and hot water, and what it makes itself.
#[derive(Debug, Deserialize, JsonSchema)]
pub(super) struct HouseholdTable {
    /// Electricity used in a year; with a load file the file is scaled to it.
    pub electricity: Option<Leaf<Energy>>,
    /// How it is spread over the day: 24 parts, midnight first.
    pub shape: Option<Leaf<DayShape>>,
    /// Hourly CSV of the electricity used, kWh, with a column "time"; relative to the brief.
    pub load: Option<Leaf<String>>,
    /// Column of the load, when the file has several.
    pub load_column: Option<Leaf<String>>,
    /// Hourly CSV of what the home makes, kWh, with a column "time"; relative to the brief.
    pub generation: Option<Leaf<String>>,
    /// Column of the generation, when the file has several.
    pub generation_column: Option<Leaf<String>>,
    /// Which end of its hour a stamp of these files marks: "beginning" or "ending".
    pub stamps: Option<Leaf<(Stamps,)>>,
    /// Use the values of the same day and hour of these files for any year.
    pub every_year: Option<Leaf<bool>>,
}

/// A boiler kept beside a heat pump.
#[derive(Debug, Deserialize, JsonSchema)]
pub(super) struct BoilerTable {
    /// What it burns: "gas", "heating-oil", "lpg" or "pellets".
    pub fuel: Option<Leaf<(BoilerFuel,)>>,
    /// Greatest output.
    pub output: Option<Leaf<Power>>,
    /// Seasonal efficiency as measured or officially rated, "84 % gross".
    pub efficiency: Option<Leaf<GrossEfficiency>>,
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
pub(super) struct ShiftingTable {
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
    pub efficiency: Option<Leaf<GrossEfficiency>>,
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
pub(super) enum SystemKind {
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
