//! The machine in one duty: what it is asked, its temperatures and cycle, its electricity, frost and allowance.

mod asked;
mod cycle;
mod electricity;
mod frost;

pub(super) use electricity::beside;

use super::{Lines, Part};
use crate::answer::cycle::CycleAnswer;
use crate::home::Home;
use crate::study::{Traced, TracedDuty};
use crate::year::{DutyKind, MachineSystem};

pub(super) fn duty(
    home: &Home,
    system: &MachineSystem,
    traced: &Traced,
    duty: &TracedDuty,
) -> Part {
    let mut part = Lines::new();
    asked::asked(&mut part, home, traced, duty);
    if let (Some(operation), Some(cycle)) = (&duty.exact.operation, &duty.cycle) {
        asked::running(&mut part, duty);
        cycle::temperatures(&mut part, system, duty, operation, cycle);
        cycle::compression(&mut part, system, duty, operation, cycle);
        frost::frost(&mut part, system, duty);
        electricity::electricity(&mut part, system, duty, operation);
    } else {
        let got = &duty.exact.delivered;
        part.add("heat delivered", got.heat_kwh, "kWh", "the machine stood");
    }
    let title = match duty.kind {
        DutyKind::HotWater => "The machine, for hot water",
        DutyKind::SpaceHeat => "The machine, for the rooms",
    };
    let mut part = part.part(title);
    part.states = duty
        .cycle
        .as_ref()
        .map_or_else(Vec::new, |cycle| CycleAnswer::from(cycle).states);
    part
}
