//! From the hot-water tables to draws and a store.

use std::ops::Range;

use super::defaults;
use super::home::WeatherFacts;
use super::leaves::HygieneBy;
use super::notes::Notes;
use super::raw::{HotWaterTable, StoreVolume, SystemKind};
use crate::bounds;
use crate::document::{Check, Leaf, Section};
use crate::home::{HotWater, Hygiene, Store, TappingProfile};
use crate::units::{Temperature, parse};

/// The home's table and the system's own.
#[derive(Clone, Copy)]
struct Tables<'a> {
    own: Option<&'a Section<HotWaterTable>>,
    home: Option<&'a Section<HotWaterTable>>,
}

/// A field of a choice's table where it is given, else of the home's.
macro_rules! either {
    ($tables:expr, $field:ident) => {
        match ($tables.own, $tables.home) {
            (Some(own), _) if own.$field.is_some() => &own.$field,
            (_, Some(home)) => &home.$field,
            _ => &None,
        }
    };
}

fn span_of<T>(leaf: &Option<Leaf<T>>) -> Range<usize> {
    leaf.as_ref().map(Leaf::span).unwrap_or_default()
}

#[allow(
    clippy::option_option,
    reason = "outer: could not be read; inner: no hot water is asked for"
)]
pub(super) fn hot_water(
    home: Option<&Section<HotWaterTable>>,
    own: Option<&Section<HotWaterTable>>,
    kind: Option<SystemKind>,
    weather: &WeatherFacts,
    check: &mut Check,
    notes: &mut Notes,
) -> Option<Option<HotWater>> {
    if home.is_none() && own.is_none() {
        notes.add(
            "home.hot_water",
            "none",
            "the brief has no [home.hot_water]: its heat is left out of every system",
        );
        return Some(None);
    }
    let tables = Tables { own, home };
    let profile = check
        .value(either!(tables, profile))
        .map(|(profile,)| profile);
    let draw_leaf = either!(tables, drawn_at);
    let drawn_at = notes.quantity(check, draw_leaf, &bounds::HOT_WATER_C, &defaults::DRAWN_AT);
    let cold_c = cold_c(tables, weather, check, notes);
    let (drawn_at_c, cold_c) = (drawn_at?.c(), cold_c?);
    let warmest_c = cold_c.iter().copied().fold(f64::NEG_INFINITY, f64::max);
    if drawn_at_c <= warmest_c {
        check.refuse(
            &span_of(draw_leaf),
            format!("drawn at {drawn_at_c:.1} °C from cold water at {warmest_c:.1} °C"),
            "warmer than the cold water",
            "check both temperatures",
        );
        return None;
    }
    let daily_kwh = daily_kwh(tables, profile, drawn_at_c, &cold_c, check, notes)?;
    let store = store(tables, kind, drawn_at_c, check, notes)?;
    if profile.is_none() {
        notes.add(
            "hot water draws by hour",
            "profile M",
            "Regulation (EU) No 811/2013, scaled to the day's heat",
        );
    }
    Some(Some(HotWater {
        daily_kwh,
        shares: profile.unwrap_or(TappingProfile::M).shares(),
        cold_c,
        store,
        draw_c: drawn_at_c,
    }))
}

fn cold_c(
    tables: Tables<'_>,
    weather: &WeatherFacts,
    check: &mut Check,
    notes: &mut Notes,
) -> Option<[f64; 12]> {
    let leaf = either!(tables, cold);
    if leaf.is_some() {
        let cold_c = check.value(leaf)?.0;
        if let Some(wrong) = cold_c.iter().find(|&&c| !bounds::COLD_WATER_C.holds(c)) {
            check.refuse(
                &span_of(leaf),
                format!("{wrong} °C"),
                bounds::COLD_WATER_C.words(),
                "check the temperature",
            );
            return None;
        }
        return Some(cold_c);
    }
    if let Some(main_c) = weather.main_c {
        let low = main_c.iter().copied().fold(f64::INFINITY, f64::min);
        let high = main_c.iter().copied().fold(f64::NEG_INFINITY, f64::max);
        notes.add(
            "home.hot_water.cold",
            format!("{low:.0} to {high:.0} °C through the year"),
            "default: ground at 1 m, annual wave of the weather file carried down by Kusuda and Achenbach 1965",
        );
        return Some(main_c);
    }
    notes.used(&defaults::COLD_WATER);
    Some([parse::<Temperature>(defaults::COLD_WATER.value).ok()?.c(); 12])
}

fn daily_kwh(
    tables: Tables<'_>,
    profile: Option<TappingProfile>,
    drawn_at_c: f64,
    cold_c: &[f64; 12],
    check: &mut Check,
    notes: &mut Notes,
) -> Option<[f64; 12]> {
    let daily_leaf = either!(tables, daily);
    let energy_leaf = either!(tables, daily_energy);
    if let (Some(leaf), Some(_)) = (daily_leaf, energy_leaf) {
        check.refuse(
            &leaf.span(),
            "both daily and daily_energy",
            "one of them",
            "keep the one that was measured",
        );
        return None;
    }
    if daily_leaf.is_some() {
        let litres = check.within(daily_leaf, &bounds::HOT_WATER_L)?.l();
        return Some(cold_c.map(|cold_c| HotWater::energy_kwh(litres, drawn_at_c, cold_c)));
    }
    if let (None, Some(profile)) = (energy_leaf, profile) {
        return Some([profile.daily_kwh(); 12]);
    }
    let energy = notes.quantity(
        check,
        energy_leaf,
        &bounds::HOT_WATER_KWH,
        &defaults::HOT_WATER_DAILY,
    )?;
    Some([energy.kwh(); 12])
}

