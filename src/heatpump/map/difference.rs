//! Difference maps: how a machine's map moves with each doubt about its sheet.
//!
//! A doubted machine is the map plus, for each doubt, so many times a difference map. The differences have a closed form in the map's own
//! nodes, so they are worked out while they are added: three more tables read from memory would cost more than they say. Nothing is
//! fitted or solved again, and the hours find a map like any other.

use super::{FRACTION_STEPS, Input, Map, Node, Range};
use crate::heatpump::limits::LEAST_DIFFERENCE_K;

/// How far a sheet may be off, each as a multiple of what it says; 1 where it is right. None of them moves the machine at its rated
/// condition and greatest output: the level is another doubt ([`HeatPump::with_field_factor`](crate::heatpump::HeatPump)).
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct SheetDoubts {
    /// Electricity for a unit of heat at a lift (flow less source) [`HIGH_LIFT_K`] above the rated one; in proportion at every other lift,
    /// so that below the rated lift it moves the other way.
    pub electricity_at_high_lift: f64,
    /// Electricity for a unit of heat at the least output; less in proportion up to the greatest, where it is what the sheet says.
    pub electricity_at_part_load: f64,
    /// Greatest output [`COLD_AIR_K`] or [`COLD_GROUND_K`] below the rated source temperature; in proportion at other temperatures below
    /// the rated one. A given output takes the electricity it took before.
    pub output_in_cold: f64,
}

/// Lift above the rated one at which the doubt about lift is stated, K: from A7/W35 it is nearly A-7/W55.
pub const HIGH_LIFT_K: f64 = 30.0;
/// How far below the rated source temperature the doubt about output is stated, K: A-7 below A7.
pub const COLD_AIR_K: f64 = 14.0;
/// The same for brine and water: B-5 below B0.
pub const COLD_GROUND_K: f64 = 5.0;

impl Default for SheetDoubts {
    fn default() -> Self {
        Self {
            electricity_at_high_lift: 1.0,
            electricity_at_part_load: 1.0,
            output_in_cold: 1.0,
        }
    }
}

/// Where the doubts of a machine turn: its rated source and flow temperature, °C, and how far below the source its cold is, K.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(in crate::heatpump) struct Pivot {
    pub source_c: f64,
    pub flow_c: f64,
    pub cold_k: f64,
}

impl Pivot {
    /// How much of the doubt about lift is met at a condition: 1 at [`HIGH_LIFT_K`] above the rated lift, none at it.
    pub fn of_lift(&self, source_c: f64, flow_c: f64) -> f64 {
        // As everywhere, a warmer source is as one at the least difference.
        let lift_k = (flow_c - source_c).max(LEAST_DIFFERENCE_K);
        (lift_k - (self.flow_c - self.source_c)) / HIGH_LIFT_K
    }

    /// How much of the doubt about output is met at a source temperature: none from the rated one on.
    pub fn of_cold(&self, source_c: f64) -> f64 {
        ((self.source_c - source_c) / self.cold_k).max(0.0)
    }
}

impl Map {
    /// The map plus so many times each difference map.
    pub(in crate::heatpump) fn doubted(&self, doubts: &SheetDoubts, pivot: &Pivot) -> Self {
        let [lift, part, cold] = [
            doubts.electricity_at_high_lift - 1.0,
            doubts.electricity_at_part_load - 1.0,
            doubts.output_in_cold - 1.0,
        ];
        let nodes = self.nodes.iter().enumerate().map(|(place, node)| {
            let source_c = self.source.node(place / self.flow.count);
            let flow_c = self.flow.node(place % self.flow.count);
            let times = 1.0 + lift * pivot.of_lift(source_c, flow_c) + part;
            let grows = cold * pivot.of_cold(source_c);
            let width = node.range.greatest_kw - node.range.least_kw;
            // The same fraction is now another output: so much further along the fraction of before lies what it took.
            let further = if width > 0.0 {
                grows * node.range.greatest_kw / width
            } else {
                0.0
            };
            let input = |k: usize| {
                let fraction = k as f64 / FRACTION_STEPS as f64;
                let mut input = node.inputs[k];
                input.electric_per_heat *= times - part * fraction;
                if further != 0.0 {
                    let slope = slope(&node.inputs, k);
                    let step = fraction * further;
                    input.electric_per_heat += step * slope.electric_per_heat;
                    input.speed_share += step * slope.speed_share;
                }
                input
            };
            Node {
                range: with_greatest_times(node.range, 1.0 + grows),
                inputs: std::array::from_fn(input),
            }
        });
        Self {
            nodes: nodes.collect(),
            ..*self
        }
    }
}

/// A range with its greatest output multiplied; a machine of one speed has no other output.
fn with_greatest_times(range: Range, times: f64) -> Range {
    let greatest_kw = range.greatest_kw * times;
    Range {
        greatest_kw,
        least_kw: if range.least_kw < range.greatest_kw {
            range.least_kw.min(greatest_kw)
        } else {
            greatest_kw
        },
    }
}

/// Slope of a row over its fraction: straight through both neighbours, through the one there is at an end.
fn slope(row: &[Input], k: usize) -> Input {
    let (below, above) = (k.saturating_sub(1), (k + 1).min(row.len() - 1));
    let span = (above - below).max(1) as f64 / FRACTION_STEPS as f64;
    Input {
        electric_per_heat: (row[above].electric_per_heat - row[below].electric_per_heat) / span,
        speed_share: (row[above].speed_share - row[below].speed_share) / span,
    }
}
