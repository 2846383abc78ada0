//! What a picture is made of before it becomes SVG or PNG: shapes in reading order and labels with their boxes.
//!
//! Pictures draw here, in points of a canvas 720 wide; `paint` replays the same scene on both outputs. Dashes and
//! hatches are turned into plain lines here, so that both outputs show the same ones. Each label's box is measured
//! when it is written, which is what lets a picture ask for free room and a test prove that no two labels touch.

use super::font::{self, Weight};
use super::geometry::{self, Point};
use super::palette::{AXIS, Colour, Dash, GRID, Hatch, INK, MUTED, Mark, Series, WHITE};

/// Width of every picture in points; heights follow the content. At 180 mm on paper a point is 0.25 mm.
pub const WIDTH: f64 = 720.0;
/// Free margin around everything.
pub(crate) const MARGIN: f64 = 18.0;
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

/// A rectangle on the canvas, y downwards.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Rect {
    /// Left edge.
    pub left: f64,
    /// Upper edge.
    pub top: f64,
    /// Right edge.
    pub right: f64,
    /// Lower edge.
    pub bottom: f64,
}

impl Rect {
    /// Whether two rectangles share more than an edge.
    pub fn overlaps(&self, other: &Rect) -> bool {
        self.left < other.right
            && other.left < self.right
            && self.top < other.bottom
            && other.top < self.bottom
    }

    /// Whether `other` lies wholly inside.
    pub fn contains(&self, other: &Rect) -> bool {
        self.left <= other.left
            && self.top <= other.top
            && self.right >= other.right
            && self.bottom >= other.bottom
    }

    fn contains_point(&self, p: Point) -> bool {
        (self.left..=self.right).contains(&p.0) && (self.top..=self.bottom).contains(&p.1)
    }

    pub(crate) fn grown(&self, by: f64) -> Rect {
        Rect {
            left: self.left - by,
            top: self.top - by,
            right: self.right + by,
            bottom: self.bottom + by,
        }
    }

    pub(crate) fn corners(&self) -> [Point; 4] {
        [
            (self.left, self.top),
            (self.right, self.top),
            (self.right, self.bottom),
            (self.left, self.bottom),
        ]
    }
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
    pub(crate) const fn strong() -> Self {
        Self::new(BODY, Weight::Bold, INK)
    }
    pub(crate) const fn small() -> Self {
        Self::new(SMALL, Weight::Regular, super::palette::MUTED)
    }
    pub(crate) fn width(&self, text: &str) -> f64 {
        font::width(&font::clean(text), self.size, self.weight)
    }
}

/// One thing to paint; later ones lie above earlier ones.
#[derive(Debug, Clone)]
pub(crate) enum Item {
    Area {
        points: Vec<Point>,
        colour: Colour,
        opacity: f64,
    },
    Line {
        points: Vec<Point>,
        colour: Colour,
        width: f64,
    },
    Disc {
        centre: Point,
        radius: f64,
        colour: Colour,
    },
    Text(usize),
}

/// A picture in the making.
#[derive(Debug, Clone)]
pub(crate) struct Scene {
    pub height: f64,
    pub items: Vec<Item>,
    pub labels: Vec<Label>,
}

impl Scene {
    /// An empty canvas of the common width.
    pub(crate) fn new(height: f64) -> Self {
        Self {
            height,
            items: Vec::new(),
            labels: Vec::new(),
        }
    }

    pub(crate) fn canvas(&self) -> Rect {
        Rect {
            left: 0.0,
            top: 0.0,
            right: WIDTH,
            bottom: self.height,
        }
    }

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

