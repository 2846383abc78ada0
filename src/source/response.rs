//! The ground's memory: how far the wall falls after a history of draws.
//!
//! A step response is written as a sum of exponentials, `R(t) = Σ wᵢ (1 − exp(−t/τᵢ))`, with time constants fixed once for all
//! loops from half an hour to two centuries. The convolution with an hourly history is then exact for that sum and needs
//! only one running mean of the draw for each time constant: the memory. Its size does not grow with the years, it
//! can be copied, and scaling it scales the history. Such a scheme without a stored history is that of Lamarche and
//! Beauchamp 2007 and Lamarche 2009 \[from memory\]; here the weights are fitted to the response by least squares.

use nalgebra::{DMatrix, DVector};

/// Time constants of the memory.
const TERMS: usize = 32;
/// The shortest and the longest, h: below the first hour; beyond the time in which a bore of 200 m becomes steady.
const SHORTEST_H: f64 = 0.4;
const LONGEST_H: f64 = 200.0 * 8766.0;
/// Hours over which a response is fitted: sixty years.
pub(super) const HORIZON_H: f64 = 60.0 * 8766.0;
/// Points in time of a response, evenly spaced in the logarithm of time.
const CURVE_POINTS: usize = 300;
/// Singular values below this share of the greatest carry no more than rounding.
const RANK_TOLERANCE: f64 = 1e-8;
/// Greatest error of the sum against the response that is accepted, as a share of the response after sixty years. One bore reaches
/// 2e-5, the trenches of the brief 2e-4.
const FIT_TOLERANCE: f64 = 1e-3;

/// What past draws have left in the ground: the mean draw of about the last τ hours for each time constant, kW.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Memory {
    mean_kw: [f64; TERMS],
}

impl Default for Memory {
    /// Ground from which nothing was ever drawn.
    fn default() -> Self {
        Self {
            mean_kw: [0.0; TERMS],
        }
    }
}

impl Memory {
    /// The memory of the same history with every draw multiplied: the ground is linear.
    pub fn times(&self, factor: f64) -> Self {
        Self {
            mean_kw: self.mean_kw.map(|kw| kw * factor),
        }
    }
}

/// The step response of a loop.
#[derive(Debug, Clone, PartialEq)]
pub struct Response {
    weight: [f64; TERMS],
    /// Weight times what an hour leaves of a mean.
    kept_weight: [f64; TERMS],
    /// What an hour leaves of a mean, 0 to 1.
    kept: [f64; TERMS],
    fit_error: f64,
}

/// Why a response could not be written as exponentials.
#[derive(Debug, Clone, PartialEq)]
pub struct NoResponse {
    /// What went wrong.
    pub why: String,
}

impl Response {
    /// The times (h) at which a response is to be given to [`Response::fit`].
    pub fn times_h() -> Vec<f64> {
        let step = HORIZON_H.ln() / (CURVE_POINTS - 1) as f64;
        (0..CURVE_POINTS).map(|i| (step * i as f64).exp()).collect()
    }

    /// Fits the exponentials to values of a response at [`Response::times_h`].
    ///
    /// # Errors
    /// When a value is not a number or the sum does not follow them.
    pub fn fit(values: &[f64]) -> Result<Self, NoResponse> {
        let times_h = Self::times_h();
        if values.len() != times_h.len() || !values.iter().all(|value| value.is_finite()) {
            return Err(NoResponse {
                why: format!("{} finite values are needed", times_h.len()),
            });
        }
        let constants_h = constants_h();
        let basis = DMatrix::from_fn(times_h.len(), TERMS, |i, j| {
            -(-times_h[i] / constants_h[j]).exp_m1()
        });
        let wanted = DVector::from_column_slice(values);
        let svd = basis.clone().svd(true, true);
        let cut = RANK_TOLERANCE * svd.singular_values.max();
        let solved = svd.solve(&wanted, cut).map_err(|why| NoResponse {
            why: why.to_owned(),
        })?;
        let fit_error = (&basis * &solved - &wanted).amax();
        if fit_error > FIT_TOLERANCE * wanted.amax() {
            return Err(NoResponse {
                why: format!(
                    "the sum of exponentials misses the response by {fit_error:.2e} of {:.3}",
                    wanted.amax()
                ),
            });
        }
        let weight = std::array::from_fn(|j| solved[j]);
        let kept: [f64; TERMS] = std::array::from_fn(|j| (-1.0 / constants_h[j]).exp());
        let kept_weight = std::array::from_fn(|j| weight[j] * kept[j]);
        Ok(Self {
            weight,
            kept_weight,
            kept,
            fit_error,
        })
    }

    /// The response after a number of hours, in the unit of its values.
    pub fn after_h(&self, hours: f64) -> f64 {
        constants_h()
            .iter()
            .zip(self.weight)
            .map(|(constant, weight)| -weight * (-hours / constant).exp_m1())
            .sum()
    }

