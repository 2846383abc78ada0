//! Every file under `tests/data/tariff_bad/` is refused with exactly the message beside it: all problems at once, with
//! file, line, what was found, what is allowed and what to write.

use std::fs;
use std::path::Path;

use winterledger::bill::{self, Connection};
use winterledger::calendar::HourAxis;
use winterledger::tariff::Tariff;

fn folder() -> std::path::PathBuf {
    Path::new(env!("CARGO_MANIFEST_DIR")).join("tests/data/tariff_bad")
}

#[test]
fn every_bad_tariff_is_refused_with_its_message() {
    let mut wrong = String::new();
    let mut seen = 0;
    for entry in fs::read_dir(folder()).unwrap() {
        let path = entry.unwrap().path();
        if path.extension().is_none_or(|extension| extension != "toml") {
            continue;
        }
        seen += 1;
        let name = path.file_name().unwrap().to_str().unwrap();
        let text = fs::read_to_string(&path).unwrap();
        let message = match Tariff::from_text(name, &text, &folder()) {
            Ok(_) => "was not refused".to_owned(),
            // Where the file lies differs from machine to machine.
            Err(problems) => problems
                .to_string()
                .replace(&format!("{}/", folder().display()), ""),
        };
        let expected = fs::read_to_string(path.with_extension("txt")).unwrap_or_default();
        if message.trim_end() != expected.trim_end() {
            wrong.push_str(&format!("=== {name}\n{message}\n"));
        }
    }
    assert!(seen >= 18, "{seen} files");
    assert!(wrong.is_empty(), "{wrong}");
}

/// A price series shorter than the year of the run: named by the clock times that have no price.
#[test]
fn a_price_series_that_ends_early_is_refused_for_the_year() {
    let folder = tempfile::tempdir().unwrap();
    let rows: String = (0..48)
        .map(|i| format!("2023-01-{:02}T{:02}:00Z,80\n", 1 + i / 24, i % 24))
        .collect();
    fs::write(folder.path().join("p.csv"), format!("time,price\n{rows}")).unwrap();
    let text = "label = \"Short\"\nfuel = \"electricity\"\ncurrency = \"EUR\"\nrates_include_tax = true\n\
        [hourly]\nfile = \"p.csv\"\nunit = \"EUR/MWh\"\n";
    let tariff = Tariff::from_text("short.toml", text, folder.path()).unwrap();
    let zone = "Europe/Berlin".parse().unwrap();
    let civil = HourAxis::civil_year(2023, zone).unwrap().civil(zone);
    let load = vec![1.0; civil.len()];
    let problems = bill::price(&tariff, &civil, &load, Connection::Kept).unwrap_err();
    assert_eq!(
        problems.to_string(),
        "short.toml, hourly: no hourly price for 8712 of 8760 hours, from 2023-01-01 00:00 to 2023-12-31 23:00\n  \
         allowed: a price for every hour; the file covers 2023-01-01 00:00 UTC to 2023-01-03 00:00 UTC\n  \
         remedy:  give prices for the same year as the weather, or set every_year = true to use one year's prices for any"
    );
}
