//! The year of three homes against `tests/reference/year.py`, which steps them again in Python from the documentation, on CoolProp 8.0.0
//! and psychrolib 2.5.0. What the two share is said there: inputs, and the parameters that the program fits.

#![cfg(test)] // so that the lints know the helpers below for test code

use std::path::{Path, PathBuf};

use winterledger::bill::{self, Connection};
use winterledger::brief::Brief;
use winterledger::study::{Account, Contender, Outcome};
use winterledger::tariff::Flows;

fn reference() -> PathBuf {
    Path::new(env!("CARGO_MANIFEST_DIR")).join("tests/reference")
}

/// Rows of a CSV by the name of their columns.
fn rows(name: &str) -> Vec<std::collections::BTreeMap<String, String>> {
    let mut reader = csv::Reader::from_path(reference().join(name)).unwrap();
    reader.deserialize().map(Result::unwrap).collect()
}

/// The home's heat pump and its year.
fn year(home: &str) -> (Contender, Outcome) {
    let brief = Brief::read(&reference().join(format!("year/{home}.toml"))).unwrap();
    let outcome = brief.case.run().unwrap().remove(1);
    (brief.case.contenders[1].clone(), outcome)
}

/// Relative difference in percent.
fn percent(got: f64, expected: f64) -> f64 {
    100.0 * (got / expected - 1.0)
}

/// The bounds are the issue's own: heat 0.1 %, electricity and fuel 0.5 %. What is left between the two is the map (0.05 % of COP on
/// these machines), hours at which a block of hot water falls into the next one, and the ends of the iterations.
#[test]
fn three_years_agree_with_their_reimplementation() {
    for row in rows("year.csv") {
        let home = row["home"].as_str();
        let (_, outcome) = year(home);
        let sums = outcome.years[0].sums;
        let expected = |column: &str| row[column].parse::<f64>().unwrap();
        let pairs = [
            ("space_heat_kwh", sums.space_heat_kwh(), 0.1),
            ("hot_water_kwh", sums.water_heat_kwh(), 0.1),
            ("electricity_kwh", sums.electricity_kwh(), 0.5),
            ("fuel_kwh", sums.fuel_kwh, 0.5),
        ];
        for (column, got, bound) in pairs {
            let expected = expected(column);
            if expected == 0.0 {
                assert_eq!(got, 0.0, "{home} {column}");
                continue;
            }
            let off = percent(got, expected);
            println!("{home:8} {column:16} {got:10.2} {expected:10.2} {off:+.4} %");
            assert!(
                off.abs() < bound,
                "{home} {column}: {got} {expected} {off} %"
            );
        }
    }
}

/// The reimplementation's own kilowatt-hours, metered and priced here, cost what it makes of them, to the cent.
#[test]
fn the_same_kilowatt_hours_cost_the_same_to_the_cent() {
    let hours = rows("year_hours.csv");
    for row in rows("year.csv") {
        let home = row["home"].as_str();
        let (contender, _) = year(home);
        let priced = |account: &Account, fuel: &str| {
            let column = format!("{home}_{fuel}_kwh");
            let mut reading = account.meter.zero();
            for (hour, kwh) in hours.iter().enumerate() {
                let kwh = kwh[&column].parse().unwrap();
                reading.record(&account.meter, hour, Flows::net(kwh, 0.0));
            }
            bill::price_reading(&account.tariff, &account.meter, &reading, Connection::Kept)
                .unwrap()
                .total()
        };
        let mut cost = priced(&contender.electricity, "electricity");
        if let Some(fuel) = &contender.fuel {
            cost += priced(fuel, "fuel");
        }
        let expected: f64 = row["cost"].parse().unwrap();
        let cost: f64 = cost.to_string().parse().unwrap();
        assert!((cost - expected).abs() < 0.005, "{home}: {cost} {expected}");
    }
}
