//! Making a map: solve on coarse nodes, refine to the fine table.

use rayon::prelude::*;

use super::{Axis, FRACTION_STEPS, Input, Map, Node, Range};
use crate::heatpump::compressor::Speeds;
use crate::heatpump::correction::FittedMachine;
use crate::heatpump::limits::{LEAST_DIFFERENCE_K, LOWEST_FLOW_C, Limits};
use crate::heatpump::machine::SolveError;

/// Fine step in flow temperature, K, at most.
const FLOW_STEP_K: f64 = 1.5;
/// Coarse Chebyshev nodes in flow temperature and in fraction.
const FLOW_NODES: usize = 11;
const FRACTION_NODES: usize = 9;
/// How far below the least difference of flow and source the map goes, so that no look-up meets an edge, K.
const EDGE_K: f64 = 4.0;

impl Map {
    /// Solves the machine over its limits.
    ///
    /// # Errors
    /// [`SolveError`] where the machine cannot run inside its limits.
    pub fn build(machine: &FittedMachine, limits: &Limits) -> Result<Self, SolveError> {
        let (coldest, warmest) = (
            limits.lowest_source_c.floor(),
            limits.highest_source_c.ceil(),
        );
        let source = Axis::new(coldest, 1.0, (warmest - coldest).max(1.0) as usize + 1);
        let span = (limits.highest_flow_anywhere() - LOWEST_FLOW_C).max(1.0);
        let steps = (span / FLOW_STEP_K).ceil();
        let flow = Axis::new(LOWEST_FLOW_C, span / steps, steps as usize + 1);
        // A machine of one speed has one output, whatever the fraction.
        let variable = machine.machine.speeds != Speeds::Fixed;
        let fractions = chebyshev(0.0, 1.0, if variable { FRACTION_NODES } else { 1 });
        let fraction_weights: Vec<_> = (0..=FRACTION_STEPS)
            .map(|k| weights(&fractions, k as f64 / FRACTION_STEPS as f64))
            .collect();
        // Rows are solved side by side; they and their first refusal stand in order all the same.
        let rows: Vec<Result<Vec<Node>, SolveError>> = (0..source.count)
            .into_par_iter()
            .map(|i| {
                let across = (&fractions[..], &fraction_weights[..]);
                row(machine, limits, source.node(i), &flow, across)
            })
            .collect();
        let mut nodes = Vec::with_capacity(source.count * flow.count);
        for row in rows {
            nodes.extend(row?);
        }
        Ok(Self {
            source,
            flow,
            nodes,
        })
    }
}

/// One source temperature: solve at coarse fractions, refine by the weights of the fine ones.
fn row(
    machine: &FittedMachine,
    limits: &Limits,
    source_c: f64,
    flow: &Axis,
    (fractions, fraction_weights): (&[f64], &[Vec<f64>]),
) -> Result<Vec<Node>, SolveError> {
    let (low, high) = flows_of_row(limits, source_c, flow);
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
    let node = |j: usize| {
        let along = weights(&flows, flow.node(j).clamp(low, high));
        let dot = |values: &[f64]| along.iter().zip(values).map(|(w, v)| w * v).sum();
        Node {
            range: Range {
                greatest_kw: dot(&greatest),
                least_kw: dot(&least),
            },
            inputs: std::array::from_fn(|k| {
                let mut input = Input {
                    electric_per_heat: 0.0,
                    speed_share: 0.0,
                };
                for (row, w) in inputs.chunks_exact(fractions.len()).zip(&along) {
                    for ((electric, speed), v) in row.iter().zip(&fraction_weights[k]) {
                        input.electric_per_heat += w * v * electric;
                        input.speed_share += w * v * speed;
                    }
                }
                input
            }),
        }
    };
    Ok((0..flow.count).map(node).collect())
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
}
