//! What a lever may be: a distribution, asked by its quantiles.

use statrs::distribution::{ContinuousCDF, LogNormal, Normal, Triangular, Uniform};

use crate::problem::{Place, Problem, Problems};

/// What a lever may be, in its own unit.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum Range {
    /// From low to high, most likely in between.
    Triangle {
        /// Never below.
        low: f64,
        /// Most likely.
        likely: f64,
        /// Never above.
        high: f64,
    },
    /// Anything from low to high alike.
    Even {
        /// Never below.
        low: f64,
        /// Never above.
        high: f64,
    },
    /// Normal.
    Normal {
        /// Mean.
        mean: f64,
        /// Standard deviation.
        deviation: f64,
    },
    /// Log-normal: a factor up is as likely as the same factor down.
    LogNormal {
        /// Median.
        median: f64,
        /// Standard deviation of the natural logarithm.
        deviation: f64,
    },
}

impl Range {
    /// Checks that it is a range.
    ///
    /// # Errors
    /// Low above high, a likely value outside, no spread, a median that is not positive.
    pub fn check(&self, name: &str) -> Result<(), Problems> {
        let refuse = |found: String, allowed: &str, remedy: &str| {
            Err(Problems::from(Problem::new(
                Place::field(name),
                found,
                allowed,
                remedy,
            )))
        };
        match *self {
            Self::Triangle { low, likely, high } if !(low <= likely && likely <= high) => refuse(
                format!("low {low}, likely {likely}, high {high}"),
                "low ≤ likely ≤ high",
                "put them in order",
            ),
            Self::Even { low, high } if low.is_nan() || high.is_nan() || low > high => refuse(
                format!("low {low} above high {high}"),
                "low ≤ high",
                "put them in order",
            ),
            Self::Triangle { low, high, .. } | Self::Even { low, high } if low == high => refuse(
                format!("no spread: {low} to {high}"),
                "low < high",
                "give one value instead of a range",
            ),
            Self::Normal { deviation, .. } | Self::LogNormal { deviation, .. }
                if deviation.is_nan() || deviation <= 0.0 =>
            {
                refuse(
                    format!("a standard deviation of {deviation}"),
                    "above 0",
                    "give one value instead of a range",
                )
            }
            Self::LogNormal { median, .. } if median.is_nan() || median <= 0.0 => refuse(
                format!("a median of {median}"),
                "above 0",
                "a log-normal quantity is positive",
            ),
            _ => Ok(()),
        }
    }

    /// The value that a share of all lie below, 0 < share < 1; nothing for what is no range.
    pub fn at(&self, share: f64) -> Option<f64> {
        match *self {
            Self::Triangle { low, likely, high } => Triangular::new(low, high, likely)
                .ok()
                .map(|held| held.inverse_cdf(share)),
            Self::Even { low, high } => Uniform::new(low, high)
                .ok()
                .map(|held| held.inverse_cdf(share)),
            Self::Normal { mean, deviation } => Normal::new(mean, deviation)
                .ok()
                .map(|held| held.inverse_cdf(share)),
            Self::LogNormal { median, deviation } => LogNormal::new(median.ln(), deviation)
                .ok()
                .map(|held| held.inverse_cdf(share)),
        }
    }
}

/// Turns a share into one that goes with another by a correlation of their normal scores (a Gaussian copula).
pub(super) fn correlated(share: f64, with: f64, correlation: f64) -> f64 {
    let Ok(normal) = Normal::new(0.0, 1.0) else {
        return share;
    };
    let own = (1.0 - correlation * correlation).max(0.0).sqrt();
    normal.cdf(correlation * normal.inverse_cdf(with) + own * normal.inverse_cdf(share))
}

#[cfg(test)]
mod tests {
    use super::*;

    /// Closed forms: a triangle on 0, 1, 3 has its median at 3 − √3; a log-normal its 84.13 % point one deviation up.
    #[test]
    fn quantiles_agree_with_closed_forms() {
        let near = |range: Range, share, value: f64| {
            let found = range.at(share).unwrap();
            assert!((found - value).abs() < 1e-6, "{range:?} {found} {value}");
        };
        near(
            Range::Triangle {
                low: 0.0,
                likely: 1.0,
                high: 3.0,
            },
            0.5,
            3.0 - 3.0_f64.sqrt(),
        );
        near(
            Range::Even {
                low: 2.0,
                high: 6.0,
            },
            0.25,
            3.0,
        );
        near(
            Range::Normal {
                mean: 5.0,
                deviation: 2.0,
            },
            0.5,
            5.0,
        );
        near(
            Range::LogNormal {
                median: 2.0,
                deviation: 0.5,
            },
            0.841_344_746_068_543,
            2.0 * 0.5_f64.exp(),
        );
    }

    #[test]
    fn what_is_no_range_is_refused() {
        for bad in [
            Range::Triangle {
                low: 3.0,
                likely: 2.0,
                high: 1.0,
            },
            Range::Triangle {
                low: 1.0,
                likely: 1.0,
                high: 1.0,
            },
            Range::Even {
                low: 2.0,
                high: 1.0,
            },
            Range::Normal {
                mean: 0.0,
                deviation: 0.0,
            },
            Range::LogNormal {
                median: -1.0,
                deviation: 0.2,
            },
        ] {
            assert!(bad.check("heat loss").is_err(), "{bad:?}");
        }
    }
}
