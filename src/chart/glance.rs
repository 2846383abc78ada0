//! A small picture for the first page: one row a system, a bar or a span, its figure written beside it.
//!
//! Three of them stand side by side on paper, so the canvas is a third as wide as the others and its letters are as large. There is no
//! axis: every row carries its own figure with its unit.

use super::font::{self, Weight};
use super::geometry::Rect;
use super::label::{Anchor, Type};
use super::palette::{AXIS, Dash, INK, MUTED, NAVY, WHITE};
use super::scene::Scene;
use super::{ChartError, Picture, finite, named};

const PICTURE: &str = "glance";

/// What is drawn.
#[derive(Debug, Clone, PartialEq)]
pub struct Glance {
    /// What is shown, in a few words.
    pub title: String,
    /// How to read it; up to two lines.
    pub subtitle: String,
    /// The systems, in the order they are to stand.
    pub rows: Vec<GlanceRow>,
    /// A value that all rows are seen against: a line through them, and what it is.
    pub against: Option<(f64, String)>,
}

/// One system.
#[derive(Debug, Clone, PartialEq)]
pub struct GlanceRow {
    /// Its name.
    pub label: String,
    /// Whether it is today's; its bar is drawn hollow.
    pub today: bool,
    /// What is drawn of it.
    pub shape: GlanceShape,
    /// The figure as it is written.
    pub figure: String,
}

/// What is drawn of a system.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum GlanceShape {
    /// A bar from nothing.
    Bar(f64),
    /// A line with a ring: low, middle, high.
    Span([f64; 3]),
}

impl GlanceShape {
    fn values(self) -> Vec<f64> {
        match self {
            Self::Bar(value) => vec![value],
            Self::Span(three) => three.to_vec(),
        }
    }
}

/// Width of the canvas, points.
pub const GLANCE_WIDTH: f64 = 270.0;
/// Room at the edges, so that marks there are whole.
const EDGE: f64 = 4.0;
/// Height of a row: its name, its bar.
const ROW: f64 = 39.0;
const BAR: f64 = 13.0;
const TITLE: Type = Type::new(15.5, Weight::Bold, INK);
const NOTE: Type = Type::new(12.5, Weight::Regular, MUTED);
const NAME: Type = Type::new(12.5, Weight::Regular, INK);
const FIGURE: Type = Type::new(13.0, Weight::Bold, INK);

/// Draws the rows.
///
/// # Errors
/// [`ChartError::Empty`] without rows, [`ChartError::NotFinite`] for a value that is not a number.
pub fn glance(data: &Glance) -> Result<Picture, ChartError> {
    if data.rows.is_empty() {
        return Err(ChartError::Empty {
            picture: PICTURE,
            missing: "no system was given",
        });
    }
    let against = data.against.as_ref().map(|(value, _)| *value);
    let values = || data.rows.iter().flat_map(|row| row.shape.values());
    finite(
        PICTURE,
        values().chain(against).map(|value| ("a system", value)),
    )?;

    let room = GLANCE_WIDTH - 2.0 * EDGE;
    let mut scene = Scene {
        width: GLANCE_WIDTH,
        ..Scene::new(f64::MAX)
    };
    let mut y = 16.0;
    scene.text(
        &font::fit(&data.title, TITLE.size, TITLE.weight, room),
        (EDGE, y),
        Anchor::Start,
        TITLE,
    );
    for line in font::wrap(&data.subtitle, NOTE.size, NOTE.weight, room, 2) {
        y += 16.0;
        scene.text(&line, (EDGE, y), Anchor::Start, NOTE);
    }
    let top = y + 10.0;
    let bottom = top + ROW * data.rows.len() as f64 + 2.0;

    let widest = data.rows.iter().map(|row| FIGURE.width(&row.figure));
    let widest = widest.fold(0.0, f64::max).min(0.55 * room);
    let plot = (EDGE, GLANCE_WIDTH - EDGE - widest - 12.0);
    let ends = values()
        .chain(against)
        .fold((0.0_f64, 0.0_f64), |(low, high), value| {
            (low.min(value), high.max(value))
        });
    let length = (ends.1 - ends.0).max(f64::MIN_POSITIVE);
    let at = |value: f64| plot.0 + (value - ends.0) / length * (plot.1 - plot.0);

    for (i, row) in data.rows.iter().enumerate() {
        draw_row(&mut scene, row, top + ROW * i as f64, room, &at);
    }
    scene.height = bottom + 4.0;
    if let Some((value, text)) = &data.against {
        let x = at(*value);
        // Today's own bar ends there.
        let others = data.rows.iter().enumerate().filter(|(_, row)| !row.today);
        for (i, _) in others {
            let y = top + ROW * i as f64 + 17.0;
            let mark = [(x, y - 1.0), (x, y + BAR + 5.0)];
            // White behind it, so that it shows on a bar.
            scene.line(&mark, WHITE, 4.4);
            scene.dashed(&mark, INK, 1.8, Dash::Short);
        }
        let text = font::fit(text, NOTE.size, NOTE.weight, room);
        let half = NOTE.width(&text) / 2.0;
        let x = x.clamp(EDGE + half, GLANCE_WIDTH - EDGE - half);
        scene.text(&text, (x, bottom + 13.0), Anchor::Middle, NOTE);
        scene.height = bottom + 20.0;
    }
    Ok(Picture::new(&data.title, alt(data), scene))
}

