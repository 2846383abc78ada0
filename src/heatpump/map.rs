//! The machine map: the fitted machine as smooth surfaces that are only looked up.
//!
//! Greatest output, least output, and electricity per heat at fractions of the way between them, over source and flow
//! temperature. Exact solutions on coarse Chebyshev nodes in flow and fraction are refined to a fine table; a look-up is
//! multilinear, so it rises and falls as its nodes do. Source nodes are whole degrees, where the greatest speed has its
//! knots.
//! Nothing with a kink is in the map: limits, frost, cycling and backup stand outside it.

mod build;
mod difference;
mod error;

pub(super) use difference::Pivot;
pub use difference::{COLD_AIR_K, COLD_GROUND_K, HIGH_LIFT_K, SheetDoubts};
pub use error::MapError;

use super::limits::{LEAST_DIFFERENCE_K, Limits};

/// Output range at a condition.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Range {
    /// Greatest output, kW.
    pub greatest_kw: f64,
    /// Least output, kW.
    pub least_kw: f64,
}

/// Input and speed at an output.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Input {
    /// Electricity for each unit of heat: the inverse COP.
    pub electric_per_heat: f64,
    /// Relative speed as a share of the greatest there.
    pub speed_share: f64,
}

/// Surfaces of one machine.
#[derive(Debug, Clone)]
pub struct Map {
    source: Axis,
    flow: Axis,
    fraction: Axis,
    ranges: Vec<Range>,
    inputs: Vec<Input>,
}

/// Evenly spaced nodes, two at least.
#[derive(Debug, Clone, Copy)]
struct Axis {
    low: f64,
    step: f64,
    count: usize,
}

impl Axis {
    fn node(&self, i: usize) -> f64 {
        self.low + self.step * i as f64
    }

    /// The node below and the share of the way to the next; the ends hold beyond them.
    fn place(&self, at: f64) -> (usize, f64) {
        let last = self.count.saturating_sub(2) as u32;
        let steps = (at - self.low) / self.step;
        // Below the axis and NaN become 0.
        let below = (steps as u32).min(last);
        (below as usize, (steps - f64::from(below)).clamp(0.0, 1.0))
    }
}

/// A place in a map: the four nodes about a condition and their weights. An hour asks several outputs at one place.
pub(super) struct Spot<'a> {
    fraction: &'a Axis,
    /// Inputs over the fraction at the cooler and at the warmer source, each with the cooler and the hotter flow one after the other.
    rows: [&'a [Input]; 2],
    /// Weights of the same four.
    weights: [[f64; 2]; 2],
    /// Greatest and least output, kW.
    pub range: Range,
}

impl Spot<'_> {
    /// Input at a fraction of the way from least to greatest output.
    pub fn input(&self, fraction: f64) -> Input {
        let n = self.fraction.count;
        let (k, x) = self.fraction.place(fraction);
        let mut input = Input {
            electric_per_heat: 0.0,
            speed_share: 0.0,
        };
        for (row, weights) in self.rows.iter().zip(self.weights) {
            for (from, w) in [k, k + n].into_iter().zip(weights) {
                // Always there: a place is within its axis.
                let Some([low, high]) = row.get(from..from + 2) else {
                    continue;
                };
                let (below, above) = (w * (1.0 - x), w * x);
                input.electric_per_heat +=
                    below * low.electric_per_heat + above * high.electric_per_heat;
                input.speed_share += below * low.speed_share + above * high.speed_share;
            }
        }
        input
    }
}

impl Map {
    /// A condition's place in the map, from which range and inputs are read.
    pub(super) fn spot(&self, source_c: f64, flow_c: f64) -> Spot<'_> {
        let (at, weights) = self.place(source_c, flow_c);
        let n = self.fraction.count;
        Spot {
            fraction: &self.fraction,
            rows: at.map(|node| &self.inputs[node * n..(node + 2) * n]),
            weights,
            range: self.range_at(at, weights),
        }
    }

    /// The node with the cooler flow at the cooler and at the warmer source, and the weights of these and of their hotter
    /// neighbours.
    fn place(&self, source_c: f64, flow_c: f64) -> ([usize; 2], [[f64; 2]; 2]) {
        let (i, s) = self.source.place(source_c);
        let (j, f) = self.flow.place(flow_c);
        let at = i * self.flow.count + j;
        let weights = [1.0 - s, s].map(|w| [w * (1.0 - f), w * f]);
        ([at, at + self.flow.count], weights)
    }

    fn range_at(&self, at: [usize; 2], weights: [[f64; 2]; 2]) -> Range {
        let mut range = Range {
            greatest_kw: 0.0,
            least_kw: 0.0,
        };
        for (node, [w, v]) in at.into_iter().zip(weights) {
            if let Some([cooler, hotter]) = self.ranges.get(node..node + 2) {
                range.greatest_kw += w * cooler.greatest_kw + v * hotter.greatest_kw;
                range.least_kw += w * cooler.least_kw + v * hotter.least_kw;
            }
        }
        range
    }

    /// Greatest and least output at a condition, kW.
    pub fn range(&self, source_c: f64, flow_c: f64) -> Range {
        let (at, weights) = self.place(source_c, flow_c);
        self.range_at(at, weights)
    }

    /// Input at a fraction of the way from least to greatest output.
    pub fn input(&self, source_c: f64, flow_c: f64, fraction: f64) -> Input {
        self.spot(source_c, flow_c).input(fraction)
    }

    /// Greatest output anywhere, kW.
    pub(super) fn greatest_output_kw(&self) -> f64 {
        let outputs = self.ranges.iter().map(|range| range.greatest_kw);
        outputs.fold(0.0, f64::max)
    }

    /// Whether the frost-free COP falls with flow and rises with source temperature at every fraction, over the limits.
    pub fn is_monotone(&self, limits: &Limits) -> bool {
        let n = self.fraction.count;
        let value = |i: usize, j: usize, k: usize| {
            self.inputs[(i * self.flow.count + j) * n + k].electric_per_heat
        };
        let inside = |i: usize, j: usize| {
            let (source_c, flow_c) = (self.source.node(i), self.flow.node(j));
            flow_c >= source_c + LEAST_DIFFERENCE_K && flow_c <= limits.highest_flow_at(source_c)
        };
        (0..self.source.count).all(|i| {
            (0..self.flow.count).filter(|&j| inside(i, j)).all(|j| {
                (0..n).all(|k| {
                    let here = value(i, j, k);
                    let hotter =
                        j + 1 >= self.flow.count || !inside(i, j + 1) || value(i, j + 1, k) > here;
                    let warmer = i + 1 >= self.source.count
                        || !inside(i + 1, j)
                        || value(i + 1, j, k) < here;
                    here.is_finite() && here > 0.0 && hotter && warmer
                })
            })
        })
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn an_axis_holds_its_ends() {
        let axis = Axis {
            low: -20.0,
            step: 1.0,
            count: 56,
        };
        assert_eq!(axis.place(-30.0), (0, 0.0));
        assert_eq!(axis.place(40.0), (54, 1.0));
        assert_eq!(axis.place(-19.5), (0, 0.5));
        assert_eq!(axis.place(f64::NAN).0, 0);
    }
}
