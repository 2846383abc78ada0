//! Every file under `tests/data/tariff_bad/` is refused with exactly the message beside it: all problems at once, with
//! file, line, what was found, what is allowed and what to write.
#![cfg(test)]

use std::fs;
use std::path::Path;

use proptest::prelude::*;
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

/// The examples, for breaking.
fn texts() -> Vec<String> {
    let folder = Path::new(env!("CARGO_MANIFEST_DIR")).join("tariffs");
    let files = fs::read_dir(folder)
        .unwrap()
        .map(|entry| entry.unwrap().path());
    let tariffs = files.filter(|path| {
        path.extension()
            .is_some_and(|extension| extension == "toml")
    });
    tariffs
        .map(|path| fs::read_to_string(path).unwrap())
        .collect()
}

proptest! {
    /// An example with a line lost, doubled or a piece of it replaced is read or refused, and never panics.
    #[test]
    fn a_broken_example_is_read_or_refused(which in 0usize..64, line in 0usize..40, at in 0usize..40, junk in "[-0-9a-zé:/.\"\\[\\]= ]{0,6}", kind in 0..3) {
        let texts = texts();
        let text = &texts[which % texts.len()];
        let mut lines: Vec<String> = text.lines().map(str::to_owned).collect();
        let line = line % lines.len();
        match kind {
            0 => { lines.remove(line); }
            1 => { let copy = lines[line].clone(); lines.insert(line, copy); }
            _ => {
                let mut letters: Vec<char> = lines[line].chars().collect();
                let at = at.min(letters.len());
                let end = (at + 3).min(letters.len());
                letters.splice(at..end, junk.chars());
                lines[line] = letters.into_iter().collect();
            }
        }
        match Tariff::from_text("x.toml", &lines.join("\n"), Path::new("nowhere")) {
            Ok(tariff) => {
                let civil = HourAxis::civil_year(2024, chrono_tz::Tz::UTC).unwrap().civil(chrono_tz::Tz::UTC);
                if let Ok(bill) = bill::price(&tariff, &civil, &vec![1.0; civil.len()], Connection::Kept) {
                    let months: rust_decimal::Decimal = bill.months.iter().map(|month| month.amount).sum();
                    prop_assert_eq!(months, bill.total());
                }
            }
            Err(problems) => prop_assert!(!problems.is_empty()),
        }
    }
}
