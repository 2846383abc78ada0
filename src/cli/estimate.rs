//! `estimate`: what each system of a brief would cost in a year.

use std::error::Error;
use std::path::{Path, PathBuf};

use super::progress::Progress;
use super::sampling::draw;
use super::{
    Failure, Format, NewFile, check_folder, picture_files, print, print_json, warn_in, write_files,
};
use crate::answer::odds::summary;
use crate::answer::{Estimate, compare_patterns, compose, what_if};
use crate::brief::{Brief, DEFAULTS};
use crate::home::Pattern;
use crate::locale::Locale;
use crate::problem::Problems;
#[cfg(feature = "pdf")]
use crate::report::report_pdf;
use crate::report::{
    Material, accounts_text, estimate_text, home_text, in_front, ledger_csv, ledger_legend,
    odds_pictures, patterns_text, pictures, report_html,
};
use crate::study::odds::{Sample, Sampler};
use crate::study::{Outcome, bills};
use crate::year::Ledger;

/// Names of the files that are always written.
const RESULT: &str = "result.json";
const REPORT: &str = "report.html";
#[cfg(feature = "pdf")]
const PAPER: &str = "report.pdf";
#[cfg(feature = "pdf")]
const ALWAYS: &[&str] = &[RESULT, REPORT, PAPER];
#[cfg(not(feature = "pdf"))]
const ALWAYS: &[&str] = &[RESULT, REPORT];

/// Yearly cost and carbon of every system of a brief, beside what heats the home today.
///
/// Without a brief it runs the demonstration home that is built in.
#[derive(Debug, clap::Args)]
#[command(after_help = "\
Examples:
  winterledger estimate                                 the built-in demonstration home
  winterledger estimate briefs/terrace.toml --out out   the report, its pictures, ledgers, result.json
  winterledger estimate --format json                   the same figures for another program")]
pub struct Args {
    /// Brief (TOML); without one, the built-in demonstration home.
    brief: Option<PathBuf>,
    /// Folder for report.html, report.pdf, the pictures, the ledgers (CSV) and result.json.
    #[arg(long, value_name = "DIR")]
    out: Option<PathBuf>,
    /// Overwrite files that are there already.
    #[arg(long)]
    force: bool,
    /// How to print the result.
    #[arg(long, value_enum, default_value_t)]
    format: Format,
    /// Say where each assumption is from.
    #[arg(long)]
    assumptions: bool,
    /// Print the bills of every system, and what its meters should read.
    #[arg(long)]
    bills: bool,
    /// Also say each system's design point, rooms, store and running pattern.
    #[arg(long)]
    home: bool,
    /// Also run every system all day at its set point beside a set-back.
    #[arg(long)]
    patterns: bool,
    /// Samples for the odds of every choice, in blocks of 5; 0 leaves them out. `odds` draws more and says what to find out.
    #[arg(long, default_value_t = 80, value_parser = clap::value_parser!(u32).range(0..=100_000))]
    samples: u32,
    /// Run weather of less than a year all the same: figures of these days, with no word of a year; DIR then gets ledgers and
    /// result.json only.
    #[arg(long)]
    part_year: bool,
    /// Print every default with its source, and stop.
    #[arg(long)]
    show_defaults: bool,
}

/// Runs the command.
///
/// # Errors
/// When the brief cannot be used or a file cannot be written.
pub fn run(args: &Args) -> Result<(), Failure> {
    if args.show_defaults {
        let lines: Vec<_> = DEFAULTS
            .iter()
            .map(|default| format!("{} = {}  ({})", default.field, default.value, default.from))
            .collect();
        return print(&lines.join("\n"));
    }
    let brief = match &args.brief {
        Some(path) => Brief::read(path)?,
        None => Brief::demonstration()?,
    };
    let days = brief.days_of_a_part_year().filter(|_| args.part_year);
    let brief = match days {
        Some(_) => brief,
        None => brief.of_a_year("; --part-year runs these days without a word of a year")?,
    };
    if let Some(folder) = &args.out {
        check_folder(folder, ALWAYS, args.force)?;
    }
    let mut ledgers = Vec::new();
    let mut outcomes = Vec::with_capacity(brief.case.contenders.len());
    let progress = Progress::new(brief.case.contenders.len() as u64 + 2);
    for contender in &brief.case.contenders {
        progress.at(&contender.system.label);
        let mut ledger = args
            .out
            .as_ref()
            .map(|_| Ledger::with_capacity(brief.case.site.outdoor_c.len()));
        outcomes.push(brief.case.run_one(contender, ledger.as_mut())?);
        ledgers.extend(ledger);
    }
    progress.at("break-even");
    let mut estimate = compose(&brief.case, &outcomes, &brief.told)?;
    if let Some(days) = days {
        estimate = estimate.of_days(days);
    }
    let samples = if days.is_some() { 0 } else { args.samples };
    let sampled = sampled(&brief, samples as usize)?;
    estimate.odds = sampled
        .as_ref()
        .and_then(|(sampler, blocks)| summary(&brief.case, &outcomes, sampler, blocks));
    if args.bills {
        estimate = estimate.with_bills(&brief.case, &outcomes)?;
    }
    if args.patterns {
        estimate.patterns = compare_patterns(&brief.case, &usual_pattern())?;
    }
    if args.out.is_some() || matches!(args.format, Format::Json) {
        progress.at("what would change it");
        let choices = in_front(&estimate).into_iter().filter(|place| *place > 0);
        estimate.what_if = what_if(&brief.case, &outcomes, &choices.collect::<Vec<_>>())?;
    }
    if let Some(folder) = &args.out {
        progress.at("pictures and report");
        let material = Material {
            case: &brief.case,
            outcomes: &outcomes,
            ledgers: &ledgers,
            estimate: &estimate,
            signature: brief.told.bills.as_ref().map(|bills| &bills.signature),
            locale: brief.locale,
        };
        let blocks = sampled.as_ref().map(|(_, blocks)| blocks.as_slice());
        let files =
            files(folder, &material, blocks).map_err(|error| cannot_write(folder, &*error))?;
        write_files(&files, args.force)?;
    }
    progress.done();
    warn_in(&estimate.findings, &brief.locale, &estimate.currency);
    match args.format {
        Format::Json => print_json(&estimate),
        Format::Text => {
            let mut text = text(&estimate, &brief.locale, args);
            if args.bills {
                text += &format!("\n\n{}", accounts(&estimate, &brief, &outcomes)?);
            }
            print(&text)
        }
    }
}

