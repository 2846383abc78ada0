//! Ground against outside references. Values: `tests/reference/ground.py` (pygfunction 2.3.1, CoolProp 8.0.0, scipy 1.17.1).
#![cfg(test)]

use std::f64::consts::TAU;
use std::path::Path;

use winterledger::source::{
    BuriedLoop, EARLY_ERROR, Layout, LoopDesign, Memory, Soil, Trench, undisturbed_c,
};

#[path = "reference/ground_loops.rs"]
mod ground_loops;
use ground_loops::{bore, bores, design, given};

fn rows(name: &str) -> Vec<Vec<String>> {
    let path = Path::new(env!("CARGO_MANIFEST_DIR"))
        .join("tests/reference")
        .join(name);
    let mut reader = csv::Reader::from_path(path).unwrap();
    reader
        .records()
        .map(|row| row.unwrap().iter().map(str::to_owned).collect())
        .collect()
}

fn number(text: &str) -> f64 {
    text.parse().unwrap()
}

/// The draw of the script, kW, for any hour of any year.
fn load() -> Vec<f64> {
    rows("ground_load.csv")
        .iter()
        .map(|row| number(&row[1]))
        .collect()
}

/// Twenty-five years of hourly draw on four bores: the memory against the exact sum over every past hour, within 0.02 K. The exact
/// response stands at 4000 points evenly spaced in the logarithm of time; straight lines between them err by 1e-5 K.
#[test]
fn the_memory_is_the_exact_convolution_over_twenty_five_years() {
    let soil = Soil {
        conductivity_w_per_m_k: 2.0,
        diffusivity_m2_per_s: 0.9e-6,
    };
    let loop_design = bores("four", soil);
    let made = loop_design.build(1).unwrap();
    let draw = load();
    let hours: usize = 25 * 8760;
    let table = table(&loop_design, hours);
    let mut memory = Memory::default();
    let mut worst = 0.0f64;
    for hour in 0..hours {
        made.drawn(hour, draw[hour % 8760], &mut memory);
        // Steps of 1997 hours meet all times of day and of the year; the last day is looked at whole.
        if hour % 1997 == 0 || hour + 24 >= hours {
            let exact: f64 = (0..=hour)
                .map(|past| draw[past % 8760] * (table[hour - past + 1] - table[hour - past]))
                .sum();
            let fall = made.undisturbed_c(0) - made.wall_c(0, &memory);
            worst = worst.max((fall - exact * 1000.0 / made.length_m()).abs());
        }
    }
    assert!(worst < 0.02, "{worst} K");
}

/// The response at every whole hour, m K/W, with 0 at 0.
fn table(design: &LoopDesign, hours: usize) -> Vec<f64> {
    const POINTS: u32 = 4000;
    let step = (hours as f64).ln() / f64::from(POINTS - 1);
    let times: Vec<_> = (0..POINTS).map(|i| (step * f64::from(i)).exp()).collect();
    let values = design.wall_response(&times);
    let at = |hour: usize| {
        let place = ((hour as f64).ln() / step).min(f64::from(POINTS - 2));
        let i = place as usize;
        values[i] + (place - i as f64) * (values[i + 1] - values[i])
    };
    std::iter::once(0.0).chain((1..=hours).map(at)).collect()
}

/// What the line source leaves out in the first hours is what a cylinder without filling would add: the stated bound is its greatest
/// value and holds at all times.
#[test]
fn the_line_source_lags_a_cylinder_by_at_most_the_stated_bound() {
    let mut greatest = 0.0f64;
    for row in rows("ground_cylinder.csv") {
        let fourier = number(&row[0]);
        // A bore of 1 m radius in ground of 1 m²/h: an hour is one unit of α t/r².
        let soil = Soil {
            conductivity_w_per_m_k: 1.0 / TAU,
            diffusivity_m2_per_s: 1.0 / 3600.0,
        };
        let one = bore(1e5, 1e5, 1.0, 0.0, 0.0);
        let line = given(vec![one], soil).wall_response(&[fourier])[0];
        greatest = greatest.max(number(&row[1]) - line);
        assert!(
            fourier < 5.0 || number(&row[1]) - line < 0.13,
            "{row:?} {line}"
        );
    }
    assert!(
        greatest <= EARLY_ERROR && greatest > 0.99 * EARLY_ERROR,
        "{greatest}"
    );
}

/// A trench against the undisturbed solution: with its weather swinging and nothing drawn it offers the wave of Kusuda and Achenbach
/// at its depth; with a draw that never changes it comes to the steady shape factor of its pipes.
#[test]
fn a_trench_meets_its_limits() {
    let soil = Soil {
        conductivity_w_per_m_k: 1.2,
        diffusivity_m2_per_s: 5e-7,
    };
    let trench = Trench {
        length_m: 100.0,
        depth_m: 1.2,
        pipes: 1,
        spacing_m: 0.0,
        across_m: 0.0,
    };
    let plan = design(
        Layout::Trenches {
            trenches: vec![trench],
        },
        soil,
    );
    let made: BuriedLoop = plan.build(8760).unwrap();
    let mut memory = Memory::default();
    for hour in [0usize, 2000, 6000] {
        let wave = undisturbed_c(&plan.surface, 1.2, 5e-7, hour as f64);
        assert!((made.offer(hour, &memory).open_c - wave).abs() < 1e-12);
    }
    for hour in 0..60 * 8760 {
        made.drawn(hour, 1.0, &mut memory);
    }
    // 10 W/m for sixty years: ln(2z/r)/(2πk), Incropera's table of shape factors [from memory].
    let steady_k = 10.0 * (2.4f64 / 0.02).ln() / (TAU * 1.2);
    let fall_k = made.undisturbed_c(0) - made.wall_c(0, &memory);
    assert!((fall_k - steady_k).abs() < 0.03, "{fall_k} {steady_k}");
}
