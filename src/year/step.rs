//! One hour: weather, demand, offer, machine, backup, row.

use std::ops::Range;

use super::Sink;
use super::boiler::boiler_hour;
use super::hybrid::{Asked, hybrid_hour};
use super::machine::{ground_hour, heat_pump_hour};
use super::rooms::Rooms;
use super::row::{Flags, Row};
use super::site::{Plan, Site};
use super::system::{Heating, State, System};
use super::water::{draw, store_hour};
use crate::heatpump::{ColdSide, Delivered, Duty};

/// Rooms this much below the set point at the end of an hour are short of heat, K. A choice of ours: about what people notice.
const SHORT_K: f64 = 1.0;

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
    let mut row = Row::default();
    for hour in hours {
        fill(hour, site, system, plan, state, &mut Unwatched, &mut row);
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
    let mut row = Row::default();
    fill(hour, site, system, plan, state, probe, &mut row);
    row
}

/// Steps one hour into a row, whatever it held.
#[inline]
fn fill<P: Probe>(
    hour: usize,
    site: &Site,
    system: &System,
    plan: &Plan,
    state: &mut State,
    probe: &mut P,
    row: &mut Row,
) {
    let home = &system.home;
    let outdoor_c = site.outdoor_c[hour];
    let set_point_c = plan.set_point_c[hour];
    let sun_w_per_m2 = site
        .global_w_per_m2
        .as_ref()
        .map_or(0.0, |column| column[hour]);
    let gains_kw = home.fabric.gains_kw(sun_w_per_m2);

    *row = Row::default();
    row.outdoor_c = outdoor_c;
    row.set_point_c = set_point_c;
    row.gains_kwh = gains_kw;
    row.electricity_price = plan.electricity.price[hour];
    row.fuel_price = plan.fuel.as_ref().map(|fuel| fuel.price[hour]);
    row.flags = Flags::WEATHER_REPAIRED.when(site.repaired[hour]);

    // What is asked: hot water by the clock, the rooms by their set point.
    let shift_k = plan
        .store_shift_k
        .as_ref()
        .map_or(0.0, |column| column[hour]);
    let water = draw(home, site, hour, shift_k, state, row);
    let rooms = Rooms::ask(hour, home, plan, gains_kw, state, row);

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
                row,
                probe,
            );
            ground_hour(hour, system, state, row);
        }
        Heating::Boiler {
            boiler,
            fixed_flow_c,
        } => {
            boiler_hour(boiler, *fixed_flow_c, home, &water, &rooms, row);
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
            hybrid_hour(hybrid, &asked, row, probe);
            ground_hour(hour, &hybrid.machine, state, row);
        }
        Heating::DirectElectric { output_kw } => {
            row.heater_water_kwh = water.wanted_kwh.min(*output_kw);
            row.heater_space_kwh = rooms.wanted_kw.min(output_kw - row.heater_water_kwh);
            row.heater_electricity_kwh = row.heater_water_kwh + row.heater_space_kwh;
        }
    }

    // What it did to store and rooms.
    store_hour(home, &water, state, row);
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
    charge_energy(plan, hour, row);
}

/// Cost and carbon of an hour's energy at the plan's signals.
#[inline]
pub(super) fn charge_energy(plan: &Plan, hour: usize, row: &mut Row) {
    let electricity_kwh = row.electricity_kwh();
    let fuel = plan.fuel.as_ref();
    row.energy_cost = plan.electricity.cost(hour, electricity_kwh)
        + fuel.map_or(0.0, |fuel| fuel.cost(hour, row.fuel_kwh));
    row.carbon_kg = plan.electricity.carbon(hour, electricity_kwh)
        + fuel.map_or(0.0, |fuel| fuel.carbon(hour, row.fuel_kwh));
}
