//! One stretch of weather in every form that files have: each must read as the same hours.
#![cfg(test)]

use std::fmt::Write as _;
use std::io::Write as _;

use chrono::{DateTime, Duration, TimeZone, Timelike, Utc};
use winterledger::weather::{
    Column, ColumnChoice, PartColumns, ReadOptions, TemperatureUnit, Weather, read_all, read_bytes,
};

/// 60 days from 1 March 2023: long enough to tell day from month, and over the clock changes of two continents.
const HOURS: i64 = 60 * 24;

fn start() -> DateTime<Utc> {
    Utc.with_ymd_and_hms(2023, 3, 1, 0, 0, 0).unwrap()
}

/// Whole tenths, so that every unit can write them exactly enough.
fn warmth(hour: i64) -> f64 {
    let day = hour as f64 / 24.0;
    ((6.0 - 4.0 * (day * std::f64::consts::TAU).cos() + 5.0 * (day * 0.7).sin()) * 10.0).round()
        / 10.0
}

/// A file of one row an hour, each written by `row` from the instant and the temperature.
fn file(heading: &str, row: impl Fn(DateTime<Utc>, f64) -> String) -> String {
    let mut text = format!("{heading}\n");
    for hour in 0..HOURS {
        writeln!(
            text,
            "{}",
            row(start() + Duration::hours(hour), warmth(hour))
        )
        .unwrap();
    }
    text
}

fn zone(text: &str) -> ReadOptions {
    ReadOptions {
        zone: Some(text.parse().unwrap()),
        ..Default::default()
    }
}

fn assert_same(what: &str, bytes: &[u8], options: &ReadOptions) -> Weather {
    let weather =
        read_bytes(what, bytes, options).unwrap_or_else(|problems| panic!("{what}: {problems}"));
    assert_eq!(weather.axis.start, start(), "{what}");
    assert_eq!(weather.axis.hours, HOURS as usize, "{what}");
    for (hour, &c) in weather.outdoor_c.iter().enumerate() {
        // Degrees Fahrenheit are written to a hundredth.
        assert!(
            (c - warmth(hour as i64)).abs() < 0.006,
            "{what}: hour {hour} {c}"
        );
    }
    assert_eq!(weather.missing_hours, 0, "{what}");
    weather
}

fn assert_reads(what: &str, text: &str) -> Weather {
    assert_same(what, text.as_bytes(), &zone("UTC"))
}

#[test]
fn every_form_of_time() {
    let with = |form: &'static str| {
        file("time,temp (C)", move |t, c| {
            format!("{},{c}", t.format(form))
        })
    };
    assert_reads("ISO", &with("%Y-%m-%dT%H:%M:%SZ"));
    assert_reads("ISO with an offset", &with("%Y-%m-%d %H:%M:%S+00:00"));
    assert_reads("year first with slashes", &with("%Y/%m/%d %H:%M"));
    assert_reads("day first", &with("%d/%m/%Y %H:%M"));
    assert_reads(
        "day first with points and two digits",
        &with("%d.%m.%y %H:%M"),
    );
    assert_reads("month first", &with("%m/%d/%Y %H:%M"));
    assert_reads(
        "month first with halves of the day",
        &with("%m/%d/%Y %I:%M %p"),
    );
    assert_reads("month by name", &with("%d-%b-%Y %H:%M"));
    assert_reads("compact", &with("%Y%m%d%H%M"));
    assert_reads("compact with T", &with("%Y%m%dT%H%M%S"));
    assert_reads("seconds since 1970", &with("%s"));
    assert_reads("milliseconds since 1970", &with("%s000"));
}

#[test]
fn hours_that_end_with_their_stamp() {
    let ending = |t: DateTime<Utc>| t + Duration::hours(1);
    let text = file("date,time,temp (C)", |t, c| {
        let end = ending(t);
        let (day, hour) = if end.hour() == 0 {
            (t, 24)
        } else {
            (end, end.hour())
        };
        format!("{},{hour:02}:00,{c}", day.format("%m/%d/%Y"))
    });
    let weather = assert_reads("24:00", &text);
    assert!(weather.findings.iter().any(|f| f.what.contains("24:00")));
    let text = file("time (hour ending),temp (C)", |t, c| {
        format!("{},{c}", ending(t).format("%Y-%m-%d %H:%M"))
    });
    assert_reads("by the heading", &text);
    let text = file("time,temp (C)", |t, c| {
        format!("{},{c}", ending(t).format("%Y-%m-%d %H:%M"))
    });
    assert_reads("by the first and last stamp", &text);
    let options = ReadOptions {
        stamp_marks: Some("ending".parse().unwrap()),
        ..zone("UTC")
    };
    assert_same("declared", text.as_bytes(), &options);
}

