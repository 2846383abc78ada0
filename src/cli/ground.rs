//! `ground`: a ground source through its life, and the shortest loop that would do.

use std::path::{Path, PathBuf};

use super::{Failure, Format, NewFile, picture_file, print, print_json, warn, write_files};
use crate::answer::ground::ground_answer;
use crate::brief::Brief;
use crate::calendar::HOURS_PER_LEAP_YEAR;
use crate::chart::{
    BrineLife, BrineLine, BrineYear, Marks, brine_life, brine_year, calendar_months,
};
use crate::report::ground_text;
use crate::source::Source;
use crate::study::{Case, Contender, LoopYear, loop_life, shortest_loop};

/// Bores, trenches and wells of a brief through the years: brine, walls, performance, and the shortest loop.
///
/// The loop begins in undisturbed ground and goes through the weather of the brief again and again.
#[derive(Debug, clap::Args)]
#[command(after_help = "\
Examples:
  winterledger ground briefs/ground.toml
  winterledger ground briefs/ground.toml --choice \"Trenches\" --years 40
  winterledger ground briefs/ground.toml --floor -2 --chart brine.svg")]
pub struct Args {
    /// Brief (TOML).
    brief: PathBuf,
    /// Only the choice of this label; otherwise all ground sources of the brief.
    #[arg(long, value_name = "LABEL")]
    choice: Option<String>,
    /// Years of the loop's life.
    #[arg(long, value_name = "YEARS", default_value_t = 25, value_parser = clap::value_parser!(u32).range(1..=60))]
    years: u32,
    /// Floor of the brine entering the machine for the shortest loop, °C.
    #[arg(
        long,
        value_name = "°C",
        default_value_t = 0.0,
        allow_negative_numbers = true
    )]
    floor: f64,
    /// Leave the search for the shortest loop out.
    #[arg(long)]
    no_sizing: bool,
    /// Pictures of the brine through the first and the last year and over the life, SVG or PNG by the ending; several ground sources
    /// are numbered.
    #[arg(long, value_name = "FILE")]
    chart: Option<PathBuf>,
    /// Overwrite a picture that is there already.
    #[arg(long)]
    force: bool,
    /// How to print the result.
    #[arg(long, value_enum, default_value_t)]
    format: Format,
}

/// Floors that make sense for brine, °C.
const FLOOR_C: crate::bounds::Bound = crate::bounds::Bound {
    label: "floor of the brine",
    low: -15.0,
    high: 15.0,
    unit: "°C",
};

/// Runs the command.
///
/// # Errors
/// When the brief cannot be used, has no such ground source, or a picture cannot be written.
pub fn run(args: &Args) -> Result<(), Failure> {
    if !FLOOR_C.holds(args.floor) {
        return Err(Failure::argument(
            "--floor",
            args.floor.to_string(),
            FLOOR_C.words(),
        ));
    }
    let brief = Brief::read(&args.brief)?.of_a_year("")?;
    let case = &brief.case;
    let chosen = chosen(case, args)?;
    let mut answers = Vec::new();
    let mut pictures = Vec::new();
    for (index, contender) in chosen.iter().enumerate() {
        let mut lines = Lines::new(args.years);
        let life = loop_life(case, contender, args.years, |year, _, brine| {
            lines.see(year, brine.map_or(f64::NAN, |brine| brine.entering_c));
        });
        let shortest =
            (!args.no_sizing).then(|| shortest_loop(case, contender, args.floor, args.years));
        answers.extend(ground_answer(contender, &life, shortest));
        if let Some(path) = &args.chart {
            let path = numbered(path, index, chosen.len());
            let life_path = beside(&path, "-life");
            pictures.push(year_picture(&path, contender, &life, lines)?);
            if args.years > 1 {
                pictures.push(life_picture(&life_path, contender, &life)?);
            }
        }
    }
    write_files(&pictures, args.force)?;
    let mut answers = answers.into_iter();
    let Some(mut first) = answers.next() else {
        return Ok(());
    };
    first.others = answers.collect();
    let mut findings = brief.told.findings.clone();
    for answer in std::iter::once(&first).chain(&first.others) {
        findings.extend(answer.findings.iter().cloned());
    }
    warn(&findings);
    match args.format {
        Format::Json => print_json(&first),
        Format::Text => print(&ground_text(&first)),
    }
}

