//! Energy flow, carbon by year.

use crate::common::*;
use winterledger::chart::{
    CarbonByYear, EnergyFlow, Flow, FlowKind, SystemYears, carbon_by_year, energy_flow,
};

fn flow(kind: FlowKind, label: &str, kwh: f64) -> Flow {
    Flow {
        kind,
        label: label.into(),
        kwh,
    }
}

fn heat_pump() -> EnergyFlow {
    EnergyFlow {
        system: "Air source, larger radiators".into(),
        heater: "heat pump".into(),
        from: vec![
            flow(FlowKind::Surroundings, "outdoor air", 11_480.0),
            flow(FlowKind::Electricity, "electricity, machine", 4_180.0),
            flow(FlowKind::Electricity, "electricity, pumps", 150.0),
            flow(FlowKind::Backup, "electricity, backup", 12.0),
        ],
        to: vec![
            flow(FlowKind::Rooms, "rooms", 13_240.0),
            flow(FlowKind::HotWater, "hot water at the taps", 1_530.0),
            flow(FlowKind::Loss, "lost by the store", 475.0),
            flow(FlowKind::Loss, "lost on the way", 577.0),
        ],
    }
}

#[test]
fn energy_flow_realistic() {
    check(
        "energy_flow_realistic",
        &energy_flow(&heat_pump(), &english()).expect("drawn"),
    );
}

#[test]
fn energy_flow_hostile() {
    let mut data = heat_pump();
    data.system = long_name();
    data.heater = long_name();
    for flow in data.from.iter_mut().chain(&mut data.to) {
        flow.label = long_name();
        flow.kwh *= 1e6;
    }
    data.from[3].kwh = 1e-6;
    check(
        "energy_flow_hostile",
        &energy_flow(&data, &english()).expect("drawn"),
    );
    data.from.truncate(1);
    data.to.clear();
    check(
        "energy_flow_one",
        &energy_flow(&data, &english()).expect("drawn"),
    );
}

#[test]
fn carbon_by_year_realistic() {
    let falling = |from: f64| (0..20).map(|y| from * 0.95_f64.powi(y)).collect();
    let system = |label: &str, today, carbon_kg| SystemYears {
        label: label.into(),
        today,
        carbon_kg,
    };
    let data = CarbonByYear {
        first_year: 2026,
        scope: "generation and grid losses, falling 5 % a year".into(),
        systems: vec![
            system(NAMES[0], true, vec![3370.0; 20]),
            system(NAMES[1], false, falling(1019.0)),
            system("Ground source, larger radiators", false, falling(766.0)),
        ],
    };
    check(
        "carbon_by_year_realistic",
        &carbon_by_year(&data, &english()).expect("drawn"),
    );
}

#[test]
fn carbon_by_year_hostile() {
    let systems = NAMES
        .iter()
        .map(|name| SystemYears {
            label: (*name).into(),
            today: false,
            carbon_kg: vec![0.0, -1e9],
        })
        .collect();
    let data = CarbonByYear {
        first_year: -1,
        scope: long_name(),
        systems,
    };
    check(
        "carbon_by_year_hostile",
        &carbon_by_year(&data, &english()).expect("drawn"),
    );
}
