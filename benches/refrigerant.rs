//! Properties: exact states, table building, table look-ups.
//!
//! Run: `cargo bench --bench refrigerant`

use divan::{Bencher, black_box};
use winterledger::heatpump::cycle::{Cycle, CycleInputs};
use winterledger::refrigerant::{CycleTable, Equation, PropertyError, Refrigerant};

fn main() {
    divan::main();
}

const INPUTS: CycleInputs = CycleInputs {
    evaporating_c: -5.0,
    condensing_c: 45.0,
    superheat_k: 5.0,
    subcooling_k: 3.0,
    isentropic_efficiency: 0.7,
    mass_flow_kg_per_s: None,
};

/// Benches what a fallible set-up gives; a failed set-up shows as a bench that does nothing.
fn with<Made>(
    bencher: Bencher,
    made: Result<Made, PropertyError>,
    run: impl Fn(&Made) -> f64 + Sync,
) where
    Made: Sync,
{
    match made {
        Ok(made) => bencher.bench(|| run(&made)),
        Err(error) => eprintln!("{error}"),
    }
}

#[divan::bench(args = Refrigerant::ALL)]
fn read_equation(bencher: Bencher, refrigerant: Refrigerant) {
    bencher.bench(|| Equation::new(black_box(refrigerant)));
}

#[divan::bench(args = Refrigerant::ALL)]
fn saturation(bencher: Bencher, refrigerant: Refrigerant) {
    with(bencher, Equation::new(refrigerant), |equation| {
        equation
            .saturation(black_box(40.0))
            .map_or(f64::NAN, |found| found.pressure_kpa)
    });
}

#[divan::bench(args = Refrigerant::ALL)]
fn exact_cycle(bencher: Bencher, refrigerant: Refrigerant) {
    with(bencher, Equation::new(refrigerant), |equation| {
        Cycle::solve(equation, black_box(INPUTS)).map_or(f64::NAN, |cycle| cycle.cop_heating())
    });
}

#[divan::bench(args = Refrigerant::ALL)]
fn build_table(bencher: Bencher, refrigerant: Refrigerant) {
    bencher.bench(|| CycleTable::build(black_box(refrigerant), 5.0, 3.0));
}

fn table() -> Result<CycleTable, PropertyError> {
    CycleTable::build(Refrigerant::R290, 5.0, 3.0)
}

#[divan::bench]
fn look_up_pressure(bencher: Bencher) {
    with(bencher, table(), |table| {
        table.pressure_kpa(black_box(-5.3))
    });
}

#[divan::bench]
fn look_up_suction_density(bencher: Bencher) {
    with(bencher, table(), |table| {
        table.suction_density(black_box(-5.3))
    });
}

#[divan::bench]
fn look_up_suction_enthalpy(bencher: Bencher) {
    with(bencher, table(), |table| {
        table.suction_enthalpy(black_box(-5.3))
    });
}

#[divan::bench]
fn look_up_liquid_enthalpy(bencher: Bencher) {
    with(bencher, table(), |table| {
        table.liquid_enthalpy(black_box(44.1))
    });
}

#[divan::bench]
fn look_up_isentropic_work(bencher: Bencher) {
    with(bencher, table(), |table| {
        table.isentropic_work(black_box(-5.3), black_box(44.1))
    });
}
