//! `study`: what would change the answer.

use std::path::{Path, PathBuf};

use super::{
    Failure, Format, NewFile, check_folder, picture_files, print, print_json, warn_in, write_files,
};
use crate::answer::study::{StudyAnswer, Wish, studies};
use crate::brief::Brief;
use crate::locale::Marks;
use crate::problem::{Place, Problem, Problems};
use crate::report::{study_pictures, study_text};
use crate::study::{Case, Lever};

/// Values of each of two prices moved together.
const PRICE_STEPS: usize = 40;
/// Values of each of two other levers: every pair of values is a year that is run.
const OTHER_STEPS: usize = 12;
/// What the folder holds in any case.
const RESULT: &str = "study.json";
/// Columns of a help text.
const HELP_WIDTH: usize = 90;

/// What would change the answer: break-even, emitters, size, prices, swings and the years of each system's life.
///
/// Without a brief it runs the demonstration home that is built in.
#[derive(Debug, clap::Args)]
#[command(after_help = after_help())]
pub struct Args {
    /// Brief (TOML); without one, the built-in demonstration home.
    brief: Option<PathBuf>,
    /// Label of one choice to look at; without it, every choice.
    #[arg(long, value_name = "LABEL")]
    choice: Option<String>,
    /// Lever along the picture of two levers.
    #[arg(long, value_name = "LEVER", default_value = "electricity rate")]
    over: String,
    /// Lever up the picture of two levers.
    #[arg(long, value_name = "LEVER", default_value = "gas rate")]
    against: String,
    /// Folder for study.json and the pictures.
    #[arg(long, value_name = "DIR")]
    out: Option<PathBuf>,
    /// Overwrite files that are there already.
    #[arg(long)]
    force: bool,
    /// How to print the result.
    #[arg(long, value_enum, default_value_t)]
    format: Format,
}

fn after_help() -> String {
    let names: Vec<_> = Lever::ALL.iter().map(|lever| lever.name()).collect();
    let levers = format!("Levers: {}.", names.join(", "));
    format!(
        "\
Examples:
  winterledger study                                     the built-in demonstration home
  winterledger study briefs/terrace.toml --out study     study.json and pictures
  winterledger study --choice \"Air source, larger radiators\"
  winterledger study --over \"heat loss\" --against \"design flow temperature\" --out out --force

{}",
        textwrap::fill(&levers, HELP_WIDTH)
    )
}

/// Runs the command.
///
/// # Errors
/// When the brief or an argument cannot be used or a file cannot be written.
pub fn run(args: &Args) -> Result<(), Failure> {
    let mut problems = Problems::new();
    let over = problems.take(lever("--over", &args.over));
    let against = problems.take(lever("--against", &args.against));
    let brief = match &args.brief {
        Some(path) => problems.take(Brief::read(path).and_then(|brief| brief.of_a_year(""))),
        None => problems.take(Brief::demonstration()),
    };
    let choices = brief
        .as_ref()
        .and_then(|brief| problems.take(choices(&brief.case, args.choice.as_deref())));
    let given = over.zip(against).zip(brief.zip(choices));
    problems.or(())?;
    let Some((together, (brief, choices))) = given else {
        return Ok(());
    };
    let prices = [Lever::ElectricityRate, Lever::FuelRate];
    let both_prices = prices.contains(&together.0) && prices.contains(&together.1);
    let wish = Wish {
        choices,
        together,
        steps: if both_prices {
            PRICE_STEPS
        } else {
            OTHER_STEPS
        },
    };
    if let Some(folder) = &args.out {
        check_folder(folder, &[RESULT], args.force)?;
    }
    let outcomes = brief.case.run()?;
    let answer = studies(&brief.case, &outcomes, &brief.told, &wish)?;
    if let Some(folder) = &args.out {
        let files = files(&answer, folder, &brief.locale.marks)?;
        write_files(&files, args.force)?;
    }
    warn_in(&answer.findings, &brief.locale, &answer.currency);
    match args.format {
        Format::Json => print_json(&answer),
        Format::Text => print(&study_text(&answer, &brief.locale)),
    }
}

fn lever(argument: &str, name: &str) -> Result<Lever, Problems> {
    Lever::named(name).ok_or_else(|| {
        let names: Vec<_> = Lever::ALL.iter().map(|lever| lever.name()).collect();
        let wanted = name.to_lowercase();
        let nearest = names.iter().max_by(|a, b| {
            strsim::jaro_winkler(a, &wanted).total_cmp(&strsim::jaro_winkler(b, &wanted))
        });
        Problem::new(
            Place::field(argument),
            format!("\"{name}\" is no lever"),
            names.join(", "),
            nearest.map_or_else(String::new, |near| format!("did you mean \"{near}\"?")),
        )
        .into()
    })
}

/// The places of the choices that are looked at.
fn choices(case: &Case, label: Option<&str>) -> Result<Vec<usize>, Problems> {
    let all: Vec<usize> = (1..case.contenders.len()).collect();
    let Some(label) = label else { return Ok(all) };
    let found: Vec<usize> = all
        .iter()
        .copied()
        .filter(|&i| case.contenders[i].system.label == label)
        .collect();
    if found.is_empty() {
        let labels: Vec<_> = all
            .iter()
            .map(|&i| format!("\"{}\"", case.contenders[i].system.label))
            .collect();
        return Err(Problem::new(
            Place::field("--choice"),
            format!("no choice is called \"{label}\""),
            labels.join(", "),
            "",
        )
        .into());
    }
    Ok(found)
}

fn files(answer: &StudyAnswer, folder: &Path, marks: &Marks) -> Result<Vec<NewFile>, Failure> {
    let cannot = |error: &dyn std::fmt::Display| Failure::Write {
        path: folder.to_owned(),
        reason: error.to_string(),
    };
    let json = serde_json::to_vec_pretty(answer).map_err(|error| cannot(&error))?;
    let drawn = study_pictures(answer, marks).map_err(|error| cannot(&error))?;
    let mut files = vec![NewFile::new(folder.join(RESULT), json)];
    files.extend(picture_files(folder, &drawn).map_err(|error| cannot(&error))?);
    Ok(files)
}
