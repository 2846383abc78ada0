//! The answer of `estimate`. Field names are a promise to whoever reads the JSON; absent means absent, never 0.

use std::collections::BTreeMap;

use serde::Serialize;

use super::account::{BillAnswer, MeterAnswer, ShiftingAnswer};
use super::home::{DesignAnswer, MeteredAnswer, PatternComparison, RoomsAnswer, StoreAnswer};
use super::lifetime::LifetimeAnswer;
use super::odds::OddsSummary;
use super::weather_years::{YearAnswer, YearSpread};
use super::what_if::WhatIf;
use crate::problem::Finding;

/// The comparison of all systems of a brief.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct Estimate {
    /// The weather it was run on.
    pub weather: WeatherUsed,
    /// The home.
    pub home: HomeUsed,
    /// Today's system first, then the choices in the order of the brief.
    pub systems: Vec<SystemAnswer>,
    /// Every system all day at its set point beside a set-back, where that was asked for.
    #[serde(skip_serializing_if = "Vec::is_empty")]
    pub patterns: Vec<PatternComparison>,
    /// What would make each choice cost what today's system costs, by the choice's label.
    pub break_even: BTreeMap<String, Vec<LeverAnswer>>,
    /// How sure it is: chances from a modest sample; absent where none was drawn. The command `odds` says more.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub odds: Option<OddsSummary>,
    /// What moves the saving of the choices that the report puts in front: the cheapest four. Absent where nothing asked for it.
    #[serde(skip_serializing_if = "Vec::is_empty")]
    pub what_if: Vec<WhatIf>,
    /// Money and carbon over the years; absent where no choice's capital is known.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub lifetime: Option<LifetimeAnswer>,
    /// Currency of every amount, ISO 4217.
    pub currency: String,
    /// What the carbon factors count.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub carbon_scope: Option<String>,
    /// What was assumed and where it is from.
    pub assumptions: Vec<Assumption>,
    /// What was odd and what was done about it.
    pub findings: Vec<Finding>,
    /// The files it was made from.
    pub inputs: Vec<InputFile>,
}

impl Estimate {
    /// The same estimate of less than a year: what would be said of a year is left out.
    pub fn of_days(mut self, days: usize) -> Self {
        self.weather.part_year_days = Some(days);
        self.break_even.clear();
        self.lifetime = None;
        self.odds = None;
        self
    }
}

/// A file that was read.
#[derive(Debug, Clone, PartialEq, Eq, Serialize)]
pub struct InputFile {
    /// Its name.
    pub file: String,
    /// Its length.
    pub bytes: usize,
    /// Its SHA-256 checksum (FIPS 180-4), hexadecimal.
    pub sha256: String,
}

/// The weather an estimate was run on.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct WeatherUsed {
    /// File as the brief names it.
    pub file: String,
    /// Hours run.
    pub hours: usize,
    /// Years they make.
    pub years: usize,
    /// Mean outdoor temperature.
    pub mean_c: f64,
    /// Lowest outdoor temperature.
    pub min_c: f64,
    /// Hours that were repaired.
    pub repaired_hours: usize,
    /// Days run, where they are less than a year: then every figure is of these days and nothing is said of a year.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub part_year_days: Option<usize>,
}

/// The home an estimate was run for, as it is today.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct HomeUsed {
    /// What it is called.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub label: Option<String>,
    /// Heat-loss coefficient.
    pub heat_loss_w_per_k: f64,
    /// Design outdoor temperature.
    pub design_outdoor_c: f64,
    /// Steady loss from the set point at the design temperature, gains not counted.
    pub design_heat_load_kw: f64,
    /// Part of the coefficient through walls, roof, floor and windows, where it is known apart.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub transmission_w_per_k: Option<f64>,
    /// Part of the coefficient with the air that is exchanged.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub ventilation_w_per_k: Option<f64>,
    /// What meter readings say beside it.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub metered: Option<MeteredAnswer>,
}

