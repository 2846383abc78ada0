//! What makes the spread of a choice's saving, and what is worth finding out.

use super::Matters;
use super::make::Sampled;
use super::words::{found_by, plain};
use crate::answer::lever::{condition, unit};
use crate::problem::Problems;
use crate::study::odds::{Sample, Sampler, chance_wrong_knowing, shares};
use crate::study::{Lever, Measure, Pair, break_even};

/// What the year of the weather is called beside the levers.
const WEATHER_YEAR: &str = "year of the weather";

/// The levers of a choice, the one that makes most of the spread first; nothing where the sample is too small to tell.
pub(super) fn matters(
    pair: &Pair,
    place: usize,
    sampler: &Sampler,
    blocks: &[Vec<Sample>],
    costs: &[Vec<f64>],
) -> Result<Vec<Matters>, Problems> {
    let sampled = Sampled(blocks);
    let x = sampled.shares();
    let Some(found) = shares(&x, &sampled.saving(place).concat()) else {
        return Ok(Vec::new());
    };
    let known = |column: usize| -> f64 {
        let known: Vec<f64> = x.iter().map(|row| row[column]).collect();
        chance_wrong_knowing(&known, costs).unwrap_or(0.0)
    };
    let mut all = Vec::new();
    for (i, one) in sampler.uncertain().iter().enumerate() {
        let Some(range) = one.of_choice(place) else {
            continue;
        };
        let turns = break_even(pair, one.lever, &[Measure::YearlyCost])?;
        let nearest = turns.first().and_then(|found| {
            let values = found.crossings.iter().map(|crossing| crossing.value);
            let nearest =
                values.min_by(|a, b| (a - found.now).abs().total_cmp(&(b - found.now).abs()))?;
            Some((nearest, condition(one.lever, found.now, nearest, pair)))
        });
        let ends: Vec<_> = [range.at(0.1), range.at(0.9)]
            .into_iter()
            .flatten()
            .map(|end| vec![(one.lever, end)])
            .collect();
        let more = pair.at_each(&ends, |compared| compared.more(Measure::YearlyCost))?;
        let saving_at = |end: usize| more.get(end).copied().flatten().map(|more| -more);
        all.push(Matters {
            lever: one.lever.name().to_owned(),
            unit: unit(one.lever, pair),
            share: found[i].share,
            lo: found[i].low,
            hi: found[i].high,
            saving_at_low: saving_at(0),
            saving_at_high: saving_at(1),
            turns_at: nearest.as_ref().map(|(value, _)| *value),
            turns_with: nearest.map(|(_, words)| words),
            chance_wrong_known: known(i),
            found_by: found_by(one.lever).map(str::to_owned),
            from: one.from.clone(),
        });
    }
    if sampler.draws_years()
        && let (Some(found), column) = (found.last(), found.len() - 1)
    {
        all.push(Matters {
            lever: WEATHER_YEAR.to_owned(),
            unit: String::new(),
            share: found.share,
            lo: found.low,
            hi: found.high,
            saving_at_low: None,
            saving_at_high: None,
            turns_at: None,
            turns_with: None,
            chance_wrong_known: known(column),
            found_by: None,
            from: "the years of the weather file, each as likely as the other".to_owned(),
        });
    }
    all.sort_by(|a, b| b.share.total_cmp(&a.share));
    Ok(all)
}

/// The most important unknowns of a choice by their share of the spread of its saving, without a year run for it.
pub(super) fn most_important(
    place: usize,
    sampler: &Sampler,
    blocks: &[Vec<Sample>],
) -> Vec<super::Important> {
    let sampled = Sampled(blocks);
    let found = shares(&sampled.shares(), &sampled.saving(place).concat()).unwrap_or_default();
    let levers = sampler.uncertain().iter().map(|one| {
        one.of_choice(place)
            .map(|_| (one.lever.name().to_owned(), plain(one.lever).to_owned()))
    });
    let year = sampler
        .draws_years()
        .then(|| Some((WEATHER_YEAR.to_owned(), "the winter that comes".to_owned())));
    let mut all: Vec<super::Important> = levers
        .chain(year)
        .zip(found)
        .filter_map(|(named, share)| {
            let (lever, words) = named?;
            Some(super::Important {
                lever,
                words,
                share: share.share,
                lo: share.low,
                hi: share.high,
            })
        })
        .collect();
    all.sort_by(|a, b| b.share.total_cmp(&a.share));
    all
}

/// The lever worth its survey, reading or quote, in words.
pub(super) fn find_out(matters: &[Matters], wrong: f64) -> String {
    /// By how much a survey has to lower the chance of choosing wrong to be worth it: some hundred samples tell no less.
    const WORTH: f64 = 0.02;
    let of_100 = |share: f64| match (share * 100.0).round() {
        0.0 => "hardly any case".to_owned(),
        1.0 => "about 1 case of 100".to_owned(),
        cases => format!("about {cases:.0} cases of 100"),
    };
    let open = || {
        matters.iter().filter_map(|one| {
            let words = Lever::named(&one.lever).map(plain)?;
            Some((one, words, one.found_by.as_deref()?))
        })
    };
    let best = open().min_by(|(a, ..), (b, ..)| {
        a.chance_wrong_known
            .total_cmp(&b.chance_wrong_known)
            .then(b.share.total_cmp(&a.share))
    });
    let now = of_100(wrong);
    match (best, open().next()) {
        (Some((best, words, by)), _) if wrong - best.chance_wrong_known >= WORTH => format!(
            "Find out {words} first: {by}. Whoever chooses the cheapest of all as things stand is wrong in {now}; who knows that, in {}.",
            of_100(best.chance_wrong_known)
        ),
        (_, Some((_, words, by))) => format!(
            "Whoever chooses the cheapest of all as things stand is wrong in {now}, and nothing that can be found out lowers that much. To know the saving itself better, find out {words}: {by}."
        ),
        _ => format!(
            "Whoever chooses the cheapest of all as things stand is wrong in {now}, and no survey, reading or quote says more."
        ),
    }
}
