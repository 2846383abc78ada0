//! The `weather` command as it is run: text, JSON, exit status, and what it writes.
#![cfg(test)]

use std::fmt::Write;
use std::fs;
use std::path::Path;

use assert_cmd::Command;
use serde_json::Value;

const ROOT: &str = env!("CARGO_MANIFEST_DIR");
const GREENSBORO: &str = "tests/data/723170TYA.CSV";

fn weather(arguments: &[&str]) -> assert_cmd::assert::Assert {
    Command::cargo_bin("winterledger")
        .unwrap()
        .current_dir(ROOT)
        .arg("weather")
        .args(arguments)
        .assert()
}

fn stdout(arguments: &[&str]) -> String {
    String::from_utf8(weather(arguments).success().get_output().stdout.clone()).unwrap()
}

fn stderr(arguments: &[&str], status: i32) -> String {
    let assert = weather(arguments).code(status);
    assert!(assert.get_output().stdout.is_empty());
    String::from_utf8(assert.get_output().stderr.clone()).unwrap()
}

fn json(arguments: &[&str]) -> Value {
    serde_json::from_str(&stdout(&[arguments, &["--format", "json"]].concat())).unwrap()
}

#[test]
fn one_screen_says_what_an_engineer_wants_to_know() {
    insta::assert_snapshot!(stdout(&[
        GREENSBORO,
        "--time-zone",
        "-05:00",
        "--base",
        "15.5",
        "--base",
        "18"
    ]));
}

/// The names that are relied on from outside, and figures of methods that `tests/weather.rs` cites.
#[test]
fn the_json_keeps_its_names() {
    let answer = json(&[GREENSBORO, "--time-zone", "-05:00"]);
    for name in [
        "hours",
        "years",
        "mean_c",
        "min_c",
        "max_c",
        "missing_hours",
        "repaired_hours",
        "duplicate_hours",
    ] {
        assert!(answer[name].is_number(), "{name}");
    }
    assert_eq!(
        (answer["hours"].as_u64(), answer["years"].as_f64()),
        (Some(8760), Some(1.0))
    );
    assert_eq!(
        answer["design_c"],
        serde_json::json!({ "99": -9.4, "99.6": -11.1 })
    );
    let rules: Vec<_> = answer["degree_days"]
        .as_array()
        .unwrap()
        .iter()
        .map(|d| d["rule"].as_str().unwrap())
        .collect();
    assert_eq!(
        rules,
        ["hourly", "daily mean", "max and min", "UK daily", "Hitchin"]
    );
    assert_eq!(answer["degree_days"][0]["base_c"], 15.5);
    assert!((answer["degree_days"][0]["value"].as_f64().unwrap() - 1694.0).abs() < 0.5);
    let hours: u64 = answer["hours_per_degree"]
        .as_array()
        .unwrap()
        .iter()
        .map(|d| d["hours"].as_u64().unwrap())
        .sum();
    assert_eq!(hours, 8760);
    assert_eq!(answer["kind"], "typical");
    assert!(
        answer["findings"]
            .as_array()
            .unwrap()
            .iter()
            .all(|f| f["what"].is_string() && f["done"].is_string())
    );
    assert!(answer.get("typical_year").is_none());
}

#[test]
fn both_samples_are_clean() {
    for sample in ["morvane_sound", "ostrel_plain"] {
        let text = stdout(&[&format!("weather_samples/{sample}.csv")]);
        assert!(
            text.contains("0 h missing, 0 h repaired") && text.contains("Findings  none"),
            "{text}"
        );
        // One screen.
        assert!(text.lines().count() < 45, "{}", text.lines().count());
    }
}

#[test]
fn wrong_arguments_and_files_are_refused_all_at_once() {
    let said = stderr(
        &[
            GREENSBORO,
            "--time-zone",
            "Nowhere",
            "--base",
            "90",
            "--stamps",
            "middle",
            "--offset",
            "1,2",
        ],
        1,
    );
    for part in [
        "--time-zone: \"Nowhere\"",
        "--base: 90 °C",
        "--stamps: \"middle\"",
        "--offset: 2 numbers",
    ] {
        assert!(said.contains(part), "{said}");
    }
    assert!(said.contains("4 problems found"), "{said}");
    assert!(stderr(&["no_such_file.csv"], 1).contains("no_such_file.csv: cannot be read"));
    assert!(
        stderr(&["tests/data/weather_bad/word.csv"], 1)
            .contains("line 17, temperature (°C): \"warm\" is not a number")
    );
    let away = stderr(&["weather_samples/ostrel_plain.csv", "--higher", "9000"], 1);
    assert!(
        away.contains("--higher: 9000 m") && away.contains("from -2000 to 2000 m"),
        "{away}"
    );
    stderr(&[], 2);
    stderr(&[GREENSBORO, "--clock-column", "2"], 2);
}

#[test]
fn long_lists_of_findings_are_cut_unless_all_are_asked_for() {
    let file = "tests/data/weather_bad/two_years_shuffled.csv";
    let short = stdout(&[file]);
    assert!(short.contains("more: --all-findings shows them"), "{short}");
    let long = stdout(&[file, "--all-findings"]);
    assert!(!long.contains("more:") && long.lines().count() > short.lines().count());
    assert!(json(&[file])["findings"].as_array().unwrap().len() > 20);
}

#[test]
fn adjustments_are_listed_and_move_the_air() {
    let sample = "weather_samples/morvane_sound.csv";
    let before = json(&[sample])["mean_c"].as_f64().unwrap();
    let moved = json(&[sample, "--higher", "200", "--offset", "0.5"]);
    assert!((moved["mean_c"].as_f64().unwrap() - (before - 1.3 + 0.5)).abs() < 1e-9);
    let assumed = moved["assumptions"].as_array().unwrap();
    assert_eq!(assumed.len(), 2);
    assert!(assumed[0]["value"].as_str().unwrap().contains("6.5 K/km"));
}

