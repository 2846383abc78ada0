//! The energy signature: base load, slope and base temperature, with what is not known about them.
//!
//! Fels, M. F. (1986), PRISM: an introduction, Energy and Buildings 9: fuel a day = base load + slope × degrees of the day's
//! mean below a base temperature. Here the part of the base load that is hot water may swing with the cold water.

use argmin::core::{CostFunction, Error, Executor, State as _};
use argmin::solver::brent::BrentOpt;
use statrs::distribution::{ContinuousCDF, StudentsT};

use super::days::DailyWeather;
use super::found::{FitProblem, Limits, Point, Signature, Stated};
use super::model::{Line, Metered, inverse, line, quadratic};
use super::readings::Interval;

/// Fewest intervals for a base temperature of published homes, and for one that is fitted.
const LEAST_INTERVALS: usize = 4;
const LEAST_FOR_BASE: usize = 6;
/// Base temperatures that are looked at, °C, and the step of the first look, K.
const BASE_RANGE_C: (f64, f64) = (8.0, 22.0);
const BASE_STEP_K: f64 = 0.25;
/// The base temperature is found to this, K, in at most so many iterations of Brent's method.
const BASE_TOLERANCE_K: f64 = 1e-6;
const MAX_ITERATIONS: u64 = 100;
/// Base temperature of 6935 homes in the United Kingdom, mean and standard deviation, °C (doi 10.5334/bc.670).
const PUBLISHED_BASE_C: (f64, f64) = (15.2, 2.3);
/// Standard deviations of a normal distribution that hold 95 %.
const NORMAL_95: f64 = 1.959_964;
/// Limits of 95 %: this quantile on either side.
const QUANTILE: f64 = 0.975;
/// Chance that any of the intervals is called odd when none is.
const ODD_CHANCE: f64 = 0.05;

/// Sum of squares over the base temperature.
struct Squares<'a, 'b> {
    metered: &'a [Metered<'b>],
    swing: f64,
}

impl CostFunction for Squares<'_, '_> {
    type Param = f64;
    type Output = f64;

    fn cost(&self, base_c: &f64) -> Result<f64, Error> {
        Ok(line(self.metered, *base_c, self.swing).map_or(f64::INFINITY, |line| line.squares))
    }
}

/// The best line over all base temperatures.
fn best(metered: &[Metered<'_>], swing: f64) -> Result<Line, FitProblem> {
    let steps = ((BASE_RANGE_C.1 - BASE_RANGE_C.0) / BASE_STEP_K).round() as usize;
    let looks =
        (0..=steps).filter_map(|i| line(metered, BASE_RANGE_C.0 + BASE_STEP_K * i as f64, swing));
    let coarse = looks
        .min_by(|a, b| a.squares.total_cmp(&b.squares))
        .ok_or(FitProblem::NoHeating)?;
    if coarse.slope <= 0.0 {
        return Err(FitProblem::NoHeating);
    }
    let edge = coarse.base_c <= BASE_RANGE_C.0 || coarse.base_c >= BASE_RANGE_C.1;
    if edge {
        return Err(FitProblem::BaseTemperatureOpen {
            at_c: coarse.base_c,
        });
    }
    let solver = BrentOpt::new(coarse.base_c - BASE_STEP_K, coarse.base_c + BASE_STEP_K)
        .set_tolerance(BASE_TOLERANCE_K.sqrt() * 1e-3, BASE_TOLERANCE_K);
    let solved = Executor::new(Squares { metered, swing }, solver)
        .configure(|state| state.max_iters(MAX_ITERATIONS))
        .run()
        .map_err(|_| FitProblem::NotConverged)?;
    let base_c = *solved
        .state()
        .get_best_param()
        .ok_or(FitProblem::NotConverged)?;
    line(metered, base_c, swing).ok_or(FitProblem::NotConverged)
}

/// The intervals over the days of the weather.
pub(super) fn metered<'a>(
    intervals: &[Interval],
    weather: &'a DailyWeather,
) -> Result<Vec<Metered<'a>>, FitProblem> {
    if intervals.len() < LEAST_INTERVALS {
        return Err(FitProblem::TooFew {
            found: intervals.len(),
        });
    }
    intervals
        .iter()
        .map(|interval| {
            let days =
                weather
                    .between(interval.from, interval.to)
                    .ok_or(FitProblem::OutsideWeather {
                        from: interval.from,
                        to: interval.to,
                        line: interval.line,
                    })?;
            Ok(Metered::new(days, interval.kwh / days.len() as f64))
        })
        .collect()
}

