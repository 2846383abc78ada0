//! A home's own meter in, its own heat loss out: what today's system of a brief burns is read as a meter would be and given to
//! `bills`.
#![cfg(test)]

use std::fmt::Write as _;
use std::fs;
use std::path::Path;

use assert_cmd::Command;
use chrono::{Datelike, NaiveDate};
use winterledger::brief::Brief;
use winterledger::year::Ledger;

struct Home {
    name: &'static str,
    heat_loss: f64,
    weather: &'static str,
    more: &'static str,
    tables: &'static str,
    today: &'static str,
    knows_sun: bool,
}

const PLAIN: Home = Home {
    name: "as the demonstration",
    heat_loss: 212.0,
    weather: "morvane_sound",
    more: "",
    tables: "",
    today: "fixed_flow = \"65 °C\"",
    knows_sun: true,
};

fn homes() -> [Home; 5] {
    [
        PLAIN,
        Home {
            name: "small, cold winters, an old boiler",
            heat_loss: 140.0,
            weather: "ostrel_plain",
            more: "solar_aperture = \"4.5 m²\"",
            today: "efficiency = \"76 % gross\"",
            ..PLAIN
        },
        Home {
            name: "large, let cool at night and by day",
            heat_loss: 290.0,
            tables: "[home.pattern]\nweekdays = [\"06:00-09:00\", \"16:00-22:00\"]\nset_back = \"16 °C\"",
            ..PLAIN
        },
        Home {
            name: "a base temperature in place of gains",
            heat_loss: 190.0,
            more: "base_temperature = \"15.5 °C\"",
            knows_sun: false,
            ..PLAIN
        },
        Home {
            name: "neither gains nor sun",
            more: "internal_gains = \"0 W\"\nsolar_aperture = \"0 m²\"",
            knows_sun: false,
            ..PLAIN
        },
    ]
}

impl Home {
    fn brief(&self) -> String {
        let root = env!("CARGO_MANIFEST_DIR");
        let Home {
            heat_loss,
            weather,
            more,
            tables,
            today,
            ..
        } = self;
        format!(
            "[home]\nheat_loss = \"{heat_loss} W/K\"\ndesign_outdoor = \"-5 °C\"\nfloor_area = \"96 m²\"\nindoor = \"20 °C\"\n\
             time_zone = \"Europe/London\"\n{more}\n{tables}\n[home.emitters]\nkind = \"radiators\"\nflow = \"55 °C\"\n\
             return = \"47 °C\"\n[home.hot_water]\ndaily = \"120 L\"\nstore = \"none\"\n[weather]\n\
             file = \"{root}/weather_samples/{weather}.csv\"\n[energy]\nelectricity = \"{root}/tariffs/flat_electricity.toml\"\n\
             gas = \"{root}/tariffs/flat_gas.toml\"\n[today]\nlabel = \"Boiler\"\nkind = \"gas-boiler\"\n{today}\n[[choice]]\n\
             label = \"New boiler\"\nkind = \"gas-boiler\"\n"
        )
    }

    /// Gas of today's system, day by day.
    fn days(&self, path: &Path) -> Vec<(NaiveDate, f64)> {
        let brief = Brief::read(path).unwrap();
        let case = &brief.case;
        let mut ledger = Ledger::default();
        case.run_one(&case.contenders[0], Some(&mut ledger))
            .unwrap();
        let mut days: Vec<(NaiveDate, f64)> = Vec::new();
        for (hour, row) in case.site.civil.iter().zip(&ledger.rows) {
            match days.last_mut() {
                Some((date, kwh)) if *date == hour.date => *kwh += row.fuel_kwh,
                _ => days.push((hour.date, row.fuel_kwh)),
            }
        }
        days
    }
}

/// Readings as a paper bill prints them, a new one where a day's key changes.
fn readings(days: &[(NaiveDate, f64)], key: impl Fn(NaiveDate) -> u32) -> String {
    let mut text = "from,to,consumption (kWh)\n".to_owned();
    for period in days.chunk_by(|a, b| key(a.0) == key(b.0)) {
        let kwh: f64 = period.iter().map(|day| day.1).sum();
        let (from, to) = (period[0].0, period[period.len() - 1].0);
        writeln!(text, "{from},{to},{kwh:.1}").unwrap();
    }
    text
}

