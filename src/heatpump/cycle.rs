//! The four-point vapour-compression cycle, exact.
//!
//! Suction, discharge, liquid, evaporator inlet: evaporation and condensation at constant pressure,
//! compression with a given isentropic efficiency, expansion at constant enthalpy. No pressure drop in
//! pipes and no heat loss of the shell; both belong to the machine that uses the cycle.

mod diagram;
mod inputs;

pub use diagram::{Diagram, DiagramPoint, Leg, Process};
pub use inputs::{
    CRITICAL_MARGIN_K, CycleInputs, LEAST_LIFT_K, MASS_FLOW_RANGE_KG_PER_S, SPREAD_RANGE_K,
};

use inputs::{check, unsolved};

use std::fmt;

use crate::problem::{Finding, Problems, Severity};
use crate::refrigerant::{Equation, PropertyError, Refrigerant, Saturation, StatePoint};

/// Discharge above this, °C, is more than oil and windings stand (common practice, no source).
pub(super) const HOT_DISCHARGE_C: f64 = 120.0;
/// Standard atmosphere, kPa.
const ATMOSPHERE_KPA: f64 = 101.325;

/// The four points of a cycle.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum CyclePoint {
    /// At the compressor's inlet.
    Suction,
    /// At the compressor's outlet.
    Discharge,
    /// At the condenser's outlet.
    Liquid,
    /// Behind the expansion valve.
    EvaporatorInlet,
}

impl fmt::Display for CyclePoint {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        f.pad(match self {
            CyclePoint::Suction => "suction",
            CyclePoint::Discharge => "discharge",
            CyclePoint::Liquid => "liquid",
            CyclePoint::EvaporatorInlet => "evaporator inlet",
        })
    }
}

/// A solved cycle.
#[derive(Clone, Debug, PartialEq)]
pub struct Cycle {
    /// The fluid.
    pub refrigerant: Refrigerant,
    /// What it was solved for.
    pub inputs: CycleInputs,
    /// At the compressor's inlet.
    pub suction: StatePoint,
    /// At the compressor's outlet.
    pub discharge: StatePoint,
    /// Where a compressor without losses would end.
    pub isentropic_discharge: StatePoint,
    /// At the condenser's outlet.
    pub liquid: StatePoint,
    /// Behind the expansion valve.
    pub evaporator_inlet: StatePoint,
    /// Saturated liquid and vapour in the evaporator.
    pub evaporating: Saturation,
    /// Saturated liquid and vapour in the condenser.
    pub condensing: Saturation,
}

