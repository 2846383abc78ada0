//! The machine in one duty: what it is asked, its temperatures and cycle, its electricity, frost and allowance.

use super::{Lines, Part, n};
use crate::air::{MoistAir, SEA_LEVEL_PA, saturation_pressure_over_water_pa};
use crate::answer::cycle::CycleAnswer;
use crate::heatpump::cycle::Cycle;
use crate::heatpump::frost::{
    AIR_KJ_PER_KG_K, FULL_GROWTH_C, OUTPUT_OVER_COP, SUBLIMATION_KJ_PER_KG, SURFACE_SHARE,
};
use crate::heatpump::{Operation, SourceKind};
use crate::home::Home;
use crate::study::{Traced, TracedDuty};
use crate::year::{DutyKind, Flags, MachineSystem};

/// Figures agree to this where a line says how one follows from others, relative.
const AGREES: f64 = 1e-4;

pub(super) fn duty(
    home: &Home,
    system: &MachineSystem,
    traced: &Traced,
    duty: &TracedDuty,
) -> Part {
    let mut part = Lines::new();
    asked(&mut part, home, traced, duty);
    if let (Some(operation), Some(cycle)) = (&duty.exact.operation, &duty.cycle) {
        running(&mut part, duty);
        temperatures(&mut part, system, duty, operation, cycle);
        compression(&mut part, system, duty, operation, cycle);
        frost(&mut part, system, duty);
        electricity(&mut part, system, duty, operation);
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

/// What is asked of the machine and at which flow temperature.
fn asked(part: &mut Lines, home: &Home, traced: &Traced, duty: &TracedDuty) {
    let asked = &duty.duty;
    part.add(
        "time it has",
        asked.hours,
        "h",
        "the hour less what hot water took",
    );
    let wanted_kw = traced.row.space_wanted_kwh / asked.hours;
    let how = match duty.kind {
        DutyKind::HotWater => "what the store takes up to its set point, at full output".to_owned(),
        DutyKind::SpaceHeat if (wanted_kw / asked.heat_kw - 1.0).abs() < AGREES => format!(
            "heat wanted over the time it has = {} / {}",
            n(traced.row.space_wanted_kwh),
            n(asked.hours)
        ),
        DutyKind::SpaceHeat => {
            "of the heat wanted, what machine and emitters carry in that time".to_owned()
        }
    };
    part.add("heat asked", asked.heat_kw, "kW", how);
    if duty.kind == DutyKind::HotWater {
        let how = "mean store temperature of the block + coil difference";
        part.add("flow to the coil", asked.flow_c, "°C", how);
        return;
    }
    let emitters = &home.emitters;
    let share = asked.heat_kw / emitters.design_load_kw();
    let room = traced.before.room_c;
    let mean = emitters.at_load(asked.heat_kw, room).mean_c();
    let exponent = emitters.kind().exponent();
    let one_kind = room + emitters.design_excess_k() * share.powf(1.0 / exponent);
    part.add(
        "share of the design load",
        share,
        "",
        format!(
            "heat asked over design heat load of the emitters = {} / {}",
            n(asked.heat_kw),
            n(emitters.design_load_kw())
        ),
    );
    part.add(
        "mean water needed",
        mean,
        "°C",
        if (one_kind - mean).abs() < 0.01 {
            format!(
                "EN 442: room + ΔT × share^(1/n) = {} + {} × {}^(1/{exponent})",
                n(room),
                n(emitters.design_excess_k()),
                n(share),
            )
        } else {
            "that of the group of emitters that needs the hottest".to_owned()
        },
    );
    let spread = emitters.design_spread_k() * share;
    part.add(
        "spread at that load",
        asked.spread_k,
        "K",
        if (spread - asked.spread_k).abs() < 0.01 {
            format!(
                "design spread × share = {} × {}",
                n(emitters.design_spread_k()),
                n(share)
            )
        } else {
            "at the water flow of the emitters".to_owned()
        },
    );
    let follows = mean + asked.spread_k / 2.0;
    let header = emitters.header_k();
    part.add(
        "flow needed",
        asked.flow_c,
        "°C",
        if (asked.flow_c - header - follows).abs() < 1e-6 {
            format!(
                "mean water + half the spread + header = {} + {} / 2 + {}",
                n(mean),
                n(asked.spread_k),
                n(header)
            )
        } else {
            format!("set by the control; {follows:.2} °C would carry it, the valves throttle")
        },
    );
}

/// How long it runs and at which water temperatures.
fn running(part: &mut Lines, duty: &TracedDuty) {
    let (asked, exact) = (&duty.duty, &duty.exact);
    let got = &exact.delivered;
    let share = exact.running_fraction;
    let while_kw = got.heat_kwh / got.running_hours;
    part.add("output while running", while_kw, "kW", "frost deducted");
    part.add(
        "share of the time it runs",
        share,
        "",
        if share < 1.0 {
            format!(
                "heat asked over output while running = {} / {}",
                n(asked.heat_kw),
                n(while_kw)
            )
        } else {
            "all of it: its speed follows the load, or it gives all it can".to_owned()
        },
    );
    let spread = got.flow_c - exact.return_c;
    let flow_c = asked.flow_c + spread * (1.0 - share);
    part.add(
        "flow while running",
        got.flow_c,
        "°C",
        if got.flags.capped_flow {
            "the highest of the machine at this source".to_owned()
        } else if asked.at_full_output {
            format!("flow to the coil = {}", n(asked.flow_c))
        } else if (flow_c - got.flow_c).abs() < 0.01 {
            format!(
                "flow needed + running spread × (1 − share), as it goes on and off = {} + {} × (1 − {})",
                n(asked.flow_c),
                n(spread),
                n(share)
            )
        } else {
            "as it goes on and off, held to the machine's highest".to_owned()
        },
    );
    part.add(
        "return while running",
        exact.return_c,
        "°C",
        format!(
            "flow − spread at that load / share, which is held to 10 K = {} − {}",
            n(got.flow_c),
            n(spread)
        ),
    );
}

/// Source, evaporating and condensing temperature.
fn temperatures(
    part: &mut Lines,
    system: &MachineSystem,
    duty: &TracedDuty,
    operation: &Operation,
    cycle: &Cycle,
) {
    let got = &duty.exact.delivered;
    let scale = system.machine.scale();
    let physical = &system.machine.machine().machine;
    if duty.cold.k_per_kw > 0.0 {
        part.add(
            "source with nothing drawn",
            duty.cold.open_c,
            "°C",
            "what the source offers after its history",
        );
        part.add(
            "source entering",
            got.source_c,
            "°C",
            if got.flags.turned_down {
                "the lowest the machine allows: it is turned down to what the source bears"
                    .to_owned()
            } else {
                format!(
                    "nothing drawn − K/kW of this hour × kW drawn = {} − {} × {}",
                    n(duty.cold.open_c),
                    n(duty.cold.k_per_kw),
                    n(got.extracted_kwh / got.running_hours)
                )
            },
        );
    } else {
        part.add(
            "source entering",
            got.source_c,
            "°C",
            "outdoor air, or water that its draw does not cool",
        );
    }
    part.add(
        "speed",
        operation.speed,
        "",
        "what gives that output; 1 = greatest at 7 °C source and 35 °C flow",
    );
    part.add(
        "evaporating",
        operation.evaporating_c,
        "°C",
        format!(
            "source − (superheat + K/kW × heat of the evaporator) = {} − ({} + {} × {})",
            n(operation.source_c),
            n(physical.evaporator.floor_k),
            n(physical.evaporator.k_per_kw / scale),
            n(cycle.evaporator_kw().unwrap_or(f64::NAN)),
        ),
    );
    part.add(
        "condensing",
        operation.condensing_c,
        "°C",
        format!(
            "flow + K/kW × heat of the condenser = {} + {} × {}",
            n(operation.flow_c),
            n(physical.condenser.k_per_kw / scale),
            n(cycle.condenser_kw().unwrap_or(f64::NAN)),
        ),
    );
}

/// From pressures to the compressor's power.
fn compression(
    part: &mut Lines,
    system: &MachineSystem,
    duty: &TracedDuty,
    operation: &Operation,
    cycle: &Cycle,
) {
    let exact = &duty.exact;
    let fitted = system.machine.machine();
    let compressor = &fitted.machine.compressor;
    let scale = system.machine.scale();
    let [suction, discharge, liquid, _] = cycle.points().map(|(_, state)| *state);
    part.add(
        "pressure ratio",
        cycle.pressure_ratio(),
        "",
        format!(
            "condensing over evaporating pressure = {} / {}",
            n(discharge.pressure_kpa),
            n(suction.pressure_kpa)
        ),
    );
    part.add(
        "isentropic efficiency",
        operation.isentropic_efficiency,
        "",
        format!(
            "fitted peak × (1 − penalty × (speed − 0.65)²) / (1 + fall × ln²(ratio / best ratio)) = {} × (1 − {} × ({} − 0.65)^2) / (1 + {} × ln({} / {})^2)",
            n(compressor.peak_efficiency),
            n(compressor.speed_penalty),
            n(operation.speed),
            n(compressor.falloff),
            n(operation.pressure_ratio),
            n(compressor.peak_ratio),
        ),
    );
    part.add(
        "isentropic enthalpy",
        cycle.isentropic_discharge.enthalpy_kj_per_kg,
        "kJ/kg",
        format!(
            "property table at {:.1} kPa and {:.4} kJ/kgK, the entropy of suction",
            discharge.pressure_kpa, suction.entropy_kj_per_kg_k
        ),
    );
    part.add(
        "enthalpy of discharge",
        discharge.enthalpy_kj_per_kg,
        "kJ/kg",
        format!(
            "h suction + (h isentropic − h suction) / efficiency = {} + ({} − {}) / {}",
            n(suction.enthalpy_kj_per_kg),
            n(cycle.isentropic_discharge.enthalpy_kj_per_kg),
            n(suction.enthalpy_kj_per_kg),
            n(operation.isentropic_efficiency),
        ),
    );
    part.add(
        "volumetric efficiency",
        operation.volumetric_efficiency,
        "",
        format!(
            "1.026 − 0.0202 × pressure ratio = 1.026 − 0.0202 × {}",
            n(operation.pressure_ratio)
        ),
    );
    part.add(
        "refrigerant flow",
        operation.mass_flow_kg_per_s,
        "kg/s",
        format!(
            "swept m³/s × speed × suction density × volumetric efficiency = {} × {} × {} × {}",
            n(compressor.swept_m3_per_s * scale),
            n(operation.speed),
            n(suction.density_kg_per_m3),
            n(operation.volumetric_efficiency),
        ),
    );
    let flow = operation.mass_flow_kg_per_s;
    part.add(
        "heat of the evaporator",
        cycle.evaporator_kw().unwrap_or(f64::NAN),
        "kW",
        format!(
            "flow × (h suction − h liquid) = {} × ({} − {})",
            n(flow),
            n(suction.enthalpy_kj_per_kg),
            n(liquid.enthalpy_kj_per_kg)
        ),
    );
    part.add(
        "heat of the condenser",
        cycle.condenser_kw().unwrap_or(f64::NAN),
        "kW",
        format!(
            "flow × (h discharge − h liquid) = {} × ({} − {})",
            n(flow),
            n(discharge.enthalpy_kj_per_kg),
            n(liquid.enthalpy_kj_per_kg)
        ),
    );
    let work = cycle.work_kw().unwrap_or(f64::NAN);
    part.add(
        "work on the refrigerant",
        work,
        "kW",
        format!(
            "flow × (h discharge − h suction) = {} × ({} − {})",
            n(flow),
            n(discharge.enthalpy_kj_per_kg),
            n(suction.enthalpy_kj_per_kg)
        ),
    );
    let physical = work / exact.drive_efficiency;
    part.add(
        "compressor by physics",
        physical,
        "kW",
        format!(
            "work over drive efficiency = {} / {}",
            n(work),
            n(exact.drive_efficiency)
        ),
    );
    let side = operation.source_side_kw;
    part.add(
        "fan or brine pump, tested",
        side,
        "kW",
        "as in the tested points, by speed",
    );
    part.add(
        "compressor, frost-free",
        operation.compressor_kw,
        "kW",
        format!(
            "(physics + fan or pump) / correction from the sheet's points − fan or pump = ({} + {}) / {} − {}",
            n(physical),
            n(side),
            n(exact.correction),
            n(side)
        ),
    );
    part.add(
        "COP, frost-free, laboratory",
        operation.cop(),
        "",
        format!(
            "heat over compressor and fan or pump = {} / ({} + {})",
            n(operation.heat_kw),
            n(operation.compressor_kw),
            n(side)
        ),
    );
    part.add(
        "Carnot limit",
        cycle.cop_carnot(),
        "",
        format!(
            "condensing over condensing − evaporating, in kelvin = ({} + 273.15) / ({} − {})",
            n(operation.condensing_c),
            n(operation.condensing_c),
            n(operation.evaporating_c)
        ),
    );
}

/// From the air's moisture to what frost costs; nothing where there is no frost.
fn frost(part: &mut Lines, system: &MachineSystem, duty: &TracedDuty) {
    let exact = &duty.exact;
    if exact.frost.cop <= 0.0 {
        return;
    }
    let source_c = exact.delivered.source_c;
    let outdoors = exact.humidity_ratio;
    let frost = system.machine.frost();
    let steps = frost.steps(source_c, exact.frost_evaporating_c, outdoors);
    let moist = duty
        .cold
        .relative_humidity
        .and_then(|share| MoistAir::at_station(source_c, share, SEA_LEVEL_PA).ok());
    let vapour_pa = moist.map(|air| air.vapour_pressure_pa());
    if let (Some(share), Some(vapour_pa), Ok(saturated_pa)) = (
        duty.cold.relative_humidity,
        vapour_pa,
        saturation_pressure_over_water_pa(source_c),
    ) {
        part.add(
            "vapour pressure outdoors",
            vapour_pa,
            "Pa",
            format!(
                "humidity × saturation over water at the air's temperature = {} × {}",
                n(share),
                n(saturated_pa)
            ),
        );
    }
    part.add(
        "humidity ratio outdoors",
        outdoors * 1000.0,
        "g/kg",
        vapour_pa.map_or_else(
            || "the standard rating air, wet bulb 1 K below dry bulb".to_owned(),
            |vapour_pa| {
                format!(
                    "621.945 × p / (101325 − p) = 621.945 × {} / (101325 − {})",
                    n(vapour_pa),
                    n(vapour_pa)
                )
            },
        ),
    );
    part.add(
        "surface of the coil",
        steps.surface_c,
        "°C",
        format!(
            "outdoor − {SURFACE_SHARE} × (outdoor − evaporating, correction included) = {} − {SURFACE_SHARE} × ({} − {})",
            n(source_c),
            n(source_c),
            n(exact.frost_evaporating_c)
        ),
    );
    part.add(
        "humidity ratio at the coil",
        steps.surface_humidity_ratio * 1000.0,
        "g/kg",
        "psychrometric table: saturated over ice at the surface",
    );
    part.add(
        "latent share",
        steps.latent_share,
        "",
        format!(
            "r Δw / (cp ΔT + r Δw) = {sublimation} × ({w} − {coil}) / ({AIR_KJ_PER_KG_K} × ({outdoor} − {surface}) + {sublimation} × ({w} − {coil}))",
            sublimation = SUBLIMATION_KJ_PER_KG / 1000.0,
            w = n(outdoors * 1000.0),
            coil = n(steps.surface_humidity_ratio * 1000.0),
            outdoor = n(source_c),
            surface = n(steps.surface_c),
        ),
    );
    let ramp = (steps.surface_c / FULL_GROWTH_C).clamp(0.0, 1.0);
    part.add(
        "share of the coil that frosts",
        steps.frosted_share,
        "",
        format!(
            "x² (3 − 2x), x = surface / {FULL_GROWTH_C} °C, at most 1 = {}^2 × (3 − 2 × {})",
            n(ramp),
            n(ramp)
        ),
    );
    part.add(
        "COP lost to frost",
        exact.frost.cop * 100.0,
        "%",
        format!(
            "fitted strength × frosting × latent share = 100 × {} × {} × {}",
            n(frost.strength),
            n(steps.frosted_share),
            n(steps.latent_share)
        ),
    );
    part.add(
        "output lost to frost",
        exact.frost.output * 100.0,
        "%",
        format!(
            "COP lost × 0.100 / 0.086 = {} × {}",
            n(exact.frost.cop * 100.0),
            n(OUTPUT_OVER_COP)
        ),
    );
}

/// From powers to the hour's heat and electricity.
fn electricity(part: &mut Lines, system: &MachineSystem, duty: &TracedDuty, operation: &Operation) {
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
pub(super) fn beside(system: &MachineSystem, traced: &Traced) -> Part {
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
