//! `machine`: a machine sheet fitted, its points, its parameters, its picture, and how it runs at a condition.

use std::path::{Path, PathBuf};

use super::{Failure, Format, NewFile, print, print_json, warn, write_files};
use crate::answer::machine::{MachineAnswer, OperatingAnswer};
use crate::chart::{
    ChartError, FlowCurve, MachinePerformance, Marks, TestedPoint, machine_performance,
};
use crate::heatpump::{
    ColdSide, Duty, Fitted, HeatPump, LEAST_DIFFERENCE_K, Sheet, SourceKind, SpeedAt,
    default_spread_k, fit, leave_one_out, typical_names,
};
use crate::problem::{Finding, Place, Problem, Problems, Severity};
use crate::report::plain_table;
use crate::units::{Power, Temperature, parse};

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

/// The machine on its bench at a condition from the command line.
fn operating(
    machine: &HeatPump,
    at: &str,
    output: Option<&str>,
    findings: &mut Vec<Finding>,
) -> Result<OperatingAnswer, Failure> {
    let (source_c, flow_c) = condition(at)?;
    let bench = machine.at_bench();
    let cold = ColdSide {
        open_c: source_c,
        k_per_kw: 0.0,
        relative_humidity: None,
    };
    let limits = machine.limits();
    if !limits.allows_source(source_c) {
        let allowed = format!(
            "a source from {} to {} °C, this machine's limits",
            limits.lowest_source_c, limits.highest_source_c
        );
        return Err(Failure::argument(
            "--at",
            format!("source {source_c} °C"),
            allowed,
        ));
    }
    let highest_c = limits.highest_flow_at(source_c);
    let lowest_c = source_c + LEAST_DIFFERENCE_K;
    if flow_c > highest_c || flow_c < lowest_c {
        let allowed = format!(
            "a flow from {lowest_c} to {highest_c} °C at this source, this machine's limits"
        );
        return Err(Failure::argument(
            "--at",
            format!("flow {flow_c} °C"),
            allowed,
        ));
    }
    let greatest_kw = bench.greatest_output_kw(&cold, flow_c);
    let heat_kw = match output {
        Some(text) => wanted_kw(text)?,
        None => greatest_kw,
    };
    if heat_kw > greatest_kw * (1.0 + 1e-9) {
        findings.push(Finding::new(
            Severity::Warning,
            format!("{heat_kw} kW is more than the {greatest_kw:.2} kW it can give there"),
            "it runs at its greatest output",
        ));
    }
    let duty = Duty {
        heat_kw,
        flow_c,
        spread_k: default_spread_k(flow_c),
        hours: 1.0,
        at_full_output: false,
    };
    let exact = bench
        .explain(&cold, &duty)
        .map_err(|error| Failure::argument("--at", error.to_string(), ""))?;
    OperatingAnswer::new(&exact, machine.field_factor()).ok_or_else(|| {
        Failure::argument("--at", format!("{at}: the machine does not run there"), "")
    })
}

/// A number that takes a unit when it is bare.
fn bare(text: &str, unit: &str) -> String {
    match text.trim().parse::<f64>() {
        Ok(number) => format!("{number} {unit}"),
        Err(_) => text.to_owned(),
    }
}

fn condition(text: &str) -> Result<(f64, f64), Failure> {
    let temperature = |part: &str| parse::<Temperature>(&bare(part, "°C")).ok().map(|t| t.c());
    text.split_once('/')
        .and_then(|(source, flow)| Some((temperature(source)?, temperature(flow)?)))
        .ok_or_else(|| {
            let allowed = "source and flow temperature in °C, such as -7/50";
            Failure::argument("--at", format!("\"{text}\""), allowed)
        })
}

fn wanted_kw(text: &str) -> Result<f64, Failure> {
    let allowed = "a heat output above 0 kW, such as 4";
    parse::<Power>(&bare(text, "kW"))
        .ok()
        .map(|power| power.kw())
        .filter(|kw| *kw > 0.0)
        .ok_or_else(|| Failure::argument("--output", format!("\"{text}\""), allowed))
}

