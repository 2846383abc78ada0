//! What shifting saves, and what it costs in performance and comfort.

use std::sync::Arc;

use super::case::{Case, Contender};
use super::outcome::Outcome;
use crate::problem::Problems;
use crate::year::Ledger;

/// Rooms this much below the household's set point are counted, K. A choice of ours: half of what people notice.
const COOL_K: f64 = 0.5;

/// One way of running a system, by what shifting moves.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Run {
    /// Cost of a mean year.
    pub cost: f64,
    /// Electricity of the heating in a mean year, kWh.
    pub electricity_kwh: f64,
    /// Seasonal performance factor with all auxiliaries.
    pub spf_h4: Option<f64>,
    /// Mean indoor temperature over the hours in which the home is heated without shifting, °C.
    pub mean_indoor_c: f64,
    /// Lowest indoor temperature, °C.
    pub min_indoor_c: f64,
    /// Hours of a mean year in which rooms end more than 0.5 K below what the household asked for.
    pub hours_cool: f64,
}

/// A system with and without shifting.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Shifted {
    /// As its plan has it.
    pub with: Run,
    /// With the plan as it was before shifting.
    pub without: Run,
}

/// Compares a system that shifts with itself without shifting; nothing where it does not shift.
///
/// # Errors
/// When a bill cannot be made.
pub fn against_unshifted(case: &Case, contender: &Contender) -> Result<Option<Shifted>, Problems> {
    let Some(plan) = &contender.unshifted else {
        return Ok(None);
    };
    let unshifted = Contender {
        plan: Arc::clone(plan),
        unshifted: None,
        shift_rule: None,
        ..contender.clone()
    };
    let hours = case.site.outdoor_c.len();
    let run = |contender: &Contender| {
        let mut ledger = Ledger::with_capacity(hours);
        let outcome = case.run_one(contender, Some(&mut ledger))?;
        Ok::<_, Problems>((outcome, ledger))
    };
    let (without, as_asked) = run(&unshifted)?;
    let (with, moved) = run(contender)?;
    let figures = |outcome: &Outcome, ledger: &Ledger| {
        let heated = ledger
            .rows
            .iter()
            .zip(&as_asked.rows)
            .filter(|(_, asked)| asked.space_heat_kwh() > 0.0);
        let (count, sum) = heated.fold((0.0_f64, 0.0), |(count, sum), (row, _)| {
            (count + 1.0, sum + row.indoor_c)
        });
        let cool = ledger
            .rows
            .iter()
            .zip(plan.set_point_c.iter())
            .filter(|(row, asked_c)| row.indoor_c < **asked_c - COOL_K)
            .count();
        let sums = outcome.mean_sums();
        Run {
            cost: outcome.costs.total,
            electricity_kwh: sums.electricity_kwh(),
            spf_h4: sums.spf_h4(),
            mean_indoor_c: sum / count.max(1.0),
            min_indoor_c: ledger
                .rows
                .iter()
                .map(|row| row.indoor_c)
                .fold(f64::INFINITY, f64::min),
            hours_cool: cool as f64 / outcome.years.len() as f64,
        }
    };
    Ok(Some(Shifted {
        with: figures(&with, &moved),
        without: figures(&without, &as_asked),
    }))
}
