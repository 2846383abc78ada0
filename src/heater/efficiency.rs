//! Efficiency of fuel use, which means nothing before it is said on which calorific value.

use crate::fault::{self, Fault};
use schemars::{Schema, json_schema};
use toml::Value;

use crate::bounds;
use crate::document::LeafValue;
use crate::units::{CalorificBasis, Fuel, UnitProblem, split_number};

/// Heat out per fuel in, on gross calorific value; 0.3 to 1.
#[derive(Debug, Clone, Copy, PartialEq, PartialOrd)]
pub struct GrossEfficiency(f64);

impl GrossEfficiency {
    /// From a fraction on gross calorific value; nothing outside 0.3 to 1, which no boiler reaches.
    pub fn new(fraction: f64) -> Option<Self> {
        bounds::GROSS_EFFICIENCY
            .holds(fraction)
            .then_some(Self(fraction))
    }

    /// The fraction.
    pub fn fraction(self) -> f64 {
        self.0
    }
}

/// An efficiency as a sheet states it, on the calorific value that it names.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct StatedEfficiency {
    fraction: f64,
    basis: CalorificBasis,
}

impl StatedEfficiency {
    /// On gross calorific value of the fuel that is burnt; nothing outside what a boiler reaches.
    pub fn of(self, fuel: Fuel) -> Option<GrossEfficiency> {
        let per_gross = match self.basis {
            CalorificBasis::Net if !fault::on(Fault::NetForGross) => fuel.net_over_gross(),
            CalorificBasis::Net | CalorificBasis::Gross => 1.0,
        };
        GrossEfficiency::new(self.fraction * per_gross)
    }
}

/// Written `"84 % gross"` or `"93 % net"`; what no fuel allows is refused here, the rest where the fuel is known.
impl LeafValue for StatedEfficiency {
    fn read(value: &Value) -> Result<Self, UnitProblem> {
        let refuse = |remedy: &str| UnitProblem {
            found: value.to_string(),
            allowed: "an efficiency that says its calorific value, at most 100 % gross".to_owned(),
            remedy: remedy.to_owned(),
        };
        let text = value
            .as_str()
            .ok_or_else(|| refuse("write for example \"84 % gross\""))?;
        let (percent, words) =
            split_number(text).ok_or_else(|| refuse("write for example \"84 % gross\""))?;
        let words: Vec<_> = words.split_whitespace().collect();
        let basis = match words.as_slice() {
            ["%", "gross"] | ["%gross"] => CalorificBasis::Gross,
            ["%", "net"] | ["%net"] => CalorificBasis::Net,
            ["%"] => {
                return Err(refuse(&format!(
                    "write \"{percent} % gross\" or \"{percent} % net\": a sheet that shows more than 100 % is on net"
                )));
            }
            _ => return Err(refuse("write for example \"84 % gross\" or \"93 % net\"")),
        };
        let stated = Self {
            fraction: percent / 100.0,
            basis,
        };
        let possible = Fuel::ALL
            .into_iter()
            .any(|fuel| fuel.is_burnt() && stated.of(fuel).is_some());
        possible.then_some(stated).ok_or_else(|| {
            refuse("above 100 % gross nothing burns; is the figure on net calorific value, or is it slipped?")
        })
    }

    fn schema() -> Schema {
        json_schema!({ "type": "string", "examples": ["84 % gross", "93 % net"] })
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn read(text: &str) -> Result<StatedEfficiency, UnitProblem> {
        StatedEfficiency::read(&Value::String(text.to_owned()))
    }

    /// By hand, net over gross of methane 0.901: 108 % net = 97.3 % gross. Of oil, 0.95: 93 % net = 88.4 % gross, and 108 % net
    /// would be more than all.
    #[test]
    fn net_becomes_gross_of_the_fuel_and_more_than_all_is_refused() {
        let of =
            |text: &str, fuel: Fuel| read(text).unwrap().of(fuel).map(GrossEfficiency::fraction);
        assert!((of("108 % net", Fuel::Gas).unwrap() - 0.973).abs() < 5e-4);
        assert!((of("93 % net", Fuel::HeatingOil).unwrap() - 0.8835).abs() < 5e-4);
        assert!(of("108 % net", Fuel::HeatingOil).is_none());
        assert!((of("84 % gross", Fuel::Gas).unwrap() - 0.84).abs() < 1e-12);
        for text in ["108 % gross", "92 %", "0.92", "93", "x % net", "120 % net"] {
            assert!(read(text).is_err(), "{text}");
        }
    }
}
