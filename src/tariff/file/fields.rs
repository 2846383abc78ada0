//! What a tariff file may hold: flat structs whose leaves know their line.

use chrono::NaiveDate;
use schemars::{JsonSchema, Schema, json_schema};
use serde::Deserialize;
use toml::Value;

use crate::document::{Leaf, LeafValue, Section, Word};
use crate::series::Stamp;
use crate::tariff::{Metering, Span};
use crate::units::{CalorificBasis, Fuel, Share, UnitProblem};

/// A tariff: what one meter's energy costs. Everything that gives a price per unit adds up.
#[derive(Debug, Deserialize, JsonSchema)]
pub struct TariffFields {
    /// What people call it.
    pub label: Option<Leaf<String>>,
    /// What it sells.
    pub fuel: Option<Leaf<(Fuel,)>>,
    /// ISO 4217 code of the currency.
    pub currency: Option<Leaf<String>>,
    /// Clock that bands follow; the home's when left out.
    pub time_zone: Option<Leaf<String>>,
    /// Whether the meter counts the whole home or the heat pump alone; the home when left out.
    pub metering: Option<Leaf<(Metering,)>>,
    /// How long one bill is; a year when left out.
    pub billing: Option<Leaf<(Span,)>>,
    /// Days that count as Sundays: "25 Dec" every year, "2026-04-03" once.
    pub holidays: Option<Leaf<Vec<String>>>,
    /// Energy in a unit of volume or mass, such as "39.3 MJ/m³".
    pub calorific_value: Option<Leaf<String>>,
    /// Whether energy of this fuel is counted gross or net; must be said for fuels that are burnt.
    pub calorific_basis: Option<Leaf<(CalorificBasis,)>>,
    /// What metered cubic metres are multiplied by to be those of the calorific value; 1 when left out.
    pub volume_correction: Option<Leaf<f64>>,
    /// First day of these prices; hours before it are priced by them too.
    pub valid_from: Option<Leaf<Date>>,
    /// Whether rates and charges already hold the tax.
    pub rates_include_tax: Option<Leaf<bool>>,
    /// The tax.
    pub tax: Option<Section<TaxFields>>,
    /// Charge for being connected, such as "57.21 p/day".
    pub standing: Option<Leaf<String>>,
    /// Price paid for energy fed back.
    pub export: Option<Leaf<String>>,
    /// Charge for the highest hour of a month.
    pub demand: Option<Section<DemandFields>>,
    /// Prices by the clock.
    #[serde(default)]
    pub band: Vec<Section<BandFields>>,
    /// Prices by the amount used.
    #[serde(default)]
    pub step: Vec<Section<StepFields>>,
    /// Prices by the hour.
    pub hourly: Option<Section<HourlyFields>>,
    /// Prices from a later date on; what one does not say stays as it was.
    #[serde(default)]
    pub later: Vec<Section<LaterFields>>,
}

/// Prices from a later date on.
#[derive(Debug, Deserialize, JsonSchema)]
pub struct LaterFields {
    /// First day of these prices.
    pub valid_from: Option<Leaf<Date>>,
    /// Whether rates and charges already hold the tax.
    pub rates_include_tax: Option<Leaf<bool>>,
    /// The tax.
    pub tax: Option<Section<TaxFields>>,
    /// Charge for being connected.
    pub standing: Option<Leaf<String>>,
    /// Price paid for energy fed back.
    pub export: Option<Leaf<String>>,
    /// Charge for the highest hour of a month.
    pub demand: Option<Section<DemandFields>>,
    /// Prices by the clock, all of them.
    #[serde(default)]
    pub band: Vec<Section<BandFields>>,
    /// Prices by the amount used, all of them.
    #[serde(default)]
    pub step: Vec<Section<StepFields>>,
    /// Prices by the hour.
    pub hourly: Option<Section<HourlyFields>>,
}

/// A price at certain times.
#[derive(Debug, Deserialize, JsonSchema)]
pub struct BandFields {
    /// What the bill calls it; bands of one label and rate share a line.
    pub label: Option<Leaf<String>>,
    /// Clock time it begins, "00:00" when left out.
    pub from: Option<Leaf<String>>,
    /// Clock time it ends, "24:00" when left out.
    pub to: Option<Leaf<String>>,
    /// "weekdays", "weekends" or names of days; every day when left out.
    pub days: Option<Leaf<String>>,
    /// Part of the year such as "1 Nov to 31 Mar"; all of it when left out.
    pub season: Option<Leaf<String>>,
    /// Price such as "24.67 p/kWh".
    pub rate: Option<Leaf<String>>,
}

