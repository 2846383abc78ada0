//! Leaves that are more than a quantity or a word: set-backs, lines, months, sources, parts.

use schemars::{Schema, json_schema};
use toml::Value;

use crate::document::{LeafValue, Word};
use crate::home::TappingProfile;
use crate::units::{HeatLossCoefficient, Temperature, UnitProblem, parse};

pub(super) fn refuse(found: impl Into<String>, allowed: &str, remedy: &str) -> UnitProblem {
    UnitProblem {
        found: found.into(),
        allowed: allowed.to_owned(),
        remedy: remedy.to_owned(),
    }
}

/// A text or a list of texts.
pub(super) fn texts<'a>(
    value: &'a Value,
    allowed: &str,
    remedy: &str,
) -> Result<Vec<&'a str>, UnitProblem> {
    let wrong = || refuse(value.to_string(), allowed, remedy);
    match value {
        Value::String(text) => Ok(vec![text]),
        Value::Array(items) => items
            .iter()
            .map(|item| item.as_str().ok_or_else(wrong))
            .collect(),
        _ => Err(wrong()),
    }
}

/// The set point between heated spells, or that nothing is asked for there.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) enum SetBack {
    /// Only frost is kept out.
    Off,
    /// A set point, °C.
    To(f64),
}

impl LeafValue for SetBack {
    fn read(value: &Value) -> Result<Self, UnitProblem> {
        if value.as_str() == Some("off") {
            return Ok(Self::Off);
        }
        Temperature::read(value)
            .map(|set_point| Self::To(set_point.c()))
            .map_err(|mut problem| {
                problem.allowed.push_str(", or \"off\"");
                problem
            })
    }

    fn schema() -> Schema {
        json_schema!({ "type": "string", "examples": ["16 °C", "off"] })
    }
}

/// A compensation line: two points of outdoor and flow temperature, °C.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) struct Line {
    pub cold: (f64, f64),
    pub mild: (f64, f64),
}

impl LeafValue for Line {
    fn read(value: &Value) -> Result<Self, UnitProblem> {
        const ALLOWED: &str =
            "two points of outdoor and flow temperature, the flow falling as it grows milder";
        const REMEDY: &str = "write for example [\"-3 °C / 50 °C\", \"15 °C / 30 °C\"]";
        let point = |text: &str| -> Result<(f64, f64), UnitProblem> {
            let (outdoor, flow) = text
                .split_once('/')
                .ok_or_else(|| refuse(format!("\"{text}\""), ALLOWED, REMEDY))?;
            Ok((
                parse::<Temperature>(outdoor)?.c(),
                parse::<Temperature>(flow)?.c(),
            ))
        };
        let mut points = texts(value, ALLOWED, REMEDY)?
            .into_iter()
            .map(point)
            .collect::<Result<Vec<_>, _>>()?;
        points.sort_by(|a, b| a.0.total_cmp(&b.0));
        match points.as_slice() {
            [cold, mild] if cold.0 < mild.0 && cold.1 >= mild.1 => Ok(Self {
                cold: *cold,
                mild: *mild,
            }),
            _ => Err(refuse(value.to_string(), ALLOWED, REMEDY)),
        }
    }

    fn schema() -> Schema {
        json_schema!({
            "type": "array", "items": { "type": "string" }, "minItems": 2, "maxItems": 2,
            "examples": [["-3 °C / 50 °C", "15 °C / 30 °C"]]
        })
    }
}

/// Cold water: one temperature or twelve, January first, °C.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) struct ColdWater(pub [f64; 12]);

impl LeafValue for ColdWater {
    fn read(value: &Value) -> Result<Self, UnitProblem> {
        let items = match value {
            Value::Array(items) => items.iter().collect(),
            single => vec![single],
        };
        let read = items
            .into_iter()
            .map(|item| Temperature::read(item).map(Temperature::c));
        let temperatures = read.collect::<Result<Vec<_>, _>>()?;
        match temperatures.as_slice() {
            [all_year] => Ok(Self([*all_year; 12])),
            months => months.try_into().map(Self).map_err(|_| {
                refuse(
                    format!("{} temperatures", months.len()),
                    "one temperature or twelve, January first",
                    "write for example \"10 °C\"",
                )
            }),
        }
    }

