//! What is asked of the machine, and how long and at which water temperatures it runs for it.

use crate::answer::explain::{Lines, n};
use crate::heatpump::Duty;
use crate::home::Home;
use crate::study::{Traced, TracedDuty};
use crate::year::{DutyKind, Flags};

/// Figures agree to this where a line says how one follows from others, relative.
const AGREES: f64 = 1e-4;

/// What is asked of the machine and at which flow temperature.
pub(super) fn asked(part: &mut Lines, home: &Home, traced: &Traced, duty: &TracedDuty) {
    let asked = &duty.duty;
    part.add(
        "time it has",
        asked.hours,
        "h",
        "the hour less what hot water took",
    );
    if duty.kind == DutyKind::HotWater {
        let how = "what the store takes up to its set point, at full output";
        part.add("heat asked", asked.heat_kw, "kW", how);
        let how = "mean store temperature of the block + coil difference";
        part.add("flow to the coil", asked.flow_c, "°C", how);
        return;
    }
    let row = &traced.row;
    let behind_kwh = row.backup_kwh + row.heater_space_kwh;
    if behind_kwh > 0.0 {
        lifted(part, home, traced, asked, behind_kwh);
        return;
    }
    let wanted_kw = row.space_wanted_kwh / asked.hours;
    let how = if (wanted_kw / asked.heat_kw - 1.0).abs() < AGREES {
        format!(
            "heat wanted over the time it has = {} / {}",
            n(row.space_wanted_kwh),
            n(asked.hours)
        )
    } else if row.flags.has(Flags::FLOW_CAPPED) {
        "of the heat wanted, what the emitters take at the machine's highest flow and it can give"
            .to_owned()
    } else {
        "of the heat wanted, what machine and emitters carry in that time".to_owned()
    };
    part.add("heat asked", asked.heat_kw, "kW", how);
    water(
        part,
        home,
        traced,
        asked.heat_kw,
        asked.spread_k,
        asked.flow_c,
    );
}

/// Where a heater lifts the flow behind the machine: first the water of the whole, then the machine's part of it.
fn lifted(part: &mut Lines, home: &Home, traced: &Traced, asked: &Duty, behind_kwh: f64) {
    let row = &traced.row;
    let carried_kw = row.machine_space_kwh + behind_kwh;
    part.add(
        "heat the emitters carry",
        carried_kw,
        "kW",
        format!(
            "machine + heater behind it, in the hour = {} + {}",
            n(row.machine_space_kwh),
            n(behind_kwh)
        ),
    );
    let emitters = &home.emitters;
    let warm = emitters.supply(carried_kw, traced.before.room_c, row.outdoor_c);
    let flow_c = warm.water.flow_c + emitters.header_k();
    water(part, home, traced, carried_kw, warm.spread_k, flow_c);
    part.add(
        "heat asked",
        asked.heat_kw,
        "kW",
        if row.flags.has(Flags::FLOW_CAPPED) {
            "what warms the return of the whole to the machine's highest flow, or its greatest output there; a heater lifts the rest"
        } else {
            "its greatest output at the flow below; a heater lifts the rest"
        },
    );
    part.add(
        "spread over the machine",
        asked.spread_k,
        "K",
        format!(
            "spread at that load × heat asked / heat the emitters carry = {} × {} / {}",
            n(warm.spread_k),
            n(asked.heat_kw),
            n(carried_kw)
        ),
    );
    part.add(
        "flow asked of the machine",
        asked.flow_c,
        "°C",
        format!(
            "flow needed − spread at that load + spread over the machine = {} − {} + {}",
            n(flow_c),
            n(warm.spread_k),
            n(asked.spread_k)
        ),
    );
}

/// The water that carries a heat into the rooms.
fn water(
    part: &mut Lines,
    home: &Home,
    traced: &Traced,
    heat_kw: f64,
    spread_k: f64,
    needed_c: f64,
) {
    let emitters = &home.emitters;
    let share = heat_kw / emitters.design_load_kw();
    let room = traced.before.room_c;
    let mean = emitters.at_load(heat_kw, room).mean_c();
    let exponent = emitters.kind().exponent();
    let one_kind = room + emitters.design_excess_k() * share.powf(1.0 / exponent);
    part.add(
        "share of the design load",
        share,
        "",
        format!(
            "heat over design heat load of the emitters = {} / {}",
            n(heat_kw),
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
    let designed_k = emitters.design_spread_k() * share;
    part.add(
        "spread at that load",
        spread_k,
        "K",
        if (designed_k - spread_k).abs() < 0.01 {
            format!(
                "design spread × share = {} × {}",
                n(emitters.design_spread_k()),
                n(share)
            )
        } else {
            "at the water flow of the emitters".to_owned()
        },
    );
    let follows = mean + spread_k / 2.0;
    let header = emitters.header_k();
    part.add(
        "flow needed",
        needed_c,
        "°C",
        if (needed_c - header - follows).abs() < 1e-6 {
            format!(
                "mean water + half the spread + header = {} + {} / 2 + {}",
                n(mean),
                n(spread_k),
                n(header)
            )
        } else {
            format!("set by the control; {follows:.2} °C would carry it, the valves throttle")
        },
    );
}

/// How long it runs and at which water temperatures.
pub(super) fn running(part: &mut Lines, duty: &TracedDuty) {
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
        if asked.at_full_output {
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