/// Twelve invented years, see `tests/reference/typical_year.py`: a file a year.
fn twelve_files(folder: &Path) -> Vec<String> {
    let days = fs::read_to_string(format!("{ROOT}/tests/reference/typical_year_days.csv")).unwrap();
    let mut texts = vec![
            "time,temperature (C),global radiation (W/m2),relative humidity (%),wind (m/s)\n"
                .to_owned();
            12
        ];
    for line in days.lines().skip(1) {
        let (date, rest) = line.split_once(',').unwrap();
        let year: usize = date[..4].parse().unwrap();
        for hour in 0..24 {
            writeln!(texts[year - 2001], "{date}T{hour:02}:00Z,{rest}").unwrap();
        }
    }
    let paths = texts.into_iter().enumerate().map(|(i, text)| {
        let path = folder.join(format!("{}.csv", 2001 + i));
        fs::write(&path, text).unwrap();
        path.display().to_string()
    });
    paths.collect()
}

#[test]
fn many_years_are_told_apart_and_a_typical_one_is_written() {
    let folder = tempfile::tempdir().unwrap();
    let files = twelve_files(folder.path());
    let out = folder.path().join("typical.csv");
    let out = out.to_str().unwrap();
    let mut arguments: Vec<&str> = files.iter().map(String::as_str).collect();
    arguments.extend(["--typical-year", out]);
    let text = stdout(&arguments);
    assert!(
        text.contains("By year") && text.contains("from, to"),
        "{text}"
    );
    assert!(
        text.contains("Finkelstein–Schafer procedure of ISO 15927-4"),
        "{text}"
    );
    // The first months of `tests/reference/typical_year_choice.csv`.
    assert!(
        text.contains("months from January come from 2008 2007"),
        "{text}"
    );
    let written = fs::read_to_string(out).unwrap();
    assert!(written.starts_with("# A typical year"));

    // Not overwritten unasked, and a refusal leaves it as it was.
    let again = weather(&arguments).code(3);
    assert!(String::from_utf8_lossy(&again.get_output().stderr).contains("--force"));
    assert_eq!(fs::read_to_string(out).unwrap(), written);
    let answer = json(&[&arguments[..], &["--force"]].concat());
    assert_eq!(answer["by_year"].as_array().unwrap().len(), 12);
    assert_eq!(
        answer["typical_year"]["years"].as_array().unwrap().len(),
        12
    );

    let typical = json(&[out]);
    assert_eq!(
        (typical["hours"].as_u64(), typical["kind"].as_str()),
        (Some(8760), Some("typical"))
    );
    assert_eq!(typical["columns"].as_array().unwrap().len(), 3);
}

#[test]
fn too_few_years_make_no_typical_one() {
    let folder = tempfile::tempdir().unwrap();
    let out = folder.path().join("typical.csv");
    let said = stderr(
        &[
            "weather_samples/ostrel_plain.csv",
            "--typical-year",
            out.to_str().unwrap(),
        ],
        1,
    );
    assert!(said.contains("at least 3 years") && !out.exists(), "{said}");
}

#[test]
fn both_pictures_are_drawn_beside_each_other() {
    let folder = tempfile::tempdir().unwrap();
    let carpet = folder.path().join("year.svg");
    let text = stdout(&[
        "weather_samples/ostrel_plain.csv",
        "--chart",
        carpet.to_str().unwrap(),
    ]);
    let svg = fs::read_to_string(&carpet).unwrap();
    assert!(svg.contains("coldest 3 days"), "{}", &svg[..400]);
    let curve = fs::read_to_string(folder.path().join("year-duration.svg")).unwrap();
    assert!(curve.contains("99.6 % design") && text.contains("year-duration.svg"));
    let wrong = folder.path().join("year.jpg");
    assert!(
        stderr(
            &[
                "weather_samples/ostrel_plain.csv",
                "--chart",
                wrong.to_str().unwrap()
            ],
            1
        )
        .contains(".svg or .png")
    );
    assert_eq!(fs::read_dir(folder.path()).unwrap().count(), 2);
}

/// The stated limit of a plain file; the file has a hole instead of content, so it takes no room.
#[test]
fn a_file_beyond_the_stated_size_is_refused_before_it_is_read() {
    let folder = tempfile::tempdir().unwrap();
    let path = folder.path().join("huge.csv");
    let file = fs::File::create(&path).unwrap();
    file.set_len(513 << 20).unwrap();
    let told = stderr(&[path.to_str().unwrap()], 1);
    assert!(told.contains("at most 512 MiB"), "{told}");
}

/// Cold spells of several lengths: the mean of a longer run is never below that of the coldest shorter one in it.
#[test]
fn cold_spells_of_several_lengths_are_told() {
    let answer = json(&[GREENSBORO, "--time-zone", "-05:00"]);
    let spells = answer["coldest_spells"].as_array().unwrap();
    let days: Vec<_> = spells.iter().map(|s| s["days"].as_u64().unwrap()).collect();
    assert_eq!(days, [1, 3, 5, 7, 14]);
    assert_eq!(spells[0]["mean_c"], answer["coldest_day"]["mean_c"]);
    assert_eq!(spells[1]["mean_c"], answer["coldest_three_days"]["mean_c"]);
    let means: Vec<_> = spells
        .iter()
        .map(|s| s["mean_c"].as_f64().unwrap())
        .collect();
    assert!(means.windows(2).all(|w| w[0] <= w[1]), "{means:?}");
}
