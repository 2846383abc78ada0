//! An hour of a home that keeps a boiler beside its machine.

use super::boiler::{account_boiler, boiler_hour};
use super::machine::heat_pump_hour;
use super::rooms::Rooms;
use super::row::Row;
use super::site::Plan;
use super::step::{Probe, Unwatched, charge_energy};
use super::system::HybridSystem;
use crate::heater::{Effort, Side};
use crate::heatpump::ColdSide;
use crate::home::{Home, StoreStep};

/// What is asked of a hybrid in an hour, and where it stands.
pub(super) struct Asked<'a> {
    pub hour: usize,
    pub plan: &'a Plan,
    pub home: &'a Home,
    pub cold: &'a ColdSide,
    pub water: &'a StoreStep,
    pub rooms: &'a Rooms,
}

/// Decides which side serves the hour, rooms and hot water alike, from what either way would take in this very hour.
pub(super) fn hybrid_hour<P: Probe>(
    hybrid: &HybridSystem,
    asked: &Asked<'_>,
    row: &mut Row,
    probe: &mut P,
) {
    // For each kilowatt-hour of heat: a machine at its limit may bring less of it.
    let effort = |mut tried: Row| {
        charge_energy(asked.plan, asked.hour, &mut tried);
        let heat_kwh = tried.space_heat_kwh() + tried.water_heat_kwh();
        let per_heat = if heat_kwh > 0.0 { 1.0 / heat_kwh } else { 0.0 };
        Effort {
            cost: tried.energy_cost * per_heat,
            carbon_kg: tried.carbon_kg * per_heat,
        }
    };
    let mut by_machine = *row;
    by_machine_hour(hybrid, asked, &mut by_machine, &mut Unwatched);
    // The step charges the pump of a ground loop after the hour is decided.
    by_machine.source_side_kwh += hybrid
        .machine
        .source
        .pump_kwh(asked.hour, by_machine.running_hours);
    let mut by_boiler = *row;
    by_boiler_hour(hybrid, asked, &mut by_boiler);
    match hybrid
        .rule
        .decide(row.outdoor_c, effort(by_machine), effort(by_boiler))
    {
        Side::Machine => by_machine_hour(hybrid, asked, row, probe),
        Side::Boiler => *row = by_boiler,
    }
}

/// The machine, the boiler adding what would otherwise let the rooms fall to where backup helps. Water that is heated as it is
/// drawn is always the boiler's.
fn by_machine_hour<P: Probe>(
    hybrid: &HybridSystem,
    asked: &Asked<'_>,
    row: &mut Row,
    probe: &mut P,
) {
    let HybridSystem {
        machine, boiler, ..
    } = hybrid;
    let lacking_kwh = heat_pump_hour(
        machine,
        machine.backup_kw + boiler.output_kw,
        asked.home,
        asked.cold,
        asked.water,
        asked.rooms,
        row,
        probe,
    );
    let has_store = asked
        .home
        .hot_water
        .as_ref()
        .is_some_and(|water| water.store.is_some());
    if !has_store {
        row.heater_water_kwh = asked.water.wanted_kwh.min(boiler.output_kw);
        row.fuel_kwh = row.heater_water_kwh / boiler.water_efficiency(has_store);
    }
    // The boiler stands behind the machine: the water that the machine has warmed, or that comes back where it stands, is what
    // enters it.
    if lacking_kwh > 0.0 {
        let rooms = asked.rooms;
        let enters_c = row
            .machine_flow_c
            .or(row.space_return_c)
            .unwrap_or_else(|| {
                let emitters = &asked.home.emitters;
                let warm = emitters.supply(lacking_kwh, rooms.room_c, rooms.outdoor_c);
                warm.water.return_c
            });
        row.heater_space_kwh = lacking_kwh.min(boiler.output_kw - row.heater_water_kwh);
        row.fuel_kwh += row.heater_space_kwh / boiler.gross_efficiency(enters_c);
    }
    account_boiler(boiler, row);
}

/// The boiler alone; the machine rests.
fn by_boiler_hour(hybrid: &HybridSystem, asked: &Asked<'_>, row: &mut Row) {
    boiler_hour(
        &hybrid.boiler,
        hybrid.fixed_flow_c,
        asked.home,
        asked.water,
        asked.rooms,
        row,
    );
    let idle = hybrid.machine.machine.idle();
    row.idle_kwh = idle.standby_kw + idle.crankcase_kw;
}
