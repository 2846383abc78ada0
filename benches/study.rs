//! Times of the studies of the demonstration home: `cargo bench --bench study`.
#![allow(
    clippy::unwrap_used,
    reason = "a bench that cannot be set up has nothing to time"
)]

use divan::{Bencher, black_box};
use winterledger::answer::study::{Wish, studies};
use winterledger::brief::Brief;
use winterledger::study::{
    CHOICE, Lever, Measure, Pair, break_even, emitter_sizes, machine_sizes, two_levers,
};

fn main() {
    divan::main();
}

fn pair(choice: usize) -> Pair {
    let case = Brief::demonstration().unwrap().case;
    let outcomes = case.run().unwrap();
    Pair::new(&case, &outcomes, choice).unwrap()
}

/// One system through one year: boiler, air, ground.
#[divan::bench(args = [0, 1, 3])]
fn system_year(bencher: Bencher<'_, '_>, contender: usize) {
    let case = Brief::demonstration().unwrap().case;
    bencher.bench_local(|| case.run_one(black_box(&case.contenders[contender]), None));
}

/// A price moved: both bills again, no hour.
#[divan::bench]
fn prices_moved(bencher: Bencher<'_, '_>) {
    let pair = pair(1);
    bencher.bench_local(|| pair.at(black_box(&[(Lever::ElectricityRate, 1.1)])));
}

#[divan::bench(sample_count = 10)]
fn seven_break_evens(bencher: Bencher<'_, '_>) {
    let pair = pair(1);
    let levers = Lever::ALL
        .iter()
        .filter(|lever| lever.now(pair.case(), CHOICE).is_some())
        .take(7);
    let levers: Vec<Lever> = levers.copied().collect();
    bencher.bench_local(|| {
        let found = levers
            .iter()
            .map(|&lever| break_even(&pair, lever, &[Measure::YearlyCost]).unwrap());
        found.collect::<Vec<_>>()
    });
}

#[divan::bench(sample_count = 10)]
fn emitters(bencher: Bencher<'_, '_>) {
    let pair = pair(1);
    bencher.bench_local(|| emitter_sizes(&pair));
}

#[divan::bench(sample_count = 10, args = [1, 3])]
fn sizes(bencher: Bencher<'_, '_>, choice: usize) {
    let pair = pair(choice);
    bencher.bench_local(|| machine_sizes(&pair));
}

#[divan::bench(sample_count = 10)]
fn prices_40_by_40(bencher: Bencher<'_, '_>) {
    let pair = pair(1);
    bencher.bench_local(|| two_levers(&pair, Lever::ElectricityRate, Lever::FuelRate, 40));
}

/// Everything that the command `study` does for one choice: every lever by three measures, emitters, sizes, prices, swings.
#[divan::bench(sample_count = 5, args = [1, 3])]
fn whole_study(bencher: Bencher<'_, '_>, choice: usize) {
    let brief = Brief::demonstration().unwrap();
    let outcomes = brief.case.run().unwrap();
    let wish = Wish {
        choices: vec![choice],
        together: (Lever::ElectricityRate, Lever::FuelRate),
        steps: 40,
    };
    bencher.bench_local(|| studies(&brief.case, &outcomes, &brief.told, &wish));
}
