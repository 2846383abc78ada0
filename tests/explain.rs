//! The text of `explain`: kept word by word, and reckoned again from its own figures.
//!
//! Three checks that share nothing with the program's arithmetic. What stands after the last `=` of a line is evaluated by the small
//! calculator below and must give the line's value. The state points must be those of CoolProp at the temperatures that the text
//! states (`tests/reference/explain.py`). And the lines must hang together: energy over the hour, and the ledger's own row.
#![cfg(test)]

use std::path::Path;

use assert_cmd::Command;
use serde_json::Value;

const TERRACE: &str = "briefs/terrace.toml";
const GROUND: &str = "briefs/ground.toml";
/// Name of the snapshot, brief, system, hour.
const HOURS: [(&str, &str, &str, &[&str]); 6] = [
    (
        "air_coldest",
        TERRACE,
        "Air source, same radiators",
        &["--coldest"],
    ),
    (
        "air_worst_cop",
        TERRACE,
        "Air source, same radiators",
        &["--worst-cop"],
    ),
    (
        "air_dearest",
        TERRACE,
        "Air source, larger radiators",
        &["--dearest"],
    ),
    (
        "air_at",
        TERRACE,
        "Air source, larger radiators",
        &["--at", "2023-04-16T05:00"],
    ),
    (
        "ground_coldest",
        GROUND,
        "One bore, right-sized",
        &["--coldest"],
    ),
    (
        "ground_dearest",
        GROUND,
        "One bore, too short",
        &["--dearest"],
    ),
];

fn explain(brief: &str, choice: &str, hour: &[&str], format: &[&str]) -> String {
    let output = Command::cargo_bin("winterledger")
        .unwrap()
        .current_dir(Path::new(env!("CARGO_MANIFEST_DIR")))
        .args(["explain", brief, "--choice", choice])
        .args(hour)
        .args(format)
        .output()
        .unwrap();
    assert!(output.status.success(), "{output:?}");
    String::from_utf8(output.stdout).unwrap()
}

fn answers() -> impl Iterator<Item = (&'static str, Value)> {
    HOURS.into_iter().map(|(name, brief, choice, hour)| {
        let text = explain(brief, choice, hour, &["--format", "json"]);
        (name, serde_json::from_str(&text).unwrap())
    })
}

#[test]
fn the_text_is_kept() {
    for (name, brief, choice, hour) in HOURS {
        insta::assert_snapshot!(name, explain(brief, choice, hour, &[]));
    }
}

/// A pocket calculator: numbers, + − × / ^ and brackets, `e^(…)` and `ln(…)`.
struct Calculator<'a> {
    rest: &'a str,
    /// Largest number met, by which cancellation is judged.
    largest: f64,
}

impl Calculator<'_> {
    fn eat(&mut self, wanted: &str) -> bool {
        self.rest = self.rest.trim_start();
        let found = self.rest.strip_prefix(wanted);
        self.rest = found.unwrap_or(self.rest);
        found.is_some()
    }

    fn sum(&mut self) -> Option<f64> {
        let mut value = self.product()?;
        loop {
            if self.eat("+") {
                value += self.product()?;
            } else if self.eat("−") || self.eat("-") {
                value -= self.product()?;
            } else {
                return Some(value);
            }
            self.largest = self.largest.max(value.abs());
        }
    }

    fn product(&mut self) -> Option<f64> {
        let mut value = self.power()?;
        loop {
            if self.eat("×") {
                value *= self.power()?;
            } else if self.eat("/") {
                value /= self.power()?;
            } else {
                return Some(value);
            }
        }
    }

    fn power(&mut self) -> Option<f64> {
        let base = self.atom()?;
        if self.eat("^") {
            Some(base.powf(self.atom()?))
        } else {
            Some(base)
        }
    }

    fn atom(&mut self) -> Option<f64> {
        if self.eat("−") || self.eat("-") {
            return Some(-self.atom()?);
        }
        if self.eat("ln(") {
            let inside = self.sum()?;
            return self.eat(")").then(|| inside.ln());
        }
        if self.eat("(") {
            let inside = self.sum()?;
            return self.eat(")").then_some(inside);
        }
        if self.eat("e^") {
            return Some(self.atom()?.exp());
        }
        let end = self
            .rest
            .find(|c: char| !c.is_ascii_digit() && c != '.')
            .unwrap_or(self.rest.len());
        let (number, rest) = self.rest.split_at(end);
        self.rest = rest;
        let number: f64 = number.parse().ok()?;
        self.largest = self.largest.max(number);
        Some(number)
    }
}

