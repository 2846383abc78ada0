//! The `machine` command as it is run: what it prints, writes, refuses, and with which exit status.

#![cfg(test)] // so that the lints know the helpers below for test code

use assert_cmd::Command;
use serde_json::Value;
use winterledger::heatpump::typical_files;

fn command(arguments: &[&str]) -> Command {
    let mut command = Command::cargo_bin("winterledger").unwrap();
    command
        .current_dir(env!("CARGO_MANIFEST_DIR"))
        .arg("machine")
        .args(arguments);
    command
}

fn text(arguments: &[&str]) -> String {
    let assert = command(arguments).assert().success();
    String::from_utf8(assert.get_output().stdout.clone()).unwrap()
}

fn json(arguments: &[&str]) -> Value {
    serde_json::from_str(&text(&[arguments, &["--format", "json"]].concat())).unwrap()
}

fn refused(arguments: &[&str], status: i32, wanted: &str) {
    let assert = command(arguments).assert().code(status);
    let told = String::from_utf8_lossy(&assert.get_output().stderr).into_owned();
    assert!(told.contains(wanted), "{told}");
    assert!(assert.get_output().stdout.is_empty());
}

/// Every sheet file is a usage example and the typical machine of its name is the same machine, marked.
#[test]
fn every_sheet_is_fitted_and_drawn() {
    let folder = tempfile::tempdir().unwrap();
    for (file, _) in typical_files() {
        let sheet = format!("briefs/machines/{file}");
        let picture = folder.path().join(file).with_extension("svg");
        let shown = text(&[&sheet, "--chart", picture.to_str().unwrap()]);
        for wanted in [
            "physics alone %",
            "left out %",
            "field factor 0.85",
            "map within",
            "caution: ",
            "electrician",
        ] {
            assert!(
                shown.contains(wanted),
                "{file}: {wanted} is not in\n{shown}"
            );
        }
        assert!(!shown.contains("a typical machine"), "{file}");
        let drawn = std::fs::read_to_string(&picture).unwrap();
        assert!(
            drawn.contains("Greatest output") && drawn.contains("°C"),
            "{file}"
        );
    }
    assert!(text(&["air, r290, variable speed"]).contains("a typical machine"));
}

#[test]
fn the_promised_names_are_there() {
    let answer = json(&[
        "air, R290, variable speed",
        "--at",
        "-7/50",
        "--output",
        "4",
    ]);
    for name in [
        "heat_kw",
        "electric_kw",
        "cop",
        "speed",
        "running_fraction",
        "evaporating_c",
        "condensing_c",
        "map_error_percent",
    ] {
        assert!(answer[name].is_f64(), "{name}");
    }
    // The running speed is found to a millionth of the output.
    assert!((answer["heat_kw"].as_f64().unwrap() - 4.0).abs() < 4e-6);
    let ratio = answer["heat_kw"].as_f64().unwrap() / answer["electric_kw"].as_f64().unwrap();
    assert!((ratio - answer["cop"].as_f64().unwrap()).abs() < 1e-9);
    let points = answer["points"].as_array().unwrap();
    assert_eq!(points.len(), 13);
    for name in [
        "source_c",
        "flow_c",
        "heat_kw",
        "cop",
        "model_heat_kw",
        "model_cop",
        "physics_percent",
        "left_out_percent",
    ] {
        assert!(points[0][name].is_f64(), "{name}");
    }
    assert!(answer["parameters"].as_array().unwrap().len() >= 10);
    assert_eq!(answer["typical"], true);
    let without = json(&["air, R290, variable speed"]);
    assert!(
        without.get("evaporating_c").is_none(),
        "absent means absent"
    );
}

#[test]
fn one_point_leaves_nothing_out() {
    let folder = tempfile::tempdir().unwrap();
    let path = folder.path().join("one.toml");
    let sheet = "[machine]\nlabel = \"One point\"\nsource = \"air\"\nrefrigerant = \"R32\"\nspeed = \"variable\"\n\
        [[tested]]\nsource = \"7 °C\"\nflow = \"35 °C\"\noutput = \"8 kW\"\ncop = 4.7\n";
    std::fs::write(&path, sheet).unwrap();
    let answer = json(&[path.to_str().unwrap()]);
    assert!(answer.get("left_out_rms_percent").is_none());
    assert!(answer["points"][0].get("left_out_percent").is_none());
    assert!(answer.get("greatest_current_a").is_none());
    assert!(answer["assumptions"].as_array().unwrap().len() >= 4);
}

/// At its greatest output the printed condition is the sheet's own point, defrosting included.
#[test]
fn a_condition_on_the_sheet_comes_out_as_printed_there() {
    let answer = json(&["briefs/machines/air-r290-small.toml", "--at", "2/35"]);
    let near = |name: &str, printed: f64| {
        let found = answer[name].as_f64().unwrap();
        assert!((found / printed - 1.0).abs() < 0.01, "{name} {found}");
    };
    near("heat_kw", 5.8);
    near("cop", 3.42);
    near("cop_at_home", 3.42 * 0.85);
    assert!(answer["frost_cop_share"].as_f64().unwrap() > 0.03);
}

#[test]
fn what_cannot_be_run_is_refused() {
    let sheet = "briefs/machines/air-r290-small.toml";
    refused(
        &["no/such.toml"],
        1,
        "neither a file nor the name of a typical machine",
    );
    refused(&[sheet, "--at", "-30/35"], 1, "a source from -20 to 35 °C");
    refused(&[sheet, "--at", "-15/70"], 1, "a flow from -5 to 61.5 °C");
    refused(&[sheet, "--at", "7"], 1, "such as -7/50");
    refused(&[sheet, "--at", "7/35", "--output", "0"], 1, "above 0 kW");
    refused(&[sheet, "--output", "3"], 2, "--at");
    refused(
        &["tests/data/sheet_bad/many_at_once.toml"],
        1,
        "6 problems found",
    );
    let folder = tempfile::tempdir().unwrap();
    let taken = folder.path().join("taken.svg");
    std::fs::write(&taken, "kept").unwrap();
    refused(&[sheet, "--chart", taken.to_str().unwrap()], 3, "--force");
    assert_eq!(std::fs::read_to_string(&taken).unwrap(), "kept");
    refused(&[sheet, "--chart", "machine.pdf"], 1, ".svg or .png");
}

/// More than it can give is told, not hidden.
#[test]
fn a_shortfall_is_told() {
    let assert = command(&[
        "air, R290, variable speed",
        "--at",
        "-7/35",
        "--output",
        "9",
    ])
    .assert()
    .success();
    let told = String::from_utf8_lossy(&assert.get_output().stderr).into_owned();
    assert!(told.contains("more than the 5.40 kW"), "{told}");
}
