//! Weather read from the samples and from open files, against the figures of published methods.
#![cfg(test)]

use std::path::Path;
use std::slice::from_ref;

use winterledger::problem::Severity;
use winterledger::weather::{
    Description, Kind, ReadOptions, RepairPolicy, Rule, Weather, describe, read, read_bytes, to_csv,
};

/// 65 °F, the base of US degree-days, in °C.
const BASE_65F_C: f64 = (65.0 - 32.0) / 1.8;

fn load(path: &str, zone: Option<&str>) -> Weather {
    let options = ReadOptions {
        zone: zone.map(|zone| zone.parse().unwrap()),
        ..Default::default()
    };
    let path = Path::new(env!("CARGO_MANIFEST_DIR")).join(path);
    read(&path, &options).unwrap_or_else(|problems| panic!("{problems}"))
}

fn described(weather: &Weather) -> Description {
    describe(from_ref(weather), &[15.5, 18.0, BASE_65F_C]).unwrap()
}

/// Degree-days at a base by a rule, within 0.5 K·d of a reference that is rounded to whole ones.
fn assert_degree_days(description: &Description, base_c: f64, rule: Rule, expected: f64) {
    let found = description
        .degree_days
        .iter()
        .find(|entry| entry.base_c == base_c && entry.rule == rule)
        .unwrap()
        .value;
    assert!(
        (found - expected).abs() < 0.5,
        "{rule} at {base_c}: {found}, not {expected}"
    );
}

#[test]
fn the_samples_are_whole_and_clean() {
    for sample in ["morvane_sound", "ostrel_plain"] {
        let weather = load(&format!("weather_samples/{sample}.csv"), None);
        assert_eq!(weather.axis.hours, 8760, "{sample}");
        assert_eq!(weather.missing_hours, 0);
        assert!(weather.relative_humidity.is_some() && weather.global_w_per_m2.is_some());
        assert!(weather.wind_m_per_s.is_some());
        assert!(weather.findings.is_empty(), "{:?}", weather.findings);
        assert_eq!(weather.years(), [(2023, 0..8760)]);
    }
}

/// What the samples are meant to be: a mild maritime year, and a continental one with three days at −18 to −20 °C.
#[test]
fn the_samples_are_mild_and_hard() {
    let mild = described(&load("weather_samples/morvane_sound.csv", None));
    assert!((mild.mean_c - 10.0).abs() < 0.1, "{}", mild.mean_c);
    assert!(
        (mild.design_99_6_c - -3.0).abs() < 0.5,
        "{}",
        mild.design_99_6_c
    );
    let hard = described(&load("weather_samples/ostrel_plain.csv", None));
    assert!((hard.mean_c - 8.5).abs() < 0.1, "{}", hard.mean_c);
    assert!((-20.0..=-18.0).contains(&hard.min_c), "{}", hard.min_c);
    assert!(hard.coldest_three_days.unwrap().mean_c < -15.0);
}

/// Greensboro TMY3: figures computed with pandas from the same file (tests/reference/weather.py), degree-days by the
/// definitions of the UK Met Office and of NOAA; the annual mean 57.8 °F is published by the US National Weather Service.
#[test]
fn greensboro_gives_the_published_figures() {
    let weather = load("tests/data/723170TYA.CSV", Some("-05:00"));
    assert_eq!(weather.axis.hours, 8760);
    assert_eq!(weather.missing_hours, 0);
    assert!(matches!(
        weather.kind,
        Kind::Typical {
            source_years: Some([1988, ..,])
        }
    ));
    let found = described(&weather);
    assert!((found.mean_c - 14.42).abs() < 0.005);
    assert!(
        (found.mean_c * 1.8 + 32.0 - 57.8).abs() < 0.5,
        "the published mean is of other years"
    );
    assert_eq!(found.min_c, -16.7);
    assert_eq!((found.design_99_6_c, found.design_99_c), (-11.1, -9.4));
    assert_degree_days(&found, 15.5, Rule::Hourly, 1694.0);
    assert_degree_days(&found, 15.5, Rule::DailyMean, 1589.0);
    assert_degree_days(&found, 15.5, Rule::UkDaily, 1698.0);
    assert_degree_days(&found, 15.5, Rule::Hitchin, 1556.0);
    assert_degree_days(&found, 18.0, Rule::Hourly, 2179.0);
    assert_degree_days(&found, BASE_65F_C, Rule::MaxMin, 3869.0 / 1.8);
    assert_eq!(
        found.findings.len(),
        1,
        "a typical year must warn of peak load"
    );
    assert!(found.findings[0].what.contains("typical year"));
}

