//! Demand against temperature, load duration.

use crate::common::*;
use winterledger::chart::{DemandAndOutput, LoadDuration, demand_and_output, load_duration};

fn demand(hours: &[Hour]) -> DemandAndOutput {
    DemandAndOutput {
        system: "Air source, larger radiators".into(),
        hours: hours.iter().map(|h| (h.outdoor_c, h.demand_kw)).collect(),
        greatest_output: (-15..=25)
            .map(|t| (f64::from(t), output_kw(f64::from(t))))
            .collect(),
        least_output: (-15..=25)
            .map(|t| (f64::from(t), output_kw(f64::from(t)) * 0.3))
            .collect(),
        balance_point_c: Some(-5.3),
        design: Some((-3.0, 3.9)),
    }
}

fn duration(hours: &[Hour]) -> LoadDuration {
    LoadDuration {
        system: "Air source, larger radiators".into(),
        machine_kw: hours.iter().map(|h| h.machine_kw).collect(),
        backup_kw: hours.iter().map(|h| h.backup_kw).collect(),
        short_kw: vec![0.0; hours.len()],
    }
}

#[test]
fn demand_realistic() {
    check(
        "demand_realistic",
        &demand_and_output(&demand(&year()), &english()).expect("drawn"),
    );
}

#[test]
fn demand_of_one_month_with_a_long_name() {
    let mut data = demand(&year()[..744]);
    data.system = long_name();
    check(
        "demand_month",
        &demand_and_output(&data, &english()).expect("drawn"),
    );
}

#[test]
fn demand_of_one_hour_without_machine() {
    let mut data = demand(&year()[..1]);
    data.greatest_output.clear();
    data.least_output.clear();
    data.balance_point_c = None;
    data.design = None;
    data.system = NAMES[4].into();
    check(
        "demand_one_hour",
        &demand_and_output(&data, &english()).expect("drawn"),
    );
}

#[test]
fn demand_nothing_and_huge() {
    let mut data = demand(&year());
    data.hours.iter_mut().for_each(|h| h.1 = 0.0);
    check(
        "demand_nothing",
        &demand_and_output(&data, &english()).expect("drawn"),
    );
    data.hours.iter_mut().for_each(|h| h.1 = 1e7 * (20.0 - h.0));
    data.balance_point_c = Some(99.0);
    check(
        "demand_huge",
        &demand_and_output(&data, &english()).expect("drawn"),
    );
}

#[test]
fn duration_realistic() {
    check(
        "duration_realistic",
        &load_duration(&duration(&year()), &english()).expect("drawn"),
    );
}

#[test]
fn duration_of_one_month_with_heat_not_met() {
    let mut data = duration(&year()[..744]);
    data.system = NAMES[2].into();
    data.short_kw = data
        .backup_kw
        .iter()
        .map(|kw| (kw - 1.0).max(0.0))
        .collect();
    data.backup_kw.iter_mut().for_each(|kw| *kw = kw.min(1.0));
    check(
        "duration_month",
        &load_duration(&data, &english()).expect("drawn"),
    );
}

#[test]
fn duration_nothing_and_one_hour() {
    let mut data = duration(&year());
    for list in [&mut data.machine_kw, &mut data.backup_kw] {
        list.iter_mut().for_each(|kw| *kw = 0.0);
    }
    check(
        "duration_nothing",
        &load_duration(&data, &english()).expect("drawn"),
    );
    check(
        "duration_one_hour",
        &load_duration(&duration(&year()[..1]), &english()).expect("drawn"),
    );
}
