//! Bands over clock changes, and what a year of 1 kWh an hour costs, against pandas (`tests/reference/tariff_bands.py`).

use std::collections::BTreeMap;
use std::path::Path;

use rust_decimal::prelude::ToPrimitive;
use winterledger::bill::{self, Connection};
use winterledger::calendar::HourAxis;
use winterledger::tariff::{Span, Tariff};

use crate::table::{Row, Worst, number, reference};

/// The load that the script prices too.
fn load(i: usize) -> f64 {
    0.4 + (i * 7919 % 1000) as f64 / 500.0
}

pub fn rows() -> Vec<Row> {
    let mut rows = Vec::new();
    // The hour that begins at 23:30 on the last of a month is billed with that month, where pandas splits it: where clocks are half
    // an hour off the year is compared.
    for (name, zone, span) in [
        ("cheap_night_electricity", "Europe/London", Span::Month),
        ("seasonal_electricity", "Europe/Paris", Span::Month),
        ("cheap_night_electricity", "Australia/Adelaide", Span::Year),
        ("seasonal_electricity", "America/St_Johns", Span::Year),
    ] {
        let mut expected: BTreeMap<(usize, String), (f64, f64)> = BTreeMap::new();
        let own = reference("tariff_bands.csv");
        for row in own.iter().filter(|row| row[0] == name && row[1] == zone) {
            // Hours that the zone sees in another year go with the month beside them, as a bill does it.
            let month0 = match row[2].as_str() {
                "2023" => 0,
                "2025" => 11,
                _ => row[3].parse::<usize>().unwrap() - 1,
            };
            let key = (span.months(month0).start, row[4].clone());
            let sum = expected.entry(key).or_default();
            sum.0 += number(&row[5]);
            sum.1 += number(&row[6]);
        }
        let folder = Path::new(env!("CARGO_MANIFEST_DIR")).join("tariffs");
        let mut tariff = Tariff::read(&folder.join(format!("{name}.toml"))).unwrap();
        tariff.billing = span;
        let start = "2024-01-01T00:00:00Z".parse().unwrap();
        let civil = HourAxis { start, hours: 8784 }.civil(zone.parse().unwrap());
        let kwh: Vec<_> = (0..8784).map(load).collect();
        let bill = bill::price(&tariff, &civil, &kwh, Connection::Ended).unwrap();
        let (mut quantity, mut amount) = (Worst::absolute(1e-5), Worst::absolute(0.005 + 1e-5));
        for line in bill.lines.iter().filter(|line| line.unit == "kWh") {
            let key = (line.period.month0, line.what.clone());
            let (kwh, cost) = expected.get(&key).copied().unwrap_or((f64::NAN, f64::NAN));
            quantity.see(kwh, line.quantity.to_f64().unwrap());
            amount.see(cost, line.amount.to_f64().unwrap());
        }
        let signal: f64 = tariff
            .price_column(&civil, None)
            .unwrap()
            .iter()
            .zip(&kwh)
            .map(|(price, kwh)| price * kwh)
            .sum();
        let cost: f64 = expected.values().map(|(_, cost)| cost).sum();
        let what = format!("{name} in {zone}");
        let source = "pandas 3.1.1 (tests/reference/tariff_bands.py)";
        let lines = expected.len();
        rows.push(quantity.row(
            &format!("{what}: kWh by band"),
            source,
            lines,
            "twelve months printed to 1e-6",
        ));
        rows.push(amount.row(
            &format!("{what}: cost by band"),
            source,
            lines,
            "a line is rounded to a cent",
        ));
        rows.push(Row::new(
            format!("{what}: cost of the year by the price signal, tax aside"),
            source,
            cost,
            signal / tariff.prices[0].tax.energy_factor(),
            1e-4,
            "printed digits",
        ));
    }
    rows
}
