//! What is asked of the machine, and how long and at which water temperatures it runs for it.

use crate::answer::explain::{Lines, n};
use crate::home::Home;
use crate::study::{Traced, TracedDuty};
use crate::year::DutyKind;

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
