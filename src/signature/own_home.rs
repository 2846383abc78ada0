//! The heat loss at which the home's own model uses what its meter counted.
//!
//! The straight line of a signature takes for heat loss whatever goes with the cold: sunless months are cold months. Here the
//! model that the estimate runs (set points, storage, internal and solar gains, the heater) is run over the same days, and its
//! heat loss and the load beside heating are moved until every interval is met as well as can be: weighted least squares, with
//! what is only known within limits (set point and internal gains, sun, efficiency, hot water) as parameters that have a normal
//! distribution of their own. Gauss's linearised inverse with prior knowledge: Tarantola, A. (2005), Inverse Problem Theory,
//! SIAM, doi 10.1137/1.9780898717921, section 3.2 \[from memory\].

use nalgebra::{SMatrix, SVector};

use super::days::DailyWeather;
use super::fit::{metered, quantile};
use super::found::{FitProblem, Limits, Stated};
use super::model::Metered;
use super::readings::Interval;

/// The home as a run of its model takes it.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Tried {
    /// Heat-loss coefficient, W/K.
    pub heat_loss_w_per_k: f64,
    /// Rooms this much warmer than stated, or internal gains smaller by what that takes, K.
    pub warmer_k: f64,
    /// Multiple of the stated solar gains.
    pub sun: f64,
}

/// How far from the truth what the model states may be, with 95 % confidence; 0 for what is not in doubt.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Doubt {
    /// Set point and internal gains together, as kelvins of the set point.
    pub warmer_k: f64,
    /// Solar gains, as a share; nothing where the model has none.
    pub sun: Option<f64>,
}

/// What readings say through the home's own model.
#[derive(Debug, Clone, PartialEq)]
pub struct OwnHome {
    /// Heat-loss coefficient, W/K.
    pub heat_loss_w_per_k: Limits,
    /// Fuel beside heating, kWh a day.
    pub base_load_kwh_per_day: Limits,
    /// By how much the readings fit warmer rooms (or smaller internal gains) than stated, K.
    pub warmer_k: Limits,
    /// Multiple of the stated solar gains that fits.
    pub sun: Limits,
    /// Whether the model knows the sun.
    pub knows_sun: bool,
    /// Fuel of each interval by the model, kWh a day.
    pub fitted_kwh_per_day: Vec<f64>,
    /// Root mean square error over the mean, degrees of freedom counted.
    pub cv_rmse: f64,
}

/// Base load, heat loss, warmer, sun, efficiency over the stated one, share of hot water.
const PARAMETERS: usize = 6;
type Vector = SVector<f64, PARAMETERS>;
type Matrix = SMatrix<f64, PARAMETERS, PARAMETERS>;
const BASE: usize = 0;
const LOSS: usize = 1;
const WARMER: usize = 2;
const SUN: usize = 3;
const EFFICIENCY: usize = 4;
const SHARE: usize = 5;

/// Steps for the derivatives: a share of the heat loss, K, and a share of the sun. The model is smooth over them.
const STEP_LOSS: f64 = 0.05;
const STEP_WARMER_K: f64 = 0.5;
const STEP_SUN: f64 = 0.2;
/// It has converged when the next step would lower the sum of squares, in variances, by less than this: 3 % of a standard error.
const DECREMENT: f64 = 1e-3;
/// A model that jumps (a warm-up that begins an hour sooner) may never come that near: the nearest is taken if its next step would lower
/// the sum by less than this, half a standard error, and that step is added to the limits.
const NEAR_ENOUGH: f64 = 0.25;
/// The variance is found to this share.
const VARIANCE_TOLERANCE: f64 = 0.01;
const MAX_ITERATIONS: usize = 60;
/// After so many iterations steps are halved: a warm-up that begins an hour sooner or later makes the model jump a little.
const WHOLE_STEPS: usize = 8;
/// The heat loss moves by no more than this factor in a step.
const MOST_STEP: f64 = 1.6;
/// No home is its model to less than this share of its mean use: common practice, no source.
const LEAST_ERROR: f64 = 0.01;
/// Standard deviations of a normal distribution that hold 95 %.
const NORMAL_95: f64 = 1.959_964;

