//! The whole way from a sheet to a heat pump, and a report of how well it was met.

use std::sync::Arc;

use super::correction::{FittedMachine, GREATEST_CORRECTION};
use super::fit::{PhysicalFit, at_point, fit_physics, named};
use super::frost::{Frost, standard_humidity_ratio};
use super::heat_pump::HeatPump;
use super::limits::Limits;
use super::machine::SolveError;
use super::map::Map;
use super::priors::Prior;
use super::sheet::{Sheet, SpeedAt, TestedPoint};
use crate::problem::{Finding, Place, Problem, Problems, Severity};
use crate::refrigerant::CycleTable;

/// Shares of the correction that are tried, the whole first.
const STRENGTHS: [f64; 7] = [1.0, 0.85, 0.7, 0.5, 0.3, 0.15, 0.0];
/// Distance that condensing keeps from the end of the refrigerant's table at the machine's largest output, K.
const CONDENSING_MARGIN_K: f64 = 0.5;
/// Places at which a new map is compared with its exact machine, and the error from which it is told, percent.
const MAP_PLACES: usize = 200;
const MAP_PERCENT: f64 = 0.15;
/// Error of a fitted point that is worth a finding, percent of COP or output.
const POINT_MISSED_PERCENT: f64 = 1.0;

/// A heat pump made from a sheet, with what can be said of its fit.
#[derive(Debug, Clone)]
pub struct Fitted {
    /// The heat pump.
    pub heat_pump: HeatPump,
    /// How well it meets the sheet.
    pub report: FitReport,
}

/// How well a machine meets its sheet.
#[derive(Debug, Clone)]
pub struct FitReport {
    /// Every parameter with its belief and its value.
    pub parameters: Vec<(Prior, f64)>,
    /// Every tested point.
    pub points: Vec<PointReport>,
    /// Root-mean-square error of COP at the tested points by physics alone, percent.
    pub physics_rms_percent: f64,
    /// The largest error of COP or output with correction, percent.
    pub largest_percent: f64,
    /// Share of the correction that was kept, 0..1.
    pub strength: f64,
    /// What was odd.
    pub findings: Vec<Finding>,
}

/// One tested point and what the machine makes of it.
#[derive(Debug, Clone, PartialEq)]
pub struct PointReport {
    /// The tested point.
    pub point: TestedPoint,
    /// Output with correction, defrosting given back where the point contains it, kW: the greatest or least output where the point
    /// is one, else its own output.
    pub model_heat_kw: f64,
    /// COP with correction at the point's own output.
    pub model_cop: f64,
    /// Error of COP by physics alone, percent.
    pub physics_percent: f64,
    /// Error of output by physics alone, percent; 0 where the speed is free.
    pub physics_heat_percent: f64,
}

impl PointReport {
    /// Error of COP with correction, percent.
    pub fn cop_percent(&self) -> f64 {
        100.0 * (self.model_cop / self.point.cop - 1.0)
    }

    /// Error of output with correction, percent.
    pub fn heat_percent(&self) -> f64 {
        100.0 * (self.model_heat_kw / self.point.heat_kw - 1.0)
    }
}

