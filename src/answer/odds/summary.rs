//! The odds in brief, for the estimate: no year is run but those of the samples.

use serde::Serialize;

use super::QuantilesAnswer;
use super::make::{Sampled, quantiles};
use super::matters::most_important;
use super::words::{chance_in_words, chance_said, in_words, is_about_the_same, not_drawn};
use crate::answer::comfort::leaves_cold;
use crate::study::odds::{Sample, Sampler};
use crate::study::{Case, Outcome};

/// How many unknowns are told of a choice.
const TOLD: usize = 2;

/// The odds in brief.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct OddsSummary {
    /// Samples drawn, each a year of every system.
    pub samples: usize,
    /// Independent blocks they were drawn in.
    pub blocks: usize,
    /// Seed they follow from.
    pub seed: u64,
    /// What the samples do not draw, in words.
    pub not_drawn: String,
    /// Every choice.
    pub choices: Vec<ChoiceSummary>,
}

/// The odds of one choice in brief.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct ChoiceSummary {
    /// The choice.
    pub label: String,
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
    /// Today's yearly cost less its own, in the same sample.
    pub saving: QuantilesAnswer,
    /// The chance in words: "about 2 chances in 3 of being cheaper".
    pub chance_words: String,
    /// Whether the chance says that neither is the cheaper.
    pub about_the_same: bool,
    /// The two unknowns that make most of the spread of the saving, the greater first.
    pub most_important: Vec<Important>,
    /// Chance and saving as a sentence.
    pub sentence: String,
    /// The unknowns as a sentence; absent where the sample does not tell.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub depends_on: Option<String>,
}

/// An unknown and its share of the spread.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct Important {
    /// The lever.
    pub lever: String,
    /// The same as a family would say it.
    pub words: String,
    /// Share of the spread of the saving that knowing it would take away.
    pub share: f64,
    /// Lower limit of that share.
    pub lo: f64,
    /// Upper limit.
    pub hi: f64,
}

/// The odds in brief from whole blocks of samples; nothing without samples.
pub fn summary(
    case: &Case,
    outcomes: &[Outcome],
    sampler: &Sampler,
    blocks: &[Vec<Sample>],
) -> Option<OddsSummary> {
    let sampled = Sampled(blocks);
    let choice = |place: usize| {
        let label = &case.contenders[place].system.label;
        let cold = leaves_cold(&case.contenders[place], outcomes.get(place)?);
        let chance = sampled.chance_cheaper(place, 0)?;
        let saving = quantiles(&sampled.saving(place))?;
        let mut most_important = most_important(place, sampler, blocks);
        most_important.truncate(TOLD);
        let named: Vec<&str> = most_important
            .iter()
            .map(|one| one.words.as_str())
            .collect();
        let depends_on =
            (!named.is_empty()).then(|| format!("It depends most on {}.", named.join(" and on ")));
        Some(ChoiceSummary {
            label: label.clone(),
            chance_cheaper: chance.chance,
            chance_error: chance.error,
            chance_low: chance.low,
            chance_high: chance.high,
            chance_said: chance_said(&chance),
            saving,
            chance_words: chance_in_words(chance.chance),
            about_the_same: is_about_the_same(chance.chance),
            sentence: in_words(
                (label, cold.as_deref()),
                chance.chance,
                saving,
                case.currency.code(),
            ),
            leaves_cold: cold,
            most_important,
            depends_on,
        })
    };
    let choices: Option<Vec<_>> = (1..case.contenders.len()).map(choice).collect();
    Some(OddsSummary {
        samples: blocks.iter().map(Vec::len).sum(),
        blocks: blocks.len(),
        seed: sampler.seed(),
        not_drawn: not_drawn(sampler.draws_years()),
        choices: choices?,
    })
}
