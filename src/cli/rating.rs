//! `rating`: the seasonal figures of a machine by the bin method of EN 14825.

use clap::builder::{PossibleValuesParser, TypedValueParser};

use super::machine::sheet;
use super::{Failure, Format, print, print_json, warn};
use crate::answer::rating::RatingAnswer;
use crate::bounds;
use crate::document::Word;
use crate::heatpump::rating::{
    Application, Climate, Rated, RatingError, rate_declared, rate_machine,
};
use crate::heatpump::{Sheet, fit};
use crate::report::plain_table;
use crate::units::{Power, parse};

/// Seasonal figures of a machine for a climate and an application (EN 14825, EU 811/2013 and 813/2013).
///
/// The points are those declared on the sheet for the climate and application, else the fitted machine's own.
#[derive(Debug, clap::Args)]
#[command(after_help = "\
Example:
  winterledger rating briefs/machines/air-r290-small.toml --climate average --application medium")]
pub struct Args {
    /// Machine sheet (TOML), or the name of a typical machine.
    sheet: String,
    /// Climate.
    #[arg(long, value_parser = words::<Climate>())]
    climate: Climate,
    /// Application: flow of 35, 45, 55 or 65 °C at the design outdoor temperature.
    #[arg(long, value_parser = words::<Application>())]
    application: Application,
    /// Design load, kW; without it the machine is sized to a usual bivalent temperature.
    #[arg(long, value_name = "KW", allow_hyphen_values = true)]
    design_load: Option<String>,
    /// Also print every bin.
    #[arg(long)]
    bins: bool,
    /// How the result is printed.
    #[arg(long, value_enum, default_value_t)]
    format: Format,
}

/// A parser of the words of an enum.
fn words<W: Word + PartialEq + Send + Sync>() -> impl TypedValueParser<Value = W> {
    let names = W::WORDS.iter().map(|(word, _)| *word);
    PossibleValuesParser::new(names)
        .try_map(|word| W::from_word(&word).map_err(|problem| problem.to_string()))
}

/// Rates and prints.
///
/// # Errors
/// A [`Failure`] with every problem of the sheet, or that the machine cannot be rated so.
pub fn run(args: &Args) -> Result<(), Failure> {
    let sheet = sheet(&args.sheet)?;
    let design_load_kw = match &args.design_load {
        Some(text) => Some(load_kw(text)?),
        None => None,
    };
    let rated = rated(&sheet, args, design_load_kw)?;
    let answer = RatingAnswer::new(&sheet, &rated, args.climate, args.application, args.bins);
    match args.format {
        Format::Text => {
            warn(&answer.findings);
            print(&text(&answer))
        }
        Format::Json => print_json(&answer),
    }
}

fn load_kw(text: &str) -> Result<f64, Failure> {
    let quantity = match text.trim().parse::<f64>() {
        Ok(number) => format!("{number} kW"),
        Err(_) => text.to_owned(),
    };
    parse::<Power>(&quantity)
        .ok()
        .map(|power| power.kw())
        .filter(|kw| bounds::DESIGN_LOAD_KW.holds(*kw))
        .ok_or_else(|| {
            Failure::argument(
                "--design-load",
                format!("\"{text}\""),
                bounds::DESIGN_LOAD_KW.words(),
            )
        })
}

fn rated(sheet: &Sheet, args: &Args, design_load_kw: Option<f64>) -> Result<Rated, Failure> {
    let refuse = |error: RatingError| Failure::argument("--application", error.to_string(), "");
    let declared = sheet
        .declared
        .iter()
        .any(|p| p.climate == args.climate && p.application == args.application);
    if declared {
        let Some(load) = design_load_kw else {
            return Err(Failure::argument(
                "--design-load",
                "is missing, and the sheet declares points for this climate and application",
                "the design load Pdesignh that they were declared for, kW",
            ));
        };
        if let Some(rated) = rate_declared(sheet, args.climate, args.application, load) {
            return rated.map_err(refuse);
        }
    }
    let fitted = fit(sheet)?;
    rate_machine(
        &fitted.heat_pump,
        args.climate,
        args.application,
        design_load_kw,
    )
    .map_err(refuse)
}

fn text(answer: &RatingAnswer) -> String {
    let mut lines = vec![
        format!(
            "{}: {} climate, {} temperature application",
            answer.label, answer.climate, answer.application
        ),
        format!(
            "design load {:.2} kW, bivalent temperature {:.1} °C, operation limit {:.0} °C; points {}",
            answer.design_load_kw,
            answer.bivalent_c,
            answer.operation_limit_c,
            match answer.from {
                "declared" => "declared on the sheet",
                _ => "of the fitted machine",
            }
        ),
    ];
    if answer.typical {
        lines.push("a typical machine: an invented sheet, no product".to_owned());
    }
    lines.extend([
        String::new(),
        format!(
            "SCOP {:.2}   SCOPon {:.2}   SCOPnet {:.2}   ηs {:.0} %",
            answer.scop, answer.scop_on, answer.scop_net, answer.eta_s_percent
        ),
        format!(
            "heat {:.0} kWh, electricity {:.0} kWh, of it supplementary heater {:.0} kWh a year",
            answer.qh_kwh, answer.electricity_kwh, answer.heater_kwh
        ),
        String::new(),
        point_table(answer),
    ]);
    if let Some(bins) = &answer.bins {
        let rows = bins.iter().map(|b| {
            vec![
                format!("{:.0}", b.outdoor_c),
                format!("{:.0}", b.hours),
                format!("{:.2}", b.load_kw),
                format!("{:.2}", b.heater_kw),
                format!("{:.2}", b.cop),
            ]
        });
        lines.push(String::new());
        lines.push(plain_table(
            ["outdoor °C", "hours", "load kW", "heater kW", "COP"],
            rows,
        ));
    }
    lines.extend([
        String::new(),
        "Bin method of EN 14825; the cycling correction is made at the points. Laboratory figures: a home needs more.".to_owned(),
    ]);
    lines.join("\n")
}

fn point_table(answer: &RatingAnswer) -> String {
    let rows = answer.points.iter().map(|p| {
        vec![
            format!("{:.1}", p.outdoor_c),
            format!("{:.1}", p.flow_c),
            format!("{:.0}", 100.0 * p.part_load_ratio),
            format!("{:.2}", p.load_kw),
            format!("{:.2}", p.capacity_kw),
            format!("{:.2}", p.cop_declared),
            format!("{:.2}", p.cop),
        ]
    });
    let header = [
        "outdoor °C",
        "flow °C",
        "part load %",
        "load kW",
        "capacity kW",
        "COP there",
        "COP with cycling",
    ];
    plain_table(header, rows)
}
