//! Machine performance.

use crate::common::*;
use winterledger::chart::{FlowCurve, MachinePerformance, TestedPoint, machine_performance};

fn flow(flow_c: f64) -> FlowCurve {
    FlowCurve {
        flow_c,
        points: (-20..=20)
            .map(|t| {
                let t = f64::from(t);
                let cop = 0.42 * (flow_c + 273.15) / (flow_c - t + 8.0);
                (t, 6.2 + 0.13 * t - 0.02 * (flow_c - 35.0), cop)
            })
            .collect(),
    }
}

fn tested(source_c: f64, flow_c: f64, output_kw: f64, cop: f64) -> TestedPoint {
    TestedPoint {
        source_c,
        flow_c,
        output_kw,
        cop,
    }
}

fn machine() -> MachinePerformance {
    MachinePerformance {
        machine: "Invented air source machine, 6 kW, R290".into(),
        source: "Outdoor air".into(),
        flows: vec![flow(35.0), flow(45.0), flow(55.0)],
        tested: vec![
            tested(-15.0, 35.0, 4.4, 2.3),
            tested(-7.0, 35.0, 5.2, 2.75),
            tested(2.0, 35.0, 6.3, 3.4),
            tested(7.0, 35.0, 7.2, 4.9),
            tested(-7.0, 55.0, 4.7, 1.95),
            tested(7.0, 55.0, 6.8, 2.9),
            tested(7.0, 50.0, 6.9, 3.1),
        ],
        envelope: Some((-15.0, 18.0)),
    }
}

#[test]
fn machine_realistic() {
    check(
        "machine_realistic",
        &machine_performance(&machine(), &english()).expect("drawn"),
    );
}

#[test]
fn machine_eight_flows_and_hostile_names() {
    let mut data = machine();
    data.flows = (0..8).map(|i| flow(30.0 + 0.1 * f64::from(i))).collect();
    data.machine = long_name();
    data.source = long_name();
    data.envelope = Some((-400.0, 400.0));
    check(
        "machine_eight",
        &machine_performance(&data, &english()).expect("drawn"),
    );
}

#[test]
fn machine_with_one_point() {
    let mut data = machine();
    data.flows = vec![FlowCurve {
        flow_c: 35.0,
        points: vec![(7.0, 0.0, 0.0)],
    }];
    data.tested.clear();
    data.envelope = None;
    check(
        "machine_one_point",
        &machine_performance(&data, &english()).expect("drawn"),
    );
}