impl Cycle {
    /// Solves the cycle with the exact equation of its refrigerant.
    ///
    /// # Errors
    ///
    /// All problems with the inputs at once: a value that is not in its range, condensing not above
    /// evaporating or too close to the critical point, liquid colder than the evaporator, a discharge
    /// beyond the equation's range. Fields are named as on the command line, without the dashes.
    ///
    /// ```
    /// use winterledger::heatpump::cycle::{Cycle, CycleInputs};
    /// use winterledger::refrigerant::{Equation, Refrigerant};
    /// let propane = Equation::new(Refrigerant::R290)?;
    /// let inputs = CycleInputs {
    ///     evaporating_c: -3.0,
    ///     condensing_c: 40.0,
    ///     superheat_k: 5.0,
    ///     subcooling_k: 5.0,
    ///     isentropic_efficiency: 0.7,
    ///     mass_flow_kg_per_s: None,
    /// };
    /// assert!((Cycle::solve(&propane, inputs)?.cop_heating() - 4.625).abs() < 0.001);
    /// let upside_down = CycleInputs { condensing_c: -5.0, ..inputs };
    /// assert!(Cycle::solve(&propane, upside_down).is_err());
    /// # Ok::<(), Box<dyn std::error::Error>>(())
    /// ```
    pub fn solve(equation: &Equation, inputs: CycleInputs) -> Result<Cycle, Problems> {
        check(equation, &inputs)?;
        let CycleInputs {
            evaporating_c,
            condensing_c,
            superheat_k,
            subcooling_k,
            ..
        } = inputs;
        let at = |field: &'static str| move |error: PropertyError| unsolved(field, &error);

        let evaporating = equation
            .saturation(evaporating_c)
            .map_err(at("evaporating"))?;
        let condensing = equation
            .saturation(condensing_c)
            .map_err(at("condensing"))?;
        let suction = if superheat_k > 0.0 {
            equation
                .beside_at_temperature(&evaporating, evaporating_c + superheat_k)
                .map_err(at("superheat"))?
        } else {
            evaporating.vapour
        };
        let liquid = if subcooling_k > 0.0 {
            equation
                .beside_at_temperature(&condensing, condensing_c - subcooling_k)
                .map_err(at("subcooling"))?
        } else {
            condensing.liquid
        };
        let isentropic_discharge = equation
            .beside_at_entropy(&condensing, suction.entropy_kj_per_kg_k)
            .map_err(at("condensing"))?;
        let isentropic_work = isentropic_discharge.enthalpy_kj_per_kg - suction.enthalpy_kj_per_kg;
        let discharge = equation
            .beside_at_enthalpy(
                &condensing,
                suction.enthalpy_kj_per_kg + isentropic_work / inputs.isentropic_efficiency,
            )
            .map_err(at("isentropic-efficiency"))?;
        let evaporator_inlet = equation
            .beside_at_enthalpy(&evaporating, liquid.enthalpy_kj_per_kg)
            .map_err(at("subcooling"))?;
        Ok(Cycle {
            refrigerant: equation.refrigerant(),
            inputs,
            suction,
            discharge,
            isentropic_discharge,
            liquid,
            evaporator_inlet,
            evaporating,
            condensing,
        })
    }

    /// The four points in the order in which the refrigerant meets them.
    pub fn points(&self) -> [(CyclePoint, &StatePoint); 4] {
        [
            (CyclePoint::Suction, &self.suction),
            (CyclePoint::Discharge, &self.discharge),
            (CyclePoint::Liquid, &self.liquid),
            (CyclePoint::EvaporatorInlet, &self.evaporator_inlet),
        ]
    }

    /// Heat taken up in the evaporator, kJ/kg; the superheat counts as taken up there.
    pub fn evaporator_kj_per_kg(&self) -> f64 {
        self.suction.enthalpy_kj_per_kg - self.evaporator_inlet.enthalpy_kj_per_kg
    }

    /// Heat given off in the condenser, kJ/kg.
    pub fn condenser_kj_per_kg(&self) -> f64 {
        self.discharge.enthalpy_kj_per_kg - self.liquid.enthalpy_kj_per_kg
    }

    /// Work of the compressor, kJ/kg.
    pub fn work_kj_per_kg(&self) -> f64 {
        self.discharge.enthalpy_kj_per_kg - self.suction.enthalpy_kj_per_kg
    }

    /// Heat given off over work.
    pub fn cop_heating(&self) -> f64 {
        self.condenser_kj_per_kg() / self.work_kj_per_kg()
    }

    /// COP of a reversible machine between evaporating and condensing temperature. It bounds the cycle
    /// as long as the heat leaves at condensing temperature: subcooled by more than half the lift, a
    /// loss-free cycle may pass it, since much of its heat then leaves colder.
    pub fn cop_carnot(&self) -> f64 {
        (self.inputs.condensing_c + 273.15) / (self.inputs.condensing_c - self.inputs.evaporating_c)
    }

    /// Condensing over evaporating pressure.
    pub fn pressure_ratio(&self) -> f64 {
        self.condensing.pressure_kpa / self.evaporating.pressure_kpa
    }

    /// Heat taken up in the evaporator, kW; absent without a mass flow.
    pub fn evaporator_kw(&self) -> Option<f64> {
        self.power(self.evaporator_kj_per_kg())
    }

