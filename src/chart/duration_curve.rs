//! Outdoor temperature in order: how many hours are colder than any temperature.

use super::font::Weight;
use super::frame::{Axis, Frame};
use super::geometry::Rect;
use super::label::{Anchor, SMALL, Type};
use super::numbers::Marks;
use super::palette::{Dash, INK, NAVY, WHITE};
use super::scene::{MARGIN, Scene};
use super::{ChartError, Picture, finite, font, named, sentence};

const PICTURE: &str = "duration curve";

/// What is drawn.
#[derive(Debug, Clone, PartialEq)]
pub struct DurationCurve {
    /// Where or which file the weather is of.
    pub place: String,
    /// Outdoor temperature of each hour, °C, in any order.
    pub outdoor_c: Vec<f64>,
    /// Temperatures to be marked, with their names, for example ("base temperature", 15.5).
    pub levels: Vec<(String, f64)>,
}

const PLOT: f64 = 350.0;

/// Draws the duration curve of outdoor temperature.
///
/// # Errors
/// [`ChartError::Empty`] without hours, [`ChartError::NotFinite`] for a value that is not a number.
pub fn duration_curve(data: &DurationCurve, marks: &Marks) -> Result<Picture, ChartError> {
    if data.outdoor_c.is_empty() {
        return Err(ChartError::Empty {
            picture: PICTURE,
            missing: "no hour was given",
        });
    }
    finite(
        PICTURE,
        data.outdoor_c.iter().map(|t| ("outdoor temperature", *t)),
    )?;
    finite(
        PICTURE,
        data.levels.iter().map(|(name, t)| (name.as_str(), *t)),
    )?;
    let mut sorted = data.outdoor_c.clone();
    sorted.sort_by(f64::total_cmp);
    let n = sorted.len();

    let title = "How long it is how cold";
    let subtitle = format!(
        "{} Outdoor temperature of every hour, coldest first.",
        sentence(&data.place, 320.0)
    );
    let mut scene = Scene::of(marks);
    let top = scene.heading(title, &subtitle);
    scene.height = top + PLOT + 6.0;
    let frame = Frame::inside(
        Rect {
            left: MARGIN,
            top,
            right: scene.width - MARGIN,
            bottom: top + PLOT,
        },
        Axis::tight("Hours", 0.0, n as f64, 8, marks),
        Axis::linear(
            "Outdoor temperature, °C",
            sorted[0],
            sorted[n - 1],
            6,
            marks,
        ),
    );
    frame.draw(&mut scene);
    let curve: Vec<(f64, f64)> = sorted
        .iter()
        .enumerate()
        .flat_map(|(i, t)| [(i as f64, *t), (i as f64 + 1.0, *t)])
        .collect();
    frame.line(&mut scene, &curve, NAVY, 2.8, Dash::Solid);
    for (name, level) in &data.levels {
        draw_level(&mut scene, &frame, &sorted, name, *level, marks);
    }
    Ok(Picture::new(title, alt(data, &sorted, marks), scene))
}

/// Hours colder than `level`.
fn colder(sorted: &[f64], level: f64) -> usize {
    sorted.partition_point(|t| *t < level)
}

fn draw_level(
    scene: &mut Scene,
    frame: &Frame,
    sorted: &[f64],
    name: &str,
    level: f64,
    marks: &Marks,
) {
    if level < frame.y.low || level > frame.y.high {
        return;
    }
    let hours = colder(sorted, level);
    let (x, y) = frame.at(hours as f64, level);
    scene.dashed(&[(frame.area.left, y), (x, y)], INK, 1.6, Dash::Short);
    scene.dashed(&[(x, y), (x, frame.area.bottom)], INK, 1.6, Dash::Short);
    scene.disc((x, y), 5.0, INK);
    scene.disc((x, y), 2.6, WHITE);
    let set = Type::new(SMALL, Weight::Regular, INK);
    let name = font::fit(named(name), set.size, set.weight, 200.0);
    let what = format!("{name} {}\u{a0}°C", marks.number(level, 1));
    let text = format!("{what}: {} colder", marks.count(hours, "hour"));
    let left = frame.area.left + 8.0;
    scene.place(
        &frame.area,
        &text,
        &[
            ((left, y - 7.0), Anchor::Start),
            ((left, y + 16.0), Anchor::Start),
            ((x + 10.0, y + 18.0), Anchor::Start),
            ((x - 10.0, y - 12.0), Anchor::End),
            ((left, y - 25.0), Anchor::Start),
            ((left, y + 34.0), Anchor::Start),
        ],
        set,
    );
}

fn alt(data: &DurationCurve, sorted: &[f64], marks: &Marks) -> String {
    let n = sorted.len();
    let mut out = format!(
        "Duration curve of outdoor temperature over {}, from {} to {} °C.",
        marks.count(n, "hour"),
        marks.number(sorted[0], 1),
        marks.number(sorted[n - 1], 1)
    );
    for (name, level) in &data.levels {
        out += &format!(
            " Colder than the {name} of {} °C: {}.",
            marks.number(*level, 1),
            marks.count(colder(sorted, *level), "hour")
        );
    }
    out
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn hours_colder_than_a_level_are_counted() {
        let data = DurationCurve {
            place: "Invented".into(),
            outdoor_c: vec![3.0, -2.0, 15.5, 20.0],
            levels: vec![("base temperature".into(), 15.5)],
        };
        let picture = duration_curve(&data, &Marks::default()).unwrap();
        let wanted = "base temperature 15.5\u{a0}°C: 2 hours colder";
        assert!(picture.labels().iter().any(|l| l.text == wanted));
    }
}