/// The ground sources that are asked for.
fn chosen<'a>(case: &'a Case, args: &Args) -> Result<Vec<&'a Contender>, Failure> {
    let is_ground = |contender: &&Contender| {
        let machine = contender.system.heating.machine();
        machine.is_some_and(|machine| machine.source != Source::OutdoorAir)
    };
    let all: Vec<_> = case.contenders.iter().filter(is_ground).collect();
    let labels = all
        .iter()
        .map(|one| format!("\"{}\"", one.system.label))
        .collect::<Vec<_>>()
        .join(", ");
    let some: Vec<_> = match &args.choice {
        Some(label) => all
            .into_iter()
            .filter(|one| one.system.label == *label)
            .collect(),
        None => all,
    };
    if some.is_empty() {
        let found = args
            .choice
            .clone()
            .unwrap_or_else(|| args.brief.display().to_string());
        let allowed = if labels.is_empty() {
            "a brief with a choice of kind \"ground-source\"".to_owned()
        } else {
            format!("the label of a ground source: {labels}")
        };
        return Err(Failure::argument(
            if args.choice.is_some() {
                "--choice"
            } else {
                "BRIEF"
            },
            found,
            allowed,
        ));
    }
    Ok(some)
}

/// Entering temperatures of the first and the last year.
struct Lines {
    last: u32,
    first_year: Vec<f64>,
    last_year: Vec<f64>,
}

impl Lines {
    fn new(years: u32) -> Self {
        Self {
            last: years,
            first_year: Vec::new(),
            last_year: Vec::new(),
        }
    }

    fn see(&mut self, year: u32, entering_c: f64) {
        if year == 1 {
            self.first_year.push(entering_c);
        }
        if year == self.last && year > 1 {
            self.last_year.push(entering_c);
        }
    }
}

fn year_picture(
    path: &Path,
    contender: &Contender,
    life: &[LoopYear],
    lines: Lines,
) -> Result<NewFile, Failure> {
    let leap = lines.first_year.len() == HOURS_PER_LEAP_YEAR;
    let mut drawn = vec![BrineLine {
        label: "year 1".to_owned(),
        hours_c: lines.first_year,
    }];
    if !lines.last_year.is_empty() {
        drawn.push(BrineLine {
            label: format!("year {}", lines.last),
            hours_c: lines.last_year,
        });
    }
    let undisturbed_c = match contender.system.heating.machine() {
        Some(machine) => match &machine.source {
            Source::Buried(buried) if life.iter().any(|year| year.average_wall_c.is_some()) => {
                let column = buried.undisturbed();
                Some(column.iter().sum::<f64>() / column.len() as f64)
            }
            _ => None,
        },
        _ => None,
    };
    let data = BrineYear {
        source: contender.system.label.clone(),
        lines: drawn,
        months: calendar_months(leap),
        undisturbed_c,
        limit: limit(contender),
    };
    picture_file("--chart", path, brine_year(&data, &Marks::default()))
}

fn life_picture(path: &Path, contender: &Contender, life: &[LoopYear]) -> Result<NewFile, Failure> {
    let column = |figure: fn(&LoopYear) -> Option<f64>| -> Vec<f64> {
        life.iter()
            .map(|year| figure(year).unwrap_or(f64::NAN))
            .collect()
    };
    let mut lines = vec![
        (
            "lowest brine".to_owned(),
            column(|year| year.coldest.map(|hour| hour.entering_c)),
        ),
        (
            "mean brine".to_owned(),
            column(|year| Some(year.average_brine_c)),
        ),
    ];
    if life.iter().any(|year| year.average_wall_c.is_some()) {
        lines.push(("mean wall".to_owned(), column(|year| year.average_wall_c)));
    }
    let data = BrineLife {
        source: contender.system.label.clone(),
        lines,
        limit: limit(contender),
    };
    picture_file("--chart", path, brine_life(&data, &Marks::default()))
}

/// The lowest source temperature that the machine accepts.
fn limit(contender: &Contender) -> Option<(String, f64)> {
    contender.system.heating.machine().map(|machine| {
        (
            "lowest the machine accepts".to_owned(),
            machine.machine.limits().lowest_source_c,
        )
    })
}

/// The path of a picture, numbered when there are several.
fn numbered(path: &Path, index: usize, count: usize) -> PathBuf {
    if count < 2 {
        path.to_owned()
    } else {
        beside(path, &format!("-{}", index + 1))
    }
}

/// A path with something added to its name before the ending.
fn beside(path: &Path, added: &str) -> PathBuf {
    let part = |part: Option<&std::ffi::OsStr>| {
        part.map(|part| part.to_string_lossy().into_owned())
            .unwrap_or_default()
    };
    path.with_file_name(format!(
        "{}{added}.{}",
        part(path.file_stem()),
        part(path.extension())
    ))
}
