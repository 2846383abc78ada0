//! `ground`: a ground source through its life, and the shortest loop that would do.

use std::fmt::Write as _;
use std::path::{Path, PathBuf};

use comfy_table::{CellAlignment, Table, presets};

use super::{Failure, Format, NewFile, print, print_json, warn, write_files};
use crate::answer::ground::{GROUND_CAUTION, GroundAnswer, ground_answer};
use crate::brief::Brief;
use crate::calendar::HOURS_PER_LEAP_YEAR;
use crate::chart::{BrineLine, BrineYear, Marks, brine_year, calendar_months};
use crate::source::Source;
use crate::study::{Case, Contender, LoopYear, loop_life, shortest_loop};
use crate::year::Heating;

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
    #[arg(long, value_name = "°C", default_value_t = 0.0, allow_negative_numbers = true)]
    floor: f64,
    /// Leave the search for the shortest loop out.
    #[arg(long)]
    no_sizing: bool,
    /// Picture of the brine through the first and the last year, SVG or PNG by its ending; one file for each ground source.
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
const FLOOR_C: crate::bounds::Bound =
    crate::bounds::Bound { label: "floor of the brine", low: -15.0, high: 15.0, unit: "°C" };

/// Runs the command.
///
/// # Errors
/// When the brief cannot be used, has no such ground source, or a picture cannot be written.
pub fn run(args: &Args) -> Result<(), Failure> {
    if !FLOOR_C.holds(args.floor) {
        return Err(Failure::argument("--floor", args.floor.to_string(), FLOOR_C.words()));
    }
    let brief = Brief::read(&args.brief)?;
    let case = &brief.case;
    let chosen = chosen(case, args)?;
    let mut answers = Vec::new();
    let mut pictures = Vec::new();
    for contender in &chosen {
        let mut lines = Lines::new(args.years);
        let life = loop_life(case, contender, args.years, |year, _, brine| {
            lines.see(year, brine.map_or(f64::NAN, |brine| brine.entering_c));
        });
        let shortest = (!args.no_sizing).then(|| shortest_loop(case, contender, args.floor, args.years));
        answers.extend(ground_answer(contender, &life, shortest));
        if let Some(path) = &args.chart {
            let path = numbered(path, pictures.len(), chosen.len());
            pictures.push(picture(&path, contender, &life, lines)?);
        }
    }
    write_files(&pictures, args.force)?;
    let mut answers = answers.into_iter();
    let Some(mut first) = answers.next() else { return Ok(()) };
    first.others = answers.collect();
    let mut findings = brief.told.findings.clone();
    for answer in std::iter::once(&first).chain(&first.others) {
        findings.extend(answer.findings.iter().cloned());
    }
    warn(&findings);
    match args.format {
        Format::Json => print_json(&first),
        Format::Text => print(&text(&first)),
    }
}

