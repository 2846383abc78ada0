//! Efficiency of fuel use, which means nothing before it is said on which calorific value.

use crate::fault::{self, Fault};
use schemars::{Schema, json_schema};
use toml::Value;

use crate::bounds;
use crate::document::LeafValue;
use crate::units::{UnitProblem, split_number};

/// Net over gross calorific value of methane: 0.901 (heats of formation, CoolProp 8.0.0).
pub const NET_PER_GROSS_METHANE: f64 = 0.901;

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

    /// From a fraction on net calorific value of natural gas.
    pub fn from_net(fraction: f64) -> Option<Self> {
        let net_per_gross = if fault::on(Fault::NetForGross) {
            1.0
        } else {
            NET_PER_GROSS_METHANE
        };
        Self::new(fraction * net_per_gross)
    }

    /// The fraction.
    pub fn fraction(self) -> f64 {
        self.0
    }
}

/// Written `"84 % gross"` or `"93 % net"`.
impl LeafValue for GrossEfficiency {
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
        let efficiency = match words.as_slice() {
            ["%", "gross"] | ["%gross"] => Self::new(percent / 100.0),
            ["%", "net"] | ["%net"] => Self::from_net(percent / 100.0),
            ["%"] => {
                return Err(refuse(&format!(
                    "write \"{percent} % gross\" or \"{percent} % net\": a sheet that shows more than 100 % is on net"
                )));
            }
            _ => return Err(refuse("write for example \"84 % gross\" or \"93 % net\"")),
        };
        efficiency.ok_or_else(|| {
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

    fn read(text: &str) -> Result<GrossEfficiency, UnitProblem> {
        GrossEfficiency::read(&Value::String(text.to_owned()))
    }

    /// By hand, net over gross of methane 0.901: 108 % net = 97.3 % gross.
    #[test]
    fn net_becomes_gross_and_more_than_all_is_refused() {
        assert!((read("108 % net").unwrap().fraction() - 0.973).abs() < 5e-4);
        assert!((read("84 % gross").unwrap().fraction() - 0.84).abs() < 1e-12);
        for text in ["108 % gross", "92 %", "0.92", "93", "x % net", "120 % net"] {
            assert!(read(text).is_err(), "{text}");
        }
    }
}
