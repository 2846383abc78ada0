//! Thirty years of hourly rows, read, checked and described; `benches/weather_side_by_side.py` sets pandas beside it.

use std::fmt::Write;
use std::hint::black_box;

use winterledger::weather::{ReadOptions, describe, read, read_bytes};

fn main() {
    divan::main();
}

/// 1990 to 2019, five columns, 262 968 rows. The temperatures are a season, a day and a slow drift: what they are does not
/// matter to the time it takes.
fn thirty_years() -> String {
    let mut text =
        "time,temperature (C),relative humidity (%),global radiation (W/m2),wind (m/s)\n"
            .to_owned();
    let start = chrono::NaiveDate::from_ymd_opt(1990, 1, 1)
        .and_then(|d| d.and_hms_opt(0, 0, 0))
        .unwrap_or_default();
    for hour in 0..262_968 {
        let day = f64::from(hour) / 24.0;
        let turn = std::f64::consts::TAU;
        let season = (turn * (day - 20.0) / 365.25).cos();
        let t = 9.0 - 8.0 * season
            + 3.0 * (turn * (day - 0.6)).cos()
            + 4.0 * (day * 0.9).sin()
            + 2.0 * (day * 0.23).sin();
        let stamp = start + chrono::Duration::hours(i64::from(hour));
        let _ = writeln!(
            text,
            "{},{t:.1},{:.0},{:.0},{:.1}",
            stamp.format("%Y-%m-%d %H:%M:%S"),
            75.0 + 20.0 * season * (day * 1.7).sin(),
            (400.0 * (turn * (day - 0.5)).cos()).max(0.0),
            4.0 + 2.0 * (day * 0.7).sin(),
        );
    }
    text
}

#[divan::bench(sample_count = 20)]
fn read_thirty_years(bencher: divan::Bencher) {
    let text = thirty_years();
    let options = ReadOptions {
        zone: "UTC".parse().ok(),
        ..Default::default()
    };
    bencher.bench_local(|| {
        black_box(read_bytes(
            "thirty years",
            black_box(text.as_bytes()),
            &options,
        ))
    });
}

#[divan::bench(sample_count = 20)]
fn read_and_describe_thirty_years(bencher: divan::Bencher) {
    let text = thirty_years();
    let options = ReadOptions {
        zone: "UTC".parse().ok(),
        ..Default::default()
    };
    bencher.bench_local(|| {
        let weather = read_bytes("thirty years", black_box(text.as_bytes()), &options).ok();
        black_box(weather.map(|weather| describe(std::slice::from_ref(&weather), &[15.5])))
    });
}

/// From the disk to the description, as `benches/weather_side_by_side.py` times pandas; the file is its, where it names one.
#[divan::bench(sample_count = 31)]
fn read_and_describe_from_disk(bencher: divan::Bencher) {
    let folder = tempfile::tempdir().ok();
    let path = match (std::env::var_os("THIRTY_YEARS"), &folder) {
        (Some(path), _) => std::path::PathBuf::from(path),
        (None, Some(folder)) => {
            let path = folder.path().join("thirty_years.csv");
            if std::fs::write(&path, thirty_years()).is_err() {
                return;
            }
            path
        }
        (None, None) => return,
    };
    let options = ReadOptions {
        zone: "UTC".parse().ok(),
        ..Default::default()
    };
    bencher.bench_local(|| {
        let weather = read(black_box(&path), &options).ok();
        black_box(weather.map(|weather| describe(std::slice::from_ref(&weather), &[15.5])))
    });
}

#[divan::bench(sample_count = 20)]
fn read_a_civil_clock(bencher: divan::Bencher) {
    let text = thirty_years();
    let options = ReadOptions {
        zone: "Europe/Paris".parse().ok(),
        ..Default::default()
    };
    bencher.bench_local(|| {
        black_box(read_bytes(
            "thirty years",
            black_box(text.as_bytes()),
            &options,
        ))
    });
}
