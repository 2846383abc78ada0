//! The weather table of a brief as it is written. Doc comments here are the text of the published schema.

use std::str::FromStr;

use schemars::{JsonSchema, Schema, json_schema};
use serde::Deserialize;
use toml::Value;

use super::leaves::{refuse, texts};
use crate::document::{Leaf, LeafValue};
use crate::units::{Duration, Length, TemperatureDifference, UnitProblem, parse};
use crate::weather::{
    Column, DateOrder, Delimiter, Encoding, PartColumns, StampMarks, TemperatureUnit, Zone,
};

/// The hourly weather. What a file does not say is detected, and what cannot be detected gets a default and a finding.
#[derive(Debug, Deserialize, JsonSchema)]
pub(super) struct WeatherTable {
    /// Hourly file, relative to the brief, or a list of files that follow each other.
    pub file: Option<Leaf<Files>>,
    /// Clock of stamps without an offset: "UTC", "-05:00" or "Europe/London".
    pub time_zone: Option<Leaf<Said<Zone>>>,
    /// Which end of its hour a stamp marks: "beginning" or "ending".
    pub stamps: Option<Leaf<Said<StampMarks>>>,
    /// Order of day and month where the year comes last: "day-first" or "month-first".
    pub date_order: Option<Leaf<Said<DateOrder>>>,
    /// Column of the time, or of the date when there is a clock_column; every column by heading or number from 1.
    pub time_column: Option<Leaf<Said<Column>>>,
    /// Column of the time of day.
    pub clock_column: Option<Leaf<Said<Column>>>,
    /// Columns of year, month, day, hour and perhaps minute, in place of time_column.
    pub part_columns: Option<Leaf<Parts>>,
    /// Column of the outdoor temperature.
    pub temperature_column: Option<Leaf<Said<Column>>>,
    /// Unit of the outdoor temperature: "°C", "°F", "K", "tenths of °C" or "tenths of °F".
    pub temperature_unit: Option<Leaf<Said<TemperatureUnit>>>,
    /// Column of the relative humidity.
    pub humidity_column: Option<Leaf<Said<Column>>>,
    /// Column of the dew point, used where there is no relative humidity.
    pub dew_point_column: Option<Leaf<Said<Column>>>,
    /// Column of the global radiation.
    pub radiation_column: Option<Leaf<Said<Column>>>,
    /// Column of the wind speed.
    pub wind_column: Option<Leaf<Said<Column>>>,
    /// Lines to pass over at the beginning.
    pub skip_lines: Option<Leaf<i64>>,
    /// What separates the fields: one character, or "tab".
    pub delimiter: Option<Leaf<Said<Delimiter>>>,
    /// Whether decimals are written with a comma.
    pub decimal_comma: Option<Leaf<bool>>,
    /// Encoding of the text by its name, such as "windows-1252".
    pub encoding: Option<Leaf<Said<Encoding>>>,
    /// A text or number that stands for a missing reading, or a list of them.
    pub missing: Option<Leaf<Markers>>,
    /// Longest gap that is filled from the same hours of the days around it; 24 h where nothing is said.
    pub longest_gap: Option<Leaf<Duration>>,
    /// Fill still longer gaps in the same way instead of refusing the file.
    pub fill_longer_gaps: Option<Leaf<bool>>,
    /// Calendar year that a typical year is placed on.
    pub nominal_year: Option<Leaf<i64>>,
    /// How much higher than the weather station the home lies; negative where it lies lower.
    pub higher: Option<Leaf<Length>>,
    /// By how much the air cools with height; 6.5 K/km where nothing is said.
    pub lapse_rate: Option<Leaf<LapseRate>>,
    /// Added to the outdoor temperature: one difference, or twelve, January first.
    pub offset: Option<Leaf<Offset>>,
}

/// A word that the weather room reads itself; a column may be a bare number.
#[derive(Debug, Clone, PartialEq, Eq)]
pub(super) struct Said<T>(pub T);

