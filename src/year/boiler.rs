//! An hour of a boiler.

use super::machine::ROUNDING;
use super::rooms::Rooms;
use super::row::{Flags, Row};
use crate::extremes::lesser;
use crate::heater::Boiler;
use crate::home::{Home, StoreStep, WaterTemperatures};

/// A boiler: hot water first, then the rooms, its efficiency following the water that comes back.
pub(super) fn boiler_hour(
    boiler: &Boiler,
    fixed_flow_c: Option<f64>,
    home: &Home,
    water: &StoreStep,
    rooms: &Rooms,
    row: &mut Row,
) {
    row.heater_water_kwh = lesser(water.wanted_kwh, boiler.output_kw);
    if row.heater_water_kwh > 0.0 {
        let has_store = home
            .hot_water
            .as_ref()
            .is_some_and(|water| water.store.is_some());
        row.fuel_kwh = row.heater_water_kwh / boiler.water_efficiency(has_store);
    }
    row.heater_space_kwh = lesser(rooms.wanted_kw, boiler.output_kw - row.heater_water_kwh);
    if row.heater_space_kwh > 0.0 {
        let emitters = &home.emitters;
        let supply = match fixed_flow_c {
            None => emitters.supply(row.heater_space_kwh, rooms.room_c, rooms.outdoor_c),
            Some(flow_c) => emitters.supply_at(row.heater_space_kwh, rooms.room_c, flow_c),
        };
        row.flags |=
            Flags::FLOW_TOO_COOL.when(supply.heat_kw < row.heater_space_kwh * (1.0 - ROUNDING));
        row.heater_space_kwh = supply.heat_kw;
        let follows = supply.water;
        // Fixed: it fires now and then at its set flow, with its full water flow and so the emitters' design spread; the cool return
        // that throttling valves would give a machine that runs on is not credited to it.
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
