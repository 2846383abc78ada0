//! The year: one system, three systems, thirty years, and the hour loop alone.
//!
//! Run: `cargo bench --bench year`. Instructions are counted by `cargo bench --bench instructions`; the same year as scripts do it
//! stands in `benches/side_by_side.py`.
#![allow(
    clippy::unwrap_used,
    reason = "a bench that cannot be set up has nothing to time"
)]

use divan::counter::ItemsCount;
use divan::{Bencher, black_box};
use winterledger::brief::Brief;
use winterledger::source::Memory;
use winterledger::study::Case;
use winterledger::year::{State, Totals, run};

fn main() {
    divan::main();
}

/// The systems of the demonstration: gas boiler, air source, ground source.
const SYSTEMS: [usize; 3] = [0, 2, 3];

fn demonstration() -> Case {
    Brief::demonstration().unwrap().case
}

/// Hours of the demonstration's axis through `year::run` into totals; nothing is metered, priced or kept.
fn loop_alone(case: &Case, system: usize, hours: usize) -> Totals<'_> {
    let contender = &case.contenders[system];
    let mut state = State {
        ground: Memory::default(),
        ..State::at_rest(&contender.system, contender.indoor_c)
    };
    let mut totals = Totals::new(&case.site.month0);
    let year = case.site.axis.hours;
    let mut left = hours;
    while left > 0 {
        let now = left.min(year);
        run(
            &case.site,
            &contender.system,
            &contender.plan,
            0..now,
            &mut state,
            &mut totals,
        );
        left -= now;
    }
    totals
}

/// The hour loop of one system, by hours: the cost an hour is the same for a tenth of a year and for ten years.
#[divan::bench(args = [876, 8760, 87_600])]
fn hours_of_air(bencher: Bencher<'_, '_>, hours: usize) {
    let case = demonstration();
    bencher
        .counter(ItemsCount::new(hours))
        .bench_local(|| loop_alone(black_box(&case), 2, hours));
}

/// One system's year: hours, meters and bill. Gas boiler, air source, ground source.
#[divan::bench(args = SYSTEMS)]
fn system_year(bencher: Bencher<'_, '_>, system: usize) {
    let case = demonstration();
    bencher
        .counter(ItemsCount::new(case.site.axis.hours))
        .bench_local(|| case.run_one(black_box(&case.contenders[system]), None));
}

/// The year of one, two and three systems.
#[divan::bench(args = [1, 2, 3])]
fn systems(bencher: Bencher<'_, '_>, count: usize) {
    let case = demonstration();
    bencher
        .counter(ItemsCount::new(count * case.site.axis.hours))
        .bench_local(|| {
            SYSTEMS[..count]
                .iter()
                .map(|&system| case.run_one(black_box(&case.contenders[system]), None))
                .collect::<Vec<_>>()
        });
}

/// Years of three systems, one after another, without ledgers.
#[divan::bench(sample_count = 10, args = [1, 10, 30])]
fn years_of_three_systems(bencher: Bencher<'_, '_>, years: usize) {
    let case = demonstration();
    let hours = years * case.site.axis.hours;
    bencher
        .counter(ItemsCount::new(SYSTEMS.len() * hours))
        .bench_local(|| SYSTEMS.map(|system| loop_alone(black_box(&case), system, hours)));
}
