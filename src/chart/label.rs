//! Texts of a picture: measured before they are drawn, written where there is room.

use super::font::{self, Weight};
use super::geometry::{self, Point, Rect};
use super::palette::{AXIS, Colour, GRID, INK, MUTED, WHITE};
use super::scene::{Item, Scene};

/// Text sizes in points.
pub(crate) const TITLE: f64 = 19.0;
/// Size of names and of the figures that matter.
pub(crate) const BODY: f64 = 15.0;
/// Size of axis labels and notes.
pub(crate) const SMALL: f64 = 13.0;
/// Share of the text size above and below the base line that a label box covers.
const ASCENT: f64 = 0.78;
const DESCENT: f64 = 0.24;

/// What a later place for a label costs against an earlier one, in square points of hidden data.
const RANK: f64 = 12.0;

/// A label further than this from its point gets a line to it; the line begins beside a mark of this radius.
const STANDS_OFF: f64 = 15.0;
const MARK: f64 = 8.0;

/// Where a text stands in relation to its point.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Anchor {
    /// The text begins at the point.
    Start,
    /// The text is centred on the point.
    Middle,
    /// The text ends at the point.
    End,
}

/// A text on the canvas.
#[derive(Debug, Clone, PartialEq)]
pub struct Label {
    /// What is written, cleaned for display.
    pub text: String,
    /// The room it takes.
    pub area: Rect,
    pub(crate) at: Point,
    pub(crate) anchor: Anchor,
    pub(crate) size: f64,
    pub(crate) weight: Weight,
    pub(crate) colour: Colour,
}

/// How a text is set.
#[derive(Debug, Clone, Copy)]
pub(crate) struct Type {
    pub size: f64,
    pub weight: Weight,
    pub colour: Colour,
}

impl Type {
    pub(crate) const fn new(size: f64, weight: Weight, colour: Colour) -> Self {
        Self {
            size,
            weight,
            colour,
        }
    }
    pub(crate) const fn body() -> Self {
        Self::new(BODY, Weight::Regular, INK)
    }
    pub(crate) const fn small() -> Self {
        Self::new(SMALL, Weight::Regular, super::palette::MUTED)
    }
    pub(crate) fn width(&self, text: &str) -> f64 {
        font::width(&font::clean(text), self.size, self.weight)
    }
}

impl Scene {
    /// Writes a text on a base line and keeps its box.
    pub(crate) fn text(&mut self, text: &str, at: Point, anchor: Anchor, set: Type) {
        let label = measure(text, at, anchor, set);
        if !label.text.is_empty() {
            self.items.push(Item::Text(self.labels.len()));
            self.labels.push(label);
        }
    }

    /// Writes the label of a tick, unless it would touch another label.
    pub(crate) fn tick(&mut self, text: &str, at: Point, anchor: Anchor) {
        self.place_bare(text, at, anchor, Type::small());
    }

    /// Writes a text with paper behind it, so that lines under it do not cut it.
    pub(crate) fn plate(&mut self, text: &str, at: Point, anchor: Anchor, set: Type) {
        let plate = measure(text, at, anchor, set).area.grown(1.5);
        self.area(&plate.corners(), WHITE, 0.94);
        self.text(text, at, anchor, set);
    }

    /// Writes a text at that one of `places` which hides least of what is drawn, among those inside `bounds` and clear
    /// of all earlier labels; the earlier place wins where they hide alike. Gives back the label's box, if there was
    /// such a place.
    pub(crate) fn place(
        &mut self,
        bounds: &Rect,
        text: &str,
        places: &[(Point, Anchor)],
        set: Type,
    ) -> Option<Rect> {
        let best = places
            .iter()
            .enumerate()
            .map(|(rank, &(at, anchor))| (rank, at, anchor, measure(text, at, anchor, set).area))
            .filter(|(.., area)| bounds.contains(area) && self.is_free(area))
            .map(|(rank, at, anchor, area)| {
                (self.ink(&area) + RANK * rank as f64, at, anchor, area)
            })
            .min_by(|a, b| a.0.total_cmp(&b.0));
        best.map(|(_, at, anchor, area)| {
            self.plate(text, at, anchor, set);
            area
        })
    }

