//! Swings, break-even, contours, spend over the years, brine through the year.

use crate::common::*;
use winterledger::chart::{
    BreakEven, BreakEvenLine, BrineLine, BrineYear, Contours, CumulativeSpend, EmitterStep,
    EmitterStudy, MeterPoint, SignaturePlot, Swing, Swings, SystemSpend, break_even, brine_year,
    calendar_months, contours, cumulative_spend, emitter_study, signature_plot, swings,
};

fn swing(label: &str, low_text: &str, high_text: &str, low: f64, high: f64) -> Swing {
    Swing {
        label: label.into(),
        low_text: low_text.into(),
        high_text: high_text.into(),
        low,
        high,
    }
}

fn saving() -> Swings {
    Swings {
        outcome: "Saving in a year of Air source, larger radiators".into(),
        currency: "GBP".into(),
        likely: 108.0,
        levers: vec![
            swing(
                "Electricity price",
                "19.0 p/kWh",
                "30.0 p/kWh",
                351.0,
                -134.0,
            ),
            swing("Gas price", "5.0 p/kWh", "9.0 p/kWh", -91.0, 402.0),
            swing("Design flow temperature", "35 °C", "55 °C", 214.0, -48.0),
            swing("Heat-loss coefficient", "180 W/K", "260 W/K", 96.0, 121.0),
            swing("Boiler efficiency", "82 %", "91 %", 175.0, 52.0),
        ],
    }
}

#[test]
fn swings_realistic() {
    check(
        "swings_realistic",
        &swings(&saving(), &english()).expect("drawn"),
    );
}

#[test]
fn swings_hostile() {
    let mut data = saving();
    data.outcome = long_name();
    data.likely = -1e9;
    data.levers = NAMES
        .iter()
        .map(|n| swing(n, n, &long_name(), -1e9, 1e-9))
        .collect();
    data.levers
        .push(swing(&long_name(), &long_name(), "", 5.0, 5.0));
    check("swings_hostile", &swings(&data, &english()).expect("drawn"));
    data.levers.truncate(1);
    data.likely = 0.0;
    data.levers[0] = swing("Nothing moves", "0", "0", 0.0, 0.0);
    check("swings_nothing", &swings(&data, &english()).expect("drawn"));
}

fn line(label: &str, slope: f64, zero: f64) -> BreakEvenLine {
    BreakEvenLine {
        label: label.into(),
        points: (15..=36)
            .map(|p| (f64::from(p), slope * (zero - f64::from(p))))
            .collect(),
        crossings: vec![zero],
    }
}

fn price() -> BreakEven {
    BreakEven {
        lever: "Electricity price".into(),
        unit: "p/kWh".into(),
        outcome: "Saving in a year".into(),
        currency: "GBP".into(),
        lines: vec![
            line("Air source, larger radiators", 41.0, 27.13),
            line("Ground source", 33.0, 31.4),
        ],
        now: Some(24.5),
    }
}

#[test]
fn break_even_realistic() {
    check(
        "break_even_realistic",
        &break_even(&price(), &english()).expect("drawn"),
    );
}

#[test]
fn break_even_hostile() {
    let mut data = price();
    data.lever = long_name();
    data.unit = long_name();
    data.outcome = long_name();
    data.lines = NAMES
        .iter()
        .enumerate()
        .map(|(i, n)| line(n, 1e7, 25.0 + 0.01 * i as f64))
        .collect();
    data.now = Some(25.0);
    check(
        "break_even_hostile",
        &break_even(&data, &english()).expect("drawn"),
    );
    data.lines = vec![BreakEvenLine {
        label: "one".into(),
        points: vec![(3.0, 0.0)],
        crossings: vec![3.0],
    }];
    data.now = None;
    check(
        "break_even_one_point",
        &break_even(&data, &english()).expect("drawn"),
    );
}

