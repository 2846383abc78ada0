//! A ground source over its life: lowest and mean brine and the mean wall, one point a year.

use super::ends::{self, End};
use super::font::Weight;
use super::frame::{Axis, Frame, around};
use super::geometry::Rect;
use super::label::{SMALL, Type};
use super::numbers::Marks;
use super::palette::{Dash, INK, series};
use super::scene::{MARGIN, Scene};
use super::{ChartError, Picture, finite, named, sentence};

const PICTURE: &str = "brine over the life";

/// What is drawn.
#[derive(Debug, Clone, PartialEq)]
pub struct BrineLife {
    /// Name of the system or the ground it draws from.
    pub source: String,
    /// One line each, for example "lowest brine", with a value for every year of the life, °C; not a number where there is none.
    pub lines: Vec<(String, Vec<f64>)>,
    /// Lowest temperature that is allowed, with what sets it.
    pub limit: Option<(String, f64)>,
}

const PLOT: f64 = 330.0;
const RIGHT: f64 = 170.0;

/// Draws the life. Years that are not a number are gaps.
///
/// # Errors
/// [`ChartError::Empty`] without a single temperature or with one year only, [`ChartError::NotFinite`] for a limit that is not a
/// number.
pub fn brine_life(data: &BrineLife, marks: &Marks) -> Result<Picture, ChartError> {
    let all = || {
        let values = data.lines.iter().flat_map(|line| &line.1).copied();
        values.filter(|c| c.is_finite())
    };
    let years = data
        .lines
        .iter()
        .map(|line| line.1.len())
        .max()
        .unwrap_or(0);
    if all().next().is_none() || years < 2 {
        return Err(ChartError::Empty {
            picture: PICTURE,
            missing: "fewer than two years have a temperature",
        });
    }
    finite(
        PICTURE,
        data.limit.as_ref().map(|(name, c)| (name.as_str(), *c)),
    )?;
    let title = "The ground over its life";
    let subtitle = format!("{} One point a year.", sentence(&data.source, 320.0));
    let mut scene = Scene::of(marks);
    let top = scene.heading(title, &subtitle);
    scene.height = top + PLOT + 6.0;
    let marked = || all().chain(data.limit.iter().map(|limit| limit.1));
    let low = marked().fold(f64::INFINITY, f64::min);
    let high = marked().fold(f64::NEG_INFINITY, f64::max);
    let frame = Frame::inside(
        Rect {
            left: MARGIN,
            top,
            right: scene.width - MARGIN - scene.aside(RIGHT) + 12.0,
            bottom: top + PLOT,
        },
        Axis::tight("Year of its life", 1.0, years as f64, 6, marks),
        Axis::linear("Temperature, °C", low, high, 6, marks),
    );
    frame.draw(&mut scene);
    let mut names = Vec::new();
    for (i, (label, values)) in data.lines.iter().enumerate() {
        let look = series(i);
        let points: Vec<_> = values
            .iter()
            .enumerate()
            .map(|(y, c)| ((y + 1) as f64, *c))
            .collect();
        frame.line(&mut scene, &points, look.colour, 2.6, look.dash);
        if let Some(last) = points.iter().rev().find(|point| point.1.is_finite()) {
            names.push(End {
                at: frame.at(last.0, last.1),
                text: named(label).into(),
                colour: look.colour,
                bold: false,
            });
        }
    }
    let room = scene.aside(RIGHT);
    ends::draw(&mut scene, &frame, &names, room);
    if let Some((name, level)) = &data.limit {
        frame.level(&mut scene, *level, INK, Dash::Short);
        let (x, y) = frame.at(1.0 + (years - 1) as f64 / 3.0, *level);
        let set = Type::new(SMALL, Weight::Regular, INK);
        let text = format!("{name} {}\u{a0}°C", marks.number(*level, 1));
        scene.place_for(&frame.area, (x, y), &text, &around(x, y, 12.0), set);
    }
    Ok(Picture::new(title, alt(data, marks), scene))
}

fn alt(data: &BrineLife, marks: &Marks) -> String {
    let mut out = format!(
        "Temperatures of {} over the years of its life.",
        named(&data.source)
    );
    for (label, values) in &data.lines {
        let known = || values.iter().enumerate().filter(|(_, c)| c.is_finite());
        if let (Some((a, first)), Some((b, last))) = (known().next(), known().next_back()) {
            out += &format!(
                " {}: {} °C in year {}, {} °C in year {}.",
                named(label),
                marks.number(*first, 1),
                a + 1,
                marks.number(*last, 1),
                b + 1
            );
        }
    }
    if let Some((name, c)) = &data.limit {
        out += &format!(" Limit, {name}: {} °C.", marks.number(*c, 1));
    }
    out
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_life_needs_two_years_and_tells_its_ends() {
        let data = BrineLife {
            source: "Bore".into(),
            lines: vec![("lowest brine".into(), vec![1.7, f64::NAN, 0.9])],
            limit: Some(("lowest the machine accepts".into(), -8.0)),
        };
        let picture = brine_life(&data, &Marks::default()).unwrap();
        assert!(
            picture.alt.contains("1.7 °C in year 1, 0.9 °C in year 3"),
            "{}",
            picture.alt
        );
        let short = BrineLife {
            lines: vec![("lowest brine".into(), vec![1.7])],
            ..data
        };
        assert!(matches!(
            brine_life(&short, &Marks::default()),
            Err(ChartError::Empty { .. })
        ));
    }
}
