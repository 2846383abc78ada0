//! The machine map: the fitted machine as smooth surfaces that are only looked up.
//!
//! Greatest output, least output, and electricity per heat at fractions of the way between them, over source and flow
//! temperature. Exact solutions on coarse Chebyshev nodes in flow and fraction are refined to a fine table; a look-up is
//! multilinear, so it rises and falls as its nodes do. Source nodes are whole degrees, where the greatest speed has its
//! knots. Nothing with a kink is in the map: limits, frost, cycling and backup stand outside it.

use super::correction::FittedMachine;
use super::limits::{LEAST_DIFFERENCE_K, LOWEST_FLOW_C, Limits};
use super::machine::SolveError;

/// Fine step in flow temperature, K, at most.
const FLOW_STEP_K: f64 = 1.5;
/// Fine steps from least to greatest output.
const FRACTION_STEPS: usize = 24;
/// Coarse Chebyshev nodes in flow temperature and in fraction.
const FLOW_NODES: usize = 11;
const FRACTION_NODES: usize = 9;
/// How far below the least difference of flow and source the map goes, so that no look-up meets an edge, K.
const EDGE_K: f64 = 4.0;

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

impl Map {
    /// Solves the machine over its limits.
    ///
    /// # Errors
    /// [`SolveError`] where the machine cannot run inside its limits.
    pub fn build(machine: &FittedMachine, limits: &Limits) -> Result<Self, SolveError> {
        let source = Axis {
            low: limits.lowest_source_c.floor(),
            step: 1.0,
            count: (limits.highest_source_c.ceil() - limits.lowest_source_c.floor()) as usize + 1,
        };
        let span = (limits.highest_flow_anywhere() - LOWEST_FLOW_C).max(1.0);
        let steps = (span / FLOW_STEP_K).ceil();
        let flow = Axis {
            low: LOWEST_FLOW_C,
            step: span / steps,
            count: steps as usize + 1,
        };
        let variable = machine.machine.speeds != super::compressor::Speeds::Fixed;
        let fraction = Axis {
            low: 0.0,
            step: 1.0 / FRACTION_STEPS as f64,
            count: if variable { FRACTION_STEPS + 1 } else { 1 },
        };
        let mut map = Self {
            source,
            flow,
            fraction,
            ranges: Vec::with_capacity(source.count * flow.count),
            inputs: Vec::with_capacity(source.count * flow.count * fraction.count),
        };
        let coarse_fractions = chebyshev(0.0, 1.0, if variable { FRACTION_NODES } else { 1 });
        let fraction_weights: Vec<_> = (0..fraction.count)
            .map(|i| {
                weights(
                    &coarse_fractions,
                    if variable { fraction.node(i) } else { 1.0 },
                )
            })
            .collect();
        for i in 0..source.count {
            map.add_row(
                machine,
                limits,
                source.node(i),
                &coarse_fractions,
                &fraction_weights,
            )?;
        }
        Ok(map)
    }

    /// One source temperature: solve coarse, refine.
    fn add_row(
        &mut self,
        machine: &FittedMachine,
        limits: &Limits,
        source_c: f64,
        fractions: &[f64],
        fraction_weights: &[Vec<f64>],
    ) -> Result<(), SolveError> {
        let (low, high) = flows_of_row(limits, source_c, &self.flow);
        let flows = chebyshev(low, high, FLOW_NODES);
        let mut greatest = Vec::with_capacity(flows.len());
        let mut least = Vec::with_capacity(flows.len());
        let mut inputs = Vec::with_capacity(flows.len() * fractions.len());
        for &flow_c in &flows {
            let most = machine.greatest_kw(source_c, flow_c)?;
            let few = machine.least_kw(source_c, flow_c)?;
            greatest.push(most);
            least.push(few);
            let fastest = machine.machine.speeds.greatest(source_c, flow_c);
            for fraction in fractions {
                let heat_kw = few + fraction * (most - few);
                let operation = machine.at_output(source_c, flow_c, heat_kw)?;
                inputs.push((
                    operation.electric_kw() / operation.heat_kw,
                    operation.speed / fastest,
                ));
            }
        }
        for j in 0..self.flow.count {
            let along = weights(&flows, self.flow.node(j).clamp(low, high));
            let dot = |values: &[f64]| along.iter().zip(values).map(|(w, v)| w * v).sum();
            self.ranges.push(Range {
                greatest_kw: dot(&greatest),
                least_kw: dot(&least),
            });
            for across in fraction_weights {
                let (mut electric, mut speed) = (0.0, 0.0);
                for (row, w) in inputs.chunks_exact(fractions.len()).zip(&along) {
                    for ((e, s), v) in row.iter().zip(across) {
                        electric += w * v * e;
                        speed += w * v * s;
                    }
                }
                self.inputs.push(Input {
                    electric_per_heat: electric,
                    speed_share: speed,
                });
            }
        }
        Ok(())
    }

