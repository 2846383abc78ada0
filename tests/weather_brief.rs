//! The weather table of a brief, end to end: every form a file can have, adjustments, several years, repaired hours.
#![cfg(test)]

use std::fmt::Write as _;
use std::fs;
use std::path::{Path, PathBuf};

use assert_cmd::Command;
use chrono::{DateTime, Duration, Utc};
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

/// Files of the repository in a form that a brief elsewhere can name.
fn form(name: &str) -> String {
    root()
        .join("tests/data/weather_forms")
        .join(name)
        .display()
        .to_string()
}

/// A brief of a small home with a weather table, in a folder of its own.
fn brief(folder: &Path, weather: &str) -> PathBuf {
    let at = |path: &str| root().join(path).display().to_string();
    let text = format!(
        "[home]\nheat_loss = \"212 W/K\"\ndesign_outdoor = \"-5 °C\"\nfloor_area = \"96 m²\"\n\
         time_zone = \"Etc/UTC\"\n[home.emitters]\nflow = \"50 °C\"\nreturn = \"43 °C\"\n\
         [weather]\n{weather}\n\
         [energy]\nelectricity = \"{}\"\ngas = \"{}\"\n\
         [today]\nlabel = \"Gas boiler\"\nkind = \"gas-boiler\"\n\
         [[choice]]\nlabel = \"Air source\"\nkind = \"air-source\"\nmachine = \"{}\"\nbackup = \"3 kW\"\n",
        at("tariffs/flat_electricity.toml"),
        at("tariffs/flat_gas.toml"),
        at("briefs/machines/air-r290-small.toml"),
    );
    let path = folder.join("brief.toml");
    fs::write(&path, text).unwrap();
    path
}

fn estimate(weather: &str) -> Value {
    let folder = tempfile::tempdir().unwrap();
    let path = brief(folder.path(), weather);
    let output = winterledger(&[
        "estimate",
        path.to_str().unwrap(),
        "--part-year",
        "--format",
        "json",
    ]);
    let told = String::from_utf8_lossy(&output.stderr);
    assert!(output.status.success(), "{weather}\n{told}");
    serde_json::from_slice(&output.stdout).unwrap()
}

fn refused(weather: &str) -> String {
    let folder = tempfile::tempdir().unwrap();
    let path = brief(folder.path(), weather);
    let output = winterledger(&["estimate", path.to_str().unwrap()]);
    assert_eq!(output.status.code(), Some(1), "{weather}");
    String::from_utf8(output.stderr).unwrap()
}

fn number(value: &Value, path: &str) -> f64 {
    let found = value.pointer(path).and_then(Value::as_f64);
    found.unwrap_or_else(|| panic!("{path} is missing"))
}

fn says(value: &Value, list: &str, text: &str) -> bool {
    value[list]
        .as_array()
        .unwrap()
        .iter()
        .any(|item| item.to_string().contains(text))
}

/// Mean and lowest of the plain file, read here with nothing of ours.
fn plain_figures() -> (f64, f64) {
    let text = fs::read_to_string(form("plain.csv")).unwrap();
    let c: Vec<f64> = text
        .lines()
        .skip(1)
        .map(|line| line.split(',').nth(1).unwrap().parse().unwrap())
        .collect();
    assert_eq!(c.len(), 120);
    let lowest = c.iter().copied().fold(f64::INFINITY, f64::min);
    (c.iter().sum::<f64>() / 120.0, lowest)
}

