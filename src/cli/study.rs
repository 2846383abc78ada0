//! `study`: what would change the answer.

use std::path::{Path, PathBuf};

use super::{Failure, Format, NewFile, print, print_json, warn, write_files};
use crate::answer::lifetime::LifetimeAnswer;
use crate::answer::study::{AxisAnswer, ChoiceStudy, StudyAnswer, TwoLeversAnswer, Wish, studies};
use crate::brief::Brief;
use crate::chart::{
    ChartError, Contours, CumulativeSpend, EmitterStep, EmitterStudy, Marks, Picture, Swing,
    Swings, SystemSpend, contours, cumulative_spend, emitter_study, swings,
};
use crate::problem::{Place, Problem, Problems};
use crate::report::study_text;
use crate::study::{Case, Lever};

/// Values of each of two prices moved together.
const PRICE_STEPS: usize = 40;
/// Values of each of two other levers: every pair of values is a year that is run.
const OTHER_STEPS: usize = 12;

/// What would change the answer: break-even, emitters, size, prices, swings and the years of each system's life.
///
/// Without a brief it runs the demonstration home that is built in.
#[derive(Debug, clap::Args)]
#[command(after_help = "\
Examples:
  winterledger study                                     the built-in demonstration home
  winterledger study briefs/terrace.toml --out study     study.json and pictures
  winterledger study --choice \"Air source, larger radiators\"
  winterledger study --over \"heat loss\" --against \"design flow temperature\" --out out --force

Levers: electricity rate, gas rate, heat loss, design flow temperature, indoor temperature,
hot water, rated output, share of laboratory performance kept, loop resistance, loop length,
capital, grant, carbon of electricity.")]
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
    let outcomes = brief.case.run()?;
    let answer = studies(&brief.case, &outcomes, &brief.told, &wish)?;
    if let Some(folder) = &args.out {
        write_files(&files(&answer, folder)?, args.force)?;
    }
    warn(&answer.findings);
    match args.format {
        Format::Json => print_json(&answer),
        Format::Text => print(&study_text(&answer)),
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

fn files(answer: &StudyAnswer, folder: &Path) -> Result<Vec<NewFile>, Failure> {
    let cannot = |error: &dyn std::fmt::Display| Failure::Write {
        path: folder.to_owned(),
        reason: error.to_string(),
    };
    let json = serde_json::to_vec_pretty(answer).map_err(|error| cannot(&error))?;
    let mut files = vec![NewFile::new(folder.join("study.json"), json)];
    let mut add = |name: String, picture: Result<Picture, ChartError>| -> Result<(), Failure> {
        let picture = picture.map_err(|error| cannot(&error))?;
        let svg = picture.svg().map_err(|error| cannot(&error))?;
        let png = picture.png().map_err(|error| cannot(&error))?;
        files.push(NewFile::new(folder.join(format!("{name}.svg")), svg));
        files.push(NewFile::new(folder.join(format!("{name}.png")), png));
        Ok(())
    };
    let marks = Marks::default();
    for (i, choice) in answer.choices.iter().enumerate() {
        let number = i + 1;
        if let Some(data) = emitters(choice, &answer.currency) {
            add(format!("emitters-{number}"), emitter_study(&data, &marks))?;
        }
        let data = two_levers(choice, &answer.currency);
        add(format!("two-levers-{number}"), contours(&data, &marks))?;
        if !choice.swings.is_empty() {
            add(
                format!("swings-{number}"),
                swings(&moved(choice, &answer.currency), &marks),
            )?;
        }
    }
    if let Some(lifetime) = &answer.lifetime {
        add(
            "spend".to_owned(),
            cumulative_spend(&spend(lifetime, &answer.currency), &marks),
        )?;
    }
    Ok(files)
}

fn emitters(choice: &ChoiceStudy, currency: &str) -> Option<EmitterStudy> {
    let steps = choice.emitters.as_ref()?;
    let flow = choice.break_even.iter().find(|lever| {
        lever.lever == Lever::FlowTemperature.name() && lever.measure == "yearly cost"
    });
    Some(EmitterStudy {
        choice: choice.label.clone(),
        currency: currency.to_owned(),
        steps: steps
            .iter()
            .map(|step| EmitterStep {
                flow_c: step.flow_c,
                times_today: step.times_today_output,
                saving: step.saving,
                spf_h4: step.spf_h4,
            })
            .collect(),
        now_c: flow.map(|flow| flow.now),
        crossings_c: flow.map_or_else(Vec::new, |flow| flow.values.clone()),
    })
}

fn two_levers(choice: &ChoiceStudy, currency: &str) -> Contours {
    let TwoLeversAnswer { x, y, saving } = &choice.two_levers;
    // Two prices are drawn as prices, so that lines of constant ratio mean something.
    let prices = x
        .price_now
        .zip(y.price_now)
        .filter(|(x, y)| *x > 0.0 && *y > 0.0);
    let scale = |axis: &AxisAnswer, price: Option<f64>| {
        let factor = price.unwrap_or(1.0);
        let values: Vec<f64> = axis.values.iter().map(|value| value * factor).collect();
        let unit = axis
            .price_unit
            .as_ref()
            .filter(|_| price.is_some())
            .unwrap_or(&axis.unit)
            .clone();
        (
            values,
            axis.now * factor,
            (sentence_case(&axis.lever), unit),
        )
    };
    let (x_values, x_now, x_name) = scale(x, prices.map(|prices| prices.0));
    let (y_values, y_now, y_name) = scale(y, prices.map(|prices| prices.1));
    let electricity_along_x = x.lever == Lever::ElectricityRate.name();
    Contours {
        outcome: format!("Saving in a year of {}", choice.label),
        currency: currency.to_owned(),
        x_name,
        y_name,
        x: x_values,
        y: y_values,
        values: saving.clone(),
        now: Some((x_now, y_now)),
        ratios: prices
            .filter(|_| electricity_along_x)
            .map_or_else(Vec::new, |_| vec![2.0, 3.0, 4.0, 5.0]),
    }
}

fn moved(choice: &ChoiceStudy, currency: &str) -> Swings {
    Swings {
        outcome: format!("Saving in a year of {}", choice.label),
        currency: currency.to_owned(),
        likely: choice.saving,
        levers: choice
            .swings
            .iter()
            .map(|swing| Swing {
                label: sentence_case(&swing.lever),
                low_text: end_text(swing.low, &swing.unit),
                high_text: end_text(swing.high, &swing.unit),
                low: swing.saving_at_low,
                high: swing.saving_at_high,
            })
            .collect(),
    }
}

/// The end of a swing as it stands in a picture: "× 0.8", "46 °C".
fn end_text(value: f64, unit: &str) -> String {
    match unit {
        "× today's" => format!("× {value:.2}"),
        "" => format!("{:.0} %", value * 100.0),
        _ => format!("{value:.0} {unit}"),
    }
}

fn spend(lifetime: &LifetimeAnswer, currency: &str) -> CumulativeSpend {
    CumulativeSpend {
        currency: currency.to_owned(),
        terms: format!(
            "real, discounted at {:.1} % a year",
            lifetime.discount_rate * 100.0
        ),
        systems: lifetime
            .systems
            .iter()
            .map(|system| SystemSpend {
                label: system.label.clone(),
                today: system.today,
                spent: system
                    .by_year
                    .iter()
                    .map(|year| year.spent_so_far_discounted)
                    .collect(),
            })
            .collect(),
    }
}

fn sentence_case(text: &str) -> String {
    let mut letters = text.chars();
    letters.next().map_or_else(String::new, |first| {
        first.to_uppercase().chain(letters).collect()
    })
}
