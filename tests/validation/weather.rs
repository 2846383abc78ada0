//! Degree-days and design temperatures of open files, and the typical year.

use std::fmt::Write as _;
use std::path::Path;

use winterledger::weather::{
    Description, ReadOptions, Rule, Weather, describe, read, read_bytes, typical_year,
};

use crate::table::{Row, Worst, number, reference};

/// 65 °F, the base of US degree-days, in °C.
const BASE_65F_C: f64 = (65.0 - 32.0) / 1.8;

pub fn load(path: &str, zone: Option<&str>) -> Weather {
    let options = ReadOptions {
        zone: zone.map(|zone| zone.parse().unwrap()),
        ..Default::default()
    };
    let path = Path::new(env!("CARGO_MANIFEST_DIR")).join(path);
    read(&path, &options).unwrap_or_else(|problems| panic!("{problems}"))
}

const PANDAS: &str = "pandas on the same open file (tests/reference/weather.py)";

pub fn rows() -> Vec<Row> {
    let greensboro = load("tests/data/723170TYA.CSV", Some("-05:00"));
    let seattle = load("tests/data/seattle-temps.csv", None);
    let mut rows = Vec::new();
    let starts_h = greensboro.axis.start.timestamp().rem_euclid(86400) / 3600;
    rows.push(Row::new(
        "Greensboro, stamps 01:00 to 24:00 at UTC−5: the first hour begins at, h UTC",
        "the file's own notice: hour-ending",
        5.0,
        starts_h as f64,
        0.0,
        "an hour more would move cost under cheap nights and leave heat alone",
    ));
    // [mean, lowest, 0.4 %, 1 %], and degree-days at 15.5 hourly, daily mean, UK, Hitchin, 18 hourly, 65 °F.
    for (name, weather, c, days) in [
        (
            "Greensboro",
            &greensboro,
            [14.42, -16.7, -11.1, -9.4],
            [1694.0, 1589.0, 1698.0, 1556.0, 2179.0, 3869.0],
        ),
        (
            "Seattle",
            &seattle,
            [11.13, 3.1, 3.3, 3.5],
            [1880.0, 1801.0, 1805.0, 1915.0, 2634.0, 4586.0],
        ),
    ] {
        let found = describe(std::slice::from_ref(weather), &[15.5, 18.0, BASE_65F_C]).unwrap();
        for (what, expected, got, tolerance) in [
            ("mean", c[0], found.mean_c, 0.005),
            ("lowest", c[1], found.min_c, 0.05),
            ("design, 0.4 % colder", c[2], found.design_99_6_c, 0.05),
            ("design, 1 % colder", c[3], found.design_99_c, 0.05),
        ] {
            rows.push(Row::new(
                format!("{name}: {what}, °C"),
                PANDAS,
                expected,
                got,
                tolerance + 1e-9,
                "half of the last printed digit",
            ));
        }
        for (what, base_c, rule, expected, per) in [
            ("15.5 °C hourly", 15.5, Rule::Hourly, days[0], 1.0),
            ("15.5 °C daily mean", 15.5, Rule::DailyMean, days[1], 1.0),
            ("15.5 °C UK daily rule", 15.5, Rule::UkDaily, days[2], 1.0),
            ("15.5 °C Hitchin", 15.5, Rule::Hitchin, days[3], 1.0),
            ("18 °C hourly", 18.0, Rule::Hourly, days[4], 1.0),
            ("65 °F, F·d", BASE_65F_C, Rule::MaxMin, days[5], 1.8),
        ] {
            rows.push(Row::new(
                format!("{name}: degree-days {what}"),
                PANDAS,
                expected,
                per * degree_days(&found, base_c, rule),
                0.5 * per,
                "half of the last printed digit",
            ));
        }
    }
    let found = describe(std::slice::from_ref(&greensboro), &[]).unwrap();
    rows.push(Row::new(
        "Greensboro: annual mean, °F",
        "US National Weather Service normal: 57.8",
        57.8,
        found.mean_c * 1.8 + 32.0,
        0.5,
        "of other years",
    ));
    rows.extend(typical());
    rows
}

fn degree_days(found: &Description, base_c: f64, rule: Rule) -> f64 {
    let entry = found
        .degree_days
        .iter()
        .find(|entry| entry.base_c == base_c && entry.rule == rule);
    entry.unwrap().value
}

/// The choice of months from twelve synthetic years by `tests/reference/typical_year.py`.
fn typical() -> Vec<Row> {
    let mut text =
        "time,temperature (C),global radiation (W/m2),relative humidity (%),wind (m/s)\n"
            .to_owned();
    for day in reference("typical_year_days.csv") {
        for hour in 0..24 {
            writeln!(text, "{}T{hour:02}:00Z,{}", day[0], day[1..].join(",")).unwrap();
        }
    }
    let weather = read_bytes("twelve years", text.as_bytes(), &ReadOptions::default()).unwrap();
    let found = typical_year(&[weather]).unwrap();
    let (mut statistics, mut same) = (Worst::absolute(1e-8), 0);
    for (i, row) in reference("typical_year_choice.csv").iter().enumerate() {
        let month: usize = row[0].parse().unwrap();
        let Some(candidate) = found.candidates[month - 1].get(i % 12) else {
            statistics.see(number(&row[2]), f64::NAN);
            continue;
        };
        for (got, text) in candidate.statistics.iter().zip(&row[2..5]) {
            statistics.see(text.parse().unwrap(), *got);
        }
        statistics.see(row[6].parse().unwrap(), candidate.wind_deviation.unwrap());
        let chosen = i % 12 != 0 || found.years[month - 1].to_string() == row[1];
        let alike =
            candidate.year.to_string() == row[1] && candidate.rank_sum.to_string() == row[5];
        same += usize::from(chosen && alike);
    }
    let source = "ISO 15927-4 [M for the steps], pandas (tests/reference/typical_year.py)";
    vec![
        statistics.row(
            "Typical year: Finkelstein–Schafer statistics and wind",
            source,
            576,
            "nine decimals are written",
        ),
        Row::new(
            "Typical year: candidates in the same rank, and chosen",
            source,
            144.0,
            same as f64,
            0.0,
            "a count",
        ),
    ]
}
