//! Carpets and duration curves.

use crate::common::*;
use winterledger::chart::{Carpet, DurationCurve, Spell, calendar_months, carpet, duration_curve};

fn temperature(hours: &[Hour]) -> Carpet {
    Carpet {
        title: "Outdoor temperature of the year".into(),
        quantity: "Outdoor temperature".into(),
        unit: "°C".into(),
        hours: hours.iter().map(|h| Some(h.outdoor_c)).collect(),
        months: calendar_months(false),
        spell: Some(Spell {
            first_day: 16,
            days: 3,
            label: "coldest three days, −5.4 °C on average".into(),
        }),
    }
}

#[test]
fn carpet_realistic() {
    check(
        "carpet_realistic",
        &carpet(&temperature(&year()), &english()).expect("drawn"),
    );
}

#[test]
fn carpet_with_gaps_of_one_month_and_long_names() {
    let mut data = temperature(&year()[..744]);
    for i in 100..180 {
        data.hours[i] = None;
    }
    data.title = long_name();
    data.quantity = NAMES[2].into();
    data.unit = long_name();
    data.spell = Some(Spell {
        first_day: 29,
        days: 90,
        label: long_name(),
    });
    check("carpet_month", &carpet(&data, &english()).expect("drawn"));
}

#[test]
fn carpet_of_equal_and_of_huge_values() {
    let mut data = temperature(&year()[..30]);
    data.hours = vec![Some(5.0); 30];
    check("carpet_equal", &carpet(&data, &english()).expect("drawn"));
    data.hours = (0..8784).map(|i| Some(f64::from(i) * 1e6)).collect();
    data.months = calendar_months(true);
    check("carpet_huge", &carpet(&data, &english()).expect("drawn"));
}

fn curve(hours: &[Hour]) -> DurationCurve {
    DurationCurve {
        place: "Harrowmere, invented weather".into(),
        outdoor_c: hours.iter().map(|h| h.outdoor_c).collect(),
        levels: vec![
            ("design temperature".into(), -3.0),
            ("base temperature".into(), 15.5),
        ],
    }
}

#[test]
fn duration_curve_realistic() {
    check(
        "duration_curve_realistic",
        &duration_curve(&curve(&year()), &english()).expect("drawn"),
    );
}

#[test]
fn duration_curve_hostile() {
    let mut data = curve(&year()[..744]);
    data.place = long_name();
    data.levels = (0..8)
        .map(|i| (NAMES[i].to_string(), f64::from(i as i32) * 0.01))
        .collect();
    data.levels.push((long_name(), 4.0));
    data.levels.push(("far away".into(), 400.0));
    check(
        "duration_curve_hostile",
        &duration_curve(&data, &english()).expect("drawn"),
    );
    check(
        "duration_curve_one",
        &duration_curve(&curve(&year()[..1]), &english()).expect("drawn"),
    );
}
