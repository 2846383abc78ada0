//! `machine`: a machine sheet fitted, its points, its parameters, its picture, and how it runs at a condition.

use std::path::{Path, PathBuf};

mod operating;
mod picture;
mod text;

use super::{Failure, Format, print, print_json, warn, write_files};
use crate::answer::machine::MachineAnswer;
use crate::heatpump::{Sheet, fit, leave_one_out, typical_names};
use crate::problem::{Place, Problem, Problems, Severity};
use operating::operating;
use picture::picture;
use text::text;

/// Places at which the map is compared with the exact machine for the printed error.
const MAP_PLACES: usize = 2000;

/// Fit a machine to its sheet and show how well it is met.
#[derive(Debug, clap::Args)]
#[command(after_help = "\
Examples:
  winterledger machine briefs/machines/air-r290-small.toml --chart machine.svg
  winterledger machine \"air, R290, variable speed\" --at -7/50 --output 4")]
pub struct Args {
    /// Machine sheet (TOML), or the name of a typical machine.
    sheet: String,
    /// Also run it at a source and a flow temperature, °C, such as -7/50.
    #[arg(long, value_name = "SOURCE/FLOW", allow_hyphen_values = true)]
    at: Option<String>,
    /// Heat wanted at that condition, kW; its greatest output when absent.
    #[arg(long, value_name = "KW", requires = "at", allow_hyphen_values = true)]
    output: Option<String>,
    /// Write the picture of output and COP to this .svg or .png file.
    #[arg(long, value_name = "FILE")]
    chart: Option<PathBuf>,
    /// How the result is printed.
    #[arg(long, value_enum, default_value_t)]
    format: Format,
    /// Overwrite the picture if it is there.
    #[arg(long)]
    force: bool,
}

/// Fits, draws and prints.
///
/// # Errors
/// A [`Failure`] with every problem of the sheet or the arguments, or the picture that could not be written.
pub fn run(args: &Args) -> Result<(), Failure> {
    let sheet = sheet(&args.sheet)?;
    let fitted = fit(&sheet)?;
    let machine = &fitted.heat_pump;
    let left_out = leave_one_out(&sheet)?;
    let mut findings = machine.cautions();
    findings.extend(fitted.report.findings.iter().cloned());
    let limits = machine.limits();
    findings.extend(machine.hot_discharge(limits.lowest_source_c, f64::INFINITY));
    let at = match &args.at {
        Some(text) => Some(operating(
            machine,
            text,
            args.output.as_deref(),
            &mut findings,
        )?),
        None => None,
    };
    if let Some(path) = &args.chart {
        write_files(&[picture(&sheet, &fitted, path)?], args.force)?;
    }
    let map_error = machine
        .map()
        .error(machine.machine(), machine.limits(), MAP_PLACES)
        .map_err(|error| Failure::argument("SHEET", error.to_string(), ""))?;
    let map_percent = 100.0 * map_error.cop.max(map_error.output);
    let answer = MachineAnswer::new(&sheet, &fitted, &left_out, map_percent, at, findings);
    match args.format {
        Format::Text => {
            let (cautions, odd): (Vec<_>, Vec<_>) = (answer.findings.iter().cloned())
                .partition(|finding| finding.severity == Severity::Caution);
            warn(&odd);
            print(&text(&sheet, &fitted, &answer, &cautions))
        }
        Format::Json => print_json(&answer),
    }
}

/// A sheet from a file, or a typical one by its name.
///
/// # Errors
/// Every problem of the sheet; for a name that is neither, both ways to give one.
pub(super) fn sheet(name: &str) -> Result<Sheet, Problems> {
    let path = Path::new(name);
    if path.exists() {
        return Sheet::read(path);
    }
    Sheet::typical(name).map_err(|_| {
        let names: Vec<_> = typical_names().map(|held| format!("\"{held}\"")).collect();
        Problem::new(
            Place::file(name),
            "is neither a file nor the name of a typical machine",
            format!("a machine sheet (TOML), or one of {}", names.join("; ")),
            "check the path or the name",
        )
        .into()
    })
}