/// A price up to an amount.
#[derive(Debug, Deserialize, JsonSchema)]
pub struct StepFields {
    /// What the bill calls it.
    pub label: Option<Leaf<String>>,
    /// Amount up to which it holds, such as "600 kWh"; the last step has none.
    pub up_to: Option<Leaf<String>>,
    /// Period after which counting starts again; a month when left out, the same in all steps.
    pub per: Option<Leaf<(Span,)>>,
    /// Price such as "13.2 ¢/kWh".
    pub rate: Option<Leaf<String>>,
}

/// A charge for the highest hour of a month.
#[derive(Debug, Deserialize, JsonSchema)]
pub struct DemandFields {
    /// Charge such as "9.20 USD/kW", each month.
    pub rate: Option<Leaf<String>>,
    /// Clock time from which hours count, "00:00" when left out.
    pub from: Option<Leaf<String>>,
    /// Clock time to which hours count, "24:00" when left out.
    pub to: Option<Leaf<String>>,
    /// Days that count; every day when left out.
    pub days: Option<Leaf<String>>,
    /// Part of the year that counts; all of it when left out.
    pub season: Option<Leaf<String>>,
}

/// A tax.
#[derive(Debug, Deserialize, JsonSchema)]
pub struct TaxFields {
    /// Share of the price without it, such as "5 %".
    pub share: Option<Leaf<Share>>,
    /// What it is taken of: "energy", "standing", "demand"; all when left out.
    pub covers: Option<Leaf<Vec<String>>>,
}

/// Prices by the hour, in a file beside the tariff.
#[derive(Debug, Deserialize, JsonSchema)]
pub struct HourlyFields {
    /// CSV file, relative to the tariff.
    pub file: Option<Leaf<String>>,
    /// Header of the column of prices; may be left out when there is only one beside "time".
    pub column: Option<Leaf<String>>,
    /// Unit of the prices, such as "EUR/MWh".
    pub unit: Option<Leaf<String>>,
    /// Whether a time marks the beginning or the end of its hour; the beginning when left out.
    pub stamps: Option<Leaf<(Stamp,)>>,
    /// Clock of times without an offset; UTC when left out.
    pub time_zone: Option<Leaf<String>>,
    /// Use the prices of the same day and hour for any year.
    pub every_year: Option<Leaf<bool>>,
}

/// A date, written as one or in quotes.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub struct Date(pub NaiveDate);

impl LeafValue for Date {
    fn read(value: &Value) -> Result<Self, UnitProblem> {
        let text = match value {
            Value::String(text) => text.clone(),
            other => other.to_string(),
        };
        text.parse().map(Self).map_err(|_| UnitProblem {
            found: format!("{value}"),
            allowed: "a date".to_owned(),
            remedy: "write for example \"2026-04-01\"".to_owned(),
        })
    }

    fn schema() -> Schema {
        json_schema!({ "type": "string", "format": "date" })
    }
}

impl Word for Fuel {
    const NAME: &'static str = "a fuel";
    const WORDS: &'static [(&'static str, Self)] = &[
        ("electricity", Self::Electricity),
        ("gas", Self::Gas),
        ("heating-oil", Self::HeatingOil),
        ("lpg", Self::Lpg),
        ("pellets", Self::Pellets),
    ];
}

impl Word for CalorificBasis {
    const NAME: &'static str = "a basis of calorific values";
    const WORDS: &'static [(&'static str, Self)] = &[("gross", Self::Gross), ("net", Self::Net)];
}

impl Word for Metering {
    const NAME: &'static str = "what the meter counts";
    const WORDS: &'static [(&'static str, Self)] =
        &[("home", Self::Home), ("heat-pump", Self::HeatPump)];
}

impl Word for Span {
    const NAME: &'static str = "a period";
    const WORDS: &'static [(&'static str, Self)] = &[
        ("month", Self::Month),
        ("quarter", Self::Quarter),
        ("year", Self::Year),
    ];
}

impl Word for Stamp {
    const NAME: &'static str = "what times mark";
    const WORDS: &'static [(&'static str, Self)] =
        &[("beginning", Self::Beginning), ("ending", Self::Ending)];
}
