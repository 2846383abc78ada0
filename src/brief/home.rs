//! From the home tables to the warm side of one system.

use std::ops::Range;

use super::defaults;
use super::notes::Notes;
use super::raw::{
    EmitterTable, Home as HomeTable, HotWaterTable, StoreVolume, SystemKind, SystemTable,
};
use crate::bounds;
use crate::document::{Check, Section};
use crate::home::{DRAW_SHARES, Emitters, Fabric, Home, HotWater, Store};
use crate::units::{Share, parse};

/// What the weather says about the home's design.
#[derive(Debug, Clone, Copy)]
pub(super) struct WeatherFacts {
    /// Temperature exceeded in 99.6 % of the hours, °C.
    pub design_c: f64,
    /// Whether there is a radiation column.
    pub has_radiation: bool,
}

/// The warm side of one system, with what sizing needs.
#[derive(Debug, Clone)]
pub(super) struct Warm {
    /// The home as this system finds it.
    pub home: Home,
    /// Indoor set point, °C.
    pub indoor_c: f64,
    /// Design outdoor temperature, °C.
    pub design_outdoor_c: f64,
    /// Design heat load, kW.
    pub design_load_kw: f64,
}

/// Heat loss, set point and design temperature, before anything is made of them.
struct Envelope {
    heat_loss_w_per_k: f64,
    indoor_c: f64,
    design_outdoor_c: f64,
}

impl Envelope {
    fn design_load_kw(&self) -> f64 {
        self.heat_loss_w_per_k * (self.indoor_c - self.design_outdoor_c) / 1000.0
    }
}

/// The warm side of one system: the home's tables, overridden by the system's own.
pub(super) fn warm_side(
    home: &Section<HomeTable>,
    system: &SystemTable,
    kind: Option<SystemKind>,
    weather: &WeatherFacts,
    check: &mut Check,
    notes: &mut Notes,
) -> Option<Warm> {
    let as_is = envelope(home, weather, check, notes);
    let heat_loss = check.within(&system.heat_loss, &bounds::HEAT_LOSS_W_PER_K);
    let indoor = check.within(&system.indoor, &bounds::INDOOR_C);
    let fabric_parts = fabric_parts(home, weather, check, notes);
    let hot_water = hot_water(
        home.hot_water.as_ref(),
        system.hot_water.as_ref(),
        kind,
        check,
        notes,
    );

    let as_is = as_is?;
    let own = Envelope {
        heat_loss_w_per_k: heat_loss.map_or(as_is.heat_loss_w_per_k, |loss| loss.w_per_k()),
        indoor_c: indoor.map_or(as_is.indoor_c, |indoor| indoor.c()),
        ..as_is
    };
    // Emitters of the home were sized for the home as it is; those a choice brings are sized for the choice.
    let emitters = match (&system.emitters, &home.emitters) {
        (Some(new), old) => emitters(new, old.as_ref(), &own, check, notes),
        (None, Some(old)) => emitters(old, None, &as_is, check, notes),
        (None, None) => {
            check.missing(
                &home.span(),
                "home.emitters",
                "a table [home.emitters] with flow = \"50 °C\"",
            );
            None
        }
    };
    let parts = fabric_parts?;
    let heat_loss_kw_per_k = own.heat_loss_w_per_k / 1000.0;
    let gains_kw = match parts.gains {
        Gains::Constant { internal_kw, .. } => internal_kw,
        Gains::UpTo { base_c } => heat_loss_kw_per_k * (own.indoor_c - base_c),
    };
    let aperture_m2 = match parts.gains {
        Gains::Constant { aperture_m2, .. } => aperture_m2,
        Gains::UpTo { .. } => 0.0,
    };
    // A time constant was given for the home as it is; its capacity stays when a choice insulates.
    let capacity_kwh_per_k = match parts.storage {
        Storage::Capacity(kwh_per_k) => kwh_per_k,
        Storage::TimeConstant(hours) => hours * as_is.heat_loss_w_per_k / 1000.0,
    };
    Some(Warm {
        home: Home {
            fabric: Fabric::new(
                own.heat_loss_w_per_k,
                capacity_kwh_per_k,
                gains_kw,
                aperture_m2,
            ),
            emitters: emitters?,
            hot_water: hot_water?,
        },
        indoor_c: own.indoor_c,
        design_outdoor_c: own.design_outdoor_c,
        design_load_kw: own.design_load_kw(),
    })
}

