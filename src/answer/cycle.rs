//! The answer of the `cycle` command.

use serde::Serialize;

use crate::heatpump::cycle::Cycle;
use crate::problem::Finding;
use crate::refrigerant::{Refrigerant, StatePoint};

/// A refrigerant cycle per kilogram and, with a mass flow, in kilowatts.
#[derive(Clone, Debug, PartialEq, Serialize)]
pub struct CycleAnswer {
    /// The fluid.
    pub refrigerant: Refrigerant,
    /// Suction, discharge, liquid and evaporator inlet, in this order.
    pub states: Vec<StateAnswer>,
    /// Heat taken up in the evaporator.
    pub evaporator_kj_per_kg: f64,
    /// Heat given off in the condenser.
    pub condenser_kj_per_kg: f64,
    /// Work of the compressor.
    pub work_kj_per_kg: f64,
    /// Heat given off over work.
    pub cop_heating: f64,
    /// COP of a reversible machine between evaporating and condensing temperature.
    pub cop_carnot: f64,
    /// Condensing over evaporating pressure.
    pub pressure_ratio: f64,
    /// Temperature at the compressor's outlet.
    pub discharge_c: f64,
    /// Heat taken up in the evaporator, with a mass flow.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub evaporator_kw: Option<f64>,
    /// Heat given off in the condenser, with a mass flow.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub condenser_kw: Option<f64>,
    /// Power of the compressor's shaft, with a mass flow.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub work_kw: Option<f64>,
    /// Cautions and what a real machine would not stand.
    pub findings: Vec<Finding>,
}

/// One state point.
#[derive(Clone, Debug, PartialEq, Serialize)]
pub struct StateAnswer {
    /// Which point of the cycle it is.
    pub point: String,
    /// °C
    pub temperature_c: f64,
    /// kPa absolute
    pub pressure_kpa: f64,
    /// 200 kJ/kg for saturated liquid at 0 °C
    pub enthalpy_kj_per_kg: f64,
    /// 1 kJ/kgK for saturated liquid at 0 °C
    pub entropy_kj_per_kg_k: f64,
    /// kg/m³
    pub density_kg_per_m3: f64,
    /// Mass fraction of vapour; absent outside the two-phase region.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub quality: Option<f64>,
}

impl StateAnswer {
    fn new(point: String, state: &StatePoint) -> Self {
        StateAnswer {
            point,
            temperature_c: state.temperature_c,
            pressure_kpa: state.pressure_kpa,
            enthalpy_kj_per_kg: state.enthalpy_kj_per_kg,
            entropy_kj_per_kg_k: state.entropy_kj_per_kg_k,
            density_kg_per_m3: state.density_kg_per_m3,
            quality: state.quality,
        }
    }
}

impl From<&Cycle> for CycleAnswer {
    fn from(cycle: &Cycle) -> Self {
        CycleAnswer {
            refrigerant: cycle.refrigerant,
            states: cycle
                .points()
                .map(|(point, state)| StateAnswer::new(point.to_string(), state))
                .to_vec(),
            evaporator_kj_per_kg: cycle.evaporator_kj_per_kg(),
            condenser_kj_per_kg: cycle.condenser_kj_per_kg(),
            work_kj_per_kg: cycle.work_kj_per_kg(),
            cop_heating: cycle.cop_heating(),
            cop_carnot: cycle.cop_carnot(),
            pressure_ratio: cycle.pressure_ratio(),
            discharge_c: cycle.discharge.temperature_c,
            evaporator_kw: cycle.evaporator_kw(),
            condenser_kw: cycle.condenser_kw(),
            work_kw: cycle.work_kw(),
            findings: cycle.findings(),
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::heatpump::cycle::CycleInputs;
    use crate::refrigerant::Equation;

    fn json(mass_flow_kg_per_s: Option<f64>) -> serde_json::Value {
        let cycle = Cycle::solve(
            &Equation::new(Refrigerant::R290).unwrap(),
            CycleInputs {
                evaporating_c: -5.0,
                condensing_c: 45.0,
                superheat_k: 5.0,
                subcooling_k: 3.0,
                isentropic_efficiency: 0.7,
                mass_flow_kg_per_s,
            },
        )
        .unwrap();
        serde_json::to_value(CycleAnswer::from(&cycle)).unwrap()
    }

    #[test]
    fn what_is_not_known_is_absent() {
        let without = json(None);
        for name in ["evaporator_kw", "condenser_kw", "work_kw"] {
            assert!(without.get(name).is_none(), "{name}");
            assert!(json(Some(0.02))[name].as_f64().unwrap() > 0.0, "{name}");
        }
        let states = without["states"].as_array().unwrap();
        let quality: Vec<_> = states
            .iter()
            .map(|state| state.get("quality").is_some())
            .collect();
        assert_eq!(quality, [false, false, false, true]);
    }

    #[test]
    fn the_promised_names_are_there() {
        let answer = json(None);
        assert_eq!(answer["refrigerant"], "R290");
        for name in [
            "evaporator_kj_per_kg",
            "condenser_kj_per_kg",
            "work_kj_per_kg",
            "cop_heating",
            "cop_carnot",
            "pressure_ratio",
            "discharge_c",
        ] {
            assert!(answer[name].is_f64(), "{name}");
        }
        let points: Vec<_> = answer["states"]
            .as_array()
            .unwrap()
            .iter()
            .map(|state| state["point"].as_str().unwrap())
            .collect();
        assert_eq!(
            points,
            ["suction", "discharge", "liquid", "evaporator inlet"]
        );
        for name in [
            "temperature_c",
            "pressure_kpa",
            "enthalpy_kj_per_kg",
            "entropy_kj_per_kg_k",
            "density_kg_per_m3",
        ] {
            assert!(answer["states"][0][name].is_f64(), "{name}");
        }
    }
}
