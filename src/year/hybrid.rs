//! An hour of a home that keeps a boiler beside its machine.

use super::boiler::boiler_hour;
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
    let HybridSystem { machine, .. } = hybrid;
    heat_pump_hour(
        machine,
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
    let rooms_lack_kwh = asked.rooms.least_kwh - row.machine_space_kwh - row.backup_kwh;
    let water_kwh = if has_store {
        0.0
    } else {
        asked.water.wanted_kwh
    };
    if rooms_lack_kwh > 0.0 || water_kwh > 0.0 {
        let rooms = Rooms {
            wanted_kw: rooms_lack_kwh.max(0.0),
            ..*asked.rooms
        };
        let water = StoreStep {
            wanted_kwh: water_kwh,
            ..*asked.water
        };
        let flows = (row.space_flow_c, row.space_return_c);
        boiler_hour(
            &hybrid.boiler,
            hybrid.fixed_flow_c,
            asked.home,
            &water,
            &rooms,
            row,
        );
        // The ledger shows the water of the machine where both run.
        if flows.0.is_some() {
            (row.space_flow_c, row.space_return_c) = flows;
        }
    }
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
