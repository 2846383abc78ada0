//! The heat pump: exact solution, fit, map, look-up, an hour.
//!
//! Run: `cargo bench --bench machine`

use divan::{Bencher, black_box};
use winterledger::heatpump::{ColdSide, Duty, Fitted, Map, Sheet, fit};

fn main() {
    divan::main();
}

const AIR: &str = "air, R290, variable speed";
const GROUND: &str = "ground, R410A, variable speed";

/// Benches what a fitted typical machine gives; one that cannot be made shows as a bench that does nothing.
fn with<Out>(bencher: Bencher, name: &str, run: impl Fn(&Fitted) -> Out + Sync) {
    match Sheet::typical(name).and_then(|sheet| fit(&sheet)) {
        Ok(fitted) => bencher.bench(|| run(&fitted)),
        Err(problems) => eprintln!("{problems}"),
    }
}

#[divan::bench]
fn exact_at_speed(bencher: Bencher) {
    with(bencher, AIR, |fitted| {
        let machine = &fitted.heat_pump.machine().machine;
        machine.at_speed(black_box(-7.0), black_box(45.0), black_box(0.8))
    });
}

#[divan::bench]
fn exact_at_output(bencher: Bencher) {
    with(bencher, AIR, |fitted| {
        let machine = fitted.heat_pump.machine();
        machine.at_output(black_box(-7.0), black_box(45.0), black_box(4.0))
    });
}

/// From a read sheet to a heat pump, property table and map included.
#[divan::bench(args = [AIR, GROUND])]
fn fit_a_sheet(bencher: Bencher, name: &str) {
    match Sheet::typical(name) {
        Ok(sheet) => bencher.bench(|| fit(black_box(&sheet))),
        Err(problems) => eprintln!("{problems}"),
    }
}

#[divan::bench(args = [AIR, GROUND])]
fn build_map(bencher: Bencher, name: &str) {
    with(bencher, name, |fitted| {
        let pump = &fitted.heat_pump;
        Map::build(pump.machine(), pump.limits())
    });
}

/// Range and input: what one hour needs at least.
#[divan::bench]
fn look_up(bencher: Bencher) {
    with(bencher, AIR, |fitted| {
        let map = fitted.heat_pump.map();
        let (source_c, flow_c) = (black_box(2.3), black_box(41.7));
        let range = map.range(source_c, flow_c);
        (range, map.input(source_c, flow_c, black_box(0.4)))
    });
}

#[divan::bench]
fn hour_of_air(bencher: Bencher) {
    hour(bencher, AIR, 2.3, 0.0, 3.0);
}

#[divan::bench]
fn hour_of_air_cycling(bencher: Bencher) {
    hour(bencher, AIR, 8.0, 0.0, 0.8);
}

#[divan::bench]
fn hour_of_ground(bencher: Bencher) {
    hour(bencher, GROUND, 6.0, 1.0, 5.0);
}

fn hour(bencher: Bencher, name: &str, open_c: f64, k_per_kw: f64, heat_kw: f64) {
    let cold = ColdSide {
        open_c,
        k_per_kw,
        relative_humidity: Some(0.87),
    };
    let duty = Duty {
        heat_kw,
        flow_c: 41.7,
        spread_k: 4.0,
        hours: 1.0,
        at_full_output: false,
    };
    with(bencher, name, |fitted| {
        fitted.heat_pump.deliver(black_box(&cold), black_box(&duty))
    });
}
