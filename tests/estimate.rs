//! The main job through the real binary: on the demonstration, on every brief that is shipped, and on an open weather file.
#![cfg(test)]

use std::collections::HashMap;
use std::fs;
use std::path::{Path, PathBuf};

use assert_cmd::Command;
use serde_json::Value;

fn root() -> &'static Path {
    Path::new(env!("CARGO_MANIFEST_DIR"))
}

fn winterledger(arguments: &[&str]) -> std::process::Output {
    Command::cargo_bin("winterledger")
        .unwrap()
        .current_dir(root())
        .args(arguments)
        .output()
        .unwrap()
}

fn json(arguments: &[&str]) -> Value {
    let output = winterledger(arguments);
    assert!(
        output.status.success(),
        "{}",
        String::from_utf8_lossy(&output.stderr)
    );
    serde_json::from_slice(&output.stdout).unwrap()
}

fn number(value: &Value, field: &str) -> f64 {
    value[field]
        .as_f64()
        .unwrap_or_else(|| panic!("{field} is missing in {value}"))
}

fn system<'a>(result: &'a Value, label: &str) -> &'a Value {
    let systems = result["systems"].as_array().unwrap();
    systems
        .iter()
        .find(|system| system["label"] == label)
        .unwrap()
}

/// A ledger as columns; a blank is not a number.
fn ledger(path: &Path) -> HashMap<String, Vec<f64>> {
    let mut reader = csv::Reader::from_path(path).unwrap();
    let names: Vec<String> = reader
        .headers()
        .unwrap()
        .iter()
        .map(str::to_owned)
        .collect();
    let mut columns: HashMap<String, Vec<f64>> = HashMap::new();
    for record in reader.records() {
        for (name, field) in names.iter().zip(record.unwrap().iter()) {
            columns
                .entry(name.clone())
                .or_default()
                .push(field.parse().unwrap_or(f64::NAN));
        }
    }
    columns
}

fn briefs() -> Vec<PathBuf> {
    let mut briefs: Vec<_> = ["briefs", "tests/briefs"]
        .iter()
        .flat_map(|folder| fs::read_dir(root().join(folder)).unwrap())
        .map(|entry| entry.unwrap().path())
        .filter(|path| {
            path.extension()
                .is_some_and(|extension| extension == "toml")
        })
        .collect();
    briefs.sort();
    briefs
}

/// Every brief that is shipped runs, and what it prints is looked at when it changes.
#[test]
fn every_shipped_brief_runs() {
    for path in briefs() {
        let inside = path.strip_prefix(root()).unwrap().to_str().unwrap();
        let output = winterledger(&["estimate", inside]);
        assert!(
            output.status.success(),
            "{inside}: {}",
            String::from_utf8_lossy(&output.stderr)
        );
        let name = inside.replace('/', "__");
        insta::assert_snapshot!(
            name.trim_end_matches(".toml"),
            String::from_utf8(output.stdout).unwrap()
        );
    }
}

