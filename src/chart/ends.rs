//! Names written at the right ends of lines, moved apart where the lines end close together.

use super::font::{self, Weight};
use super::frame::Frame;
use super::palette::{Colour, INK};
use super::scene::{Anchor, SMALL, Scene, Type};

/// Distance of two names from base line to base line.
const STEP: f64 = 17.0;

/// The end of one line.
pub(crate) struct End {
    /// Where the line ends, on the canvas.
    pub at: (f64, f64),
    pub text: String,
    pub colour: Colour,
    pub bold: bool,
}

/// Writes the names right of the frame in a column of `room`, with a thin line to each end that had to move.
pub(crate) fn draw(scene: &mut Scene, frame: &Frame, ends: &[End], room: f64) {
    let mut order: Vec<usize> = (0..ends.len()).collect();
    order.sort_by(|&a, &b| ends[a].at.1.total_cmp(&ends[b].at.1));
    let bases = spread(
        &order.iter().map(|&i| ends[i].at.1).collect::<Vec<_>>(),
        frame.area.top,
        frame.area.bottom,
    );
    let left = frame.area.right + 16.0;
    for (&i, base) in order.iter().zip(bases) {
        let end = &ends[i];
        let weight = if end.bold {
            Weight::Bold
        } else {
            Weight::Regular
        };
        let set = Type::new(SMALL, weight, INK);
        scene.line(
            &[(end.at.0 + 4.0, end.at.1), (left - 3.0, base)],
            end.colour,
            1.0,
        );
        let text = font::fit(&end.text, set.size, set.weight, room - 18.0);
        scene.text(&text, (left, base + 4.6), Anchor::Start, set);
    }
}

/// Heights at least a step apart, as close to the wanted ones as they can be, inside the room if it is large enough.
fn spread(wanted: &[f64], top: f64, bottom: f64) -> Vec<f64> {
    let mut out = wanted.to_vec();
    for i in 1..out.len() {
        out[i] = out[i].max(out[i - 1] + STEP);
    }
    let mut floor = bottom.max(top + STEP * out.len().saturating_sub(1) as f64);
    for y in out.iter_mut().rev() {
        *y = y.min(floor);
        floor = *y - STEP;
    }
    out
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn spread_keeps_a_step_and_the_room() {
        let out = spread(&[100.0, 101.0, 102.0, 199.0], 0.0, 200.0);
        assert!(
            out.windows(2).all(|p| p[1] - p[0] >= STEP - 1e-9),
            "{out:?}"
        );
        assert!(out[3] <= 200.0 && out[0] >= 0.0);
        assert_eq!(spread(&[10.0, 90.0], 0.0, 200.0), [10.0, 90.0]);
    }
}