#[allow(
    clippy::option_option,
    reason = "outer: could not be read; inner: water is heated as it is drawn"
)]
fn store(
    tables: Tables<'_>,
    kind: Option<SystemKind>,
    drawn_at_c: f64,
    check: &mut Check,
    notes: &mut Notes,
) -> Option<Option<Store>> {
    let leaf = either!(tables, store);
    let is_machine = matches!(kind, Some(SystemKind::AirSource | SystemKind::GroundSource));
    let volume = match notes.word(check, leaf, &defaults::STORE)? {
        StoreVolume::None if is_machine => {
            check.refuse(
                &span_of(leaf),
                "a heat pump without a hot-water store",
                bounds::STORE_L.words(),
                "give the choice a table [choice.hot_water] with store = \"200 L\"",
            );
            return None;
        }
        StoreVolume::None => return Some(None),
        StoreVolume::Of(volume) => volume,
    };
    if !bounds::STORE_L.holds(volume.l()) {
        let found = format!("{} L", volume.l());
        check.refuse(
            &span_of(leaf),
            found,
            bounds::STORE_L.words(),
            "check the number and its unit",
        );
        return None;
    }
    let set_point_leaf = either!(tables, setpoint);
    let set_point = notes.quantity(
        check,
        set_point_leaf,
        &bounds::HOT_WATER_C,
        &defaults::SET_POINT,
    );
    let hysteresis = notes.quantity(
        check,
        either!(tables, hysteresis),
        &bounds::HYSTERESIS_K,
        &defaults::HYSTERESIS,
    );
    let usable = notes.quantity(
        check,
        either!(tables, usable),
        &bounds::SHARE,
        &defaults::USABLE,
    );
    let reheat = check.value(either!(tables, reheat));
    let reheat_is_wrong = either!(tables, reheat).is_some() && reheat.is_none();
    let set_point_c = set_point?.c();
    let hygiene = hygiene(tables, kind, set_point_c, check, notes);
    if set_point_c < drawn_at_c {
        check.refuse(
            &span_of(set_point_leaf),
            format!("a store at {set_point_c:.1} °C for water drawn at {drawn_at_c:.1} °C"),
            "a store at least as warm as the water drawn",
            "raise setpoint or lower drawn_at",
        );
        return None;
    }
    if reheat_is_wrong {
        return None;
    }
    let mut store = Store::of_volume(volume.l(), set_point_c);
    store.hysteresis_k = hysteresis?.k();
    store.usable = usable?.fraction();
    store.hygiene = hygiene?;
    if let Some(spells) = reheat {
        store.reheat = spells.clock_hours();
    }
    Some(Some(store))
}

#[allow(
    clippy::option_option,
    reason = "outer: could not be read; inner: no cycle"
)]
fn hygiene(
    tables: Tables<'_>,
    kind: Option<SystemKind>,
    set_point_c: f64,
    check: &mut Check,
    notes: &mut Notes,
) -> Option<Option<Hygiene>> {
    let leaf = either!(tables, hygiene);
    let target_leaf = either!(tables, hygiene_temperature);
    if leaf.is_none() {
        return Some(None);
    }
    let by = check.value(leaf)?.0;
    if by == HygieneBy::None {
        return Some(None);
    }
    let target = notes.quantity(
        check,
        target_leaf,
        &bounds::HOT_WATER_C,
        &defaults::HYGIENE_TEMPERATURE,
    );
    let day = notes.word(check, either!(tables, hygiene_day), &defaults::HYGIENE_DAY);
    let hour_leaf = either!(tables, hygiene_hour);
    let hour = check.value(hour_leaf);
    if hour_leaf.is_some() && hour.is_none() {
        return None;
    }
    /// Begins after midday, when the air is warmest. A choice of ours.
    const USUAL_HOUR: u8 = 13;
    let target_c = target?.c();
    if target_c < set_point_c {
        check.refuse(
            &span_of(target_leaf),
            format!("a hygiene cycle to {target_c:.1} °C of a store at {set_point_c:.1} °C"),
            "at least the set point",
            "raise hygiene_temperature or lower setpoint",
        );
        return None;
    }
    let is_machine = matches!(kind, Some(SystemKind::AirSource | SystemKind::GroundSource));
    Some(Some(Hygiene {
        day: day?.0.0,
        hour: hour.map_or(USUAL_HOUR, |hour| hour.0),
        target_c,
        // A boiler or an electric heater does it itself.
        by_immersion: by == HygieneBy::Immersion && is_machine,
    }))
}
