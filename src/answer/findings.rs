//! What an estimate warns of: what a system leaves cold, a source too cold for its machine, hot water, and a meter that disagrees.

use super::estimate::SystemAnswer;
use super::home::MeteredAnswer;
use crate::problem::{Finding, Severity};
use crate::signature::Signature;
use crate::study::{Case, Contender, Outcome};
use crate::units::as_set;

/// What a system leaves cold: rooms, taps, the design day.
pub(super) fn shortfalls(system: &SystemAnswer) -> Vec<Finding> {
    let label = &system.label;
    let mut found = Vec::new();
    if system.hours_short >= 0.5 {
        found.push(Finding::new(
            Severity::Caution,
            format!(
                "\"{label}\" leaves the rooms more than 1 K below the set point in {:.0} hours a year, down to {:.1} °C",
                system.hours_short, system.min_indoor_c
            ),
            "a larger machine, backup heat or larger emitters would be needed; size from a room-by-room heat-loss calculation by a competent person",
        ));
    }
    if system.hours_water_short >= 0.5 {
        found.push(Finding::new(
            Severity::Warning,
            format!("\"{label}\" gives hot water that is too cool in {:.0} hours a year", system.hours_water_short),
            "a larger store, a higher set point, longer reheat windows or more output would be needed",
        ));
    }
    let stopped = system
        .hours_stopped
        .filter(|&hours| hours >= 0.5 && system.ground.is_none());
    if let Some(hours) = stopped {
        found.push(Finding::new(
            Severity::Caution,
            format!(
                "the machine of \"{label}\" stands in {hours:.0} hours a year because its source is outside its limits; backup and immersion heater use {:.0} kWh",
                system.backup_kwh.unwrap_or(0.0)
            ),
            "a machine made for such weather, or backup for the whole load of those hours, would be needed",
        ));
    }
    if !system.design.covered {
        found.push(Finding::new(
            Severity::Caution,
            format!("\"{label}\": {}", system.design.sentence),
            "size from a room-by-room heat-loss calculation by a competent person",
        ));
    }
    found
}

/// A loop too short for its machine.
pub(super) fn source_too_cold(system: &SystemAnswer) -> Option<Finding> {
    let ground = system
        .ground
        .as_ref()
        .filter(|ground| ground.hours_stopped + ground.hours_turned_down >= 0.5)?;
    Some(Finding::new(
        Severity::Caution,
        format!(
            "the machine of \"{}\" stands in {:.0} hours and is turned down in {:.0} hours of year {} of its loop because the brine is too cold for it; backup and immersion heater use {:.0} kWh",
            system.label,
            ground.hours_stopped,
            ground.hours_turned_down,
            ground.shown_year,
            system.backup_kwh.unwrap_or(0.0),
        ),
        "the loop is too short for this home and machine: see the command ground for the shortest one that would do",
    ))
}

/// A machine that the coldest hour of its source and the hottest flow asked of it would overheat.
pub(super) fn hot_discharge(
    contender: &Contender,
    outcome: &Outcome,
    system: &SystemAnswer,
) -> Option<Finding> {
    let machine = &contender.system.heating.machine()?.machine;
    let coldest_c = outcome
        .years
        .iter()
        .map(|year| year.min_source_c)
        .fold(f64::INFINITY, f64::min);
    let water = contender.system.home.hot_water.as_ref();
    let store_c = water
        .and_then(|water| water.store)
        .map_or(0.0, |store| store.set_point_c + store.coil_k);
    let flow_c = system.design.heater_flow_c.max(store_c);
    coldest_c
        .is_finite()
        .then(|| machine.hot_discharge(coldest_c, flow_c))?
}

