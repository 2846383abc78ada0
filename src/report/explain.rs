//! One hour as a worked example.

use std::fmt::Write as _;

use super::table::plain_table;
use crate::answer::explain::{Explanation, Line, Part};

/// The explanation as text.
pub fn explain_text(explanation: &Explanation) -> String {
    let mut text = format!(
        "{}: the hour that begins {} ({})\n",
        explanation.choice, explanation.time_local, explanation.time_utc
    );
    for part in &explanation.parts {
        // Writing to a String cannot fail.
        let _ = write!(text, "\n{}\n{}\n", part.title, figures(part));
        if !part.states.is_empty() {
            let _ = write!(text, "\n{}\n", states(part));
        }
    }
    text
}

fn figures(part: &Part) -> String {
    let width = part
        .lines
        .iter()
        .map(|line| line.what.chars().count())
        .max()
        .unwrap_or(0);
    let rows: Vec<_> = part.lines.iter().map(|line| figure(line, width)).collect();
    rows.join("\n")
}

fn figure(line: &Line, width: usize) -> String {
    let Line {
        what,
        value,
        unit,
        how,
    } = line;
    let number = written(*value);
    let row = format!("  {what:width$}  {number:>9} {unit:7} {how}");
    row.trim_end().to_owned()
}

/// A number to five figures, as a pocket calculator would be read.
fn written(value: f64) -> String {
    let size = value.abs();
    let digits = if size >= 1000.0 {
        0
    } else if size >= 100.0 {
        1
    } else if size >= 10.0 {
        2
    } else if size >= 0.1 || size == 0.0 {
        4
    } else {
        5
    };
    format!("{value:.digits$}")
}

fn states(part: &Part) -> String {
    let rows = part.states.iter().map(|state| {
        vec![
            format!("  {}", state.point),
            format!("{:.2}", state.temperature_c),
            format!("{:.1}", state.pressure_kpa),
            format!("{:.2}", state.enthalpy_kj_per_kg),
            format!("{:.4}", state.entropy_kj_per_kg_k),
            format!("{:.3}", state.density_kg_per_m3),
            state
                .quality
                .map_or_else(String::new, |quality| format!("{quality:.3}")),
        ]
    });
    plain_table(
        [
            "  state point",
            "°C",
            "kPa",
            "kJ/kg",
            "kJ/kgK",
            "kg/m³",
            "vapour share",
        ],
        rows,
    )
}
