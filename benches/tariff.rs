//! Sorting a year into buckets, the price column, and the bill of a reading.

use std::path::Path;

use winterledger::bill::{self, Connection};
use winterledger::calendar::{CivilHour, HourAxis};
use winterledger::tariff::{Flows, Tariff};

fn main() {
    divan::main();
}

fn year() -> (Tariff, Vec<CivilHour>) {
    let folder = Path::new(env!("CARGO_MANIFEST_DIR")).join("tariffs");
    let tariff = match Tariff::read(&folder.join("seasonal_electricity.toml")) {
        Ok(tariff) => tariff,
        Err(problems) => {
            eprintln!("{problems}");
            std::process::exit(1);
        }
    };
    let zone = chrono_tz::Europe::Paris;
    let civil = HourAxis::civil_year(2024, zone).map(|axis| axis.civil(zone));
    (tariff, civil.unwrap_or_default())
}

#[divan::bench]
fn read_a_tariff(bencher: divan::Bencher) {
    bencher.bench(year);
}

#[divan::bench]
fn sort_a_year(bencher: divan::Bencher) {
    let (tariff, civil) = year();
    bencher.bench(|| tariff.meter(&civil));
}

#[divan::bench]
fn price_column(bencher: divan::Bencher) {
    let (tariff, civil) = year();
    bencher.bench(|| tariff.price_column(&civil, None));
}

#[divan::bench]
fn record_a_year(bencher: divan::Bencher) {
    let (tariff, civil) = year();
    let Ok(meter) = tariff.meter(&civil) else {
        return;
    };
    bencher.bench(|| {
        let mut reading = meter.zero();
        for hour in 0..meter.hours() {
            reading.record(&meter, hour, Flows::net(divan::black_box(1.0), 0.0));
        }
        reading
    });
}

#[divan::bench]
fn bill_of_a_reading(bencher: divan::Bencher) {
    let (tariff, civil) = year();
    let Ok(meter) = tariff.meter(&civil) else {
        return;
    };
    let reading = meter.zero();
    bencher.bench(|| bill::price_reading(&tariff, &meter, &reading, Connection::Kept));
}
