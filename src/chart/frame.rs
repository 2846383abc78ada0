//! The plot area of a picture: two axes with ticks, titles with units, a light grid, and the way from values to points.

use super::geometry::{self, Point, Rect};
use super::label::{Anchor, Type};
use super::numbers::{self, Marks};
use super::palette::{AXIS, Colour, Dash, GRID, INK};
use super::scene::Scene;

/// One axis: its ends, its ticks with what is written at them, and its title with the unit.
#[derive(Debug, Clone)]
pub(crate) struct Axis {
    pub low: f64,
    pub high: f64,
    logarithmic: bool,
    pub ticks: Vec<(f64, String)>,
    pub title: String,
}

impl Axis {
    /// A linear axis that ends on ticks.
    pub(crate) fn linear(title: &str, low: f64, high: f64, wanted: usize, marks: &Marks) -> Self {
        let ticks = numbers::ticks(low, high, wanted);
        let ends = (ticks.values[0], ticks.values[ticks.values.len() - 1]);
        Self {
            low: ends.0,
            high: ends.1,
            logarithmic: false,
            ticks: ticks
                .values
                .iter()
                .map(|v| (*v, marks.number(*v, ticks.decimals)))
                .collect(),
            title: title.into(),
        }
    }

    /// A linear axis with ends of its own; ticks only where they fall inside.
    pub(crate) fn tight(title: &str, low: f64, high: f64, wanted: usize, marks: &Marks) -> Self {
        let mut axis = Self::linear(title, low, high, wanted, marks);
        if high > low {
            (axis.low, axis.high) = (low, high);
            let slack = (high - low) * 1e-6;
            axis.ticks
                .retain(|(v, _)| *v >= low - slack && *v <= high + slack);
        }
        axis
    }

    /// A logarithmic axis that ends on ticks of 1, 2 and 5.
    pub(crate) fn logarithmic(title: &str, low: f64, high: f64, marks: &Marks) -> Self {
        let mut values = numbers::log_ticks(low, high);
        if values.len() < 2 {
            values = numbers::log_ticks(low * 0.5, high * 2.0);
        }
        let ends = (values[0], values[values.len() - 1]);
        let decimals = |v: f64| (-v.log10().floor()).max(0.0) as usize;
        Self {
            low: ends.0,
            high: ends.1,
            logarithmic: true,
            ticks: values
                .iter()
                .map(|v| (*v, marks.number(*v, decimals(*v))))
                .collect(),
            title: title.into(),
        }
    }

    /// An axis whose ticks are given.
    pub(crate) fn named(title: &str, low: f64, high: f64, ticks: Vec<(f64, String)>) -> Self {
        Self {
            low,
            high,
            logarithmic: false,
            ticks,
            title: title.into(),
        }
    }

    /// Where `value` lies between the ends, 0 to 1.
    fn share(&self, value: f64) -> f64 {
        let place = |v: f64| {
            if self.logarithmic {
                v.max(1e-12).log10()
            } else {
                v
            }
        };
        (place(value) - place(self.low)) / (place(self.high) - place(self.low))
    }
}

/// A plot area with its axes.
#[derive(Debug, Clone)]
pub(crate) struct Frame {
    pub area: Rect,
    /// Where the title of the y axis begins.
    pub title_left: f64,
    pub x: Axis,
    pub y: Axis,
}

/// Height kept above a plot for the title of its y axis.
pub(crate) const ABOVE: f64 = 22.0;
/// Height kept below a plot for tick labels and the title of its x axis.
pub(crate) const BELOW: f64 = 46.0;

impl Frame {
    /// A frame between `left` and `right` and between `top` and `bottom`, the room for axis texts taken from inside.
    pub(crate) fn inside(outer: Rect, x: Axis, y: Axis) -> Self {
        let set = Type::small();
        let widest = y
            .ticks
            .iter()
            .map(|(_, t)| set.width(t))
            .fold(0.0, f64::max);
        Self {
            title_left: outer.left,
            area: Rect {
                left: outer.left + widest + 8.0,
                top: outer.top + ABOVE,
                right: outer.right - 12.0,
                bottom: outer.bottom - BELOW,
            },
            x,
            y,
        }
    }

    /// The point of a pair of values.
    pub(crate) fn at(&self, x: f64, y: f64) -> Point {
        (self.at_x(x), self.at_y(y))
    }

    pub(crate) fn at_x(&self, x: f64) -> f64 {
        self.area.left + self.x.share(x) * (self.area.right - self.area.left)
    }

    pub(crate) fn at_y(&self, y: f64) -> f64 {
        self.area.bottom - self.y.share(y) * (self.area.bottom - self.area.top)
    }

    /// Grid, ticks and titles. Data is drawn after it, above the grid.
    pub(crate) fn draw(&self, scene: &mut Scene) {
        self.draw_y(scene);
        self.draw_x(scene);
    }

    /// The y axis alone, for panels that share one x axis.
    pub(crate) fn draw_y(&self, scene: &mut Scene) {
        let (area, set) = (self.area, Type::small());
        for (value, text) in &self.y.ticks {
            let y = self.at_y(*value);
            let zero = *value == 0.0 && self.y.low < 0.0;
            let (colour, width) = if zero { (AXIS, 1.2) } else { (GRID, 1.0) };
            scene.line(&[(area.left, y), (area.right, y)], colour, width);
            scene.tick(text, (area.left - 6.0, y + 4.6), Anchor::End);
        }
        let title = super::font::fit(
            &self.y.title,
            set.size,
            set.weight,
            area.right - self.title_left,
        );
        scene.text(
            &title,
            (self.title_left, area.top - 11.0),
            Anchor::Start,
            set,
        );
    }

