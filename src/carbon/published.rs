//! Published sets of factors. Values marked \[from memory\] were not read in the document for this work.

use super::{Course, Factor, Factors, Scope};
use crate::problem::Place;
use crate::units::Fuel;

/// A published set.
pub struct Published {
    /// The name as written in files.
    pub name: &'static str,
    /// The publication.
    pub source: &'static str,
    scope: Scope,
    values: &'static [(Fuel, Value, &'static str)],
}

/// A value of a published set, kg CO2e per kilowatt-hour, gross for fuels.
enum Value {
    Constant(f64),
    Monthly([f64; 12]),
}

use Value::{Constant, Monthly};

/// From memory, not read for this work.
const FROM_MEMORY: &str = " [from memory]";

/// UK fuels at the flue: UK government conversion factors for company reporting 2025, gross calorific value.
const UK_FUELS: [(Fuel, Value, &str); 4] = [
    (Fuel::Gas, Constant(0.18296), ""),
    (Fuel::HeatingOil, Constant(0.24677), FROM_MEMORY),
    (Fuel::Lpg, Constant(0.2145), FROM_MEMORY),
    // Methane and nitrous oxide only: the carbon of the wood itself stands outside the scopes.
    (
        Fuel::Pellets,
        Constant(0.0113),
        " without the wood's own carbon [from memory]",
    ),
];

/// Every published set; the first is the default.
pub static PUBLISHED: &[Published] = {
    let [gas, oil, lpg, pellets] = UK_FUELS;
    let [gas_2, oil_2, lpg_2, pellets_2] = UK_FUELS;
    &[
        Published {
            name: "uk-2025",
            source: "UK government conversion factors 2025",
            scope: Scope::BurningAtTheMeter,
            values: &[
                // Generation 0.177 and, from memory, 0.01853 for transmission and distribution.
                (
                    Fuel::Electricity,
                    Constant(0.177 + 0.01853),
                    ": generation 0.177, grid losses 0.01853 [from memory]",
                ),
                gas,
                oil,
                lpg,
                pellets,
            ],
        },
        Published {
            name: "uk-2025-generation",
            source: "UK government conversion factors 2025",
            scope: Scope::Burning,
            values: &[
                (Fuel::Electricity, Constant(0.177), ": generation"),
                gas_2,
                oil_2,
                lpg_2,
                pellets_2,
            ],
        },
        Published {
            name: "sap-10.2",
            source: "SAP 10.2, tables 12 and 12d",
            scope: Scope::WithUpstream,
            values: &[
                // July and midwinter as published; the months between from memory.
                (
                    Fuel::Electricity,
                    Monthly([
                        0.163, 0.160, 0.153, 0.143, 0.132, 0.120, 0.111, 0.112, 0.122, 0.136,
                        0.151, 0.163,
                    ]),
                    ": by month, July and midwinter published, the others [from memory]",
                ),
                (Fuel::Gas, Constant(0.210), ""),
                (Fuel::HeatingOil, Constant(0.298), FROM_MEMORY),
                (Fuel::Lpg, Constant(0.241), FROM_MEMORY),
                (Fuel::Pellets, Constant(0.053), FROM_MEMORY),
            ],
        },
        Published {
            name: "eu-2023",
            source: "European Environment Agency, EU-27 electricity 2023; IPCC Guidelines 2006 for fuels",
            scope: Scope::Burning,
            values: &[
                (Fuel::Electricity, Constant(0.210), ": generation"),
                // IPCC defaults per net energy: gas 56.1, gas oil 74.1, LPG 63.1 kg/GJ; times 0.0036 and net/gross.
                (Fuel::Gas, Constant(56.1 * 0.0036 * 0.901), FROM_MEMORY),
                (
                    Fuel::HeatingOil,
                    Constant(74.1 * 0.0036 * 0.95),
                    FROM_MEMORY,
                ),
                (Fuel::Lpg, Constant(63.1 * 0.0036 * 0.921), FROM_MEMORY),
            ],
        },
    ]
};

impl Published {
    /// The set of a name.
    pub fn of(name: &str) -> Option<&'static Self> {
        PUBLISHED.iter().find(|set| set.name == name)
    }

    /// The default set.
    pub fn default_set() -> &'static Self {
        &PUBLISHED[0]
    }

    /// What it counts.
    pub fn scope(&self) -> Scope {
        self.scope
    }

    /// Its factors.
    pub fn factors(&self) -> Factors {
        let factor = |(fuel, value, note): &(Fuel, Value, &str)| Factor {
            fuel: *fuel,
            course: match value {
                Constant(factor) => Course::Constant(*factor),
                Monthly(months) => Course::Monthly(*months),
            },
            scope: self.scope,
            source: format!("{}{note}", self.source),
            place: Place::field(format!("carbon set {}", self.name)),
        };
        Factors {
            scope: self.scope,
            factors: self.values.iter().map(factor).collect(),
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn constant(set: &str, fuel: Fuel) -> f64 {
        match Published::of(set)
            .unwrap()
            .factors()
            .of(fuel)
            .unwrap()
            .course
        {
            Course::Constant(factor) => factor,
            _ => f64::NAN,
        }
    }

    /// Two publications that count the same must agree: burning natural gas is chemistry. UK 0.18296 against the
    /// IPCC default, within the spread of gas qualities.
    #[test]
    fn burning_gas_agrees_between_publications() {
        let (uk, ipcc) = (
            constant("uk-2025", Fuel::Gas),
            constant("eu-2023", Fuel::Gas),
        );
        assert!((uk / ipcc - 1.0).abs() < 0.01, "{uk} {ipcc}");
        let (uk, ipcc) = (
            constant("uk-2025", Fuel::Lpg),
            constant("eu-2023", Fuel::Lpg),
        );
        assert!((uk / ipcc - 1.0).abs() < 0.03, "{uk} {ipcc}");
        let (uk, ipcc) = (
            constant("uk-2025", Fuel::HeatingOil),
            constant("eu-2023", Fuel::HeatingOil),
        );
        assert!((uk / ipcc - 1.0).abs() < 0.03, "{uk} {ipcc}");
    }

    /// Counting more can only make a factor larger.
    #[test]
    fn wider_scopes_hold_more() {
        for fuel in [Fuel::Gas, Fuel::HeatingOil, Fuel::Lpg, Fuel::Pellets] {
            assert!(
                constant("sap-10.2", fuel) > constant("uk-2025", fuel),
                "{fuel}"
            );
        }
        assert!(
            constant("uk-2025", Fuel::Electricity)
                > constant("uk-2025-generation", Fuel::Electricity)
        );
    }

    #[test]
    fn every_set_is_one_scope_and_inside_the_bound() {
        for set in PUBLISHED {
            let factors = set.factors();
            assert!(Factors::new(factors.factors.clone()).is_ok());
            for factor in factors.iter() {
                let values = match &factor.course {
                    Course::Constant(factor) => vec![*factor],
                    Course::Monthly(months) => months.to_vec(),
                    Course::Hourly { .. } => vec![],
                };
                assert!(!values.is_empty());
                for value in values {
                    assert!(crate::bounds::CARBON_KG_PER_KWH.holds(value) && value > 0.0);
                }
            }
        }
    }
}