    /// Like `place`, for a label that belongs to a point: a thin line leads from there to a label that stands off.
    pub(crate) fn place_for(
        &mut self,
        bounds: &Rect,
        point: Point,
        text: &str,
        places: &[(Point, Anchor)],
        set: Type,
    ) {
        let Some(area) = self.place(bounds, text, places, set) else {
            return;
        };
        let near = (
            point.0.clamp(area.left, area.right),
            point.1.clamp(area.top, area.bottom),
        );
        let away = geometry::length(&[point, near]);
        if away > STANDS_OFF {
            // From the edge of the point's mark, so that the line does not cross it.
            let share = MARK / away;
            let start = (
                point.0 + share * (near.0 - point.0),
                point.1 + share * (near.1 - point.1),
            );
            self.line(&[start, near], MUTED, 1.0);
        }
    }

    /// Square points of data under `area`: what a label there would hide. Paper, grid and axes do not count.
    fn ink(&self, area: &Rect) -> f64 {
        let quiet = |c: &Colour| [WHITE, GRID, AXIS].contains(c);
        self.items
            .iter()
            .map(|item| match item {
                Item::Area { points, colour, .. } if !quiet(colour) => {
                    geometry::size(&geometry::clip_area(points, area))
                }
                Item::Line {
                    points,
                    colour,
                    width,
                } if !quiet(colour) => geometry::clip(points, area)
                    .iter()
                    .map(|piece| geometry::length(piece) * width.max(2.0) * 2.0)
                    .sum(),
                Item::Disc { centre, radius, .. }
                    if area.grown(*radius).contains_point(*centre) =>
                {
                    8.0 * radius * radius
                }
                _ => 0.0,
            })
            .sum()
    }

    /// Like `place`, without paper behind: for quiet words on a tinted ground.
    pub(crate) fn place_bare(&mut self, text: &str, at: Point, anchor: Anchor, set: Type) -> bool {
        let free = self.is_free(&measure(text, at, anchor, set).area);
        if free {
            self.text(text, at, anchor, set);
        }
        free
    }

    /// Whether `area` lies on the canvas and touches no label.
    pub(crate) fn is_free(&self, area: &Rect) -> bool {
        let room = area.grown(2.0);
        self.canvas().contains(&room) && !self.labels.iter().any(|l| l.area.overlaps(&room))
    }
}

fn measure(text: &str, at: Point, anchor: Anchor, set: Type) -> Label {
    let text = font::clean(text);
    let wide = font::width(&text, set.size, set.weight);
    let left = match anchor {
        Anchor::Start => at.0,
        Anchor::Middle => at.0 - wide / 2.0,
        Anchor::End => at.0 - wide,
    };
    Label {
        area: Rect {
            left,
            top: at.1 - ASCENT * set.size,
            right: left + wide,
            bottom: at.1 + DESCENT * set.size,
        },
        text,
        at,
        anchor,
        size: set.size,
        weight: set.weight,
        colour: set.colour,
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_label_box_follows_its_anchor() {
        let set = Type::body();
        let wide = set.width("kWh");
        for (anchor, left) in [
            (Anchor::Start, 100.0),
            (Anchor::Middle, 100.0 - wide / 2.0),
            (Anchor::End, 100.0 - wide),
        ] {
            let label = measure("kWh", (100.0, 50.0), anchor, set);
            assert!((label.area.left - left).abs() < 1e-9);
            assert!((label.area.right - left - wide).abs() < 1e-9);
        }
    }

    #[test]
    fn place_takes_the_first_free_room_and_refuses_when_there_is_none() {
        let mut scene = Scene::new(100.0);
        let bounds = scene.canvas();
        scene.text("first", (50.0, 50.0), Anchor::Start, Type::body());
        let taken = ((52.0, 50.0), Anchor::Start);
        let outside = ((-40.0, 50.0), Anchor::Start);
        let free = ((50.0, 80.0), Anchor::Start);
        let mut place = |places: &[_]| {
            scene
                .place(&bounds, "second", places, Type::body())
                .is_some()
        };
        assert!(!place(&[taken, outside]));
        assert!(place(&[taken, outside, free]));
        assert!(!scene.labels[0].area.overlaps(&scene.labels[1].area));
    }
}
