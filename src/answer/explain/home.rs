//! What weather, rooms and hot water ask, and what the hour did to them.

use super::{Lines, Part, n, sum};
use crate::home::Home;
use crate::study::{Case, Contender, Traced};
use crate::units::as_set;
use crate::year::Flags;

pub(super) fn weather(case: &Case, traced: &Traced) -> Part {
    let site = &case.site;
    let hour = traced.hour;
    let mut part = Lines::new();
    part.add("outdoor air", traced.row.outdoor_c, "°C", "weather file");
    let humidity = site
        .relative_humidity
        .as_ref()
        .map(|column| column[hour] * 100.0);
    part.given(
        "relative humidity",
        humidity,
        "%",
        "weather file, or its finding where it has none; over liquid water",
    );
    let sun = site.global_w_per_m2.as_ref().map(|column| column[hour]);
    part.given("global radiation", sun, "W/m²", "weather file");
    part.part("The weather")
}

pub(super) fn rooms(contender: &Contender, traced: &Traced) -> Part {
    let row = &traced.row;
    let fabric = &contender.system.home.fabric;
    let loss = fabric.heat_loss_w_per_k() / 1000.0;
    let before = traced.before.room_c;
    let mut part = Lines::new();
    part.add("heat-loss coefficient", loss * 1000.0, "W/K", "brief");
    part.add("rooms before", before, "°C", "end of the hour before");
    part.add("set point", row.set_point_c, "°C", "plan");
    let internal = fabric.internal_gains_kw();
    part.add(
        "gains",
        row.gains_kwh,
        "kW",
        format!(
            "internal + sun = {} + {}",
            n(internal),
            n(row.gains_kwh - internal)
        ),
    );
    let tau = fabric.time_constant_h();
    let at_the_time = contender
        .plan
        .recovery
        .as_ref()
        .is_some_and(|recovery| recovery.at_the_time);
    let (heads_for, within) = fabric.recovery_heads_for_c(before, row.set_point_c, at_the_time);
    part.add(
        "temperature to head for",
        heads_for,
        "°C",
        if tau > 0.0 {
            format!(
                "(set point − before × e^(−{within:.0} h/τ)) / (1 − e^(−{within:.0} h/τ)) = ({} − {before:.5} × e^(−{within:.0}/{})) / (1 − e^(−{within:.0}/{}))",
                n(row.set_point_c),
                n(tau),
                n(tau),
            )
        } else {
            "the set point: nothing is stored".to_owned()
        },
    );
    let how = if row.flags.has(Flags::RECOVERY) {
        "the even heat that brings the rooms to the next set point in time".to_owned()
    } else if row.space_wanted_kwh > 0.0 {
        format!(
            "H × (head for − outdoor) − gains = {} × ({} − {}) − {}",
            n(loss),
            n(heads_for),
            n(row.outdoor_c),
            n(row.gains_kwh)
        )
    } else {
        "gains and stored heat are enough".to_owned()
    };
    part.add("heat wanted", row.space_wanted_kwh, "kWh", how);
    let by_fabric_kw = fabric.design_load_kw(contender.indoor_c, contender.design_outdoor_c);
    part.add(
        "design heat load",
        contender.design_load_kw,
        "kW",
        if (by_fabric_kw / contender.design_load_kw - 1.0).abs() < 1e-9 {
            format!(
                "H × (set point − design outdoor), gains not counted = {} × ({} − {})",
                n(loss),
                n(contender.indoor_c),
                n(contender.design_outdoor_c)
            )
        } else {
            "of the home as surveyed: scaling to the meter leaves it".to_owned()
        },
    );
    part.part("What the rooms ask")
}

pub(super) fn hot_water(home: &Home, month0: usize, traced: &Traced) -> Option<Part> {
    let water = home.hot_water.as_ref()?;
    let row = &traced.row;
    let daily_kwh = water.daily_kwh[month0];
    let mut part = Lines::new();
    part.add(
        "drawn at the taps",
        row.water_drawn_kwh,
        "kWh",
        format!(
            "{} kWh a day of the month × share of the clock hour",
            n(daily_kwh)
        ),
    );
    if let Some(store) = &water.store {
        let before = traced.before.store.mean_c;
        let after_draw =
            before - (row.water_drawn_kwh + row.store_loss_kwh) / store.capacity_kwh_per_k;
        part.add("store before", before, "°C", "end of the hour before");
        part.add(
            "standing loss",
            row.store_loss_kwh,
            "kWh",
            format!(
                "loss × (store − surroundings) = {} × ({} − {})",
                n(store.loss_kw_per_k),
                n(before),
                n(store.surroundings_c)
            ),
        );
        part.add(
            "store after draw and loss",
            after_draw,
            "°C",
            format!(
                "before − (drawn + loss) / capacity = {} − ({} + {}) / {}",
                n(before),
                n(row.water_drawn_kwh),
                n(row.store_loss_kwh),
                n(store.capacity_kwh_per_k),
            ),
        );
        part.add(
            "heat to the store",
            row.water_heat_kwh(),
            "kWh",
            format!(
                "a block at full output before the rooms, begun below {} °C, up to {} °C",
                as_set(store.set_point_c - store.hysteresis_k),
                as_set(store.set_point_c)
            ),
        );
    }
    Some(part.part("What hot water asks"))
}

pub(super) fn after(home: &Home, traced: &Traced) -> Part {
    let row = &traced.row;
    let fabric = &home.fabric;
    let mut part = Lines::new();
    let heat = row.space_heat_kwh();
    part.add(
        "heat to the rooms",
        heat,
        "kWh",
        format!(
            "machine, boiler or electric heater, backup = {}",
            sum(&[row.machine_space_kwh, row.heater_space_kwh, row.backup_kwh])
        ),
    );
    let loss = fabric.heat_loss_w_per_k() / 1000.0;
    let kept = heat + row.gains_kwh - row.aired_kwh;
    let heads_for = row.outdoor_c + kept / loss;
    let tau = fabric.time_constant_h();
    part.add(
        "the rooms head for",
        heads_for,
        "°C",
        format!(
            "outdoor + (heat + gains − aired) / H = {} + ({} + {} − {}) / {}",
            n(row.outdoor_c),
            n(heat),
            n(row.gains_kwh),
            n(row.aired_kwh),
            n(loss)
        ),
    );
    part.add(
        "rooms after",
        row.indoor_c,
        "°C",
        if tau > 0.0 {
            format!(
                "head for + (before − head for) × e^(−1 h/τ) = {heads_for:.5} + ({:.5} − {heads_for:.5}) × e^(−1/{})",
                traced.before.room_c,
                n(tau)
            )
        } else {
            "what they head for: nothing is stored".to_owned()
        },
    );
    part.add(
        "stored in the fabric",
        row.room_stored_kwh,
        "kWh",
        format!(
            "capacity × (after − before) = {} × ({:.5} − {:.5})",
            n(fabric.capacity_kwh_per_k()),
            row.indoor_c,
            traced.before.room_c
        ),
    );
    part.add(
        "lost through the fabric",
        row.fabric_loss_kwh,
        "kWh",
        format!(
            "heat + gains − stored − aired = {} + {} − {} − {}",
            n(heat),
            n(row.gains_kwh),
            n(row.room_stored_kwh),
            n(row.aired_kwh)
        ),
    );
    part.given(
        "store after",
        row.store_c,
        "°C",
        "after draw and loss + heat to the store / capacity",
    );
    part.part("What it did")
}