fn plane(scale: f64) -> Contours {
    let x: Vec<f64> = (0..=50).map(|i| 15.0 + 0.5 * f64::from(i)).collect();
    let y: Vec<f64> = (0..=32).map(|i| 4.0 + 0.25 * f64::from(i)).collect();
    let saving =
        |e: f64, g: f64| scale * (152.0 * g - 43.0 * e + 0.02 * (e - 25.0).powi(3) + 118.0);
    Contours {
        outcome: "Saving in a year of Air source, larger radiators".into(),
        currency: "GBP".into(),
        x_name: ("Electricity price".into(), "p/kWh".into()),
        y_name: ("Gas price".into(), "p/kWh".into()),
        values: y
            .iter()
            .map(|g| x.iter().map(|e| saving(*e, *g)).collect())
            .collect(),
        x,
        y,
        now: Some((24.5, 6.3)),
        ratios: vec![3.0, 3.5, 4.0],
    }
}

#[test]
fn contours_realistic() {
    check(
        "contours_realistic",
        &contours(&plane(1.0), &english()).expect("drawn"),
    );
}

#[test]
fn contours_hostile() {
    let mut data = plane(1e6);
    data.outcome = long_name();
    data.x_name = (long_name(), long_name());
    data.y_name = (NAMES[2].into(), NAMES[3].into());
    data.now = Some((1e9, -1.0));
    data.ratios = vec![-1.0, 0.0, 1e9, 2.55];
    check(
        "contours_hostile",
        &contours(&data, &english()).expect("drawn"),
    );
    let mut flat = plane(0.0);
    flat.ratios.clear();
    check(
        "contours_flat",
        &contours(&flat, &english()).expect("drawn"),
    );
}

fn spend(
    label: &str,
    today: bool,
    capital: f64,
    yearly: f64,
    replaced: usize,
    price: f64,
) -> SystemSpend {
    let mut spent = capital;
    let years = (0..=25).map(|y| {
        if y > 0 {
            spent += yearly * 0.985_f64.powi(y) + if y as usize == replaced { price } else { 0.0 };
        }
        spent
    });
    SystemSpend {
        label: label.into(),
        today,
        spent: years.collect(),
    }
}

fn lifetime() -> CumulativeSpend {
    CumulativeSpend {
        currency: "GBP".into(),
        terms: "real, discounted at 3.5 % a year".into(),
        systems: vec![
            spend(NAMES[0], true, 0.0, 1390.0, 12, 2900.0),
            spend(NAMES[1], false, 3900.0, 1130.0, 20, 2600.0),
            spend("Ground source", false, 14500.0, 900.0, 23, 2900.0),
        ],
    }
}

#[test]
fn spend_realistic() {
    check(
        "spend_realistic",
        &cumulative_spend(&lifetime(), &english()).expect("drawn"),
    );
}

#[test]
fn spend_hostile() {
    let mut data = lifetime();
    data.terms = long_name();
    data.systems = NAMES
        .iter()
        .enumerate()
        .map(|(i, n)| spend(n, i == 2, 1e6 - 10.0 * i as f64, 100.0, 3, 1.0))
        .collect();
    check(
        "spend_hostile",
        &cumulative_spend(&data, &english()).expect("drawn"),
    );
    data.systems[5].spent.truncate(1);
    let error = cumulative_spend(&data, &english()).expect_err("uneven");
    let lengths = "26, 26, 26, 26, 26, 1, 26 and 26";
    assert!(error.to_string().contains(lengths), "{error}");
}

fn brine(label: &str, drop: f64) -> BrineLine {
    let hours_c = (0..8760)
        .map(|h| {
            let t = f64::from(h) / 8760.0;
            let season = 0.5 + 0.5 * ((t - 0.1) * std::f64::consts::TAU).cos();
            9.5 - drop
                - 6.5 * season
                - 0.9 * season * (f64::from(h) / 24.0 * std::f64::consts::TAU).sin().abs()
        })
        .collect();
    BrineLine {
        label: label.into(),
        hours_c,
    }
}

fn bore() -> BrineYear {
    BrineYear {
        source: "Two bores of 90 m".into(),
        lines: vec![brine("year 1", 0.0), brine("year 25", 1.6)],
        months: calendar_months(false),
        undisturbed_c: Some(10.4),
        limit: Some(("lowest the machine accepts".into(), -5.0)),
    }
}

#[test]
fn brine_realistic() {
    check(
        "brine_realistic",
        &brine_year(&bore(), &english()).expect("drawn"),
    );
}

