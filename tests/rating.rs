//! Seasonal rating of whole machines, and the `rating` command.

#![cfg(test)] // so that the lints know the helpers below for test code

use assert_cmd::Command;
use serde_json::Value;
use winterledger::heatpump::rating::{
    Application, Climate, Rated, RatingPoint, cycling_cop, rate, rate_machine,
};
use winterledger::heatpump::{
    ColdSide, Delivered, Duty, HeatPump, Sheet, SourceKind, default_spread_k, fit, typical_names,
};

fn pump(name: &str) -> HeatPump {
    fit(&Sheet::typical(name).unwrap()).unwrap().heat_pump
}

/// Entering source temperature of the rating (EN 14825: brine at 0 °C all season).
fn entering_c(pump: &HeatPump, outdoor_c: f64) -> f64 {
    match pump.source() {
        SourceKind::Air => outdoor_c,
        SourceKind::Brine => 0.0,
        SourceKind::Water => 10.0,
    }
}

/// The machine on its bench for an hour of a rating, matching the load as far as it can.
fn hour(bench: &HeatPump, outdoor_c: f64, flow_c: f64, load_kw: f64) -> Delivered {
    let cold = ColdSide {
        open_c: entering_c(bench, outdoor_c),
        k_per_kw: 0.0,
        relative_humidity: None,
    };
    let least = bench.least_output_kw(&cold, flow_c);
    let duty = Duty {
        heat_kw: load_kw,
        flow_c,
        // The water keeps its flow rate: the standard spread at the least output, less below it.
        spread_k: default_spread_k(flow_c) * (load_kw / least).min(1.0),
        hours: 1.0,
        at_full_output: false,
    };
    bench.deliver(&cold, &duty)
}

/// Straight lines through rating points, continued beyond the last two.
fn line(points: &[RatingPoint], at_c: f64, value: impl Fn(&RatingPoint) -> f64) -> f64 {
    let after = points
        .iter()
        .position(|p| p.outdoor_c >= at_c)
        .unwrap_or(points.len() - 1)
        .max(1);
    let (a, b) = (&points[after - 1], &points[after]);
    value(a) + (at_c - a.outdoor_c) / (b.outdoor_c - a.outdoor_c) * (value(b) - value(a))
}

/// Which of the two ways of correcting for cycling, at the points or bin by bin.
#[derive(Clone, Copy, PartialEq)]
enum Cycling {
    /// Corrected at the points, as the worked example and our rating do.
    AtPoints,
    /// Corrected bin by bin.
    ByBin,
}

/// How far the machine hour by hour is from the bin method, percent of SCOPon; with frost or without it on both sides.
fn off(
    pump: &HeatPump,
    rated: &Rated,
    application: Application,
    frost: bool,
    cycling: Cycling,
) -> f64 {
    let climate = rated.case.climate;
    let bench = pump.at_bench();
    let charged =
        |given: &Delivered| given.electricity_kwh() - if frost { 0.0 } else { given.defrost_kwh };
    let points: Vec<_> = rated
        .rating
        .points
        .iter()
        .map(|p| {
            let outdoor_c = p.declared.outdoor_c;
            let given = hour(
                &bench,
                outdoor_c,
                application.flow_c(climate, outdoor_c),
                p.load_kw,
            );
            RatingPoint {
                cop: p.declared.cop * given.electricity_kwh() / charged(&given),
                ..p.declared
            }
        })
        .collect();
    let (mut hourly, mut by_bins) = (0.0, 0.0);
    for bin in &rate(&points, &rated.case).unwrap().bins {
        let flow_c = application.flow_c(climate, bin.outdoor_c);
        let given = hour(&bench, bin.outdoor_c, flow_c, bin.load_kw);
        hourly += bin.hours * (charged(&given) + bin.load_kw - given.heat_kwh);
        let cop = match cycling {
            Cycling::AtPoints => bin.cop,
            Cycling::ByBin => {
                let capacity_kw = line(&points, bin.outdoor_c, |p| p.capacity_kw);
                let ratio = (bin.load_kw / capacity_kw).min(1.0);
                cycling_cop(
                    line(&points, bin.outdoor_c, |p| p.cop),
                    ratio,
                    rated.case.cycling_coefficient,
                )
            }
        };
        by_bins += bin.hours * ((bin.load_kw - bin.heater_kw) / cop + bin.heater_kw);
    }
    100.0 * (by_bins / hourly - 1.0)
}