/// The value of an expression and the largest number in it; nothing when it is none.
fn reckon(expression: &str) -> Option<(f64, f64)> {
    let mut calculator = Calculator {
        rest: expression,
        largest: 0.0,
    };
    let value = calculator.sum()?;
    calculator
        .rest
        .trim()
        .is_empty()
        .then_some((value, calculator.largest))
}

#[test]
fn the_calculator_reckons() {
    assert_eq!(reckon("2 + 3 × (4 − (−1)) / 5"), Some((5.0, 5.0)));
    assert!((reckon("e^(−6/20) + ln(3 / 1.5)^2").unwrap().0 - 1.221_27).abs() < 1e-4);
    assert_eq!(reckon("flow × 2"), None);
}

/// Inputs are printed to five figures, so a line agrees to 1e-4 of its value, or of the largest number in it where large ones
/// cancel.
const FIGURES: f64 = 1e-4;

/// Lines that are given, looked up or decided by a rule; every other line has arithmetic.
const WITHOUT: &[&str] = &[
    "outdoor air",
    "relative humidity",
    "global radiation",
    "heat-loss coefficient",
    "rooms before",
    "set point",
    "drawn at the taps",
    "store before",
    "heat to the store",
    "time it has",
    "flow to the coil",
    "output while running",
    "source with nothing drawn",
    "source entering",
    "speed",
    "isentropic enthalpy",
    "fan or brine pump, tested",
    "humidity ratio at the coil",
    "map beside exact machine",
    "backup",
    "immersion heater",
    "pump of the loop or well",
    "store after",
    "price of electricity",
    "price of fuel",
    "heat asked",
    "share of the time it runs",
    "flow while running",
    "machine at rest",
    "flow needed",
    "flow",
    "return",
    "heat to rooms",
    "heat to hot water",
    "gas, gross",
    "pump and fan",
    "heat wanted",
    "mean water needed",
    "spread at that load",
    "humidity ratio outdoors",
];

#[test]
fn every_line_can_be_reckoned_from_its_own_figures() {
    let mut reckoned = 0;
    for (name, answer) in answers() {
        for part in answer["parts"].as_array().unwrap() {
            let lines = part["lines"].as_array().unwrap();
            // Powers are the exact machine's, the hour's energies the map's; the text says how far the two are apart.
            let map = lines
                .iter()
                .find(|line| line["what"] == "map beside exact machine");
            let map_share = map.map_or(0.0, |line| line["value"].as_f64().unwrap().abs() / 100.0);
            for line in lines {
                let (what, how) = (
                    line["what"].as_str().unwrap(),
                    line["how"].as_str().unwrap(),
                );
                let value = line["value"].as_f64().unwrap();
                let expression = how
                    .rsplit_once(" = ")
                    .map_or("", |(_, expression)| expression);
                let Some((found, largest)) = reckon(expression) else {
                    assert!(
                        WITHOUT.contains(&what),
                        "{name}: \"{what}\" says only \"{how}\""
                    );
                    continue;
                };
                let allowed = FIGURES * value.abs().max(largest * 0.1) + map_share * value.abs();
                assert!(
                    (found - value).abs() <= allowed,
                    "{name}, {what}: {expression} is {found}, not {value}"
                );
                reckoned += 1;
            }
        }
    }
    println!("{reckoned} lines reckoned");
    assert!(reckoned > 150, "{reckoned}");
}

