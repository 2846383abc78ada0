//! The home through its hours: against scipy, against the steady sum, against the published traps, and through a cold night.
#![cfg(test)]

use std::path::Path;

use chrono::{TimeZone, Utc};
use winterledger::calendar::HourAxis;
use winterledger::home::{
    EmitterKind, Emitters, Fabric, Home, HotWater, Pattern, Store, TappingProfile, WarmUp,
};
use winterledger::plan::{Ability, following};
use winterledger::weather::{ReadOptions, Weather, read_bytes};
use winterledger::year::{Flags, Heating, Ledger, Plan, Row, Signal, Site, State, System, run};

fn root() -> &'static Path {
    Path::new(env!("CARGO_MANIFEST_DIR"))
}

fn weather() -> Weather {
    let path = root().join("weather_samples/morvane_sound.csv");
    read_bytes(
        "morvane_sound.csv",
        &std::fs::read(path).unwrap(),
        &ReadOptions::default(),
    )
    .unwrap()
}

fn site_of(outdoor_c: Vec<f64>) -> Site {
    let start = Utc.with_ymd_and_hms(2023, 1, 1, 0, 0, 0).unwrap();
    let axis = HourAxis {
        start,
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

fn signal(hours: usize) -> Signal {
    Signal::bought(vec![0.25; hours], vec![0.2; hours])
}

/// A home of 212 W/K heated electrically, so that nothing but the home shapes its demand.
fn system(time_constant_h: f64, hot_water: Option<HotWater>) -> System {
    System {
        label: "Electric".into(),
        home: Home {
            fabric: Fabric::new(212.0, time_constant_h * 0.212, 0.0, 0.0),
            emitters: Emitters::new(EmitterKind::Radiators, 5.0, 60.0, 50.0, 20.0, 85.0),
            hot_water,
        },
        heating: Heating::DirectElectric { output_kw: 30.0 },
    }
}

fn plan(pattern: &Pattern, site: &Site, output_kw: f64) -> Plan {
    let hours = site.outdoor_c.len();
    following(
        pattern,
        &site.civil,
        Ability {
            output_kw,
            backup_band_k: 0.5,
        },
        signal(hours),
        None,
    )
}

fn rows(site: &Site, system: &System, plan: &Plan) -> Vec<Row> {
    let mut ledger = Ledger::default();
    let mut state = State::at_rest(system, plan.set_point_c[0]);
    run(
        site,
        system,
        plan,
        0..site.outdoor_c.len(),
        &mut state,
        &mut ledger,
    );
    ledger.rows
}

/// Reference: tests/reference/fabric.py, scipy 1.17.1 solve_ivp (DOP853, 1e-11) through a random year, airing kept out by a high
/// limit. The step is exact for inputs that hold for an hour, so that only the integrator's own error is left.
#[test]
fn the_room_follows_scipy_through_a_random_year() {
    let fabric = Fabric::new(187.0, 5.3, 0.0, 0.0);
    let mut room_c = 18.0;
    let mut seen = 0;
    let mut worst = 0.0_f64;
    for record in csv::Reader::from_path(root().join("tests/reference/fabric.csv"))
        .unwrap()
        .records()
    {
        let record = record.unwrap();
        let number = |i: usize| record[i].parse::<f64>().unwrap();
        room_c = fabric
            .step(room_c, number(2), number(0), number(1), 1000.0)
            .end_c;
        worst = worst.max((room_c - number(3)).abs());
        seen += 1;
    }
    assert_eq!(seen, 8760);
    assert!(worst < 1e-7, "{worst}");
}

/// With one set point, enough output and no gains, the year's demand is the sum of the steady losses of its cold hours: a home that
/// is never warmer outside than inside stores nothing over the year.
#[test]
fn annual_demand_is_the_steady_sum() {
    let outdoor_c: Vec<f64> = weather().outdoor_c.iter().map(|c| c.min(19.0)).collect();
    let site = site_of(outdoor_c.clone());
    let system = system(40.0, None);
    let heat: f64 = rows(
        &site,
        &system,
        &plan(&Pattern::continuous(20.0), &site, 30.0),
    )
    .iter()
    .map(Row::space_heat_kwh)
    .sum();
    let steady: f64 = outdoor_c.iter().map(|c| 0.212 * (20.0 - c)).sum();
    assert!((heat / steady - 1.0).abs() < 1e-9, "{heat} {steady}");
}

/// Nine hours a day at 20 °C, no heating between (methods §16).
fn nine_hours() -> Pattern {
    let mut pattern = Pattern::continuous(7.0);
    for hour in [7, 8, 16, 17, 18, 19, 20, 21, 22] {
        pattern.weekday_c[hour] = 20.0;
        pattern.weekend_c[hour] = 20.0;
    }
    pattern.warm_up = WarmUp::AtTheTime;
    pattern
}

/// methods §16: against 9 h a day, heating all day raises demand by 5 to 17 % with a time constant of 71 to 19 h. Weather and output
/// behind that figure are not known; with 12 kW, twice the design load, one percentage point is left for them.
#[test]
fn continuous_running_needs_more_heat_than_nine_hours_a_day() {
    let mut outdoor_c = weather().outdoor_c;
    outdoor_c.iter_mut().for_each(|c| *c = c.min(20.0));
    let site = site_of(outdoor_c);
    let more = |time_constant_h: f64| {
        let mut system = system(time_constant_h, None);
        system.heating = Heating::DirectElectric { output_kw: 12.0 };
        system.home.emitters = Emitters::new(EmitterKind::Radiators, 15.0, 60.0, 50.0, 20.0, 85.0);
        let heat = |pattern: &Pattern| -> f64 {
            rows(&site, &system, &plan(pattern, &site, 12.0))
                .iter()
                .map(Row::space_heat_kwh)
                .sum()
        };
        heat(&Pattern::continuous(20.0)) / heat(&nine_hours()) - 1.0
    };
    let (heavy, light) = (more(71.0), more(19.0));
    println!("71 h {heavy:.3}, 19 h {light:.3}");
    assert!((heavy - 0.05).abs() < 0.01, "{heavy}");
    assert!((light - 0.17).abs() < 0.01, "{light}");
}

/// A cold night of −3 °C: set back from 22 to 6 h, warmed up in time.
#[test]
fn a_set_back_recovers_in_time_and_evenly() {
    let site = site_of(vec![-3.0; 96]);
    let system = system(30.0, None);
    let mut pattern = Pattern::continuous(16.0);
    for hour in 6..22 {
        pattern.weekday_c[hour] = 20.0;
        pattern.weekend_c[hour] = 20.0;
    }
    let plan_of = |warm_up| {
        plan(
            &Pattern {
                warm_up,
                ..pattern.clone()
            },
            &site,
            8.0,
        )
    };
    let day = |rows: &[Row], hour: usize| rows[48 + hour];
    let in_time = rows(&site, &system, &plan_of(WarmUp::InTime));
    // Off at first, then the exponential of 30 h: 6 h after 22 h the room would be at −3 + 23 e^(−6/30) = 15.8 °C.
    assert_eq!(day(&in_time, 23).space_heat_kwh(), 0.0);
    assert!((day(&in_time, 23).indoor_c - (-3.0 + 23.0 * (-2.0_f64 / 30.0).exp())).abs() < 0.05);
    // Warm when the day begins, with heat that never exceeds what there is, and the same from hour to hour.
    assert!(
        (in_time[48 + 24 + 5].indoor_c - 20.0).abs() < 0.1,
        "{}",
        in_time[48 + 24 + 5].indoor_c
    );
    let warming: Vec<_> = in_time[72..78]
        .iter()
        .filter(|row| row.flags.has(Flags::RECOVERY))
        .collect();
    assert!((1..=5).contains(&warming.len()), "{}", warming.len());
    for pair in warming.windows(2) {
        assert!((pair[0].space_heat_kwh() / pair[1].space_heat_kwh() - 1.0).abs() < 1e-6);
    }
    assert!(warming.iter().all(|row| row.space_heat_kwh() <= 8.0));
    // Spread over seven hours, less power is asked for; at the time, the first hour of the day is cold.
    let ahead = rows(&site, &system, &plan_of(WarmUp::Ahead(7)));
    let most = |rows: &[Row]| {
        rows[70..80]
            .iter()
            .map(Row::space_heat_kwh)
            .fold(0.0, f64::max)
    };
    assert!(most(&ahead) < most(&in_time));
    let late = rows(&site, &system, &plan_of(WarmUp::AtTheTime));
    assert!(late[72 + 5].indoor_c < 17.0 && !late[72 + 5].flags.has(Flags::RECOVERY));
}

/// Hot water by profile M through a day: what is drawn is the profile, what goes in is drawn, lost and stored, and it goes in blocks.
#[test]
fn hot_water_is_drawn_by_the_profile_and_heated_in_blocks() {
    let profile = TappingProfile::M;
    let hot_water = HotWater {
        daily_kwh: [profile.daily_kwh(); 12],
        shares: profile.shares(),
        cold_c: [10.0; 12],
        store: Some(Store::of_volume(200.0, 50.0)),
        draw_c: 40.0,
    };
    let site = site_of(vec![5.0; 24 * 28]);
    let system = system(40.0, Some(hot_water));
    let rows = rows(
        &site,
        &system,
        &plan(&Pattern::continuous(20.0), &site, 30.0),
    );
    let drawn: f64 = rows[..24].iter().map(|row| row.water_drawn_kwh).sum();
    assert!((drawn - 5.845).abs() < 1e-9, "{drawn}");
    for row in &rows {
        let balance =
            row.water_heat_kwh() - row.water_drawn_kwh - row.store_loss_kwh - row.store_stored_kwh;
        assert!(balance.abs() < 1e-9);
    }
    // methods §11: about 57 W from 200 L at 50 °C. Blocks: most hours nothing, a few hours much.
    let lost = rows.iter().map(|row| row.store_loss_kwh).sum::<f64>() / rows.len() as f64;
    assert!((0.045..0.057).contains(&lost), "{lost}");
    let heated = rows.iter().filter(|row| row.water_heat_kwh() > 0.0).count();
    assert!(heated < rows.len() / 5, "{heated}");
    assert!(!rows.iter().any(|row| row.flags.has(Flags::WATER_SHORT)));
}

/// A store of 30 L cannot carry the bath of profile L: hours of cool taps are counted, and no more is drawn than it holds.
#[test]
fn a_small_store_runs_out() {
    let profile = TappingProfile::L;
    let hot_water = HotWater {
        daily_kwh: [profile.daily_kwh(); 12],
        shares: profile.shares(),
        cold_c: [10.0; 12],
        store: Some(Store::of_volume(30.0, 50.0)),
        draw_c: 40.0,
    };
    let site = site_of(vec![5.0; 24 * 7]);
    let system = system(40.0, Some(hot_water));
    let rows = rows(
        &site,
        &system,
        &plan(&Pattern::continuous(20.0), &site, 30.0),
    );
    let short = rows
        .iter()
        .filter(|row| row.flags.has(Flags::WATER_SHORT))
        .count();
    assert!((7..=35).contains(&short), "{short}");
    let missing: f64 = rows.iter().map(|row| row.water_missing_kwh).sum();
    let drawn: f64 = rows.iter().map(|row| row.water_drawn_kwh).sum();
    assert!(missing > 0.0 && (missing + drawn - 7.0 * 11.655).abs() < 1e-9);
    assert!(rows.iter().all(|row| row.store_c.unwrap() >= 10.0 - 1e-9));
}