fn envelope(
    home: &Section<HomeTable>,
    weather: &WeatherFacts,
    check: &mut Check,
    notes: &mut Notes,
) -> Option<Envelope> {
    let indoor = notes.quantity(check, &home.indoor, &bounds::INDOOR_C, &defaults::INDOOR);
    let design_outdoor = check.within(&home.design_outdoor, &bounds::OUTDOOR_C);
    let heat_loss = check.within(&home.heat_loss, &bounds::HEAT_LOSS_W_PER_K);
    let load = check.within(&home.design_heat_load, &bounds::DESIGN_LOAD_KW);
    if home.design_outdoor.is_none() {
        notes.add(
            "home.design_outdoor",
            format!("{:.1} °C", weather.design_c),
            "99.6 % of the hours of the weather file are warmer; prefer a published design table for sizing",
        );
    }
    let indoor_c = indoor?.c();
    let design_outdoor_c = design_outdoor.map_or(weather.design_c, |outdoor| outdoor.c());
    if design_outdoor_c >= indoor_c - 1.0 {
        let span = home
            .design_outdoor
            .as_ref()
            .map_or_else(|| home.span(), |leaf| leaf.span());
        check.refuse(
            &span,
            format!("design outdoor temperature {design_outdoor_c:.1} °C"),
            format!("well below the indoor set point of {indoor_c:.1} °C"),
            "check both temperatures",
        );
        return None;
    }
    let difference_k = indoor_c - design_outdoor_c;
    match (&home.heat_loss, &home.design_heat_load) {
        (None, None) => {
            check.missing(
                &home.span(),
                "home.heat_loss",
                "\"212 W/K\", or design_heat_load = \"6 kW\"",
            );
            None
        }
        (Some(leaf), Some(_)) => {
            let (loss, load) = (heat_loss?.w_per_k(), load?.kw());
            let implied_kw = loss * difference_k / 1000.0;
            /// A coefficient and a load that differ by more than this contradict each other; less is rounding.
            const ROUNDING: f64 = 0.02;
            if (implied_kw / load - 1.0).abs() > ROUNDING {
                check.refuse(
                    &leaf.span(),
                    format!("{loss:.0} W/K over {difference_k:.1} K are {implied_kw:.2} kW, but design_heat_load says {load:.2} kW"),
                    "the two to agree within 2 %",
                    "keep the one you trust and remove the other",
                );
                return None;
            }
            Some(Envelope {
                heat_loss_w_per_k: loss,
                indoor_c,
                design_outdoor_c,
            })
        }
        (Some(_), None) => Some(Envelope {
            heat_loss_w_per_k: heat_loss?.w_per_k(),
            indoor_c,
            design_outdoor_c,
        }),
        (None, Some(leaf)) => {
            if home.design_outdoor.is_none() {
                check.missing(
                    &leaf.span(),
                    "home.design_outdoor",
                    "\"-4 °C\", the outdoor temperature that design_heat_load is for",
                );
                return None;
            }
            let heat_loss_w_per_k = load?.kw() * 1000.0 / difference_k;
            if !bounds::HEAT_LOSS_W_PER_K.holds(heat_loss_w_per_k) {
                check.refuse(
                    &leaf.span(),
                    format!("{heat_loss_w_per_k:.1} W/K follow from it"),
                    bounds::HEAT_LOSS_W_PER_K.words(),
                    "check the load and design_outdoor",
                );
                return None;
            }
            notes.add(
                "home.heat_loss",
                format!("{heat_loss_w_per_k:.0} W/K"),
                "design_heat_load over the difference of indoor and design_outdoor",
            );
            Some(Envelope {
                heat_loss_w_per_k,
                indoor_c,
                design_outdoor_c,
            })
        }
    }
}

enum Storage {
    Capacity(f64),
    TimeConstant(f64),
}

enum Gains {
    Constant { internal_kw: f64, aperture_m2: f64 },
    UpTo { base_c: f64 },
}

struct FabricParts {
    storage: Storage,
    gains: Gains,
}

