//! Carbon by system, month by month.

use crate::common::*;
use winterledger::chart::{
    CarbonBySystem, Monthly, MonthlySystem, SystemCarbon, carbon_by_system, monthly,
};

fn carbon(
    label: &str,
    today: bool,
    electricity_kg: f64,
    fuel_kg: f64,
    refrigerant_kg: f64,
) -> SystemCarbon {
    SystemCarbon {
        label: label.into(),
        today,
        electricity_kg,
        fuel_kg,
        refrigerant_kg,
    }
}

fn draw_carbon(name: &str, systems: Vec<SystemCarbon>) {
    let scope = "electricity with generation and network losses, gas as burnt".into();
    let data = CarbonBySystem { systems, scope };
    check(
        &format!("carbon_{name}"),
        &carbon_by_system(&data, &english()).expect("drawn"),
    );
}

#[test]
fn carbon_realistic() {
    draw_carbon(
        "realistic",
        vec![
            carbon(NAMES[0], true, 31.0, 2460.0, 0.0),
            carbon("New boiler, turned down", false, 29.0, 2270.0, 0.0),
            carbon(NAMES[1], false, 742.0, 0.0, 0.2),
            carbon("Ground source", false, 613.0, 0.0, 58.0),
        ],
    );
}

#[test]
fn zero_carbon() {
    draw_carbon(
        "zero",
        vec![
            carbon("Boiler", true, 0.0, 0.0, 0.0),
            carbon("None", false, 0.0, 0.0, 0.0),
        ],
    );
}

#[test]
fn carbon_eight_and_hostile() {
    let systems = NAMES
        .iter()
        .enumerate()
        .map(|(i, n)| carbon(n, i == 3, 1e8 / 10_f64.powi(i as i32), -5.0, 1e-3))
        .collect();
    draw_carbon("eight", systems);
}

const MONTHS: [&str; 12] = [
    "Jan", "Feb", "Mar", "Apr", "May", "Jun", "Jul", "Aug", "Sep", "Oct", "Nov", "Dec",
];
const SHAPE: [f64; 12] = [
    1.0, 0.88, 0.74, 0.5, 0.28, 0.15, 0.12, 0.12, 0.2, 0.45, 0.72, 0.95,
];

fn system(
    label: &str,
    today: bool,
    cost: f64,
    electricity: f64,
    fuel: f64,
    months: usize,
) -> MonthlySystem {
    let scaled = |top: f64, base: f64| SHAPE[..months].iter().map(|s| base + s * top).collect();
    MonthlySystem {
        label: label.into(),
        today,
        cost: scaled(cost, 26.0),
        electricity_kwh: scaled(electricity, 2.0),
        fuel_kwh: scaled(fuel, 0.0),
    }
}

fn draw_monthly(name: &str, months: usize, systems: Vec<MonthlySystem>) {
    let data = Monthly {
        currency: "GBP".into(),
        months: MONTHS[..months].iter().map(|m| (*m).to_string()).collect(),
        systems,
    };
    check(
        &format!("monthly_{name}"),
        &monthly(&data, &english()).expect("drawn"),
    );
}

#[test]
fn monthly_realistic() {
    draw_monthly(
        "realistic",
        12,
        vec![
            system(NAMES[0], true, 166.0, 22.0, 2340.0, 12),
            system(NAMES[1], false, 171.0, 690.0, 0.0, 12),
            system("Hybrid", false, 150.0, 410.0, 800.0, 12),
        ],
    );
}

#[test]
fn monthly_one_month_eight_systems() {
    draw_monthly(
        "one_month",
        1,
        NAMES
            .iter()
            .map(|n| system(n, true, 166.0, 20.0, 900.0, 1))
            .collect(),
    );
}

#[test]
fn monthly_credits_long_name_and_nothing() {
    let mut credit = system(&long_name(), true, -300.0, -200.0, 0.0, 12);
    credit.cost[3] = 12_345_678.0;
    draw_monthly(
        "credits",
        12,
        vec![
            credit.clone(),
            system("B", false, -200.0, -300.0, 100.0, 12),
        ],
    );
    for list in [
        &mut credit.cost,
        &mut credit.electricity_kwh,
        &mut credit.fuel_kwh,
    ] {
        list.iter_mut().for_each(|v| *v = 0.0);
    }
    draw_monthly("nothing", 12, vec![credit]);
}
