//! The examples in `tariffs/` and the `tariff` command.
#![cfg(test)]

use std::fs;
use std::path::{Path, PathBuf};

use assert_cmd::Command;
use rust_decimal::Decimal;
use serde_json::Value;
use winterledger::bill::{self, Connection};
use winterledger::calendar::HourAxis;
use winterledger::document::Document;
use winterledger::tariff::{Flows, Tariff, TariffFields};

fn examples() -> Vec<PathBuf> {
    let folder = Path::new(env!("CARGO_MANIFEST_DIR")).join("tariffs");
    let files = fs::read_dir(folder)
        .unwrap()
        .map(|entry| entry.unwrap().path());
    let mut files: Vec<_> = files
        .filter(|path| {
            path.extension()
                .is_some_and(|extension| extension == "toml")
        })
        .collect();
    files.sort();
    files
}

fn example(name: &str) -> PathBuf {
    Path::new(env!("CARGO_MANIFEST_DIR")).join(format!("tariffs/{name}.toml"))
}

fn command(args: &[&str]) -> assert_cmd::assert::Assert {
    Command::cargo_bin("winterledger")
        .unwrap()
        .arg("tariff")
        .args(args)
        .assert()
}

fn json(args: &[&str]) -> Value {
    let args: Vec<_> = args.iter().copied().chain(["--format", "json"]).collect();
    let output = command(&args).success().get_output().stdout.clone();
    serde_json::from_slice(&output).unwrap()
}

/// The bill of an example: amounts and total.
fn bill(name: &str, extra: &[&str]) -> (Vec<f64>, f64) {
    let path = example(name);
    let args: Vec<_> = [path.to_str().unwrap()]
        .into_iter()
        .chain(extra.iter().copied())
        .collect();
    let answer = json(&args);
    let lines = answer["lines"].as_array().unwrap();
    let amounts = lines
        .iter()
        .map(|line| line["amount"].as_f64().unwrap())
        .collect();
    (amounts, answer["total"].as_f64().unwrap())
}

/// Every feature of the vocabulary is shown by an example, and every example prices a year.
#[test]
fn the_examples_read_and_together_show_everything() {
    let tariffs: Vec<_> = examples()
        .iter()
        .map(|path| Tariff::read(path).unwrap())
        .collect();
    assert!(tariffs.len() >= 14);
    let mut labels: Vec<_> = tariffs.iter().map(|tariff| tariff.label.as_str()).collect();
    labels.sort_unstable();
    labels.dedup();
    assert_eq!(labels.len(), tariffs.len(), "labels differ");
    let any = |holds: &dyn Fn(&Tariff) -> bool| tariffs.iter().any(holds);
    for code in ["GBP", "EUR", "USD"] {
        assert!(any(&|tariff| tariff.currency.code() == code), "{code}");
    }
    for fuel in winterledger::units::Fuel::ALL {
        assert!(any(&|tariff| tariff.fuel == fuel), "{fuel}");
    }
    let first = |holds: &dyn Fn(&winterledger::tariff::Prices) -> bool| {
        any(&|tariff| holds(&tariff.prices[0]))
    };
    assert!(first(&|prices| prices.bands.len() == 1) && first(&|prices| prices.bands.len() > 2));
    assert!(first(&|prices| prices.steps.is_some()) && first(&|prices| prices.hourly.is_some()));
    assert!(first(&|prices| prices.demand.is_some()) && first(&|prices| prices.export.is_some()));
    assert!(first(&|prices| prices.tax.included) && first(&|prices| prices.tax.added().is_some()));
    assert!(first(&|prices| prices.standing.is_none()));
    assert!(any(&|tariff| tariff.prices.len() > 1));
    assert!(any(
        &|tariff| tariff.metering == winterledger::tariff::Metering::HeatPump
    ));
    let unit = |symbol: &str| {
        first(&|prices| {
            let steps = prices
                .steps
                .iter()
                .flat_map(|steps| &steps.steps)
                .map(|step| step.rate);
            let mut rates = prices.bands.iter().map(|band| band.rate).chain(steps);
            rates.any(|rate| rate.unit.symbol == symbol)
        })
    };
    for symbol in ["kWh", "m³", "therm", "L", "t"] {
        assert!(unit(symbol), "{symbol}");
    }
    let zone = "Europe/London".parse().unwrap();
    let axis = HourAxis::civil_year(2019, zone).unwrap();
    for tariff in &tariffs {
        let civil = tariff.civil(&axis, zone);
        let column = tariff.price_column(&civil, Some(12_000.0)).unwrap();
        assert!(
            column.iter().all(|price| price.is_finite()),
            "{}",
            tariff.label
        );
    }
}

