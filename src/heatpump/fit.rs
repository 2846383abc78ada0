//! From a sheet to a machine: bounded, regularised least squares around stated priors.
//!
//! Every tested point gives a residual of COP at its own output, and of output where it says at which speed it was tested;
//! every prior gives one more. So the fit is the most likely machine given both (maximum a posteriori with normal errors),
//! and the number of points only decides who is heard. Points that contain defrosting are compared with the machine less its
//! frost loss, which is the same as freeing them of it first.

use std::sync::Arc;

use rmpfit::{MPConfig, MPFitter, MPPar, MPResult, MPSuccess};

use super::frost::{Frost, standard_humidity_ratio};
use super::machine::{Machine, Operation, SolveError};
use super::priors::{COUNT, Prior, machine_of, priors};
use super::sheet::{Sheet, SpeedAt, TestedPoint};
use crate::problem::{Place, Problem, Problems};
use crate::refrigerant::CycleTable;

/// Standard deviation of what the physics leaves over, relative: of COP, of output at a known speed, and of the least output, which
/// controllers handle freely.
const COP_WIDTH: f64 = 0.025;
const OUTPUT_WIDTH: f64 = 0.025;
const LEAST_OUTPUT_WIDTH: f64 = 0.05;
/// Speed, as a share of the greatest, at which a point of unknown speed is believed to be, and its standard deviation.
const UNKNOWN_SPEED: (f64, f64) = (1.0, 0.2);
/// Residual of a point at which the trial machine cannot run, in standard deviations: large, but not infinite, so that the search
/// turns back.
const CANNOT_RUN: f64 = 50.0;
/// Relative change of the sum of squares and of the parameters at which the search ends.
const SEARCH_TOLERANCE: f64 = 1e-8;
/// Most iterations of the search; ten to thirty are usual.
const MOST_ITERATIONS: usize = 200;
/// Relative step of the numerical derivatives: far above the solver's tolerance, far below any curvature.
const DERIVATIVE_STEP: f64 = 1e-4;
/// Changes of the frost loss below this end its substitution.
const FROST_TOLERANCE: f64 = 1e-7;
/// Most substitutions of the frost loss; two or three are usual.
const MOST_FROST_STEPS: usize = 20;

/// A machine fitted to some points, without any correction.
#[derive(Debug, Clone)]
pub(super) struct PhysicalFit {
    pub machine: Machine,
    pub frost: Frost,
    /// Output that scales exchangers and fan, kW.
    pub nominal_kw: f64,
    pub priors: [Prior; COUNT],
    pub values: [f64; COUNT],
}

/// What the machine does at a tested point, defrosting given back.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) struct AtPoint {
    /// The machine at the point's own output, frost-free.
    pub operation: Operation,
    /// COP less frost.
    pub cop: f64,
    /// Greatest output less frost, kW.
    pub greatest_kw: f64,
    /// Least output less frost, kW.
    pub least_kw: f64,
}

