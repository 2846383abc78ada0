//! The machine map: the fitted machine as smooth surfaces that are only looked up.
//!
//! Greatest output, least output, and electricity per heat at fractions of the way between them, over source and flow
//! temperature. Exact solutions on coarse Chebyshev nodes in flow and fraction are refined to a fine table; a look-up is
//! multilinear, so it rises and falls as its nodes do. Source nodes are whole degrees, where the greatest speed has its
//! knots. A look-up of range and input takes about 375 instructions (callgrind on x86-64: 133 and 241; benches/machine.rs).
//! Nothing with a kink is in the map: limits, frost, cycling and backup stand outside it.

mod build;
mod error;

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

/// Evenly spaced nodes.
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
        if self.count < 2 {
            return (0, 0.0);
        }
        let steps = ((at - self.low) / self.step).clamp(0.0, (self.count - 1) as f64);
        // The clamp makes the cast exact and NaN becomes 0.
        let below = (steps as usize).min(self.count - 2);
        (below, steps - below as f64)
    }
}

/// A place in a map: the four nodes about a condition and their weights. An hour asks several outputs at one place.
pub(super) struct Spot<'a> {
    map: &'a Map,
    nodes: [usize; 4],
    weights: [f64; 4],
}

impl Spot<'_> {
    /// Greatest and least output, kW.
    pub fn range(&self) -> Range {
        let mut range = Range {
            greatest_kw: 0.0,
            least_kw: 0.0,
        };
        for (&node, w) in self.nodes.iter().zip(self.weights) {
            let at = self.map.ranges[node];
            range.greatest_kw += w * at.greatest_kw;
            range.least_kw += w * at.least_kw;
        }
        range
    }

    /// Input at a fraction of the way from least to greatest output.
    pub fn input(&self, fraction: f64) -> Input {
        let axis = &self.map.fraction;
        let (k, x) = axis.place(fraction);
        let next = usize::from(axis.count > 1);
        let mut input = Input {
            electric_per_heat: 0.0,
            speed_share: 0.0,
        };
        for (&node, w) in self.nodes.iter().zip(self.weights) {
            let at = node * axis.count + k;
            let (low, high) = (self.map.inputs[at], self.map.inputs[at + next]);
            let (below, above) = (w * (1.0 - x), w * x);
            input.electric_per_heat +=
                below * low.electric_per_heat + above * high.electric_per_heat;
            input.speed_share += below * low.speed_share + above * high.speed_share;
        }
        input
    }
}

impl Map {
    /// A condition's place in the map, from which range and inputs are read.
    pub(super) fn spot(&self, source_c: f64, flow_c: f64) -> Spot<'_> {
        let (i, s) = self.source.place(source_c);
        let (j, f) = self.flow.place(flow_c);
        let (di, dj) = self.strides();
        let at = i * self.flow.count + j;
        Spot {
            map: self,
            nodes: [at, at + dj, at + di, at + di + dj],
            weights: [(1.0 - s) * (1.0 - f), (1.0 - s) * f, s * (1.0 - f), s * f],
        }
    }

    /// Greatest and least output at a condition, kW.
    pub fn range(&self, source_c: f64, flow_c: f64) -> Range {
        self.spot(source_c, flow_c).range()
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

    /// Steps to the next source and the next flow node.
    fn strides(&self) -> (usize, usize) {
        (
            if self.source.count > 1 {
                self.flow.count
            } else {
                0
            },
            usize::from(self.flow.count > 1),
        )
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
        let single = Axis {
            low: 1.0,
            step: 1.0,
            count: 1,
        };
        assert_eq!(single.place(0.3), (0, 0.0));
    }
}
