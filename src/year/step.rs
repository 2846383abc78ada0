//! One hour: weather, demand, offer, machine, backup, row.

use crate::fault::{self, Fault};
use std::ops::Range;

use super::Sink;
use super::balance::Warmth;
use super::hybrid::{Asked, hybrid_hour};
use super::row::{Flags, Row};
use super::site::{Plan, Site};
use super::system::{Heating, MachineSystem, State, System};
use crate::heater::Boiler;
use crate::heatpump::{ColdSide, Delivered, Duty, running_spread_k};
use crate::home::{Home, StoreStep, Tapped, WaterTemperatures};

/// Rooms this much below the set point at the end of an hour are short of heat, K. A choice of ours: about what people notice.
const SHORT_K: f64 = 1.0;

/// A heat that is short by less than this share is short by rounding only.
pub(super) const ROUNDING: f64 = 1e-9;

/// Less than this part of an hour is not worth a start, h.
const LEAST_RUN_H: f64 = 1e-6;

/// The two duties of an hour: each has its own flow temperature and so its own COP.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum DutyKind {
    /// A block of hot water, first.
    HotWater,
    /// The rooms, in what is left of the hour.
    SpaceHeat,
}

/// Watches what a machine is asked and what it delivers, for [`crate::heatpump`]'s explanation of an hour.
pub trait Probe {
    /// Sees one duty of the hour.
    fn see(&mut self, kind: DutyKind, cold: &ColdSide, duty: &Duty, delivered: &Delivered);
}

/// Watches nothing.
pub struct Unwatched;

impl Probe for Unwatched {
    fn see(&mut self, _: DutyKind, _: &ColdSide, _: &Duty, _: &Delivered) {}
}

/// Runs hours of the axis, carrying the state, and hands each row to the sink.
pub fn run<S: Sink>(
    site: &Site,
    system: &System,
    plan: &Plan,
    hours: Range<usize>,
    state: &mut State,
    sink: &mut S,
) {
    for hour in hours {
        let row = step(hour, site, system, plan, state, &mut Unwatched);
        sink.take(hour, &row);
    }
}