/// Fits a machine to its sheet and makes the heat pump of it.
///
/// One point gives the usual machine of its kind that meets it; twelve settle most of what a machine is.
///
/// # Errors
/// Problems naming the sheet when no machine of its refrigerant runs at its points or inside its limits.
pub fn fit(sheet: &Sheet) -> Result<Fitted, Problems> {
    let table = table_of(sheet)?;
    let points: Vec<&TestedPoint> = sheet.points.iter().collect();
    let physical = fit_physics(sheet, &points, &table)?;
    let unsolved = |error: SolveError| refuse(sheet, &error);
    let whole = FittedMachine::new(&physical, &points).map_err(unsolved)?;
    let mut findings = Vec::new();
    let limits = inside_refrigerant(sheet, &whole, &mut findings)?;

    let mut found = None;
    for strength in STRENGTHS {
        let machine = whole.clone().with_strength(strength);
        let map = Map::build(&machine, &limits).map_err(unsolved)?;
        if strength == 0.0 || map.is_monotone(&limits) {
            found = Some((machine, map));
            break;
        }
    }
    let (machine, map) = found.ok_or_else(|| {
        refuse(
            sheet,
            &SolveError::NotConverged {
                source_c: f64::NAN,
                flow_c: f64::NAN,
            },
        )
    })?;
    if !map.is_monotone(&limits) {
        findings.push(
            Finding::new(
                Severity::Warning,
                "the machine that meets these points best is not monotone: somewhere its COP rises with flow or falls with source temperature",
                "check the points against the datasheet",
            )
            .at(&Place::file(sheet.file.clone())),
        );
    } else if machine.strength() < 1.0 {
        findings.push(
            Finding::new(
                Severity::Note,
                "honouring every point would make COP rise with flow or fall with source temperature",
                format!("{:.0} % of the correction was kept", machine.strength() * 100.0),
            )
            .at(&Place::file(sheet.file.clone())),
        );
    }
    let map_error = map.error(&machine, &limits, MAP_PLACES).map_err(unsolved)?;
    let map_percent = 100.0 * map_error.cop.max(map_error.output);
    if map_percent > MAP_PERCENT {
        findings.push(
            Finding::new(
                Severity::Warning,
                format!(
                    "the machine bends so sharply that its map is up to {map_percent:.1} % off"
                ),
                "check the points: a real machine does not bend so",
            )
            .at(&Place::file(sheet.file.clone())),
        );
    }
    let points = sheet
        .points
        .iter()
        .map(|point| report_point(&physical, &machine, point))
        .collect::<Result<Vec<_>, _>>()
        .map_err(unsolved)?;
    findings.extend(points.iter().filter_map(|p| finding_of(sheet, p)));
    let largest = |p: &PointReport| p.cop_percent().abs().max(p.heat_percent().abs());
    let report = FitReport {
        parameters: named(&physical)
            .map(|(prior, value)| (*prior, value))
            .collect(),
        physics_rms_percent: rms(points.iter().map(|p| p.physics_percent)),
        largest_percent: points.iter().map(largest).fold(0.0, f64::max),
        strength: machine.strength(),
        points,
        findings,
    };
    Ok(Fitted {
        heat_pump: HeatPump::new(sheet, limits, machine, physical.frost, map),
        report,
    })
}

/// What each point would be predicted to be by a machine fitted to all the others: error of COP in percent, point by point.
///
/// Empty for a sheet of one point, which leaves nothing to predict it from.
///
/// # Errors
/// As [`fit`], for any of the fits.
pub fn leave_one_out(sheet: &Sheet) -> Result<Vec<f64>, Problems> {
    if sheet.points.len() < 2 {
        return Ok(Vec::new());
    }
    let table = table_of(sheet)?;
    (0..sheet.points.len())
        .map(|left_out| {
            let others: Vec<&TestedPoint> = sheet
                .points
                .iter()
                .enumerate()
                .filter_map(|(i, point)| (i != left_out).then_some(point))
                .collect();
            let physical = fit_physics(sheet, &others, &table)?;
            let unsolved = |error: SolveError| refuse(sheet, &error);
            let machine = FittedMachine::new(&physical, &others).map_err(unsolved)?;
            let report = report_point(&physical, &machine, &sheet.points[left_out]);
            Ok(report.map_err(unsolved)?.cop_percent())
        })
        .collect()
}

/// Root-mean-square of some numbers; 0 of none.
pub fn rms(values: impl Iterator<Item = f64>) -> f64 {
    let (sum, count) = values.fold((0.0, 0.0), |(sum, count), v| (sum + v * v, count + 1.0));
    if count > 0.0 {
        f64::sqrt(sum / count)
    } else {
        0.0
    }
}

fn table_of(sheet: &Sheet) -> Result<Arc<CycleTable>, Problems> {
    CycleTable::build(sheet.refrigerant, sheet.superheat_k, sheet.subcooling_k)
        .map(Arc::new)
        .map_err(|error| {
            let place = Place::file(sheet.file.clone());
            Problem::new(
                place,
                error.to_string(),
                "",
                "check superheat and subcooling",
            )
            .into()
        })
}

fn refuse(sheet: &Sheet, error: &SolveError) -> Problems {
    Problem::new(
        Place::file(sheet.file.clone()),
        error.to_string(),
        "a machine that runs at its tested points and inside its limits",
        "check points, limits and refrigerant against the datasheet",
    )
    .into()
}

