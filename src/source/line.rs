//! Line sources: how far a wall falls when a line takes one watt per metre from the ground, from the first hour on.
//!
//! Both solutions are those of a line of no width. At the wall of a real bore they hold from about 5 r²/α on; before that the
//! bore's own radius and filling matter. [`EARLY_ERROR`] bounds what the line leaves out.

use std::f64::consts::PI;
use std::num::NonZeroUsize;

use gauss_quad::GaussLegendre;
use statrs::consts::EULER_MASCHERONI;
use statrs::function::erf::erf;

/// How far a line source stays behind a cylinder of the bore's radius whose filling holds no heat (Carslaw and Jaeger 1959 §13.5),
/// at most, in units of q′/(2πk): the difference is greatest about α t = 0.27 r² and falls to 0.13 at 5 r²/α. A filling holds
/// heat, so that the truth lies between the two. Computed in `tests/reference/ground.py`.
pub const EARLY_ERROR: f64 = 0.357;

/// Points of Gauss and Legendre in a panel of the integral.
const POINTS: usize = 12;
/// A panel reaches at most this much further in the logarithm of the integration variable.
const PANEL: f64 = 0.25;
/// The integrand is left out where its factor exp(−d² s²) is below exp(−43): 2e-19.
const FURTHEST: f64 = 6.6;

/// A vertical line source, or the line along which its neighbour is felt.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) struct Vertical {
    /// Depth of its upper end, m.
    pub top_m: f64,
    /// Length, m.
    pub length_m: f64,
}

/// Finite line sources by quadrature.
pub(super) struct FiniteLine {
    rule: GaussLegendre,
}

impl FiniteLine {
    pub fn new() -> Self {
        Self {
            rule: GaussLegendre::new(NonZeroUsize::new(POINTS).unwrap_or(NonZeroUsize::MIN)),
        }
    }

    /// Response along `felt`, in units of q′/(2πk), at rising times (s), to `source` at a distance (m): the mean over the length.
    ///
    /// Claesson and Javed 2011 for equal lines, in the form for unequal ones of Cimmino and Bernier 2014
    /// (doi 10.1016/j.ijheatmasstransfer.2013.10.037):
    /// `h = 1/(2 H₂) ∫_{1/√(4αt)}^∞ exp(−d²s²)/s² Σ ± i(·s) ds`, the surface held at its temperature by the image line above it.
    /// The integral grows panel by panel as time goes on, so that a whole curve costs little more than its last point.
    pub fn curve(
        &self,
        source: Vertical,
        felt: Vertical,
        distance_m: f64,
        diffusivity_m2_per_s: f64,
        times_s: &[f64],
    ) -> Vec<f64> {
        let lengths = signed_lengths(source, felt);
        let integrand = |ln_s: f64| {
            let s = ln_s.exp();
            let sum: f64 = lengths
                .iter()
                .map(|(sign, length)| sign * error_integral(length * s))
                .sum();
            // ds/s² = d(ln s)/s
            (-(distance_m * s).powi(2)).exp() * sum / s
        };
        let mut upper = (FURTHEST / distance_m).ln();
        let mut sum = 0.0;
        let mut curve = Vec::with_capacity(times_s.len());
        for &time in times_s {
            let lower = -0.5 * (4.0 * diffusivity_m2_per_s * time).ln();
            if lower < upper {
                sum += self.integral(lower, upper, integrand);
                upper = lower;
            }
            curve.push(sum / (2.0 * felt.length_m));
        }
        curve
    }

    fn integral(&self, lower: f64, upper: f64, integrand: impl Fn(f64) -> f64) -> f64 {
        let panels = ((upper - lower) / PANEL).ceil().max(1.0);
        let width = (upper - lower) / panels;
        (0..panels as usize)
            .map(|i| {
                let from = lower + width * i as f64;
                self.rule.integrate(from, from + width, &integrand)
            })
            .sum()
    }
}

/// The lengths in the arguments of the eight terms, with their signs: four of the line, four of its image.
fn signed_lengths(source: Vertical, felt: Vertical) -> [(f64, f64); 8] {
    let (d1, h1) = (source.top_m, source.length_m);
    let (d2, h2) = (felt.top_m, felt.length_m);
    [
        (1.0, d2 - d1 + h2),
        (-1.0, d2 - d1),
        (1.0, d2 - d1 - h1),
        (-1.0, d2 - d1 + h2 - h1),
        (1.0, d2 + d1 + h2),
        (-1.0, d2 + d1),
        (1.0, d2 + d1 + h1),
        (-1.0, d2 + d1 + h2 + h1),
    ]
}

/// Integral of the error function: i(x) = x erf x − (1 − exp(−x²))/√π, even in x.
fn error_integral(x: f64) -> f64 {
    x * erf(x) + (-x * x).exp_m1() / PI.sqrt()
}

