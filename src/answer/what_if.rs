//! What one would have to change: every uncertain quantity at its low and its high, and emitters for cooler or hotter water.

use serde::Serialize;

use super::lever::{condition, unit};
use crate::problem::Problems;
use crate::study::{Case, Lever, Measure, Outcome, Pair, emitter_sizes, swings};

/// What moves the saving of one choice.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct WhatIf {
    /// The choice.
    pub label: String,
    /// Cost and SPF over the design flow temperature; absent unless it is a heat pump.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub emitters: Option<Vec<EmitterAnswer>>,
    /// The yearly saving with each lever at its low and its high, the longest swing first.
    pub swings: Vec<SwingAnswer>,
}

/// The choice with emitters for one design flow temperature.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct EmitterAnswer {
    /// Design flow temperature.
    pub flow_c: f64,
    /// Output the emitters need (EN 442, ΔT 50 K), as a multiple of today's.
    pub times_today_output: f64,
    /// Whether the machine reaches that flow on the design day.
    pub reached: bool,
    /// Yearly cost; absent where the flow is not reached, like what follows.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub cost: Option<f64>,
    /// Today's yearly cost less it.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub saving: Option<f64>,
    /// SPF with all auxiliaries.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub spf_h4: Option<f64>,
    /// Hours short of heat.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub hours_short: Option<f64>,
}

/// One lever from low to high.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct SwingAnswer {
    /// The lever.
    pub lever: String,
    /// Its unit.
    pub unit: String,
    /// Low value.
    pub low: f64,
    /// High value.
    pub high: f64,
    /// Low value in words.
    pub low_words: String,
    /// High value in words.
    pub high_words: String,
    /// Yearly saving at the low value.
    pub saving_at_low: f64,
    /// Yearly saving at the high value.
    pub saving_at_high: f64,
    /// Where the spread is from.
    pub from: String,
}

/// What moves the saving of the choices at `places` of the case.
///
/// # Errors
/// A year that cannot be run or billed with a lever moved.
pub fn what_if(
    case: &Case,
    outcomes: &[Outcome],
    places: &[usize],
) -> Result<Vec<WhatIf>, Problems> {
    let pairs = places
        .iter()
        .filter_map(|&place| Pair::new(case, outcomes, place));
    pairs
        .map(|pair| {
            Ok(WhatIf {
                label: pair.choice().system.label.clone(),
                emitters: emitters(&pair)?,
                swings: moved(&pair)?,
            })
        })
        .collect()
}

/// The choice over the design flow temperature; nothing unless it is a heat pump.
pub(super) fn emitters(pair: &Pair) -> Result<Option<Vec<EmitterAnswer>>, Problems> {
    let sizes = emitter_sizes(pair)?;
    let answers = sizes.iter().map(|size| EmitterAnswer {
        flow_c: size.flow_c,
        times_today_output: size.times_today,
        reached: size.year.is_some(),
        cost: size.year.map(|year| year.cost),
        saving: size.year.map(|year| year.saving),
        spf_h4: size.year.and_then(|year| year.spf_h4),
        hours_short: size.year.map(|year| year.hours_short),
    });
    Ok((!sizes.is_empty()).then(|| answers.collect()))
}

/// Every uncertain quantity at its low and its high.
pub(super) fn moved(pair: &Pair) -> Result<Vec<SwingAnswer>, Problems> {
    let swings = swings(pair, Measure::YearlyCost)?;
    let answers = swings.iter().map(|swing| SwingAnswer {
        lever: swing.lever.name().to_owned(),
        unit: unit(swing.lever, pair),
        low: swing.spread.low,
        high: swing.spread.high,
        low_words: condition(swing.lever, swing.now, swing.spread.low, pair),
        high_words: condition(swing.lever, swing.now, swing.spread.high, pair)
            + at_its_limit(swing.lever, swing.now, swing.spread.high),
        saving_at_low: swing.at_low,
        saving_at_high: swing.at_high,
        from: swing.spread.from.to_owned(),
    });
    Ok(answers.collect())
}

/// Why the upper end of a swing is where the lever stands: hotter water the machine does not make.
fn at_its_limit(lever: Lever, now: f64, high: f64) -> &'static str {
    /// Below this the two are written alike, K.
    const ALIKE_K: f64 = 0.05;
    if lever == Lever::FlowTemperature && (high - now).abs() < ALIKE_K {
        ": the machine makes no hotter"
    } else {
        ""
    }
}
