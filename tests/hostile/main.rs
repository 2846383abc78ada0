//! Inputs that nobody would write: every kind of file, taken apart by its own structure and put together wrongly. Each is read or
//! refused with problems, within time and memory; whatever is read holds no NaN.
//!
//! CI tries a few thousand. `HOSTILE_CASES=200000 cargo test --release --test hostile -- --nocapture` tries more and says how many
//! of each kind were refused, and which was slowest. What once failed stands under `found/` and is tried every time.
#![cfg(test)]

mod kinds;
mod mutate;

use std::panic::{AssertUnwindSafe, catch_unwind};
use std::path::PathBuf;
use std::sync::Mutex;
use std::sync::atomic::{AtomicUsize, Ordering};
use std::time::{Duration, Instant};

use kinds::{KINDS, Kind};
use mutate::Random;

/// Longest time that one input may take. A brief that is read runs its years too; CI machines are slow and build unoptimised.
const LONGEST: Duration = Duration::from_secs(20);
/// Most memory that reading may add in the whole run, kB. The gzip limit alone is 128 MiB.
const MOST_MEMORY_KB: u64 = 1_500_000;

/// Which kind each case is of: briefs, which take longest, half as often as the others.
const TURNS: [usize; 13] = [0, 1, 2, 3, 4, 5, 6, 1, 2, 3, 4, 5, 6];

fn found() -> PathBuf {
    PathBuf::from(env!("CARGO_MANIFEST_DIR")).join("tests/hostile/found")
}

/// Greatest memory that this process has had, kB, where the system tells it.
fn peak_memory_kb() -> Option<u64> {
    let status = std::fs::read_to_string("/proc/self/status").ok()?;
    let line = status.lines().find(|line| line.starts_with("VmHWM:"))?;
    line.split_whitespace().nth(1)?.parse().ok()
}

/// What came of one input: whether it was read, or why it counts as a failure.
fn attempt(kind: &Kind, input: &[u8]) -> Result<bool, String> {
    match catch_unwind(AssertUnwindSafe(|| (kind.read)(input))) {
        Ok(outcome) => outcome,
        Err(panic) => Err(panic
            .downcast_ref::<String>()
            .cloned()
            .or_else(|| panic.downcast_ref::<&str>().map(|text| (*text).to_owned()))
            .unwrap_or_else(|| "panicked".to_owned())),
    }
}

#[test]
fn hostile_input_is_read_or_refused() {
    let asked = std::env::var("HOSTILE_CASES").ok();
    let cases: usize = asked.and_then(|text| text.parse().ok()).unwrap_or(2800);
    let seed: u64 = std::env::var("HOSTILE_SEED")
        .ok()
        .and_then(|text| text.parse().ok())
        .unwrap_or(1);
    let hands = std::thread::available_parallelism().map_or(1, usize::from);
    let next = AtomicUsize::new(0);
    let failures = Mutex::new(Vec::new());
    let start = Instant::now();
    let tallies = Mutex::new(vec![(0usize, 0usize, Duration::ZERO); KINDS.len()]);
    std::panic::set_hook(Box::new(|_| {}));
    std::thread::scope(|scope| {
        for _ in 0..hands {
            scope.spawn(|| {
                loop {
                    let case = next.fetch_add(1, Ordering::Relaxed);
                    if case >= cases {
                        break;
                    }
                    let which = TURNS[case % TURNS.len()];
                    let kind = &KINDS[which];
                    if case.is_multiple_of(10_000) {
                        println!("{case} cases begun after {:?}", start.elapsed());
                    }
                    let mut random = Random::new(seed, case as u64);
                    let input = mutate::mutated(&mut random, kind);
                    let began = Instant::now();
                    let outcome = attempt(kind, &input);
                    let took = began.elapsed();
                    let why = match outcome {
                        _ if took > LONGEST => Some(format!("took {took:?}")),
                        Err(why) => Some(why),
                        Ok(read) => {
                            let mut tallies = tallies.lock().unwrap();
                            tallies[which].0 += 1;
                            tallies[which].1 += usize::from(read);
                            tallies[which].2 = tallies[which].2.max(took);
                            None
                        }
                    };
                    if let Some(why) = why {
                        let name = format!("{}-{seed}-{case}.{}", kind.name, kind.ending);
                        let kept = std::env::var_os("HOSTILE_KEEP").map(PathBuf::from);
                        if let Some(folder) = kept {
                            std::fs::write(folder.join(&name), &input).unwrap();
                        }
                        failures.lock().unwrap().push(format!("{name}: {why}"));
                    }
                }
            });
        }
    });
    let _ = std::panic::take_hook();
    for (kind, (tried, read, slowest)) in KINDS.iter().zip(tallies.into_inner().unwrap()) {
        println!(
            "{}: {tried} tried, {read} read, {} refused, slowest {slowest:?}",
            kind.name,
            tried - read
        );
        // A mutation that is always refused at the door tests the door alone.
        assert!(
            cases < 2000 || read > 0 && read < tried,
            "{}: {read} of {tried} read",
            kind.name
        );
    }
    println!("peak memory {:?} kB", peak_memory_kb());
    let failures = failures.into_inner().unwrap();
    assert!(
        failures.is_empty(),
        "{} of {cases}, HOSTILE_KEEP=FOLDER keeps them:\n{}",
        failures.len(),
        failures.join("\n")
    );
    assert!(peak_memory_kb().is_none_or(|kb| kb < MOST_MEMORY_KB));
}