/// Flow temperatures of the picture: the coolest and the hottest that were tested and the one nearest between, else usual ones.
fn flows(sheet: &Sheet) -> Vec<f64> {
    let mut tested: Vec<f64> = sheet.points.iter().map(|point| point.flow_c).collect();
    tested.sort_by(f64::total_cmp);
    tested.dedup_by(|a, b| (*a - *b).abs() < 1.0);
    if let [first, .., last] = *tested.as_slice() {
        let middle = 0.5 * (first + last);
        let nearest = tested[1..tested.len() - 1]
            .iter()
            .copied()
            .min_by(|a, b| (a - middle).abs().total_cmp(&(b - middle).abs()));
        return vec![first, nearest.unwrap_or(middle), last];
    }
    let highest_c = sheet.limits.highest_flow_anywhere();
    [35.0, 45.0, 55.0]
        .into_iter()
        .filter(|flow_c| *flow_c <= highest_c)
        .collect()
}

fn picture(sheet: &Sheet, fitted: &Fitted, path: &Path) -> Result<NewFile, Failure> {
    let machine = fitted.heat_pump.at_bench();
    let limits = machine.limits();
    let curve = |flow_c: f64| {
        let first = limits.lowest_source_c.ceil() as i64;
        let last = limits.highest_source_c.floor() as i64;
        let points = (first..=last)
            .map(|source_c| source_c as f64)
            .filter(|source_c| *source_c <= flow_c - LEAST_DIFFERENCE_K)
            .filter_map(|source_c| {
                let cold = ColdSide {
                    open_c: source_c,
                    k_per_kw: 0.0,
                    relative_humidity: None,
                };
                let heat_kw = machine.greatest_output_kw(&cold, flow_c);
                let duty = Duty {
                    heat_kw,
                    flow_c,
                    spread_k: default_spread_k(flow_c),
                    hours: 1.0,
                    at_full_output: true,
                };
                let delivered = machine.deliver(&cold, &duty);
                let cop = delivered.heat_kwh / delivered.electricity_kwh();
                (heat_kw > 0.0).then_some((source_c, heat_kw, cop))
            })
            .collect();
        FlowCurve { flow_c, points }
    };
    let at_maximum = sheet.points.iter().any(|p| p.at == SpeedAt::Maximum);
    let data = MachinePerformance {
        machine: machine.label().to_owned(),
        source: match sheet.source {
            SourceKind::Air => "Outdoor air",
            SourceKind::Brine => "Brine entering",
            SourceKind::Water => "Ground water entering",
        }
        .to_owned(),
        flows: flows(sheet).into_iter().map(curve).collect(),
        // The lines are at greatest output: points at other speeds would lie off them for a good reason.
        tested: sheet
            .points
            .iter()
            .filter(|p| !at_maximum || p.at == SpeedAt::Maximum)
            .map(|p| TestedPoint {
                source_c: p.source_c,
                flow_c: p.flow_c,
                output_kw: p.heat_kw,
                cop: p.cop,
            })
            .collect(),
        envelope: Some((limits.lowest_source_c, limits.highest_source_c)),
    };
    let undrawn = |error: ChartError| Failure::Write {
        path: path.to_owned(),
        reason: error.to_string(),
    };
    let drawn = machine_performance(&data, &Marks::default()).map_err(undrawn)?;
    let extension = path.extension().map(|found| found.to_ascii_lowercase());
    let content = match extension.as_deref().and_then(|found| found.to_str()) {
        Some("svg") => drawn.svg().map_err(undrawn)?.into_bytes(),
        Some("png") => drawn.png().map_err(undrawn)?,
        _ => {
            return Err(Failure::argument(
                "--chart",
                path.display().to_string(),
                "a file that ends in .svg or .png",
            ));
        }
    };
    Ok(NewFile::new(path, content))
}

