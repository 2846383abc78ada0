//! What stands above a plot: title, subtitle and the key of colours, hatches, dashes and points.

use super::font::{self, Weight};
use super::geometry::Rect;
use super::label::{Anchor, SMALL, TITLE, Type};
use super::palette::{AXIS, Colour, Dash, Hatch, INK, Series};
use super::scene::{MARGIN, Scene};

impl Scene {
    /// Writes title and subtitle at the top left; gives back the y below which there is room.
    pub(crate) fn heading(&mut self, title: &str, subtitle: &str) -> f64 {
        let room = self.width - 2.0 * MARGIN;
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