    fn schema() -> Schema {
        json_schema!({
            "anyOf": [
                { "type": "string" },
                { "type": "array", "items": { "type": "string" }, "minItems": 12, "maxItems": 12 }
            ],
            "examples": ["10 °C"]
        })
    }
}

/// Where the heat-loss coefficient comes from.
#[derive(Debug, Clone, PartialEq)]
pub(super) enum HeatLossSource {
    /// It is stated.
    Stated(HeatLossCoefficient),
    /// A file of meter readings.
    Bills(String),
}

impl LeafValue for HeatLossSource {
    fn read(value: &Value) -> Result<Self, UnitProblem> {
        if let Value::Table(table) = value {
            return match (table.get("bills").and_then(Value::as_str), table.len()) {
                (Some(path), 1) => Ok(Self::Bills(path.to_owned())),
                _ => Err(refuse(
                    value.to_string(),
                    "a coefficient such as \"212 W/K\", or a file of meter readings",
                    "write heat_loss = { bills = \"meter-readings.csv\" }",
                )),
            };
        }
        HeatLossCoefficient::read(value).map(Self::Stated)
    }

    fn schema() -> Schema {
        json_schema!({
            "anyOf": [
                { "type": "string", "examples": ["212 W/K"] },
                { "type": "object", "properties": { "bills": { "type": "string" } } }
            ]
        })
    }
}

/// What a choice costs to put in: one amount, or one a part.
#[derive(Debug, Clone, PartialEq, Eq)]
pub(super) enum Capital {
    /// All of it.
    Whole(String),
    /// Part by part.
    Parts(Vec<(String, String)>),
}

impl LeafValue for Capital {
    fn read(value: &Value) -> Result<Self, UnitProblem> {
        const ALLOWED: &str = "an amount of money, or one for each part";
        const REMEDY: &str =
            "write for example { machine = \"8200 GBP\", radiators = \"1400 GBP\" }";
        match value {
            Value::String(text) => Ok(Self::Whole(text.clone())),
            Value::Table(table) if !table.is_empty() => {
                let part = |(name, amount): (&String, &Value)| match amount.as_str() {
                    Some(amount) => Ok((name.replace('_', " "), amount.to_owned())),
                    None => Err(refuse(format!("{name} = {amount}"), ALLOWED, REMEDY)),
                };
                table
                    .iter()
                    .map(part)
                    .collect::<Result<_, _>>()
                    .map(Self::Parts)
            }
            _ => Err(refuse(value.to_string(), ALLOWED, REMEDY)),
        }
    }

    fn schema() -> Schema {
        json_schema!({
            "anyOf": [
                { "type": "string" },
                { "type": "object", "additionalProperties": { "type": "string" } }
            ],
            "examples": ["9800 GBP", { "machine": "8200 GBP", "radiators": "1400 GBP" }]
        })
    }
}

/// Who does a hygiene cycle.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(super) enum HygieneBy {
    /// Nobody.
    None,
    /// The machine as far as it reaches, the immersion heater beyond.
    Machine,
    /// The immersion heater above the set point.
    Immersion,
}

impl Word for HygieneBy {
    const NAME: &'static str = "who does the weekly hygiene cycle";
    const WORDS: &'static [(&'static str, Self)] = &[
        ("none", Self::None),
        ("machine", Self::Machine),
        ("immersion", Self::Immersion),
    ];
}

impl Word for TappingProfile {
    const NAME: &'static str = "a tapping profile";
    const WORDS: &'static [(&'static str, Self)] =
        &[("m", Self::M), ("l", Self::L), ("xl", Self::Xl)];
}