    /// Greatest and least output at a condition, kW.
    pub fn range(&self, source_c: f64, flow_c: f64) -> Range {
        let (i, s) = self.source.place(source_c);
        let (j, f) = self.flow.place(flow_c);
        let (di, dj) = self.strides();
        let at = i * self.flow.count + j;
        let corner = |k: usize| self.ranges[at + k];
        let (a, b, c, d) = (corner(0), corner(dj), corner(di), corner(di + dj));
        let mix = |a: f64, b: f64, c: f64, d: f64| {
            let (cold, warm) = (a + f * (b - a), c + f * (d - c));
            cold + s * (warm - cold)
        };
        Range {
            greatest_kw: mix(a.greatest_kw, b.greatest_kw, c.greatest_kw, d.greatest_kw),
            least_kw: mix(a.least_kw, b.least_kw, c.least_kw, d.least_kw),
        }
    }

    /// Input at a fraction of the way from least to greatest output.
    pub fn input(&self, source_c: f64, flow_c: f64, fraction: f64) -> Input {
        let (i, s) = self.source.place(source_c);
        let (j, f) = self.flow.place(flow_c);
        let (k, x) = self.fraction.place(fraction);
        let (di, dj) = self.strides();
        let dk = usize::from(self.fraction.count > 1);
        let n = self.fraction.count;
        let mut electric_per_heat = 0.0;
        let mut speed_share = 0.0;
        for (step_i, ws) in [(0, 1.0 - s), (di, s)] {
            for (step_j, wf) in [(0, 1.0 - f), (dj, f)] {
                let at = (i * self.flow.count + j + step_i + step_j) * n + k;
                let (low, high) = (self.inputs[at], self.inputs[at + dk]);
                let w = ws * wf;
                electric_per_heat += w
                    * (low.electric_per_heat
                        + x * (high.electric_per_heat - low.electric_per_heat));
                speed_share += w * (low.speed_share + x * (high.speed_share - low.speed_share));
            }
        }
        Input {
            electric_per_heat,
            speed_share,
        }
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

/// Flow temperatures between which a row is solved: what its own and its neighbours' cells can be asked for. Outside it the
/// nodes hold its edge.
fn flows_of_row(limits: &Limits, source_c: f64, flow: &Axis) -> (f64, f64) {
    let low = (source_c + LEAST_DIFFERENCE_K - EDGE_K).max(flow.low);
    let wanted = [-1.0, 0.0, 1.0]
        .map(|step| limits.highest_flow_at(source_c + step))
        .into_iter()
        .fold(low, f64::max);
    // Up to the node at or above the highest flow, which every cell below it uses.
    let high = flow.low + ((wanted - flow.low) / flow.step - 1e-9).ceil() * flow.step;
    (low, high.max(low + flow.step))
}

/// Chebyshev points of the second kind from low to high; the middle for one, the top for a machine of one fraction.
fn chebyshev(low: f64, high: f64, count: usize) -> Vec<f64> {
    if count < 2 {
        return vec![high];
    }
    (0..count)
        .map(|i| {
            let angle = std::f64::consts::PI * i as f64 / (count - 1) as f64;
            low + (high - low) * 0.5 * (1.0 - angle.cos())
        })
        .collect()
}

/// Weights of the polynomial through values at Chebyshev points, by the barycentric formula (Berrut and Trefethen 2004).
fn weights(nodes: &[f64], at: f64) -> Vec<f64> {
    let last = nodes.len() - 1;
    if let Some(hit) = nodes.iter().position(|node| *node == at) {
        let mut unit = vec![0.0; nodes.len()];
        unit[hit] = 1.0;
        return unit;
    }
    let mut parts: Vec<f64> = nodes
        .iter()
        .enumerate()
        .map(|(i, node)| {
            let sign = if i % 2 == 0 { 1.0 } else { -1.0 };
            let end = if i == 0 || i == last { 0.5 } else { 1.0 };
            sign * end / (at - node)
        })
        .collect();
    let sum: f64 = parts.iter().sum();
    for part in &mut parts {
        *part /= sum;
    }
    parts
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn barycentric_weights_reproduce_a_polynomial() {
        let nodes = chebyshev(20.0, 70.0, FLOW_NODES);
        let cubic = |x: f64| 1.0 + 0.1 * x - 0.002 * x * x + 1e-5 * x * x * x;
        for at in [20.0, 33.3, 47.0, 70.0] {
            let found: f64 = weights(&nodes, at)
                .iter()
                .zip(&nodes)
                .map(|(w, x)| w * cubic(*x))
                .sum();
            assert!((found - cubic(at)).abs() < 1e-11, "{at}");
        }
    }

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
