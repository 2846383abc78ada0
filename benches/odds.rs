//! Speed of the odds: `cargo bench --bench odds`. A sample of the demonstration is four system-years.
#![allow(
    clippy::unwrap_used,
    reason = "a bench that cannot be set up has nothing to time"
)]

use divan::Bencher;
use divan::counter::ItemsCount;
use winterledger::brief::Brief;
use winterledger::study::odds::Sampler;

fn main() {
    divan::main();
}

fn sampler(points: usize) -> (Sampler, usize) {
    let brief = Brief::demonstration().unwrap();
    let systems = brief.case.contenders.len();
    let sampler = Sampler::new(brief.case, brief.doubts, 1, points).unwrap();
    (sampler, points * systems)
}

/// A block of 50 samples on 1 and 2 threads; items are simulated system-years.
#[divan::bench(args = [1, 2], sample_count = 10)]
fn block_of_50(bencher: Bencher<'_, '_>, threads: usize) {
    let (sampler, years) = sampler(50);
    let pool = rayon::ThreadPoolBuilder::new()
        .num_threads(threads)
        .build()
        .unwrap();
    bencher
        .counter(ItemsCount::new(years))
        .bench_local(|| pool.install(|| sampler.block(0).unwrap()));
}

/// Ten thousand simulated system-years on two threads.
#[divan::bench(sample_count = 1)]
fn ten_thousand_system_years(bencher: Bencher<'_, '_>) {
    let (sampler, years) = sampler(2500);
    let pool = rayon::ThreadPoolBuilder::new()
        .num_threads(2)
        .build()
        .unwrap();
    bencher
        .counter(ItemsCount::new(years))
        .bench_local(|| pool.install(|| sampler.block(0).unwrap()));
}
