//! A cycle as lines on pressure and enthalpy, for whoever draws it.

use std::fmt;

use super::inputs::unsolved;
use super::{Cycle, CyclePoint};
use crate::problem::Problems;
use crate::refrigerant::{Equation, PropertyError, Refrigerant, StatePoint};

/// The dome begins this far below the evaporating temperature, K, where the equation reaches so far.
const BELOW_EVAPORATING_K: f64 = 25.0;
/// Points on each side of the dome.
const DOME_POINTS: usize = 60;
/// Points along a compression.
const COMPRESSION_POINTS: usize = 16;
/// Pressures on an isotherm, from the lowest on the dome to the highest.
const ISOTHERM_PRESSURES: usize = 14;
/// Isotherms stand at whole multiples of this, K.
const ISOTHERM_STEP_K: f64 = 20.0;
/// Isotherms reach this far above the discharge, K.
const ABOVE_DISCHARGE_K: f64 = 30.0;

/// A place on the diagram.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct DiagramPoint {
    /// Specific enthalpy, kJ/kg.
    pub enthalpy_kj_per_kg: f64,
    /// Pressure, kPa.
    pub pressure_kpa: f64,
}

impl From<&StatePoint> for DiagramPoint {
    fn from(state: &StatePoint) -> Self {
        DiagramPoint {
            enthalpy_kj_per_kg: state.enthalpy_kj_per_kg,
            pressure_kpa: state.pressure_kpa,
        }
    }
}

/// What happens to the refrigerant along one side of the cycle.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Process {
    /// Compressor, from suction to discharge.
    Compression,
    /// Condenser, from discharge to saturated vapour.
    Desuperheating,
    /// Condenser, from saturated vapour to saturated liquid.
    Condensation,
    /// Condenser, from saturated liquid to liquid.
    Subcooling,
    /// Expansion valve.
    Expansion,
    /// Evaporator, to saturated vapour.
    Evaporation,
    /// Evaporator, from saturated vapour to suction.
    Superheating,
}

impl fmt::Display for Process {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        f.pad(match self {
            Process::Compression => "compression",
            Process::Desuperheating => "desuperheating",
            Process::Condensation => "condensation",
            Process::Subcooling => "subcooling",
            Process::Expansion => "expansion",
            Process::Evaporation => "evaporation",
            Process::Superheating => "superheating",
        })
    }
}

/// One side of the cycle.
#[derive(Clone, Debug, PartialEq)]
pub struct Leg {
    /// What happens along it.
    pub process: Process,
    /// From its first to its last point.
    pub points: Vec<DiagramPoint>,
}

/// A line of one temperature; its part inside the dome is left out.
#[derive(Clone, Debug, PartialEq)]
pub struct Isotherm {
    /// Temperature, °C.
    pub temperature_c: f64,
    /// On the liquid side, from high pressure down to saturation; empty above the critical temperature.
    pub liquid: Vec<DiagramPoint>,
    /// On the vapour side, from saturation (or the highest pressure) down.
    pub vapour: Vec<DiagramPoint>,
}

/// Everything a pressure–enthalpy picture of one cycle shows.
#[derive(Clone, Debug, PartialEq)]
pub struct Diagram {
    /// The fluid.
    pub refrigerant: Refrigerant,
    /// Saturated liquid, upwards to just below the critical point.
    pub saturated_liquid: Vec<DiagramPoint>,
    /// Saturated vapour, upwards to just below the critical point.
    pub saturated_vapour: Vec<DiagramPoint>,
    /// The four points of the cycle.
    pub points: Vec<(CyclePoint, DiagramPoint)>,
    /// The sides of the cycle in order, closed; those without length are left out.
    pub legs: Vec<Leg>,
    /// Compression without losses, from the same suction.
    pub isentropic: Vec<DiagramPoint>,
    /// Lines of one temperature, for orientation.
    pub isotherms: Vec<Isotherm>,
}

impl Diagram {
    /// Draws a solved cycle with the equation it was solved with.
    ///
    /// # Errors
    ///
    /// When a state along a line is not covered by the equation.
    pub fn of(cycle: &Cycle, equation: &Equation) -> Result<Diagram, Problems> {
        draw(cycle, equation).map_err(|error| unsolved("chart", &error))
    }
}

