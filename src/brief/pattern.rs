//! From a pattern table to the set points of a week and a year.

use super::clock_leaves::Spells;
use super::defaults;
use super::leaves::SetBack;
use super::notes::Notes;
use super::raw::PatternTable;
use crate::bounds;
use crate::document::{Check, Leaf, Section};
use crate::home::{FROST_C, Pattern, WarmUp};
use crate::units::{Temperature, as_set, parse};

/// The pattern of a table, or the same set point day and night where there is none.
pub(super) fn pattern(
    table: Option<&Section<PatternTable>>,
    indoor_c: f64,
    check: &mut Check,
    notes: &mut Notes,
) -> Option<Pattern> {
    let Some(table) = table else {
        notes.add(
            "home.pattern",
            format!("{} °C all day", as_set(indoor_c)),
            "no pattern is given",
        );
        return Some(Pattern::continuous(indoor_c));
    };
    let before = check.problems().len();
    let weekdays = check.value(&table.weekdays);
    let weekends = check.value(&table.weekends);
    let set_back = check.value(&table.set_back);
    let season = check.value(&table.season);
    let holidays = check.value(&table.holidays);
    let holiday = check.within(&table.holiday, &bounds::INDOOR_C);
    let warm_up = check.value(&table.warm_up);
    if table.continuous.is_some() && check.value(&table.continuous) == Some(true) {
        if let Some(leaf) = table.weekdays.as_ref().or(table.weekends.as_ref()) {
            check.refuse(
                &leaf.span(),
                "heated spells beside continuous = true",
                "one of them",
                "remove the spells, or continuous",
            );
        }
    } else if table.weekdays.is_none() {
        check.missing(
            &table.span(),
            "weekdays",
            "[\"06:00-09:00\", \"16:00-22:00\"], or continuous = true",
        );
    }
    let set_back_c = match set_back {
        Some(SetBack::Off) => FROST_C,
        Some(SetBack::To(set_back_c)) => {
            sane(&table.set_back, set_back_c, indoor_c, check);
            set_back_c
        }
        None if table.weekdays.is_some() => {
            notes.used(&defaults::SET_BACK);
            parse::<Temperature>(defaults::SET_BACK.value).ok()?.c()
        }
        None => indoor_c,
    };
    let day = |spells: &Spells| -> [f64; 24] {
        let mut set_points = [set_back_c; 24];
        for spell in &spells.0 {
            for hour in spell.hours() {
                set_points[usize::from(hour)] = spell.set_point_c.unwrap_or(indoor_c);
            }
        }
        set_points
    };
    for (leaf, spells) in [(&table.weekdays, &weekdays), (&table.weekends, &weekends)] {
        for own_c in spells
            .iter()
            .flat_map(|spells| &spells.0)
            .filter_map(|spell| spell.set_point_c)
        {
            if !bounds::INDOOR_C.holds(own_c)
                && let Some(leaf) = leaf
            {
                check.refuse(
                    &leaf.span(),
                    format!("{own_c} °C"),
                    bounds::INDOOR_C.words(),
                    "check the set point",
                );
            }
        }
    }
    let weekday_c = weekdays.as_ref().map_or([indoor_c; 24], day);
    if warm_up.is_none() && weekdays.is_some() {
        notes.used(&defaults::WARM_UP);
    }
    (check.problems().len() == before).then(|| Pattern {
        weekday_c,
        weekend_c: weekends.as_ref().map_or(weekday_c, day),
        season: season.and_then(|spans| spans.0.first().copied()),
        holidays: holidays.map_or_else(Vec::new, |spans| spans.0),
        holiday_c: holiday.map_or(set_back_c, |holiday| holiday.c()),
        warm_up: warm_up.unwrap_or(WarmUp::InTime),
    })
}

fn sane(leaf: &Option<Leaf<SetBack>>, set_back_c: f64, indoor_c: f64, check: &mut Check) {
    let Some(leaf) = leaf else { return };
    if !bounds::INDOOR_C.holds(set_back_c) || set_back_c > indoor_c {
        check.refuse(
            &leaf.span(),
            format!("a set-back to {set_back_c:.1} °C from {indoor_c:.1} °C"),
            "at least 5 °C and at most the set point",
            "lower set_back or raise indoor",
        );
    }
}
