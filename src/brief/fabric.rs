//! Storage and gains of the home.

use super::defaults;
use super::home::WeatherFacts;
use super::notes::Notes;
use super::raw::Home as HomeTable;
use crate::bounds;
use crate::document::{Check, Section};
use crate::units::{Share, parse};

/// How the home stores heat.
pub(super) enum Storage {
    Capacity(f64),
    TimeConstant(f64),
}

/// What warms it beside the heating.
pub(super) enum Gains {
    Constant { internal_kw: f64, aperture_m2: f64 },
    UpTo { base_c: f64 },
}

/// Storage and gains, before a heat loss is put to them.
pub(super) struct FabricParts {
    pub storage: Storage,
    pub gains: Gains,
}

pub(super) fn fabric_parts(
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
