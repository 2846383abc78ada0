//! The home in sentences: design point, rooms, store, running pattern, meter readings.

use super::text::wrapped;
use crate::answer::Estimate;
use crate::units::as_set;

/// What belongs on the first screen: the room that sets today's flow, what another running pattern does, and the meter.
pub(super) fn home_in_words(estimate: &Estimate) -> Vec<String> {
    let mut lines = Vec::new();
    for system in &estimate.systems {
        let words = if system.today {
            system.rooms.as_ref()
        } else {
            None
        };
        lines.extend(words.map(|rooms| format!("Rooms: {}.", rooms.sentence)));
    }
    for system in &estimate.systems {
        if let (Some(heat), Some(cost)) = (system.pattern_heat_kwh, system.pattern_cost) {
            let share = heat / (system.space_heat_kwh - heat) * 100.0;
            lines.push(format!(
                "{} runs {}: {heat:+.0} kWh of heat ({share:+.0} %) and {cost:+.0} {} against today's pattern.",
                system.label, system.pattern, estimate.currency
            ));
        }
    }
    lines.extend(
        estimate
            .home
            .metered
            .iter()
            .map(|metered| format!("Meter: {}.", metered.sentence)),
    );
    lines
}

/// Design point, rooms, store and running pattern of every system.
pub fn home_text(estimate: &Estimate) -> String {
    let mut lines = vec!["The home".to_owned()];
    let home = &estimate.home;
    if let (Some(transmission), Some(ventilation)) =
        (home.transmission_w_per_k, home.ventilation_w_per_k)
    {
        lines.push(format!(
            "  heat loss: {transmission:.0} W/K through the fabric, {ventilation:.0} W/K with the air"
        ));
    }
    for system in &estimate.systems {
        lines.push(format!("  {}: {}", system.label, system.pattern));
        let design = &system.design;
        let mut detail = vec![
            design.sentence.clone(),
            format!(
                "flow to the emitters {:.1} °C, from the heater {:.1} °C, {:.1} L of water a minute",
                design.flow_c, design.heater_flow_c, design.water_l_per_min
            ),
        ];
        detail.extend(system.rooms.iter().map(|rooms| rooms.sentence.clone()));
        if let Some(store) = &system.store {
            let reheat = store.reheat_hours.map_or(String::new(), |hours| {
                format!(", reheated from cold in {hours:.1} h")
            });
            detail.push(format!(
                "store of {:.0} L: {:.0} L at {} °C when full{reheat}, loses {:.1} kWh a day",
                store.volume_l,
                store.usable_l,
                as_set(store.drawn_at_c),
                store.standing_loss_kwh_per_day
            ));
        }
        let parts: Vec<_> = system
            .capital_parts
            .iter()
            .map(|(part, amount)| format!("{part} {amount:.0}"))
            .collect();
        if !parts.is_empty() {
            detail.push(format!(
                "capital in {}: {}",
                estimate.currency,
                parts.join(", ")
            ));
        }
        lines.extend(detail.iter().map(|line| wrapped(line, "    ", "      ")));
    }
    lines.join("\n")
}

/// Every system all day at its set point beside a set-back.
pub fn patterns_text(estimate: &Estimate) -> String {
    let mut lines = vec!["All day against a set-back".to_owned()];
    for comparison in &estimate.patterns {
        let (all_day, set_back) = (&comparison.continuous, &comparison.set_back);
        let line = format!(
            "{}: {} against {}: {:+.1} % heat, {:+.0} {} a year, coldest {:.1} against {:.1} °C",
            comparison.label,
            all_day.pattern,
            set_back.pattern,
            comparison.more_heat_percent,
            all_day.cost - set_back.cost,
            estimate.currency,
            all_day.min_indoor_c,
            set_back.min_indoor_c
        );
        lines.push(wrapped(&line, "  ", "    "));
    }
    lines.join("\n")
}