#[test]
fn times_over_several_columns() {
    let text = file("year,month,day,hour,temp (C)", |t, c| {
        format!("{},{c}", t.format("%Y,%m,%d,%H"))
    });
    assert_reads("apart", &text);
    let text = file("year,month,day,hour,temp (C)", |t, c| {
        format!("{},{},{c}", t.format("%Y,%-m,%-d"), t.hour() + 1)
    });
    assert_reads("apart, hours 1 to 24", &text);
    let text = file("date,hour,temp (C)", |t, c| {
        format!("{},{c}", t.format("%Y-%m-%d,%H"))
    });
    assert_reads("date and hour", &text);
    // No headings at all, and everything numbered.
    let bare = file("ignored\nignored too", |t, c| {
        format!("x,{},{c}", t.format("%Y,%m,%d,%H,00"))
    });
    let number = Column::Numbered;
    let options = ReadOptions {
        skip_lines: Some(2),
        columns: ColumnChoice {
            parts: Some(PartColumns {
                year: number(2),
                month: number(3),
                day: number(4),
                hour: number(5),
                minute: Some(number(6)),
            }),
            temperature: Some(number(7)),
            ..Default::default()
        },
        temperature_unit: Some(TemperatureUnit::Celsius),
        ..zone("UTC")
    };
    assert_same("numbered", bare.as_bytes(), &options);
}

#[test]
fn civil_clocks_with_their_missing_and_doubled_hour() {
    for name in ["Europe/London", "America/New_York", "Australia/Sydney"] {
        let civil: chrono_tz::Tz = name.parse().unwrap();
        let text = file("time,temp (C)", |t, c| {
            format!("{},{c}", t.with_timezone(&civil).format("%Y-%m-%d %H:%M"))
        });
        let weather = assert_same(name, text.as_bytes(), &zone(name));
        assert!(
            weather
                .findings
                .iter()
                .all(|f| !f.what.contains("twice") && !f.what.contains("skips")),
            "{name}"
        );
    }
    let text = file("time,temp (C)", |t, c| {
        format!(
            "{},{c}",
            t.with_timezone(&chrono::FixedOffset::east_opt(19_800).unwrap())
                .format("%Y-%m-%d %H:%M")
        )
    });
    assert_same("half an hour off", text.as_bytes(), &zone("+05:30"));
}

#[test]
fn every_unit_of_temperature() {
    let stamped = |heading: &str, write: fn(f64) -> String| {
        file(&format!("time,{heading}"), move |t, c| {
            format!("{},{}", t.format("%Y-%m-%d %H:%M"), write(c))
        })
    };
    assert_reads(
        "°F",
        &stamped("temp (°F)", |c| format!("{:.2}", c * 1.8 + 32.0)),
    );
    assert_reads(
        "K",
        &stamped("air temperature [K]", |c| format!("{:.2}", c + 273.15)),
    );
    assert_reads(
        "tenths",
        &stamped("temperature (0.1 °C)", |c| format!("{:.0}", c * 10.0)),
    );
    let text = stamped("temp", |c| format!("{:.2}", c * 1.8 + 32.0));
    let options = ReadOptions {
        temperature_unit: Some(TemperatureUnit::Fahrenheit),
        ..zone("UTC")
    };
    assert_same("declared °F", text.as_bytes(), &options);
}

#[test]
fn every_way_to_hold_text() {
    let plain = file("time;temp (°C);note", |t, c| {
        format!("{};{c};", t.format("%Y-%m-%d %H:%M")).replace('.', ",")
    });
    assert_reads("semicolons and decimal commas", &plain);
    assert_reads("tabs", &plain.replace(';', "\t"));
    assert_reads("bars", &plain.replace(';', "|"));
    assert_reads(
        "carriage returns and line feeds",
        &plain.replace('\n', "\r\n"),
    );
    assert_reads("carriage returns", &plain.replace('\n', "\r"));
    assert_reads("a mark", &format!("\u{feff}{plain}"));
    let quoted = file("\"time\",\"temp, outdoor (°C)\"", |t, c| {
        format!(
            "\"{}\",\"{}\"",
            t.format("%Y-%m-%d %H:%M"),
            c.to_string().replace('.', ",")
        )
    });
    assert_same(
        "quotes",
        quoted.as_bytes(),
        &ReadOptions {
            columns: ColumnChoice {
                temperature: Some(Column::Numbered(2)),
                ..Default::default()
            },
            ..zone("UTC")
        },
    );
    let remarks = plain.replace("2023-03-05 00:00", "# a remark\n\n2023-03-05 00:00");
    assert_reads("remarks and blank lines", &remarks);
    assert_reads("a title", &format!("Station 12;north;\n{plain}"));
    let wide: Vec<u8> = plain.encode_utf16().flat_map(u16::to_be_bytes).collect();
    let options = ReadOptions {
        encoding: Some("utf-16be".to_owned()),
        ..zone("UTC")
    };
    assert_same("declared UTF-16", &wide, &options);
    let mut packed = flate2::write::GzEncoder::new(Vec::new(), flate2::Compression::fast());
    packed.write_all(plain.as_bytes()).unwrap();
    assert_same("gzip", &packed.finish().unwrap(), &zone("UTC"));
}

