//! `weather`: a weather file checked, repaired and described; a typical year chosen; its pictures.

mod picture;
mod reading;
mod text;

use std::io::IsTerminal;
use std::path::PathBuf;

use indicatif::ProgressBar;

use super::{Failure, Format, NewFile, print, print_json, write_files};
use crate::answer::weather::WeatherAnswer;
use crate::bounds::BASE_C;
use crate::problem::{Place, Problem, Problems};
use crate::weather::{
    Adjusted, Adjustment, STANDARD_LAPSE_K_PER_KM, Weather, describe, read_all, to_csv,
    typical_year,
};

/// Base temperature of UK degree-days, °C.
const UK_BASE_C: f64 = 15.5;
/// Files of this many bytes take long enough to be worth a sign of life.
const LONG_BYTES: u64 = 64 << 20;

/// Check, repair and describe hourly weather.
///
/// Several files are taken as several years. What a file does not say is detected; what cannot be detected gets a default
/// and a finding.
#[derive(Debug, clap::Args)]
#[command(after_help = "\
Examples:
  winterledger weather weather_samples/ostrel_plain.csv                       one screen
  winterledger weather weather_samples/morvane_sound.csv --base 18 --format json  for another program")]
pub struct Args {
    /// Hourly weather files (CSV, also packed with gzip).
    #[arg(required = true, value_name = "FILE")]
    files: Vec<PathBuf>,
    /// Base temperature of the degree-days, °C; may be given several times.
    #[arg(long, value_name = "°C", allow_hyphen_values = true)]
    base: Vec<f64>,
    /// Choose a typical year (ISO 15927-4) and write it to this CSV file.
    #[arg(long, value_name = "OUT")]
    typical_year: Option<PathBuf>,
    /// Draw the year as a carpet to this .svg or .png file, and the duration curve to another beside it.
    #[arg(long, value_name = "OUT")]
    chart: Option<PathBuf>,
    /// Metres that the home lies higher than the weather station.
    #[arg(long, value_name = "M", allow_hyphen_values = true)]
    higher: Option<f64>,
    /// Kelvin that the air cools for each kilometre it lies higher.
    #[arg(long, value_name = "K/KM", default_value_t = STANDARD_LAPSE_K_PER_KM, requires = "higher")]
    lapse_rate: f64,
    /// Kelvin added to every hour, or twelve for the months from January, separated by commas.
    #[arg(
        long,
        value_name = "K",
        value_delimiter = ',',
        allow_hyphen_values = true
    )]
    offset: Vec<f64>,
    /// Show every finding.
    #[arg(long)]
    all_findings: bool,
    /// How the result is printed.
    #[arg(long, value_enum, default_value_t)]
    format: Format,
    /// Overwrite what is to be written if it is there.
    #[arg(long)]
    force: bool,
    #[command(flatten)]
    reading: reading::ReadingArgs,
}

/// Reads, describes, writes and prints.
///
/// # Errors
/// A [`Failure`] with every problem of the files, or what could not be written.
pub fn run(args: &Args) -> Result<(), Failure> {
    let mut problems = Problems::new();
    let bases = problems.take(bases(args)).unwrap_or_default();
    let adjustments = problems.take(adjustments(args)).unwrap_or_default();
    let options = problems.take(args.reading.options()).unwrap_or_default();
    problems.or(())?;
    let waiting = waiting(args);
    let series = read_all(&args.files, &options);
    waiting.finish_and_clear();
    let mut series = series?;
    let adjusted = adjust(&mut series, &adjustments)?;
    let Some(described) = describe(&series, &bases) else {
        return Err(Failure::argument("FILE", "no hours", "at least one hour"));
    };
    let mut answer = WeatherAnswer::new(&series, &described, &adjusted);
    let mut files = Vec::new();
    if let Some(out) = &args.typical_year {
        let chosen = typical_year(&series).map_err(Problems::from)?;
        let mut remarks = vec![format!("Chosen by the {}.", chosen.procedure)];
        remarks.push(format!(
            "Months from January come from {}.",
            text::years(&chosen.years)
        ));
        remarks.push(format!("Source: {}.", answer.file));
        files.push(NewFile::new(out, to_csv(&chosen.weather, &remarks)));
        answer = answer.with_typical_year(out.display().to_string(), &chosen);
    }
    if let Some(out) = &args.chart {
        files.extend(picture::draw(&series, &described, &bases, out)?);
    }
    write_files(&files, args.force)?;
    match args.format {
        Format::Text => {
            let drawn: Vec<_> = files
                .iter()
                .map(|file| file.path.display().to_string())
                .collect();
            print(&text::screen(&answer, &drawn, args.all_findings))
        }
        Format::Json => print_json(&answer),
    }
}

/// A problem with one argument.
fn refused(name: &str, found: String, allowed: impl Into<String>) -> Problem {
    Problem::new(Place::field(name), found, allowed, "")
}

fn bases(args: &Args) -> Result<Vec<f64>, Problems> {
    if args.base.is_empty() {
        return Ok(vec![UK_BASE_C]);
    }
    let mut problems = Problems::new();
    for base in args.base.iter().filter(|base| !BASE_C.holds(**base)) {
        problems.push(refused("--base", format!("{base} °C"), BASE_C.words()));
    }
    problems.or(args.base.clone())
}

fn adjustments(args: &Args) -> Result<Vec<Adjustment>, Problems> {
    let mut adjustments = Vec::new();
    if let Some(higher_m) = args.higher {
        adjustments.push(Adjustment::Height {
            higher_m,
            lapse_k_per_km: args.lapse_rate,
        });
    }
    match args.offset.as_slice() {
        [] => {}
        [k] => adjustments.push(Adjustment::Offset(*k)),
        months => match months.try_into() {
            Ok(by_month) => adjustments.push(Adjustment::Monthly(by_month)),
            Err(_) => {
                let found = format!("{} numbers", months.len());
                return Err(refused("--offset", found, "one number, or twelve").into());
            }
        },
    }
    Ok(adjustments)
}

fn adjust(series: &mut [Weather], adjustments: &[Adjustment]) -> Result<Vec<Adjusted>, Failure> {
    let mut said = Vec::new();
    for adjustment in adjustments {
        for (i, weather) in series.iter_mut().enumerate() {
            let adjusted = weather.adjust(adjustment).map_err(|problem| {
                let field = match adjustment {
                    Adjustment::Height { .. } => "--higher",
                    _ => "--offset",
                };
                let place = Place::field(field);
                Problems::from(Problem { place, ..problem })
            })?;
            if i == 0 {
                said.push(adjusted);
            }
        }
    }
    Ok(said)
}

/// A sign of life while long files are read, on a terminal only.
fn waiting(args: &Args) -> ProgressBar {
    let bytes: u64 = args
        .files
        .iter()
        .filter_map(|path| path.metadata().ok())
        .map(|file| file.len())
        .sum();
    if bytes < LONG_BYTES || !std::io::stderr().is_terminal() {
        return ProgressBar::hidden();
    }
    let bar = ProgressBar::new_spinner().with_message("reading weather");
    bar.enable_steady_tick(std::time::Duration::from_millis(120));
    bar
}
