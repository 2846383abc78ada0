//! The brief as it is written: flat tables of leaves. Doc comments here are the text of the published schema.

mod energy;
mod home;
mod system;

pub(super) use energy::{Energies, HourlyCarbon, HouseholdTable};
pub(super) use home::{
    BillsTable, EmitterTable, GroupTable, Home, HotWaterTable, PatternTable, RoomTable, StoreVolume,
};
pub(super) use system::{BoilerTable, ShiftingTable, SystemKind, SystemTable};

use schemars::JsonSchema;
use serde::Deserialize;

use super::lifetime::LifetimeTable;
use super::odds::OddsTable;
use super::weather_table::WeatherTable;
use crate::document::{Leaf, Section, Word};
use crate::locale::{DateOrder, Paper};

/// A home, its weather, its energy, what heats it today and the choices.
#[derive(Debug, Deserialize, JsonSchema)]
pub(super) struct Brief {
    /// The home.
    pub home: Option<Section<Home>>,
    /// The hourly weather.
    pub weather: Option<Section<WeatherTable>>,
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