/// Every example says that it is invented.
#[test]
fn the_examples_say_that_they_are_invented() {
    for path in examples() {
        let text = fs::read_to_string(&path).unwrap();
        assert!(text.starts_with("# Invented example"), "{}", path.display());
    }
    let prices = fs::read_to_string(example("x").with_file_name("hourly_prices.csv")).unwrap();
    assert!(prices.starts_with("# Invented hourly electricity prices"));
}

/// The published bill of `tests/bill.rs`, from files and through the command: 874.91 + 766.28 = 1641.19.
#[test]
fn the_regulator_s_bill_through_the_command() {
    let folder = tempfile::tempdir().unwrap();
    let total = |fuel: &str, rate: &str, standing: &str, kwh: &str| {
        let path = folder.path().join(format!("{fuel}.toml"));
        let basis = if fuel == "gas" {
            "calorific_basis = \"gross\"\n"
        } else {
            ""
        };
        let text = format!(
            "label = \"Cap\"\nfuel = \"{fuel}\"\ncurrency = \"GBP\"\n{basis}rates_include_tax = true\n\
             time_zone = \"Europe/London\"\nstanding = \"{standing}\"\n[[band]]\nrate = \"{rate}\"\n"
        );
        fs::write(&path, text).unwrap();
        let answer = json(&[path.to_str().unwrap(), "--kwh", kwh]);
        assert!(
            answer.get("tax").is_none(),
            "rates that hold the tax have no tax line"
        );
        answer["total"].as_f64().unwrap()
    };
    assert_eq!(
        total("electricity", "24.67 p/kWh", "57.21 p/day", "2700"),
        874.91
    );
    assert_eq!(total("gas", "5.74 p/kWh", "29.09 p/day", "11500"), 766.28);
}

/// By hand, 12 000 gross kWh in 2025.
/// Gas: 12 000 / (0.985 × 35.2 / 3.6) = 1245.962 m³ × 1.31 = 1632.21; 365 × 0.82 = 299.30.
/// Oil: 12 000 / 10.31 = 1163.919 L × 0.884 = 1028.90; 19 % = 195.49. Tank gas: 12 000 / 7 × 0.615 = 1054.29; rent 78.
/// Pellets: 12 000 × 0.92 / 4800 = 2.3 t × 329 = 756.70, the net value brought to gross.
#[test]
fn fuels_by_volume_and_mass() {
    assert_eq!(bill("gas_by_volume", &[]), (vec![1632.21, 299.30], 1931.51));
    assert_eq!(bill("heating_oil", &[]), (vec![1028.90, 195.49], 1224.39));
    assert_eq!(bill("bottled_gas", &[]), (vec![1054.29, 78.00], 1132.29));
    assert_eq!(bill("pellets", &[]), (vec![756.70], 756.70));
}

/// By hand: January 2025 has 744 of 8760 hours; 12 000 kWh × 744/8760 / 29.30711 = 34.776 therm × 0.94 = 32.69, 14.00
/// standing, 3 % of 46.69 = 1.40. At ten times the load 347.76 therm: 60 × 0.94 = 56.40, 287.76 × 1.08 = 310.78.
#[test]
fn gas_by_the_therm_in_steps() {
    let (amounts, _) = bill("gas_by_therm", &[]);
    assert_eq!(amounts[..3], [32.69, 14.00, 1.40]);
    let (amounts, _) = bill("gas_by_therm", &["--kwh", "120000"]);
    assert_eq!(amounts[..2], [56.40, 310.78]);
}

