//! `cycle`: one refrigerant cycle, its state points and its pressure–enthalpy picture.

use std::path::{Path, PathBuf};

use super::{Failure, Format, NewFile, picture_file, print, print_json, warn, write_files};
use crate::answer::cycle::CycleAnswer;
use crate::chart::{Marks, PressureEnthalpy, StatePoint, pressure_enthalpy};
use crate::heatpump::cycle::{Cycle, CycleInputs, Diagram, DiagramPoint};
use crate::problem::{Place, Problem, Problems, Severity};
use crate::refrigerant::{Equation, Refrigerant, UnknownRefrigerant};
use crate::report::plain_table;

/// Solve one refrigerant cycle and print its state points.
#[derive(Debug, clap::Args)]
#[command(after_help = "\
Examples:
  winterledger cycle --refrigerant R290 --evaporating -5 --condensing 45
  winterledger cycle --refrigerant R32 --evaporating -12 --condensing 40 --chart cycle.svg")]
pub struct Args {
    /// Refrigerant: R290, R32, R410A, R134a, R1234yf or R600a.
    #[arg(long, value_name = "NAME")]
    refrigerant: String,
    /// Evaporating temperature, °C.
    #[arg(long, value_name = "°C", allow_hyphen_values = true)]
    evaporating: f64,
    /// Condensing temperature, °C.
    #[arg(long, value_name = "°C", allow_hyphen_values = true)]
    condensing: f64,
    /// Suction gas above the evaporating temperature, K.
    #[arg(
        long,
        value_name = "K",
        default_value_t = 5.0,
        allow_hyphen_values = true
    )]
    superheat: f64,
    /// Liquid below the condensing temperature, K.
    #[arg(
        long,
        value_name = "K",
        default_value_t = 3.0,
        allow_hyphen_values = true
    )]
    subcooling: f64,
    /// Isentropic work over real work, 0 to 1.
    #[arg(
        long,
        value_name = "SHARE",
        default_value_t = 0.7,
        allow_hyphen_values = true
    )]
    isentropic_efficiency: f64,
    /// Refrigerant circulated, kg/s; adds heat and power in kW.
    #[arg(long, value_name = "KG/S", allow_hyphen_values = true)]
    mass_flow: Option<f64>,
    /// Write the pressure–enthalpy picture to this .svg or .png file.
    #[arg(long, value_name = "FILE")]
    chart: Option<PathBuf>,
    /// How the result is printed.
    #[arg(long, value_enum, default_value_t)]
    format: Format,
    /// Overwrite the picture if it is there.
    #[arg(long)]
    force: bool,
}

/// Solves, draws and prints.
///
/// # Errors
/// A [`Failure`] with every problem of the input, or the picture that could not be written.
pub fn run(args: &Args) -> Result<(), Failure> {
    let refrigerant: Refrigerant = args
        .refrigerant
        .parse()
        .map_err(|refused| unknown(&refused))?;
    let equation = Equation::new(refrigerant)
        .map_err(|error| Failure::argument("--refrigerant", error.to_string(), ""))?;
    let cycle = Cycle::solve(
        &equation,
        CycleInputs {
            evaporating_c: args.evaporating,
            condensing_c: args.condensing,
            superheat_k: args.superheat,
            subcooling_k: args.subcooling,
            isentropic_efficiency: args.isentropic_efficiency,
            mass_flow_kg_per_s: args.mass_flow,
        },
    )
    .map_err(as_arguments)?;
    if let Some(path) = &args.chart {
        write_files(&[picture(&cycle, &equation, path)?], args.force)?;
    }
    let findings = cycle.findings();
    let warnings: Vec<_> = findings
        .iter()
        .filter(|finding| finding.severity == Severity::Warning)
        .cloned()
        .collect();
    warn(&warnings);
    match args.format {
        Format::Text => print(&text(&cycle)),
        Format::Json => print_json(&CycleAnswer::from(&cycle)),
    }
}

fn unknown(refused: &UnknownRefrigerant) -> Failure {
    let remedy = match refused.nearest {
        Some(nearest) => format!("did you mean {nearest}?"),
        None => "another refrigerant cannot be reckoned".to_owned(),
    };
    Problems::from(Problem::new(
        Place::field("--refrigerant"),
        format!("{:?} is not held", refused.found),
        Refrigerant::names(),
        remedy,
    ))
    .into()
}

/// The same problems, their fields written as arguments.
fn as_arguments(problems: Problems) -> Failure {
    let mut renamed = Problems::new();
    for problem in problems.iter() {
        let mut problem = problem.clone();
        problem.place.field = problem.place.field.map(|field| format!("--{field}"));
        renamed.push(problem);
    }
    renamed.into()
}

