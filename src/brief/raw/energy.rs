//! Energy as it is written: tariffs, carbon, and what the household uses and makes beside its heating.

use schemars::JsonSchema;
use serde::Deserialize;

use crate::brief::columns::{ByMonth, DayShape, Stamps};
use crate::document::{Leaf, Section};
use crate::units::{CarbonFactor, Energy};

/// Tariffs and carbon.
#[derive(Debug, Deserialize, JsonSchema)]
pub(in crate::brief) struct Energies {
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
pub(in crate::brief) struct HourlyCarbon {
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
pub(in crate::brief) struct HouseholdTable {
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
