//! Every kind of input, real examples to begin from, and what is done with one that is read.

use std::cell::RefCell;
use std::fmt::Write as _;
use std::io::Write as _;
use std::path::Path;
use std::sync::OnceLock;

use rust_decimal::prelude::ToPrimitive;
use winterledger::bill::{self, Connection};
use winterledger::brief::Brief;
use winterledger::calendar::{CivilHour, HourAxis};
use winterledger::heatpump::{ColdSide, Duty, Sheet, fit, typical_files};
use winterledger::series::{Layout, Stamp, WithinHour, read_text};
use winterledger::signature::{Conversion, DailyWeather, Day, Readings, Stated};
use winterledger::tariff::Tariff;
use winterledger::units::Fuel;
use winterledger::weather::{ReadOptions, describe, read_bytes};

/// How a kind is taken apart.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Form {
    Toml,
    Csv,
    Packed,
}

pub struct Kind {
    pub name: &'static str,
    pub ending: &'static str,
    pub form: Form,
    /// Makes real examples.
    begin: fn() -> Vec<Vec<u8>>,
    held: OnceLock<Vec<Vec<u8>>>,
    /// Whether it was read; an error is a failure, a refusal is none.
    pub read: fn(&[u8]) -> Result<bool, String>,
}

impl Kind {
    /// Real examples.
    pub fn seeds(&self) -> &[Vec<u8>] {
        self.held.get_or_init(self.begin)
    }
}

pub static KINDS: [Kind; 7] = [
    Kind {
        name: "brief",
        ending: "toml",
        form: Form::Toml,
        begin: briefs,
        held: OnceLock::new(),
        read: brief,
    },
    Kind {
        name: "sheet",
        ending: "toml",
        form: Form::Toml,
        begin: sheets,
        held: OnceLock::new(),
        read: sheet,
    },
    Kind {
        name: "tariff",
        ending: "toml",
        form: Form::Toml,
        begin: tariffs,
        held: OnceLock::new(),
        read: tariff,
    },
    Kind {
        name: "weather",
        ending: "csv",
        form: Form::Csv,
        begin: weathers,
        held: OnceLock::new(),
        read: weather,
    },
    Kind {
        name: "readings",
        ending: "csv",
        form: Form::Csv,
        begin: readings,
        held: OnceLock::new(),
        read: meter_readings,
    },
    Kind {
        name: "prices",
        ending: "csv",
        form: Form::Csv,
        begin: prices,
        held: OnceLock::new(),
        read: price_series,
    },
    Kind {
        name: "packed",
        ending: "csv.gz",
        form: Form::Packed,
        begin: packed,
        held: OnceLock::new(),
        read: weather,
    },
];

fn root() -> &'static Path {
    Path::new(env!("CARGO_MANIFEST_DIR"))
}

/// The first lines of a file, for speed.
fn head(path: &str, lines: usize) -> Vec<u8> {
    let text = std::fs::read_to_string(root().join(path)).unwrap();
    let kept: Vec<&str> = text.lines().take(lines).collect();
    kept.join("\n").into_bytes()
}

fn files(folder: &str) -> Vec<Vec<u8>> {
    let mut paths: Vec<_> = std::fs::read_dir(root().join(folder))
        .unwrap()
        .map(|entry| entry.unwrap().path())
        .filter(|path| path.extension().is_some_and(|ending| ending == "toml"))
        .collect();
    paths.sort();
    paths
        .iter()
        .map(|path| std::fs::read(path).unwrap())
        .collect()
}

fn finite(what: &str, values: impl IntoIterator<Item = f64>) -> Result<(), String> {
    match values.into_iter().find(|value| !value.is_finite()) {
        Some(value) => Err(format!("{what} is {value}")),
        None => Ok(()),
    }
}

/// Problems must say something.
fn refused<E: std::fmt::Display>(problems: E) -> Result<bool, String> {
    let told = problems.to_string();
    if told.trim().is_empty() {
        return Err("refused without a word".to_owned());
    }
    Ok(false)
}

// Weather, plain and packed.

fn weathers() -> Vec<Vec<u8>> {
    vec![
        head("weather_samples/morvane_sound.csv", 400),
        head("tests/data/723170TYA.CSV", 120),
        head("tests/data/seattle-temps.csv", 200),
    ]
}

fn packed() -> Vec<Vec<u8>> {
    let plain = head("weather_samples/morvane_sound.csv", 120);
    let mut twice = Vec::new();
    for part in [&plain[..500], &plain[500..]] {
        let mut encoder = flate2::write::GzEncoder::new(Vec::new(), flate2::Compression::fast());
        encoder.write_all(part).unwrap();
        twice.extend(encoder.finish().unwrap());
    }
    let mut encoder = flate2::write::GzEncoder::new(Vec::new(), flate2::Compression::none());
    encoder.write_all(&plain).unwrap();
    vec![twice, encoder.finish().unwrap()]
}

