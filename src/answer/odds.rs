//! The answer of `odds`: how sure the comparison is, what matters most, what to find out next.

use serde::Serialize;

use super::lever::{condition, unit};
use crate::problem::{Finding, Problems};
use crate::study::odds::{
    Chance, Quantiles, Sample, Sampler, Uncertain, chance_wrong, chance_wrong_knowing, shares,
};
use crate::study::{Case, Measure, Outcome, Pair, break_even};

/// How sure the comparison is.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct OddsAnswer {
    /// Samples drawn, each a year of every system.
    pub samples: usize,
    /// Independent blocks they were drawn in.
    pub blocks: usize,
    /// Seed they follow from.
    pub seed: u64,
    /// Currency of every amount, ISO 4217.
    pub currency: String,
    /// Every choice.
    pub choices: Vec<ChoiceOdds>,
    /// Chances of choices against each other, in the same samples.
    pub between: Vec<Between>,
    /// The choice with the greatest saving on the median, which what follows is about.
    pub about: String,
    /// What makes the spread of its saving, the most first.
    pub what_matters: Vec<Matters>,
    /// How often the system that is cheapest on the mean is not the cheapest.
    pub chance_wrong: f64,
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
    /// The value nearest to now at which the answer turns; absent where there is none.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub turns_at: Option<f64>,
    /// The same in words.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub turns_with: Option<String>,
    /// How often one would choose wrong if it were known.
    pub chance_wrong_known: f64,
    /// Where its range is from.
    pub from: String,
}

/// Makes the odds from whole blocks of samples.
///
/// # Errors
/// When a year cannot be run with a lever moved; no samples.
pub fn odds(
    case: &Case,
    outcomes: &[Outcome],
    sampler: &Sampler,
    blocks: &[Vec<Sample>],
    seed: u64,
) -> Result<Option<OddsAnswer>, Problems> {
    let sampled = Sampled(blocks);
    let label = |place: usize| case.contenders[place].system.label.clone();
    let mut choices = Vec::new();
    let mut best: Option<(usize, f64)> = None;
    for place in 1..case.contenders.len() {
        let saving = sampled.each(|sample| sample.systems[0].cost - sample.systems[place].cost);
        let Some(one) = choice(&label(place), place, &saving, &sampled, case) else {
            return Ok(None);
        };
        if best.is_none_or(|(_, median)| one.saving.p50 > median) {
            best = Some((place, one.saving.p50));
        }
        choices.push(one);
    }
    let Some((best, _)) = best else {
        return Ok(None);
    };
    let mut between = Vec::new();
    for one in 1..case.contenders.len() {
        for other in one + 1..case.contenders.len() {
            let saving =
                sampled.each(|sample| sample.systems[other].cost - sample.systems[one].cost);
            if let Some(chance) =
                Chance::of(saving.iter().map(Vec::as_slice), |saving| saving > 0.0)
            {
                between.push(Between {
                    label: label(one),
                    than: label(other),
                    chance_cheaper: chance.chance,
                    chance_error: chance.error.is_finite().then_some(chance.error),
                });
            }
        }
    }
    let costs: Vec<Vec<f64>> = blocks
        .iter()
        .flatten()
        .map(|sample| sample.systems.iter().map(|system| system.cost).collect())
        .collect();
    let wrong = chance_wrong(&costs).unwrap_or(0.0);
    let what_matters = match Pair::new(case, outcomes, best) {
        Some(pair) => matters(&pair, best, sampler.uncertain(), blocks, &costs)?,
        None => Vec::new(),
    };
    Ok(Some(OddsAnswer {
        samples: blocks.iter().map(Vec::len).sum(),
        blocks: blocks.len(),
        seed,
        currency: case.currency.code().to_owned(),
        choices,
        between,
        about: label(best),
        find_out: find_out(&what_matters, wrong),
        what_matters,
        chance_wrong: wrong,
        findings: Vec::new(),
    }))
}

/// Whole blocks of samples.
struct Sampled<'a>(&'a [Vec<Sample>]);

impl Sampled<'_> {
    /// A figure of each sample, block by block.
    fn each(&self, of: impl Fn(&Sample) -> f64) -> Vec<Vec<f64>> {
        self.0
            .iter()
            .map(|block| block.iter().map(&of).collect())
            .collect()
    }
}

fn choice(
    label: &str,
    place: usize,
    saving: &[Vec<f64>],
    sampled: &Sampled<'_>,
    case: &Case,
) -> Option<ChoiceOdds> {
    let quantiles = |values: Vec<Vec<f64>>| {
        let Quantiles { p10, p50, p90 } = Quantiles::of(&values.concat())?;
        Some(QuantilesAnswer { p10, p50, p90 })
    };
    let chance = Chance::of(saving.iter().map(Vec::as_slice), |saving| saving > 0.0)?;
    let spf = sampled.each(|sample| sample.systems[place].spf_h4.unwrap_or(f64::NAN));
    let has_spf = spf.iter().flatten().all(|spf| spf.is_finite());
    let saved = quantiles(saving.to_vec())?;
    Some(ChoiceOdds {
        label: label.to_owned(),
        cost: quantiles(sampled.each(|sample| sample.systems[place].cost))?,
        saving: saved,
        carbon_kg: quantiles(sampled.each(|sample| sample.systems[place].carbon_kg))?,
        spf_h4: if has_spf { quantiles(spf) } else { None },
        hours_backup: quantiles(sampled.each(|sample| sample.systems[place].hours_backup))?,
        min_indoor_c: quantiles(sampled.each(|sample| sample.systems[place].min_indoor_c))?,
        chance_cheaper: chance.chance,
        chance_error: chance.error.is_finite().then_some(chance.error),
        sentence: in_words(label, chance.chance, saved, case.currency.code()),
    })
}