fn bills(readings: &Path, brief: &Path) -> Result<serde_json::Value, String> {
    let output = Command::cargo_bin("winterledger")
        .unwrap()
        .args(["bills", "--format", "json"])
        .args([readings, brief])
        .output()
        .unwrap();
    if output.status.success() {
        Ok(serde_json::from_slice(&output.stdout).unwrap())
    } else {
        Err(String::from_utf8(output.stderr).unwrap())
    }
}

/// Which interval of the year a day belongs to.
type Interval = fn(NaiveDate) -> u32;

/// The truth within 2 % and inside the limits, and the home otherwise as the brief says.
///
/// 2 %: the fit stops within 3 % of a standard error, and takes the hot water as an even load with the season of the ground's
/// temperature where the brief draws it by month.
#[test]
fn own_meter_in_own_heat_loss_out() {
    let folder = tempfile::tempdir().unwrap();
    let (brief, csv) = (
        folder.path().join("brief.toml"),
        folder.path().join("meter.csv"),
    );
    for home in homes() {
        fs::write(&brief, home.brief()).unwrap();
        let days = home.days(&brief);
        let by: [(&str, Interval); 3] = [
            ("weekly", |date| date.ordinal0() / 7),
            ("monthly", |date| date.month0()),
            ("quarterly", |date| date.month0() / 3),
        ];
        for (often, key) in by {
            fs::write(&csv, readings(&days, key)).unwrap();
            let answer = bills(&csv, &brief).unwrap_or_else(|told| panic!("{}: {told}", home.name));
            let got = answer["heat_loss_w_per_k"].as_f64().unwrap();
            let limits: Vec<f64> = serde_json::from_value(answer["heat_loss_95"].clone()).unwrap();
            let line = answer["effective_w_per_k"].as_f64().unwrap();
            let line_95: Vec<f64> = serde_json::from_value(answer["effective_95"].clone()).unwrap();
            println!(
                "{} {often}: {:.0}, got {got:.1} ({:.0} to {:.0}); line {line:.0} ({:.0} to {:.0})",
                home.name, home.heat_loss, limits[0], limits[1], line_95[0], line_95[1]
            );
            let off = got / home.heat_loss - 1.0;
            assert!(off.abs() < 0.02, "{} {often}: {off}", home.name);
            assert!((limits[0]..=limits[1]).contains(&home.heat_loss));
            assert_eq!(answer["own_home"]["knows_sun"], home.knows_sun);
        }
        // Two halves of a year cannot tell a loss from a load beside it.
        fs::write(&csv, readings(&days, |date| date.month0() / 6)).unwrap();
        let told = bills(&csv, &brief).unwrap_err();
        assert!(told.contains("2 intervals between readings"), "{told}");
    }
}

/// With its heat loss from its own meter the estimate's fuel is the meter's; with half of it burnt by something else a caution says so.
#[test]
fn an_estimate_from_bills_agrees_with_the_meter_or_says_so() {
    let folder = tempfile::tempdir().unwrap();
    let brief = folder.path().join("brief.toml");
    fs::write(&brief, PLAIN.brief()).unwrap();
    let days = PLAIN.days(&brief);
    let from_bills = PLAIN
        .brief()
        .replace("\"212 W/K\"", "{ bills = \"meter.csv\" }");
    fs::write(&brief, from_bills).unwrap();
    let estimate = |scale: f64| -> serde_json::Value {
        let metered: Vec<_> = days
            .iter()
            .map(|(date, kwh)| (*date, kwh + scale))
            .collect();
        let text = readings(&metered, |date| date.month0());
        fs::write(folder.path().join("meter.csv"), text).unwrap();
        let output = Command::cargo_bin("winterledger")
            .unwrap()
            .args(["estimate", "--samples", "0", "--format", "json"])
            .arg(&brief)
            .output()
            .unwrap();
        serde_json::from_slice(&output.stdout).unwrap()
    };
    let cautioned = |answer: &serde_json::Value| {
        let findings = answer["findings"].as_array().unwrap();
        findings.iter().any(|finding| {
            finding["what"]
                .as_str()
                .unwrap()
                .contains("more apart than the limits")
                && finding["done"].as_str().unwrap().contains("scale = true")
        })
    };
    let own = estimate(0.0);
    let off = own["home"]["metered"]["difference_percent"]
        .as_f64()
        .unwrap();
    println!("own meter: {off:+.1} %");
    assert!(off.abs() < 2.0 && !cautioned(&own), "{off}");
    // 30 kWh a day more, summer and winter: a load that the brief does not know.
    assert!(cautioned(&estimate(30.0)));
}