/// Trap: net for gross. 12 000 gross kWh of gas are 10 812 net ones (methane, 0.901); at 6 p each the bill is 648.72,
/// not 720.
#[test]
fn a_price_per_net_kilowatt_hour_is_not_one_per_gross() {
    let energy = |basis: &str| {
        let text = format!(
            "label = \"A\"\nfuel = \"gas\"\ncurrency = \"GBP\"\ncalorific_basis = \"{basis}\"\n\
             rates_include_tax = true\n[[band]]\nrate = \"6 p/kWh\"\n"
        );
        let tariff = Tariff::from_text("a.toml", &text, "".as_ref()).unwrap();
        let civil = HourAxis::civil_year(2023, chrono_tz::Tz::UTC)
            .unwrap()
            .civil(chrono_tz::Tz::UTC);
        let load = vec![12_000.0 / 8760.0; 8760];
        let kept = winterledger::bill::Connection::Kept;
        winterledger::bill::price(&tariff, &civil, &load, kept)
            .unwrap()
            .total()
            .to_string()
    };
    assert_eq!(
        (energy("gross").as_str(), energy("net").as_str()),
        ("720.00", "648.72")
    );
}

/// Tiers by hand, from one day of load: 3 January 2024, 48 half hours of 25 kWh are 1200 kWh: 500 × 0.119 = 59.50,
/// 500 × 0.146 = 73.00, 200 × 0.182 = 36.40; one of 31 days shortens the steps to 500/31 and 1000/31 kWh, so that all
/// but 32.26 kWh are in the last: 16.129 × 0.119 = 1.92, 16.129 × 0.146 = 2.35, 1167.742 × 0.182 = 212.53.
#[test]
fn a_load_of_half_hours_is_summed_and_a_part_month_has_part_steps() {
    let folder = tempfile::tempdir().unwrap();
    let path = folder.path().join("load.csv");
    let rows: String = (0..48)
        .map(|i| format!("2024-01-03 {:02}:{:02},25\n", i / 2, i % 2 * 30))
        .collect();
    fs::write(&path, format!("time,kWh\n{rows}")).unwrap();
    let load = path.to_str().unwrap();
    let answer = json(&[
        example("stepped_electricity").to_str().unwrap(),
        "--load",
        load,
    ]);
    assert_eq!(answer["load"]["kwh"], 1200.0);
    assert_eq!(answer["load"]["hours"], 24);
    let (amounts, _) = bill("stepped_electricity", &["--load", load]);
    assert_eq!(amounts[..3], [1.92, 2.35, 212.53]);
}

/// Doubling every price of a kilowatt-hour doubles the energy of the bill and of the signal, hourly prices included, also
/// for a reading that was taken before; the standing charge stays.
#[test]
fn a_changed_price_level_reprices_readings_taken_before() {
    for path in examples() {
        let tariff = Tariff::read(&path).unwrap();
        let civil = HourAxis::civil_year(2023, chrono_tz::Tz::UTC)
            .unwrap()
            .civil(chrono_tz::Tz::UTC);
        let meter = tariff.meter(&civil).unwrap();
        let mut reading = meter.zero();
        for hour in 0..civil.len() {
            reading.record(&meter, hour, Flows::net(0.5 + (hour % 7) as f64 / 5.0, 0.0));
        }
        let double = tariff.with_energy_times(2.0);
        let price = |tariff: &Tariff| {
            bill::price_reading(tariff, &meter, &reading, Connection::Kept).unwrap()
        };
        let (once, twice) = (price(&tariff), price(&double));
        // Each line is rounded to a cent.
        let off = (twice.energy() - once.energy() * Decimal::TWO).abs();
        assert!(
            off <= Decimal::new(once.lines.len() as i64, 2),
            "{} {off}",
            tariff.label
        );
        assert_eq!(once.standing(), twice.standing());
        let signal = |tariff: &Tariff| meter.price_column(tariff, None);
        for (once, twice) in signal(&tariff).iter().zip(signal(&double)) {
            assert!((2.0 * once - twice).abs() < 1e-9, "{}", tariff.label);
        }
        let afresh = double.meter(&civil).unwrap();
        assert_eq!(afresh, meter, "a meter does not depend on the price level");
    }
}

