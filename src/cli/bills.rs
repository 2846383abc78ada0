//! `bills`: what meter readings say about a home.

use std::path::PathBuf;

use super::{Failure, Format, picture_file, print, print_json, warn, write_files};
use crate::answer::bills::BillsAnswer;
use crate::brief::Brief;
use crate::chart::Marks;
use crate::report::signature_picture;

/// The heat loss at which the home of a brief uses what was metered, and a straight line through the readings.
///
/// Today's home is run hour by hour over the days of the readings, with the weather, set points, storage, gains, sun and boiler of the
/// brief, and its heat loss moved until every interval is met. Its limits hold the scatter of the readings and what may be wrong with
/// efficiency, set point, gains and sun (settable under [home.bills]). The slope of a straight line is shown beside it as an effective
/// coefficient: it holds how the sun goes with the cold. Both are for comparison with a survey, never for sizing alone.
#[derive(Debug, clap::Args)]
#[command(after_help = "\
Readings (CSV): columns \"date\" and \"register (m³)\", or \"from\", \"to\" and \"consumption (kWh)\", or \"month\" and
\"consumption (kWh)\"; beside them \"meter\", \"calorific value (MJ/m³)\" and \"estimated\" (yes or no). Dates as 2023-01-31; as
31.01.2023 or 31/01/2023 where the order can be told, else say it in the heading: \"date (DD/MM/YYYY)\". Months as 2023-01 or
Jan 2023. Numbers with a decimal comma in a file of semicolons. Periods that end the day before the next begins are taken to
hold their last day.

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
    let knows_sun = answer.own_home.as_ref().is_some_and(|own| own.knows_sun);
    let name = if knows_sun {
        "Heat loss"
    } else {
        "Effective loss"
    };
    let mut lines = vec![
        format!("{}: {} intervals", answer.file, answer.n),
        String::new(),
        format!(
            "{:<18}{:>7.0} W/K       {} with 95 % confidence",
            name,
            answer.heat_loss_w_per_k,
            limits(answer.heat_loss_95, 0)
        ),
    ];
    match &answer.own_home {
        Some(own) => {
            lines.push(format!(
                "Base load         {:>7.1} kWh a day {}",
                own.base_load_kwh_per_day,
                limits(own.base_load_95, 1)
            ));
            lines.push(format!(
                "Rooms             {:>+7.1} K         {} against the brief; or other gains that do the same",
                own.warmer_k,
                limits(own.warmer_95, 1)
            ));
            if own.knows_sun {
                lines.push(format!(
                    "Sun               {:>7.2} times    {} of the brief's",
                    own.sun,
                    limits(own.sun_95, 2)
                ));
            }
            lines.push(format!(
                "Fit               CV(RMSE) {:.1} %",
                own.cv_rmse * 100.0
            ));
            lines.push(String::new());
            lines.push("A straight line through the same readings".to_owned());
            lines.push(format!(
                "  Effective       {:>7.0} W/K       {}",
                answer.effective_w_per_k,
                limits(answer.effective_95, 0)
            ));
        }
        None => lines.push(String::new()),
    }
    lines.push(format!(
        "  Base temperature{:>7.1} °C        {}{}",
        answer.base_temperature_c,
        limits(answer.base_temperature_95, 1),
        if answer.base_temperature_fitted {
            ""
        } else {
            ", of published homes: too few readings to fit it"
        }
    ));
    lines.push(format!(
        "  Base load       {:>7.1} kWh a day {}",
        answer.base_load_kwh_per_day,
        limits(answer.base_load_95, 1)
    ));
    lines.push(format!(
        "  Fit             r² {:.3}, CV(RMSE) {:.1} %",
        answer.r_squared,
        answer.cv_rmse * 100.0
    ));
    if let Some(survey) = answer.survey_w_per_k {
        lines.push(format!(
            "Survey            {survey:>7.0} W/K       the brief's own, used for sizing"
        ));
    }
    lines.push(String::new());
    let own = answer.own_home.is_some();
    lines.push(format!(
        "  from        to          outdoors  kWh a day  by the line{}",
        if own { "  by the home" } else { "" }
    ));
    for interval in &answer.intervals {
        lines.push(format!(
            "  {}  {}  {:>5.1} °C  {:>9.1}  {:>11.1}{}{}",
            interval.from,
            interval.to,
            interval.outdoor_c,
            interval.kwh_per_day,
            interval.fitted_kwh_per_day,
            interval
                .model_kwh_per_day
                .map_or_else(String::new, |kwh| format!("{kwh:>13.1}")),
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
        if knows_sun {
            "The heat loss is that at which the home of the brief, run hour by hour with its set points, storage, gains, sun and \
             boiler,\nuses what was metered. Readings cannot tell a loss from an efficiency, nor a set point from internal gains: \
             the limits hold\nwhat may be wrong with them."
        } else {
            "This is an effective coefficient, not the heat-loss coefficient: the sun is not known here, and sunless months are \
             cold\nmonths, so it holds how the sun goes with the cold and is larger. Weather with radiation and a floor area \
             part the two."
        }
        .to_owned(),
    );
    lines.push(
        "Readings hold cold rooms and hours without heating: a figure to set beside a survey, never to size with\nalone. \
         Size from a room-by-room heat-loss calculation by a competent person."
            .to_owned(),
    );
    lines.join("\n")
}