impl<T: FromStr<Err = String>> LeafValue for Said<T> {
    fn read(value: &Value) -> Result<Self, UnitProblem> {
        let text = match value {
            Value::String(text) => text.clone(),
            Value::Integer(number) => number.to_string(),
            other => return Err(refuse(other.to_string(), "a text in quotes", "")),
        };
        text.parse().map(Self).map_err(|allowed: String| {
            let allowed = allowed.strip_prefix("allowed: ").unwrap_or(&allowed);
            refuse(format!("\"{text}\""), allowed, "")
        })
    }

    fn schema() -> Schema {
        json_schema!({ "anyOf": [{ "type": "string" }, { "type": "integer" }] })
    }
}

/// One file or several.
#[derive(Debug, Clone, PartialEq, Eq)]
pub(super) struct Files(pub Vec<String>);

impl LeafValue for Files {
    fn read(value: &Value) -> Result<Self, UnitProblem> {
        const ALLOWED: &str = "the name of a file, or a list of names";
        const REMEDY: &str = "write \"2023.csv\" or [\"2022.csv\", \"2023.csv\"]";
        let names: Vec<String> = texts(value, ALLOWED, REMEDY)?
            .into_iter()
            .map(str::to_owned)
            .collect();
        if names.is_empty() || names.iter().any(|name| name.trim().is_empty()) {
            return Err(refuse(value.to_string(), ALLOWED, REMEDY));
        }
        Ok(Self(names))
    }

    fn schema() -> Schema {
        json_schema!({
            "anyOf": [{ "type": "string" }, { "type": "array", "items": { "type": "string" }, "minItems": 1 }],
            "examples": ["2023.csv", ["2022.csv", "2023.csv"]]
        })
    }
}

/// The columns of a time that is spread over several.
#[derive(Debug, Clone)]
pub(super) struct Parts(pub PartColumns);

impl LeafValue for Parts {
    fn read(value: &Value) -> Result<Self, UnitProblem> {
        let wrong = |allowed: &str| {
            refuse(
                value.to_string(),
                allowed,
                "write for example [\"year\", \"month\", \"day\", \"hour\"]",
            )
        };
        let items = value
            .as_array()
            .ok_or_else(|| wrong(PartColumns::ALLOWED))?;
        let columns = items
            .iter()
            .map(|item| Said::<Column>::read(item).map(|column| column.0))
            .collect::<Result<Vec<_>, _>>()?;
        PartColumns::of(&columns)
            .map(Self)
            .ok_or_else(|| wrong(PartColumns::ALLOWED))
    }

    fn schema() -> Schema {
        json_schema!({
            "type": "array", "minItems": 4, "maxItems": 5,
            "items": { "anyOf": [{ "type": "string" }, { "type": "integer" }] },
            "examples": [["year", "month", "day", "hour"]]
        })
    }
}

/// What stands for a missing reading.
#[derive(Debug, Clone, PartialEq, Eq)]
pub(super) struct Markers(pub Vec<String>);

impl LeafValue for Markers {
    fn read(value: &Value) -> Result<Self, UnitProblem> {
        let items = match value {
            Value::Array(items) => items.iter().collect(),
            single => vec![single],
        };
        let marker = |item: &Value| match item {
            Value::String(text) => Ok(text.clone()),
            Value::Integer(_) | Value::Float(_) => Ok(item.to_string()),
            _ => Err(refuse(
                value.to_string(),
                "a text or number that stands for a missing reading, or a list of them",
                "write for example [\"n/a\", -999]",
            )),
        };
        items
            .into_iter()
            .map(marker)
            .collect::<Result<_, _>>()
            .map(Self)
    }

    fn schema() -> Schema {
        let marker = json_schema!({ "anyOf": [{ "type": "string" }, { "type": "number" }] });
        json_schema!({
            "anyOf": [{ "type": "string" }, { "type": "number" }, { "type": "array", "items": marker }],
            "examples": [["n/a", -999]]
        })
    }
}

/// Fall of temperature with height, K/km.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) struct LapseRate(pub f64);