/// Every machine that ran says what a cycle needs, from pressures to the COP at home.
#[test]
fn no_step_of_a_running_machine_is_left_out() {
    for (name, answer) in answers() {
        for part in machines(&answer) {
            for what in [
                "evaporating",
                "condensing",
                "pressure ratio",
                "isentropic efficiency",
                "enthalpy of discharge",
                "refrigerant flow",
                "heat of the condenser",
                "work on the refrigerant",
                "compressor, frost-free",
                "Carnot limit",
                "heat delivered",
                "drawn from the source",
                "compressor",
                "COP at home",
            ] {
                assert!(
                    part["lines"]
                        .as_array()
                        .unwrap()
                        .iter()
                        .any(|line| line["what"] == what),
                    "{name}: {what}"
                );
            }
            // First law over the machine: heat is what was drawn and what the compressor put in, in the frost-free machine.
            let evaporator = figure(part, "heat of the evaporator");
            let work = figure(part, "work on the refrigerant");
            assert!((evaporator + work - figure(part, "heat of the condenser")).abs() < 1e-6);
            assert!(figure(part, "COP, frost-free, laboratory") < figure(part, "Carnot limit"));
            if figure(part, "heat delivered") > 0.0 {
                assert!(figure(part, "COP at home") < figure(part, "COP, frost-free, laboratory"));
            }
        }
    }
}

fn machines(answer: &Value) -> impl Iterator<Item = &Value> {
    let parts = answer["parts"].as_array().unwrap();
    parts.iter().filter(|part| part["states"].is_array())
}

fn figure(part: &Value, what: &str) -> f64 {
    let lines = part["lines"].as_array().unwrap();
    let line = lines.iter().find(|line| line["what"] == what);
    line.unwrap_or_else(|| panic!("{what}"))["value"]
        .as_f64()
        .unwrap()
}

/// CoolProp 8.0.0 at the evaporating, condensing, suction and liquid temperatures of the text: saturation pressures, enthalpies,
/// entropy and density of suction, the enthalpy of isentropic compression. Enthalpies are compared as differences, so no
/// reference state enters. Temperatures are written to 0.0001 K; equations of state are the same papers (seen against CoolProp 8.0.0: 1e-6, R410A 0.16 %).
#[test]
fn the_state_points_are_those_of_coolprop() {
    let path = Path::new(env!("CARGO_MANIFEST_DIR")).join("tests/reference/explain.csv");
    let mut reader = csv::Reader::from_path(path).unwrap();
    let rows: Vec<csv::StringRecord> = reader.records().map(Result::unwrap).collect();
    let mut compared = 0;
    for (name, answer) in answers() {
        for part in machines(&answer) {
            let title = part["title"].as_str().unwrap();
            let row = rows
                .iter()
                .find(|row| &row[0] == name && &row[1] == title)
                .unwrap_or_else(|| {
                    panic!("{name}, {title} is not in explain.csv: run tests/reference/explain.py")
                });
            let number = |column: usize| row[column].parse::<f64>().unwrap();
            let state = |i: usize, field: &str| part["states"][i][field].as_f64().unwrap();
            for (column, found) in [
                (3, figure(part, "evaporating")),
                (4, figure(part, "condensing")),
                (5, state(0, "temperature_c")),
                (6, state(2, "temperature_c")),
            ] {
                assert!(
                    (number(column) - found).abs() < 1e-3,
                    "{name}: {found}, not {}: run tests/reference/explain.py again",
                    number(column)
                );
            }
            let tolerance = if &row[2] == "R410A" { 3e-3 } else { 2e-5 };
            let near = |what: &str, found: f64, expected: f64| {
                assert!(
                    (found / expected - 1.0).abs() < tolerance,
                    "{name}, {what}: {found}, not {expected}"
                );
            };
            near("evaporating pressure", state(0, "pressure_kpa"), number(7));
            near("condensing pressure", state(1, "pressure_kpa"), number(8));
            near("suction density", state(0, "density_kg_per_m3"), number(9));
            let suction = state(0, "enthalpy_kj_per_kg");
            near(
                "suction less liquid",
                suction - state(2, "enthalpy_kj_per_kg"),
                number(10),
            );
            near(
                "isentropic work",
                figure(part, "isentropic enthalpy") - suction,
                number(11),
            );
            compared += 1;
        }
    }
    assert!(compared >= 6, "{compared}");
}