/// One system: figures of a mean year.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct SystemAnswer {
    /// What it is called.
    pub label: String,
    /// Kind, as the brief writes it.
    pub kind: String,
    /// Whether it heats the home today.
    pub today: bool,
    /// The machine, where there is one, and that it is a typical one where no datasheet was given.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub machine: Option<String>,
    /// Heat to the rooms.
    pub space_heat_kwh: f64,
    /// Heat to hot water, before the store.
    pub hot_water_kwh: f64,
    /// Heat to the rooms and hot water at the taps.
    pub delivered_kwh: f64,
    /// Electricity of the heating.
    pub electricity_kwh: f64,
    /// Electricity of backup and immersion heater.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub backup_kwh: Option<f64>,
    /// Fuel on gross calorific value.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub fuel_kwh: Option<f64>,
    /// What it burns, where it burns something.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub fuel: Option<String>,
    /// Rule by which boiler and machine share the hours, where there are both.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub hybrid: Option<String>,
    /// Heat of the boiler, where there are both.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub boiler_heat_kwh: Option<f64>,
    /// Electricity of the rest of the home, where it is part of the account.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub household_kwh: Option<f64>,
    /// Electricity bought by the whole home, where household or own generation are part of the account.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub bought_kwh: Option<f64>,
    /// Electricity fed back, where the home makes some.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub fed_back_kwh: Option<f64>,
    /// Seasonal performance factor, machine alone.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub spf_h1: Option<f64>,
    /// With fan or brine pump.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub spf_h2: Option<f64>,
    /// With backup and immersion heater.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub spf_h3: Option<f64>,
    /// With all auxiliaries.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub spf_h4: Option<f64>,
    /// Heat over fuel, gross, where fuel is burnt.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub seasonal_efficiency: Option<f64>,
    /// Outdoor temperature below which the machine alone does not hold the set point, hot water not counted.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub balance_point_c: Option<f64>,
    /// The same with the mean power of hot water.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub balance_point_with_hot_water_c: Option<f64>,
    /// The balance point in words, also when it lies outside the range looked at.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub balance_point: Option<String>,
    /// Highest hourly mean of electric power; no supply check.
    pub peak_electric_kw: f64,
    /// Hours with backup or immersion heater.
    pub hours_backup: f64,
    /// Hours that ended more than 1 K below the set point.
    pub hours_short: f64,
    /// Hours a year in which the machine stood because its source was outside its limits.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub hours_stopped: Option<f64>,
    /// Hours in which hot water came out too cool.
    pub hours_water_short: f64,
    /// Lowest indoor temperature of all years.
    pub min_indoor_c: f64,
    /// When the rooms are heated.
    pub pattern: String,
    /// Heat to the rooms above that of the same system under today's pattern; absent when the pattern is today's.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub pattern_heat_kwh: Option<f64>,
    /// Cost above that of the same system under today's pattern; absent when the pattern is today's.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub pattern_cost: Option<f64>,
    /// Why it is no fair answer however cheap it is: rooms, design day or hot water that it leaves cold, in words; absent where all
    /// are kept warm. Above stated bounds only; findings tell every hour.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub leaves_cold: Option<String>,
    /// The design point.
    pub design: DesignAnswer,
    /// The room table's verdict, where there is one.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub rooms: Option<RoomsAnswer>,
    /// The hot-water store, where there is one.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub store: Option<StoreAnswer>,
    /// Starts of the compressor.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub starts: Option<f64>,
    /// Yearly cost.
    pub cost: f64,
    /// Energy of it, before tax that is added.
    pub cost_energy: f64,
    /// Standing and demand charges of it, before tax that is added.
    pub cost_standing: f64,
    /// Tax of it that is added; absent where the rates hold the tax already.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub cost_tax: Option<f64>,
    /// Greenhouse gas, CO2 equivalent.
    pub carbon_kg: f64,
    /// Greenhouse gas of refrigerant that escapes, CO2 equivalent a year, beside that of the energy; absent where the charge is not given.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub refrigerant_kg: Option<f64>,
    /// Today's cost less this; absent for today's system.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub saving: Option<f64>,
    /// Today's carbon less this; absent for today's system.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub carbon_saving_kg: Option<f64>,
    /// What it costs to put in.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub capital: Option<f64>,
    /// The same part by part, where it is given so.
    #[serde(skip_serializing_if = "BTreeMap::is_empty")]
    pub capital_parts: BTreeMap<String, f64>,
    /// Which year of a buried loop's life the figures are of, and what its first one comes to.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub ground: Option<GroundShown>,
    /// January to December of a mean year.
    pub monthly: Vec<MonthAnswer>,
    /// Each year of the weather.
    pub by_year: Vec<YearAnswer>,
    /// How far they lie apart; absent for one year.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub year_spread: Option<YearSpread>,
    /// What shifting does, where the system shifts.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub shifting: Option<ShiftingAnswer>,
    /// What its meters should read, to compare with after installation.
    pub meters: Vec<MeterAnswer>,
    /// Its bills by period, when they were asked for.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub bills: Option<Vec<BillAnswer>>,
}

/// A buried loop in the estimate: the year of its life that every figure is of, beside its first.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct GroundShown {
    /// Year of the loop's life, from 1.
    pub shown_year: u32,
    /// Lowest temperature entering the machine in it.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub lowest_brine_c: Option<f64>,
    /// Hours in which the machine stood because its source was outside its limits.
    pub hours_stopped: f64,
    /// Hours in which it was turned down so that the brine would not fall below its limit.
    pub hours_turned_down: f64,
    /// Cost in the first year of its life.
    pub first_year_cost: f64,
    /// Seasonal performance factor with all auxiliaries in the first year.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub first_year_spf_h4: Option<f64>,
    /// Lowest temperature entering the machine in the first year.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub first_year_lowest_brine_c: Option<f64>,
}

/// One month of a mean year.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct MonthAnswer {
    /// Heat to rooms and hot water.
    pub heat_kwh: f64,
    /// Electricity.
    pub electricity_kwh: f64,
    /// Fuel.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub fuel_kwh: Option<f64>,
    /// Cost.
    pub cost: f64,
}

/// What one lever would have to be.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct LeverAnswer {
    /// The quantity.
    pub lever: String,
    /// Its unit.
    pub unit: String,
    /// What the choice and today's system are compared by.
    pub measure: String,
    /// Where it stands.
    pub now: f64,
    /// Values at which the choice costs what today's system costs; empty when there is none in the range.
    pub values: Vec<f64>,
    /// The range that was looked at.
    pub between: [f64; 2],
    /// Each value in words: "electricity 4 % cheaper".
    pub conditions: Vec<String>,
    /// What holds beside each value: "cheaper below that".
    pub sides: Vec<String>,
    /// How it stays over the whole range where there is no such value: "dearer"; absent where there is one.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub stays: Option<String>,
    /// The same as a sentence.
    pub sentence: String,
}

/// Something that was assumed.
#[derive(Debug, Clone, PartialEq, Eq, Serialize)]
pub struct Assumption {
    /// What.
    pub name: String,
    /// How much.
    pub value: String,
    /// Where it is from.
    pub from: String,
}