    /// Heat given off in the condenser, kW; absent without a mass flow.
    pub fn condenser_kw(&self) -> Option<f64> {
        self.power(self.condenser_kj_per_kg())
    }

    /// Power of the compressor's shaft, kW; absent without a mass flow.
    pub fn work_kw(&self) -> Option<f64> {
        self.power(self.work_kj_per_kg())
    }

    fn power(&self, kj_per_kg: f64) -> Option<f64> {
        self.inputs.mass_flow_kg_per_s.map(|flow| flow * kj_per_kg)
    }

    /// What a person should know about this cycle: the fluid's caution and anything a real machine
    /// would not stand.
    pub fn findings(&self) -> Vec<Finding> {
        let facts = self.refrigerant.facts();
        let mut findings = vec![Finding::new(
            if facts.safety_class.flammable() {
                Severity::Caution
            } else {
                Severity::Note
            },
            format!(
                "{} is {}, safety class {}",
                self.refrigerant, facts.substance, facts.safety_class
            ),
            facts.caution,
        )];
        if facts.pseudo_pure {
            findings.push(Finding::new(
                Severity::Note,
                format!("{} is a blend, computed as one substance", self.refrigerant),
                "its bubble and dew point, 0.1 K apart, share one pressure; COP is good to 0.5 %",
            ));
        }
        let mut warn = |what: String, done: &str| {
            findings.push(Finding::new(Severity::Warning, what, done));
        };
        if self.discharge.temperature_c > HOT_DISCHARGE_C {
            warn(
                format!("discharge at {:.0} °C", self.discharge.temperature_c),
                "more than oil and windings usually stand; a real machine injects liquid or stops",
            );
        }
        if self.discharge.quality.is_some() || self.isentropic_discharge.quality.is_some() {
            warn(
                "compression ends in the wet region".to_owned(),
                "liquid harms a compressor; this fluid needs more superheat",
            );
        }
        if self.evaporating.pressure_kpa < ATMOSPHERE_KPA {
            warn(
                format!(
                    "evaporating pressure {:.0} kPa is below the atmosphere",
                    self.evaporating.pressure_kpa
                ),
                "a leak would draw air in",
            );
        }
        findings
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;

    fn solve(refrigerant: Refrigerant, inputs: CycleInputs) -> Result<Cycle, Problems> {
        Cycle::solve(&Equation::new(refrigerant).unwrap(), inputs)
    }

    const USUAL: CycleInputs = CycleInputs {
        evaporating_c: -5.0,
        condensing_c: 45.0,
        superheat_k: 5.0,
        subcooling_k: 3.0,
        isentropic_efficiency: 0.7,
        mass_flow_kg_per_s: None,
    };

    #[test]
    fn the_four_points_are_where_they_belong() {
        for refrigerant in Refrigerant::ALL {
            let cycle = solve(refrigerant, USUAL).unwrap();
            assert_eq!(cycle.suction.quality, None);
            assert!((cycle.suction.temperature_c - 0.0).abs() < 1e-9);
            assert!((cycle.liquid.temperature_c - 42.0).abs() < 1e-9);
            assert!(cycle.discharge.temperature_c > 45.0);
            assert!(cycle.discharge.entropy_kj_per_kg_k > cycle.suction.entropy_kj_per_kg_k);
            let quality = cycle.evaporator_inlet.quality.unwrap();
            assert!(quality > 0.1 && quality < 0.6, "{refrigerant}: {quality}");
            let (start, end) = (cycle.liquid, cycle.evaporator_inlet);
            assert!((start.enthalpy_kj_per_kg - end.enthalpy_kj_per_kg).abs() < 1e-9);
            assert!(end.entropy_kj_per_kg_k > start.entropy_kj_per_kg_k);
            assert_eq!(cycle.condenser_kw(), None);
        }
    }

    #[test]
    fn findings_name_what_a_machine_would_not_stand() {
        let text = |refrigerant, inputs| {
            let findings = solve(refrigerant, inputs).unwrap().findings();
            findings
                .iter()
                .map(Finding::to_string)
                .collect::<Vec<_>>()
                .join("\n")
        };
        let cold = CycleInputs {
            evaporating_c: -25.0,
            condensing_c: 60.0,
            ..USUAL
        };
        assert!(text(Refrigerant::R32, cold).contains("discharge at 1"));
        assert!(text(Refrigerant::R600a, cold).contains("below the atmosphere"));
        assert!(text(Refrigerant::R290, USUAL).starts_with("caution: R290 is propane"));
        let dry = CycleInputs {
            superheat_k: 0.0,
            isentropic_efficiency: 1.0,
            ..USUAL
        };
        assert!(text(Refrigerant::R600a, dry).contains("wet region"));
        assert!(text(Refrigerant::R134a, USUAL).starts_with("note: R134a"));
    }

    proptest! {
        /// First and second law over the whole range, for every fluid: evaporator + work = condenser, and
        /// COP below Carnot while subcooling is at most half the lift (beyond it Carnot between the two
        /// saturation temperatures is no bound, see `cop_carnot`).
        #[test]
        fn energy_closes_and_carnot_holds(
            which in 0..6_usize,
            evaporating_c in -60.0..40.0_f64,
            place in 0.0..1.0_f64,
            superheat_k in 0.0..20.0_f64,
            subcooled_share in 0.0..0.5_f64,
            isentropic_efficiency in 0.3..=1.0_f64,
        ) {
            let equation = Equation::new(Refrigerant::ALL[which]).unwrap();
            let highest = equation.critical_temperature_c() - CRITICAL_MARGIN_K;
            let lift = 2.0 + place * (highest - evaporating_c - 2.0);
            let inputs = CycleInputs {
                evaporating_c,
                condensing_c: evaporating_c + lift,
                superheat_k,
                subcooling_k: (subcooled_share * lift).min(SPREAD_RANGE_K.1),
                isentropic_efficiency,
                mass_flow_kg_per_s: Some(0.02),
            };
            // far lifts at poor efficiency leave the equation's range, which is an error, not a number
            if let Ok(cycle) = Cycle::solve(&equation, inputs) {
                let closure = cycle.evaporator_kj_per_kg() + cycle.work_kj_per_kg()
                    - cycle.condenser_kj_per_kg();
                prop_assert!(closure.abs() < 1e-9, "closure {closure}");
                let closure = cycle.evaporator_kw().unwrap() + cycle.work_kw().unwrap()
                    - cycle.condenser_kw().unwrap();
                prop_assert!(closure.abs() < 1e-9, "closure {closure} kW");
                prop_assert!(cycle.work_kj_per_kg() > 0.0);
                prop_assert!(cycle.pressure_ratio() > 1.0);
                prop_assert!(
                    cycle.cop_heating() < cycle.cop_carnot(),
                    "{} above {}", cycle.cop_heating(), cycle.cop_carnot()
                );
            } else {
                prop_assert!(isentropic_efficiency < 0.9 && lift > 40.0, "refused: {inputs:?}");
            }
        }

        /// No input at all brings a panic, and whatever is solved is finite.
        #[test]
        fn no_input_panics(
            which in 0..6_usize,
            evaporating_c in proptest::num::f64::ANY,
            condensing_c in proptest::num::f64::ANY,
            superheat_k in proptest::num::f64::ANY,
            subcooling_k in proptest::num::f64::ANY,
            isentropic_efficiency in proptest::num::f64::ANY,
            flow in proptest::num::f64::ANY,
        ) {
            let inputs = CycleInputs {
                evaporating_c, condensing_c, superheat_k, subcooling_k, isentropic_efficiency,
                mass_flow_kg_per_s: Some(flow),
            };
            if let Ok(cycle) = solve(Refrigerant::ALL[which], inputs) {
                prop_assert!(cycle.cop_heating().is_finite());
            }
        }
    }
}