#[test]
fn missing_readings_in_every_spelling_are_repaired_and_counted() {
    for marker in ["", "NA", "NaN", "-", "---", "null", "-9999", "999.9", "M"] {
        let text = file("time,temp (C)", |t, c| {
            let missing = t.hour() == 5;
            format!(
                "{},{}",
                t.format("%Y-%m-%d %H:%M"),
                if missing {
                    marker.to_owned()
                } else {
                    c.to_string()
                }
            )
        });
        let weather = read_bytes(marker, text.as_bytes(), &zone("UTC"))
            .unwrap_or_else(|p| panic!("{marker}: {p}"));
        assert_eq!(
            (weather.missing_hours, weather.repaired_hours()),
            (60, 60),
            "\"{marker}\""
        );
        assert!(weather.repaired[5] && !weather.repaired[6]);
    }
    let text = file("time,temp (C)", |t, c| {
        format!(
            "{},{}",
            t.format("%Y-%m-%d %H:%M"),
            if t.hour() == 5 {
                "void".to_owned()
            } else {
                c.to_string()
            }
        )
    });
    assert!(read_bytes("void", text.as_bytes(), &zone("UTC")).is_err());
    let options = ReadOptions {
        missing: vec!["void".to_owned()],
        ..zone("UTC")
    };
    assert_eq!(
        read_bytes("void", text.as_bytes(), &options)
            .unwrap()
            .repaired_hours(),
        60
    );
}

#[test]
fn finer_readings_are_averaged_and_coarser_ones_joined() {
    // Four readings an hour whose mean is the hour's temperature.
    let mut text = "time,temp (C)\n".to_owned();
    for quarter in 0..HOURS * 4 {
        let t = start() + Duration::minutes(15 * quarter);
        let c = warmth(quarter / 4) + [-0.3, 0.1, -0.1, 0.3][(quarter % 4) as usize];
        writeln!(text, "{},{c:.2}", t.format("%Y-%m-%d %H:%M")).unwrap();
    }
    assert_reads("quarter-hourly", &text);
    let mut text = "time,temp (C)\n".to_owned();
    for hour in (0..HOURS).step_by(3) {
        writeln!(
            text,
            "{},{}",
            (start() + Duration::hours(hour)).format("%Y-%m-%d %H:%M"),
            warmth(hour)
        )
        .unwrap();
    }
    let weather = read_bytes("three-hourly", text.as_bytes(), &zone("UTC")).unwrap();
    assert_eq!(weather.joined_hours as i64, (HOURS / 3 - 1) * 2);
    let line = warmth(0) + (warmth(3) - warmth(0)) / 3.0;
    assert!((weather.outdoor_c[1] - line).abs() < 1e-12);
}

#[test]
fn humidity_comes_from_the_dew_point_where_there_is_none() {
    let text = file("time,temp (C),dew point (C)", |t, c| {
        format!("{},{c},{}", t.format("%Y-%m-%d %H:%M"), c - 2.0)
    });
    let weather = assert_reads("dew point", &text);
    let share = weather.relative_humidity.unwrap();
    // psychrolib 2.5.0: GetRelHumFromTDewPoint(4.0, 2.0) = 0.867820 (over water above 0 °C in both).
    let at = weather.outdoor_c.iter().position(|&c| c == 4.0).unwrap();
    assert!((share[at] - 0.867_820).abs() < 1e-6, "{}", share[at]);
}

#[test]
fn files_that_follow_each_other_are_one_stretch() {
    let folder = tempfile::tempdir().unwrap();
    let whole = file("time,temp (C)", |t, c| {
        format!("{},{c}", t.format("%Y-%m-%dT%H:%MZ"))
    });
    let lines: Vec<&str> = whole.lines().collect();
    let mut paths = Vec::new();
    // The second file begins with the last hour of the first and ends two hours before the third.
    for (name, from, to) in [
        ("c.csv", 900, HOURS as usize),
        ("a.csv", 0, 400),
        ("b.csv", 399, 898),
    ] {
        let path = folder.path().join(name);
        std::fs::write(
            &path,
            format!("{}\n{}\n", lines[0], lines[1 + from..1 + to].join("\n")),
        )
        .unwrap();
        paths.push(path);
    }
    let stretches = read_all(&paths, &ReadOptions::default()).unwrap();
    let [weather] = &stretches[..] else {
        panic!("{} stretches", stretches.len())
    };
    assert_eq!(
        (weather.axis.hours as i64, weather.repaired_hours()),
        (HOURS, 2)
    );
    assert!((0..HOURS).all(|h| (weather.outdoor_c[h as usize] - warmth(h)).abs() < 1.0));
    let gap = weather
        .findings
        .iter()
        .find(|f| f.what.contains("2 hours without"))
        .unwrap();
    assert!(
        gap.file.as_ref().unwrap().ends_with("b.csv") && gap.line == Some(500),
        "{gap:?}"
    );
    // The same file twice is no second year.
    let twice = read_all(
        &[paths[0].clone(), paths[0].clone()],
        &ReadOptions::default(),
    )
    .unwrap_err();
    assert!(twice.to_string().contains("list each file once"), "{twice}");
    // Far apart they stay two.
    std::fs::remove_file(&paths[2]).unwrap();
    assert_eq!(
        read_all(&paths[..2], &ReadOptions::default())
            .unwrap()
            .len(),
        2
    );
}
