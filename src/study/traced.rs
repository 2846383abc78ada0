//! One hour taken again with everything that happened in it, for an explanation.

use super::case::{Case, Contender};
use crate::heatpump::cycle::{Cycle, CycleInputs};
use crate::heatpump::{ColdSide, Delivered, Duty, Exact};
use crate::problem::{Place, Problem, Problems};
use crate::refrigerant::Equation;
use crate::year::{DutyKind, Ledger, Probe, Row, State, run, step};

/// Which hour is meant.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Wanted {
    /// An hour of the axis.
    Hour(usize),
    /// The coldest outdoors.
    Coldest,
    /// The one in which the machine did worst for the rooms, or for hot water where it never heats rooms. Hours in which it gave less
    /// than a tenth of the design load do not count: a few minutes' run in June has the worst COP of all and matters to nobody.
    WorstCop,
    /// The one that cost most.
    Dearest,
}

/// Heat of the machine below which an hour's COP is not looked at, as a share of the design heat load. A choice of ours.
pub const WORTH_LOOKING_AT: f64 = 0.1;

/// An hour of one system with the duties of its machine.
#[derive(Debug, Clone)]
pub struct Traced {
    /// Hour of the axis.
    pub hour: usize,
    /// Rooms and store as the hour found them.
    pub before: State,
    /// Its row of the ledger.
    pub row: Row,
    /// What the machine was asked and did, hot water first.
    pub duties: Vec<TracedDuty>,
}

/// One duty of a machine, solved again without the map.
#[derive(Debug, Clone)]
pub struct TracedDuty {
    /// Rooms or hot water.
    pub kind: DutyKind,
    /// What the source offered.
    pub cold: ColdSide,
    /// What was asked.
    pub duty: Duty,
    /// The exact machine beside what the map gave.
    pub exact: Exact,
    /// The refrigerant's cycle by the reference equation; nothing when the machine stood.
    pub cycle: Option<Cycle>,
}

/// Keeps the duties of a step.
#[derive(Default)]
struct Watch(Vec<(DutyKind, ColdSide, Duty)>);

impl Probe for Watch {
    fn see(&mut self, kind: DutyKind, cold: &ColdSide, duty: &Duty, _: &Delivered) {
        self.0.push((kind, *cold, *duty));
    }
}

/// Takes an hour again: the run up to it, then the step watched, then each duty solved exactly.
///
/// # Errors
/// When no hour is of the wanted kind, or the machine cannot be solved there.
pub fn trace(case: &Case, contender: &Contender, wanted: Wanted) -> Result<Traced, Problems> {
    let site = &*case.site;
    let (system, plan) = (&contender.system, &contender.plan);
    let hour = match wanted {
        Wanted::Hour(hour) => hour,
        _ => chosen(case, contender, wanted)?,
    };
    let mut state = State {
        ground: contender.aged.map(|aged| aged.memory).unwrap_or_default(),
        ..State::at_rest(system, contender.indoor_c)
    };
    run(site, system, plan, 0..hour, &mut state, &mut None::<Ledger>);
    let before = state;
    let mut watch = Watch::default();
    let row = step(hour, site, system, plan, &mut state, &mut watch);
    let mut duties = Vec::with_capacity(watch.0.len());
    if let Some(machine) = system.heating.machine() {
        for (kind, cold, duty) in watch.0 {
            let exact = machine
                .machine
                .explain(&cold, &duty)
                .map_err(|error| unsolved(contender, &error))?;
            let cycle = match exact.operation {
                None => None,
                Some(operation) => {
                    let equation = Equation::new(machine.machine.refrigerant())
                        .map_err(|error| unsolved(contender, &error))?;
                    let inputs = CycleInputs {
                        evaporating_c: operation.evaporating_c,
                        condensing_c: operation.condensing_c,
                        superheat_k: exact.superheat_k,
                        subcooling_k: exact.subcooling_k,
                        isentropic_efficiency: operation.isentropic_efficiency,
                        mass_flow_kg_per_s: Some(operation.mass_flow_kg_per_s),
                    };
                    Some(Cycle::solve(&equation, inputs)?)
                }
            };
            duties.push(TracedDuty {
                kind,
                cold,
                duty,
                exact,
                cycle,
            });
        }
    }
    Ok(Traced {
        hour,
        before,
        row,
        duties,
    })
}

fn unsolved(contender: &Contender, error: &dyn std::fmt::Display) -> Problems {
    Problem::new(
        Place::field(contender.system.label.clone()),
        error.to_string(),
        "",
        "",
    )
    .into()
}

fn chosen(case: &Case, contender: &Contender, wanted: Wanted) -> Result<usize, Problems> {
    let mut ledger = Ledger::with_capacity(case.site.outdoor_c.len());
    case.run_one(contender, Some(&mut ledger))?;
    let least_kwh = WORTH_LOOKING_AT * contender.design_load_kw;
    // The smallest of a figure; the dearest hour is the one of the smallest negative cost.
    let figure = |row: &Row| match wanted {
        Wanted::Coldest | Wanted::Hour(_) => Some(row.outdoor_c),
        Wanted::WorstCop => {
            let worth = |heat_kwh: f64| heat_kwh >= least_kwh;
            let rooms = row.space_cop.filter(|_| worth(row.machine_space_kwh));
            rooms.or(row.water_cop.filter(|_| worth(row.machine_water_kwh)))
        }
        Wanted::Dearest => Some(-row.energy_cost),
    };
    let hours = ledger.rows.iter().enumerate();
    let chosen = hours
        .filter_map(|(i, row)| figure(row).map(|figure| (figure, i)))
        .min_by(|a, b| a.0.total_cmp(&b.0));
    chosen.map(|(_, i)| ledger.first_hour + i).ok_or_else(|| {
        Problem::new(
            Place::field(contender.system.label.clone()),
            "it has no such hour",
            "a system with a machine that runs",
            "ask for --coldest, --dearest or --at",
        )
        .into()
    })
}
