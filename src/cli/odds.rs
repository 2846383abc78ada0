//! `odds`: how sure the comparison is.

use std::path::PathBuf;

use super::sampling::{Stop, draw};
use super::{
    Failure, Format, NewFile, check_folder, picture_files, print, print_json, warn_in, write_files,
};
use crate::answer::odds::{OddsAnswer, Wish, odds};
use crate::brief::Brief;
use crate::report::{odds_pictures, odds_text, samples_csv, spread_picture};
use crate::study::odds::{Sample, Sampler};

/// Samples of a block: whole blocks are drawn, their scatter gives the sampling errors. Many small blocks tell an error better than few
/// large ones, and 20 slices are nearly as even as 50.
const BLOCK: usize = 20;
/// Names of the files that are written beside the pictures.
const RESULT: &str = "odds.json";
const SAMPLES: &str = "samples.csv";

/// How sure the comparison is: chances, what matters most, what to find out next.
///
/// Every quantity that is not known for certain is drawn from its range, all together, and every system is run for a year. The ranges
/// are the usual ones, or those of the tables [odds] and [choice.odds] of the brief; among them is how far a machine's sheet may be off at a
/// high lift, at part load and in the cold. Without a brief it runs the demonstration home
/// that is built in. Ctrl-C finishes the blocks that were begun and answers with what is done; the exit status is then 130.
#[derive(Debug, clap::Args)]
#[command(after_help = "\
Examples:
  winterledger odds                            the built-in demonstration home
  winterledger odds briefs/terrace.toml --samples 2000
  winterledger odds --precision 1              until every chance is known to 1 %
  winterledger odds --out odds                 the pictures, odds.json and every sample (CSV)")]
pub struct Args {
    /// Brief (TOML); without one, the built-in demonstration home.
    brief: Option<PathBuf>,
    /// Most samples that are drawn.
    #[arg(long, default_value_t = 400, value_parser = clap::value_parser!(u32).range(100..=1_000_000))]
    samples: u32,
    /// Stop sooner when every chance is known to this standard error, %; else what the brief asks for.
    #[arg(long, value_name = "PERCENT")]
    precision: Option<f64>,
    /// Seed of the samples: the same seed gives the same bytes.
    #[arg(long, default_value_t = 1)]
    seed: u64,
    /// Folder for the pictures, odds.json and samples.csv.
    #[arg(long, value_name = "DIR")]
    out: Option<PathBuf>,
    /// Overwrite files that are there already.
    #[arg(long)]
    force: bool,
    /// How to print the result.
    #[arg(long, value_enum, default_value_t)]
    format: Format,
}

/// Runs the command.
///
/// # Errors
/// When the brief or an argument cannot be used, a file cannot be written, or somebody interrupted it.
pub fn run(args: &Args) -> Result<(), Failure> {
    /// No chance is known better from samples than this, %.
    const FINEST: f64 = 0.05;
    let stop = Stop::listen();
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
    }
    .of_a_year("")?;
    if let Some(folder) = &args.out {
        check_folder(folder, &[RESULT, SAMPLES], args.force)?;
    }
    let outcomes = brief.case.run()?;
    let sampler = Sampler::new(brief.case.clone(), brief.doubts.clone(), args.seed, BLOCK)?;
    let most = (args.samples as usize).div_ceil(BLOCK);
    let precision = args.precision.map(|percent| percent / 100.0);
    let precision = precision.or(brief.precision);
    let drawing = draw(&sampler, most, precision, Some(&stop))?;
    let wish = Wish {
        precision,
        interrupted: drawing.interrupted,
    };
    let answer = odds(&brief.case, &outcomes, &sampler, &drawing.blocks, wish)?;
    let Some(mut answer) = answer else {
        return Err(Failure::Usage(
            "the brief has no choice to give odds for".to_owned(),
        ));
    };
    answer.findings.extend(brief.told.findings.iter().cloned());
    warn_in(&answer.findings, &brief.locale, &answer.currency);
    if let Some(folder) = &args.out {
        let files = files(folder, &answer, &sampler, &drawing.blocks, &brief);
        let files = files.map_err(|error| Failure::Write {
            path: folder.clone(),
            reason: error.to_string(),
        })?;
        write_files(&files, args.force)?;
    }
    match args.format {
        Format::Json => print_json(&answer)?,
        Format::Text => print(&odds_text(&answer, &brief.locale))?,
    }
    if drawing.interrupted {
        return Err(Failure::Interrupted {
            done: format!("{} of {} samples", answer.samples, most * BLOCK),
        });
    }
    Ok(())
}

/// Everything that goes into the folder.
fn files(
    folder: &std::path::Path,
    answer: &OddsAnswer,
    sampler: &Sampler,
    blocks: &[Vec<Sample>],
    brief: &Brief,
) -> Result<Vec<NewFile>, Box<dyn std::error::Error>> {
    let mut files = vec![
        NewFile::new(folder.join(RESULT), serde_json::to_vec_pretty(answer)?),
        NewFile::new(
            folder.join(SAMPLES),
            samples_csv(&brief.case, sampler, blocks)?,
        ),
    ];
    let all: Vec<usize> = (0..brief.case.contenders.len()).collect();
    let mut drawn = odds_pictures(&brief.case, blocks, &all, &brief.locale)?;
    drawn.extend(spread_picture(answer, &brief.locale)?);
    files.extend(picture_files(folder, &drawn)?);
    Ok(files)
}