/// The same five days in every form come to the same hours: 0.005 K is half of the last digit of a file in °F.
#[test]
fn every_form_of_a_file_can_be_said_in_the_brief() {
    let (mean_c, min_c) = plain_figures();
    let plain = estimate(&format!("file = \"{}\"", form("plain.csv")));
    let cost = number(&plain, "/systems/1/cost");
    let forms = [
        (
            "two files",
            format!(
                "file = [\"{}\", \"{}\"]",
                form("first_days.csv"),
                form("last_days.csv")
            ),
            Some(1e-9),
        ),
        (
            "parts, hour-ending, decimal comma, Windows-1252, dew point",
            format!(
                "file = \"{}\"\npart_columns = [\"J\", \"M\", \"T\", \"Std\"]\nstamps = \"ending\"\ntime_zone = \"+01:00\"\n\
                 delimiter = \";\"\ndecimal_comma = true\nencoding = \"windows-1252\"\ntemperature_column = 5\n\
                 dew_point_column = \"Taupunkt °C\"\nradiation_column = 7",
                form("parts.csv")
            ),
            // Humidity comes back from dew points of two decimals.
            Some(1e-3),
        ),
        (
            "numbered columns, no heading, epoch seconds, tenths",
            format!(
                "file = \"{}\"\ntime_column = 2\ntemperature_column = 3\ntemperature_unit = \"tenths of °C\"",
                form("numbered.csv")
            ),
            // Without humidity and radiation frost and gains are others, and so is the cost.
            None,
        ),
        (
            "date and time apart, month first, °F, preamble, an own marker",
            format!(
                "file = \"{}\"\nskip_lines = 3\ndelimiter = \"|\"\ntime_column = \"day\"\nclock_column = 2\n\
                 temperature_column = \"air\"\ntemperature_unit = \"°F\"\nhumidity_column = \"damp\"\n\
                 date_order = \"month-first\"\ntime_zone = \"Europe/London\"\nmissing = [\"n/a\", -77]",
                form("date_and_time.csv")
            ),
            None,
        ),
    ];
    for (what, weather, cost_share) in forms {
        let result = estimate(&weather);
        assert_eq!(result["weather"]["hours"], 120, "{what}");
        let mean = number(&result, "/weather/mean_c");
        let lowest = number(&result, "/weather/min_c");
        assert!(
            (mean - mean_c).abs() < 0.005,
            "{what}: mean {mean}, {mean_c} in the plain file"
        );
        assert!((lowest - min_c).abs() < 0.005, "{what}: lowest {lowest}");
        let found = number(&result, "/systems/1/cost");
        let within = cost_share.is_none_or(|share| (found / cost - 1.0).abs() <= share);
        assert!(within, "{what}: {found}, {cost} with the plain file");
    }
}

#[test]
fn a_file_without_humidity_or_with_a_filled_hour_says_so() {
    let result = estimate(&format!(
        "file = \"{}\"\ntime_column = 2\ntemperature_column = 3\ntemperature_unit = \"tenths of °C\"",
        form("numbered.csv")
    ));
    assert!(says(&result, "assumptions", "outdoor humidity"));
    assert!(says(&result, "findings", "FAO Paper 56"));
    let result = estimate(&format!(
        "file = \"{}\"\nskip_lines = 3\ntemperature_unit = \"°F\"\ntemperature_column = \"air\"\nhumidity_column = \"damp\"\n\
         time_column = \"day\"\nclock_column = 2\nmissing = -77",
        form("date_and_time.csv")
    ));
    assert_eq!(result["weather"]["repaired_hours"], 1);
    assert!(says(&result, "findings", "filled by a straight line"));
    assert!(!says(&result, "assumptions", "outdoor humidity"));
}

/// 6.5 K/km (ISO 2533) over 200 m is 1.3 K; twelve offsets reach the days of their month only.
#[test]
fn adjustments_move_the_weather_and_are_listed() {
    let (mean_c, _) = plain_figures();
    let file = format!("file = \"{}\"", form("plain.csv"));
    let higher = estimate(&format!("{file}\nhigher = \"200 m\""));
    assert!((number(&higher, "/weather/mean_c") - (mean_c - 1.3)).abs() < 1e-9);
    assert!(says(&higher, "assumptions", "-1.30 K for +200 m"));
    let months = format!("[\"2 K\"{}]", ", \"-9 K\"".repeat(11));
    let both = estimate(&format!(
        "{file}\nhigher = \"200 m\"\nlapse_rate = \"5 K/km\"\noffset = {months}"
    ));
    assert!((number(&both, "/weather/mean_c") - (mean_c - 1.0 + 2.0)).abs() < 1e-9);
    assert!(says(&both, "assumptions", "+2 -9 -9"));
    let even = estimate(&format!("{file}\noffset = \"-1.5 K\""));
    assert!((number(&even, "/weather/mean_c") - (mean_c - 1.5)).abs() < 1e-9);
}