fn picture(cycle: &Cycle, equation: &Equation, path: &Path) -> Result<NewFile, Failure> {
    let diagram = Diagram::of(cycle, equation).map_err(as_arguments)?;
    let pair = |at: &DiagramPoint| (at.enthalpy_kj_per_kg, at.pressure_kpa);
    let data = PressureEnthalpy {
        fluid: cycle.refrigerant.to_string(),
        dome: diagram.dome.iter().map(pair).collect(),
        cycle: diagram
            .legs
            .iter()
            .flat_map(|leg| leg.points.iter().map(pair))
            .collect(),
        states: (cycle.points().iter().zip(1..))
            .map(|((name, state), number)| StatePoint {
                point: number.to_string(),
                name: name.to_string(),
                temperature_c: state.temperature_c,
                pressure_kpa: state.pressure_kpa,
                enthalpy_kj_per_kg: state.enthalpy_kj_per_kg,
            })
            .collect(),
        evaporating_c: cycle.inputs.evaporating_c,
        condensing_c: cycle.inputs.condensing_c,
        cop_heating: Some(cycle.cop_heating()),
    };
    picture_file("--chart", path, pressure_enthalpy(&data, &Marks::default()))
}

fn text(cycle: &Cycle) -> String {
    let facts = cycle.refrigerant.facts();
    let potential = |name: &str, value: Option<f64>| value.map(|found| format!("{found} ({name})"));
    let potentials: Vec<_> = [
        potential("IPCC AR4", facts.gwp100_ar4),
        potential("IPCC AR5", facts.gwp100_ar5),
    ]
    .into_iter()
    .flatten()
    .collect();
    let potentials = if potentials.is_empty() {
        "not listed".to_owned()
    } else {
        potentials.join(", ")
    };
    let inputs = &cycle.inputs;
    let mut lines = vec![
        format!(
            "{}, {}: evaporating {} °C ({:.1} kPa), condensing {} °C ({:.1} kPa)",
            cycle.refrigerant,
            facts.substance,
            inputs.evaporating_c,
            cycle.evaporating.pressure_kpa,
            inputs.condensing_c,
            cycle.condensing.pressure_kpa,
        ),
        format!(
            "superheat {} K, subcooling {} K, isentropic efficiency {}",
            inputs.superheat_k, inputs.subcooling_k, inputs.isentropic_efficiency
        ),
        String::new(),
        state_table(cycle),
        String::new(),
        balance_table(cycle),
        String::new(),
        format!(
            "safety class {} (ISO 817); GWP100 {potentials}",
            facts.safety_class
        ),
        "enthalpy and entropy are 200 kJ/kg and 1 kJ/kgK for saturated liquid at 0 °C".to_owned(),
    ];
    let told = cycle.findings();
    lines.extend(
        told.iter()
            .filter(|told| told.severity != Severity::Warning)
            .map(ToString::to_string),
    );
    lines.join("\n")
}

/// A table without lines, its figures to the right.
fn state_table(cycle: &Cycle) -> String {
    let mut rows = Vec::new();
    for ((name, state), number) in cycle.points().into_iter().zip(1..) {
        rows.push(vec![
            format!("{number} {name}"),
            format!("{:.2}", state.temperature_c),
            format!("{:.1}", state.pressure_kpa),
            format!("{:.2}", state.enthalpy_kj_per_kg),
            format!("{:.4}", state.entropy_kj_per_kg_k),
            format!("{:.3}", state.density_kg_per_m3),
            state
                .quality
                .map_or_else(String::new, |quality| format!("{quality:.3}")),
        ]);
    }
    plain_table(
        vec![
            "point",
            "°C",
            "kPa",
            "kJ/kg",
            "kJ/kgK",
            "kg/m³",
            "vapour share",
        ],
        rows,
    )
}

fn balance_table(cycle: &Cycle) -> String {
    let row = |what: &str, per_kg: f64, power: Option<f64>| {
        let mut row = vec![what.to_owned(), format!("{per_kg:.2}")];
        row.extend(power.map(|found| format!("{found:.3}")));
        row
    };
    let mut header = vec!["", "kJ/kg"];
    if cycle.inputs.mass_flow_kg_per_s.is_some() {
        header.push("kW");
    }
    let heat = plain_table(
        header,
        vec![
            row(
                "evaporator heat",
                cycle.evaporator_kj_per_kg(),
                cycle.evaporator_kw(),
            ),
            row("compressor work", cycle.work_kj_per_kg(), cycle.work_kw()),
            row(
                "condenser heat",
                cycle.condenser_kj_per_kg(),
                cycle.condenser_kw(),
            ),
        ],
    );
    format!(
        "{heat}\n\nheating COP {:.3} (Carnot between the two temperatures {:.3}), pressure ratio {:.3}, discharge {:.1} °C",
        cycle.cop_heating(),
        cycle.cop_carnot(),
        cycle.pressure_ratio(),
        cycle.discharge.temperature_c
    )
}