fn fabric_parts(
    home: &Section<HomeTable>,
    weather: &WeatherFacts,
    check: &mut Check,
    notes: &mut Notes,
) -> Option<FabricParts> {
    let area_m2 = check
        .within(&home.floor_area, &bounds::FLOOR_AREA_M2)
        .map(|area| area.m2());
    Some(FabricParts {
        storage: storage(home, area_m2, check, notes)?,
        gains: gains(home, area_m2, weather, check, notes)?,
    })
}

fn storage(
    home: &Section<HomeTable>,
    area_m2: Option<f64>,
    check: &mut Check,
    notes: &mut Notes,
) -> Option<Storage> {
    if let (Some(leaf), Some(_)) = (&home.construction, &home.time_constant) {
        check.refuse(
            &leaf.span(),
            "both construction and time_constant",
            "one of them",
            "keep the one you know better",
        );
        return None;
    }
    if home.time_constant.is_some() {
        let hours = check.within(&home.time_constant, &bounds::TIME_CONSTANT_H)?;
        return Some(Storage::TimeConstant(hours.h()));
    }
    match (&home.construction, area_m2) {
        (Some(leaf), None) if home.floor_area.is_none() => {
            check.missing(
                &leaf.span(),
                "home.floor_area",
                "\"96 m²\", which construction needs",
            );
            None
        }
        (_, Some(area_m2)) => {
            let construction = notes
                .word(check, &home.construction, &defaults::CONSTRUCTION)?
                .0;
            Some(Storage::Capacity(construction.capacity_kwh_per_k(area_m2)))
        }
        _ => {
            let hours = notes.quantity(
                check,
                &home.time_constant,
                &bounds::TIME_CONSTANT_H,
                &defaults::TIME_CONSTANT,
            )?;
            Some(Storage::TimeConstant(hours.h()))
        }
    }
}

fn gains(
    home: &Section<HomeTable>,
    area_m2: Option<f64>,
    weather: &WeatherFacts,
    check: &mut Check,
    notes: &mut Notes,
) -> Option<Gains> {
    let base = check.within(&home.base_temperature, &bounds::BASE_C);
    let internal = check.within(&home.internal_gains, &bounds::GAINS_KW);
    let aperture = check.within(&home.solar_aperture, &bounds::SOLAR_APERTURE_M2);
    if let Some(leaf) = &home.base_temperature {
        if home.internal_gains.is_some() || home.solar_aperture.is_some() {
            check.refuse(
                &leaf.span(),
                "base_temperature beside internal_gains or solar_aperture",
                "one way to say the gains",
                "a base temperature already holds all gains: remove it or them",
            );
            return None;
        }
        return up_to(base?.c(), home, check);
    }
    if let (Some(leaf), false) = (&home.solar_aperture, weather.has_radiation) {
        check.refuse(
            &leaf.span(),
            "a solar aperture, but the weather file has no radiation",
            "weather with a column of global radiation",
            "use such a file, or give base_temperature in place of the gains",
        );
        return None;
    }
    match area_m2 {
        Some(area_m2) if weather.has_radiation => {
            let internal_kw = match internal {
                Some(power) => power.kw(),
                None => {
                    let watts = 1000.0
                        * parse::<crate::units::Power>(defaults::INTERNAL_GAINS_PER_M2.value)
                            .ok()?
                            .kw()
                        * area_m2;
                    notes.add(
                        "home.internal_gains",
                        format!("{watts:.0} W"),
                        format!(
                            "default: {} {}",
                            defaults::INTERNAL_GAINS_PER_M2.value,
                            defaults::INTERNAL_GAINS_PER_M2.from
                        ),
                    );
                    watts / 1000.0
                }
            };
            let aperture_m2 = match aperture {
                Some(area) => area.m2(),
                None => {
                    let m2 = parse::<Share>(defaults::SOLAR_APERTURE_PER_M2.value)
                        .ok()?
                        .fraction()
                        * area_m2;
                    notes.add(
                        "home.solar_aperture",
                        format!("{m2:.1} m²"),
                        format!(
                            "default: {} {}",
                            defaults::SOLAR_APERTURE_PER_M2.value,
                            defaults::SOLAR_APERTURE_PER_M2.from
                        ),
                    );
                    m2
                }
            };
            Some(Gains::Constant {
                internal_kw,
                aperture_m2,
            })
        }
        _ if internal.is_some() || aperture.is_some() => Some(Gains::Constant {
            internal_kw: internal.map_or(0.0, |power| power.kw()),
            aperture_m2: aperture.map_or(0.0, |area| area.m2()),
        }),
        _ => {
            notes.used(&defaults::BASE_TEMPERATURE);
            up_to(
                parse::<crate::units::Temperature>(defaults::BASE_TEMPERATURE.value)
                    .ok()?
                    .c(),
                home,
                check,
            )
        }
    }
}