/// Response of endless ground at a distance (m) from an infinite line after a time (s), in units of q′/(2πk):
/// ½ E₁(d²/(4αt)), Kelvin's line source.
pub(super) fn infinite_line(distance_m: f64, diffusivity_m2_per_s: f64, time_s: f64) -> f64 {
    0.5 * exponential_integral(distance_m * distance_m / (4.0 * diffusivity_m2_per_s * time_s))
}

/// The exponential integral E₁ of a positive number, to about 1e-15 of its value.
///
/// Abramowitz and Stegun 5.1.11 up to 1, the continued fraction 5.1.22 beyond, begun so far inside that what is left out is below
/// rounding: it falls as exp(−4 √(n x)). The function of the statistics library demands equality to 1e-17 of two successive
/// fractions, and for some arguments never has it.
fn exponential_integral(x: f64) -> f64 {
    /// Terms of the series: 1/(25 · 25!) is 3e-27.
    const TERMS: u32 = 25;
    /// n x from which the continued fraction is begun.
    const DEPTH: f64 = 90.0;
    if x <= 1.0 {
        let mut power = 1.0;
        let mut sum = -EULER_MASCHERONI - x.ln();
        for n in 1..=TERMS {
            power *= -x / f64::from(n);
            sum -= power / f64::from(n);
        }
        return sum;
    }
    let depth = (DEPTH / x).ceil() as u32 + 4;
    let innermost = x + f64::from(2 * depth + 1);
    let fraction = (1..=depth).rev().fold(innermost, |inner, n| {
        let n = f64::from(n);
        x + 2.0 * n - 1.0 - n * n / inner
    });
    (-x).exp() / fraction
}

#[cfg(test)]
mod tests {
    use super::*;

    const YEAR_S: f64 = 8760.0 * 3600.0;

    /// The integral of Claesson and Javed 2011, computed with general-purpose libraries: H 100 m, D 4 m, r 0.075 m, α 1e-6 m²/s.
    #[test]
    fn one_bore_meets_the_published_values() {
        let line = Vertical {
            top_m: 4.0,
            length_m: 100.0,
        };
        let times = [1.0 / 12.0, 1.0, 10.0, 20.0, 50.0].map(|years| years * YEAR_S);
        let found = FiniteLine::new().curve(line, line, 0.075, 1e-6, &times);
        let expected = [3.46063, 4.65604, 5.63726, 5.87178, 6.10401];
        for (found, expected) in found.iter().zip(expected) {
            // Printed to six figures.
            assert!((found - expected).abs() < 6e-6, "{found} {expected}");
        }
        // 20 W/m in ground of 2 W/(m K) for 20 years: 9.35 K.
        assert!((20.0 * found[3] / (2.0 * PI * 2.0) - 9.35).abs() < 0.005);
    }

    /// Reciprocity: what a long bore does to a short one, times their lengths, is what the short one does to the long one.
    #[test]
    fn neighbours_of_unequal_length_are_reciprocal() {
        let (a, b) = (
            Vertical {
                top_m: 1.0,
                length_m: 120.0,
            },
            Vertical {
                top_m: 3.0,
                length_m: 70.0,
            },
        );
        let rule = FiniteLine::new();
        let at = |from, to| rule.curve(from, to, 6.0, 1e-6, &[10.0 * YEAR_S])[0];
        assert!((at(a, b) * b.length_m / (at(b, a) * a.length_m) - 1.0).abs() < 1e-10);
    }

    /// In its first days a bore's ends are not yet felt: the finite line is the infinite one.
    #[test]
    fn a_finite_line_begins_as_an_infinite_one() {
        let line = Vertical {
            top_m: 2.0,
            length_m: 200.0,
        };
        let time = 48.0 * 3600.0;
        let finite = FiniteLine::new().curve(line, line, 0.06, 1e-6, &[time])[0];
        // The ends reach √(αt) = 0.4 m into 200 m.
        assert!((finite - infinite_line(0.06, 1e-6, time)).abs() < 0.01 * finite);
    }

    /// scipy 1.17.1, `scipy.special.exp1`.
    #[test]
    fn the_exponential_integral_agrees_with_another_library() {
        let expected = [
            (1e-9, 20.146_050_173_044_877),
            (0.3, 0.905_676_651_675_846_8),
            (1.0, 0.219_383_934_395_520_3),
            (1.000_001, 0.219_383_566_516_447_2),
            (1.7, 0.074_654_644_401_253_05),
            (12.0, 4.751_081_824_672_493e-7),
            (80.0, 2.228_543_258_688_473e-37),
        ];
        for (x, expected) in expected {
            assert!(
                (exponential_integral(x) / expected - 1.0).abs() < 1e-13,
                "{x}"
            );
        }
        assert_eq!(exponential_integral(1e6), 0.0);
    }

    #[test]
    fn an_infinite_line_is_half_the_exponential_integral() {
        assert!((infinite_line(2.0, 1.0, 1.0) - 0.219_384 / 2.0).abs() < 1e-6);
        assert_eq!(infinite_line(1000.0, 1e-6, 3600.0), 0.0);
    }
}