    /// How much of the present hour's own draw is felt at its end.
    pub fn first_hour(&self) -> f64 {
        self.weight
            .iter()
            .zip(self.kept)
            .map(|(weight, kept)| weight * (1.0 - kept))
            .sum()
    }

    /// What the past alone does at the end of the present hour: response times kW.
    pub fn of_the_past(&self, memory: &Memory) -> f64 {
        self.kept_weight
            .iter()
            .zip(memory.mean_kw)
            .map(|(weight, kw)| weight * kw)
            .sum()
    }

    /// What everything up to now does: response times kW.
    pub fn now(&self, memory: &Memory) -> f64 {
        self.weight
            .iter()
            .zip(memory.mean_kw)
            .map(|(weight, kw)| weight * kw)
            .sum()
    }

    /// Lets an hour with a mean draw (kW, negative for heat put back) pass.
    pub fn remember(&self, kw: f64, memory: &mut Memory) {
        for (mean, kept) in memory.mean_kw.iter_mut().zip(self.kept) {
            *mean = kw + (*mean - kw) * kept;
        }
    }

    /// What is remembered when a history of a number of hours, which leaves `once` in fresh ground, has happened a number of times in
    /// a row.
    pub fn repeated(&self, once: &Memory, hours: f64, times: f64) -> Memory {
        let constants_h = constants_h();
        Memory {
            mean_kw: std::array::from_fn(|i| {
                // 1 + k + k² + … with k = exp(−hours/τ), written so that nothing cancels where k is nearly 1.
                let per_round = hours / constants_h[i];
                once.mean_kw[i] * (-per_round * times).exp_m1() / (-per_round).exp_m1()
            }),
        }
    }

    /// Greatest difference between the exponentials and the response they were fitted to.
    pub fn fit_error(&self) -> f64 {
        self.fit_error
    }
}

fn constants_h() -> [f64; TERMS] {
    let step = (LONGEST_H / SHORTEST_H).ln() / (TERMS - 1) as f64;
    std::array::from_fn(|i| SHORTEST_H * (step * i as f64).exp())
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::source::line::infinite_line;

    fn line() -> Response {
        let values: Vec<_> = Response::times_h()
            .iter()
            .map(|h| infinite_line(0.065, 1e-6, h * 3600.0))
            .collect();
        Response::fit(&values).unwrap()
    }

    #[test]
    fn the_sum_follows_the_response_between_its_points() {
        let response = line();
        for hours in [1.0, 1.7, 13.0, 500.0, 8766.0, 25.3 * 8766.0] {
            let exact = infinite_line(0.065, 1e-6, hours * 3600.0);
            // A thousandth of q′/(2πk) is 0.004 K at 50 W/m and 2 W/(m K).
            assert!((response.after_h(hours) - exact).abs() < 1e-3, "{hours}");
        }
    }

    #[test]
    fn a_steady_draw_follows_the_step_and_the_hour_splits_into_past_and_present() {
        let response = line();
        let mut memory = Memory::default();
        for hour in 1..=1000 {
            let ahead = response.of_the_past(&memory) + 2.0 * response.first_hour();
            response.remember(2.0, &mut memory);
            assert!((response.now(&memory) - ahead).abs() < 1e-10);
            let step = 2.0 * response.after_h(f64::from(hour));
            assert!((response.now(&memory) - step).abs() < 1e-9, "{hour}");
        }
    }

    #[test]
    fn equal_years_add_up_without_being_gone_through() {
        let response = line();
        let draw = |hour: u32| if hour % 100 < 40 { 5.0 } else { 0.3 };
        let (mut once, mut walked) = (Memory::default(), Memory::default());
        (0..1000).for_each(|hour| response.remember(draw(hour), &mut once));
        for _ in 0..7 {
            (0..1000).for_each(|hour| response.remember(draw(hour), &mut walked));
        }
        let summed = response.repeated(&once, 1000.0, 7.0);
        assert!((response.now(&summed) - response.now(&walked)).abs() < 1e-9);
    }

    #[test]
    fn what_is_no_response_is_refused() {
        let mut values = vec![1.0; CURVE_POINTS];
        assert!(Response::fit(&values[1..]).is_err());
        values[7] = f64::NAN;
        assert!(Response::fit(&values).is_err());
        let jump: Vec<_> = (0..CURVE_POINTS)
            .map(|i| if i < 150 { 0.0 } else { 1.0 })
            .collect();
        assert!(Response::fit(&jump).is_err());
    }

    proptest::proptest! {
        /// The ground is linear: a history times a factor leaves a memory times that factor.
        #[test]
        fn memories_scale_with_their_history(factor in -3.0..3.0, draws in proptest::collection::vec(-2.0..8.0, 1..200)) {
            let response = line();
            let (mut one, mut other) = (Memory::default(), Memory::default());
            for kw in draws {
                response.remember(kw, &mut one);
                response.remember(kw * factor, &mut other);
            }
            let difference = response.now(&one.times(factor)) - response.now(&other);
            proptest::prop_assert!(difference.abs() < 1e-9);
        }
    }
}
