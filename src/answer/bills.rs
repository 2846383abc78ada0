//! The answer of `bills`. Field names are a promise to whoever reads the JSON; absent means absent, never 0.

use chrono::NaiveDate;
use serde::Serialize;

use super::Assumption;
use crate::problem::Finding;
use crate::signature::{Limits, Signature};

/// What meter readings say about a home.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct BillsAnswer {
    /// File of the readings.
    pub file: String,
    /// Heat-loss coefficient at which the home's own model uses what was metered; the effective one where `own_home` is absent.
    pub heat_loss_w_per_k: f64,
    /// Its 95 % limits, those of what is stated included.
    pub heat_loss_95: [f64; 2],
    /// Slope of the straight line as an effective coefficient: it holds how the sun goes with the cold.
    pub effective_w_per_k: f64,
    /// Its 95 % limits, those of efficiency and hot water included.
    pub effective_95: [f64; 2],
    /// What else the home's own model found; absent where the brief does not describe a home that can be run.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub own_home: Option<OwnHomeAnswer>,
    /// Outdoor temperature below which the home is heated.
    pub base_temperature_c: f64,
    /// Its 95 % limits.
    pub base_temperature_95: [f64; 2],
    /// Whether it was fitted; else it is that of published homes.
    pub base_temperature_fitted: bool,
    /// Fuel without heating.
    pub base_load_kwh_per_day: f64,
    /// Its 95 % limits.
    pub base_load_95: [f64; 2],
    /// Share of the variance explained.
    pub r_squared: f64,
    /// Root mean square error over the mean.
    pub cv_rmse: f64,
    /// Intervals used.
    pub n: usize,
    /// Heat-loss coefficient of the brief, where it states one.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub survey_w_per_k: Option<f64>,
    /// Every interval.
    pub intervals: Vec<IntervalAnswer>,
    /// What was assumed.
    pub assumptions: Vec<Assumption>,
    /// What was odd.
    pub findings: Vec<Finding>,
}

/// What the home's own model makes of the readings beside the heat loss.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct OwnHomeAnswer {
    /// Whether it knows the sun; else the heat loss holds how the sun goes with the cold.
    pub knows_sun: bool,
    /// Fuel beside heating.
    pub base_load_kwh_per_day: f64,
    /// Its 95 % limits.
    pub base_load_95: [f64; 2],
    /// By how much the readings fit warmer rooms, or smaller internal gains, than the brief says.
    pub warmer_k: f64,
    /// Its 95 % limits.
    pub warmer_95: [f64; 2],
    /// Multiple of the brief's solar gains that fits.
    pub sun: f64,
    /// Its 95 % limits.
    pub sun_95: [f64; 2],
    /// Root mean square error over the mean.
    pub cv_rmse: f64,
}

/// One interval beside the fit.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct IntervalAnswer {
    /// First day.
    pub from: NaiveDate,
    /// Day after the last.
    pub to: NaiveDate,
    /// Mean outdoor temperature.
    pub outdoor_c: f64,
    /// Fuel a day.
    pub kwh_per_day: f64,
    /// Fuel a day by the straight line.
    pub fitted_kwh_per_day: f64,
    /// Fuel a day by the home's own model.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub model_kwh_per_day: Option<f64>,
    /// Whether it is too far off for chance.
    pub odd: bool,
}

/// The two limits.
pub(super) fn pair(limits: Limits) -> [f64; 2] {
    [limits.low, limits.high]
}

impl BillsAnswer {
    /// The answer of a signature.
    pub fn new(
        file: String,
        signature: &Signature,
        survey_w_per_k: Option<f64>,
        assumptions: Vec<Assumption>,
        findings: Vec<Finding>,
    ) -> Self {
        let own = signature.own_home.as_ref();
        Self {
            file,
            heat_loss_w_per_k: signature.heat_loss().value,
            heat_loss_95: pair(signature.heat_loss()),
            effective_w_per_k: signature.heat_loss_w_per_k.value,
            effective_95: pair(signature.heat_loss_w_per_k),
            own_home: own.map(|own| OwnHomeAnswer {
                knows_sun: own.knows_sun,
                base_load_kwh_per_day: own.base_load_kwh_per_day.value,
                base_load_95: pair(own.base_load_kwh_per_day),
                warmer_k: own.warmer_k.value,
                warmer_95: pair(own.warmer_k),
                sun: own.sun.value,
                sun_95: pair(own.sun),
                cv_rmse: own.cv_rmse,
            }),
            base_temperature_c: signature.base_temperature_c.value,
            base_temperature_95: pair(signature.base_temperature_c),
            base_temperature_fitted: signature.base_temperature_fitted,
            base_load_kwh_per_day: signature.base_load_kwh_per_day.value,
            base_load_95: pair(signature.base_load_kwh_per_day),
            r_squared: signature.r_squared,
            cv_rmse: signature.cv_rmse,
            n: signature.n(),
            survey_w_per_k,
            intervals: signature
                .points
                .iter()
                .enumerate()
                .map(|(i, point)| IntervalAnswer {
                    from: point.from,
                    to: point.to,
                    outdoor_c: point.mean_c,
                    kwh_per_day: point.kwh_per_day,
                    fitted_kwh_per_day: point.fitted_kwh_per_day,
                    model_kwh_per_day: own.and_then(|own| own.fitted_kwh_per_day.get(i).copied()),
                    odd: point.odd,
                })
                .collect(),
            assumptions,
            findings,
        }
    }
}
