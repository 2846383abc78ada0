//! From whole blocks of samples to the odds.

use super::matters::{find_out, matters};
use super::words::{chance_said, in_words, not_drawn};
use super::{Between, ChoiceOdds, OddsAnswer, QuantilesAnswer, UncertainAnswer};
use crate::answer::comfort::leaves_cold;
use crate::answer::lever::unit;
use crate::problem::{Finding, Problems, Severity};
use crate::study::odds::{Chance, Quantiles, Sample, Sampler, chance_wrong};
use crate::study::{Case, Outcome, Pair};

/// What was asked of the sampling and how it ended.
#[derive(Debug, Clone, Copy, Default, PartialEq)]
pub struct Wish {
    /// Standard error that every chance was to have, as a fraction.
    pub precision: Option<f64>,
    /// Whether somebody stopped it before it was done.
    pub interrupted: bool,
}

/// Makes the odds from whole blocks of samples; nothing without samples or choices.
///
/// # Errors
/// When a year cannot be run with a lever moved.
pub fn odds(
    case: &Case,
    outcomes: &[Outcome],
    sampler: &Sampler,
    blocks: &[Vec<Sample>],
    wish: Wish,
) -> Result<Option<OddsAnswer>, Problems> {
    let sampled = Sampled(blocks);
    let label = |place: usize| case.contenders[place].system.label.clone();
    let choices: Option<Vec<ChoiceOdds>> = (1..case.contenders.len())
        .map(|place| choice(&label(place), place, &sampled, case, outcomes.get(place)?))
        .collect();
    let Some(choices) = choices else {
        return Ok(None);
    };
    let best = (1..case.contenders.len()).max_by(|&a, &b| {
        let warm = |place: usize| choices[place - 1].leaves_cold.is_none();
        let saving = |place: usize| choices[place - 1].saving.p50;
        let by_saving = saving(a).total_cmp(&saving(b));
        warm(a).cmp(&warm(b)).then(by_saving)
    });
    let Some(best) = best else {
        return Ok(None);
    };
    let mut between = Vec::new();
    for one in 1..case.contenders.len() {
        for other in one + 1..case.contenders.len() {
            if let Some(chance) = sampled.chance_cheaper(one, other) {
                between.push(Between {
                    label: label(one),
                    than: label(other),
                    chance_cheaper: chance.chance,
                    chance_error: chance.error,
                    chance_low: chance.low,
                    chance_high: chance.high,
                    chance_said: chance_said(&chance),
                });
            }
        }
    }
    // What leaves the home cold is nobody's cheapest.
    let costs = sampled.costs(|place| place == 0 || choices[place - 1].leaves_cold.is_none());
    let wrong = chance_wrong(&costs).unwrap_or(0.0);
    let pair = Pair::new(case, outcomes, best);
    let what_matters = match &pair {
        Some(pair) => matters(pair, best, sampler, blocks, &costs)?,
        None => Vec::new(),
    };
    let uncertain = pair.iter().flat_map(|pair| {
        sampler.uncertain().iter().filter_map(|one| {
            let range = one.of_choice(best)?;
            Some(UncertainAnswer {
                lever: one.lever.name().to_owned(),
                unit: unit(one.lever, pair),
                p10: range.at(0.1)?,
                p50: range.at(0.5)?,
                p90: range.at(0.9)?,
                from: one.from.clone(),
            })
        })
    });
    let samples: usize = blocks.iter().map(Vec::len).sum();
    Ok(Some(OddsAnswer {
        samples,
        blocks: blocks.len(),
        seed: sampler.seed(),
        stopped: stopped(&choices, wish).to_owned(),
        price_correlation: sampler.price_correlation(),
        currency: case.currency.code().to_owned(),
        uncertain: uncertain.collect(),
        findings: too_few(&choices, samples, wish).into_iter().collect(),
        choices,
        between,
        about: label(best),
        not_drawn: not_drawn(sampler.draws_years()),
        find_out: find_out(&what_matters, wrong),
        what_matters,
        chance_wrong: wrong,
    }))
}

/// The greatest standard error of the choices' chances.
fn worst(choices: &[ChoiceOdds]) -> f64 {
    let errors = choices.iter().map(|choice| choice.chance_error);
    errors
        .map(|error| error.unwrap_or(f64::INFINITY))
        .fold(0.0, f64::max)
}

fn stopped(choices: &[ChoiceOdds], wish: Wish) -> &'static str {
    match wish.precision {
        _ if wish.interrupted => "interrupted",
        Some(precision) if worst(choices) <= precision => "the precision asked for is reached",
        _ => "all that were asked for",
    }
}