    /// Writes a text at that one of `places` which hides least of what is drawn, among those on the canvas and clear of
    /// all earlier labels; the earlier place wins where they hide alike. Gives back the label's box, if there was such a place.
    pub(crate) fn place(
        &mut self,
        text: &str,
        places: &[(Point, Anchor)],
        set: Type,
    ) -> Option<Rect> {
        let best = places
            .iter()
            .enumerate()
            .map(|(rank, &(at, anchor))| (rank, at, anchor, measure(text, at, anchor, set).area))
            .filter(|(.., area)| self.is_free(area))
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
        point: Point,
        text: &str,
        places: &[(Point, Anchor)],
        set: Type,
    ) {
        let Some(area) = self.place(text, places, set) else {
            return;
        };
        let near = (
            point.0.clamp(area.left, area.right),
            point.1.clamp(area.top, area.bottom),
        );
        if geometry::length(&[point, near]) > 15.0 {
            self.line(&[point, near], MUTED, 1.0);
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

    /// Fills a polygon.
    pub(crate) fn area(&mut self, points: &[Point], colour: Colour, opacity: f64) {
        if points.len() > 2 {
            self.items.push(Item::Area {
                points: points.to_vec(),
                colour,
                opacity,
            });
        }
    }

    /// Fills a polygon and hatches it: the ground is the colour lightened, the lines are the colour itself.
    pub(crate) fn hatched(&mut self, points: &[Point], colour: Colour, hatch: Hatch) {
        let ground = if hatch == Hatch::Plain {
            colour
        } else {
            colour.lighter(0.55)
        };
        self.area(points, ground, 1.0);
        for line in geometry::hatch(points, hatch) {
            self.line(&line, colour, 1.6);
        }
    }

    /// Draws an unbroken line.
    pub(crate) fn line(&mut self, points: &[Point], colour: Colour, width: f64) {
        if points.len() > 1 {
            self.items.push(Item::Line {
                points: points.to_vec(),
                colour,
                width,
            });
        }
    }

    /// Draws a line with dashes.
    pub(crate) fn dashed(&mut self, points: &[Point], colour: Colour, width: f64, dash: Dash) {
        if dash == Dash::Solid {
            return self.line(points, colour, width);
        }
        for piece in geometry::dashes(points, dash.lengths()) {
            self.line(&piece, colour, width);
        }
    }

    /// Outlines a polygon.
    pub(crate) fn outline(&mut self, points: &[Point], colour: Colour, width: f64) {
        let mut ring = points.to_vec();
        ring.extend(points.first().copied());
        self.line(&ring, colour, width);
    }

    /// Draws a filled circle.
    pub(crate) fn disc(&mut self, centre: Point, radius: f64, colour: Colour) {
        self.items.push(Item::Disc {
            centre,
            radius,
            colour,
        });
    }

    /// Draws an arrow head half way between two points that are far enough apart.
    pub(crate) fn arrow(&mut self, a: Point, b: Point, colour: Colour) {
        let (dx, dy) = (b.0 - a.0, b.1 - a.1);
        let length = dx.hypot(dy);
        if length < 36.0 {
            return;
        }
        let (ux, uy) = (dx / length, dy / length);
        let (mx, my) = ((a.0 + b.0) / 2.0, (a.1 + b.1) / 2.0);
        let point = |along: f64, across: f64| {
            (mx + along * ux - across * uy, my + along * uy + across * ux)
        };
        self.area(
            &[point(8.0, 0.0), point(-6.0, 6.5), point(-6.0, -6.5)],
            colour,
            1.0,
        );
    }

    /// Draws the point of a series.
    pub(crate) fn mark(&mut self, at: Point, radius: f64, look: Series) {
        let (x, y) = at;
        let r = radius;
        let square = Rect {
            left: x - 0.88 * r,
            top: y - 0.88 * r,
            right: x + 0.88 * r,
            bottom: y + 0.88 * r,
        }
        .corners();
        let triangle = [(x, y - 1.1 * r), (x + r, y + 0.8 * r), (x - r, y + 0.8 * r)];
        let diamond = [
            (x, y - 1.25 * r),
            (x + 1.25 * r, y),
            (x, y + 1.25 * r),
            (x - 1.25 * r, y),
        ];
        let c = look.colour;
        match look.mark {
            Mark::Circle => self.disc(at, r, c),
            Mark::Square => self.area(&square, c, 1.0),
            Mark::Triangle => self.area(&triangle, c, 1.0),
            Mark::Diamond => self.area(&diamond, c, 1.0),
            Mark::Ring => {
                self.disc(at, r, c);
                self.disc(at, r * 0.55, WHITE);
            }
            Mark::Frame => {
                self.area(&square, WHITE, 1.0);
                self.outline(&square, c, 2.0);
            }
            Mark::Delta => {
                self.area(&triangle, WHITE, 1.0);
                self.outline(&triangle, c, 2.0);
            }
            Mark::Cross => {
                self.line(&[(x - r, y - r), (x + r, y + r)], c, 2.2);
                self.line(&[(x - r, y + r), (x + r, y - r)], c, 2.2);
            }
        }
    }

    /// Writes title and subtitle at the top left; gives back the y below which there is room.
    pub(crate) fn heading(&mut self, title: &str, subtitle: &str) -> f64 {
        let room = WIDTH - 2.0 * MARGIN;
        let mut y = MARGIN;
        for (text, set, lines) in [
            (title, Type::new(TITLE, Weight::Bold, INK), 2),
            (subtitle, Type::small(), 3),
        ] {
            for line in font::wrap(text, set.size, set.weight, room, lines) {
                y += set.size * 1.18;
                self.text(&line, (MARGIN, y - 0.24 * set.size), Anchor::Start, set);
            }
            y += 3.0;
        }
        y + 4.0
    }

    /// Writes a key, one entry after the other, over as many lines as it takes; gives back the y below it.
    pub(crate) fn key<S: AsRef<str>>(
        &mut self,
        entries: &[(Swatch, S)],
        left: f64,
        top: f64,
        room: f64,
    ) -> f64 {
        let set = Type::new(SMALL, Weight::Regular, INK);
        let (line_height, swatch, gap) = (20.0, 26.0, 20.0);
        let (mut x, mut y) = (left, top);
        for (look, name) in entries {
            let name = font::fit(name.as_ref(), set.size, set.weight, room - swatch - 6.0);
            let wide = swatch + 6.0 + set.width(&name);
            if x > left && x + wide > left + room {
                x = left;
                y += line_height;
            }
            let middle = y + 9.0;
            look.draw(self, x, middle, swatch);
            self.text(&name, (x + swatch + 6.0, middle + 4.6), Anchor::Start, set);
            x += wide + gap;
        }
        y + line_height + 4.0
    }
}

/// The sample of a key entry.
#[derive(Debug, Clone, Copy)]
pub(crate) enum Swatch {
    Area(Colour, Hatch),
    Line(Colour, Dash, f64),
    Point(Series),
    /// A line with points on it.
    Series(Series),
}

impl Swatch {
    fn draw(self, scene: &mut Scene, x: f64, middle: f64, wide: f64) {
        let ends = [(x, middle), (x + wide, middle)];
        let centre = (x + wide / 2.0, middle);
        match self {
            Swatch::Area(colour, hatch) => {
                let tile = Rect {
                    left: x,
                    top: middle - 7.0,
                    right: x + wide,
                    bottom: middle + 7.0,
                }
                .corners();
                scene.hatched(&tile, colour, hatch);
                scene.outline(&tile, AXIS, 0.6);
            }
            Swatch::Line(colour, dash, width) => scene.dashed(&ends, colour, width, dash),
            Swatch::Point(look) => scene.mark(centre, 4.5, look),
            Swatch::Series(look) => {
                scene.dashed(&ends, look.colour, 2.4, look.dash);
                scene.mark(centre, 4.5, look);
            }
        }
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
        scene.text("first", (50.0, 50.0), Anchor::Start, Type::body());
        let taken = ((52.0, 50.0), Anchor::Start);
        let outside = ((-40.0, 50.0), Anchor::Start);
        let free = ((50.0, 80.0), Anchor::Start);
        let mut place = |places: &[_]| scene.place("second", places, Type::body()).is_some();
        assert!(!place(&[taken, outside]));
        assert!(place(&[taken, outside, free]));
        assert!(!scene.labels[0].area.overlaps(&scene.labels[1].area));
    }

    #[test]
    fn rectangles_that_share_an_edge_do_not_overlap() {
        let a = Rect {
            left: 0.0,
            top: 0.0,
            right: 10.0,
            bottom: 10.0,
        };
        let b = Rect {
            left: 10.0,
            ..a.grown(5.0)
        };
        assert!(!a.overlaps(&b) && a.overlaps(&a.grown(-2.0)));
    }
}