fn weather(input: &[u8]) -> Result<bool, String> {
    let read = match read_bytes("input", input, &ReadOptions::default()) {
        Ok(read) => read,
        Err(problems) => return refused(problems),
    };
    finite("outdoor temperature", read.outdoor_c.iter().copied())?;
    finite("humidity", read.relative_humidity.iter().flatten().copied())?;
    finite("radiation", read.global_w_per_m2.iter().flatten().copied())?;
    finite("wind", read.wind_m_per_s.iter().flatten().copied())?;
    if let Some(told) = describe(std::slice::from_ref(&read), &[15.5]) {
        finite("description", [told.mean_c, told.min_c, told.design_99_6_c])?;
        finite(
            "degree-days",
            told.degree_days.iter().map(|entry| entry.value),
        )?;
    }
    Ok(true)
}

// Machine sheets.

fn sheets() -> Vec<Vec<u8>> {
    typical_files()
        .map(|(_, text)| text.as_bytes().to_vec())
        .collect()
}

/// One in eight of what is read is fitted too, which is the long part; which one depends on the input alone.
fn sheet(input: &[u8]) -> Result<bool, String> {
    let text = String::from_utf8_lossy(input);
    let sheet = match Sheet::parse("input", &text) {
        Ok(sheet) => sheet,
        Err(problems) => return refused(problems),
    };
    let sum: usize = input.iter().map(|byte| usize::from(*byte)).sum();
    if !sum.is_multiple_of(8) {
        return Ok(true);
    }
    let Ok(fitted) = fit(&sheet) else {
        return Ok(true);
    };
    for (open_c, flow_c) in [(7.0, 35.0), (-5.0, 55.0)] {
        let cold = ColdSide {
            open_c,
            k_per_kw: 0.0,
            relative_humidity: None,
        };
        let duty = Duty {
            heat_kw: 4.0,
            flow_c,
            spread_k: 5.0,
            hours: 1.0,
            at_full_output: false,
        };
        let given = fitted.heat_pump.deliver(&cold, &duty);
        finite(
            "machine",
            [
                given.heat_kwh,
                given.electricity_kwh(),
                given.extracted_kwh,
                given.running_hours,
            ],
        )?;
    }
    Ok(true)
}

// Tariffs and prices.

fn tariffs() -> Vec<Vec<u8>> {
    files("tariffs")
}

fn civil() -> Vec<CivilHour> {
    let start = "2023-03-20T00:00:00Z".parse().unwrap();
    HourAxis { start, hours: 500 }.civil(chrono_tz::Europe::London)
}

fn tariff(input: &[u8]) -> Result<bool, String> {
    let text = String::from_utf8_lossy(input);
    let tariff = match Tariff::from_text("input", &text, &root().join("tariffs")) {
        Ok(tariff) => tariff,
        Err(problems) => return refused(problems),
    };
    let civil = civil();
    if let Ok(column) = tariff.price_column(&civil, None) {
        finite("price", column)?;
    }
    if let Ok(bill) = bill::price(&tariff, &civil, &vec![1.3; civil.len()], Connection::Kept) {
        finite("bill", bill.total().to_f64())?;
        let lines: rust_decimal::Decimal = bill.lines.iter().map(|line| line.amount).sum();
        if lines != bill.total() {
            return Err(format!(
                "lines come to {lines}, the bill to {}",
                bill.total()
            ));
        }
    }
    Ok(true)
}

fn prices() -> Vec<Vec<u8>> {
    vec![
        head("tariffs/hourly_prices.csv", 300),
        head("tests/data/account_columns.csv", 300),
    ]
}

fn price_series(input: &[u8]) -> Result<bool, String> {
    let text = String::from_utf8_lossy(input);
    let mut read = false;
    for (column, within_hour, stamp) in [
        (None, WithinHour::Mean, Stamp::Beginning),
        (Some("roof_kwh".to_owned()), WithinHour::Sum, Stamp::Ending),
    ] {
        let layout = Layout {
            column,
            stamp,
            zone: chrono_tz::Europe::Berlin,
            within_hour,
        };
        match read_text("input", &text, &layout) {
            Ok(series) => {
                finite("price", series.values().iter().copied())?;
                read = true;
            }
            Err(problems) => {
                refused(problems)?;
            }
        }
    }
    Ok(read)
}

// Meter readings.

fn readings() -> Vec<Vec<u8>> {
    let consumption = "from,to,consumption (kWh)\n2022-01-01,2022-02-01,1900\n2022-02-01,2022-03-01,1700\n2022-03-01,2022-04-01,1300\n\
        2022-04-01,2022-05-01,800\n2022-05-01,2022-06-01,400\n2022-06-01,2022-07-01,250\n2022-07-01,2022-08-01,230\n2022-08-01,2022-09-01,240\n\
        2022-09-01,2022-10-01,420\n2022-10-01,2022-11-01,900\n2022-11-01,2022-12-01,1400\n";
    vec![
        head("briefs/meter-readings.csv", 400),
        consumption.as_bytes().to_vec(),
    ]
}