fn draw(cycle: &Cycle, equation: &Equation) -> Result<Diagram, PropertyError> {
    let (lowest_c, _) = equation.saturation_range_c();
    let from_c = (cycle.inputs.evaporating_c - BELOW_EVAPORATING_K).max(lowest_c);
    let dome = equation.dome(from_c, DOME_POINTS)?;
    let (isentropic, compression) = compressions(cycle, equation)?;
    let state = DiagramPoint::from;
    let side = |process, points: &[DiagramPoint]| Leg {
        process,
        points: points.to_vec(),
    };
    let dew = state(&cycle.condensing.vapour);
    let bubble = state(&cycle.condensing.liquid);
    let evaporated = state(&cycle.evaporating.vapour);
    let [suction, discharge, liquid, inlet] = cycle.points().map(|(_, point)| state(point));
    // a wet discharge begins to condense at once
    let condensing_from = if discharge.enthalpy_kj_per_kg < dew.enthalpy_kj_per_kg {
        discharge
    } else {
        dew
    };
    let legs = [
        side(Process::Compression, &compression),
        side(Process::Desuperheating, &[discharge, condensing_from]),
        side(Process::Condensation, &[condensing_from, bubble]),
        side(Process::Subcooling, &[bubble, liquid]),
        side(Process::Expansion, &[liquid, inlet]),
        side(Process::Evaporation, &[inlet, evaporated]),
        side(Process::Superheating, &[evaporated, suction]),
    ];
    Ok(Diagram {
        refrigerant: cycle.refrigerant,
        saturated_liquid: dome.iter().map(|at| state(&at.liquid)).collect(),
        saturated_vapour: dome.iter().map(|at| state(&at.vapour)).collect(),
        points: cycle
            .points()
            .map(|(name, point)| (name, state(point)))
            .to_vec(),
        legs: legs
            .into_iter()
            .filter(|leg| leg.points.first() != leg.points.last())
            .collect(),
        isentropic,
        isotherms: isotherms(cycle, equation, from_c)?,
    })
}

/// The compression without and with losses; along the latter the efficiency is taken as the same at every
/// pressure on the way.
fn compressions(
    cycle: &Cycle,
    equation: &Equation,
) -> Result<(Vec<DiagramPoint>, Vec<DiagramPoint>), PropertyError> {
    let suction = DiagramPoint::from(&cycle.suction);
    let (mut isentropic, mut real) = (vec![suction], vec![suction]);
    for step in 1..COMPRESSION_POINTS {
        let part = step as f64 / COMPRESSION_POINTS as f64;
        let pressure_kpa = suction.pressure_kpa * cycle.pressure_ratio().powf(part);
        let without =
            equation.at_pressure_entropy(pressure_kpa, cycle.suction.entropy_kj_per_kg_k)?;
        let work = without.enthalpy_kj_per_kg - suction.enthalpy_kj_per_kg;
        isentropic.push(DiagramPoint::from(&without));
        real.push(DiagramPoint {
            enthalpy_kj_per_kg: suction.enthalpy_kj_per_kg
                + work / cycle.inputs.isentropic_efficiency,
            pressure_kpa,
        });
    }
    isentropic.push(DiagramPoint::from(&cycle.isentropic_discharge));
    real.push(DiagramPoint::from(&cycle.discharge));
    Ok((isentropic, real))
}

fn isotherms(
    cycle: &Cycle,
    equation: &Equation,
    from_c: f64,
) -> Result<Vec<Isotherm>, PropertyError> {
    let (_, highest_kpa) = equation.pressure_range_kpa();
    let (_, saturation_ends_c) = equation.saturation_range_c();
    let (_, hottest_c) = equation.temperature_range_c();
    let to_c = (cycle.discharge.temperature_c + ABOVE_DISCHARGE_K).min(hottest_c);
    let bottom = equation.saturation(from_c)?;
    let pressures: Vec<f64> = (0..ISOTHERM_PRESSURES)
        .map(|step| step as f64 / (ISOTHERM_PRESSURES - 1) as f64)
        .map(|part| highest_kpa * (bottom.pressure_kpa / highest_kpa).powf(part))
        .map(|pressure| pressure.clamp(bottom.pressure_kpa, highest_kpa))
        .collect();
    let first = (from_c / ISOTHERM_STEP_K).ceil() as i32;
    let last = (to_c / ISOTHERM_STEP_K).floor() as i32;
    (first..=last)
        .map(|step| f64::from(step) * ISOTHERM_STEP_K)
        // between the last saturation and the critical point an isotherm has no clear sides
        .filter(|&at| at <= saturation_ends_c || at >= equation.critical_temperature_c())
        .map(|temperature_c| {
            let mut isotherm = Isotherm {
                temperature_c,
                liquid: Vec::new(),
                vapour: Vec::new(),
            };
            let saturation = (temperature_c <= saturation_ends_c)
                .then(|| equation.saturation(temperature_c))
                .transpose()?;
            let saturated_kpa = saturation.map_or(f64::INFINITY, |found| found.pressure_kpa);
            for &pressure in pressures
                .iter()
                .filter(|&&pressure| pressure > saturated_kpa)
            {
                let found = equation.at_temperature_pressure(temperature_c, pressure)?;
                isotherm.liquid.push(DiagramPoint::from(&found));
            }
            if let Some(saturation) = saturation {
                isotherm.liquid.push(DiagramPoint::from(&saturation.liquid));
                isotherm.vapour.push(DiagramPoint::from(&saturation.vapour));
            }
            for &pressure in pressures
                .iter()
                .filter(|&&pressure| pressure < saturated_kpa)
            {
                let found = equation.at_temperature_pressure(temperature_c, pressure)?;
                isotherm.vapour.push(DiagramPoint::from(&found));
            }
            Ok(isotherm)
        })
        .collect()
}