/// Trap: stamps at the end of the hour. The same file read both ways: same energy, another cost.
#[test]
fn stamps_at_the_end_of_the_hour_move_the_cost() {
    let folder = tempfile::tempdir().unwrap();
    let path = folder.path().join("load.csv");
    // 10 kWh in the hour that ends at 05:00 UTC in January, the last whole hour of a night until 05:30.
    let rows: String = (0..24)
        .map(|i| format!("2024-01-03 {i:02}:00,{}\n", if i == 5 { 10 } else { 0 }))
        .collect();
    fs::write(&path, format!("time,kWh\n{rows}")).unwrap();
    let load = path.to_str().unwrap();
    let tariff = example("cheap_night_electricity");
    let energy = |stamps| {
        let answer = json(&[tariff.to_str().unwrap(), "--load", load, "--stamps", stamps]);
        assert_eq!(answer["load"]["kwh"], 10.0);
        answer["energy"].as_f64().unwrap()
    };
    // 04:00–05:00 all night: 10 × 0.094; 05:00–06:00 half and half: 5 × 0.094 + 5 × 0.298.
    assert_eq!((energy("ending"), energy("beginning")), (0.94, 1.96));
}

#[test]
fn json_has_the_promised_shape() {
    let answer = json(&[example("seasonal_electricity").to_str().unwrap()]);
    for name in ["total", "energy", "standing", "tax"] {
        assert!(answer[name].is_number(), "{name}");
    }
    assert_eq!(answer["currency"], "EUR");
    let monthly = answer["monthly"].as_array().unwrap();
    assert_eq!(monthly.len(), 12);
    let sum: f64 = monthly
        .iter()
        .map(|month| month["cost"].as_f64().unwrap())
        .sum();
    assert!((sum - answer["total"].as_f64().unwrap()).abs() < 1e-6);
    for name in ["what", "quantity", "unit", "rate", "amount"] {
        assert!(answer["lines"][0].get(name).is_some(), "{name}");
    }
}

#[test]
fn text_shows_the_clock_and_the_bill() {
    let output = command(&[example("cheap_night_electricity").to_str().unwrap()]).success();
    let text = String::from_utf8(output.get_output().stdout.clone()).unwrap();
    let squeezed = text.split_whitespace().collect::<Vec<_>>().join(" ");
    for part in [
        "Quiet Nights: electricity in GBP, clock of Europe/London",
        "Standing charge 58.70 p/day",
        "every day 00:00 00:30 day 29.80 p/kWh 00:30 05:30 night 9.40 p/kWh",
        "Bill of 3000 kWh, the same every hour, 2025-01-01 to 2025-12-31",
        "night 625 kWh 9.40 p/kWh 58.75",
        "standing charge 365 days 58.70 p/day 214.26",
        "to pay 980.76",
    ] {
        assert!(squeezed.contains(part), "{part}\n{text}");
    }
}

#[test]
fn wrong_input_has_its_exit_status_and_prints_nothing() {
    let bad = Path::new(env!("CARGO_MANIFEST_DIR")).join("tests/data/tariff_bad/hole.toml");
    let refused = command(&[bad.to_str().unwrap()]).code(1);
    assert!(refused.get_output().stdout.is_empty());
    let said = String::from_utf8_lossy(&refused.get_output().stderr).into_owned();
    assert!(said.contains("no band covers 07:00–07:30"), "{said}");
    let good = example("flat_gas");
    let good = good.to_str().unwrap();
    command(&["no/such.toml"]).code(1);
    command(&[good, "--time-zone", "Mars"]).code(1);
    command(&[good, "--load", "no/such.csv"]).code(1);
    command(&[good, "--kwh=-5"]).code(1);
    command(&[good, "--kwh", "5", "--load", "x.csv"]).code(2);
    command(&[]).code(2);
}

/// A negative hour would lower the bill unseen.
#[test]
fn a_negative_hour_is_named_by_its_clock_time() {
    let folder = tempfile::tempdir().unwrap();
    let path = folder.path().join("load.csv");
    fs::write(&path, "time,kWh\n2024-01-03 00:00,1\n2024-01-03 01:00,-1\n").unwrap();
    let refused = command(&[
        example("flat_gas").to_str().unwrap(),
        "--load",
        path.to_str().unwrap(),
    ])
    .code(1);
    let said = String::from_utf8_lossy(&refused.get_output().stderr).into_owned();
    assert!(said.contains("-1 kWh at 2024-01-03 01:00"), "{said}");
}

/// The schema is made of the structs that read: it knows the fields of every example.
#[test]
fn the_schema_describes_what_is_read() {
    let schema = serde_json::to_value(Document::<TariffFields>::schema()).unwrap();
    for field in [
        "label",
        "band",
        "step",
        "hourly",
        "later",
        "standing",
        "calorific_basis",
    ] {
        assert!(schema["properties"].get(field).is_some(), "{field}");
    }
}