fn draw_row(scene: &mut Scene, row: &GlanceRow, top: f64, room: f64, at: &dyn Fn(f64) -> f64) {
    let today = if row.today { " (today)" } else { "" };
    let weight = if row.today {
        Weight::Bold
    } else {
        Weight::Regular
    };
    let set = Type { weight, ..NAME };
    let name = font::fit(
        named(&row.label),
        set.size,
        set.weight,
        room - set.width(today),
    );
    scene.text(
        &format!("{name}{today}"),
        (EDGE, top + 13.0),
        Anchor::Start,
        set,
    );
    let bar = top + 18.0;
    scene.line(
        &[(at(0.0), bar - 3.0), (at(0.0), bar + BAR + 3.0)],
        AXIS,
        1.0,
    );
    match row.shape {
        GlanceShape::Bar(value) => {
            let corners = Rect {
                left: at(0.0).min(at(value)),
                top: bar,
                right: at(0.0).max(at(value)),
                bottom: bar + BAR,
            }
            .corners();
            scene.area(&corners, if row.today { WHITE } else { NAVY }, 1.0);
            scene.outline(&corners, NAVY, 1.6);
        }
        GlanceShape::Span([low, middle, high]) => {
            let y = bar + BAR / 2.0;
            scene.line(&[(at(low), y), (at(high), y)], NAVY, 4.0);
            scene.disc((at(middle), y), 5.6, NAVY);
            scene.disc((at(middle), y), 3.2, WHITE);
        }
    }
    let figure = font::fit(&row.figure, FIGURE.size, FIGURE.weight, 0.55 * room);
    scene.text(
        &figure,
        (GLANCE_WIDTH - EDGE, bar + BAR - 2.0),
        Anchor::End,
        FIGURE,
    );
}

fn alt(data: &Glance) -> String {
    let mut out = format!("{} ", data.subtitle);
    for row in &data.rows {
        let today = if row.today { " (today)" } else { "" };
        out += &format!("{}{today}: {}. ", named(&row.label), row.figure);
    }
    if let Some((_, text)) = &data.against {
        out += &format!("Line: {text}.");
    }
    out
}

#[cfg(test)]
mod tests {
    use super::*;

    fn row(label: &str, shape: GlanceShape) -> GlanceRow {
        GlanceRow {
            label: label.into(),
            today: false,
            shape,
            figure: "£1,234".into(),
        }
    }

    #[test]
    fn long_names_and_values_below_nothing_stay_on_the_canvas() {
        let long = "W".repeat(400);
        let data = Glance {
            title: long.clone(),
            subtitle: "How to read it".into(),
            rows: vec![
                row(&long, GlanceShape::Bar(-400.0)),
                row("", GlanceShape::Span([-900.0, -20.0, 300.0])),
                row("nothing", GlanceShape::Bar(0.0)),
            ],
            against: Some((0.0, "as today".into())),
        };
        assert!(glance(&data).unwrap().labels_are_apart());
    }

    #[test]
    fn nothing_and_what_is_no_number_are_refused() {
        let mut data = Glance {
            title: "t".into(),
            subtitle: String::new(),
            rows: vec![],
            against: None,
        };
        assert!(matches!(glance(&data), Err(ChartError::Empty { .. })));
        data.rows.push(row("x", GlanceShape::Bar(f64::NAN)));
        assert!(matches!(glance(&data), Err(ChartError::NotFinite { .. })));
    }
}