/// Fits the physics of a sheet's machine to some of its points.
///
/// # Errors
/// A problem naming the sheet when no machine around the priors runs at the points, or the search does not end.
pub(super) fn fit_physics(
    sheet: &Sheet,
    points: &[&TestedPoint],
    table: &Arc<CycleTable>,
) -> Result<PhysicalFit, Problems> {
    let refuse = |found: String| {
        Problems::from(Problem::new(
            Place::file(sheet.file.clone()),
            found,
            "tested points that one machine with this refrigerant can meet",
            "check the points and the refrigerant against the datasheet",
        ))
    };
    let reference = reference_point(sheet, points)
        .ok_or_else(|| refuse("there is no tested point to fit".to_owned()))?;
    let nominal_kw = reference.heat_kw;
    let swept = swept_guess(sheet, reference, table, nominal_kw)
        .map_err(|error| refuse(format!("no machine can be fitted: {error}")))?;
    let priors = priors(sheet, nominal_kw, swept);
    let free: Vec<usize> = (0..COUNT).filter(|&i| priors[i].width > 0.0).collect();
    let limits: Vec<MPPar> = free
        .iter()
        .map(|&i| MPPar {
            limited_low: true,
            limited_up: true,
            limit_low: priors[i].inward(priors[i].low),
            limit_up: priors[i].inward(priors[i].high),
            step: DERIVATIVE_STEP,
            ..MPPar::new()
        })
        .collect();
    let mut search = Search {
        sheet,
        points,
        table,
        nominal_kw,
        priors: &priors,
        free: &free,
        limits,
        config: MPConfig {
            ftol: SEARCH_TOLERANCE,
            xtol: SEARCH_TOLERANCE,
            max_iter: MOST_ITERATIONS,
            ..MPConfig::new()
        },
    };
    let mut searched: Vec<f64> = free
        .iter()
        .map(|&i| priors[i].inward(priors[i].centre))
        .collect();
    let status = search
        .mpfit(&mut searched)
        .map_err(|error| refuse(format!("the fit failed: {error}")))?;
    if matches!(status.success, MPSuccess::MaxIter | MPSuccess::NotDone) {
        return Err(refuse(format!(
            "the fit did not settle in {MOST_ITERATIONS} iterations"
        )));
    }
    let values = values_of(&priors, &free, &searched);
    let (machine, frost) = machine_of(sheet, table, nominal_kw, &values);
    Ok(PhysicalFit {
        machine,
        frost,
        nominal_kw,
        priors,
        values,
    })
}

/// What a machine does at a point.
///
/// # Errors
/// [`SolveError`] when it cannot run there.
pub(super) fn at_point(
    machine: &Machine,
    frost: &Frost,
    point: &TestedPoint,
) -> Result<AtPoint, SolveError> {
    let (source_c, flow_c) = (point.source_c, point.flow_c);
    let mut operation = machine.at_output(source_c, flow_c, point.heat_kw)?;
    let mut loss = Default::default();
    if point.defrost_included {
        let moisture = standard_humidity_ratio(source_c);
        let mut previous = f64::INFINITY;
        for _ in 0..MOST_FROST_STEPS {
            loss = frost.loss(source_c, operation.evaporating_c, moisture);
            if (loss.output - previous).abs() < FROST_TOLERANCE {
                break;
            }
            previous = loss.output;
            operation = machine.at_output(source_c, flow_c, point.heat_kw / (1.0 - loss.output))?;
        }
    }
    let less_frost = |operation: Operation| {
        let share = if point.defrost_included {
            let moisture = standard_humidity_ratio(source_c);
            frost
                .loss(source_c, operation.evaporating_c, moisture)
                .output
        } else {
            0.0
        };
        operation.heat_kw * (1.0 - share)
    };
    Ok(AtPoint {
        operation,
        cop: operation.cop() * (1.0 - loss.cop),
        greatest_kw: less_frost(machine.at_greatest(source_c, flow_c)?),
        least_kw: less_frost(machine.at_least(source_c, flow_c)?),
    })
}

/// The point that says most about the machine's size: tested at maximum nearest the rated condition, else the largest.
fn reference_point<'a>(sheet: &Sheet, points: &[&'a TestedPoint]) -> Option<&'a TestedPoint> {
    let (source_c, flow_c) = sheet.rated_condition();
    let distance = |p: &TestedPoint| (p.source_c - source_c).abs() + (p.flow_c - flow_c).abs();
    let at_maximum = points.iter().filter(|p| p.at == SpeedAt::Maximum);
    let nearest = at_maximum.min_by(|a, b| distance(a).total_cmp(&distance(b)));
    let largest = points.iter().max_by(|a, b| a.heat_kw.total_cmp(&b.heat_kw));
    nearest.or(largest).copied()
}