/// A run of the model and its sensitivities.
struct Looked {
    fitted: Vec<f64>,
    rows: Vec<Vector>,
}

/// Finds the heat loss at which the model uses what was metered.
///
/// `heating_kwh` runs the model and gives the fuel for heating in each interval, kWh, by the stated efficiency; `start_w_per_k` is
/// where the search begins. Limits of 95 % hold the scatter of the readings (Student's t) and the doubts.
///
/// # Errors
/// [`FitProblem`].
pub fn fit_own_home(
    intervals: &[Interval],
    weather: &DailyWeather,
    stated: &Stated,
    doubt: &Doubt,
    start_w_per_k: f64,
    heating_kwh: &dyn Fn(&Tried) -> Vec<f64>,
) -> Result<OwnHome, FitProblem> {
    let metered = metered(intervals, weather)?;
    let weights: f64 = metered.iter().map(Metered::weight).sum();
    let mean = metered
        .iter()
        .map(|one| one.weight() * one.kwh_per_day)
        .sum::<f64>()
        / weights;
    let number = metered.len() as f64;
    // The variance of one day, as the weights have it.
    let least_variance = (LEAST_ERROR * mean).powi(2) * weights / number;

    let mut prior = Vector::zeros();
    prior[SUN] = 1.0;
    prior[EFFICIENCY] = 1.0;
    prior[SHARE] = stated.hot_water_share;
    let mut within = Vector::zeros();
    within[WARMER] = doubt.warmer_k;
    within[SUN] = doubt.sun.unwrap_or(0.0);
    within[EFFICIENCY] = stated.efficiency_within / stated.efficiency;
    within[SHARE] = stated.hot_water_share_within;
    let precision = within.map(|within| {
        if within > 0.0 {
            (NORMAL_95 / within).powi(2)
        } else {
            0.0
        }
    });
    // The readings do not tell an efficiency from a loss: it is not fitted, only carried into the limits.
    let is_free = |k: usize| k <= LOSS || (k != EFFICIENCY && within[k] > 0.0);

    let mut at = prior;
    at[LOSS] = start_w_per_k;
    let mut variance = least_variance.max((0.1 * mean).powi(2) * weights / number);
    let mut nearest: Option<(f64, OwnHome)> = None;
    for iteration in 0..MAX_ITERATIONS {
        let looked = look(&metered, stated, &at, &is_free, heating_kwh);
        let mut data = Matrix::zeros();
        let mut pull = Vector::zeros();
        let mut squares = 0.0;
        for (one, (fitted, row)) in metered.iter().zip(looked.fitted.iter().zip(&looked.rows)) {
            let residual = one.kwh_per_day - fitted;
            data += row * row.transpose() * (one.weight() / variance);
            pull += row * (one.weight() / variance * residual);
            squares += one.weight() * residual * residual;
        }
        let mut normal = data;
        for k in 0..PARAMETERS {
            normal[(k, k)] += if is_free(k) { precision[k] } else { 1.0 };
            pull[k] += if is_free(k) {
                precision[k] * (prior[k] - at[k])
            } else {
                0.0
            };
        }
        // Scaled to ones on its diagonal, so that watts and shares do not meet.
        let scale = normal
            .diagonal()
            .map(|entry| entry.max(f64::MIN_POSITIVE).sqrt().recip());
        let scaled = Matrix::from_fn(|r, c| normal[(r, c)] * scale[r] * scale[c]);
        let inverse = scaled.try_inverse().ok_or(FitProblem::NoHeating)?;
        let covariance = Matrix::from_fn(|r, c| inverse[(r, c)] * scale[r] * scale[c]);
        let step = covariance * pull;
        if !step.iter().all(|one| one.is_finite()) {
            return Err(FitProblem::NotConverged);
        }
        let used = (covariance * data).trace();
        let freedom = (number - used).max(1.0);
        let new_variance = (squares / freedom).max(least_variance);
        let settled = step.dot(&pull) < DECREMENT
            && (new_variance / variance - 1.0).abs() < VARIANCE_TOLERANCE;
        let decrement = step.dot(&pull);
        let is_nearest = nearest.as_ref().is_none_or(|(least, _)| decrement < *least);
        if iteration > 0 && (settled || is_nearest) {
            let scatter = covariance * data * covariance;
            let t = quantile(freedom, 0.975);
            let limits = |k: usize| {
                let known = (covariance[(k, k)] - scatter[(k, k)]).max(0.0);
                let left = NORMAL_95 * step[k];
                let by_efficiency = if k == LOSS {
                    at[LOSS] * within[EFFICIENCY]
                } else {
                    0.0
                };
                let known = known + (by_efficiency / NORMAL_95).powi(2);
                let half =
                    (t * t * scatter[(k, k)] + NORMAL_95 * NORMAL_95 * known + left * left).sqrt();
                Limits::around(at[k], if is_free(k) { half } else { 0.0 })
            };
            let own = OwnHome {
                heat_loss_w_per_k: limits(LOSS),
                base_load_kwh_per_day: limits(BASE),
                warmer_k: limits(WARMER),
                sun: limits(SUN),
                knows_sun: doubt.sun.is_some(),
                fitted_kwh_per_day: looked.fitted.clone(),
                cv_rmse: (squares / freedom * number / weights).sqrt() / mean,
            };
            if settled {
                return Ok(own);
            }
            nearest = Some((decrement, own));
        }
        let loss = at[LOSS];
        at += step * if iteration < WHOLE_STEPS { 1.0 } else { 0.5 };
        at[LOSS] = at[LOSS].clamp(loss / MOST_STEP, loss * MOST_STEP);
        at[EFFICIENCY] = at[EFFICIENCY].max(0.1);
        if at[LOSS] < 1.0 {
            return Err(FitProblem::NoHeating);
        }
        // The scatter is found together with the home; half a step keeps the two from chasing each other.
        variance = (variance * new_variance).sqrt();
    }
    match nearest {
        Some((decrement, own)) if decrement < NEAR_ENOUGH => Ok(own),
        _ => Err(FitProblem::NotConverged),
    }
}