#[test]
fn what_cannot_be_is_refused_with_its_line() {
    let file = format!("file = \"{}\"", form("plain.csv"));
    for (said, told) in [
        ("offset = \"40 K\"", "temperature offset"),
        ("higher = \"9000 m\"", "height difference"),
        ("lapse_rate = \"6.5 K/km\"", "a lapse_rate without a height"),
        ("offset = [\"1 K\", \"2 K\"]", "2 differences"),
        (
            "part_columns = [\"a\", \"b\"]",
            "year, month, day, hour and perhaps minute",
        ),
        (
            "time_column = 1\npart_columns = [1, 2, 3, 4]",
            "both time_column and part_columns",
        ),
        ("clock_column = 2", "a clock_column without a time_column"),
        ("delimiter = \"and\"", "one character"),
        ("encoding = \"klingon\"", "WHATWG"),
        ("longest_gap = \"3000 h\"", "longest gap"),
        ("nominal_year = 12", "1800 to 2200"),
        ("missing = true", "stands for a missing reading"),
        ("temperature_column = \"indoors\"", "indoors"),
    ] {
        let problems = refused(&format!("{file}\n{said}"));
        assert!(problems.contains(told), "{said}\n{problems}");
        assert!(!problems.contains("panicked"), "{problems}");
    }
    let gap = refused(&format!(
        "file = [\"{}\", \"{}\"]\nlongest_gap = \"6 h\"",
        form("first_days.csv"),
        form("later_days.csv")
    ));
    assert!(
        gap.contains("later_days.csv") && gap.contains("2024-01-11 23:00"),
        "{gap}"
    );
    let twice = refused(&format!(
        "file = [\"{}\", \"{}\"]",
        form("plain.csv"),
        form("last_days.csv")
    ));
    assert!(twice.contains("are in"), "{twice}");
}

/// Hours of invented weather from an instant: a yearly and a daily wave, and colder by some kelvin from hour 8760 on.
fn hours(start: &str, number: usize, colder_k: f64) -> String {
    let start: DateTime<Utc> = start.parse().unwrap();
    let mut text = "time,temperature (°C),relative humidity (%)\n".to_owned();
    for i in 0..number {
        let stamp = start + Duration::hours(i as i64);
        let day = f64::from(chrono::Datelike::ordinal(&stamp));
        let yearly = -8.0 * ((day - 20.0) / 365.25 * std::f64::consts::TAU).cos();
        let daily = 2.0 * ((i % 24) as f64 / 24.0 * std::f64::consts::TAU).sin();
        let weekly = 3.0 * (i as f64 / 170.0).sin();
        let c = 9.0 + yearly + daily + weekly - if i >= 8760 { colder_k } else { 0.0 };
        let _ = writeln!(text, "{},{c:.1},85", stamp.format("%Y-%m-%dT%H:%MZ"));
    }
    text
}

