//! From powers to the hour's heat and electricity, and what runs beside the machine.

use crate::answer::explain::{Lines, Part, n};
use crate::heatpump::{Operation, SourceKind};
use crate::study::{Traced, TracedDuty};
use crate::year::{DutyKind, Flags, MachineSystem};

/// From powers to the hour's heat and electricity.
pub(super) fn electricity(
    part: &mut Lines,
    system: &MachineSystem,
    duty: &TracedDuty,
    operation: &Operation,
) {
    let exact = &duty.exact;
    let got = &exact.delivered;
    let heat_kw = operation.heat_kw;
    let side_kw = operation.source_side_kw;
    part.add(
        "heat delivered",
        got.heat_kwh,
        "kWh",
        format!(
            "heat of the condenser × (1 − output lost) × share × time = {} × (1 − {}) × {} × {}",
            n(heat_kw),
            n(exact.frost.output),
            n(exact.running_fraction),
            n(duty.duty.hours)
        ),
    );
    part.add(
        "drawn from the source",
        got.extracted_kwh,
        "kWh",
        format!(
            "(heat of the condenser − compressor × drive efficiency) × share × time = ({} − {} × {}) × {} × {}",
            n(heat_kw),
            n(operation.compressor_kw),
            n(exact.drive_efficiency),
            n(exact.running_fraction),
            n(duty.duty.hours)
        ),
    );
    let start_up = if got.flags.cycling {
        format!(
            " + (1 − {}) × ({} + {}) × (1 − {}) × {}",
            n(system.machine.cycling_coefficient()),
            n(operation.compressor_kw),
            n(side_kw),
            n(exact.running_fraction),
            n(duty.duty.hours)
        )
    } else {
        String::new()
    };
    let named = if got.flags.cycling {
        "compressor for this heat without frost + EN 14825 loss of starting up"
    } else {
        "compressor for this heat without frost"
    };
    part.add(
        "compressor",
        got.compressor_kwh,
        "kWh",
        format!(
            "{named} = {} × {} / {}{start_up}",
            n(operation.compressor_kw),
            n(got.heat_kwh),
            n(heat_kw)
        ),
    );
    let factor = system.machine.source_side_factor();
    let side = match system.machine.source() {
        SourceKind::Air => "fan",
        SourceKind::Brine | SourceKind::Water => "brine or water pump",
    };
    part.add(
        side,
        got.source_side_kwh,
        "kWh",
        format!(
            "tested × at home over tested, for this heat = {} × {} × {} / {}",
            n(side_kw),
            n(factor),
            n(got.heat_kwh),
            n(heat_kw)
        ),
    );
    if exact.frost.cop > 0.0 {
        part.add(
            "defrost",
            got.defrost_kwh,
            "kWh",
            format!(
                "electricity for this heat without frost × (1 / (1 − COP lost) − 1) = ({} + {}) × {} / {} × (1 / (1 − {}) − 1)",
                n(operation.compressor_kw),
                n(side_kw),
                n(got.heat_kwh),
                n(heat_kw),
                n(exact.frost.cop)
            ),
        );
    }
    let laboratory = got.compressor_kwh + got.source_side_kwh + got.defrost_kwh;
    let allowed = system.machine.field_factor();
    part.add(
        "allowance from laboratory to home",
        got.allowance_kwh,
        "kWh",
        format!(
            "electricity × (1 / factor − 1) = ({} + {} + {}) × (1 / {} − 1)",
            n(got.compressor_kwh),
            n(got.source_side_kwh),
            n(got.defrost_kwh),
            n(allowed)
        ),
    );
    part.add(
        "COP at home",
        got.heat_kwh / (laboratory + got.allowance_kwh),
        "",
        format!(
            "heat over all of it = {} / ({} + {})",
            n(got.heat_kwh),
            n(laboratory),
            n(got.allowance_kwh)
        ),
    );
    part.add(
        "map beside exact machine",
        exact.map_percent,
        "%",
        "electricity for the same heat; powers above are exact, the hour's heat and electricity come from the map",
    );
}

/// What runs beside the machine's own duties.
pub(in crate::answer::explain) fn beside(system: &MachineSystem, traced: &Traced) -> Part {
    let row = &traced.row;
    let mut part = Lines::new();
    if row.backup_kwh > 0.0 {
        part.add(
            "backup",
            row.backup_kwh,
            "kWh",
            format!(
                "what keeps the rooms above the point where backup helps, at most {:.1} kW",
                system.backup_kw
            ),
        );
    }
    if row.immersion_kwh > 0.0 {
        part.add(
            "immersion heater",
            row.immersion_kwh,
            "kWh",
            format!(
                "what the machine cannot reach, at most {:.1} kW",
                system.immersion_kw
            ),
        );
    }
    let pump = row.source_side_kwh
        - traced
            .duties
            .iter()
            .map(|duty| duty.exact.delivered.source_side_kwh)
            .sum::<f64>();
    if pump > 1e-9 {
        part.add(
            "pump of the loop or well",
            pump,
            "kWh",
            "its power by pressure drop or head × running hours",
        );
    }
    let rest_h = (1.0 - row.running_hours).max(0.0);
    part.add(
        "machine at rest",
        row.idle_kwh,
        "kWh",
        if row.flags.has(Flags::CYCLING) {
            "held in the loss of starting up (EN 14825)".to_owned()
        } else {
            format!(
                "idle power × time at rest = {} × {}",
                n(if rest_h > 0.0 {
                    row.idle_kwh / rest_h
                } else {
                    0.0
                }),
                n(rest_h)
            )
        },
    );
    let rooms_h = traced
        .duties
        .iter()
        .find(|duty| duty.kind == DutyKind::SpaceHeat)
        .map(|duty| duty.duty.hours);
    if let Some(rooms_h) = rooms_h {
        part.add(
            "circulation pump",
            row.circulation_kwh,
            "kWh",
            format!(
                "power × time of the rooms = {} × {}",
                n(system.circulation_kw),
                n(rooms_h)
            ),
        );
    }
    part.part("Beside the machine")
}