/// Seattle normals: the same, with the hour that the file lacks filled in.
#[test]
fn seattle_gives_the_published_figures_and_is_no_use_for_peak_load() {
    let weather = load("tests/data/seattle-temps.csv", None);
    assert_eq!(weather.axis.hours, 8760);
    assert_eq!((weather.missing_hours, weather.repaired_hours()), (1, 1));
    let found = described(&weather);
    assert!((found.mean_c - 11.13).abs() < 0.005);
    assert!((found.min_c - 3.1).abs() < 0.05);
    assert!((found.design_99_6_c - 3.3).abs() < 0.05 && (found.design_99_c - 3.5).abs() < 0.05);
    assert_degree_days(&found, 15.5, Rule::Hourly, 1880.0);
    assert_degree_days(&found, 15.5, Rule::DailyMean, 1801.0);
    assert_degree_days(&found, 15.5, Rule::UkDaily, 1805.0);
    assert_degree_days(&found, 15.5, Rule::Hitchin, 1915.0);
    assert_degree_days(&found, 18.0, Rule::Hourly, 2634.0);
    assert_degree_days(&found, BASE_65F_C, Rule::MaxMin, 4586.0 / 1.8);
    assert!(
        found.findings[0].what.contains("means of many years"),
        "{:?}",
        found.findings
    );
    // Fahrenheit was not stated, and the hole lies where clocks go forward.
    let said = |words: &str| {
        weather
            .findings
            .iter()
            .any(|finding| finding.what.contains(words))
    };
    assert!(
        said("no unit is stated") && said("as when clocks go forward"),
        "{:?}",
        weather.findings
    );
}

/// US clock changes: second Sunday of March and first Sunday of November (Energy Policy Act of 2005). The typical year is
/// placed on 2023: 12 March and 5 November. Its own clock never changes, so one hour cannot exist and one is doubled.
#[test]
fn greensboro_on_a_civil_clock_is_not_silent() {
    let weather = load("tests/data/723170TYA.CSV", Some("America/New_York"));
    let warnings: Vec<_> = weather
        .findings
        .iter()
        .filter(|f| f.severity == Severity::Warning)
        .map(|f| f.what.as_str())
        .collect();
    assert!(
        warnings
            .iter()
            .any(|w| w.contains("2023-03-12") && w.contains("skips")),
        "{warnings:?}"
    );
    assert!(
        warnings
            .iter()
            .any(|w| w.contains("2023-11-05") && w.contains("twice")),
        "{warnings:?}"
    );
    assert!(
        weather
            .findings
            .iter()
            .any(|f| f.done.contains("declare a fixed offset"))
    );
    assert_eq!(weather.axis.hours, 8760);
    assert_eq!(weather.missing_hours, 1);
}

#[test]
fn greensboro_on_a_clock_of_another_continent_is_noticed() {
    let weather = load("tests/data/723170TYA.CSV", Some("-05:00"));
    assert!(
        !weather
            .findings
            .iter()
            .any(|f| f.done.contains("is the time zone right?"))
    );
    let text = std::fs::read(concat!(
        env!("CARGO_MANIFEST_DIR"),
        "/tests/data/723170TYA.CSV"
    ))
    .unwrap();
    // Read as UTC and written out, then declared to be six hours behind: the afternoon falls into the morning.
    let utc = read_bytes(
        "w",
        &text,
        &ReadOptions {
            zone: Some("UTC".parse().unwrap()),
            ..Default::default()
        },
    )
    .unwrap();
    let moved = ReadOptions {
        zone: Some("-06:00".parse().unwrap()),
        ..Default::default()
    };
    let again = read_bytes("w", to_csv(&utc, &[]).as_bytes(), &moved).unwrap();
    assert!(
        again
            .findings
            .iter()
            .any(|f| f.done.contains("is the time zone right?")),
        "{:?}",
        again.findings
    );
}

#[test]
fn a_typical_year_written_out_is_known_again() {
    let weather = load("tests/data/723170TYA.CSV", Some("-05:00"));
    let again = read_bytes(
        "again",
        to_csv(&weather, &[]).as_bytes(),
        &ReadOptions::default(),
    )
    .unwrap();
    assert_eq!(again.outdoor_c, weather.outdoor_c);
    assert_eq!(again.relative_humidity, weather.relative_humidity);
    assert_eq!((again.axis, again.zone), (weather.axis, weather.zone));
    assert!(matches!(again.kind, Kind::Typical { .. }));
}

#[test]
fn a_long_gap_is_refused_unless_it_is_allowed() {
    let whole = std::fs::read_to_string(concat!(
        env!("CARGO_MANIFEST_DIR"),
        "/weather_samples/morvane_sound.csv"
    ))
    .unwrap();
    let mut lines: Vec<_> = whole.lines().collect();
    lines.drain(1000..1030);
    let text = lines.join("\n");
    let refused = read_bytes("w", text.as_bytes(), &ReadOptions::default())
        .unwrap_err()
        .to_string();
    assert!(
        refused.contains("w line 1000: 30 hours without a temperature"),
        "{refused}"
    );
    assert!(refused.contains("allow longer gaps"), "{refused}");
    let repair = RepairPolicy {
        fill_longer: true,
        ..Default::default()
    };
    let weather = read_bytes(
        "w",
        text.as_bytes(),
        &ReadOptions {
            repair,
            ..Default::default()
        },
    )
    .unwrap();
    assert_eq!((weather.axis.hours, weather.repaired_hours()), (8760, 30));
}
