//! Instructions by callgrind, which the load of the machine does not move: property table, cycle, fit, map, weather, the year.
//!
//! Run: `cargo install gungraun-runner --version 0.20.0` once, valgrind beside it, then `cargo bench --bench instructions`. The
//! loop's count divided by 8760 is what an hour of one system takes.
#![allow(
    clippy::unwrap_used,
    reason = "a bench that cannot be set up has nothing to count"
)]
#![allow(
    missing_docs,
    clippy::large_types_passed_by_value,
    reason = "what the harness makes of the functions below"
)]

use std::hint::black_box;

use gungraun::prelude::*;
use winterledger::brief::Brief;
use winterledger::heatpump::cycle::{Cycle, CycleInputs};
use winterledger::heatpump::{Fitted, Map, Sheet, fit};
use winterledger::refrigerant::{CycleTable, Equation, Refrigerant};
use winterledger::study::Case;
use winterledger::weather::{ReadOptions, read_bytes};
use winterledger::year::{State, Totals, run};

const AIR: &str = "air, R290, variable speed";

fn case() -> Case {
    Brief::demonstration().unwrap().case
}

fn system(index: usize) -> (Case, usize) {
    (case(), index)
}

fn sheet() -> Sheet {
    Sheet::typical(AIR).unwrap()
}

fn fitted() -> Fitted {
    fit(&sheet()).unwrap()
}

fn propane() -> Equation {
    Equation::new(Refrigerant::R290).unwrap()
}

fn weather_bytes() -> Vec<u8> {
    let path = concat!(
        env!("CARGO_MANIFEST_DIR"),
        "/weather_samples/morvane_sound.csv"
    );
    std::fs::read(path).unwrap()
}

#[library_benchmark]
#[bench::r290(setup = propane)]
fn exact_cycle(equation: Equation) -> f64 {
    let inputs = CycleInputs {
        evaporating_c: -5.0,
        condensing_c: 45.0,
        superheat_k: 5.0,
        subcooling_k: 3.0,
        isentropic_efficiency: 0.7,
        mass_flow_kg_per_s: None,
    };
    Cycle::solve(black_box(&equation), inputs)
        .unwrap()
        .cop_heating()
}

#[library_benchmark]
#[bench::r290(Refrigerant::R290)]
fn property_table(refrigerant: Refrigerant) -> CycleTable {
    CycleTable::build(black_box(refrigerant), 5.0, 3.0).unwrap()
}

#[library_benchmark]
#[bench::air(setup = sheet)]
fn fit_a_sheet(sheet: Sheet) -> Fitted {
    fit(black_box(&sheet)).unwrap()
}

#[library_benchmark]
#[bench::air(setup = fitted)]
fn build_map(fitted: Fitted) -> Map {
    Map::build(fitted.heat_pump.machine(), fitted.heat_pump.limits()).unwrap()
}

#[library_benchmark]
#[bench::one_year(setup = weather_bytes)]
fn read_weather(bytes: Vec<u8>) -> usize {
    let weather = read_bytes("weather", black_box(&bytes), &ReadOptions::default()).unwrap();
    weather.outdoor_c.len()
}

// The hour loop alone: `year::run` into totals.
#[library_benchmark]
#[bench::boiler(args = (0), setup = system)]
#[bench::air(args = (2), setup = system)]
#[bench::ground(args = (3), setup = system)]
fn loop_of_a_year((case, index): (Case, usize)) -> f64 {
    let contender = &case.contenders[index];
    let mut state = State::at_rest(&contender.system, contender.indoor_c);
    let mut totals = Totals::new(&case.site.month0);
    let hours = 0..case.site.axis.hours;
    run(
        &case.site,
        &contender.system,
        &contender.plan,
        hours,
        &mut state,
        &mut totals,
    );
    totals.all().space_wanted_kwh
}

// With meters and bill.
#[library_benchmark]
#[bench::air(args = (2), setup = system)]
fn metered_year((case, index): (Case, usize)) -> usize {
    let outcome = case
        .run_one(black_box(&case.contenders[index]), None)
        .unwrap();
    outcome.years.len()
}

library_benchmark_group!(
    name = parts,
    benchmarks = [
        exact_cycle,
        property_table,
        fit_a_sheet,
        build_map,
        read_weather
    ]
);
library_benchmark_group!(name = years, benchmarks = [loop_of_a_year, metered_year]);
main!(library_benchmark_groups = [parts, years]);
