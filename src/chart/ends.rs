//! Names written at the right ends of lines, moved apart where the lines end close together.

use super::font::{self, Weight};
use super::frame::Frame;
use super::geometry::Rect;
use super::label::{Anchor, SMALL, Type};
use super::named;
use super::palette::{Colour, INK, series};
use super::scene::{MARGIN, Scene};

/// Height of a line of a name.
const LINE: f64 = 16.5;
/// Most lines of a name.
const LINES: usize = 2;

/// The end of one line.
pub(crate) struct End {
    /// Where the line ends, on the canvas.
    pub at: (f64, f64),
    pub text: String,
    pub colour: Colour,
    pub bold: bool,
}

/// The line of one system over the years.
pub(crate) struct Course<'a> {
    pub label: &'a str,
    pub today: bool,
    pub points: Vec<(f64, f64)>,
}

/// Room of a plot of a height below `top` that leaves `room` at the right for the names.
pub(crate) fn area(scene: &Scene, top: f64, height: f64, room: f64) -> Rect {
    Rect {
        left: MARGIN,
        top,
        right: scene.width - MARGIN - room + 12.0,
        bottom: top + height,
    }
}

/// Draws the lines of systems, each in its look, with marks in turn and its name at its end.
pub(crate) fn courses(scene: &mut Scene, frame: &Frame, courses: &[Course<'_>], room: f64) {
    let mut names = Vec::new();
    for (i, course) in courses.iter().enumerate() {
        let look = series(i);
        let width = if course.today { 3.4 } else { 2.6 };
        frame.line(scene, &course.points, look.colour, width, look.dash);
        for point in course.points.iter().skip(i % 5).step_by(5) {
            scene.mark(frame.at(point.0, point.1), 4.4, look);
        }
        if let Some(last) = course.points.last() {
            names.push(End {
                at: frame.at(last.0, last.1),
                text: named(course.label).into(),
                colour: look.colour,
                bold: course.today,
            });
        }
    }
    draw(scene, frame, &names, room);
}

/// Writes the names right of the frame in a column of `room`, each with a thin line to its end.
pub(crate) fn draw(scene: &mut Scene, frame: &Frame, ends: &[End], room: f64) {
    let mut names: Vec<(&End, Type, Vec<String>)> = ends
        .iter()
        .map(|end| {
            let weight = if end.bold {
                Weight::Bold
            } else {
                Weight::Regular
            };
            let set = Type::new(SMALL, weight, INK);
            (
                end,
                set,
                font::wrap(&end.text, set.size, weight, room - 18.0, LINES),
            )
        })
        .collect();
    names.sort_by(|a, b| a.0.at.1.total_cmp(&b.0.at.1));
    let wanted: Vec<(f64, f64)> = names
        .iter()
        .map(|(end, _, lines)| (end.at.1, LINE * lines.len() as f64))
        .collect();
    let left = frame.area.right + 16.0;
    let middles = spread(
        &wanted,
        frame.area.top - LINE / 2.0,
        frame.area.bottom + LINE / 2.0,
    );
    for ((end, set, lines), middle) in names.iter().zip(middles) {
        let from = (end.at.0 + 4.0, end.at.1);
        scene.line(&[from, (left - 3.0, middle)], end.colour, 1.0);
        let first = middle - LINE * (lines.len() as f64 - 1.0) / 2.0 + 4.6;
        for (i, line) in lines.iter().enumerate() {
            scene.text(line, (left, first + LINE * i as f64), Anchor::Start, *set);
        }
    }
}

/// Middles of blocks of given height that do not overlap, as close to the wanted ones as they can be, inside the room
/// if it is large enough. `wanted` holds middle and height, from the top.
fn spread(wanted: &[(f64, f64)], top: f64, bottom: f64) -> Vec<f64> {
    let mut out: Vec<f64> = wanted.iter().map(|w| w.0).collect();
    let mut ceiling = top;
    for (y, (_, height)) in out.iter_mut().zip(wanted) {
        *y = y.max(ceiling + height / 2.0);
        ceiling = *y + height / 2.0;
    }
    let all: f64 = wanted.iter().map(|w| w.1).sum();
    let mut floor = bottom.max(top + all);
    for (y, (_, height)) in out.iter_mut().zip(wanted).rev() {
        *y = y.min(floor - height / 2.0);
        floor = *y - height / 2.0;
    }
    out
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn spread_keeps_blocks_apart_and_in_the_room() {
        let wanted = [(100.0, 17.0), (101.0, 34.0), (102.0, 17.0), (199.0, 17.0)];
        let out = spread(&wanted, 0.0, 200.0);
        for i in 1..out.len() {
            let least = (wanted[i - 1].1 + wanted[i].1) / 2.0;
            assert!(out[i] - out[i - 1] >= least - 1e-9, "{out:?}");
        }
        assert!(out[3] + 8.5 <= 200.0 && out[0] - 8.5 >= 0.0);
        assert_eq!(
            spread(&[(10.0, 17.0), (90.0, 17.0)], 0.0, 200.0),
            [10.0, 90.0]
        );
    }
}