fn up_to(base_c: f64, home: &Section<HomeTable>, check: &mut Check) -> Option<Gains> {
    let indoor_c = home
        .indoor
        .as_ref()
        .and_then(|leaf| leaf.value().ok())
        .map(|indoor| indoor.c());
    if let (Some(indoor_c), Some(leaf)) = (indoor_c, &home.base_temperature)
        && base_c > indoor_c
    {
        check.refuse(
            &leaf.span(),
            format!("base temperature {base_c:.1} °C above the set point {indoor_c:.1} °C"),
            "a base temperature at or below the set point, since gains only help",
            "check both temperatures",
        );
        return None;
    }
    Some(Gains::UpTo { base_c })
}

/// Flow minus return where the return is not given, K: 5, 8 and 10 K at up to 45, 55 and above.
///
/// EN 14511's rating conditions by application; the trade's usual spreads (common practice, no source).
fn usual_spread_k(flow_c: f64) -> f64 {
    if flow_c <= 45.0 {
        5.0
    } else if flow_c <= 55.0 {
        8.0
    } else {
        10.0
    }
}

fn emitters(
    table: &Section<EmitterTable>,
    home: Option<&Section<EmitterTable>>,
    envelope: &Envelope,
    check: &mut Check,
    notes: &mut Notes,
) -> Option<Emitters> {
    let kind_leaf = if table.kind.is_some() {
        &table.kind
    } else {
        home.map_or(&table.kind, |home| &home.kind)
    };
    let kind = notes.word(check, kind_leaf, &defaults::EMITTER_KIND);
    let flow = check.required(&table.flow, &table.span(), "flow", "\"50 °C\"");
    let flow = flow.and_then(|_| check.within(&table.flow, &bounds::FLOW_C));
    let return_ = check.value(&table.return_);
    let greatest = check.within(&table.greatest_flow, &bounds::FLOW_C);
    let flow_c = flow?.c();
    let return_c = match (&table.return_, return_) {
        (Some(_), None) => return None,
        (_, Some(return_)) => return_.c(),
        (None, None) => {
            let return_c = flow_c - usual_spread_k(flow_c);
            notes.add(
                "emitters.return",
                format!("{return_c:.0} °C at a flow of {flow_c:.0} °C"),
                "default: usual spread, common practice, no source",
            );
            return_c
        }
    };
    if return_c >= flow_c || return_c <= envelope.indoor_c {
        let span = table
            .return_
            .as_ref()
            .or(table.flow.as_ref())
            .map_or_else(|| table.span(), |leaf| leaf.span());
        check.refuse(
            &span,
            format!("return {return_c:.1} °C at a flow of {flow_c:.1} °C"),
            format!(
                "below the flow and above the set point of {:.1} °C",
                envelope.indoor_c
            ),
            "give the water temperatures at the design heat load",
        );
        return None;
    }
    let greatest_flow_c = match (&table.greatest_flow, greatest) {
        (Some(_), None) => return None,
        (Some(leaf), Some(greatest)) => {
            if greatest.c() < flow_c {
                check.refuse(
                    &leaf.span(),
                    format!(
                        "greatest flow {:.1} °C below the design flow {flow_c:.1} °C",
                        greatest.c()
                    ),
                    "at least the design flow",
                    "raise it or lower flow",
                );
                return None;
            }
            greatest.c()
        }
        (None, _) => {
            notes.used(&defaults::GREATEST_FLOW_ABOVE_DESIGN);
            flow_c
                + parse::<crate::units::TemperatureDifference>(
                    defaults::GREATEST_FLOW_ABOVE_DESIGN.value,
                )
                .ok()?
                .k()
        }
    };
    let load_kw = envelope.design_load_kw();
    Some(Emitters::new(
        kind?.0,
        load_kw,
        flow_c,
        return_c,
        envelope.indoor_c,
        greatest_flow_c,
    ))
}