fn text(sheet: &Sheet, fitted: &Fitted, answer: &MachineAnswer, cautions: &[Finding]) -> String {
    let letter = sheet.letter();
    let (source_c, flow_c) = sheet.rated_condition();
    let mut lines = vec![
        format!("{} ({})", answer.label, answer.refrigerant),
        format!(
            "greatest output {:.2} kW at {letter}{source_c}/W{flow_c}",
            answer.rated_output_kw
        ),
    ];
    if answer.typical {
        lines.push(
            "a typical machine: an invented sheet with numbers usual for its kind, no product"
                .to_owned(),
        );
    }
    lines.extend([
        String::new(),
        point_table(fitted, answer, letter),
        String::new(),
        summary(answer),
        String::new(),
        parameter_table(answer),
    ]);
    for assumed in &answer.assumptions {
        lines.push(format!(
            "assumed: {} = {} ({})",
            assumed.name, assumed.value, assumed.from
        ));
    }
    if let Some(at) = &answer.at {
        lines.extend([String::new(), operating_text(at, letter)]);
    }
    lines.extend([
        String::new(),
        format!(
            "All figures are laboratory figures. In a home electricity is taken {:.0} % higher (field factor {}, Ruhnau et al. 2019).",
            100.0 * (1.0 / answer.field_factor - 1.0),
            answer.field_factor
        ),
    ]);
    lines.extend(cautions.iter().map(ToString::to_string));
    lines.join("\n")
}

fn point_table(fitted: &Fitted, answer: &MachineAnswer, letter: char) -> String {
    let percent = |value: Option<f64>| value.map_or_else(String::new, |v| format!("{v:+.1}"));
    let rows = fitted
        .report
        .points
        .iter()
        .zip(&answer.points)
        .map(|(report, p)| {
            vec![
                report.point.name(letter),
                p.at.to_owned(),
                format!("{:.2}", p.heat_kw),
                format!("{:.2}", p.model_heat_kw),
                format!("{:.2}", p.cop),
                format!("{:.2}", p.model_cop),
                percent(Some(p.physics_percent)),
                percent(p.left_out_percent),
            ]
        });
    let header = [
        "point",
        "at",
        "kW",
        "model kW",
        "COP",
        "model COP",
        "physics alone %",
        "left out %",
    ];
    plain_table(header, rows)
}

fn summary(answer: &MachineAnswer) -> String {
    let mut text = format!(
        "COP by physics alone {:.1} % root-mean-square",
        answer.physics_rms_percent
    );
    if let Some(left_out) = answer.left_out_rms_percent {
        text += &format!(", of points left out {left_out:.1} %");
    }
    text += &format!(
        "; with correction every point within {:.2} %; map within {:.3} % of the exact machine",
        answer.largest_percent, answer.map_error_percent
    );
    text
}

fn parameter_table(answer: &MachineAnswer) -> String {
    let rows = answer
        .parameters
        .iter()
        .filter(|p| p.prior_width.is_some())
        .map(|p| {
            vec![
                p.name.to_owned(),
                figure(p.value),
                figure(p.prior),
                p.unit.to_owned(),
                p.from.to_owned(),
            ]
        });
    plain_table(
        [
            "fitted parameter",
            "value",
            "believed before",
            "unit",
            "because of",
        ],
        rows,
    )
}

/// Three significant figures or so.
fn figure(value: f64) -> String {
    match value.abs() {
        100.0.. => format!("{value:.0}"),
        10.0.. => format!("{value:.1}"),
        0.1.. => format!("{value:.2}"),
        _ => format!("{value:.4}"),
    }
}

fn operating_text(at: &OperatingAnswer, letter: char) -> String {
    let mut text = format!(
        "at {letter}{}/W{:.1}: heat {:.2} kW, electricity {:.3} kW, COP {:.2} (in a home {:.2})\n\
         speed {:.2} of its reference, running {:.0} % of the time, evaporating {:.1} °C, condensing {:.1} °C, \
         pressure ratio {:.2}, isentropic efficiency {:.2}",
        at.source_c,
        at.flow_c,
        at.heat_kw,
        at.electric_kw,
        at.cop,
        at.cop_at_home,
        at.speed,
        100.0 * at.running_fraction,
        at.evaporating_c,
        at.condensing_c,
        at.pressure_ratio,
        at.isentropic_efficiency
    );
    if at.frost_cop_share > 0.0 {
        text += &format!(
            "\nfrost takes {:.1} % of output and {:.1} % of COP in air of the standard humidity",
            100.0 * at.frost_output_share,
            100.0 * at.frost_cop_share
        );
    }
    text
}
