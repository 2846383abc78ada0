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
use crate::extremes::{greater, lesser};

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

/// Steps from least to greatest output.
const FRACTION_STEPS: usize = 24;

/// The machine at one source and one flow temperature.
#[derive(Debug, Clone, PartialEq)]
struct Node {
    range: Range,
    /// Inputs from least to greatest output, evenly spaced.
    inputs: [Input; FRACTION_STEPS + 1],
}

/// Surfaces of one machine.
#[derive(Debug, Clone)]
pub struct Map {
    source: Axis,
    flow: Axis,
    /// By source temperature, and for each of these by flow temperature.
    nodes: Vec<Node>,
}

/// Evenly spaced nodes, two at least.
#[derive(Debug, Clone, Copy)]
struct Axis {
    low: f64,
    step: f64,
    count: usize,
    /// Nodes a unit: the inverse of the step.
    per_step: f64,
    /// The last node that has another after it.
    last: f64,
}

impl Axis {
    fn new(low: f64, step: f64, count: usize) -> Self {
        Self {
            low,
            step,
            count,
            per_step: 1.0 / step,
            last: count.saturating_sub(2) as f64,
        }
    }

    fn node(&self, i: usize) -> f64 {
        self.low + self.step * i as f64
    }

    /// The node below and the share of the way to the next; the ends hold beyond them, and NaN is at the low one.
    #[inline]
    fn place(&self, at: f64) -> (usize, f64) {
        let (below, share) = cell((at - self.low) * self.per_step, self.last);
        (below as usize, share)
    }
}

/// The cell, from 0 to `last`, that a number of steps falls into, and the share of it.
#[inline]
fn cell(steps: f64, last: f64) -> (u32, f64) {
    let below = lesser(last, steps) as u32;
    let share = greater(steps - f64::from(below), 0.0);
    (below, lesser(share, 1.0))
}

/// A place in a map: the four nodes about a condition and their weights. An hour asks several outputs at one place.
pub(super) struct Spot<'a> {
    /// Cooler source with cooler and hotter flow, warmer source with the same.
    nodes: [&'a Node; 4],
    weights: [f64; 4],
    /// Greatest and least output, kW.
    pub range: Range,
    /// Inverse of the step in flow temperature, 1/K.
    per_flow_k: f64,
}

impl Spot<'_> {
    /// Input at a fraction of the way from least to greatest output.
    #[inline]
    pub fn input(&self, fraction: f64) -> Input {
        let (k, x) = cell(
            fraction * FRACTION_STEPS as f64,
            (FRACTION_STEPS - 1) as f64,
        );
        let k = (k as usize).min(FRACTION_STEPS - 1);
        let (mut electric_per_heat, mut speed_share) = (0.0, 0.0);
        for (node, w) in self.nodes.iter().zip(self.weights) {
            let (low, high) = (node.inputs[k], node.inputs[k + 1]);
            let between = |low: f64, high: f64| w * (low + x * (high - low));
            electric_per_heat += between(low.electric_per_heat, high.electric_per_heat);
            speed_share += between(low.speed_share, high.speed_share);
        }
        Input {
            electric_per_heat,
            speed_share,
        }
    }

    /// How the least output changes with flow temperature at this source, kW/K.
    #[inline]
    pub fn least_kw_per_k(&self) -> f64 {
        let [a, b, c, d] = self.nodes.map(|node| node.range.least_kw);
        let [wa, wb, wc, wd] = self.weights;
        ((wa + wb) * (b - a) + (wc + wd) * (d - c)) * self.per_flow_k
    }
}

impl Map {
    /// A condition's place in the map, from which range and inputs are read.
    #[inline]
    pub(super) fn spot(&self, source_c: f64, flow_c: f64) -> Spot<'_> {
        let (i, s) = self.source.place(source_c);
        let (j, f) = self.flow.place(flow_c);
        let at = i * self.flow.count + j;
        let next = at + self.flow.count;
        let nodes = [at, at + 1, next, next + 1].map(|node| &self.nodes[node]);
        let weights = [(1.0 - s) * (1.0 - f), (1.0 - s) * f, s * (1.0 - f), s * f];
        let (mut greatest_kw, mut least_kw) = (0.0, 0.0);
        for (node, w) in nodes.into_iter().zip(weights) {
            greatest_kw += w * node.range.greatest_kw;
            least_kw += w * node.range.least_kw;
        }
        Spot {
            nodes,
            weights,
            range: Range {
                greatest_kw,
                least_kw,
            },
            per_flow_k: self.flow.per_step,
        }
    }

    /// Greatest and least output at a condition, kW.
    pub fn range(&self, source_c: f64, flow_c: f64) -> Range {
        self.spot(source_c, flow_c).range
    }

    /// Input at a fraction of the way from least to greatest output.
    pub fn input(&self, source_c: f64, flow_c: f64, fraction: f64) -> Input {
        self.spot(source_c, flow_c).input(fraction)
    }

    /// Greatest output anywhere, kW.
    pub(super) fn greatest_output_kw(&self) -> f64 {
        let outputs = self.nodes.iter().map(|node| node.range.greatest_kw);
        outputs.fold(0.0, f64::max)
    }

    /// Whether the frost-free COP falls with flow and rises with source temperature at every fraction, over the limits.
    pub fn is_monotone(&self, limits: &Limits) -> bool {
        let value = |i: usize, j: usize, k: usize| {
            self.nodes[i * self.flow.count + j].inputs[k].electric_per_heat
        };
        let inside = |i: usize, j: usize| {
            let (source_c, flow_c) = (self.source.node(i), self.flow.node(j));
            flow_c >= source_c + LEAST_DIFFERENCE_K && flow_c <= limits.highest_flow_at(source_c)
        };
        (0..self.source.count).all(|i| {
            (0..self.flow.count).filter(|&j| inside(i, j)).all(|j| {
                (0..=FRACTION_STEPS).all(|k| {
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
        let axis = Axis::new(-20.0, 1.0, 56);
        assert_eq!(axis.place(-30.0), (0, 0.0));
        assert_eq!(axis.place(40.0), (54, 1.0));
        assert_eq!(axis.place(-19.5), (0, 0.5));
        assert_eq!(axis.place(f64::NAN).0, 0);
    }
}