/// A field of a choice's table where it is given, else of the home's.
macro_rules! either {
    ($own:expr, $home:expr, $field:ident) => {
        match ($own, $home) {
            (Some(own), _) if own.$field.is_some() => &own.$field,
            (_, Some(home)) => &home.$field,
            _ => &None,
        }
    };
}

#[allow(
    clippy::option_option,
    reason = "outer: could not be read; inner: no hot water is asked for"
)]
fn hot_water(
    home: Option<&Section<HotWaterTable>>,
    own: Option<&Section<HotWaterTable>>,
    kind: Option<SystemKind>,
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
    let daily_leaf = either!(own, home, daily);
    let energy_leaf = either!(own, home, daily_energy);
    if let (Some(leaf), Some(_)) = (daily_leaf, energy_leaf) {
        check.refuse(
            &leaf.span(),
            "both daily and daily_energy",
            "one of them",
            "keep the one that was measured",
        );
        return None;
    }
    let daily = check.within(daily_leaf, &bounds::HOT_WATER_L);
    let draw_leaf = either!(own, home, drawn_at);
    let drawn_at = notes.quantity(check, draw_leaf, &bounds::HOT_WATER_C, &defaults::DRAWN_AT);
    let cold = notes.quantity(
        check,
        either!(own, home, cold),
        &bounds::COLD_WATER_C,
        &defaults::COLD_WATER,
    );
    let set_point_leaf = either!(own, home, setpoint);
    let hysteresis_leaf = either!(own, home, hysteresis);
    let store_leaf = either!(own, home, store);
    let (drawn_at_c, cold_c) = (drawn_at?.c(), cold?.c());
    if drawn_at_c <= cold_c {
        let span = span_of(draw_leaf).unwrap_or_default();
        check.refuse(
            &span,
            format!("drawn at {drawn_at_c:.1} °C from cold water at {cold_c:.1} °C"),
            "warmer than the cold water",
            "check both temperatures",
        );
        return None;
    }
    let daily_kwh = if daily_leaf.is_some() {
        HotWater::energy_kwh(daily?.l(), drawn_at_c, cold_c)
    } else {
        notes
            .quantity(
                check,
                energy_leaf,
                &bounds::HOT_WATER_KWH,
                &defaults::HOT_WATER_DAILY,
            )?
            .kwh()
    };
    let volume = notes.word(check, store_leaf, &defaults::STORE)?;
    let is_machine = matches!(kind, Some(SystemKind::AirSource | SystemKind::GroundSource));
    let store = match volume {
        StoreVolume::None if is_machine => {
            let span = span_of(store_leaf).unwrap_or_default();
            check.refuse(
                &span,
                "a heat pump without a hot-water store",
                bounds::STORE_L.words(),
                "give the choice a table [choice.hot_water] with store = \"200 L\"",
            );
            return None;
        }
        StoreVolume::None => None,
        StoreVolume::Of(volume) => {
            if !bounds::STORE_L.holds(volume.l()) {
                let span = span_of(store_leaf).unwrap_or_default();
                check.refuse(
                    &span,
                    format!("{} L", volume.l()),
                    bounds::STORE_L.words(),
                    "check the number and its unit",
                );
                return None;
            }
            let set_point = notes.quantity(
                check,
                set_point_leaf,
                &bounds::HOT_WATER_C,
                &defaults::SET_POINT,
            )?;
            let hysteresis = notes.quantity(
                check,
                hysteresis_leaf,
                &bounds::HYSTERESIS_K,
                &defaults::HYSTERESIS,
            )?;
            if set_point.c() < drawn_at_c {
                let span = span_of(set_point_leaf).unwrap_or_default();
                check.refuse(
                    &span,
                    format!(
                        "a store at {:.1} °C for water drawn at {drawn_at_c:.1} °C",
                        set_point.c()
                    ),
                    "a store at least as warm as the water drawn",
                    "raise setpoint or lower drawn_at",
                );
                return None;
            }
            Some(Store {
                hysteresis_k: hysteresis.k(),
                ..Store::of_volume(volume.l(), set_point.c())
            })
        }
    };
    Some(Some(HotWater {
        daily_kwh,
        shares: DRAW_SHARES,
        store,
        draw_c: drawn_at_c,
    }))
}

fn span_of<T>(leaf: &Option<crate::document::Leaf<T>>) -> Option<Range<usize>> {
    leaf.as_ref().map(crate::document::Leaf::span)
}
