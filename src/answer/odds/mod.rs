//! The answer of `odds`: how sure the comparison is, what matters most, what to find out next.

mod make;
mod matters;
mod summary;
mod words;

use serde::Serialize;

use crate::problem::Finding;

pub use make::{Wish, odds};
pub use summary::{ChoiceSummary, Important, OddsSummary, summary};
pub use words::chance_said;

/// How sure the comparison is.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct OddsAnswer {
    /// Samples drawn, each a year of every system.
    pub samples: usize,
    /// Independent blocks they were drawn in.
    pub blocks: usize,
    /// Seed they follow from.
    pub seed: u64,
    /// Why no more were drawn: "all that were asked for", "the precision asked for is reached" or "interrupted".
    pub stopped: String,
    /// Correlation of the price of electricity with that of gas.
    pub price_correlation: f64,
    /// Currency of every amount, ISO 4217.
    pub currency: String,
    /// Every choice.
    pub choices: Vec<ChoiceOdds>,
    /// Chances of choices against each other, in the same samples.
    pub between: Vec<Between>,
    /// The choice with the greatest saving on the median, of those that keep rooms and water warm where one does; what follows is
    /// about it.
    pub about: String,
    /// What makes the spread of its saving, the most first.
    pub what_matters: Vec<Matters>,
    /// How often the system that is cheapest on the mean is not the cheapest.
    pub chance_wrong: f64,
    /// What was taken as uncertain, as the choice that `about` names has it.
    pub uncertain: Vec<UncertainAnswer>,
    /// What the samples do not draw, in words.
    pub not_drawn: String,
    /// What to find out first, in words.
    pub find_out: String,
    /// What was odd and what was done about it.
    pub findings: Vec<Finding>,
}

/// The odds of one choice.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct ChoiceOdds {
    /// The choice.
    pub label: String,
    /// Yearly cost.
    pub cost: QuantilesAnswer,
    /// Today's yearly cost less it, in the same sample.
    pub saving: QuantilesAnswer,
    /// Carbon of a year.
    pub carbon_kg: QuantilesAnswer,
    /// SPF with all auxiliaries; absent unless it is a heat pump.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub spf_h4: Option<QuantilesAnswer>,
    /// Hours with backup or immersion heater.
    pub hours_backup: QuantilesAnswer,
    /// Lowest indoor temperature.
    pub min_indoor_c: QuantilesAnswer,
    /// Chance that it is cheaper than today's system.
    pub chance_cheaper: f64,
    /// Standard error of that chance; absent with a single block.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub chance_error: Option<f64>,
    /// Why it is no fair answer however likely it is to be cheaper; absent where rooms and water are kept warm.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub leaves_cold: Option<String>,
    /// Limits that hold the chance in 95 cases of 100, by the samples drawn.
    pub chance_low: f64,
    /// The upper one.
    pub chance_high: f64,
    /// The chance as far as the samples tell it, %: "48 ± 4", "more than 96" where all samples agree, "32 to 64" from a single block.
    pub chance_said: String,
    /// The same as a sentence.
    pub sentence: String,
}

/// One in ten lies below `p10`, half below `p50`, nine in ten below `p90`.
#[derive(Debug, Clone, Copy, PartialEq, Serialize)]
pub struct QuantilesAnswer {
    /// 10 %.
    pub p10: f64,
    /// 50 %.
    pub p50: f64,
    /// 90 %.
    pub p90: f64,
    /// Standard error of `p10`; absent with a single block.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub p10_error: Option<f64>,
    /// Standard error of `p50`.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub p50_error: Option<f64>,
    /// Standard error of `p90`.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub p90_error: Option<f64>,
}

/// A lever that is not known for certain.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct UncertainAnswer {
    /// The lever.
    pub lever: String,
    /// Its unit.
    pub unit: String,
    /// One in ten lies below.
    pub p10: f64,
    /// Half lies below.
    pub p50: f64,
    /// Nine in ten lie below.
    pub p90: f64,
    /// Where its range is from; "declared" where the brief gives it.
    pub from: String,
}

/// One choice against another.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct Between {
    /// The one.
    pub label: String,
    /// The other.
    pub than: String,
    /// Chance that the one is cheaper.
    pub chance_cheaper: f64,
    /// Standard error of that chance; absent with a single block.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub chance_error: Option<f64>,
    /// Limits that hold the chance in 95 cases of 100, by the samples drawn.
    pub chance_low: f64,
    /// The upper one.
    pub chance_high: f64,
    /// The chance as far as the samples tell it, %: "48 ± 4", "more than 96" where all samples agree, "32 to 64" from a single block.
    pub chance_said: String,
}

/// What one lever does to the spread.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct Matters {
    /// The lever.
    pub lever: String,
    /// Its unit.
    pub unit: String,
    /// Share of the spread of the saving that knowing it would take away.
    pub share: f64,
    /// Lower limit of that share.
    pub lo: f64,
    /// Upper limit.
    pub hi: f64,
    /// Saving with it at its low end (P10), everything else as the brief has it; absent for the year of the weather.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub saving_at_low: Option<f64>,
    /// The same at its high end (P90).
    #[serde(skip_serializing_if = "Option::is_none")]
    pub saving_at_high: Option<f64>,
    /// The value nearest to now at which the answer turns; absent where there is none.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub turns_at: Option<f64>,
    /// The same in words.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub turns_with: Option<String>,
    /// How often one would choose wrong if it were known.
    pub chance_wrong_known: f64,
    /// The survey, reading or quote that finds it out; absent where nothing can.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub found_by: Option<String>,
    /// Where its range is from.
    pub from: String,
}
