//! Rows under one another over a single axis: a name at the left of each, a figure at its right, marks below them.

use super::font::{self, Weight};
use super::frame::Axis;
use super::label::{Anchor, BODY, Type};
use super::named;
use super::palette::{AXIS, GRID};
use super::scene::{MARGIN, Scene};

/// Room to the right of the axis, for half a tick's label.
const RIGHT: f64 = 22.0;
/// Least gap between a row's name and its figure.
const GAP: f64 = 28.0;
/// From a row's name down to its figure where a narrow picture has no room for both beside each other.
const SECOND_LINE: f64 = 20.0;

/// Where rows stand and where a value lies along them.
pub(super) struct Rows {
    /// Above the first row.
    pub top: f64,
    /// Below the last one, where the axis stands.
    pub bottom: f64,
    /// Left and right end of the axis.
    pub left: f64,
    /// The right one.
    pub right: f64,
    row: f64,
    /// From a row's top to the foot of what is written above its marks.
    line: f64,
    /// From its name down to its figure; 0 beside each other.
    second: f64,
    axis: Axis,
}

/// Sizes of the rows of a picture.
pub(super) struct RowSizes {
    /// Height of a row.
    pub row: f64,
    /// From a row's top to the foot of its name.
    pub line: f64,
    /// Room to the left of the axis.
    pub left: f64,
}

impl Rows {
    /// Sets title, grid and axis for so many rows, and the height of the scene.
    pub fn set(
        scene: &mut Scene,
        (title, subtitle): (&str, &str),
        axis: Axis,
        count: usize,
        sizes: &RowSizes,
    ) -> Self {
        let top = scene.heading(title, subtitle) + 6.0;
        let second = if scene.narrow() { SECOND_LINE } else { 0.0 };
        let row = sizes.row + second;
        let bottom = top + row * count as f64 + 6.0;
        scene.height = bottom + 52.0;
        let rows = Self {
            top,
            bottom,
            left: MARGIN + sizes.left,
            right: scene.width - MARGIN - RIGHT,
            row,
            line: sizes.line + second,
            second,
            axis,
        };
        for (value, text) in &rows.axis.ticks {
            let x = rows.at(*value);
            scene.line(&[(x, top), (x, bottom)], GRID, 1.0);
            scene.tick(text, (x, bottom + 18.0), Anchor::Middle);
        }
        scene.line(&[(rows.left, bottom), (rows.right, bottom)], AXIS, 1.2);
        let title_at = (rows.right, bottom + 38.0);
        scene.text(&rows.axis.title, title_at, Anchor::End, Type::small());
        rows
    }

    /// Where a value lies along the axis.
    pub fn at(&self, value: f64) -> f64 {
        let Axis { low, high, .. } = &self.axis;
        self.left + (value - low) / (high - low) * (self.right - self.left)
    }

    /// Foot of what is written above the marks of a row.
    pub fn line(&self, row: usize) -> f64 {
        self.top + self.row * row as f64 + self.line
    }

    /// Foot of a row.
    pub fn foot(&self, row: usize) -> f64 {
        self.top + self.row * (row + 1) as f64
    }

    /// From one tick to the next.
    pub fn step(&self) -> f64 {
        let ticks = self.axis.ticks.windows(2).next();
        ticks.map_or(1.0, |pair| pair[1].0 - pair[0].0)
    }

    /// Writes a row's figure and as much of its name as leaves it room, or as there is room for above it.
    pub fn label(&self, scene: &mut Scene, row: usize, name: &str, (figure, kind): (&str, Type)) {
        let beside = if self.second > 0.0 {
            0.0
        } else {
            kind.width(figure) + GAP
        };
        let room = scene.width - 2.0 * MARGIN - beside;
        let name = font::fit(named(name), BODY, Weight::Regular, room);
        let line = self.line(row);
        let name_at = (MARGIN, line - self.second);
        scene.plate(&name, name_at, Anchor::Start, Type::body());
        scene.plate(figure, (scene.width - MARGIN, line), Anchor::End, kind);
    }

    /// A line from one value to another with a mark across at either end.
    pub fn extent(&self, scene: &mut Scene, (low, high): (f64, f64), y: f64, mark: &FromTo) {
        let (low, high) = (self.at(low), self.at(high));
        scene.line(&[(low, y), (high, y)], mark.colour, mark.width);
        for end in [low, high] {
            let across = [(end, y - mark.across), (end, y + mark.across)];
            scene.line(&across, mark.colour, mark.end_width);
        }
    }
}

/// How a line from one value to another looks.
pub(super) struct FromTo {
    pub colour: super::palette::Colour,
    pub width: f64,
    /// Half the length of the marks at its ends, and their width.
    pub across: f64,
    pub end_width: f64,
}
