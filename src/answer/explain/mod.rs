//! One hour from weather to money, every line with the name of its formula and its inputs.
//!
//! What a line says after its last `=` is arithmetic in figures that stand above it or in the text, so that a pocket calculator and a
//! property table are enough to follow it. A line without `=` is given, looked up, or decided by a rule that it names.

mod home;
mod machine;
mod money;

use chrono::{SecondsFormat, TimeZone as _};
use serde::Serialize;

use super::cycle::StateAnswer;
use crate::heatpump::cycle::Cycle;
use crate::problem::{Finding, Severity};
use crate::study::{Case, Contender, Traced};

/// One hour of one system, explained.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct Explanation {
    /// The system.
    pub choice: String,
    /// Beginning of the hour in UTC.
    pub time_utc: String,
    /// Beginning of the hour on the wall clock.
    pub time_local: String,
    /// The parts, in the order in which they follow from each other.
    pub parts: Vec<Part>,
    /// What no real machine would stand in this hour.
    #[serde(skip_serializing_if = "Vec::is_empty")]
    pub findings: Vec<Finding>,
}

/// A part of an explanation.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct Part {
    /// What it is about.
    pub title: String,
    /// Its lines.
    pub lines: Vec<Line>,
    /// State points of the refrigerant, where there is a cycle.
    #[serde(skip_serializing_if = "Vec::is_empty")]
    pub states: Vec<StateAnswer>,
}

/// A figure and where it comes from.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct Line {
    /// What it is.
    pub what: String,
    /// How much.
    pub value: f64,
    /// Its unit.
    pub unit: &'static str,
    /// The formula by name, and after `=` its inputs as arithmetic; empty for what is given.
    pub how: String,
}

/// Collects the lines of a part.
struct Lines(Vec<Line>);

impl Lines {
    fn new() -> Self {
        Self(Vec::new())
    }

    fn add(&mut self, what: &str, value: f64, unit: &'static str, how: impl Into<String>) {
        self.0.push(Line {
            what: what.to_owned(),
            value,
            unit,
            how: how.into(),
        });
    }

    fn given(&mut self, what: &str, value: Option<f64>, unit: &'static str, from: &str) {
        if let Some(value) = value {
            self.add(what, value, unit, from);
        }
    }

    fn part(self, title: impl Into<String>) -> Part {
        Part {
            title: title.into(),
            lines: self.0,
            states: Vec::new(),
        }
    }
}

/// A number to five figures, to be read into a calculator; a negative one in brackets.
fn n(value: f64) -> String {
    let size = value.abs();
    let digits = match size {
        1000.0.. => 1,
        100.0.. => 2,
        10.0.. => 3,
        1.0.. => 4,
        0.1.. => 5,
        0.0 => 0,
        _ => 7,
    };
    if value < 0.0 {
        format!("(−{size:.digits$})")
    } else {
        format!("{size:.digits$}")
    }
}

/// Summands of a sum, what is 0 left out.
fn sum(parts: &[f64]) -> String {
    let parts: Vec<_> = parts
        .iter()
        .filter(|part| **part != 0.0)
        .map(|part| n(*part))
        .collect();
    if parts.is_empty() {
        "0".to_owned()
    } else {
        parts.join(" + ")
    }
}

impl Explanation {
    /// Explains a traced hour.
    pub fn of(case: &Case, contender: &Contender, traced: &Traced) -> Self {
        let utc = case.site.axis.at(traced.hour);
        let local = case.time_zone.from_utc_datetime(&utc.naive_utc());
        let mut parts = vec![home::weather(case, traced), home::rooms(contender, traced)];
        parts.extend(home::hot_water(
            &contender.system.home,
            usize::from(case.site.month0[traced.hour]),
            traced,
        ));
        if let Some(machine) = contender.system.heating.machine() {
            parts.extend(
                traced
                    .duties
                    .iter()
                    .map(|duty| machine::duty(&contender.system.home, machine, traced, duty)),
            );
            parts.push(machine::beside(machine, traced));
        }
        if contender.system.heating.boiler().is_some() {
            parts.push(money::boiler(&traced.row));
        }
        parts.push(home::after(&contender.system.home, traced));
        parts.push(money::cost(case, contender, traced));
        Self {
            choice: contender.system.label.clone(),
            time_utc: utc.to_rfc3339_opts(SecondsFormat::Secs, true),
            time_local: local.format("%Y-%m-%dT%H:%M%:z").to_string(),
            parts,
            findings: not_stood(traced),
        }
    }
}

/// Warnings of the cycles that the hour was run with; each once.
fn not_stood(traced: &Traced) -> Vec<Finding> {
    let cycles = traced.duties.iter().filter_map(|duty| duty.cycle.as_ref());
    let mut found = Vec::new();
    for finding in cycles.flat_map(Cycle::findings) {
        if finding.severity == Severity::Warning && !found.contains(&finding) {
            found.push(finding);
        }
    }
    found
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn numbers_are_those_of_a_calculator() {
        assert_eq!(n(1892.34), "1892.3");
        assert_eq!(n(-4.9), "(−4.9000)");
        assert_eq!(n(0.013_42), "0.0134200");
        assert_eq!(n(0.0), "0");
        assert_eq!(sum(&[0.0, 1.5, 20.0]), "1.5000 + 20.000");
    }
}
