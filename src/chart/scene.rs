//! What a picture is made of before it becomes SVG or PNG: shapes in reading order and labels with their boxes.
//!
//! Pictures draw here, in points of a canvas 720 wide; `paint` replays the same scene on both outputs. Dashes and
//! hatches are turned into plain lines here, so that both outputs show the same ones. Each label's box is measured
//! when it is written, which is what lets a picture ask for free room and a test prove that no two labels touch.

use super::geometry::{self, Point, Rect};
use super::label::Label;
use super::numbers::Marks;
use super::palette::{Colour, Dash, Hatch, Mark, Series, WHITE};

/// Width of every picture in points; heights follow the content. At 180 mm on paper a point is 0.25 mm.
pub const WIDTH: f64 = 720.0;
/// Width of the canvas for a page as wide as a phone: letters stay as large, so there is less room beside them.
pub const PHONE_WIDTH: f64 = 390.0;
/// Free margin around everything.
pub(crate) const MARGIN: f64 = 18.0;

/// Width of the canvas for the page that `marks` is for.
pub(crate) fn width_of(marks: &Marks) -> f64 {
    if marks.phone { PHONE_WIDTH } else { WIDTH }
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
    pub width: f64,
    pub height: f64,
    pub items: Vec<Item>,
    pub labels: Vec<Label>,
}

impl Scene {
    /// An empty canvas of the common width.
    pub(crate) fn new(height: f64) -> Self {
        Self {
            width: WIDTH,
            height,
            items: Vec::new(),
            labels: Vec::new(),
        }
    }

    /// An empty canvas for the page that `marks` is for; its height is set when it is known.
    pub(crate) fn of(marks: &Marks) -> Self {
        Self {
            width: width_of(marks),
            ..Self::new(f64::MAX)
        }
    }

    /// Room for names beside a plot: what is wanted, and on a phone no more than leaves a plot.
    pub(crate) fn aside(&self, wanted: f64) -> f64 {
        wanted.min(0.36 * self.width)
    }

    /// Whether the canvas is as wide as a phone.
    pub(crate) fn narrow(&self) -> bool {
        self.width < WIDTH
    }

    pub(crate) fn canvas(&self) -> Rect {
        Rect {
            left: 0.0,
            top: 0.0,
            right: self.width,
            bottom: self.height,
        }
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
}