fn look(
    metered: &[Metered<'_>],
    stated: &Stated,
    at: &Vector,
    is_free: &dyn Fn(usize) -> bool,
    heating_kwh: &dyn Fn(&Tried) -> Vec<f64>,
) -> Looked {
    let tried = Tried {
        heat_loss_w_per_k: at[LOSS],
        warmer_k: at[WARMER],
        sun: at[SUN],
    };
    let a_day = |tried: &Tried| -> Vec<f64> {
        heating_kwh(tried)
            .iter()
            .zip(metered)
            .map(|(kwh, one)| kwh / one.weight())
            .collect()
    };
    let heating = a_day(&tried);
    let more_loss = a_day(&Tried {
        heat_loss_w_per_k: at[LOSS] * (1.0 + STEP_LOSS),
        ..tried
    });
    let warmer = is_free(WARMER).then(|| {
        a_day(&Tried {
            warmer_k: at[WARMER] + STEP_WARMER_K,
            ..tried
        })
    });
    let sunnier = is_free(SUN).then(|| {
        a_day(&Tried {
            sun: at[SUN] + STEP_SUN,
            ..tried
        })
    });
    let swing = stated.hot_water_swing;
    let mut looked = Looked {
        fitted: Vec::with_capacity(metered.len()),
        rows: Vec::with_capacity(metered.len()),
    };
    for (i, one) in metered.iter().enumerate() {
        let shape = one.base_shape(at[SHARE] * swing);
        let efficiency = at[EFFICIENCY];
        let mut row = Vector::zeros();
        row[BASE] = shape;
        row[LOSS] = (more_loss[i] - heating[i]) / (STEP_LOSS * at[LOSS]) / efficiency;
        if let Some(warmer) = &warmer {
            row[WARMER] = (warmer[i] - heating[i]) / STEP_WARMER_K / efficiency;
        }
        if let Some(sunnier) = &sunnier {
            row[SUN] = (sunnier[i] - heating[i]) / STEP_SUN / efficiency;
        }
        if is_free(EFFICIENCY) {
            row[EFFICIENCY] = -heating[i] / (efficiency * efficiency);
        }
        if is_free(SHARE) {
            row[SHARE] = at[BASE] * swing * one.season;
        }
        looked
            .fitted
            .push(at[BASE] * shape + heating[i] / efficiency);
        looked.rows.push(row);
    }
    looked
}