#[cfg(test)]
mod tests {
    use super::super::CycleInputs;
    use super::*;

    fn diagram(refrigerant: Refrigerant, superheat_k: f64, efficiency: f64) -> (Cycle, Diagram) {
        let equation = Equation::new(refrigerant).unwrap();
        let inputs = CycleInputs {
            evaporating_c: -5.0,
            condensing_c: 45.0,
            superheat_k,
            subcooling_k: 3.0,
            isentropic_efficiency: efficiency,
            mass_flow_kg_per_s: None,
        };
        let cycle = Cycle::solve(&equation, inputs).unwrap();
        let diagram = Diagram::of(&cycle, &equation).unwrap();
        (cycle, diagram)
    }

    #[test]
    fn the_sides_of_the_cycle_close() {
        for refrigerant in Refrigerant::ALL {
            let (_, diagram) = diagram(refrigerant, 5.0, 0.7);
            assert_eq!(diagram.legs.len(), 7);
            for (index, leg) in diagram.legs.iter().enumerate() {
                let next = &diagram.legs[(index + 1) % diagram.legs.len()];
                assert_eq!(
                    leg.points.last(),
                    next.points.first(),
                    "{refrigerant} {leg:?}"
                );
            }
        }
    }

    #[test]
    fn a_wet_discharge_has_no_desuperheating() {
        let (cycle, diagram) = diagram(Refrigerant::R600a, 0.0, 1.0);
        assert!(cycle.discharge.quality.is_some());
        let processes: Vec<_> = diagram.legs.iter().map(|leg| leg.process).collect();
        assert!(!processes.contains(&Process::Desuperheating));
        assert!(!processes.contains(&Process::Superheating));
    }

    #[test]
    fn the_dome_rises_and_nearly_closes() {
        for refrigerant in Refrigerant::ALL {
            let (_, diagram) = diagram(refrigerant, 5.0, 0.7);
            let (liquid, vapour) = (&diagram.saturated_liquid, &diagram.saturated_vapour);
            for line in [liquid, vapour] {
                assert!(
                    line.windows(2)
                        .all(|pair| pair[0].pressure_kpa < pair[1].pressure_kpa)
                );
            }
            let width =
                |index: usize| vapour[index].enthalpy_kj_per_kg - liquid[index].enthalpy_kj_per_kg;
            // 0.1 K below the critical point less than a tenth of the width is left
            assert!(width(liquid.len() - 1) < 0.1 * width(0), "{refrigerant}");
            assert!(width(liquid.len() - 1) > 0.0);
        }
    }

    #[test]
    fn isotherms_fall_in_pressure_and_lie_outside_the_dome() {
        let (_, diagram) = diagram(Refrigerant::R32, 5.0, 0.7);
        assert!(diagram.isotherms.len() > 4);
        for isotherm in &diagram.isotherms {
            for line in [&isotherm.liquid, &isotherm.vapour] {
                assert!(
                    line.windows(2)
                        .all(|pair| pair[0].pressure_kpa > pair[1].pressure_kpa)
                );
            }
            if let (Some(liquid), Some(vapour)) = (isotherm.liquid.last(), isotherm.vapour.first())
            {
                assert!(liquid.enthalpy_kj_per_kg < vapour.enthalpy_kj_per_kg);
            }
        }
    }
}
