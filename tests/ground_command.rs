//! The command `ground` through the real binary.
#![cfg(test)]

use std::path::Path;

use assert_cmd::Command;
use serde_json::Value;

fn ground(arguments: &[&str]) -> std::process::Output {
    Command::cargo_bin("winterledger")
        .unwrap()
        .current_dir(Path::new(env!("CARGO_MANIFEST_DIR")))
        .arg("ground")
        .args(arguments)
        .output()
        .unwrap()
}

/// Every figure of the brief's four ground sources, rounded as printed.
#[test]
fn the_ground_of_the_brief_as_text() {
    let output = ground(&["briefs/ground.toml"]);
    assert!(output.status.success());
    insta::assert_snapshot!("briefs__ground", String::from_utf8(output.stdout).unwrap());
    insta::assert_snapshot!(
        "briefs__ground_findings",
        String::from_utf8(output.stderr).unwrap()
    );
}

#[test]
fn the_json_has_the_promised_shape_and_the_ground_grows_colder() {
    let output = ground(&["briefs/ground.toml", "--format", "json", "--no-sizing"]);
    let first: Value = serde_json::from_slice(&output.stdout).unwrap();
    let years = first["years"].as_array().unwrap();
    let of = |name: &str| -> Vec<f64> {
        years
            .iter()
            .map(|year| year[name].as_f64().unwrap())
            .collect()
    };
    assert_eq!(of("year"), [1.0, 2.0, 5.0, 10.0, 25.0]);
    for name in ["lowest_brine_c", "average_brine_c", "bore_wall_c", "spf_h2"] {
        assert!(
            of(name).windows(2).all(|pair| pair[1] < pair[0]),
            "{name} {:?}",
            of(name)
        );
    }
    assert!(first["undisturbed_c"].as_f64().unwrap() > of("bore_wall_c")[0]);
    let g = first["g_function"].as_array().unwrap();
    assert!(
        g.windows(2)
            .all(|pair| pair[1]["value"].as_f64() > pair[0]["value"].as_f64())
    );
    assert_eq!(first["lowest_brine_c"].as_array().unwrap().len(), 25);
    // What was not looked for is absent.
    assert!(first.get("sizing").is_none());
    let short = &first["others"][0];
    // A machine with an inverter turns down to what the bore bears before it stops.
    assert!(short["years"][4]["hours_turned_down"].as_u64().unwrap() > 20);
    assert!(short["years"][4]["backup_kwh"].as_f64().unwrap() > 20.0);
    let told = short["findings"][0]["what"].as_str().unwrap();
    assert!(
        told.contains("is turned down in") && told.contains("backup"),
        "{told}"
    );
}

#[test]
fn a_label_that_is_not_there_names_those_that_are() {
    let output = ground(&["briefs/ground.toml", "--choice", "Air source"]);
    assert_eq!(output.status.code(), Some(1));
    let told = String::from_utf8(output.stderr).unwrap();
    assert!(
        told.contains("\"One bore, right-sized\"") && told.contains("\"Trenches\""),
        "{told}"
    );
    assert_eq!(
        ground(&["briefs/ground.toml", "--floor", "99"])
            .status
            .code(),
        Some(1)
    );
    assert_eq!(
        ground(&["briefs/ground.toml", "--years", "0"])
            .status
            .code(),
        Some(2)
    );
}

#[test]
fn pictures_are_written_once_for_each_ground_source() {
    let folder = tempfile::tempdir().unwrap();
    let file = folder.path().join("brine.svg");
    let file = file.to_str().unwrap();
    let arguments = [
        "briefs/ground.toml",
        "--years",
        "2",
        "--no-sizing",
        "--chart",
        file,
    ];
    assert!(ground(&arguments).status.success());
    for name in [
        "brine-1.svg",
        "brine-2.svg",
        "brine-3.svg",
        "brine-1-life.svg",
    ] {
        let text = std::fs::read_to_string(folder.path().join(name)).unwrap();
        roxmltree::Document::parse(&text).unwrap();
    }
    assert_eq!(
        ground(&arguments).status.code(),
        Some(3),
        "nothing is overwritten unasked"
    );
}

/// A comparison shows year 15 of a buried loop, says so, and sets its first year beside it.
#[test]
fn a_comparison_shows_a_later_year_and_the_first_beside_it() {
    let estimate = |format: &str| {
        let output = Command::cargo_bin("winterledger")
            .unwrap()
            .current_dir(Path::new(env!("CARGO_MANIFEST_DIR")))
            .args(["estimate", "briefs/ground.toml", "--format", format])
            .output()
            .unwrap();
        assert!(output.status.success(), "{output:?}");
        String::from_utf8(output.stdout).unwrap()
    };
    let result: serde_json::Value = serde_json::from_str(&estimate("json")).unwrap();
    let systems = result["systems"].as_array().unwrap();
    let of = |label: &str| systems.iter().find(|one| one["label"] == label).unwrap();
    let bore = of("One bore, right-sized");
    let shown = &bore["ground"];
    assert_eq!(shown["shown_year"], 15);
    let number = |value: &serde_json::Value| value.as_f64().unwrap();
    assert!(number(&shown["first_year_cost"]) < number(&bore["cost"]));
    assert!(number(&shown["first_year_spf_h4"]) > number(&bore["spf_h4"]));
    assert!(number(&shown["first_year_lowest_brine_c"]) > number(&shown["lowest_brine_c"]));
    assert!(of("Air source").get("ground").is_none());
    let text = estimate("text");
    for words in [
        "Year of the loop shown",
        "cost in its year 1",
        "lowest in year 1",
    ] {
        assert!(text.contains(words), "{words}");
    }
}
