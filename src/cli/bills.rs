//! `bills`: what meter readings say about a home.

use std::path::PathBuf;

use super::{Failure, Format, picture_file, print, print_json, warn, write_files};
use crate::answer::bills::BillsAnswer;
use crate::brief::Brief;
use crate::chart::Marks;
use crate::report::signature_picture;

/// Heat-loss coefficient, base temperature and base load from meter readings.
///
/// The weather of the same days, the time zone and the efficiency of today's heater come from the brief. The coefficient is for
/// comparison with a survey, never for sizing alone.
#[derive(Debug, clap::Args)]
#[command(after_help = "\
Readings (CSV): columns \"date\" and \"register (m³)\", or \"from\", \"to\" and \"consumption (kWh)\"; beside them \"meter\",
\"calorific value (MJ/m³)\" and \"estimated\" (yes or no). Dates as 2023-01-31.

Examples:
  winterledger bills briefs/meter-readings.csv briefs/terrace.toml
  winterledger bills briefs/meter-readings.csv briefs/terrace.toml --chart out/signature.png")]
pub struct Args {
    /// Meter readings (CSV).
    file: PathBuf,
    /// Brief whose home and weather they belong to (TOML).
    brief: PathBuf,
    /// Picture of fit and readings (.svg or .png).
    #[arg(long, value_name = "FILE")]
    chart: Option<PathBuf>,
    /// Overwrite the picture when it is there already.
    #[arg(long)]
    force: bool,
    /// How to print the result.
    #[arg(long, value_enum, default_value_t)]
    format: Format,
}

/// Runs the command.
///
/// # Errors
/// When readings or brief cannot be used, or the picture cannot be written.
pub fn run(args: &Args) -> Result<(), Failure> {
    let (bills, assumptions) = Brief::bills(&args.file, &args.brief)?;
    if let Some(path) = &args.chart {
        let drawn = signature_picture(&bills.signature, &Marks::default());
        write_files(&[picture_file("--chart", path, drawn)?], args.force)?;
    }
    warn(&bills.findings);
    let answer = BillsAnswer::new(
        bills.file,
        &bills.signature,
        bills.survey_w_per_k,
        assumptions,
        bills.findings,
    );
    match args.format {
        Format::Json => print_json(&answer),
        Format::Text => print(&text(&answer)),
    }
}

fn text(answer: &BillsAnswer) -> String {
    let limits =
        |pair: [f64; 2], places: usize| format!("{:.places$} to {:.places$}", pair[0], pair[1]);
    let mut lines = vec![
        format!("{}: {} intervals", answer.file, answer.n),
        String::new(),
        format!(
            "Heat loss         {:>7.0} W/K       {} with 95 % confidence",
            answer.heat_loss_w_per_k,
            limits(answer.heat_loss_95, 0)
        ),
        format!(
            "Base temperature  {:>7.1} °C        {}{}",
            answer.base_temperature_c,
            limits(answer.base_temperature_95, 1),
            if answer.base_temperature_fitted {
                ""
            } else {
                ", of published homes: too few readings to fit it"
            }
        ),
        format!(
            "Base load         {:>7.1} kWh a day {}",
            answer.base_load_kwh_per_day,
            limits(answer.base_load_95, 1)
        ),
        format!(
            "Fit               r² {:.3}, CV(RMSE) {:.1} %",
            answer.r_squared,
            answer.cv_rmse * 100.0
        ),
    ];
    if let Some(survey) = answer.survey_w_per_k {
        lines.push(format!(
            "Survey            {survey:>7.0} W/K       the brief's own, used for sizing"
        ));
    }
    lines.push(String::new());
    lines.push("  from        to          outdoors  kWh a day  by the fit".to_owned());
    for interval in &answer.intervals {
        lines.push(format!(
            "  {}  {}  {:>5.1} °C  {:>9.1}  {:>10.1}{}",
            interval.from,
            interval.to,
            interval.outdoor_c,
            interval.kwh_per_day,
            interval.fitted_kwh_per_day,
            if interval.odd { "  odd" } else { "" }
        ));
    }
    lines.push(String::new());
    lines.push("What was assumed".to_owned());
    for assumption in &answer.assumptions {
        lines.push(format!(
            "  {} = {} ({})",
            assumption.name, assumption.value, assumption.from
        ));
    }
    lines.push(String::new());
    lines.push(
        "Readings hold cold rooms and hours without heating: a figure to set beside a survey, never to size with\nalone. \
         Size from a room-by-room heat-loss calculation by a competent person."
            .to_owned(),
    );
    lines.join("\n")
}
