//! The home through its hours: a cold night, hot water in blocks, a store that runs out.
#![cfg(test)]

use chrono::{TimeZone, Utc};
use winterledger::calendar::HourAxis;
use winterledger::home::{
    EmitterKind, Emitters, Fabric, Home, HotWater, Pattern, Store, TappingProfile, WarmUp,
};
use winterledger::plan::{Ability, following};
use winterledger::year::{Flags, Heating, Ledger, Plan, Row, Signal, Site, State, System, run};

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
    // EU 812/2013 class C (secondary source): about 57 W from 200 L at 50 °C. Blocks: most hours nothing, a few hours much.
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
