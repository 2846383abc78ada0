//! The home: storage, emitters, what running it otherwise costs, and its design load.

use chrono::{TimeZone, Utc};
use winterledger::calendar::HourAxis;
use winterledger::home::{
    EmitterKind, Emitters, Fabric, Home, HotWater, OCCUPIED_FLOOR_C, Pattern, WarmUp,
    floor_output_w_per_m2,
};
use winterledger::plan::{Ability, following};
use winterledger::year::{Heating, Ledger, Row as Hour, Signal, Site, State, System, run};

use crate::table::{Row, Worst, numbers};
use crate::weather;

pub fn site(outdoor_c: Vec<f64>) -> Site {
    let axis = HourAxis {
        start: Utc.with_ymd_and_hms(2023, 1, 1, 0, 0, 0).unwrap(),
        hours: outdoor_c.len(),
    };
    let civil = axis.civil(chrono_tz::Tz::UTC);
    Site {
        axis,
        month0: civil.iter().map(|hour| hour.month0() as u8).collect(),
        civil,
        years: vec![(2023, 0..outdoor_c.len())],
        repaired: vec![false; outdoor_c.len()],
        relative_humidity: None,
        global_w_per_m2: None,
        outdoor_c,
    }
}

/// A home of 212 W/K heated electrically, so that nothing but the home shapes its demand.
pub fn electric(time_constant_h: f64, output_kw: f64, hot_water: Option<HotWater>) -> System {
    System {
        label: "Electric".into(),
        home: Home {
            fabric: Fabric::new(212.0, time_constant_h * 0.212, 0.0, 0.0),
            emitters: Emitters::new(EmitterKind::Radiators, 15.0, 60.0, 50.0, 20.0, 85.0),
            hot_water,
        },
        heating: Heating::DirectElectric { output_kw },
    }
}

pub fn hours(site: &Site, system: &System, pattern: &Pattern, output_kw: f64) -> Vec<Hour> {
    let ability = Ability {
        output_kw,
        backup_band_k: 0.5,
    };
    let count = site.outdoor_c.len();
    let signal = Signal::bought(vec![0.25; count], vec![0.2; count]);
    let plan = following(pattern, &site.civil, ability, signal, None);
    let mut ledger = Ledger::default();
    let mut state = State::at_rest(system, plan.set_point_c[0]);
    run(site, system, &plan, 0..count, &mut state, &mut ledger);
    ledger.rows
}

/// Nine hours a day at 20 °C, no heating between.
fn nine_hours() -> Pattern {
    let mut pattern = Pattern::continuous(7.0);
    for hour in [7, 8, 16, 17, 18, 19, 20, 21, 22] {
        pattern.weekday_c[hour] = 20.0;
        pattern.weekend_c[hour] = 20.0;
    }
    pattern.warm_up = WarmUp::AtTheTime;
    pattern
}

pub fn rows() -> Vec<Row> {
    let mut rows = vec![storage()];
    let emitters = Emitters::new(EmitterKind::Radiators, 5.0, 50.0, 43.0, 20.0, 85.0);
    rows.push(Row::new(
        "Mean water of radiators at 50/43 °C, °C",
        "EN 442, by hand: neither the flow nor the condensing temperature",
        46.5,
        emitters.at_load(5.0, 20.0).mean_c(),
        1e-9,
        "rounding",
    ));
    // From ΔT 50 (75/65/20): the share of the output at a lower excess temperature.
    let rated = Emitters::new(EmitterKind::Radiators, 1.0, 75.0, 65.0, 20.0, 85.0);
    for (excess_k, factor) in [
        (40.0, 0.7482),
        (35.0, 0.6290),
        (30.0, 0.5148),
        (25.0, 0.4061),
        (20.0, 0.3039),
    ] {
        rows.push(Row::new(
            format!("Excess of the mean water at the factor of ΔT {excess_k}, K"),
            "EN 442, exponent 1.3",
            excess_k,
            rated.at_load(factor, 20.0).mean_c() - 20.0,
            0.005,
            "the factor has four digits",
        ));
    }
    rows.push(Row::new(
        "Heat of an occupied floor at 29 °C in a room of 20 °C, W/m²",
        "EN 1264 [M]: about 100",
        100.0,
        floor_output_w_per_m2(OCCUPIED_FLOOR_C, 20.0),
        1.0,
        "\"about\"",
    ));
    rows.extend(demand());
    rows
}

/// The room follows scipy (solve_ivp, DOP853, 1e-11) through a random year.
fn storage() -> Row {
    let fabric = Fabric::new(187.0, 5.3, 0.0, 0.0);
    let mut room_c = 18.0;
    let mut worst = Worst::absolute(1e-7);
    for v in numbers("fabric.csv") {
        room_c = fabric.step(room_c, v[2], v[0], v[1], 1000.0).end_c;
        worst.see(v[3], room_c);
    }
    worst.row(
        "Room temperature through a random year, °C",
        "scipy 1.17.1, solve_ivp",
        8760,
        "the step is exact; the integrator's error is left",
    )
}

fn demand() -> Vec<Row> {
    let mild = weather::load("weather_samples/morvane_sound.csv", None).outdoor_c;
    let held = site(mild.iter().map(|c| c.min(19.0)).collect());
    let heat = |site: &Site, pattern: &Pattern, time_constant_h: f64, output_kw: f64| -> f64 {
        let system = electric(time_constant_h, output_kw, None);
        let hours = hours(site, &system, pattern, output_kw);
        hours.iter().map(Hour::space_heat_kwh).sum()
    };
    let steady: f64 = held.outdoor_c.iter().map(|c| 0.212 * (20.0 - c)).sum();
    let mut rows = vec![Row::new(
        "A year's heat with one set point and no gains, kWh",
        "coefficient × degree-hours, summed apart",
        steady,
        heat(&held, &Pattern::continuous(20.0), 40.0, 30.0),
        1e-6 * steady,
        "rounding; nothing is stored over the year",
    )];
    let site = site(mild.iter().map(|c| c.min(20.0)).collect());
    for (time_constant_h, percent) in [(71.0, 5.0), (19.0, 17.0)] {
        let of = |pattern: &Pattern| heat(&site, pattern, time_constant_h, 12.0);
        rows.push(Row::new(
            format!("More heat all day than on nine hours, time constant {time_constant_h} h, %"),
            "common practice, no source: 5 to 17 %",
            percent,
            100.0 * (of(&Pattern::continuous(20.0)) / of(&nine_hours()) - 1.0),
            1.0,
            "weather and output behind the figures are not known",
        ));
    }
    rows
}
