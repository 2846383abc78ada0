//! The year of three homes against `tests/reference/year.py`, which steps them again in Python from the documentation.
//!
//! What the two share is said there: the inputs, and the parameters that the program fits.

use std::collections::BTreeMap;
use std::path::{Path, PathBuf};

use winterledger::bill::{self, Connection};
use winterledger::brief::Brief;
use winterledger::study::Account;
use winterledger::tariff::Flows;

use crate::table::Row;

const SOURCE: &str = "own reimplementation in Python on CoolProp 8.0.0 and psychrolib 2.5.0, \
    `tests/reference/year.py`; it takes the fitted parameters from the program";

fn reference() -> PathBuf {
    Path::new(env!("CARGO_MANIFEST_DIR")).join("tests/reference")
}

/// Rows of a CSV by the name of their columns.
fn lines(name: &str) -> Vec<BTreeMap<String, String>> {
    let mut reader = csv::Reader::from_path(reference().join(name)).unwrap();
    reader.deserialize().map(Result::unwrap).collect()
}

/// The three homes: heat within 0.1 %, electricity and fuel within 0.5 %, and the reimplementation's own kilowatt-hours, metered and
/// priced here, within half a cent of what it makes of them.
pub fn rows() -> Vec<Row> {
    let hours = lines("year_hours.csv");
    let homes = lines("year.csv");
    homes.iter().flat_map(|home| of(home, &hours)).collect()
}

fn of(line: &BTreeMap<String, String>, hours: &[BTreeMap<String, String>]) -> Vec<Row> {
    let home = line["home"].as_str();
    let case = Brief::read(&reference().join(format!("year/{home}.toml")))
        .unwrap()
        .case;
    let contender = &case.contenders[1];
    let sums = case.run_one(contender, None).unwrap().mean_sums();
    let label = &case.contenders[1].system.label;
    assert_eq!(label, "reimplemented");
    let of_kind = match home {
        "air" => "air source under a compensation line",
        "ground" => "ground source of one speed",
        _ => "machine and boiler by cost",
    };
    let parts = [
        (
            "Heat to rooms",
            "space_heat_kwh",
            sums.space_heat_kwh(),
            1e-3,
        ),
        (
            "Heat to hot water",
            "hot_water_kwh",
            sums.water_heat_kwh(),
            1e-3,
        ),
        (
            "Electricity",
            "electricity_kwh",
            sums.electricity_kwh(),
            5e-3,
        ),
        ("Fuel", "fuel_kwh", sums.fuel_kwh, 5e-3),
    ];
    let mut rows: Vec<_> = parts
        .iter()
        .map(|&(what, column, got, share)| (what, line[column].parse::<f64>().unwrap(), got, share))
        .filter(|&(_, expected, got, _)| expected != 0.0 || got != 0.0)
        .map(|(what, expected, got, share)| {
            Row::new(
                format!("{what} of a year, {of_kind}, kWh"),
                SOURCE,
                expected,
                got,
                share * expected,
                "heat 0.1 %, the rest 0.5 %: the map stands between the two, and single hours on the edge of a block",
            )
        })
        .collect();
    let priced = |account: &Account, fuel: &str| {
        let column = format!("{home}_{fuel}_kwh");
        let mut reading = account.meter.zero();
        for (hour, line) in hours.iter().enumerate() {
            let bought = Flows::net(line[&column].parse().unwrap(), 0.0);
            reading.record(&account.meter, hour, bought);
        }
        bill::price_reading(&account.tariff, &account.meter, &reading, Connection::Kept)
            .unwrap()
            .total()
            .to_string()
            .parse::<f64>()
            .unwrap()
    };
    let electricity = priced(&contender.electricity, "electricity");
    let fuel = contender
        .fuel
        .as_ref()
        .map_or(0.0, |fuel| priced(fuel, "fuel"));
    rows.push(Row::new(
        format!("Cost of the reimplementation's own kilowatt-hours, {of_kind}, GBP"),
        SOURCE,
        line["cost"].parse().unwrap(),
        electricity + fuel,
        0.005,
        "the same to the cent",
    ));
    rows
}
