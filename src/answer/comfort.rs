//! Whether a system keeps the home warm and its water hot. What does not is never called cheaper without saying so.

use super::SystemAnswer;
use crate::home::{FROST_C, Pattern};
use crate::study::{Contender, Outcome, design_point};

// The bounds below are choices of ours: what a household would notice and complain of.

/// Hours a year more than 1 K below the set point that are let pass: one day.
const COLD_HOURS: f64 = 24.0;
/// Rooms may fall this far below the lowest set point of the pattern, K.
const COLD_K: f64 = 3.0;
/// Share of the design heat load that heater and backup must carry together.
const LEAST_CARRIED: f64 = 0.95;
/// Hours a year of hot water that is too cool that are let pass: one day.
const COOL_TAP_HOURS: f64 = 24.0;

/// What a system leaves cold, in words that follow "No:"; nothing where rooms and water are kept warm.
pub(super) fn leaves_cold(contender: &Contender, outcome: &Outcome) -> Option<String> {
    let hours_short = outcome.mean(|year| f64::from(year.hours_short));
    let hours_cool_taps = outcome.mean(|year| f64::from(year.hours_water_short));
    let years = outcome.years.iter();
    let coldest_c = years
        .map(|year| year.min_indoor_c)
        .fold(f64::INFINITY, f64::min);
    let design = design_point(
        &contender.system,
        contender.indoor_c,
        contender.design_outdoor_c,
        contender.design_load_kw,
        contender.aged.map(|aged| aged.memory).unwrap_or_default(),
    );
    let carried_kw = design.carried_with_backup_kw();
    let mut said = Vec::new();
    if hours_short > COLD_HOURS || coldest_c < lowest_asked_c(&contender.pattern) - COLD_K {
        said.push(format!(
            "it does not keep the home warm ({hours_short:.0} hours a year more than 1 K below the set point, down to {coldest_c:.1} °C)"
        ));
    } else if carried_kw < LEAST_CARRIED * design.load_kw {
        said.push(format!(
            "it would not keep the home warm on the design day ({carried_kw:.1} of {:.1} kW at {:.1} °C)",
            design.load_kw, design.outdoor_c
        ));
    }
    if hours_cool_taps > COOL_TAP_HOURS {
        said.push(format!(
            "its hot water comes too cool ({hours_cool_taps:.0} hours a year)"
        ));
    }
    (!said.is_empty()).then(|| said.join(", and "))
}

/// The lowest temperature that the pattern asks for in any hour of the year, °C.
fn lowest_asked_c(pattern: &Pattern) -> f64 {
    let mut lowest_c = pattern.set_back_c();
    if !pattern.holidays.is_empty() {
        lowest_c = lowest_c.min(pattern.holiday_c);
    }
    if pattern.season.is_some() {
        lowest_c = lowest_c.min(FROST_C);
    }
    lowest_c
}

impl SystemAnswer {
    /// What it is called where it stands beside others: marked when it leaves rooms or water cold.
    pub fn name(&self) -> String {
        named(&self.label, &self.leaves_cold)
    }
}

/// A label, marked when what it names leaves rooms or water cold.
pub(super) fn named(label: &str, leaves_cold: &Option<String>) -> String {
    let mark = match leaves_cold {
        Some(_) => " (too cold)",
        None => "",
    };
    format!("{label}{mark}")
}
