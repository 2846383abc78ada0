//! What makes the heat of a system.

use super::boiler::{Kept, boiler, kept};
use super::defaults;
use super::ground::{Ground, ground};
use super::home::Warm;
use super::machine::{MachineMade, machine};
use super::notes::Notes;
use super::raw::{SystemKind, SystemTable};
use super::system::Surroundings;
use crate::bounds;
use crate::document::{Check, Section};
use crate::source::Source;
use crate::year::{Heating, HybridSystem, MachineSystem};

/// Reads what makes the heat, and what there is to tell of its machine where it has one.
pub(super) fn heating(
    table: &Section<SystemTable>,
    kind: SystemKind,
    around: &Surroundings<'_>,
    warm: Option<&Warm>,
    check: &mut Check,
    notes: &mut Notes,
) -> Option<(Heating, Option<MachineMade>)> {
    let heating = match kind.burns() {
        Some(fuel) => {
            let (boiler, fixed_flow_c) = boiler(table, fuel, check, notes)?;
            Heating::Boiler {
                boiler,
                fixed_flow_c,
            }
        }
        None if kind == SystemKind::DirectElectric => direct_electric(table, check)?,
        None => return heat_pump(table, kind, around, warm, check, notes),
    };
    Some((heating, None))
}

fn direct_electric(table: &Section<SystemTable>, check: &mut Check) -> Option<Heating> {
    check.required(&table.output, &table.span(), "output", "\"8 kW\"");
    let output = check.within(&table.output, &bounds::OUTPUT_KW)?;
    Some(Heating::DirectElectric {
        output_kw: output.kw(),
    })
}

fn heat_pump(
    table: &Section<SystemTable>,
    kind: SystemKind,
    around: &Surroundings<'_>,
    warm: Option<&Warm>,
    check: &mut Check,
    notes: &mut Notes,
) -> Option<(Heating, Option<MachineMade>)> {
    let backup = notes.quantity(check, &table.backup, &bounds::HEATER_KW, &defaults::BACKUP);
    let immersion = notes.quantity(
        check,
        &table.immersion,
        &bounds::HEATER_KW,
        &defaults::IMMERSION,
    );
    let pump = notes.quantity(
        check,
        &table.circulation_pump,
        &bounds::AUXILIARY_KW,
        &defaults::CIRCULATION_PUMP,
    );
    let mut made = machine(table, kind, around.folder, warm, check, notes);
    let mut findings = Vec::new();
    let source = match kind {
        SystemKind::GroundSource => {
            let machine = made.as_ref().map(|made| &made.machine);
            ground(
                &Ground {
                    table,
                    around,
                    machine,
                },
                check,
                notes,
                &mut findings,
            )
        }
        _ => Some(Source::OutdoorAir),
    };
    let kept = table.boiler.as_ref().map(|table| kept(table, check, notes));
    if let Some(made) = &mut made {
        made.findings.append(&mut findings);
    }
    let (source, made) = (source?, made?);
    // The pump of a described loop is computed with it; the machine keeps what its tested points hold.
    let machine = match &source {
        Source::Buried(_) | Source::Water(_) => made.machine.without_outside_pump(),
        Source::OutdoorAir | Source::Ground(_) => made.machine.clone(),
    };
    let system = MachineSystem {
        machine,
        source,
        backup_kw: backup?.kw(),
        immersion_kw: immersion?.kw(),
        circulation_kw: pump?.kw(),
    };
    let heating = match kept {
        None => Heating::HeatPump(Box::new(system)),
        Some(kept) => {
            let Kept {
                boiler,
                fixed_flow_c,
                rule,
            } = kept?;
            Heating::Hybrid(Box::new(HybridSystem {
                machine: system,
                boiler,
                fixed_flow_c,
                rule,
            }))
        }
    };
    Some((heating, Some(made)))
}
