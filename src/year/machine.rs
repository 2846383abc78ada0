//! An hour of a heat pump: hot water, rooms, backup; its place between source and emitters.

use super::rooms::Rooms;
use super::row::{Flags, Row};
use super::step::{DutyKind, Probe};
use super::system::{MachineSystem, State};
use super::warm_side::WarmSide;
use crate::extremes::{greater, lesser};
use crate::fault::{self, Fault};
use crate::heatpump::{ColdSide, Delivered, Duty, running_spread_k};
use crate::home::{Home, StoreStep};

/// A heat that is short by less than this share is short by rounding only.
pub(super) const ROUNDING: f64 = 1e-9;

/// Less than this part of an hour is not worth a start, h.
const LEAST_RUN_H: f64 = 1e-6;

/// Tells the source what was drawn, and charges its pump.
#[inline]
pub(super) fn ground_hour(hour: usize, system: &MachineSystem, state: &mut State, row: &mut Row) {
    let source = &system.source;
    source.drawn(hour, row.extracted_kwh, &mut state.ground);
    row.source_side_kwh += source.pump_kwh(hour, row.running_hours);
    row.returned_kwh = source.returned_kwh(hour);
}

/// A heat pump: a block of hot water first, the rooms in what is left of the hour, and behind it backup or a boiler of a power (kW)
/// that lifts the flow where the rooms would fall too low. Gives what is left to the boiler, kWh.
pub(super) fn heat_pump_hour<P: Probe>(
    system: &MachineSystem,
    lift_kw: f64,
    home: &Home,
    cold: &ColdSide,
    water: &StoreStep,
    rooms: &Rooms,
    row: &mut Row,
    probe: &mut P,
) -> f64 {
    let mut hours_left = 1.0;
    let mut unlifted_kwh = 0.0;
    if water.wanted_kwh > 0.0 {
        let used = hot_water_block(system, home, cold, water, row, probe);
        hours_left -= used;
    }
    if rooms.wanted_kw > 0.0 {
        // In an hour that hot water takes whole, help comes alone.
        let mut lifted_kwh = rooms.least_kwh.clamp(0.0, lift_kw);
        if hours_left > LEAST_RUN_H {
            // What hot water took from the hour is left to the fabric's storage: a compensated flow is not raised for it.
            let shared_c = row
                .water_flow_c
                .filter(|_| fault::on(Fault::OneFlowForBothDuties));
            let warm_side = WarmSide {
                system,
                emitters: &home.emitters,
                cold,
                rooms,
                hours: hours_left,
                lift_kw,
                held_flow_c: shared_c,
            };
            let balanced = warm_side.balance();
            let (duty, delivered) = (&balanced.duty, &balanced.delivered);
            row.flags |= Flags::FLOW_TOO_COOL.when(balanced.too_cool)
                | Flags::FLOW_CAPPED.when(balanced.capped);
            probe.see(DutyKind::SpaceHeat, cold, duty, delivered);
            row.machine_space_kwh = delivered.heat_kwh;
            row.machine_space_electricity_kwh = charge(row, delivered);
            row.space_cop = cop(delivered.heat_kwh, row.machine_space_electricity_kwh);
            if delivered.heat_kwh > 0.0 {
                row.machine_flow_c = Some(delivered.flow_c);
            }
            lifted_kwh = balanced.lifted_kwh;
            if let Some(water) = balanced.lifted_water {
                row.space_flow_c = Some(water.flow_c);
                row.space_return_c = Some(water.return_c);
            } else if delivered.heat_kwh > 0.0 {
                let to_emitters_c = delivered.flow_c - home.emitters.header_k();
                row.space_flow_c = Some(to_emitters_c);
                row.space_return_c = Some(
                    to_emitters_c - balanced.throttled_k - delivered_spread_k(duty, delivered),
                );
            }
        }
        row.backup_kwh = lesser(lifted_kwh, system.backup_kw);
        unlifted_kwh = lifted_kwh - row.backup_kwh;
        row.flags |= Flags::BACKUP.when(row.backup_kwh > 0.0);
        row.circulation_kwh = system.circulation_kw * hours_left;
    }
    let idle = system.machine.idle();
    // The cycling coefficient of EN 14825 already holds what a cycling machine takes while it stands.
    let at_rest_kw = if row.flags.has(Flags::CYCLING) {
        0.0
    } else if row.running_hours > 0.0 || rooms.wanted_kw > 0.0 {
        idle.thermostat_off_kw
    } else {
        idle.standby_kw + idle.crankcase_kw
    };
    row.idle_kwh = at_rest_kw * greater(1.0 - row.running_hours, 0.0);
    unlifted_kwh
}