/// The names that programs outside rely on, and what must be absent where there is no such thing.
#[test]
fn the_json_keeps_its_promises() {
    let result = json(&["estimate", "--format", "json"]);
    for field in [
        "file",
        "hours",
        "years",
        "mean_c",
        "min_c",
        "repaired_hours",
    ] {
        assert!(!result["weather"][field].is_null(), "weather.{field}");
    }
    for field in [
        "heat_loss_w_per_k",
        "design_outdoor_c",
        "design_heat_load_kw",
    ] {
        number(&result["home"], field);
    }
    for field in [
        "break_even",
        "lifetime",
        "currency",
        "assumptions",
        "findings",
    ] {
        assert!(!result[field].is_null(), "{field}");
    }
    for system in result["systems"].as_array().unwrap() {
        for field in [
            "space_heat_kwh",
            "hot_water_kwh",
            "delivered_kwh",
            "electricity_kwh",
            "peak_electric_kw",
            "hours_backup",
            "hours_short",
            "min_indoor_c",
            "cost",
            "cost_energy",
            "cost_standing",
            "carbon_kg",
        ] {
            number(system, field);
        }
        let months = system["monthly"].as_array().unwrap();
        assert_eq!(months.len(), 12);
        for (field, whole) in [("electricity_kwh", "electricity_kwh"), ("cost", "cost")] {
            let sum: f64 = months.iter().map(|month| number(month, field)).sum();
            // Sums of the same numbers in another order.
            assert!((sum - number(system, whole)).abs() < 1e-6, "{field}: {sum}");
        }
        let heat: f64 = months.iter().map(|month| number(month, "heat_kwh")).sum();
        assert!(
            (heat - number(system, "space_heat_kwh") - number(system, "hot_water_kwh")).abs()
                < 1e-6
        );
        let parts = number(system, "cost_energy")
            + number(system, "cost_standing")
            + system["cost_tax"].as_f64().unwrap_or(0.0);
        assert!((parts - number(system, "cost")).abs() < 1e-6);
        let years = system["by_year"].as_array().unwrap();
        assert!((number(&years[0], "cost") - number(system, "cost")).abs() < 1e-6);
        let today = system["today"].as_bool().unwrap();
        assert_eq!(system.get("saving").is_none(), today);
        let machine = system["kind"] != "gas-boiler";
        assert_eq!(system.get("fuel_kwh").is_none(), machine);
        assert_eq!(system.get("spf_h4").is_some(), machine);
        if machine {
            let boundaries =
                ["spf_h1", "spf_h2", "spf_h3", "spf_h4"].map(|field| number(system, field));
            assert!(
                boundaries.windows(2).all(|pair| pair[0] >= pair[1]),
                "{boundaries:?}"
            );
        }
    }
}