/// The issue's own bound: the machine hour by hour on a year of bin hours agrees with the bin method within 2 %, or the difference is
/// explained by name: taking the named cause out brings it inside. The causes: frost, worst between the method's points at −7 and 2 °C,
/// where a straight line of COP knows nothing of it; and the cycling correction at the points, whose straight line is continued above
/// 12 °C while a machine that runs ever less loses ever more (corrected bin by bin that is met). No difference is above 3 %.
#[test]
fn a_year_of_bin_hours_agrees_with_the_bin_method() {
    let mut rated_cases = 0;
    for name in typical_names() {
        let pump = pump(name);
        for climate in Climate::ALL {
            for application in Application::ALL {
                let Ok(rated) = rate_machine(&pump, climate, application, None) else {
                    continue;
                };
                rated_cases += 1;
                let of = |frost, cycling| off(&pump, &rated, application, frost, cycling);
                let whole = of(true, Cycling::AtPoints);
                let no_frost = of(false, Cycling::AtPoints);
                let by_bin = of(true, Cycling::ByBin);
                let why = match (whole.abs() < 2.0, no_frost.abs() < 2.0, by_bin.abs() < 2.0) {
                    (true, _, _) => "",
                    (_, true, _) => "frost",
                    (_, _, true) => "cycling corrected at the points",
                    _ => "unexplained",
                };
                let what = format!(
                    "{name} {climate:?} {application:?}: {whole:+.2} % {why} (without frost {no_frost:+.2}, cycling by bin {by_bin:+.2})"
                );
                println!("{what}");
                assert!(why != "unexplained" && whole.abs() < 3.0, "{what}");
            }
        }
    }
    assert!(rated_cases >= 60, "{rated_cases}");
}

/// What must hold of any rating; and the ecodesign floors of EU 813/2013 in force since 2017, ηs 110 % at medium and 125 % at low
/// temperature \[from memory\], for the machines of variable speed, which are the ones still sold.
#[test]
fn ratings_are_ordered_and_usual() {
    for name in typical_names() {
        let pump = pump(name);
        for climate in Climate::ALL {
            let mut before = f64::INFINITY;
            for application in Application::ALL {
                let Ok(rated) = rate_machine(&pump, climate, application, None) else {
                    assert!(
                        application == Application::High || name.contains("R410A"),
                        "{name} {climate:?} {application:?}"
                    );
                    continue;
                };
                let r = &rated.rating;
                let what = format!("{name} {climate:?} {application:?}: {:.2}", r.scop);
                assert!(
                    r.scop <= r.scop_on && r.scop_on <= r.scop_net + 1e-12,
                    "{what}"
                );
                assert!(
                    r.scop < before,
                    "{what} is not below {before:.2} of cooler water"
                );
                before = r.scop;
                assert!((2.0..7.0).contains(&r.scop), "{what}");
                if climate == Climate::Average && name.contains("variable") {
                    let floor = match application {
                        Application::Low => 125.0,
                        Application::Medium => 110.0,
                        _ => 0.0,
                    };
                    assert!(
                        r.eta_s_percent > floor,
                        "{what}: ηs {:.0} %",
                        r.eta_s_percent
                    );
                }
            }
        }
    }
}

/// A larger load on the same machine raises the bivalent temperature and the heater's share, and says so beyond the regulation's frame.
#[test]
fn a_machine_too_small_for_its_load_is_told() {
    let pump = pump("air, R290, variable speed");
    let rate =
        |load| rate_machine(&pump, Climate::Average, Application::Medium, Some(load)).unwrap();
    let (fits, small) = (rate(5.0), rate(12.0));
    assert!(fits.findings.is_empty() && fits.bivalent_c < -7.0);
    assert!(
        small.bivalent_c > 2.0 && small.rating.heater_kwh > 10.0 * fits.rating.heater_kwh.max(1.0)
    );
    assert!(
        small
            .findings
            .iter()
            .any(|f| f.to_string().contains("at most 2 °C")),
        "{:?}",
        small.findings
    );
    // At the bivalent temperature the greatest output is the load.
    let cold = ColdSide {
        open_c: small.bivalent_c,
        k_per_kw: 0.0,
        relative_humidity: None,
    };
    let flow_c = Application::Medium.flow_c(Climate::Average, small.bivalent_c);
    let load = Climate::Average.part_load_ratio(small.bivalent_c) * 12.0;
    assert!((pump.at_bench().greatest_output_kw(&cold, flow_c) / load - 1.0).abs() < 1e-3);
}

