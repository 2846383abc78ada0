//! `odds`: how sure the comparison is.

use std::path::PathBuf;

use indicatif::{ProgressBar, ProgressStyle};

use super::{Failure, Format, print, print_json, warn};
use crate::answer::odds::{OddsAnswer, odds};
use crate::brief::Brief;
use crate::report::odds_text;
use crate::study::odds::{Sampler, Uncertain};

/// Samples of a block: whole blocks are drawn, their scatter gives the sampling errors.
const BLOCK: usize = 50;
/// Correlation of the prices of electricity and gas: gas stations set the price of electricity in many hours. Common practice, no
/// source.
const PRICE_CORRELATION: f64 = 0.6;

/// How sure the comparison is: chances, what matters most, what to find out next.
///
/// Every quantity that is not known for certain is drawn from its usual spread, all together, and every system is run for a year.
/// Without a brief it runs the demonstration home that is built in.
#[derive(Debug, clap::Args)]
#[command(after_help = "\
Examples:
  winterledger odds                            the built-in demonstration home
  winterledger odds briefs/terrace.toml --samples 2000
  winterledger odds --precision 1              until every chance is known to 1 %")]
pub struct Args {
    /// Brief (TOML); without one, the built-in demonstration home.
    brief: Option<PathBuf>,
    /// Most samples that are drawn.
    #[arg(long, default_value_t = 400, value_parser = clap::value_parser!(u32).range(100..=1_000_000))]
    samples: u32,
    /// Stop sooner when every chance is known to this standard error, %.
    #[arg(long, value_name = "PERCENT")]
    precision: Option<f64>,
    /// Seed of the samples: the same seed gives the same bytes.
    #[arg(long, default_value_t = 1)]
    seed: u64,
    /// How to print the result.
    #[arg(long, value_enum, default_value_t)]
    format: Format,
}

/// Runs the command.
///
/// # Errors
/// When the brief or an argument cannot be used.
pub fn run(args: &Args) -> Result<(), Failure> {
    /// No chance is known better from samples than this, %.
    const FINEST: f64 = 0.05;
    if let Some(precision) = args.precision
        && !(FINEST..=50.0).contains(&precision)
    {
        return Err(Failure::argument(
            "--precision",
            format!("{precision} %"),
            format!("from {FINEST} to 50 %: a finer chance would need more than a million samples"),
        ));
    }
    let brief = match &args.brief {
        Some(path) => Brief::read(path)?,
        None => Brief::demonstration()?,
    };
    let outcomes = brief.case.run()?;
    let uncertain = Uncertain::usual(&brief.case);
    let sampler = Sampler::new(
        brief.case.clone(),
        uncertain,
        PRICE_CORRELATION,
        args.seed,
        BLOCK,
    )?;
    let most = (args.samples as usize).div_ceil(BLOCK);
    let progress = ProgressBar::new(most as u64).with_style(
        ProgressStyle::with_template("{bar:30} {pos} of {len} blocks, {eta} left")
            .unwrap_or_else(|_| ProgressStyle::default_bar()),
    );
    let mut blocks = Vec::new();
    let mut answer: Option<OddsAnswer> = None;
    for block in 0..most {
        blocks.push(sampler.block(block)?);
        progress.inc(1);
        // The levers' break-evens are only needed once.
        if block + 1 == most
            || (args.precision.is_some() && blocks.len() >= 4 && precise(&blocks, args.precision))
        {
            answer = odds(&brief.case, &outcomes, &sampler, &blocks, args.seed)?;
            break;
        }
    }
    progress.finish_and_clear();
    let Some(mut answer) = answer else {
        return Err(Failure::Usage(
            "the brief has no choice to give odds for".to_owned(),
        ));
    };
    answer.findings = brief.told.findings.clone();
    warn(&answer.findings);
    match args.format {
        Format::Json => print_json(&answer),
        Format::Text => print(&odds_text(&answer)),
    }
}

/// Whether every choice's chance against today is known well enough.
fn precise(blocks: &[Vec<crate::study::odds::Sample>], percent: Option<f64>) -> bool {
    let Some(percent) = percent else { return false };
    let systems = blocks
        .first()
        .and_then(|block| block.first())
        .map_or(0, |sample| sample.systems.len());
    (1..systems).all(|place| {
        let saving: Vec<Vec<f64>> = blocks
            .iter()
            .map(|block| {
                block
                    .iter()
                    .map(|sample| sample.systems[0].cost - sample.systems[place].cost)
                    .collect()
            })
            .collect();
        let chance =
            crate::study::odds::Chance::of(saving.iter().map(Vec::as_slice), |saving| saving > 0.0);
        chance.is_some_and(|chance| chance.error * 100.0 <= percent)
    })
}
