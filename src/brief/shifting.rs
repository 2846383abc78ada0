//! Shifting: from its table to a shifted plan.

use super::defaults::{self, Default};
use super::notes::Notes;
use super::raw::ShiftingTable;
use crate::bounds;
use crate::document::{Check, Leaf, Section};
use crate::plan::{Latitude, ShiftRule, Shifting, best_day, timer};
use crate::units::TemperatureDifference;
use crate::year::{Plan, Site, State, System};

/// Reads what may be shifted and how.
pub(super) fn shifting(
    table: &Section<ShiftingTable>,
    check: &mut Check,
    notes: &mut Notes,
) -> Option<(ShiftRule, Shifting)> {
    let rule = check.required(
        &table.rule,
        &table.span(),
        "choice.shifting.rule",
        "\"timer\"",
    );
    let mut kelvins = |leaf: &Option<Leaf<TemperatureDifference>>, default: &Default| {
        notes
            .quantity(check, leaf, &bounds::SHIFT_K, default)
            .map(|difference| difference.k())
    };
    let rooms_above = kelvins(&table.rooms_above, &defaults::ROOMS_ABOVE);
    let rooms_below = kelvins(&table.rooms_below, &defaults::ROOMS_BELOW);
    let store_above = kelvins(&table.store_above, &defaults::STORE_ABOVE);
    let store_below = kelvins(&table.store_below, &defaults::STORE_BELOW);
    let (rule,) = rule?;
    if rule == ShiftRule::BestDay {
        notes.add(
            "shifting \"best-day\"",
            "knows weather, draws and prices of the day ahead, so its saving is an upper bound; heat left over is worth the mean price over a COP of 3",
            "dynamic programming over rooms and store, half a day beyond each day",
        );
    }
    Some((
        rule,
        Shifting {
            rooms: Latitude {
                above_k: rooms_above?,
                below_k: rooms_below?,
            },
            store: Latitude {
                above_k: store_above?,
                below_k: store_below?,
            },
        },
    ))
}

/// The shifted plan.
pub(super) fn shifted(
    (rule, shifting): &(ShiftRule, Shifting),
    plan: &Plan,
    site: &Site,
    system: &System,
    indoor_c: f64,
) -> Plan {
    match rule {
        ShiftRule::Timer => timer(plan, &site.civil, shifting),
        ShiftRule::BestDay => {
            let state = State::at_rest(system, indoor_c);
            best_day(plan, site, system, shifting, state)
        }
    }
}