fn meter_readings(input: &[u8]) -> Result<bool, String> {
    let text = String::from_utf8_lossy(input);
    let conversion = Conversion {
        fuel: Fuel::Gas,
        calorific_value: None,
        volume_correction: 1.02264,
    };
    let readings = match Readings::read("input", &text, &conversion) {
        Ok(readings) => readings,
        Err(problems) => return refused(problems),
    };
    finite(
        "reading",
        readings.intervals.iter().map(|interval| interval.kwh),
    )?;
    let first = chrono::NaiveDate::from_ymd_opt(2021, 12, 1).unwrap();
    let days = (0..800u64).map(|i| Day {
        date: first + chrono::Days::new(i),
        mean_c: 10.0 - 7.0 * (std::f64::consts::TAU * (i as f64 - 45.0) / 365.25).cos()
            + (i * 7919 % 11) as f64 * 0.3,
    });
    let stated = Stated {
        efficiency: 0.82,
        efficiency_within: 0.05,
        hot_water_share: 0.8,
        hot_water_share_within: 0.1,
        hot_water_swing: 0.15,
    };
    if let Ok(found) = winterledger::signature::fit(
        &readings.intervals,
        &DailyWeather::of_days(days.collect()),
        &stated,
    ) {
        let loss = found.heat_loss_w_per_k;
        finite(
            "signature",
            [
                loss.value,
                loss.low,
                loss.high,
                found.base_temperature_c.value,
                found.r_squared,
            ],
        )?;
    }
    Ok(true)
}

// Briefs.

/// The shipped briefs: their weather cut to three weeks and, since ground needs a year, their ground left out; and the demonstration as it is.
fn briefs() -> Vec<Vec<u8>> {
    let whole = std::fs::read(root().join("briefs/terrace.toml")).unwrap();
    let mut briefs = vec![whole];
    for text in files("briefs").into_iter().chain(files("tests/briefs")) {
        let text = String::from_utf8_lossy(&text)
            .replace("../../", "../")
            .replace("../data", "../tests/data")
            // Three weeks of a plan that knows the day ahead would still be the longest part.
            .replace("\"best-day\"", "\"timer\"");
        let mut parts = text.split("[[choice]]");
        let mut short = parts.next().unwrap_or("").to_owned();
        for part in parts.filter(|part| !part.contains("ground") && !part.contains("water-source"))
        {
            short += "[[choice]]";
            short += part;
        }
        let mut kept = String::new();
        for line in short.lines() {
            let is_weather = line.contains("weather_samples") || line.contains("data/7231");
            let line = if is_weather {
                "file = \"weather.csv\""
            } else {
                line
            };
            let _ = writeln!(kept, "{line}");
        }
        briefs.push(kept.into_bytes());
    }
    briefs
}

thread_local! {
    /// A folder for the files that briefs name, one a thread.
    static FOLDER: RefCell<Option<tempfile::TempDir>> = const { RefCell::new(None) };
}

fn brief(input: &[u8]) -> Result<bool, String> {
    FOLDER.with_borrow_mut(|held| {
        let folder = held.get_or_insert_with(|| {
            let folder = tempfile::tempdir().unwrap();
            let weather = head("weather_samples/morvane_sound.csv", 500 + 12);
            let copy = |inside: &str| {
                let from = root().join(inside);
                let to = folder.path().join(inside);
                std::fs::create_dir_all(&to).unwrap();
                for entry in std::fs::read_dir(from).unwrap() {
                    let path = entry.unwrap().path();
                    if path.is_file() {
                        std::fs::copy(&path, to.join(path.file_name().unwrap())).unwrap();
                    }
                }
            };
            for inside in [
                "briefs",
                "briefs/machines",
                "tariffs",
                "tests/data",
                "weather_samples",
            ] {
                copy(inside);
            }
            std::fs::write(folder.path().join("briefs/weather.csv"), weather).unwrap();
            folder
        });
        let path = folder.path().join("briefs/input.toml");
        std::fs::write(&path, input).unwrap();
        let brief = match Brief::read(&path) {
            Ok(brief) => brief,
            Err(problems) => return refused(problems),
        };
        let outcomes = match brief.case.run() {
            Ok(outcomes) => outcomes,
            Err(problems) => return refused(problems),
        };
        for outcome in &outcomes {
            let costs = &outcome.costs;
            finite(
                "cost",
                [
                    costs.total,
                    costs.energy,
                    costs.standing,
                    outcome.carbon_kg(),
                ],
            )?;
            finite("months", costs.months)?;
            let told = format!("{:?}", outcome.mean_sums());
            if told.contains("NaN") || told.contains("inf") {
                return Err(format!("a sum is no number: {told}"));
            }
        }
        Ok(true)
    })
}