/// Steps one hour of the axis.
///
/// The columns of site and plan must be as long as the axis.
pub fn step<P: Probe>(
    hour: usize,
    site: &Site,
    system: &System,
    plan: &Plan,
    state: &mut State,
    probe: &mut P,
) -> Row {
    let home = &system.home;
    let outdoor_c = site.outdoor_c[hour];
    let set_point_c = plan.set_point_c[hour];
    let sun_w_per_m2 = site
        .global_w_per_m2
        .as_ref()
        .map_or(0.0, |column| column[hour]);
    let gains_kw = home.fabric.gains_kw(sun_w_per_m2);

    let mut row = Row {
        outdoor_c,
        set_point_c,
        gains_kwh: gains_kw,
        electricity_price: plan.electricity.price[hour],
        fuel_price: plan.fuel.as_ref().map(|fuel| fuel.price[hour]),
        flags: Flags::WEATHER_REPAIRED.when(site.repaired[hour]),
        ..Row::default()
    };

    // What is asked: hot water by the clock, the rooms by their set point.
    let shift_k = plan
        .store_shift_k
        .as_ref()
        .map_or(0.0, |column| column[hour]);
    let water = draw(home, site, hour, shift_k, state, &mut row);
    let reach = |target_c| {
        home.fabric
            .heat_to_reach_kwh(state.room_c, target_c, outdoor_c, gains_kw)
    };
    let mut wanted_kw = match &plan.recovery {
        Some(recovery) if recovery.at_the_time => reach(set_point_c),
        _ => home
            .fabric
            .heat_wanted_kw(state.room_c, set_point_c, outdoor_c, gains_kw),
    };
    if let Some(recovery) = &plan.recovery {
        let under_way = &mut state.recovering;
        let fabric = &home.fabric;
        let warm_up_kw =
            recovery.heat_kw(hour, fabric, state.room_c, outdoor_c, gains_kw, under_way);
        row.flags |= Flags::RECOVERY.when(warm_up_kw > 0.0);
        wanted_kw = wanted_kw.max(warm_up_kw);
    }
    row.space_wanted_kwh = wanted_kw;
    let rooms = Rooms {
        wanted_kw: wanted_kw.min(home.emitters.greatest_output_kw()),
        least_kwh: reach(plan.backup_below_c[hour]),
        room_c: state.room_c,
        outdoor_c,
    };

    // What answers.
    match &system.heating {
        Heating::HeatPump(system) => {
            let offer = system.source.offer(hour, outdoor_c, &state.ground);
            let cold = ColdSide {
                open_c: offer.open_c,
                k_per_kw: offer.k_per_kw,
                relative_humidity: site.relative_humidity.as_ref().map(|column| column[hour]),
            };
            heat_pump_hour(
                system,
                system.backup_kw,
                home,
                &cold,
                &water,
                &rooms,
                &mut row,
                probe,
            );
            ground_hour(hour, system, state, &mut row);
        }
        Heating::Boiler {
            boiler,
            fixed_flow_c,
        } => {
            boiler_hour(boiler, *fixed_flow_c, home, &water, &rooms, &mut row);
        }
        Heating::Hybrid(hybrid) => {
            let offer = hybrid.machine.source.offer(hour, outdoor_c, &state.ground);
            let cold = ColdSide {
                open_c: offer.open_c,
                k_per_kw: offer.k_per_kw,
                relative_humidity: site.relative_humidity.as_ref().map(|column| column[hour]),
            };
            let asked = Asked {
                hour,
                plan,
                home,
                cold: &cold,
                water: &water,
                rooms: &rooms,
            };
            hybrid_hour(hybrid, &asked, &mut row, probe);
            ground_hour(hour, &hybrid.machine, state, &mut row);
        }
        Heating::DirectElectric { output_kw } => {
            row.heater_water_kwh = water.wanted_kwh.min(*output_kw);
            row.heater_space_kwh = rooms.wanted_kw.min(output_kw - row.heater_water_kwh);
            row.heater_electricity_kwh = row.heater_water_kwh + row.heater_space_kwh;
        }
    }

    // What it did to store and rooms.
    store_hour(home, &water, state, &mut row);
    let room = home.fabric.step(
        state.room_c,
        row.space_heat_kwh(),
        outdoor_c,
        gains_kw,
        plan.comfort_c,
    );
    state.room_c = room.end_c;
    row.indoor_c = room.end_c;
    row.fabric_loss_kwh = room.loss_kwh;
    row.room_stored_kwh = room.stored_kwh;
    row.aired_kwh = room.aired_kwh;
    let asked_c = plan
        .asked_c
        .as_ref()
        .map_or(set_point_c, |column| column[hour]);
    row.flags |= Flags::SHORT.when(room.end_c < asked_c - SHORT_K);

    // What it cost.
    charge_energy(plan, hour, &mut row);
    row
}

/// Cost and carbon of an hour's energy at the plan's signals.
pub(super) fn charge_energy(plan: &Plan, hour: usize, row: &mut Row) {
    let electricity_kwh = row.electricity_kwh();
    let fuel = plan.fuel.as_ref();
    row.energy_cost = plan.electricity.cost(hour, electricity_kwh)
        + fuel.map_or(0.0, |fuel| fuel.cost(hour, row.fuel_kwh));
    row.carbon_kg = plan.electricity.carbon(hour, electricity_kwh)
        + fuel.map_or(0.0, |fuel| fuel.carbon(hour, row.fuel_kwh));
}

/// What the rooms want in an hour.
#[derive(Clone, Copy)]
pub(super) struct Rooms {
    /// Heat that holds the set point or leads back to it, as far as the emitters can carry it, kW.
    pub wanted_kw: f64,
    /// Heat that keeps them above the point where backup helps, kWh.
    pub least_kwh: f64,
    /// Their temperature at the beginning of the hour, °C.
    pub room_c: f64,
    /// Outdoor air, °C: what a compensation line follows.
    pub outdoor_c: f64,
}

/// Draws an hour's hot water and says what its heater must bring.
fn draw(
    home: &Home,
    site: &Site,
    hour: usize,
    shift_k: f64,
    state: &State,
    row: &mut Row,
) -> StoreStep {
    let clock = &site.civil[hour];
    let month0 = usize::from(site.month0[hour]);
    let mut step = StoreStep {
        before_c: state.store.mean_c,
        drawn_kwh: 0.0,
        lost_kwh: 0.0,
        wanted_kwh: 0.0,
        target_c: 0.0,
        machine_target_c: 0.0,
        too_cool: false,
        hygiene: false,
    };
    let Some(water) = &home.hot_water else {
        return step;
    };
    let tapped = Tapped {
        kwh: water.drawn_kwh(month0, clock.hour),
        draw_c: water.draw_c,
        cold_c: water.cold_c[month0 % 12],
    };
    match &water.store {
        Some(store) => step = store.shifted(shift_k).step(&state.store, &tapped, clock),
        None => {
            step.drawn_kwh = tapped.kwh;
            step.wanted_kwh = tapped.kwh;
        }
    }
    if fault::on(Fault::HotWaterAllDay) {
        step.wanted_kwh = water.mean_daily_kwh() / 24.0 + step.lost_kwh;
    }
    row.water_drawn_kwh = step.drawn_kwh;
    row.water_missing_kwh = tapped.kwh - step.drawn_kwh;
    row.store_loss_kwh = step.lost_kwh;
    row.flags |= Flags::WATER_SHORT.when(step.too_cool) | Flags::HYGIENE.when(step.hygiene);
    step
}