fn command(arguments: &[&str]) -> Command {
    let mut command = Command::cargo_bin("winterledger").unwrap();
    command.arg("rating").args(arguments);
    command
}

fn json(arguments: &[&str]) -> Value {
    let output = command(arguments)
        .args(["--format", "json"])
        .assert()
        .success();
    serde_json::from_slice(&output.get_output().stdout).unwrap()
}

/// The worked example of EN 14825 (inputs \[from memory\], result computed) as declared points on a sheet, to its printed digits, through the command.
#[test]
fn declared_points_are_rated_as_the_worked_example() {
    let folder = tempfile::tempdir().unwrap();
    let path = folder.path().join("example.toml");
    let mut text = "[machine]\nlabel = \"Worked example\"\nsource = \"air\"\nrefrigerant = \"R410A\"\nspeed = \"fixed\"\n\
        [[tested]]\nsource = \"2 °C\"\nflow = \"35 °C\"\noutput = \"11.17 kW\"\ncop = 4.0\nat = \"maximum\"\n"
        .to_owned();
    for (outdoor, kw, cop) in [
        (-10, 7.80, 2.60),
        (-7, 9.55, 3.26),
        (-6, 9.70, 3.30),
        (2, 11.17, 4.00),
        (7, 12.66, 4.91),
        (12, 14.30, 5.50),
    ] {
        text += &format!(
            "[[declared]]\nclimate = \"average\"\napplication = \"low\"\noutdoor = \"{outdoor} °C\"\noutput = \"{kw} kW\"\ncop = {cop}\n"
        );
    }
    std::fs::write(&path, text).unwrap();
    let sheet = path.to_str().unwrap();
    let common = [sheet, "--climate", "average", "--application", "low"];
    let answer = json(&[&common[..], &["--design-load", "11.46"]].concat());
    let near = |name: &str, printed: f64, digit: f64| {
        let found = answer[name].as_f64().unwrap();
        assert!((found - printed).abs() < 0.5 * digit, "{name} {found}");
    };
    near("scop_on", 3.598, 0.001);
    near("scop_net", 3.646, 0.001);
    near("qh_kwh", 23672.0, 1.0);
    near("heater_kwh", 120.7, 0.1);
    assert_eq!(answer["from"], "declared");
    assert_eq!(answer["bivalent_c"], -6.0);
    refused(&common, 1, "--design-load");
}

/// Refused with an exit status and a message on stderr.
fn refused(arguments: &[&str], status: i32, wanted: &str) {
    let assert = command(arguments).assert().code(status);
    let told = String::from_utf8_lossy(&assert.get_output().stderr).into_owned();
    assert!(told.contains(wanted), "{told}");
}

#[test]
fn the_promised_names_are_there_and_the_bins_on_request() {
    let common = [
        "air, R32, variable speed",
        "--climate",
        "colder",
        "--application",
        "low",
    ];
    let answer = json(&common);
    for name in [
        "scop",
        "scop_on",
        "scop_net",
        "eta_s_percent",
        "qh_kwh",
        "heater_kwh",
    ] {
        assert!(answer[name].is_f64(), "{name}");
    }
    assert_eq!(answer["climate"], "colder");
    assert_eq!(answer["application"], "low");
    assert_eq!(answer["typical"], true);
    assert!(answer["points"].as_array().unwrap().len() >= 6 && answer.get("bins").is_none());
    let with_bins = json(&[&common[..], &["--bins"]].concat());
    let hours: f64 = with_bins["bins"]
        .as_array()
        .unwrap()
        .iter()
        .map(|bin| bin["hours"].as_f64().unwrap())
        .sum();
    // EU 813/2013: 6446 h in the colder climate.
    assert_eq!(hours, 6446.0);
}

#[test]
fn what_cannot_be_rated_is_refused() {
    let of = |machine: &str, climate: &str, application: &str, more: &[&str], status, wanted| {
        let common = [machine, "--climate", climate, "--application", application];
        refused(&[&common[..], more].concat(), status, wanted);
    };
    of(
        "ground, R410A, variable speed",
        "average",
        "high",
        &[],
        1,
        "65 °C",
    );
    of("air, R32, variable speed", "polar", "low", &[], 2, "polar");
    of(
        "no such machine",
        "average",
        "low",
        &[],
        1,
        "neither a file nor the name of a typical machine",
    );
    let negative = ["--design-load", "-3"];
    of(
        "air, R32, variable speed",
        "average",
        "low",
        &negative,
        1,
        "design heat load from 0.3 to 100 kW",
    );
}