/// Fits the signature of intervals over the weather of the same days.
///
/// Intervals are weighted by their days. Limits of 95 % combine the fit (Student's t) with what is stated about efficiency
/// and hot water, as independent. With four or five intervals the base temperature is that of published homes.
///
/// # Errors
/// [`FitProblem`].
pub fn fit(
    intervals: &[Interval],
    weather: &DailyWeather,
    stated: &Stated,
) -> Result<Signature, FitProblem> {
    let metered = metered(intervals, weather)?;
    let fitted = metered.len() >= LEAST_FOR_BASE;
    fitted_or_published(intervals, &metered, fitted, stated)
}

/// The same with the base temperature of published homes, for readings whose line bends nowhere.
///
/// # Errors
/// [`FitProblem`].
pub fn fit_at_published_base(
    intervals: &[Interval],
    weather: &DailyWeather,
    stated: &Stated,
) -> Result<Signature, FitProblem> {
    fitted_or_published(intervals, &metered(intervals, weather)?, false, stated)
}

fn fitted_or_published(
    intervals: &[Interval],
    metered: &[Metered<'_>],
    fitted: bool,
    stated: &Stated,
) -> Result<Signature, FitProblem> {
    let solve = |share: f64, base_c: f64| -> Result<Line, FitProblem> {
        let swing = share * stated.hot_water_swing;
        let found = if fitted {
            best(metered, swing)?
        } else {
            line(metered, base_c, swing).ok_or(FitProblem::NoHeating)?
        };
        if found.slope <= 0.0 {
            Err(FitProblem::NoHeating)
        } else {
            Ok(found)
        }
    };
    let found = solve(stated.hot_water_share, PUBLISHED_BASE_C.0)?;
    let swing = stated.hot_water_share * stated.hot_water_swing;

    let parameters = if fitted { 3 } else { 2 };
    let freedom = (metered.len() - parameters) as f64;
    let variance = found.squares / freedom;
    let design: Vec<[f64; 3]> = metered
        .iter()
        .map(|one| {
            let kink = if fitted {
                found.slope * one.colder(found.base_c)
            } else {
                0.0
            };
            [one.base_shape(swing), one.degrees(found.base_c), kink]
        })
        .collect();
    let unscaled = unscaled_covariance(metered, &design, fitted).ok_or(FitProblem::NoHeating)?;
    let covariance = unscaled.map(|row| row.map(|entry| entry * variance));
    let t = quantile(freedom, QUANTILE);

    // What is stated moves the fit: half the difference of the fits at its limits.
    let moved = |a: Result<Line, FitProblem>, b: Result<Line, FitProblem>| -> [f64; 3] {
        match (a, b) {
            (Ok(a), Ok(b)) => [
                b.base_load - a.base_load,
                b.slope - a.slope,
                b.base_c - a.base_c,
            ]
            .map(|d| d / 2.0),
            _ => [0.0; 3],
        }
    };
    let (share, within) = (stated.hot_water_share, stated.hot_water_share_within);
    let by_share = moved(
        solve((share - within).max(0.0), PUBLISHED_BASE_C.0),
        solve((share + within).min(1.0), PUBLISHED_BASE_C.0),
    );
    let by_base = if fitted {
        [0.0; 3]
    } else {
        let half_k = NORMAL_95 * PUBLISHED_BASE_C.1;
        moved(
            solve(share, PUBLISHED_BASE_C.0 - half_k),
            solve(share, PUBLISHED_BASE_C.0 + half_k),
        )
    };
    let half = |i: usize| {
        (t * t * covariance[i][i] + by_share[i].powi(2) + by_base[i].powi(2))
            .max(0.0)
            .sqrt()
    };
    /// Watts of a kilowatt-hour a day.
    const W_PER_KWH_DAY: f64 = 1000.0 / 24.0;
    let to_loss = stated.efficiency * W_PER_KWH_DAY;
    let heat_loss = found.slope * to_loss;
    let half_loss =
        (half(1) * to_loss).hypot(heat_loss * stated.efficiency_within / stated.efficiency);

    let weights: f64 = metered.iter().map(Metered::weight).sum();
    let mean = metered
        .iter()
        .map(|one| one.weight() * one.kwh_per_day)
        .sum::<f64>()
        / weights;
    let total: f64 = metered
        .iter()
        .map(|one| one.weight() * (one.kwh_per_day - mean).powi(2))
        .sum();
    let mean_weight = weights / metered.len() as f64;
    let points = points(intervals, metered, &design, &found, &unscaled, freedom);
    Ok(Signature {
        heat_loss_w_per_k: Limits::around(heat_loss, half_loss),
        base_temperature_c: Limits::around(found.base_c, half(2)),
        base_load_kwh_per_day: Limits::around(found.base_load, half(0)),
        slope_kwh_per_k_day: found.slope,
        base_temperature_fitted: fitted,
        r_squared: if total > 0.0 {
            1.0 - found.squares / total
        } else {
            0.0
        },
        cv_rmse: (variance / mean_weight).sqrt() / mean,
        points,
        own_home: None,
        swing,
        covariance,
        t,
    })
}

/// Inverse of the weighted normal matrix.
fn unscaled_covariance(
    metered: &[Metered<'_>],
    design: &[[f64; 3]],
    fitted: bool,
) -> Option<[[f64; 3]; 3]> {
    let mut normal = [[0.0; 3]; 3];
    for (one, row) in metered.iter().zip(design) {
        for r in 0..3 {
            for c in 0..3 {
                normal[r][c] += one.weight() * row[r] * row[c];
            }
        }
    }
    if !fitted {
        // The base temperature is not of the fit: a parameter that nothing depends on.
        normal[2][2] = 1.0;
    }
    let mut unscaled = inverse(&normal)?;
    if !fitted {
        unscaled[2][2] = 0.0;
    }
    Some(unscaled)
}

/// Share of a sum of squares that is rounding.
const ROUNDING: f64 = 1e-12;

fn points(
    intervals: &[Interval],
    metered: &[Metered<'_>],
    design: &[[f64; 3]],
    found: &Line,
    unscaled: &[[f64; 3]; 3],
    freedom: f64,
) -> Vec<Point> {
    let limit = if freedom > 1.0 {
        quantile(
            freedom - 1.0,
            1.0 - ODD_CHANCE / (2.0 * metered.len() as f64),
        )
    } else {
        f64::INFINITY
    };
    intervals
        .iter()
        .zip(metered)
        .zip(design)
        .map(|((interval, one), row)| {
            let fitted = found.base_load * row[0] + found.slope * row[1];
            let residual = (one.kwh_per_day - fitted) * one.weight().sqrt();
            let leverage = one.weight() * quadratic(row, unscaled);
            // What is left without it; never less than rounding leaves.
            let rest = (found.squares - residual * residual / (1.0 - leverage))
                .max(ROUNDING * found.squares);
            let off = if found.squares > 0.0 && freedom > 1.0 {
                residual / (rest / (freedom - 1.0) * (1.0 - leverage)).sqrt()
            } else {
                0.0
            };
            Point {
                from: interval.from,
                to: interval.to,
                mean_c: one.mean_c(),
                kwh_per_day: one.kwh_per_day,
                fitted_kwh_per_day: fitted,
                off,
                odd: off.abs() > limit,
            }
        })
        .collect()
}

/// Quantile of Student's t with `freedom` > 0 degrees of freedom.
pub(super) fn quantile(freedom: f64, probability: f64) -> f64 {
    StudentsT::new(0.0, 1.0, freedom).map_or(f64::INFINITY, |t| t.inverse_cdf(probability))
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::signature::Day;
    use chrono::NaiveDate;

    fn weather() -> DailyWeather {
        let first = NaiveDate::from_ymd_opt(2023, 1, 1).unwrap();
        let day = |i: u64| Day {
            date: first + chrono::Days::new(i),
            mean_c: 10.0 - 8.0 * (std::f64::consts::TAU * (i as f64 - 20.0) / 365.0).cos()
                + 3.0 * ((i * i % 17) as f64 / 8.0 - 1.0),
        };
        DailyWeather::of_days((0..365).map(day).collect())
    }

    fn stated() -> Stated {
        Stated {
            efficiency: 0.84,
            efficiency_within: 0.0,
            hot_water_share: 0.0,
            hot_water_share_within: 0.0,
            hot_water_swing: 0.0,
        }
    }

    /// Intervals of some days each, exactly on a signature.
    fn exact(base_load: f64, slope: f64, base_c: f64, length: usize) -> Vec<Interval> {
        weather()
            .all()
            .chunks_exact(length)
            .enumerate()
            .map(|(i, days)| Interval {
                from: days[0].date,
                to: days[length - 1].date + chrono::Days::new(1),
                kwh: days
                    .iter()
                    .map(|day| base_load + slope * (base_c - day.mean_c).max(0.0))
                    .sum(),
                line: i + 2,
            })
            .collect()
    }

    #[test]
    fn readings_that_lie_on_a_signature_give_it_back() {
        let found = fit(&exact(9.0, 6.0, 15.7, 30), &weather(), &stated()).unwrap();
        assert!((found.slope_kwh_per_k_day - 6.0).abs() < 1e-4, "{found:?}");
        assert!((found.base_temperature_c.value - 15.7).abs() < 1e-3);
        assert!((found.base_load_kwh_per_day.value - 9.0).abs() < 1e-2);
        assert!((found.heat_loss_w_per_k.value - 6.0 * 0.84 * 1000.0 / 24.0).abs() < 0.01);
        assert!(found.r_squared > 0.999_999 && found.cv_rmse < 1e-4);
        let all: f64 = exact(9.0, 6.0, 15.7, 73)
            .iter()
            .map(|interval| interval.kwh)
            .sum();
        assert!((found.fuel_kwh(weather().all()).value / all - 1.0).abs() < 1e-4);
    }

    #[test]
    fn what_is_stated_widens_the_limits() {
        let readings = exact(9.0, 6.0, 15.7, 30);
        let narrow = fit(&readings, &weather(), &stated()).unwrap();
        let wide = fit(
            &readings,
            &weather(),
            &Stated {
                efficiency_within: 0.084,
                ..stated()
            },
        )
        .unwrap();
        assert!(narrow.heat_loss_w_per_k.half() < 0.1);
        // A tenth of the efficiency is a tenth of the coefficient.
        let tenth = wide.heat_loss_w_per_k.value * 0.1;
        assert!((wide.heat_loss_w_per_k.half() - tenth).abs() < 0.01);
    }

    #[test]
    fn four_quarters_take_the_base_temperature_of_published_homes() {
        let quarters = fit(&exact(9.0, 6.0, 15.7, 91), &weather(), &stated()).unwrap();
        assert!(!quarters.base_temperature_fitted && quarters.n() == 4);
        assert_eq!(quarters.base_temperature_c.value, 15.2);
        let loss = quarters.heat_loss_w_per_k;
        assert!(loss.low < 210.0 && loss.high > 210.0, "{loss:?}");
    }

    #[test]
    fn what_cannot_be_fitted_says_why() {
        let readings = exact(9.0, 6.0, 15.7, 30);
        let few = fit(&readings[..3], &weather(), &stated());
        assert_eq!(few, Err(FitProblem::TooFew { found: 3 }));
        let flat: Vec<_> = readings
            .iter()
            .map(|r| Interval {
                kwh: 300.0,
                ..r.clone()
            })
            .collect();
        assert!(matches!(
            fit(&flat, &weather(), &stated()),
            Err(FitProblem::NoHeating | FitProblem::BaseTemperatureOpen { .. })
        ));
        let mut late = readings.clone();
        late[11].to = late[11].to + chrono::Days::new(60);
        assert!(matches!(
            fit(&late, &weather(), &stated()),
            Err(FitProblem::OutsideWeather { line: 13, .. })
        ));
        let mut odd = readings;
        odd[1].kwh *= 1.4;
        let found = fit(&odd, &weather(), &stated()).unwrap();
        assert!(found.points[1].odd && found.points.iter().filter(|p| p.odd).count() == 1);
    }
}