/// Swept volume (m³/h at speed 1) with which the machine of the other priors meets a point.
fn swept_guess(
    sheet: &Sheet,
    point: &TestedPoint,
    table: &Arc<CycleTable>,
    nominal_kw: f64,
) -> Result<f64, SolveError> {
    let beliefs = priors(sheet, nominal_kw, 1.0);
    let values = beliefs.map(|prior| prior.centre);
    let (machine, _) = machine_of(sheet, table, nominal_kw, &values);
    // The speed it would need if it swept 1 m³/h at speed 1. Its efficiency at that speed is of no matter here.
    let gentle = Machine {
        compressor: super::compressor::Compressor {
            speed_penalty: 0.0,
            ..machine.compressor
        },
        ..machine
    };
    let needed = gentle
        .at_output(point.source_c, point.flow_c, point.heat_kw)?
        .speed;
    let greatest = gentle.speeds.greatest(point.source_c, point.flow_c);
    let share = match point.at {
        SpeedAt::Maximum => 1.0,
        SpeedAt::Unknown => UNKNOWN_SPEED.0,
        SpeedAt::Part | SpeedAt::Least => 0.6,
    };
    Ok(needed / (greatest * share))
}

fn values_of(priors: &[Prior; COUNT], free: &[usize], searched: &[f64]) -> [f64; COUNT] {
    let mut values = priors.map(|prior| prior.centre);
    for (&i, &x) in free.iter().zip(searched) {
        values[i] = priors[i].outward(x);
    }
    values
}

struct Search<'a> {
    sheet: &'a Sheet,
    points: &'a [&'a TestedPoint],
    table: &'a Arc<CycleTable>,
    nominal_kw: f64,
    priors: &'a [Prior; COUNT],
    free: &'a [usize],
    limits: Vec<MPPar>,
    config: MPConfig,
}

/// Residuals of one point: COP, and output or speed.
const RESIDUALS_PER_POINT: usize = 2;

impl MPFitter for Search<'_> {
    fn eval(&mut self, searched: &[f64], deviates: &mut [f64]) -> MPResult<()> {
        let values = values_of(self.priors, self.free, searched);
        let (machine, frost) = machine_of(self.sheet, self.table, self.nominal_kw, &values);
        let (of_points, of_priors) = deviates.split_at_mut(RESIDUALS_PER_POINT * self.points.len());
        for (point, out) in self
            .points
            .iter()
            .zip(of_points.chunks_exact_mut(RESIDUALS_PER_POINT))
        {
            out.copy_from_slice(&residuals(&machine, &frost, point));
        }
        for ((&i, &x), out) in self.free.iter().zip(searched).zip(of_priors) {
            let prior = &self.priors[i];
            *out = (x - prior.inward(prior.centre)) / prior.width;
        }
        Ok(())
    }

    fn number_of_points(&self) -> usize {
        RESIDUALS_PER_POINT * self.points.len() + self.free.len()
    }

    fn parameters(&self) -> &[MPPar] {
        &self.limits
    }

    fn config(&self) -> &MPConfig {
        &self.config
    }
}

/// Residuals of a point in standard deviations.
fn residuals(machine: &Machine, frost: &Frost, point: &TestedPoint) -> [f64; RESIDUALS_PER_POINT] {
    let Ok(model) = at_point(machine, frost, point) else {
        return [CANNOT_RUN; RESIDUALS_PER_POINT];
    };
    let cop = (model.cop / point.cop).ln() / COP_WIDTH;
    let output = |of_model: f64, width: f64| (of_model / point.heat_kw).ln() / width;
    let second = match point.at {
        SpeedAt::Maximum => output(model.greatest_kw, OUTPUT_WIDTH),
        SpeedAt::Least => output(model.least_kw, LEAST_OUTPUT_WIDTH),
        // Part load lies between least and greatest; only what lies outside counts.
        SpeedAt::Part => {
            output(model.greatest_kw, OUTPUT_WIDTH).min(0.0)
                + output(model.least_kw, LEAST_OUTPUT_WIDTH).max(0.0)
        }
        SpeedAt::Unknown => {
            let share = point.heat_kw / model.greatest_kw / UNKNOWN_SPEED.0;
            // Slower than the greatest is quite possible, faster is not.
            let width = if share > 1.0 {
                OUTPUT_WIDTH
            } else {
                UNKNOWN_SPEED.1
            };
            share.ln() / width
        }
    };
    [cop, second]
}

/// The values of the parameters by name, for reports.
pub(super) fn named(fit: &PhysicalFit) -> impl Iterator<Item = (&Prior, f64)> {
    fit.priors.iter().zip(fit.values)
}