impl LeafValue for LapseRate {
    fn read(value: &Value) -> Result<Self, UnitProblem> {
        let number = value
            .as_str()
            .and_then(|text| text.trim().strip_suffix("K/km"))
            .and_then(|number| number.trim().parse().ok());
        number.map(Self).ok_or_else(|| {
            refuse(
                value.to_string(),
                "a fall of temperature with height in K/km",
                "write for example \"6.5 K/km\"",
            )
        })
    }

    fn schema() -> Schema {
        json_schema!({ "type": "string", "format": "quantity", "x-units": ["K/km"], "examples": ["6.5 K/km"] })
    }
}

/// What is added to the outdoor temperature, K.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) enum Offset {
    /// The same in every hour.
    Even(f64),
    /// By month, January first.
    Monthly([f64; 12]),
}

impl LeafValue for Offset {
    fn read(value: &Value) -> Result<Self, UnitProblem> {
        const ALLOWED: &str = "one temperature difference, or twelve, January first";
        const REMEDY: &str = "write for example \"1.5 K\"";
        let read = |text: &str| parse::<TemperatureDifference>(text).map(TemperatureDifference::k);
        let differences = texts(value, ALLOWED, REMEDY)?
            .into_iter()
            .map(read)
            .collect::<Result<Vec<_>, _>>()?;
        match differences.as_slice() {
            [k] if value.is_str() => Ok(Self::Even(*k)),
            months => months
                .try_into()
                .map(Self::Monthly)
                .map_err(|_| refuse(format!("{} differences", months.len()), ALLOWED, REMEDY)),
        }
    }

    fn schema() -> Schema {
        json_schema!({
            "anyOf": [
                { "type": "string" },
                { "type": "array", "items": { "type": "string" }, "minItems": 12, "maxItems": 12 }
            ],
            "examples": ["1.5 K"]
        })
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn value(text: &str) -> Value {
        let table: toml::Table = format!("x = {text}").parse().unwrap();
        table["x"].clone()
    }

    #[test]
    fn a_column_is_a_heading_or_a_number() {
        let column = |text: &str| Said::<Column>::read(&value(text)).map(|said| said.0);
        assert_eq!(
            column("\"air temp\"").unwrap(),
            Column::Named("air temp".to_owned())
        );
        assert_eq!(column("3").unwrap(), Column::Numbered(3));
        assert_eq!(column("\"3\"").unwrap(), Column::Numbered(3));
        assert!(column("0").is_err() && column("[1]").is_err());
    }

    #[test]
    fn lists_and_single_values_are_both_taken() {
        assert_eq!(Files::read(&value("\"a.csv\"")).unwrap().0, ["a.csv"]);
        assert_eq!(Files::read(&value("[\"a\", \"b\"]")).unwrap().0, ["a", "b"]);
        assert!(Files::read(&value("[]")).is_err() && Files::read(&value("[1]")).is_err());
        assert_eq!(Markers::read(&value("-999")).unwrap().0, ["-999"]);
        assert_eq!(
            Markers::read(&value("[\"n/a\", -99.9]")).unwrap().0,
            ["n/a", "-99.9"]
        );
        assert!(Markers::read(&value("[true]")).is_err());
        assert_eq!(
            Offset::read(&value("\"-1.5 K\"")).unwrap(),
            Offset::Even(-1.5)
        );
        let twelve = format!("[{}]", "\"1 K\", ".repeat(12));
        assert_eq!(
            Offset::read(&value(&twelve)).unwrap(),
            Offset::Monthly([1.0; 12])
        );
        assert!(Offset::read(&value("[\"1 K\"]")).is_err());
        assert_eq!(
            LapseRate::read(&value("\"6.5 K/km\"")).unwrap(),
            LapseRate(6.5)
        );
        assert!(LapseRate::read(&value("\"6.5\"")).is_err());
        assert!(Parts::read(&value("[\"y\", \"m\", \"d\"]")).is_err());
        assert!(
            Parts::read(&value("[1, 2, 3, 4, 5]"))
                .unwrap()
                .0
                .minute
                .is_some()
        );
    }
}