/// Flow minus return while the machine runs: the design water flow carries the heat of the running time, held to what pump and
/// machine allow.
#[inline]
fn delivered_spread_k(duty: &Duty, delivered: &Delivered) -> f64 {
    let asked_kwh = duty.heat_kw * duty.hours;
    if asked_kwh > 0.0 && delivered.running_hours > 0.0 {
        let mean_spread_k = duty.spread_k * delivered.heat_kwh / asked_kwh;
        running_spread_k(mean_spread_k, delivered.running_hours / duty.hours)
    } else {
        duty.spread_k
    }
}

/// A block of hot water at full output; the immersion heater lifts what the machine cannot reach. Gives the hours used.
fn hot_water_block<P: Probe>(
    system: &MachineSystem,
    home: &Home,
    cold: &ColdSide,
    water: &StoreStep,
    row: &mut Row,
    probe: &mut P,
) -> f64 {
    let Some(store) = home.hot_water.as_ref().and_then(|water| water.store) else {
        return 0.0;
    };
    let reachable_c = system.machine.limits().highest_flow_at(cold.open_c) - store.coil_k;
    let end_c = lesser(water.machine_target_c, reachable_c);
    let machine_kwh =
        ((end_c - water.before_c) * store.capacity_kwh_per_k).clamp(0.0, water.wanted_kwh);
    let mut used_hours = 0.0;
    if machine_kwh > 0.0 {
        let duty = Duty {
            heat_kw: machine_kwh,
            // The store warms along the block; its mean carries the mean COP closely (the curve is nearly straight).
            flow_c: (water.before_c + end_c) / 2.0 + store.coil_k,
            spread_k: store.coil_k,
            hours: 1.0,
            at_full_output: true,
        };
        let delivered = system.machine.deliver(cold, &duty);
        probe.see(DutyKind::HotWater, cold, &duty, &delivered);
        used_hours = delivered.running_hours;
        row.machine_water_kwh = delivered.heat_kwh;
        row.machine_water_electricity_kwh = charge(row, &delivered);
        row.water_cop = cop(delivered.heat_kwh, row.machine_water_electricity_kwh);
        if delivered.heat_kwh > 0.0 {
            row.water_flow_c = Some(delivered.flow_c);
        }
    }
    // Only what the machine can never reach is left to the immersion heater; a block that is merely long goes on.
    let beyond_kwh = if row.machine_water_kwh > 0.0 || machine_kwh == 0.0 {
        water.wanted_kwh - machine_kwh
    } else {
        water.wanted_kwh
    };
    row.immersion_kwh = beyond_kwh.clamp(0.0, system.immersion_kw);
    row.flags |= Flags::IMMERSION.when(row.immersion_kwh > 0.0);
    used_hours
}

/// Puts a duty's electricity into its components; gives their sum.
#[inline]
fn charge(row: &mut Row, delivered: &Delivered) -> f64 {
    row.compressor_kwh += delivered.compressor_kwh;
    row.source_side_kwh += delivered.source_side_kwh;
    row.defrost_kwh += delivered.defrost_kwh;
    row.allowance_kwh += delivered.allowance_kwh;
    row.extracted_kwh += delivered.extracted_kwh;
    row.running_hours += delivered.running_hours;
    row.starts += delivered.starts;
    if delivered.running_hours > 0.0 {
        // Of two duties in the hour the colder: what the source had to bear.
        row.source_c = Some(
            row.source_c
                .map_or(delivered.source_c, |c| lesser(c, delivered.source_c)),
        );
    }
    row.flags |= Flags::CYCLING.when(delivered.flags.cycling)
        | Flags::MACHINE_STOPPED.when(delivered.flags.stopped)
        | Flags::TURNED_DOWN.when(delivered.flags.turned_down)
        | Flags::AT_GREATEST_OUTPUT.when(delivered.flags.short)
        | Flags::FROSTING.when(delivered.flags.frosting);
    delivered.compressor_kwh
        + delivered.source_side_kwh
        + delivered.defrost_kwh
        + delivered.allowance_kwh
}

fn cop(heat_kwh: f64, electricity_kwh: f64) -> Option<f64> {
    (heat_kwh > 0.0 && electricity_kwh > 0.0).then(|| heat_kwh / electricity_kwh)
}
