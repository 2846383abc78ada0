//! Chebyshev interpolation, in one and in two variables.
//!
//! A function that is smooth on an interval is met by its Chebyshev interpolant with an error that
//! falls exponentially with the number of nodes; the coefficients themselves show when there are
//! enough, and those that are too small to matter are dropped. Source: Trefethen, Approximation Theory
//! and Approximation Practice (2013), chapters 3, 4 and 8.

use std::f64::consts::PI;

/// An interval and its map to −1..1.
#[derive(Clone, Copy, Debug)]
struct Span {
    low: f64,
    high: f64,
}

impl Span {
    /// −1..1, or NaN outside the interval: an interpolant says nothing there.
    fn inward(self, value: f64) -> f64 {
        if value >= self.low && value <= self.high {
            (2.0 * value - (self.low + self.high)) / (self.high - self.low)
        } else {
            f64::NAN
        }
    }

    fn outward(self, place: f64) -> f64 {
        0.5 * ((self.high - self.low) * place + self.high + self.low)
    }
}

/// Nodes of the first kind on −1..1.
fn node(index: usize, count: usize) -> f64 {
    (PI * (index as f64 + 0.5) / count as f64).cos()
}

/// Coefficients of the interpolant through values at the nodes (discrete cosine transform).
fn coefficients(values: &[f64]) -> Vec<f64> {
    let count = values.len();
    (0..count)
        .map(|order| {
            let sum: f64 = values
                .iter()
                .enumerate()
                .map(|(index, value)| {
                    value * (PI * order as f64 * (index as f64 + 0.5) / count as f64).cos()
                })
                .sum();
            sum * if order == 0 { 1.0 } else { 2.0 } / count as f64
        })
        .collect()
}

/// A function of one variable.
#[derive(Clone, Debug)]
pub(super) struct Curve {
    span: Span,
    coefficients: Vec<f64>,
}

impl Curve {
    /// Interpolates `function` at `count` nodes between `low` and `high`; coefficients smaller than
    /// `negligible` (in the function's unit) at the tail are dropped.
    pub fn fit<Error>(
        (low, high): (f64, f64),
        count: usize,
        negligible: f64,
        function: impl FnMut(f64) -> Result<f64, Error>,
    ) -> Result<Curve, Error> {
        let values: Vec<f64> = Curve::nodes((low, high), count)
            .map(function)
            .collect::<Result<_, _>>()?;
        Ok(Curve::through((low, high), &values, negligible))
    }

    /// The nodes between `low` and `high`, the highest first.
    pub fn nodes((low, high): (f64, f64), count: usize) -> impl Iterator<Item = f64> {
        (0..count).map(move |index| Span { low, high }.outward(node(index, count)))
    }

    /// The interpolant through values at the nodes; see [`Curve::fit`].
    pub fn through((low, high): (f64, f64), values: &[f64], negligible: f64) -> Curve {
        let mut coefficients = coefficients(values);
        while coefficients.len() > 1 && coefficients.last().is_some_and(|c| c.abs() < negligible) {
            coefficients.pop();
        }
        Curve {
            span: Span { low, high },
            coefficients,
        }
    }

    /// The value at `at`, NaN outside the interval (Clenshaw's recurrence).
    pub fn value(&self, at: f64) -> f64 {
        let x = self.span.inward(at);
        let (mut next, mut after) = (0.0, 0.0);
        for coefficient in self.coefficients.iter().skip(1).rev() {
            (next, after) = (coefficient + 2.0 * x * next - after, next);
        }
        self.coefficients[0] + x * next - after
    }
}

/// Nodes in each direction of a [`Surface`].
pub(super) const SURFACE_NODES: (usize, usize) = (8, 12);

/// A function of two variables, the first on an interval, the second already on −1..1.
#[derive(Clone, Debug)]
pub(super) struct Surface {
    first: Span,
    /// Coefficients, one row an order of the second variable.
    rows: [[f64; SURFACE_NODES.0]; SURFACE_NODES.1],
}

