//! An hour of hot water: what is drawn, and what its heat leaves in the store.

use super::row::{Flags, Row};
use super::site::Site;
use super::system::State;
use crate::extremes::greater;
use crate::fault::{self, Fault};
use crate::home::{Home, StoreStep, Tapped};

/// Draws an hour's hot water and says what its heater must bring.
#[inline]
pub(super) fn draw(
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
        Some(store) if shift_k == 0.0 => step = store.step(&state.store, &tapped, clock),
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
#[inline]
pub(super) fn store_hour(home: &Home, water: &StoreStep, state: &mut State, row: &mut Row) {
    let store = home
        .hot_water
        .as_ref()
        .and_then(|water| water.store.as_ref());
    let Some(store) = store else {
        // What is heated as it is drawn comes out as hot as the heater can make it.
        let missing_kwh = greater(water.wanted_kwh - row.water_heat_kwh(), 0.0);
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