/// The ledger is the whole account: heat in is heat out and stored, electricity is its components, money is kilowatt-hours
/// times prices, and the sums are the result.
#[test]
fn the_ledgers_close_and_add_up_to_the_result() {
    let folder = tempfile::tempdir().unwrap();
    let out = folder.path().join("out");
    let output = winterledger(&[
        "estimate",
        "--out",
        out.to_str().unwrap(),
        "--format",
        "json",
    ]);
    assert!(output.status.success());
    let result: Value = serde_json::from_slice(&output.stdout).unwrap();
    let written: Value =
        serde_json::from_slice(&fs::read(out.join("result.json")).unwrap()).unwrap();
    assert_eq!(result, written);
    let mut files: Vec<_> = fs::read_dir(&out)
        .unwrap()
        .map(|entry| entry.unwrap().path())
        .collect();
    files.retain(|path| path.extension().is_some_and(|extension| extension == "csv"));
    files.sort();
    let systems = result["systems"].as_array().unwrap();
    assert_eq!(files.len(), systems.len());
    for (path, system) in files.iter().zip(systems) {
        let columns = ledger(path);
        let at = |name: &str, hour: usize| columns[name][hour];
        // Every column is written to 6 digits: a sum of a dozen of them is right to 12 × 0.0000005.
        const ROUNDING: f64 = 6e-6;
        let hours = columns["outdoor_c"].len();
        for hour in 0..hours {
            let rooms = at("machine_space_kwh", hour)
                + at("heater_space_kwh", hour)
                + at("backup_kwh", hour)
                + at("gains_kwh", hour)
                - at("fabric_loss_kwh", hour)
                - at("aired_kwh", hour)
                - at("room_stored_kwh", hour);
            assert!(rooms.abs() < ROUNDING, "hour {hour}: rooms {rooms}");
            let water = at("machine_water_kwh", hour)
                + at("heater_water_kwh", hour)
                + at("immersion_kwh", hour)
                - at("water_drawn_kwh", hour)
                - at("store_loss_kwh", hour)
                - at("store_stored_kwh", hour);
            assert!(water.abs() < ROUNDING, "hour {hour}: water {water}");
            let fuel = at("fuel_kwh", hour) - at("fuel_loss_kwh", hour);
            if at("fuel_kwh", hour) > 0.0 {
                assert!(
                    (fuel - at("heater_space_kwh", hour) - at("heater_water_kwh", hour)).abs()
                        < ROUNDING
                );
            }
            let duties = at("machine_space_electricity_kwh", hour)
                + at("machine_water_electricity_kwh", hour);
            let components = at("compressor_kwh", hour)
                + at("source_side_kwh", hour)
                + at("defrost_kwh", hour)
                + at("allowance_kwh", hour);
            assert!(
                (duties - components).abs() < ROUNDING,
                "hour {hour}: {duties} {components}"
            );
            // A machine cannot give more than it takes from source and mains.
            let machine = at("machine_space_kwh", hour) + at("machine_water_kwh", hour);
            assert!(
                machine <= at("extracted_kwh", hour) + components + ROUNDING,
                "hour {hour}"
            );
            assert!(at("running_hours", hour) <= 1.0 + 1e-9);
        }
        let sum = |names: &[&str]| -> f64 { names.iter().flat_map(|name| &columns[*name]).sum() };
        let electricity = sum(&[
            "compressor_kwh",
            "source_side_kwh",
            "defrost_kwh",
            "allowance_kwh",
            "idle_kwh",
            "circulation_kwh",
            "backup_kwh",
            "immersion_kwh",
            "heater_electricity_kwh",
        ]);
        // 9 columns of 8760 hours, each right to 0.0000005, all off to the same side: 0.04. A bill's 12 lines a meter add 0.06 each.
        const YEAR_ROUNDING: f64 = 0.04;
        const BILL_ROUNDING: f64 = 0.13;
        assert!((electricity - number(system, "electricity_kwh")).abs() < YEAR_ROUNDING);
        assert!(
            (sum(&["energy_cost"]) - number(system, "cost_energy")).abs() < BILL_ROUNDING,
            "rates hold the tax in the demonstration"
        );
        assert!((sum(&["carbon_kg"]) - number(system, "carbon_kg")).abs() < YEAR_ROUNDING);
    }
}

/// Hot water and rooms have their own flow and COP in one hour (trap: one flow for both takes 2.31 instead of 2.04 kWh).
#[test]
fn two_duties_in_one_hour_keep_their_own_cop() {
    let folder = tempfile::tempdir().unwrap();
    let out = folder.path().join("out");
    assert!(
        winterledger(&["estimate", "--out", out.to_str().unwrap()])
            .status
            .success()
    );
    let columns = ledger(&out.join("ledger-3-air-source-larger-radiators.csv"));
    let both: Vec<usize> = (0..8760)
        .filter(|&hour| {
            columns["machine_water_kwh"][hour] > 1.0 && columns["machine_space_kwh"][hour] > 0.5
        })
        .collect();
    assert!(
        both.len() > 100,
        "only {} hours with both duties",
        both.len()
    );
    for hour in both {
        let [space, water] = ["space", "water"].map(|duty| {
            let heat = columns[&format!("machine_{duty}_kwh")][hour];
            let electricity = columns[&format!("machine_{duty}_electricity_kwh")][hour];
            (
                columns[&format!("{duty}_flow_c")][hour],
                columns[&format!("{duty}_cop")][hour],
                heat / electricity,
            )
        });
        for (_, cop, quotient) in [space, water] {
            // Quotient of figures written to 6 digits.
            assert!((cop / quotient - 1.0).abs() < 1e-4);
        }
        if water.0 > space.0 + 8.0 {
            assert!(water.1 < space.1, "hour {hour}: {space:?} {water:?}");
        }
    }
    // The store is heated in blocks, not evenly over the day: most hours have none.
    let hours_of_water = columns["machine_water_kwh"]
        .iter()
        .filter(|&&kwh| kwh > 0.0)
        .count();
    assert!(hours_of_water < 8760 / 4, "{hours_of_water}");
}