impl Surface {
    /// Interpolates `function(first, second)` on the grid of nodes.
    pub fn fit<Error>(
        (low, high): (f64, f64),
        mut function: impl FnMut(f64, f64) -> Result<f64, Error>,
    ) -> Result<Surface, Error> {
        let first = Span { low, high };
        let (columns, lines) = SURFACE_NODES;
        let mut rows = [[0.0; SURFACE_NODES.0]; SURFACE_NODES.1];
        for column in 0..columns {
            let at = first.outward(node(column, columns));
            let values: Vec<f64> = (0..lines)
                .map(|line| function(at, node(line, lines)))
                .collect::<Result<_, _>>()?;
            for (row, coefficient) in rows.iter_mut().zip(coefficients(&values)) {
                row[column] = coefficient;
            }
        }
        for row in &mut rows {
            let transformed = coefficients(row);
            row.copy_from_slice(&transformed);
        }
        Ok(Surface { first, rows })
    }

    /// The value at `first`, `second`; NaN outside.
    pub fn value(&self, first: f64, second: f64) -> f64 {
        let columns: [f64; SURFACE_NODES.0] = polynomials(self.first.inward(first));
        let lines: [f64; SURFACE_NODES.1] = polynomials(
            Span {
                low: -1.0,
                high: 1.0,
            }
            .inward(second),
        );
        let mut sums = [0.0; SURFACE_NODES.0];
        for (row, line) in self.rows.iter().zip(lines) {
            for (sum, coefficient) in sums.iter_mut().zip(row) {
                *sum += coefficient * line;
            }
        }
        sums.iter()
            .zip(columns)
            .map(|(sum, column)| sum * column)
            .sum()
    }
}

/// The first Chebyshev polynomials at a place.
fn polynomials<const COUNT: usize>(x: f64) -> [f64; COUNT] {
    let mut values = [1.0; COUNT];
    if COUNT > 1 {
        values[1] = x;
    }
    for order in 2..COUNT {
        values[order] = 2.0 * x * values[order - 1] - values[order - 2];
    }
    values
}

#[cfg(test)]
mod tests {
    use super::*;
    use std::convert::Infallible;

    #[test]
    fn a_curve_meets_a_smooth_function_and_drops_what_is_negligible() {
        let curve =
            Curve::fit::<Infallible>((-1.0, 3.0), 28, 1e-12, |x| Ok((0.7 * x).exp())).unwrap();
        assert!(
            curve.coefficients.len() < 20,
            "{}",
            curve.coefficients.len()
        );
        for step in 0..=40 {
            let x = -1.0 + 0.1 * f64::from(step).min(40.0);
            // 1e-10: what is dropped plus rounding, for values up to 8
            assert!((curve.value(x) - (0.7 * x).exp()).abs() < 1e-10);
        }
    }

    #[test]
    fn a_surface_meets_a_smooth_function_of_two_variables() {
        let function = |x: f64, y: f64| (0.3 * x).sin() * (1.0 + y).exp() + x * y;
        let surface = Surface::fit::<Infallible>((-2.0, 4.0), |x, y| Ok(function(x, y))).unwrap();
        for x in [-2.0, -1.3, 0.0, 2.2, 4.0] {
            for y in [-1.0, -0.4, 0.3, 1.0] {
                // The first term left out, with its alias: twice 2·J₈(0.9)·e² = 1.3e-6, from
                // sin(0.3 + 0.9u) expanded in Chebyshev polynomials, J₈(0.9) = 4.1e-8, e² from y.
                assert!((surface.value(x, y) - function(x, y)).abs() < 1.3e-6);
            }
        }
    }

    #[test]
    fn nothing_is_said_outside() {
        let curve = Curve::fit::<Infallible>((0.0, 1.0), 4, 0.0, Ok).unwrap();
        assert!(curve.value(1.01).is_nan() && curve.value(f64::NAN).is_nan());
        let surface = Surface::fit::<Infallible>((0.0, 1.0), |x, y| Ok(x + y)).unwrap();
        assert!(surface.value(-0.1, 0.0).is_nan() && surface.value(0.5, 1.1).is_nan());
    }
}