/// Two weather years from July to June and a part of a third. The ledger, which knows nothing of years, holds the same sums.
#[test]
fn several_years_run_as_several_years() {
    let folder = tempfile::tempdir().unwrap();
    fs::write(
        folder.path().join("years.csv"),
        hours("2021-07-01T00:00:00Z", 2 * 8760 + 500, 3.0),
    )
    .unwrap();
    let path = brief(folder.path(), "file = \"years.csv\"");
    let out = folder.path().join("out");
    let output = winterledger(&[
        "estimate",
        path.to_str().unwrap(),
        "--part-year",
        "--format",
        "json",
        "--out",
        out.to_str().unwrap(),
    ]);
    assert!(
        output.status.success(),
        "{}",
        String::from_utf8_lossy(&output.stderr)
    );
    let result: Value = serde_json::from_slice(&output.stdout).unwrap();
    assert_eq!(result["weather"]["years"], 2);
    assert_eq!(result["weather"]["hours"], 17_520);
    assert!(says(&result, "findings", "500 hours from 2023-07-01"));
    assert!(says(
        &result,
        "assumptions",
        "each beginning as the one before it ended"
    ));
    for system in 0..2 {
        let at = |path: &str| number(&result, &format!("/systems/{system}{path}"));
        assert_eq!(result["systems"][system]["by_year"][0]["year"], 2021);
        let mean = (at("/by_year/0/cost") + at("/by_year/1/cost")) / 2.0;
        // Months are rounded to the cent, 24 of them.
        assert!((mean - at("/cost")).abs() < 0.01, "{mean} {}", at("/cost"));
        assert!(at("/by_year/1/cost") > 1.05 * at("/by_year/0/cost"));
        assert_eq!(at("/year_spread/cost/least"), at("/by_year/0/cost"));
        assert_eq!(
            result["systems"][system]["year_spread"]["cost"]["greatest_in"],
            2022
        );
        let carbon = (at("/by_year/0/carbon_kg") + at("/by_year/1/carbon_kg")) / 2.0;
        assert!((carbon - at("/carbon_kg")).abs() < 1e-6);
    }
    let saving =
        number(&result, "/systems/0/by_year/1/cost") - number(&result, "/systems/1/by_year/1/cost");
    assert!((saving - number(&result, "/systems/1/by_year/1/saving")).abs() < 1e-9);
    let ledger = fs::read_to_string(out.join("ledger-2-air-source.csv")).unwrap();
    let mut reader = csv::Reader::from_reader(ledger.as_bytes());
    let columns: Vec<usize> = reader
        .headers()
        .unwrap()
        .iter()
        .enumerate()
        .filter(|(_, name)| name.contains("backup") && name.contains("kwh"))
        .map(|(i, _)| i)
        .collect();
    assert!(!columns.is_empty());
    let immersion = reader
        .headers()
        .unwrap()
        .iter()
        .position(|name| name.contains("immersion"))
        .unwrap();
    let mut sums = [0.0; 2];
    for (i, record) in reader.records().enumerate() {
        let record = record.unwrap();
        let at = |column: usize| record[column].parse::<f64>().unwrap_or(0.0);
        sums[i / 8760] += columns.iter().map(|&c| at(c)).sum::<f64>() + at(immersion);
    }
    for (year, sum) in sums.into_iter().enumerate() {
        let told = number(&result, &format!("/systems/1/by_year/{year}/backup_kwh"));
        // The ledger is written to 4 decimals an hour or better.
        assert!((told - sum).abs() < 1.0, "{told} {sum}");
    }
    let text = winterledger(&["estimate", path.to_str().unwrap()]);
    let text = String::from_utf8(text.stdout).unwrap();
    for part in [
        "mean of 2 years",
        "2 years, GBP",
        "Coldest indoors, °C",
        "2022",
    ] {
        assert!(text.contains(part), "{part}\n{text}");
    }
}

/// The rows of repaired hours carry the flag, and as many of them are counted in the answer.
#[test]
fn repaired_hours_are_flagged_in_the_ledger() {
    let folder = tempfile::tempdir().unwrap();
    let all = hours("2023-01-01T00:00:00Z", 480, 0.0);
    let kept: Vec<&str> = all
        .lines()
        .enumerate()
        .filter(|(i, _)| !(60..62).contains(i) && !(200..210).contains(i))
        .map(|(_, line)| line)
        .collect();
    fs::write(folder.path().join("gaps.csv"), kept.join("\n")).unwrap();
    let path = brief(folder.path(), "file = \"gaps.csv\"");
    let out = folder.path().join("out");
    let output = winterledger(&[
        "estimate",
        path.to_str().unwrap(),
        "--part-year",
        "--format",
        "json",
        "--out",
        out.to_str().unwrap(),
    ]);
    let result: Value = serde_json::from_slice(&output.stdout).unwrap();
    assert_eq!(result["weather"]["repaired_hours"], 12);
    let ledger = fs::read_to_string(out.join("ledger-1-gas-boiler.csv")).unwrap();
    let flagged: Vec<usize> = ledger
        .lines()
        .skip(1)
        .enumerate()
        .filter(|(_, line)| line.contains("repaired"))
        .map(|(i, _)| i)
        .collect();
    let expected: Vec<usize> = (59..61).chain(199..209).collect();
    assert_eq!(flagged, expected);
}