/// Everything that once made the program fail, by the kind in its name.
#[test]
fn what_once_failed_is_read_or_refused() {
    for entry in std::fs::read_dir(found()).unwrap() {
        let path = entry.unwrap().path();
        let name = path.file_name().unwrap().to_str().unwrap().to_owned();
        let Some(kind) = KINDS.iter().find(|kind| name.starts_with(kind.name)) else {
            assert!(name == "README.md", "{name} names no kind");
            continue;
        };
        let began = Instant::now();
        let outcome = attempt(kind, &std::fs::read(&path).unwrap());
        assert!(
            outcome.is_ok() && began.elapsed() < LONGEST,
            "{name}: {outcome:?}"
        );
    }
}

/// Limits on size, line length, rows, nesting and expansion, as DEVELOPERS.md states them; rows and exact sizes are tested in
/// `src/limits.rs`.
#[test]
fn limits_are_told() {
    let folder = tempfile::tempdir().unwrap();
    let told = |arguments: &[&str]| {
        let output = std::process::Command::new(env!("CARGO_BIN_EXE_winterledger"))
            .args(arguments)
            .output()
            .unwrap();
        assert_eq!(output.status.code(), Some(1), "{arguments:?} {output:?}");
        String::from_utf8(output.stderr).unwrap()
    };
    let file = |name: &str, content: &[u8]| {
        let path = folder.path().join(name);
        std::fs::write(&path, content).unwrap();
        path.to_str().unwrap().to_owned()
    };
    let large = file("large.toml", &vec![b'#'; 4 * 1024 * 1024 + 1]);
    assert!(told(&["estimate", &large]).contains("at most 4 MiB"));
    let wide = file(
        "wide.csv",
        format!("time,temperature\n{}\n", "1".repeat(70_000)).as_bytes(),
    );
    assert!(told(&["weather", &wide]).contains("at most 64 KiB"));
    let deep = file(
        "deep.toml",
        format!("a = {}1{}", "[".repeat(500), "]".repeat(500)).as_bytes(),
    );
    assert!(
        told(&["estimate", &deep]).contains("recursion depth"),
        "{}",
        told(&["estimate", &deep])
    );
    let tables = file("tables.toml", format!("[{}a]", "a.".repeat(500)).as_bytes());
    told(&["estimate", &tables]);
    let device = "/dev/zero";
    if std::path::Path::new(device).exists() {
        assert!(told(&["estimate", device]).contains("at most 4 MiB"));
        assert!(told(&["weather", device]).contains("at most 512 MiB"));
    }
    let mut packed = flate2::write::GzEncoder::new(Vec::new(), flate2::Compression::best());
    for _ in 0..129 {
        std::io::Write::write_all(&mut packed, &vec![b' '; 1024 * 1024]).unwrap();
    }
    let bomb = file("bomb.csv.gz", &packed.finish().unwrap());
    assert!(told(&["weather", &bomb]).contains("128 MiB"));
}
