//! Areas stacked on each other over one axis.

use super::frame::Frame;
use super::geometry::Point;
use super::palette::{Colour, Hatch};
use super::scene::Scene;

/// One area: its upper edge in values, from left to right, and its look.
pub(crate) struct Layer {
    pub upper: Vec<(f64, f64)>,
    pub colour: Colour,
    pub hatch: Hatch,
}

/// Thinner than this, in points, a layer is not there.
const NOTHING: f64 = 0.02;

/// Draws the layers from the axis upwards; all upper edges have the same places along x. Where a layer has no height it
/// is left out, so that no line of nothing lies on the one below.
pub(crate) fn draw(scene: &mut Scene, frame: &Frame, layers: &[Layer]) {
    let Some(first) = layers.first() else { return };
    let mut base: Vec<Point> = first.upper.iter().map(|p| frame.at(p.0, 0.0)).collect();
    for layer in layers {
        let upper: Vec<Point> = layer.upper.iter().map(|p| frame.at(p.0, p.1)).collect();
        for (start, end) in filled(&base, &upper) {
            let lower = base[start..end].iter().rev();
            let shape: Vec<Point> = upper[start..end].iter().chain(lower).copied().collect();
            scene.hatched(&shape, layer.colour, layer.hatch);
        }
        base = upper;
    }
}

/// Stretches in which there is something between the edges, each with the point at either side at which it begins and
/// ends, unless the step there is upright.
fn filled(base: &[Point], upper: &[Point]) -> Vec<(usize, usize)> {
    let n = base.len().min(upper.len());
    let thick = |i: usize| (base[i].1 - upper[i].1).abs() > NOTHING;
    let mut out = Vec::new();
    let mut i = 0;
    while i < n {
        if !thick(i) {
            i += 1;
            continue;
        }
        let end = (i..n).find(|&k| !thick(k)).unwrap_or(n);
        let slopes = |a: usize, b: usize| (upper[a].0 - upper[b].0).abs() > NOTHING;
        let from = if i > 0 && slopes(i - 1, i) { i - 1 } else { i };
        let to = if end < n && slopes(end, end - 1) {
            end + 1
        } else {
            end
        };
        out.push((from, to));
        i = end;
    }
    out
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn stretches_end_where_the_layer_does() {
        // Sloped: the neighbour at height nothing belongs to the shape. Stepped: it does not.
        let base: Vec<Point> = (0..5).map(|i| (f64::from(i), 10.0)).collect();
        let sloped = [
            (0.0, 10.0),
            (1.0, 8.0),
            (2.0, 8.0),
            (3.0, 10.0),
            (4.0, 10.0),
        ];
        assert_eq!(filled(&base, &sloped), [(0, 4)]);
        let base = [(0.0, 10.0), (1.0, 10.0), (1.0, 10.0), (2.0, 10.0)];
        let stepped = [(0.0, 7.0), (1.0, 7.0), (1.0, 10.0), (2.0, 10.0)];
        assert_eq!(filled(&base, &stepped), [(0, 2)]);
    }
}