/// The sheet's limits, with the flow temperature held where condensing stays below the end of the refrigerant's table, some kelvin
/// below its critical point.
fn inside_refrigerant(
    sheet: &Sheet,
    machine: &FittedMachine,
    findings: &mut Vec<Finding>,
) -> Result<Limits, Problems> {
    let mut limits = sheet.limits.clone();
    let hottest = machine.machine.table.condensing_range_c().1;
    // The approach is largest at the largest output: warm source, cool flow.
    let warm_c = limits.highest_source_c;
    let cool_c = (warm_c + super::limits::LEAST_DIFFERENCE_K).min(limits.highest_flow_anywhere());
    let largest_kw = machine
        .greatest_kw(warm_c, cool_c)
        .map_err(|error| refuse(sheet, &error))?;
    let approach_k = machine.machine.condenser.approach_k(largest_kw);
    let highest_c = hottest - approach_k - CONDENSING_MARGIN_K;
    if limits.highest_flow_anywhere() > highest_c {
        findings.push(
            Finding::new(
                Severity::Note,
                format!(
                    "a flow of {} °C would bring {} too near its critical point",
                    limits.highest_flow_anywhere(),
                    sheet.refrigerant
                ),
                format!("the highest flow temperature was taken as {highest_c:.1} °C"),
            )
            .at(&Place::file(sheet.file.clone())),
        );
        for point in &mut limits.highest_flow_c {
            point.1 = point.1.min(highest_c);
        }
    }
    Ok(limits)
}

fn report_point(
    physical: &PhysicalFit,
    machine: &FittedMachine,
    point: &TestedPoint,
) -> Result<PointReport, SolveError> {
    let model = at_point(&physical.machine, &physical.frost, point)?;
    let percent = |found: f64, tested: f64| 100.0 * (found / tested - 1.0);
    let (model_heat_kw, physics_heat_percent) = match point.at {
        SpeedAt::Maximum => (
            net_of(
                machine.greatest_kw(point.source_c, point.flow_c)?,
                machine,
                &physical.frost,
                point,
            )?,
            percent(model.greatest_kw, point.heat_kw),
        ),
        SpeedAt::Least => (
            net_of(
                machine.least_kw(point.source_c, point.flow_c)?,
                machine,
                &physical.frost,
                point,
            )?,
            percent(model.least_kw, point.heat_kw),
        ),
        SpeedAt::Part | SpeedAt::Unknown => (point.heat_kw, 0.0),
    };
    let factor = machine.cop_factor(point.source_c, point.flow_c, model.operation.heat_kw);
    Ok(PointReport {
        point: point.clone(),
        model_heat_kw,
        model_cop: model.cop * factor,
        physics_percent: percent(model.cop, point.cop),
        physics_heat_percent,
    })
}

/// What reaches the water of a gross output at a point, kW.
fn net_of(
    gross_kw: f64,
    machine: &FittedMachine,
    frost: &Frost,
    point: &TestedPoint,
) -> Result<f64, SolveError> {
    if !point.defrost_included {
        return Ok(gross_kw);
    }
    let operation = machine
        .machine
        .at_output(point.source_c, point.flow_c, gross_kw)?;
    let moisture = standard_humidity_ratio(point.source_c);
    let loss = frost.loss(point.source_c, operation.evaporating_c, moisture);
    Ok(gross_kw * (1.0 - loss.output))
}

fn finding_of(sheet: &Sheet, report: &PointReport) -> Option<Finding> {
    let bound = 100.0 * GREATEST_CORRECTION;
    let name = report.point.name(sheet.letter());
    let missed = report.cop_percent().abs().max(report.heat_percent().abs());
    if missed <= POINT_MISSED_PERCENT {
        return None;
    }
    let physics = report
        .physics_percent
        .abs()
        .max(report.physics_heat_percent.abs());
    let why = if physics > bound {
        format!(
            "physics alone misses it by {physics:.1} %, and a correction is held to {bound:.0} %"
        )
    } else {
        "other points near it say otherwise".to_owned()
    };
    Some(
        Finding::new(
            Severity::Warning,
            format!("{name} is not honoured: {missed:.1} % off; {why}"),
            "check this point against the datasheet",
        )
        .at(&report.point.place),
    )
}
