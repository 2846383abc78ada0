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

/// Everything a pressure–enthalpy picture of one cycle shows.
#[derive(Clone, Debug, PartialEq)]
pub struct Diagram {
    /// The fluid.
    pub refrigerant: Refrigerant,
    /// Saturated liquid upwards to the critical point, then saturated vapour downwards.
    pub dome: Vec<DiagramPoint>,
    /// The four points of the cycle.
    pub points: Vec<(CyclePoint, DiagramPoint)>,
    /// The sides of the cycle in order, closed; those without length are left out.
    pub legs: Vec<Leg>,
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
    let saturations = equation.dome(from_c, DOME_POINTS)?;
    let critical = equation.critical_point()?;
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
        side(Process::Compression, &compression(cycle, equation)?),
        side(Process::Desuperheating, &[discharge, condensing_from]),
        side(Process::Condensation, &[condensing_from, bubble]),
        side(Process::Subcooling, &[bubble, liquid]),
        side(Process::Expansion, &[liquid, inlet]),
        side(Process::Evaporation, &[inlet, evaporated]),
        side(Process::Superheating, &[evaporated, suction]),
    ];
    Ok(Diagram {
        refrigerant: cycle.refrigerant,
        dome: (saturations.iter().map(|at| &at.liquid))
            .chain([&critical])
            .chain(saturations.iter().rev().map(|at| &at.vapour))
            .map(state)
            .collect(),
        points: cycle
            .points()
            .map(|(name, point)| (name, state(point)))
            .to_vec(),
        legs: legs
            .into_iter()
            .filter(|leg| leg.points.first() != leg.points.last())
            .collect(),
    })
}

/// The compression; its efficiency is taken as the same at every pressure on the way.
fn compression(cycle: &Cycle, equation: &Equation) -> Result<Vec<DiagramPoint>, PropertyError> {
    let suction = DiagramPoint::from(&cycle.suction);
    let mut points = vec![suction];
    for step in 1..COMPRESSION_POINTS {
        let part = step as f64 / COMPRESSION_POINTS as f64;
        let pressure_kpa = suction.pressure_kpa * cycle.pressure_ratio().powf(part);
        let isentropic =
            equation.at_pressure_entropy(pressure_kpa, cycle.suction.entropy_kj_per_kg_k)?;
        let work = isentropic.enthalpy_kj_per_kg - suction.enthalpy_kj_per_kg;
        points.push(DiagramPoint {
            enthalpy_kj_per_kg: suction.enthalpy_kj_per_kg
                + work / cycle.inputs.isentropic_efficiency,
            pressure_kpa,
        });
    }
    points.push(DiagramPoint::from(&cycle.discharge));
    Ok(points)
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
    fn the_dome_rises_to_the_critical_point_and_falls() {
        for refrigerant in Refrigerant::ALL {
            let (_, diagram) = diagram(refrigerant, 5.0, 0.7);
            let (liquid, rest) = diagram.dome.split_at(DOME_POINTS);
            let (critical, vapour) = rest.split_first().unwrap();
            let rises = |line: &[DiagramPoint]| {
                line.windows(2)
                    .all(|pair| pair[0].pressure_kpa < pair[1].pressure_kpa)
            };
            assert!(rises(liquid) && !rises(vapour), "{refrigerant}");
            // 2e-3: what the equations' own critical pressure differs from the published one (R410A)
            let published = refrigerant.facts().critical_pressure_kpa;
            assert!(
                (critical.pressure_kpa / published - 1.0).abs() < 2e-3,
                "{refrigerant}"
            );
            // 0.1 K below the critical point a tenth of the width is left, with the critical point in it
            let (left, right) = (liquid[DOME_POINTS - 1], vapour[0]);
            let width = vapour[DOME_POINTS - 1].enthalpy_kj_per_kg - liquid[0].enthalpy_kj_per_kg;
            assert!(right.enthalpy_kj_per_kg - left.enthalpy_kj_per_kg < 0.1 * width);
            assert!(left.enthalpy_kj_per_kg < critical.enthalpy_kj_per_kg);
            assert!(critical.enthalpy_kj_per_kg < right.enthalpy_kj_per_kg);
        }
    }
}