/// The ground sources that are asked for.
fn chosen<'a>(case: &'a Case, args: &Args) -> Result<Vec<&'a Contender>, Failure> {
    let is_ground = |contender: &&Contender| match &contender.system.heating {
        Heating::HeatPump(machine) => machine.source != Source::OutdoorAir,
        _ => false,
    };
    let all: Vec<_> = case.contenders.iter().filter(is_ground).collect();
    let labels = all.iter().map(|one| format!("\"{}\"", one.system.label)).collect::<Vec<_>>().join(", ");
    let some: Vec<_> = match &args.choice {
        Some(label) => all.into_iter().filter(|one| one.system.label == *label).collect(),
        None => all,
    };
    if some.is_empty() {
        let found = args.choice.clone().unwrap_or_else(|| args.brief.display().to_string());
        let allowed = if labels.is_empty() {
            "a brief with a choice of kind \"ground-source\"".to_owned()
        } else {
            format!("the label of a ground source: {labels}")
        };
        return Err(Failure::argument(if args.choice.is_some() { "--choice" } else { "BRIEF" }, found, allowed));
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
        Self { last: years, first_year: Vec::new(), last_year: Vec::new() }
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

fn picture(
    path: &Path,
    contender: &Contender,
    life: &[LoopYear],
    lines: Lines,
) -> Result<NewFile, Failure> {
    let leap = lines.first_year.len() == HOURS_PER_LEAP_YEAR;
    let mut drawn = vec![BrineLine { label: "year 1".to_owned(), hours_c: lines.first_year }];
    if !lines.last_year.is_empty() {
        drawn.push(BrineLine { label: format!("year {}", lines.last), hours_c: lines.last_year });
    }
    let (limit, undisturbed_c) = match &contender.system.heating {
        Heating::HeatPump(machine) => (
            Some(("lowest the machine accepts".to_owned(), machine.machine.limits().lowest_source_c)),
            match &machine.source {
                Source::Buried(buried) if life.iter().any(|year| year.average_wall_c.is_some()) => {
                    let column = buried.undisturbed();
                    Some(column.iter().sum::<f64>() / column.len() as f64)
                }
                _ => None,
            },
        ),
        _ => (None, None),
    };
    let data = BrineYear {
        source: contender.system.label.clone(),
        lines: drawn,
        months: calendar_months(leap),
        undisturbed_c,
        limit,
    };
    let fail = |reason: String| Failure::Write { path: path.to_owned(), reason };
    let picture = brine_year(&data, &Marks::default()).map_err(|error| fail(error.to_string()))?;
    let is_png = path.extension().is_some_and(|ending| ending.eq_ignore_ascii_case("png"));
    let content = if is_png {
        picture.png().map_err(|error| fail(error.to_string()))?
    } else {
        picture.svg().map_err(|error| fail(error.to_string()))?.into_bytes()
    };
    Ok(NewFile::new(path, content))
}

/// The path of a picture, numbered when there are several.
fn numbered(path: &Path, index: usize, count: usize) -> PathBuf {
    if count < 2 {
        return path.to_owned();
    }
    let stem = path.file_stem().map(|stem| stem.to_string_lossy().into_owned()).unwrap_or_default();
    let ending = path.extension().map(|ending| ending.to_string_lossy().into_owned()).unwrap_or_default();
    path.with_file_name(format!("{stem}-{}.{ending}", index + 1))
}

/// The answers as text for a terminal of 80 columns.
fn text(first: &GroundAnswer) -> String {
    let mut text = String::new();
    for answer in std::iter::once(first).chain(&first.others) {
        // Writing to a String cannot fail.
        let _ = writeln!(text, "{}\n{}\n{}", heading(answer), table(answer), below(answer));
    }
    let _ = writeln!(text, "{}", wrapped(GROUND_CAUTION));
    text
}

fn heading(answer: &GroundAnswer) -> String {
    let mut text = format!("{}: {}, undisturbed {:.1} °C", answer.label, answer.kind, answer.undisturbed_c);
    if let Some(buried) = &answer.buried {
        let _ = write!(
            text,
            "\n  {:.0} m, wall to brine {:.3} m K/W; {}, {:.2} kg/s, Reynolds {:.0},\n  freezes at {:.1} °C; pump of the loop {:.0} W",
            buried.length_m,
            buried.resistance_m_k_per_w,
            buried.brine,
            buried.flow_kg_per_s,
            buried.reynolds,
            buried.brine_freezing_c,
            buried.pump_w,
        );
    }
    text
}

fn table(answer: &GroundAnswer) -> Table {
    let mut table = Table::new();
    table.load_style(presets::UTF8_HORIZONTAL_ONLY);
    table.set_header(std::iter::once("Year of its life".to_owned()).chain(answer.years.iter().map(|y| y.year.to_string())));
    let c = |value: Option<f64>| value.map_or_else(|| "–".to_owned(), |c| format!("{c:.1}"));
    let two = |value: Option<f64>| value.map_or_else(|| "–".to_owned(), |v| format!("{v:.2}"));
    let mut row = |name: &str, figure: &dyn Fn(&crate::answer::ground::GroundYear) -> String| {
        table.add_row(std::iter::once(name.to_owned()).chain(answer.years.iter().map(figure)));
    };
    row("Lowest entering the machine, °C", &|y| c(y.lowest_brine_c));
    row("  mean of the brine then", &|y| c(y.lowest_mean_c));
    row("  leaving the machine then", &|y| c(y.lowest_leaving_c));
    row("Average entering, °C", &|y| c(y.average_brine_c));
    row("Wall, mean of the year, °C", &|y| c(y.bore_wall_c));
    row("  lowest", &|y| c(y.lowest_wall_c));
    row("SPF with source pumps, H2", &|y| two(y.spf_h2));
    row("Heat taken, kWh", &|y| format!("{:.0}", y.taken_kwh));
    row("Heat put back, kWh", &|y| format!("{:.0}", y.returned_kwh));
    row("Source pumps, kWh", &|y| format!("{:.0}", y.source_pump_kwh));
    row("Backup and immersion, kWh", &|y| format!("{:.0}", y.backup_kwh));
    row("Hours the machine stood", &|y| y.hours_stopped.to_string());
    for column in table.column_iter_mut().skip(1) {
        column.set_cell_alignment(CellAlignment::Right);
    }
    table
}

/// What stands below the table: sizing, and how far the method goes.
fn below(answer: &GroundAnswer) -> String {
    let mut text = String::new();
    if let Some(sizing) = &answer.sizing {
        let mut sentence = format!(
            "Shortest loop with brine entering at {:.1} °C or above in year {}: {:.0} m. Then entering {:.1} °C, mean {:.1} °C, leaving {:.1} °C; {:.0} W/m at the machine's rated draw, {:.0} full-load hours.",
            sizing.floor_c,
            sizing.year,
            sizing.length_m,
            sizing.entering_c,
            sizing.mean_c,
            sizing.leaving_c,
            sizing.rated_w_per_m,
            sizing.full_load_hours,
        );
        if let (Some([at_1800, at_2400]), Some([least, most])) = (sizing.rule_of_thumb_w_per_m, sizing.rule_of_thumb_m) {
            let range = |[low, high]: [f64; 2]| {
                if low == 0.0 {
                    format!("below {high:.0}")
                } else if low == high {
                    format!("{high:.0}")
                } else {
                    format!("{low:.0} to {high:.0}")
                }
            };
            let length = if (most - least).abs() < 0.5 { format!("{least:.0} m") } else { format!("{least:.0} to {most:.0} m") };
            let _ = write!(
                sentence,
                " The historical rule of thumb (VDI 4640-2:2001, superseded) for this ground is {} W/m at 1800 h and {} W/m at 2400 h: {length}. It knows neither this home nor its years.",
                range(at_1800),
                range(at_2400),
            );
        }
        let _ = writeln!(text, "{}", wrapped(&sentence));
    }
    if let Some(buried) = &answer.buried {
        let _ = writeln!(
            text,
            "{}",
            wrapped(&format!(
                "In the first {:.1} h after a change of the draw the line source leaves the bore's own radius out: at most {:.1} K of the wall's fall at the greatest draw, less by what grout holds.",
                buried.line_source_valid_from_h, buried.line_source_error_k
            ))
        );
    }
    text
}

/// Breaks a sentence at 80 columns.
fn wrapped(sentence: &str) -> String {
    const WIDTH: usize = 80;
    let mut lines = vec![String::new()];
    for word in sentence.split_whitespace() {
        let length = lines.last().map_or(0, |line| line.chars().count());
        if length > 0 && length + 1 + word.chars().count() > WIDTH {
            lines.push(String::new());
        }
        if let Some(line) = lines.last_mut() {
            if !line.is_empty() {
                line.push(' ');
            }
            line.push_str(word);
        }
    }
    lines.join("\n")
}