/// A set point of the store that the machine cannot reach: the immersion heater lifts the rest, day after day.
pub(super) fn water_beyond_reach(contender: &Contender, outcome: &Outcome) -> Option<Finding> {
    let machine = contender.system.heating.machine()?;
    let store = contender.system.home.hot_water.as_ref()?.store?;
    let highest_c = machine.machine.limits().highest_flow_anywhere();
    let reach_c = highest_c - store.coil_k;
    let immersion_kwh = outcome.mean_sums().immersion_kwh;
    if store.set_point_c <= reach_c || immersion_kwh < 0.5 {
        return None;
    }
    let price = &contender.plan.electricity.price;
    let mean_price = price.iter().sum::<f64>() / price.len() as f64;
    let instead = match store.hygiene {
        None => {
            "a lower set point with a weekly cycle, hygiene = \"immersion\", would cost less; local rules on legionella decide"
        }
        Some(_) => "a lower set point would cost less; local rules on legionella decide",
    };
    Some(Finding::new(
        Severity::Warning,
        format!(
            "the machine of \"{}\" reaches {} °C in this store (highest flow {} °C less {} K of the coil), which is to be at {} °C; the \
             immersion heater lifts the rest: {immersion_kwh:.0} kWh, about {:.0} {} a year",
            contender.system.label,
            as_set(reach_c),
            as_set(highest_c),
            as_set(store.coil_k),
            as_set(store.set_point_c),
            immersion_kwh * mean_price,
            contender.electricity.tariff.currency,
        ),
        instead,
    ))
}

/// Stored hot water below the temperature of UK HSE guidance: 60 °C in the store, at the taps no less than 50 °C within a minute.
pub(super) fn cool_stores(case: &Case) -> Option<Finding> {
    const HYGIENE_C: f64 = 60.0;
    let cool: Vec<_> = case
        .contenders
        .iter()
        .filter(|contender| {
            let store = contender
                .system
                .home
                .hot_water
                .as_ref()
                .and_then(|water| water.store);
            store.is_some_and(|store| {
                let cycle_c = store.hygiene.map_or(0.0, |cycle| cycle.target_c);
                store.set_point_c < HYGIENE_C && cycle_c < HYGIENE_C
            })
        })
        .map(|contender| format!("\"{}\"", contender.system.label))
        .collect();
    (!cool.is_empty()).then(|| {
        Finding::new(
            Severity::Caution,
            format!("hot water is stored below {HYGIENE_C:.0} °C by {}", cool.join(", ")),
            "legionella can grow there, so a weekly hygiene cycle is usual (hygiene = \"immersion\" or \"machine\" under hot_water in the brief), and water above 50 °C scalds; follow local rules and a licensed installer",
        )
    })
}

/// Stores that are made hot against legionella: the water scalds then.
pub(super) fn hygiene_cycles(case: &Case) -> Option<Finding> {
    let hot: Vec<_> = case
        .contenders
        .iter()
        .filter_map(|contender| {
            let cycle = contender.system.home.hot_water.as_ref()?.store?.hygiene?;
            Some(format!(
                "\"{}\" to {} °C",
                contender.system.label,
                as_set(cycle.target_c)
            ))
        })
        .collect();
    (!hot.is_empty()).then(|| {
        Finding::new(
            Severity::Caution,
            format!("the hot-water store is heated once a week by {}", hot.join(", ")),
            "water above 50 °C scalds: mixing valves at the taps; how often and how hot is for local rules and a licensed installer to say",
        )
    })
}

/// A meter and a model that are further apart than the limits of both explain.
pub(super) fn disagreement(metered: &MeteredAnswer, signature: &Signature) -> Option<Finding> {
    let half_meter = (metered.metered_95[1] - metered.metered_95[0]) / 2.0;
    let loss = signature.heat_loss();
    // Fuel rises with the heat loss no faster than in proportion.
    let half_model = metered.modelled_kwh * loss.half() / loss.value;
    let apart = (metered.modelled_kwh - metered.metered_kwh).abs();
    if metered.scaled_by.is_some() || apart <= half_meter.hypot(half_model) {
        return None;
    }
    let warmer = signature.own_home.as_ref().map_or_else(String::new, |own| {
        format!(
            "; the readings fit rooms {:+.1} K against the brief and {:.1} kWh a day beside heating",
            own.warmer_k.value, own.base_load_kwh_per_day.value
        )
    });
    Some(Finding::new(
        Severity::Caution,
        format!(
            "today's fuel is {:.0} kWh by the meter and {:.0} kWh modelled ({:+.0} %), more apart than the limits explain{warmer}",
            metered.metered_kwh, metered.modelled_kwh, metered.difference_percent
        ),
        "bills and savings are those of the modelled fuel: write scale = true under [home.bills] to follow the meter, or look at \
         efficiency, set points, gains and hot water",
    ))
}