#[test]
fn brine_hostile() {
    let mut data = bore();
    data.source = long_name();
    data.limit = Some((long_name(), 10.4));
    data.lines = NAMES.iter().map(|n| brine(n, 0.0)).collect();
    for line in &mut data.lines {
        line.hours_c.truncate(744);
        line.hours_c[100..300].fill(f64::NAN);
    }
    check(
        "brine_hostile",
        &brine_year(&data, &english()).expect("drawn"),
    );
}

fn meter() -> SignaturePlot {
    let point = |i: u32, outdoor_c: f64, kwh_per_day: f64, odd| MeterPoint {
        outdoor_c,
        kwh_per_day,
        name: format!("2023-{i:02}-01 to 2023-{:02}-01", i + 1),
        odd,
    };
    SignaturePlot {
        points: vec![
            point(1, 5.1, 71.0, false),
            point(2, 3.4, 79.0, false),
            point(3, 5.5, 68.0, false),
            point(4, 9.1, 81.0, true),
            point(5, 13.0, 24.5, false),
            point(6, 13.5, 22.0, false),
            point(7, 16.8, 9.4, false),
        ],
        base_load_kwh_per_day: 8.1,
        slope_kwh_per_k_day: 5.8,
        base_temperature_c: 15.9,
        heat_loss_w_per_k: 197.0,
        heat_loss_95: (181.0, 213.0),
        is_effective: false,
    }
}

#[test]
fn signature_realistic() {
    check(
        "signature_realistic",
        &signature_plot(&meter(), &english()).expect("drawn"),
    );
}

#[test]
fn signature_hostile() {
    let mut data = meter();
    for (point, name) in data.points.iter_mut().zip(NAMES.iter().cycle()) {
        point.name = (*name).into();
        point.odd = true;
    }
    data.points.push(MeterPoint {
        outdoor_c: -60.0,
        kwh_per_day: 1e9,
        name: long_name(),
        odd: true,
    });
    check(
        "signature_hostile",
        &signature_plot(&data, &english()).expect("drawn"),
    );
    data.points.truncate(1);
    data.base_temperature_c = -40.0;
    data.slope_kwh_per_k_day = 0.0;
    data.base_load_kwh_per_day = 0.0;
    data.points[0].kwh_per_day = 0.0;
    check(
        "signature_nothing",
        &signature_plot(&data, &english()).expect("drawn"),
    );
}

fn emitters() -> EmitterStudy {
    let step = |flow_c: f64, times_today: f64, saving: f64, spf_h4: f64| EmitterStep {
        flow_c,
        times_today,
        saving: Some(saving),
        spf_h4: Some(spf_h4),
    };
    EmitterStudy {
        choice: "Air source, larger radiators".into(),
        currency: "GBP".into(),
        steps: vec![
            step(35.0, 3.4, 214.0, 4.12),
            step(40.0, 2.4, 158.0, 3.78),
            step(45.0, 1.8, 96.0, 3.43),
            step(50.0, 1.4, 31.0, 3.12),
            step(55.0, 1.2, -48.0, 2.81),
            EmitterStep {
                flow_c: 60.0,
                times_today: 1.0,
                saving: None,
                spf_h4: None,
            },
        ],
        now_c: Some(45.0),
        crossings_c: vec![52.0],
    }
}

#[test]
fn emitters_realistic() {
    check(
        "emitters_realistic",
        &emitter_study(&emitters(), &english()).expect("drawn"),
    );
}

#[test]
fn emitters_hostile() {
    let mut data = emitters();
    data.choice = long_name();
    data.currency = long_name();
    data.now_c = Some(35.0);
    data.crossings_c = vec![35.0, 35.1, 59.9, 60.0];
    for step in &mut data.steps {
        step.times_today = 1e6;
        step.saving = step.saving.map(|_| -1e9);
    }
    check(
        "emitters_hostile",
        &emitter_study(&data, &english()).expect("drawn"),
    );
    data.steps.truncate(2);
    data.crossings_c.clear();
    data.now_c = None;
    check(
        "emitters_two_steps",
        &emitter_study(&data, &english()).expect("drawn"),
    );
    for steps in [0, 1] {
        data.steps.truncate(steps);
        assert!(emitter_study(&data, &english()).is_err());
    }
}
