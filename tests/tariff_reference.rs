//! Currencies against OpenJDK's table of ISO 4217 (`tests/reference/tariff_currencies.java`); bands over both clock changes against `tests/reference/tariff_bands.py`, an independent computation with pandas.
#![cfg(test)]

use std::collections::BTreeMap;
use std::path::Path;

use rust_decimal::prelude::ToPrimitive;
use winterledger::bill::{self, Connection};
use winterledger::calendar::HourAxis;
use winterledger::tariff::{Span, Tariff};
use winterledger::units::Currency;

/// Energy and cost by month from 0, or by year (month 0), and band.
type Sums = BTreeMap<(usize, String), (f64, f64)>;

/// The load that the script prices too.
fn load(i: usize) -> f64 {
    0.4 + (i * 7919 % 1000) as f64 / 500.0
}

/// The reference; hours that the zone sees in another year go with the month beside them, as a bill does it.
fn reference(tariff: &str, zone: &str, span: Span) -> Sums {
    let path = Path::new(env!("CARGO_MANIFEST_DIR")).join("tests/reference/tariff_bands.csv");
    let mut reader = csv::ReaderBuilder::new()
        .comment(Some(b'#'))
        .from_path(path)
        .unwrap();
    let mut sums = Sums::new();
    for row in reader.records().map(Result::unwrap) {
        if &row[0] != tariff || &row[1] != zone {
            continue;
        }
        let month0 = match &row[2] {
            "2023" => 0,
            "2025" => 11,
            _ => row[3].parse::<usize>().unwrap() - 1,
        };
        let sum = sums
            .entry((span.months(month0).start, row[4].to_owned()))
            .or_default();
        sum.0 += row[5].parse::<f64>().unwrap();
        sum.1 += row[6].parse::<f64>().unwrap();
    }
    sums
}

fn check(name: &str, zone: &str, span: Span) {
    let folder = Path::new(env!("CARGO_MANIFEST_DIR")).join("tariffs");
    let mut tariff = Tariff::read(&folder.join(format!("{name}.toml"))).unwrap();
    tariff.billing = span;
    let start = "2024-01-01T00:00:00Z".parse().unwrap();
    let civil = HourAxis { start, hours: 8784 }.civil(zone.parse().unwrap());
    let kwh: Vec<_> = (0..8784).map(load).collect();
    let bill = bill::price(&tariff, &civil, &kwh, Connection::Ended).unwrap();
    let expected = reference(name, zone, span);
    assert!(expected.len() >= 2);

    let energy = bill.lines.iter().filter(|line| line.unit == "kWh");
    let mut seen = 0;
    for line in energy {
        let key = (line.period.month0, line.what.clone());
        let (kwh, cost) = expected[&key];
        // Up to twelve reference months, each printed to 1e-6.
        let quantity = line.quantity.to_f64().unwrap();
        assert!((quantity - kwh).abs() < 1e-5, "{key:?}: {quantity} {kwh}");
        // A line is rounded to a cent.
        let amount = line.amount.to_f64().unwrap();
        assert!(
            (amount - cost).abs() <= 0.005 + 1e-5,
            "{key:?}: {amount} {cost}"
        );
        seen += 1;
    }
    assert_eq!(seen, expected.len());

    // The price signal gives the same cost, tax aside.
    let column = tariff.price_column(&civil, None).unwrap();
    let signal: f64 = column
        .iter()
        .zip(&kwh)
        .map(|(price, kwh)| price * kwh)
        .sum();
    let cost: f64 = expected.values().map(|(_, cost)| cost).sum();
    let factor = tariff.prices[0].tax.energy_factor();
    assert!((signal / factor - cost).abs() < 1e-4, "{signal} {cost}");
}

#[test]
fn cheap_nights_month_by_month_in_london() {
    check("cheap_night_electricity", "Europe/London", Span::Month);
}

#[test]
fn seasons_weekdays_and_holidays_month_by_month_in_paris() {
    check("seasonal_electricity", "Europe/Paris", Span::Month);
}

/// The hour that begins at 23:30 on the last of a month is billed with that month, where pandas splits it: the year is
/// compared.
#[test]
fn clocks_half_an_hour_off_over_the_year() {
    check("cheap_night_electricity", "Australia/Adelaide", Span::Year);
    check("seasonal_electricity", "America/St_Johns", Span::Year);
}

#[test]
fn currencies_and_their_digits_are_those_of_iso_4217() {
    let path = Path::new(env!("CARGO_MANIFEST_DIR")).join("tests/reference/tariff_currencies.csv");
    let mut reader = csv::Reader::from_path(path).unwrap();
    let mut known = 0;
    for row in reader.records().map(Result::unwrap) {
        let currency = Currency::parse(&row[0]).unwrap();
        assert_eq!(currency.minor_digits().to_string(), row[1], "{currency}");
        known += 1;
    }
    assert_eq!(known, 155);
    // Withdrawn, metals and testing codes are none that a household pays in.
    for code in ["DEM", "FRF", "XAU", "XTS", "gbp", ""] {
        assert!(Currency::parse(code).is_err(), "{code}");
    }
}