/// Says that the samples do not give the precision asked for, and how many would.
fn too_few(choices: &[ChoiceOdds], samples: usize, wish: Wish) -> Option<Finding> {
    let precision = wish.precision?;
    let worst = worst(choices);
    if worst <= precision {
        return None;
    }
    // The error falls with the square root of the number; an infinite one has no such number.
    let needed = samples as f64 * (worst / precision).powi(2);
    let remedy = if needed.is_finite() {
        format!(
            "about {:.0} samples would give it",
            (needed / 100.0).ceil() * 100.0
        )
    } else {
        "several blocks are needed to tell it".to_owned()
    };
    Some(Finding {
        severity: Severity::Warning,
        file: None,
        line: None,
        what: format!(
            "a chance known to {} % was asked for; {samples} samples give {}",
            super::super::short(precision * 100.0),
            if worst.is_finite() {
                format!("{} %", super::super::short(worst * 100.0))
            } else {
                "no error".to_owned()
            }
        ),
        done: remedy,
    })
}

/// Whole blocks of samples.
pub(super) struct Sampled<'a>(pub &'a [Vec<Sample>]);

impl Sampled<'_> {
    /// A figure of each sample, block by block.
    pub fn each(&self, of: impl Fn(&Sample) -> f64) -> Vec<Vec<f64>> {
        self.0
            .iter()
            .map(|block| block.iter().map(&of).collect())
            .collect()
    }

    /// What a system saves against today's, block by block.
    pub fn saving(&self, place: usize) -> Vec<Vec<f64>> {
        self.each(|sample| sample.systems[0].cost - sample.systems[place].cost)
    }

    /// Chance that one system is cheaper than another in the same sample.
    pub fn chance_cheaper(&self, one: usize, other: usize) -> Option<Chance> {
        let saving = self.each(|sample| sample.systems[other].cost - sample.systems[one].cost);
        Chance::of(saving.iter().map(Vec::as_slice), |saving| saving > 0.0)
    }

    /// The cost of every system that counts, a row a sample.
    pub fn costs(&self, counts: impl Fn(usize) -> bool) -> Vec<Vec<f64>> {
        let samples = self.0.iter().flatten();
        samples
            .map(|sample| {
                let systems = sample.systems.iter().enumerate();
                systems
                    .filter(|(place, _)| counts(*place))
                    .map(|(_, system)| system.cost)
                    .collect()
            })
            .collect()
    }

    /// The shares drawn, a row a sample.
    pub fn shares(&self) -> Vec<Vec<f64>> {
        let samples = self.0.iter().flatten();
        samples.map(|sample| sample.shares.clone()).collect()
    }
}

/// Quantiles of blocks with their errors; nothing without samples.
pub(super) fn quantiles(blocks: &[Vec<f64>]) -> Option<QuantilesAnswer> {
    let Quantiles { p10, p50, p90 } = Quantiles::of(&blocks.concat())?;
    let errors = Quantiles::errors(blocks);
    Some(QuantilesAnswer {
        p10,
        p50,
        p90,
        p10_error: errors.map(|errors| errors.p10),
        p50_error: errors.map(|errors| errors.p50),
        p90_error: errors.map(|errors| errors.p90),
    })
}

fn choice(
    label: &str,
    place: usize,
    sampled: &Sampled<'_>,
    case: &Case,
    outcome: &Outcome,
) -> Option<ChoiceOdds> {
    let cold = leaves_cold(&case.contenders[place], outcome);
    let chance = sampled.chance_cheaper(place, 0)?;
    let spf = sampled.each(|sample| sample.systems[place].spf_h4.unwrap_or(f64::NAN));
    let has_spf = spf.iter().flatten().all(|spf| spf.is_finite());
    let saving = quantiles(&sampled.saving(place))?;
    Some(ChoiceOdds {
        label: label.to_owned(),
        cost: quantiles(&sampled.each(|sample| sample.systems[place].cost))?,
        saving,
        carbon_kg: quantiles(&sampled.each(|sample| sample.systems[place].carbon_kg))?,
        spf_h4: if has_spf { quantiles(&spf) } else { None },
        hours_backup: quantiles(&sampled.each(|sample| sample.systems[place].hours_backup))?,
        min_indoor_c: quantiles(&sampled.each(|sample| sample.systems[place].min_indoor_c))?,
        chance_cheaper: chance.chance,
        chance_error: chance.error,
        chance_low: chance.low,
        chance_high: chance.high,
        chance_said: chance_said(&chance),
        sentence: in_words(
            (label, cold.as_deref()),
            chance.chance,
            saving,
            case.currency.code(),
        ),
        leaves_cold: cold,
    })
}
