//! What fixes a cycle, and what is refused before it is solved.

use crate::problem::{Place, Problem, Problems};
use crate::refrigerant::{Equation, PropertyError};

/// Distance that condensing keeps from the critical temperature, K. Real machines keep far more.
pub const CRITICAL_MARGIN_K: f64 = 2.0;
/// Least distance between evaporating and condensing temperature, K.
pub const LEAST_LIFT_K: f64 = 1.0;
/// Superheat and subcooling that are accepted, K.
pub const SPREAD_RANGE_K: (f64, f64) = (0.0, 40.0);
/// Mass flow that is accepted, kg/s: up to some hundred kilowatts.
pub const MASS_FLOW_RANGE_KG_PER_S: (f64, f64) = (1e-6, 10.0);

/// What fixes a cycle.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct CycleInputs {
    /// Saturation temperature in the evaporator, °C.
    pub evaporating_c: f64,
    /// Saturation temperature in the condenser, °C.
    pub condensing_c: f64,
    /// Suction gas above evaporating temperature, K.
    pub superheat_k: f64,
    /// Liquid below condensing temperature, K.
    pub subcooling_k: f64,
    /// Isentropic work over real work, above 0 and at most 1.
    pub isentropic_efficiency: f64,
    /// Refrigerant circulated, kg/s; without it there is heat per kilogram but no power.
    pub mass_flow_kg_per_s: Option<f64>,
}

pub(super) fn unsolved(field: &str, error: &PropertyError) -> Problems {
    Problem::new(
        Place::field(field),
        error.to_string(),
        "a cycle whose every state is covered by the equation of its refrigerant",
        "bring evaporating and condensing closer together, or raise the efficiency",
    )
    .into()
}

/// Checks everything that can be checked before solving, all at once.
pub(super) fn check(equation: &Equation, inputs: &CycleInputs) -> Result<(), Problems> {
    let mut problems = Problems::new();
    let mut hold = |field: &str, value: f64, (low, high): (f64, f64), unit: &str, remedy: &str| {
        let holds = value >= low && value <= high; // never for NaN
        if !holds {
            problems.push(Problem::new(
                Place::field(field),
                format!("{value} {unit}").trim_end(),
                format!("from {low} to {high:.2} {unit}").trim_end(),
                remedy,
            ));
        }
        holds
    };
    let (lowest, _) = equation.saturation_range_c();
    let critical = equation.critical_temperature_c();
    let highest = critical - CRITICAL_MARGIN_K;
    let near_critical = format!(
        "{} is critical at {critical:.1} °C; choose a lower condensing temperature or another refrigerant",
        equation.refrigerant()
    );
    let evaporating_holds = hold(
        "evaporating",
        inputs.evaporating_c,
        (lowest, highest - LEAST_LIFT_K),
        "°C",
        "evaporating is some kelvin colder than the source",
    );
    let condensing_holds = hold(
        "condensing",
        inputs.condensing_c,
        (lowest + LEAST_LIFT_K, highest),
        "°C",
        &near_critical,
    );
    hold(
        "superheat",
        inputs.superheat_k,
        SPREAD_RANGE_K,
        "K",
        "5 K is usual",
    );
    let subcooling_holds = hold(
        "subcooling",
        inputs.subcooling_k,
        SPREAD_RANGE_K,
        "K",
        "3 K is usual",
    );
    let lift = inputs.condensing_c - inputs.evaporating_c;
    if evaporating_holds && condensing_holds {
        if lift < LEAST_LIFT_K {
            problems.push(Problem::new(
                Place::field("condensing"),
                format!(
                    "{} °C with evaporating at {} °C",
                    inputs.condensing_c, inputs.evaporating_c
                ),
                format!("at least {LEAST_LIFT_K} K above evaporating"),
                "a heat pump lifts heat from evaporating to condensing; are the two swapped?",
            ));
        } else if subcooling_holds && inputs.subcooling_k > lift {
            problems.push(Problem::new(
                Place::field("subcooling"),
                format!("{} K with a lift of {lift} K", inputs.subcooling_k),
                "at most the lift",
                "the liquid would be colder than the evaporator; 3 K is usual",
            ));
        }
    }
    let efficiency = inputs.isentropic_efficiency;
    if efficiency.is_nan() || efficiency <= 0.0 || efficiency > 1.0 {
        problems.push(Problem::new(
            Place::field("isentropic-efficiency"),
            format!("{efficiency}"),
            "above 0, at most 1",
            "0.6 to 0.75 is usual; write 0.7, not 70",
        ));
    }
    if let Some(flow) = inputs.mass_flow_kg_per_s {
        let (low, high) = MASS_FLOW_RANGE_KG_PER_S;
        if !(low..=high).contains(&flow) {
            problems.push(Problem::new(
                Place::field("mass-flow"),
                format!("{flow} kg/s"),
                format!("from {low} to {high} kg/s"),
                "about 0.02 kg/s of R290 gives 7 kW of heat",
            ));
        }
    }
    problems.or(())
}

#[cfg(test)]
mod tests {
    use super::super::Cycle;
    use super::*;
    use crate::refrigerant::Refrigerant;

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
    fn all_wrong_inputs_are_named_at_once() {
        let wrong = CycleInputs {
            evaporating_c: f64::NAN,
            condensing_c: 200.0,
            superheat_k: -1.0,
            subcooling_k: 99.0,
            isentropic_efficiency: 70.0,
            mass_flow_kg_per_s: Some(-0.02),
        };
        let problems = solve(Refrigerant::R32, wrong).unwrap_err();
        let fields: Vec<_> = problems
            .iter()
            .filter_map(|p| p.place.field.as_deref())
            .collect();
        assert_eq!(
            fields,
            [
                "condensing",
                "evaporating",
                "isentropic-efficiency",
                "mass-flow",
                "subcooling",
                "superheat"
            ]
        );
        assert!(
            problems.to_string().contains("critical at 78.1 °C"),
            "{problems}"
        );
    }

    #[test]
    fn condensing_below_evaporating_is_refused_with_the_question_to_ask() {
        let swapped = CycleInputs {
            evaporating_c: 45.0,
            condensing_c: -5.0,
            ..USUAL
        };
        let problems = solve(Refrigerant::R290, swapped).unwrap_err();
        assert!(problems.to_string().contains("swapped"), "{problems}");
    }

    #[test]
    fn a_discharge_beyond_the_equation_is_refused_not_guessed() {
        let hopeless = CycleInputs {
            isentropic_efficiency: 0.05,
            ..USUAL
        };
        let problems = solve(Refrigerant::R32, hopeless).unwrap_err();
        assert!(problems.to_string().contains("enthalpy"), "{problems}");
    }
}
