//! Coldest days, COP through the year.

use crate::common::*;
use winterledger::chart::{ColdHour, ColdestDays, CopSystem, CopYear, coldest_days, cop_year};

fn cold(hours: &[Hour], first_hour: usize) -> ColdestDays {
    ColdestDays {
        system: "Air source, larger radiators".into(),
        main_heater: "heat pump".into(),
        first_hour,
        days: ["Sat 17 Jan", "Sun 18 Jan", "Mon 19 Jan"]
            .map(String::from)
            .to_vec(),
        hours: hours
            .iter()
            .enumerate()
            .map(|(i, h)| ColdHour {
                outdoor_c: h.outdoor_c,
                demand_kw: h.demand_kw,
                main_kw: h.machine_kw,
                backup_kw: h.backup_kw,
                electricity_kw: h.electricity_kw,
                indoor_c: Some(20.0 - h.backup_kw * 0.3 + (i as f64 / 4.0).sin() * 0.15),
            })
            .collect(),
        set_point_c: Some(20.0),
    }
}

fn coldest() -> Vec<Hour> {
    year()[384..456].to_vec()
}

#[test]
fn coldest_realistic() {
    check(
        "coldest_realistic",
        &coldest_days(&cold(&coldest(), 0), &english()).expect("drawn"),
    );
}

#[test]
fn coldest_hostile() {
    let mut data = cold(&coldest()[..30], 17);
    data.system = long_name();
    data.main_heater = long_name();
    data.days = NAMES[2..6].iter().map(|n| (*n).to_string()).collect();
    for h in &mut data.hours {
        h.indoor_c = None;
        h.backup_kw *= 0.5;
    }
    check(
        "coldest_hostile",
        &coldest_days(&data, &english()).expect("drawn"),
    );
}

#[test]
fn coldest_one_hour_of_nothing() {
    let mut data = cold(&coldest()[..1], 0);
    data.hours[0] = ColdHour {
        outdoor_c: 0.0,
        demand_kw: 0.0,
        main_kw: 0.0,
        backup_kw: 0.0,
        electricity_kw: 0.0,
        indoor_c: Some(20.0),
    };
    check(
        "coldest_one_hour",
        &coldest_days(&data, &english()).expect("drawn"),
    );
}

#[test]
fn coldest_boiler_over_a_week() {
    let mut data = cold(&year()[300..468], 12);
    data.main_heater = "gas boiler".into();
    data.days = (1..=8).map(|d| format!("Thu {d} Jan")).collect();
    for h in &mut data.hours {
        h.electricity_kw = 0.03;
        h.main_kw = h.demand_kw;
        h.backup_kw = 0.0;
    }
    check(
        "coldest_week",
        &coldest_days(&data, &english()).expect("drawn"),
    );
}

fn cop(label: &str, shift: f64, hours: &[Hour]) -> CopSystem {
    CopSystem {
        label: label.into(),
        hours: hours
            .iter()
            .filter(|h| h.demand_kw > 0.0)
            .map(|h| (h.outdoor_c, h.cop + shift))
            .collect(),
        year: Some(("SPF H2".into(), 3.1 + shift)),
    }
}

#[test]
fn cop_one_system() {
    let data = CopYear {
        systems: vec![cop(NAMES[1], 0.0, &year())],
    };
    check(
        "cop_realistic",
        &cop_year(&data, &english()).expect("drawn"),
    );
}

#[test]
fn cop_two_systems() {
    let systems = vec![
        cop(NAMES[1], 0.0, &year()),
        cop("Ground source", 0.7, &year()),
    ];
    check(
        "cop_two",
        &cop_year(&CopYear { systems }, &english()).expect("drawn"),
    );
}

#[test]
fn cop_eight_systems_one_month_hostile() {
    let mut systems: Vec<_> = NAMES.iter().map(|n| cop(n, 0.1, &year()[..744])).collect();
    systems[1] = cop(&long_name(), 0.0, &[]);
    systems[2].year = Some((long_name(), 1e9));
    check(
        "cop_eight",
        &cop_year(&CopYear { systems }, &english()).expect("drawn"),
    );
}

#[test]
fn cop_huge_and_few() {
    let mut data = CopYear {
        systems: vec![cop("Few", 0.0, &year()[..2])],
    };
    data.systems[0].hours[0].1 = 123_456.0;
    check("cop_huge", &cop_year(&data, &english()).expect("drawn"));
}
