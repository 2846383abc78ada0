//! Leaves of the household's account: words and lists of numbers.

use schemars::{Schema, json_schema};
use toml::Value;

use crate::bounds;
use crate::document::{LeafValue, Word};
use crate::plan::ShiftRule;
use crate::series::Stamp;
use crate::units::{CarbonFactor, Fuel, UnitProblem, parse};

/// Carbon of each month, January first, kg/kWh.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) struct ByMonth(pub [f64; 12]);

/// Parts of a day by clock hour, midnight first; they add up to 1.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) struct DayShape(pub [f64; 24]);

fn refuse(value: &Value, allowed: &str, remedy: String) -> UnitProblem {
    UnitProblem {
        found: match value {
            Value::Array(items) => format!("{} values", items.len()),
            other => other.to_string(),
        },
        allowed: allowed.to_owned(),
        remedy,
    }
}

impl LeafValue for ByMonth {
    fn read(value: &Value) -> Result<Self, UnitProblem> {
        const ALLOWED: &str = "twelve carbon factors with their unit, January first";
        let wrong = || {
            refuse(
                value,
                ALLOWED,
                "write [\"0.16 kg/kWh\", …], one for each month".to_owned(),
            )
        };
        let items = value.as_array().ok_or_else(wrong)?;
        let factors: Vec<f64> = items
            .iter()
            .map(|item| {
                let text = item.as_str().ok_or_else(wrong)?;
                let kg = parse::<CarbonFactor>(text)?.kg_per_kwh();
                if bounds::CARBON_KG_PER_KWH.holds(kg) {
                    Ok(kg)
                } else {
                    Err(refuse(
                        item,
                        &bounds::CARBON_KG_PER_KWH.words(),
                        "is the unit right?".to_owned(),
                    ))
                }
            })
            .collect::<Result<_, _>>()?;
        factors.try_into().map(Self).map_err(|_| wrong())
    }

    fn schema() -> Schema {
        json_schema!({ "type": "array", "items": { "type": "string" }, "minItems": 12, "maxItems": 12 })
    }
}

impl LeafValue for DayShape {
    fn read(value: &Value) -> Result<Self, UnitProblem> {
        const ALLOWED: &str = "24 parts of a day from 0, midnight first, not all 0";
        let wrong = || {
            refuse(
                value,
                ALLOWED,
                "write [0.5, 0.4, …], one for each hour of the clock".to_owned(),
            )
        };
        let number = |item: &Value| {
            let number = item
                .as_float()
                .or_else(|| item.as_integer().map(|whole| whole as f64));
            number.filter(|part| part.is_finite() && *part >= 0.0)
        };
        let items = value.as_array().ok_or_else(wrong)?;
        let parts: Option<Vec<f64>> = items.iter().map(number).collect();
        let parts: [f64; 24] = parts.ok_or_else(wrong)?.try_into().map_err(|_| wrong())?;
        let sum: f64 = parts.iter().sum();
        if sum > 0.0 && sum.is_finite() {
            Ok(Self(parts.map(|part| part / sum)))
        } else {
            Err(wrong())
        }
    }

    fn schema() -> Schema {
        json_schema!({ "type": "array", "items": { "type": "number" }, "minItems": 24, "maxItems": 24 })
    }
}

/// Which end of an hour a stamp marks, as a word.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(super) struct Stamps(pub Stamp);

impl Word for Stamps {
    const NAME: &'static str = "which end of its hour a stamp marks";
    const WORDS: &'static [(&'static str, Self)] = &[
        ("beginning", Self(Stamp::Beginning)),
        ("ending", Self(Stamp::Ending)),
    ];
}

/// What a boiler burns, as a word.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(super) struct BoilerFuel(pub Fuel);

impl Word for BoilerFuel {
    const NAME: &'static str = "a fuel";
    const WORDS: &'static [(&'static str, Self)] = &[
        ("gas", Self(Fuel::Gas)),
        ("heating-oil", Self(Fuel::HeatingOil)),
        ("lpg", Self(Fuel::Lpg)),
        ("pellets", Self(Fuel::Pellets)),
    ];
}

/// A hybrid's rule, as a word.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(super) enum RuleWord {
    Outdoor,
    Cost,
    Carbon,
}

impl Word for RuleWord {
    const NAME: &'static str = "a rule by which boiler and machine share the hours";
    const WORDS: &'static [(&'static str, Self)] = &[
        ("by-outdoor", Self::Outdoor),
        ("by-cost", Self::Cost),
        ("by-carbon", Self::Carbon),
    ];
}

impl Word for ShiftRule {
    const NAME: &'static str = "a way to choose the hours";
    const WORDS: &'static [(&'static str, Self)] =
        &[("timer", Self::Timer), ("best-day", Self::BestDay)];
}

#[cfg(test)]
mod tests {
    use super::*;

    fn value(text: &str) -> Value {
        let table: toml::Table = format!("x = {text}").parse().unwrap();
        table["x"].clone()
    }

    #[test]
    fn a_day_has_24_parts_that_make_one() {
        let shape = DayShape::read(&value(&format!("[{}]", "2, ".repeat(24)))).unwrap();
        assert!((shape.0.iter().sum::<f64>() - 1.0).abs() < 1e-12);
        for wrong in [
            "[1, 2]".to_owned(),
            "3".to_owned(),
            format!("[{}]", "0, ".repeat(24)),
            format!("[{}-1]", "1, ".repeat(23)),
        ] {
            assert!(DayShape::read(&value(&wrong)).is_err(), "{wrong}");
        }
    }

    #[test]
    fn a_year_has_12_factors_with_units() {
        let twelve = |text: &str| format!("[{}]", format!("\"{text}\", ").repeat(12));
        assert_eq!(
            ByMonth::read(&value(&twelve("200 g/kWh"))).unwrap().0,
            [0.2; 12]
        );
        for wrong in [
            "[\"0.2 kg/kWh\"]".to_owned(),
            twelve("0.2"),
            twelve("9 kg/kWh"),
        ] {
            assert!(ByMonth::read(&value(&wrong)).is_err(), "{wrong}");
        }
    }
}