    /// The x axis: upright grid lines, tick labels as far as they fit, title at the right below.
    pub(crate) fn draw_x(&self, scene: &mut Scene) {
        self.draw_x_grid(scene);
        let (area, set) = (self.area, Type::small());
        scene.line(
            &[(area.left, area.bottom), (area.right, area.bottom)],
            AXIS,
            1.2,
        );
        for (value, text) in &self.x.ticks {
            let x = self.at_x(*value);
            scene.line(&[(x, area.bottom), (x, area.bottom + 4.0)], AXIS, 1.2);
            scene.tick(text, (x, area.bottom + 20.0), Anchor::Middle);
        }
        let title = super::font::fit(&self.x.title, set.size, set.weight, area.right - area.left);
        scene.text(&title, (area.right, area.bottom + 39.0), Anchor::End, set);
    }

    /// Upright grid lines alone.
    pub(crate) fn draw_x_grid(&self, scene: &mut Scene) {
        for (value, _) in &self.x.ticks {
            let x = self.at_x(*value);
            scene.line(&[(x, self.area.top), (x, self.area.bottom)], GRID, 1.0);
        }
    }

    /// A line through values, cut at the frame; gaps where a value is not finite.
    pub(crate) fn line(
        &self,
        scene: &mut Scene,
        values: &[(f64, f64)],
        colour: Colour,
        width: f64,
        dash: Dash,
    ) {
        let points: Vec<Point> = values.iter().map(|&(x, y)| self.at(x, y)).collect();
        for piece in geometry::clip(&points, &self.area) {
            scene.dashed(&geometry::thin(&piece, 0.4), colour, width, dash);
        }
    }

    /// A line on a white edge, so that it stands out from a cloud or from areas.
    pub(crate) fn cased(
        &self,
        scene: &mut Scene,
        values: &[(f64, f64)],
        colour: Colour,
        width: f64,
        dash: Dash,
    ) {
        self.line(
            scene,
            values,
            super::palette::WHITE,
            width + 3.0,
            Dash::Solid,
        );
        self.line(scene, values, colour, width, dash);
    }

    /// A level line across the plot.
    pub(crate) fn level(&self, scene: &mut Scene, y: f64, colour: Colour, dash: Dash) {
        let y = self.at_y(y);
        scene.dashed(
            &[(self.area.left, y), (self.area.right, y)],
            colour,
            1.6,
            dash,
        );
    }

    /// An upright line across the plot.
    pub(crate) fn upright(&self, scene: &mut Scene, x: f64, colour: Colour, dash: Dash) {
        let x = self.at_x(x);
        scene.dashed(
            &[(x, self.area.top), (x, self.area.bottom)],
            colour,
            1.6,
            dash,
        );
    }

    /// A box round the plot.
    pub(crate) fn border(&self, scene: &mut Scene) {
        scene.outline(&self.area.corners(), AXIS, 1.0);
    }

    /// Writes `text` near the point of a pair of values, wherever there is room next to it; not at all otherwise.
    pub(crate) fn note(&self, scene: &mut Scene, text: &str, x: f64, y: f64) {
        let (px, py) = self.at(x, y);
        let set = Type::new(super::label::SMALL, super::font::Weight::Regular, INK);
        scene.place_for(&self.area, (px, py), text, &around(px, py, 9.0), set);
    }
}

/// Places round a point at which a label may stand, the best first.
pub(crate) fn around(x: f64, y: f64, gap: f64) -> Vec<(Point, Anchor)> {
    let mut out = Vec::new();
    for reach in [gap, 2.2 * gap, 4.0 * gap] {
        out.extend([
            ((x + reach, y - reach * 0.6), Anchor::Start),
            ((x - reach, y - reach * 0.6), Anchor::End),
            ((x + reach, y + reach * 0.6 + 9.0), Anchor::Start),
            ((x - reach, y + reach * 0.6 + 9.0), Anchor::End),
            ((x, y - reach), Anchor::Middle),
            ((x, y + reach + 9.0), Anchor::Middle),
        ]);
    }
    out
}

#[cfg(test)]
mod tests {
    use super::*;

    fn frame() -> Frame {
        let marks = Marks::default();
        Frame::inside(
            Rect {
                left: 18.0,
                top: 50.0,
                right: 702.0,
                bottom: 400.0,
            },
            Axis::linear("Outdoor temperature, °C", -7.0, 18.0, 6, &marks),
            Axis::logarithmic("Pressure, kPa", 310.0, 1900.0, &marks),
        )
    }

    #[test]
    fn ends_of_the_axes_are_edges_of_the_area() {
        let f = frame();
        assert_eq!(f.at_x(f.x.low), f.area.left);
        assert!((f.at_x(f.x.high) - f.area.right).abs() < 1e-9);
        assert!((f.at_y(f.y.high) - f.area.top).abs() < 1e-9);
        assert!((f.at_y(f.y.low) - f.area.bottom).abs() < 1e-9);
    }

    #[test]
    fn a_logarithmic_axis_gives_equal_room_to_equal_ratios() {
        let f = frame();
        let (a, b, c) = (f.at_y(250.0), f.at_y(500.0), f.at_y(1000.0));
        assert!(((a - b) - (b - c)).abs() < 1e-9);
    }

    #[test]
    fn labels_of_a_frame_are_apart() {
        let mut scene = Scene::new(420.0);
        frame().draw(&mut scene);
        for (i, a) in scene.labels.iter().enumerate() {
            for b in &scene.labels[..i] {
                assert!(!a.area.overlaps(&b.area), "{} and {}", a.text, b.text);
            }
        }
    }
}