fn in_words(label: &str, chance: f64, saving: QuantilesAnswer, code: &str) -> String {
    let amount = |value: f64| {
        let side = if value < 0.0 { "dearer" } else { "cheaper" };
        // Tens: the sample says no more.
        format!("{:.0} {code} {side}", (value / 10.0).round().abs() * 10.0)
    };
    format!(
        "{label}: {} of being cheaper than today; between {} and {} a year in eight cases of ten.",
        chance_in_words(chance),
        amount(saving.p10),
        amount(saving.p90)
    )
}

/// A chance as it is said: "about 2 chances in 3".
fn chance_in_words(chance: f64) -> String {
    const SAID: [(f64, &str); 9] = [
        (0.1, "about 1 chance in 10"),
        (0.2, "about 1 chance in 5"),
        (0.333, "about 1 chance in 3"),
        (0.4, "about 2 chances in 5"),
        (0.5, "about an even chance"),
        (0.6, "about 3 chances in 5"),
        (0.667, "about 2 chances in 3"),
        (0.8, "about 4 chances in 5"),
        (0.9, "about 9 chances in 10"),
    ];
    if chance < 0.03 {
        return "hardly a chance".to_owned();
    }
    if chance > 0.97 {
        return "nearly certain".to_owned();
    }
    let nearest = SAID
        .iter()
        .min_by(|a, b| (a.0 - chance).abs().total_cmp(&(b.0 - chance).abs()));
    nearest.map_or_else(String::new, |(_, words)| (*words).to_owned())
}

fn matters(
    pair: &Pair,
    place: usize,
    uncertain: &[Uncertain],
    blocks: &[Vec<Sample>],
    costs: &[Vec<f64>],
) -> Result<Vec<Matters>, Problems> {
    let x: Vec<Vec<f64>> = blocks
        .iter()
        .flatten()
        .map(|sample| sample.shares.clone())
        .collect();
    let y: Vec<f64> = blocks
        .iter()
        .flatten()
        .map(|sample| sample.systems[0].cost - sample.systems[place].cost)
        .collect();
    let Some(found) = shares(&x, &y) else {
        return Ok(Vec::new());
    };
    let mut all = Vec::new();
    for (i, (one, share)) in uncertain.iter().zip(&found).enumerate() {
        let turns = break_even(pair, one.lever, &[Measure::YearlyCost])?;
        let nearest = turns.first().and_then(|found| {
            let values = found.crossings.iter().map(|crossing| crossing.value);
            let nearest =
                values.min_by(|a, b| (a - found.now).abs().total_cmp(&(b - found.now).abs()))?;
            Some((nearest, condition(one.lever, found.now, nearest, pair)))
        });
        let known: Vec<f64> = x.iter().map(|row| row[i]).collect();
        all.push(Matters {
            lever: one.lever.name().to_owned(),
            unit: unit(one.lever, pair),
            share: share.share,
            lo: share.low,
            hi: share.high,
            turns_at: nearest.as_ref().map(|(value, _)| *value),
            turns_with: nearest.map(|(_, words)| words),
            chance_wrong_known: chance_wrong_knowing(&known, costs).unwrap_or(0.0),
            from: one.from.clone(),
        });
    }
    all.sort_by(|a, b| b.share.total_cmp(&a.share));
    Ok(all)
}

/// The lever worth its survey, reading or quote. Prices of years to come cannot be found out.
fn find_out(matters: &[Matters], wrong: f64) -> String {
    let open = matters.iter().filter(|one| !one.lever.ends_with("rate"));
    let best = open.min_by(|a, b| {
        a.chance_wrong_known
            .total_cmp(&b.chance_wrong_known)
            .then(b.share.total_cmp(&a.share))
    });
    let percent = |share: f64| format!("{:.0} %", share * 100.0);
    match best {
        Some(best) if wrong - best.chance_wrong_known >= 0.01 => format!(
            "Find out the {} first: it would lower the chance of choosing wrong from {} to {}.",
            best.lever,
            percent(wrong),
            percent(best.chance_wrong_known)
        ),
        Some(_) => format!(
            "The chance of choosing wrong is {}; no single survey or reading lowers it by a hundredth.",
            percent(wrong)
        ),
        None => format!("The chance of choosing wrong is {}.", percent(wrong)),
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn chances_are_said_without_false_decimals() {
        assert_eq!(chance_in_words(0.664), "about 2 chances in 3");
        assert_eq!(chance_in_words(0.01), "hardly a chance");
        assert_eq!(chance_in_words(0.52), "about an even chance");
        let saving = QuantilesAnswer {
            p10: -68.0,
            p50: 20.0,
            p90: 112.0,
        };
        assert_eq!(
            in_words("Air source", 0.67, saving, "GBP"),
            "Air source: about 2 chances in 3 of being cheaper than today; between 70 GBP dearer and 110 GBP cheaper a year in eight cases of ten."
        );
    }
}
