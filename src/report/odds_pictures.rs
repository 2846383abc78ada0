//! The pictures of the odds, and every sample as a row.

use super::pictures::{Drawn, drawn};
use crate::answer::odds::{OddsAnswer, chance_said};
use crate::chart::{
    ChartError, ChoiceSaving, CostOdds, CostSpread, SavingOdds, SpreadShares, UnknownShare,
    cost_odds, saving_odds, spread_shares,
};
use crate::locale::Locale;
use crate::study::Case;
use crate::study::odds::{Chance, Quantiles, Sample, Sampler};

/// Saving of every choice and cost of every system in all samples, of those in `shown` (places in the case).
///
/// # Errors
/// When a picture cannot be drawn.
pub fn odds_pictures(
    case: &Case,
    blocks: &[Vec<Sample>],
    shown: &[usize],
    locale: &Locale,
) -> Result<Vec<Drawn>, ChartError> {
    let marks = &locale.marks;
    let currency = || case.currency.code().to_owned();
    let systems = || {
        let all = case.contenders.iter().enumerate();
        all.filter(|(place, _)| shown.contains(place))
    };
    let choices = systems()
        .filter(|(place, _)| *place > 0)
        .map(|(place, contender)| {
            let saving: Vec<Vec<f64>> = blocks
                .iter()
                .map(|block| {
                    let saving =
                        |sample: &Sample| sample.systems[0].cost - sample.systems[place].cost;
                    block.iter().map(saving).collect()
                })
                .collect();
            let chance = Chance::of(saving.iter().map(Vec::as_slice), |saving| saving > 0.0);
            ChoiceSaving {
                label: contender.system.label.clone(),
                saving: saving.concat(),
                chance: chance.as_ref().map(chance_said),
            }
        });
    let saving = SavingOdds {
        currency: currency(),
        choices: choices.collect(),
    };
    let spreads = systems().filter_map(|(place, contender)| {
        let samples = blocks.iter().flatten();
        let costs: Vec<f64> = samples.map(|sample| sample.systems[place].cost).collect();
        let Quantiles { p10, p50, p90 } = Quantiles::of(&costs)?;
        Some(CostSpread {
            label: contender.system.label.clone(),
            p10,
            p50,
            p90,
        })
    });
    let cost = CostOdds {
        currency: currency(),
        systems: spreads.collect(),
    };
    Ok(vec![
        drawn(
            "saving-odds",
            "What each choice saves in every sample; left of the line it is dearer than today.",
            saving_odds(&saving, marks)?,
        ),
        drawn(
            "cost-odds",
            "Cost of a year of every system: eight samples of ten lie between the ends of its line.",
            cost_odds(&cost, marks)?,
        ),
    ])
}

/// What makes the spread of the saving; nothing where the sample does not tell.
///
/// # Errors
/// When the picture cannot be drawn.
pub fn spread_picture(answer: &OddsAnswer, locale: &Locale) -> Result<Option<Drawn>, ChartError> {
    if answer.what_matters.is_empty() {
        return Ok(None);
    }
    let unknowns = answer.what_matters.iter().map(|one| UnknownShare {
        label: one.lever.clone(),
        share: one.share,
        low: one.lo,
        high: one.hi,
    });
    let shares = SpreadShares {
        outcome: format!("Saving of {}", answer.about),
        unknowns: unknowns.collect(),
    };
    Ok(Some(drawn(
        "spread-shares",
        "What makes the spread of the saving, with limits.",
        spread_shares(&shares, &locale.marks)?,
    )))
}

/// Every sample as CSV: what each lever was, then what every system came to.
///
/// # Errors
/// When a row cannot be written.
pub fn samples_csv(
    case: &Case,
    sampler: &Sampler,
    blocks: &[Vec<Sample>],
) -> Result<Vec<u8>, csv::Error> {
    let systems: Vec<&str> = case
        .contenders
        .iter()
        .map(|contender| contender.system.label.as_str())
        .collect();
    // A lever of the home stands once, a lever of a choice once for every choice that has it.
    let mut columns = Vec::new();
    for (place, one) in sampler.uncertain().iter().enumerate() {
        let of: Vec<usize> = (1..one.ranges.len())
            .filter(|choice| one.ranges[*choice].is_some())
            .collect();
        for choice in of {
            let whose = match one.is_shared() {
                true => String::new(),
                false => format!(" of {}", systems[choice]),
            };
            columns.push((place, choice, format!("{}{whose}", one.lever.name())));
        }
    }
    let mut table = csv::Writer::from_writer(Vec::new());
    let mut header = vec!["block".to_owned()];
    header.extend(columns.iter().map(|(_, _, name)| name.clone()));
    for system in &systems {
        for figure in [
            "cost",
            "carbon_kg",
            "spf_h4",
            "hours_backup",
            "min_indoor_c",
        ] {
            header.push(format!("{figure} of {system}"));
        }
    }
    table.write_record(&header)?;
    for (block, samples) in blocks.iter().enumerate() {
        for sample in samples {
            let mut row = vec![(block + 1).to_string()];
            for (place, choice, _) in &columns {
                let value = sampler.value(sample, *place, *choice);
                row.push(value.map_or_else(String::new, |value| format!("{value:.6}")));
            }
            for drawn in &sample.systems {
                row.push(format!("{:.2}", drawn.cost));
                row.push(format!("{:.1}", drawn.carbon_kg));
                // Missing stays missing: a boiler has no SPF.
                row.push(
                    drawn
                        .spf_h4
                        .map_or_else(String::new, |spf| format!("{spf:.4}")),
                );
                row.push(format!("{:.0}", drawn.hours_backup));
                row.push(format!("{:.2}", drawn.min_indoor_c));
            }
            table.write_record(&row)?;
        }
    }
    let rows = table.into_inner();
    rows.map_err(|error| csv::Error::from(error.into_error()))
}
