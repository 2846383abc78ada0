//! Straight lines through samples, in the normal score of what was drawn.

use statrs::distribution::{ContinuousCDF, Normal};

/// The normal score of a share of one; what a correlation has brought to an end of it stays finite.
pub(super) fn score(share: f64) -> f64 {
    const END: f64 = 1e-12;
    let share = share.clamp(END, 1.0 - END);
    Normal::standard().inverse_cdf(share)
}

/// The straight line nearest to some points; level where they all stand at one place.
#[derive(Debug, Clone, Copy, Default, PartialEq)]
pub(super) struct Line {
    middle: f64,
    mean: f64,
    slope: f64,
}

impl Line {
    /// Through points given as place and value; level at 0 of none.
    pub fn through(points: &[(f64, f64)]) -> Self {
        if points.is_empty() {
            return Self::default();
        }
        let count = points.len() as f64;
        let middle = points.iter().map(|(x, _)| x).sum::<f64>() / count;
        let mean = points.iter().map(|(_, y)| y).sum::<f64>() / count;
        let joint: f64 = points.iter().map(|(x, y)| (x - middle) * (y - mean)).sum();
        let squares: f64 = points.iter().map(|(x, _)| (x - middle).powi(2)).sum();
        Self {
            middle,
            mean,
            slope: if squares > 0.0 { joint / squares } else { 0.0 },
        }
    }

    /// Its value at a place.
    pub fn at(&self, x: f64) -> f64 {
        self.mean + self.slope * (x - self.middle)
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    /// The score of 0.975 is 1.959964 (tables); the line nearest to (0, 1), (1, 2), (2, 6) has slope 5/2 through (1, 3) (by hand).
    #[test]
    fn scores_and_lines_by_hand() {
        assert!((score(0.975) - 1.959_964).abs() < 1e-6);
        assert!(score(0.0).is_finite() && score(1.0).is_finite());
        let line = Line::through(&[(0.0, 1.0), (1.0, 2.0), (2.0, 6.0)]);
        assert!((line.at(1.0) - 3.0).abs() < 1e-12 && (line.at(3.0) - 8.0).abs() < 1e-12);
        assert_eq!(Line::through(&[(1.0, 4.0), (1.0, 6.0)]).at(9.0), 5.0);
    }
}