/// Greensboro TMY3 from PyPI pvlib (tests/data/README.md). Hourly degree-days at 15.5 °C are 1694 K·d (computed with
/// pandas, printed to the day); a home without storage takes coefficient × degree-hours.
#[test]
fn yearly_heat_is_coefficient_times_degree_hours_on_an_open_file() {
    let result = json(&[
        "estimate",
        "tests/briefs/greensboro.toml",
        "--format",
        "json",
    ]);
    let heat_kwh = number(system(&result, "Gas boiler"), "space_heat_kwh");
    let degree_days = heat_kwh / 0.212 / 24.0;
    assert!((degree_days - 1694.0).abs() < 0.5, "{degree_days}");
    assert!((number(&result["weather"], "mean_c") - 14.42).abs() < 0.005);
    assert!((number(&result["weather"], "min_c") + 16.7).abs() < 0.05);
    assert!((number(&result["home"], "design_outdoor_c") + 11.1).abs() < 0.05);
}

/// Stamps that mark the end of the hour, read as its beginning: the heat is the same, the cost under cheap hours is not.
#[test]
fn stamps_shifted_by_an_hour_move_the_cost_but_not_the_heat() {
    let folder = tempfile::tempdir().unwrap();
    let brief = fs::read_to_string(root().join("briefs/terrace.toml")).unwrap();
    let absolute = brief
        .replace("\"../", &format!("\"{}/", root().display()))
        .replace(
            "\"machines/",
            &format!("\"{}/briefs/machines/", root().display()),
        )
        .replace("flat_electricity", "cheap_night_electricity");
    let run = |name: &str, stamps: &str| {
        let path = folder.path().join(name);
        let weather = format!("[weather]\nstamps = \"{stamps}\"");
        fs::write(&path, absolute.replace("[weather]", &weather)).unwrap();
        json(&["estimate", path.to_str().unwrap(), "--format", "json"])
    };
    let (right, shifted) = (
        run("right.toml", "beginning"),
        run("shifted.toml", "ending"),
    );
    let [a, b] = [&right, &shifted].map(|result| system(result, "Air source, same radiators"));
    // The clock of hot water and sun moves against the weather, nothing else.
    assert!((number(a, "space_heat_kwh") / number(b, "space_heat_kwh") - 1.0).abs() < 0.002);
    assert!((number(a, "cost_energy") - number(b, "cost_energy")).abs() > 1.0);
}

/// Whatever was there stays there, unless it is said otherwise.
#[test]
fn nothing_is_overwritten_unasked() {
    let folder = tempfile::tempdir().unwrap();
    fs::write(folder.path().join("result.json"), "mine").unwrap();
    let out = folder.path().to_str().unwrap();
    let output = winterledger(&["estimate", "--out", out]);
    assert_eq!(output.status.code(), Some(3));
    assert_eq!(
        fs::read_to_string(folder.path().join("result.json")).unwrap(),
        "mine"
    );
    assert_eq!(fs::read_dir(folder.path()).unwrap().count(), 1);
    assert!(
        winterledger(&["estimate", "--out", out, "--force"])
            .status
            .success()
    );
    assert!(
        fs::read_to_string(folder.path().join("result.json"))
            .unwrap()
            .starts_with('{')
    );
}

#[test]
fn the_same_brief_gives_the_same_bytes() {
    let arguments = ["estimate", "briefs/terrace.toml", "--format", "json"];
    assert_eq!(
        winterledger(&arguments).stdout,
        winterledger(&arguments).stdout
    );
}

#[test]
fn a_missing_brief_and_a_wrong_option_have_their_own_status() {
    assert_eq!(
        winterledger(&["estimate", "no/such.toml"]).status.code(),
        Some(1)
    );
    assert_eq!(
        winterledger(&["estimate", "--nonsense"]).status.code(),
        Some(2)
    );
}