/// Puts the hour's heat into the store.
fn store_hour(home: &Home, water: &StoreStep, state: &mut State, row: &mut Row) {
    let Some(store) = home.hot_water.as_ref().and_then(|water| water.store) else {
        // What is heated as it is drawn comes out as hot as the heater can make it.
        let missing_kwh = (water.wanted_kwh - row.water_heat_kwh()).max(0.0);
        if missing_kwh > 1e-9 {
            row.water_drawn_kwh -= missing_kwh;
            row.water_missing_kwh += missing_kwh;
            row.flags |= Flags::WATER_SHORT;
        }
        return;
    };
    let heat_kwh = row.water_heat_kwh();
    row.store_stored_kwh = heat_kwh - water.drawn_kwh - water.lost_kwh;
    state.store = store.after(water, heat_kwh);
    row.store_c = Some(state.store.mean_c);
}

/// Tells the source what was drawn, and charges its pump.
fn ground_hour(hour: usize, system: &MachineSystem, state: &mut State, row: &mut Row) {
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
            let warmth = Warmth {
                system,
                emitters: &home.emitters,
                cold,
                rooms,
                hours: hours_left,
                lift_kw,
                held_flow_c: shared_c,
            };
            let balanced = warmth.balance();
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
        row.backup_kwh = lifted_kwh.min(system.backup_kw);
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
    row.idle_kwh = at_rest_kw * (1.0 - row.running_hours).max(0.0);
    unlifted_kwh
}

/// Flow minus return while the machine runs: the design water flow carries the heat of the running time, held to what pump and
/// machine allow.
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
    let end_c = water.machine_target_c.min(reachable_c);
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
                .map_or(delivered.source_c, |c| c.min(delivered.source_c)),
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

/// A boiler: hot water first, then the rooms, its efficiency following the water that comes back.
pub(super) fn boiler_hour(
    boiler: &Boiler,
    fixed_flow_c: Option<f64>,
    home: &Home,
    water: &StoreStep,
    rooms: &Rooms,
    row: &mut Row,
) {
    row.heater_water_kwh = water.wanted_kwh.min(boiler.output_kw);
    let has_store = home
        .hot_water
        .as_ref()
        .is_some_and(|water| water.store.is_some());
    row.fuel_kwh = row.heater_water_kwh / boiler.water_efficiency(has_store);
    row.heater_space_kwh = rooms.wanted_kw.min(boiler.output_kw - row.heater_water_kwh);
    if row.heater_space_kwh > 0.0 {
        let supply = home
            .emitters
            .supply(row.heater_space_kwh, rooms.room_c, rooms.outdoor_c);
        row.flags |=
            Flags::FLOW_TOO_COOL.when(supply.heat_kw < row.heater_space_kwh * (1.0 - ROUNDING));
        row.heater_space_kwh = supply.heat_kw;
        let follows = supply.water;
        // Fixed: it fires at its set flow with the emitters' design spread and lets the valves throttle.
        let warm = fixed_flow_c.map_or(follows, |flow_c| WaterTemperatures {
            flow_c,
            return_c: flow_c - home.emitters.design_spread_k(),
        });
        row.fuel_kwh += row.heater_space_kwh / boiler.gross_efficiency(warm.return_c);
        row.space_flow_c = Some(warm.flow_c);
        row.space_return_c = Some(warm.return_c);
    }
    account_boiler(boiler, row);
}

/// Electricity and losses of the heat that a boiler gave.
pub(super) fn account_boiler(boiler: &Boiler, row: &mut Row) {
    let heat_kwh = row.heater_water_kwh + row.heater_space_kwh;
    row.heater_electricity_kwh = heat_kwh * boiler.electricity_per_heat;
    row.fuel_loss_kwh = row.fuel_kwh - heat_kwh;
}
