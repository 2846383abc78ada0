//! `explain`: one hour of one system, from weather to money.

use std::path::PathBuf;

use chrono::{NaiveDateTime, Timelike as _};

use super::{Failure, Format, print, print_json, warn};
use crate::answer::explain::Explanation;
use crate::brief::Brief;
use crate::problem::{Place, Problem};
use crate::report::explain_text;
use crate::study::{Case, Contender, Wanted, trace};

/// One hour of one system from weather to money, every line with its formula and inputs.
#[derive(Debug, clap::Args)]
#[command(after_help = "\
Examples:
  winterledger explain briefs/terrace.toml --choice \"Gas boiler\" --at 2023-01-14T03:00
  winterledger explain briefs/terrace.toml --choice \"Air source, same radiators\" --coldest
  winterledger explain briefs/terrace.toml --choice \"Ground source, larger radiators\" --worst-cop --format json")]
pub struct Args {
    /// Brief (TOML).
    brief: PathBuf,
    /// Label of the system; the first choice of the brief when left out.
    #[arg(long, value_name = "LABEL")]
    choice: Option<String>,
    #[command(flatten)]
    which: Which,
    /// How to print the result.
    #[arg(long, value_enum, default_value_t)]
    format: Format,
}

#[derive(Debug, clap::Args)]
#[group(required = true, multiple = false)]
struct Which {
    /// The hour that begins then on the wall clock, such as 2023-01-14T03:00.
    #[arg(long, value_name = "TIME")]
    at: Option<String>,
    /// The coldest hour outdoors.
    #[arg(long)]
    coldest: bool,
    /// The hour in which the machine did worst, of those with at least a tenth of the design heat load.
    #[arg(long)]
    worst_cop: bool,
    /// The hour whose energy cost most.
    #[arg(long)]
    dearest: bool,
}

/// Runs the command.
///
/// # Errors
/// When the brief cannot be used, or it has no such system or hour.
pub fn run(args: &Args) -> Result<(), Failure> {
    let Brief { case, .. } = Brief::read(&args.brief)?;
    let contender = find(&case, args.choice.as_deref())?;
    let wanted = match &args.which {
        Which { at: Some(text), .. } => Wanted::Hour(hour_of(&case, text)?),
        Which { coldest: true, .. } => Wanted::Coldest,
        Which {
            worst_cop: true, ..
        } => Wanted::WorstCop,
        Which { .. } => Wanted::Dearest,
    };
    let explanation = Explanation::of(&case, contender, &trace(&case, contender, wanted)?);
    warn(&explanation.findings);
    match args.format {
        Format::Json => print_json(&explanation),
        Format::Text => print(&explain_text(&explanation)),
    }
}

fn find<'a>(case: &'a Case, label: Option<&str>) -> Result<&'a Contender, Failure> {
    let Some(label) = label else {
        let first = case.contenders.iter().find(|contender| !contender.today);
        return first.ok_or_else(|| Failure::argument("--choice", "the brief has no choice", ""));
    };
    case.contenders
        .iter()
        .find(|contender| contender.system.label == label)
        .ok_or_else(|| {
            let labels: Vec<_> = case
                .contenders
                .iter()
                .map(|contender| format!("\"{}\"", contender.system.label))
                .collect();
            Failure::argument(
                "--choice",
                format!("no system is called \"{label}\""),
                labels.join(", "),
            )
        })
}

/// The hour that begins at a wall-clock time; of a doubled hour the first.
fn hour_of(case: &Case, text: &str) -> Result<usize, Failure> {
    let refuse = |found: String| {
        let civil = &case.site.civil;
        let span = match (civil.first(), civil.last()) {
            (Some(first), Some(last)) => format!("an hour from {} to {}", first.date, last.date),
            _ => String::new(),
        };
        let remedy = "write for example 2023-01-14T03:00";
        Failure::Input(Problem::new(Place::field("--at"), found, span, remedy).into())
    };
    let forms = ["%Y-%m-%dT%H:%M", "%Y-%m-%dT%H:%M:%S", "%Y-%m-%d %H:%M"];
    let time = forms
        .iter()
        .find_map(|form| NaiveDateTime::parse_from_str(text.trim(), form).ok())
        .ok_or_else(|| refuse(format!("\"{text}\" is no time")))?;
    let hour =
        case.site.civil.iter().position(|civil| {
            civil.date == time.date() && u32::from(civil.hour) == time.time().hour()
        });
    hour.ok_or_else(|| refuse(format!("\"{text}\" is not among the hours of the weather")))
}
