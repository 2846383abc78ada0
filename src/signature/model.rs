//! Weighted least squares of the signature at a base temperature.

use super::days::Day;

/// One metered interval as the fit sees it.
#[derive(Debug, Clone, PartialEq)]
pub(super) struct Metered<'a> {
    pub days: &'a [Day],
    /// Fuel of a mean day, kWh.
    pub kwh_per_day: f64,
    /// Mean season of the cold water over its days.
    pub season: f64,
}

impl<'a> Metered<'a> {
    /// An interval of days in which a mean day used some fuel (kWh).
    pub fn new(days: &'a [Day], kwh_per_day: f64) -> Self {
        let season = days.iter().map(Day::water_season).sum::<f64>() / days.len() as f64;
        Self {
            days,
            kwh_per_day,
            season,
        }
    }

    /// Weight: the variance of a mean of days falls with their number.
    pub fn weight(&self) -> f64 {
        self.days.len() as f64
    }

    fn mean(&self, of: impl Fn(&Day) -> f64) -> f64 {
        self.days.iter().map(of).sum::<f64>() / self.days.len() as f64
    }

    /// Mean of the days' degrees below a base temperature, K.
    pub fn degrees(&self, base_c: f64) -> f64 {
        self.mean(|day| (base_c - day.mean_c).max(0.0))
    }

    /// Share of days colder than a base temperature.
    pub fn colder(&self, base_c: f64) -> f64 {
        self.mean(|day| f64::from(u8::from(day.mean_c < base_c)))
    }

    /// What a base load of 1 becomes when a part of it swings with the cold water.
    pub fn base_shape(&self, swing: f64) -> f64 {
        1.0 + swing * self.season
    }

    /// Mean outdoor temperature, °C.
    pub fn mean_c(&self) -> f64 {
        self.mean(|day| day.mean_c)
    }
}

/// Base load and slope at a base temperature.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) struct Line {
    pub base_c: f64,
    /// kWh a day.
    pub base_load: f64,
    /// kWh a day and kelvin.
    pub slope: f64,
    /// Weighted sum of squares.
    pub squares: f64,
}

/// The best line at a base temperature; nothing when the readings do not tell base load and slope apart.
pub(super) fn line(metered: &[Metered<'_>], base_c: f64, swing: f64) -> Option<Line> {
    /// Determinant over the product of the diagonal below which the two columns are one.
    const LEAST_INDEPENDENCE: f64 = 1e-9;
    let (mut ss, mut sd, mut dd, mut sy, mut dy) = (0.0, 0.0, 0.0, 0.0, 0.0);
    for one in metered {
        let (w, s, d, y) = (
            one.weight(),
            one.base_shape(swing),
            one.degrees(base_c),
            one.kwh_per_day,
        );
        ss += w * s * s;
        sd += w * s * d;
        dd += w * d * d;
        sy += w * s * y;
        dy += w * d * y;
    }
    let determinant = ss * dd - sd * sd;
    if determinant <= LEAST_INDEPENDENCE * ss * dd {
        return None;
    }
    let base_load = (dd * sy - sd * dy) / determinant;
    let slope = (ss * dy - sd * sy) / determinant;
    let squares = metered
        .iter()
        .map(|one| {
            let fitted = base_load * one.base_shape(swing) + slope * one.degrees(base_c);
            one.weight() * (one.kwh_per_day - fitted).powi(2)
        })
        .sum();
    Some(Line {
        base_c,
        base_load,
        slope,
        squares,
    })
}

/// Inverse of a symmetric 3 × 3 matrix by cofactors; nothing when it has none.
pub(super) fn inverse(m: &[[f64; 3]; 3]) -> Option<[[f64; 3]; 3]> {
    let minor = |r: usize, c: usize| {
        let (r1, r2) = ((r + 1) % 3, (r + 2) % 3);
        let (c1, c2) = ((c + 1) % 3, (c + 2) % 3);
        m[r1][c1] * m[r2][c2] - m[r1][c2] * m[r2][c1]
    };
    let determinant: f64 = (0..3).map(|c| m[0][c] * minor(0, c)).sum();
    if !determinant.is_normal() {
        return None;
    }
    let mut inverse = [[0.0; 3]; 3];
    for (r, row) in inverse.iter_mut().enumerate() {
        for (c, entry) in row.iter_mut().enumerate() {
            *entry = minor(c, r) / determinant;
        }
    }
    Some(inverse)
}

/// `rᵀ M r`.
pub(super) fn quadratic(r: &[f64; 3], m: &[[f64; 3]; 3]) -> f64 {
    (0..3)
        .map(|i| (0..3).map(|j| r[i] * m[i][j] * r[j]).sum::<f64>())
        .sum()
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_matrix_times_its_inverse_is_one() {
        let m = [[4.0, 1.0, 0.5], [1.0, 3.0, 0.2], [0.5, 0.2, 2.0]];
        let inverse = inverse(&m).unwrap();
        for (r, row) in m.iter().enumerate() {
            for c in 0..3 {
                let product: f64 = row
                    .iter()
                    .zip(&inverse)
                    .map(|(a, column)| a * column[c])
                    .sum();
                assert!((product - f64::from(u8::from(r == c))).abs() < 1e-12);
            }
        }
        assert_eq!(super::inverse(&[[1.0; 3]; 3]), None);
    }
}