/// What drew and the blocks it drew.
type Sampled = (Sampler, Vec<Vec<Sample>>);

/// A modest sample for the odds of every choice; nothing where none was wished for.
fn sampled(brief: &Brief, samples: usize) -> Result<Option<Sampled>, Problems> {
    /// Samples of a block.
    const BLOCK: usize = 5;
    /// The same seed as that of `odds`; the same estimate gives the same bytes.
    const SEED: u64 = 1;
    if samples == 0 || brief.case.contenders.len() < 2 {
        return Ok(None);
    }
    let sampler = Sampler::new(brief.case.clone(), brief.doubts.clone(), SEED, BLOCK)?;
    let drawing = draw(&sampler, samples.div_ceil(BLOCK), None, None)?;
    Ok(Some((sampler, drawing.blocks)))
}

/// The bills of every system and what its meters should read.
fn accounts(estimate: &Estimate, brief: &Brief, outcomes: &[Outcome]) -> Result<String, Problems> {
    let contenders = brief.case.contenders.iter().zip(outcomes);
    let bills = contenders
        .map(|(contender, outcome)| bills(contender, outcome))
        .collect::<Result<Vec<_>, _>>()?;
    Ok(accounts_text(estimate, &bills))
}

/// Everything that goes into the folder.
fn files(
    folder: &Path,
    material: &Material<'_>,
    samples: Option<&[Vec<Sample>]>,
) -> Result<Vec<NewFile>, Box<dyn Error>> {
    let case = material.case;
    let mut files = vec![NewFile::new(
        folder.join(RESULT),
        serde_json::to_vec_pretty(material.estimate)?,
    )];
    let systems = case.contenders.iter().zip(material.ledgers);
    for (i, (contender, ledger)) in systems.enumerate() {
        let label = file_name(&contender.system.label);
        let content = ledger_csv(ledger, &case.site.axis, case.time_zone)?;
        let name = format!("ledger-{}-{label}.csv", i + 1);
        files.push(NewFile::new(folder.join(name), content));
    }
    let legend = folder.join("ledger-columns.txt");
    files.push(NewFile::new(legend, ledger_legend().into_bytes()));
    if material.estimate.weather.part_year_days.is_some() {
        return Ok(files);
    }
    let shown = in_front(material.estimate);
    let mut drawn = pictures(material)?;
    if let Some(blocks) = samples {
        drawn.extend(odds_pictures(case, blocks, &shown, &material.locale)?);
    }
    files.extend(picture_files(folder, &drawn)?);
    let locale = material.locale.on_a_phone();
    let mut phone = pictures(&Material {
        locale,
        ..*material
    })?;
    if let Some(blocks) = samples {
        phone.extend(odds_pictures(case, blocks, &shown, &locale)?);
    }
    let page = report_html(material, &drawn, &phone)?;
    files.push(NewFile::new(folder.join(REPORT), page));
    #[cfg(feature = "pdf")]
    files.push(NewFile::new(
        folder.join(PAPER),
        report_pdf(material, &drawn)?,
    ));
    Ok(files)
}

fn text(estimate: &Estimate, locale: &Locale, args: &Args) -> String {
    let mut text = estimate_text(estimate, locale, args.assumptions);
    if args.home {
        text += &format!("\n\n{}", home_text(estimate));
    }
    if args.patterns {
        text += &format!("\n\n{}", patterns_text(estimate));
    }
    text
}

/// A set-back for briefs that have none: 7 to 9 and 16 to 23 h on working days, 7 to 23 h at weekends, 20 °C and 16 °C between.
///
/// The hours are those of the British standard assessment (SAP 10, table 9) \[from memory\]; the set-back is common practice.
fn usual_pattern() -> Pattern {
    let mut pattern = Pattern::continuous(20.0);
    for hour in 0..24 {
        let weekday = (7..9).contains(&hour) || (16..23).contains(&hour);
        pattern.weekday_c[hour] = if weekday { 20.0 } else { 16.0 };
        pattern.weekend_c[hour] = if (7..23).contains(&hour) { 20.0 } else { 16.0 };
    }
    pattern
}

fn cannot_write(folder: &std::path::Path, error: &dyn Error) -> Failure {
    Failure::Write {
        path: folder.to_owned(),
        reason: error.to_string(),
    }
}

/// A label as a file name: lower-case letters and digits, everything else one hyphen.
fn file_name(label: &str) -> String {
    /// Longest name, characters.
    const LONGEST: usize = 60;
    let mut name = String::new();
    for character in label.chars().flat_map(char::to_lowercase) {
        if character.is_alphanumeric() {
            name.push(character);
        } else if !name.ends_with('-') && !name.is_empty() {
            name.push('-');
        }
    }
    let name: String = name.trim_end_matches('-').chars().take(LONGEST).collect();
    if name.is_empty() {
        "system".to_owned()
    } else {
        name
    }
}
