//! The typical year against an independent choice by `tests/reference/typical_year.py`.
#![cfg(test)]

use std::fmt::Write;

use winterledger::weather::{ReadOptions, Weather, read_bytes, typical_year};

/// Twelve synthetic years of daily means, each day made of 24 equal hours.
fn twelve_years(columns: usize) -> Weather {
    let days = std::fs::read_to_string(concat!(
        env!("CARGO_MANIFEST_DIR"),
        "/tests/reference/typical_year_days.csv"
    ));
    let heading = [
        "time",
        "temperature (C)",
        "global radiation (W/m2)",
        "relative humidity (%)",
        "wind (m/s)",
    ];
    let mut text = heading[..=columns].join(",") + "\n";
    for line in days.unwrap().lines().skip(1) {
        let fields: Vec<_> = line.split(',').collect();
        for hour in 0..24 {
            writeln!(
                text,
                "{}T{hour:02}:00Z,{}",
                fields[0],
                fields[1..=columns].join(",")
            )
            .unwrap();
        }
    }
    read_bytes("twelve years", text.as_bytes(), &ReadOptions::default()).unwrap()
}

/// Away from the joins the hours are those of the chosen months; February of a leap year loses its last day.
#[test]
fn the_hours_are_those_of_the_chosen_months() {
    let weather = twelve_years(4);
    let found = typical_year(std::slice::from_ref(&weather)).unwrap();
    let mut from = 0;
    for (month0, days) in [31, 28, 31, 30, 31, 30, 31, 31, 30, 31, 30, 31]
        .into_iter()
        .enumerate()
    {
        let start =
            chrono::NaiveDate::from_ymd_opt(found.years[month0], month0 as u32 + 1, 1).unwrap();
        let instant = start.and_hms_opt(0, 0, 0).unwrap().and_utc();
        let source = weather.axis.index_of(instant).unwrap();
        for hour in 8..days * 24 - 8 {
            assert_eq!(
                found.weather.outdoor_c[from + hour],
                weather.outdoor_c[source + hour],
                "month {month0}"
            );
        }
        from += days * 24;
    }
}

#[test]
fn what_is_missing_makes_it_a_variant_and_too_few_years_are_refused() {
    let plain = typical_year(&[twelve_years(1)]).unwrap();
    assert_eq!(
        plain.procedure,
        "variant of the Finkelstein–Schafer procedure of ISO 15927-4, without radiation and humidity and wind"
    );
    assert_eq!(plain.candidates[0][0].statistics.len(), 1);
    let mut short = twelve_years(1);
    short.axis.hours = 24 * 400;
    short.outdoor_c.truncate(24 * 400);
    short.repaired.truncate(24 * 400);
    let refused = typical_year(&[short]).unwrap_err();
    assert_eq!(
        refused.to_string(),
        "twelve years: 2 months of January are whole and hardly repaired\n  allowed: at least 3 years to choose from, 10 for ISO 15927-4\n  remedy:  give more years"
    );
}
