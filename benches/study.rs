//! Times of the studies of the demonstration home.

use winterledger::brief::Brief;

fn main() {
    divan::main();
}

/// One system through one year.
#[divan::bench(args = [0, 1, 3])]
fn system_year(bencher: divan::Bencher<'_, '_>, contender: usize) {
    let brief = Brief::demonstration().ok();
    bencher.bench_local(|| {
        brief
            .as_ref()
            .map(|brief| brief.case.run_one(&brief.case.contenders[contender], None))
    });
}
