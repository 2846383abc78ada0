//! COP of every hour through the year against outdoor temperature, with the line of medians.

use super::bars::draw_name;
use super::cloud;
use super::font::Weight;
use super::frame::{Axis, Frame};
use super::geometry::Rect;
use super::key::Swatch;
use super::label::{Anchor, SMALL, Type};
use super::numbers::Marks;
use super::palette::{BROWN, Dash, INK};
use super::scene::{MARGIN, Scene};
use super::{ChartError, Picture, finite, font, named};

const PICTURE: &str = "COP through the year";

/// What is drawn.
#[derive(Debug, Clone, PartialEq)]
pub struct CopYear {
    /// The systems, in the order they are to stand.
    pub systems: Vec<CopSystem>,
}

/// The hours of one system.
#[derive(Debug, Clone, PartialEq)]
pub struct CopSystem {
    /// Name.
    pub label: String,
    /// Each hour in which the machine runs: outdoor temperature in °C and COP.
    pub hours: Vec<(f64, f64)>,
    /// Heat over electricity of the whole year, with what it counts, for example ("SPF H2", 3.1).
    pub year: Option<(String, f64)>,
}

/// Width of a step of the median line in K.
const STEP_K: f64 = 1.0;

/// Draws COP against outdoor temperature, two systems side by side.
///
/// # Errors
/// [`ChartError::Empty`] without hours, [`ChartError::NotFinite`] for a value that is not a number.
pub fn cop_year(data: &CopYear, marks: &Marks) -> Result<Picture, ChartError> {
    if data.systems.iter().all(|s| s.hours.is_empty()) {
        return Err(ChartError::Empty {
            picture: PICTURE,
            missing: "no system has an hour in which its machine runs",
        });
    }
    for &(t, cop) in data.systems.iter().flat_map(|s| &s.hours) {
        finite(PICTURE, [("outdoor temperature", t), ("COP", cop)])?;
    }
    finite(
        PICTURE,
        data.systems
            .iter()
            .filter_map(|s| s.year.as_ref())
            .map(|y| (y.0.as_str(), y.1)),
    )?;

    let title = "COP through the year";
    let mut scene = Scene::of(marks);
    let below = scene.heading(title, "Each cell counts hours in which the machine runs.");
    let columns = if data.systems.len() > 1 && !scene.narrow() {
        2
    } else {
        1
    };
    let plot = if columns == 1 { 350.0 } else { 280.0 };
    let block = plot + 24.0;
    let rows = data.systems.len().div_ceil(columns);
    let top = draw_key(&mut scene.clone(), cloud::ALL, below);
    scene.height = top + block * rows as f64 + 6.0;

    let (x, y) = axes(data, columns, marks);
    let wide = (scene.width - 2.0 * MARGIN) / columns as f64;
    let mut highest = 0;
    for (i, system) in data.systems.iter().enumerate() {
        let left = MARGIN + wide * (i % columns) as f64;
        let row = top + block * (i / columns) as f64;
        let outer = Rect {
            left,
            top: row + 24.0,
            right: left + wide,
            bottom: row + block,
        };
        draw_head(&mut scene, system, left, row + 16.0, wide, columns, marks);
        let frame = Frame::inside(outer, x.clone(), y.clone());
        frame.draw(&mut scene);
        highest = highest.max(cloud::draw(&mut scene, &frame, &system.hours));
        let medians = cloud::medians(&system.hours, STEP_K);
        frame.cased(&mut scene, &medians, BROWN, 3.0, Dash::Solid);
        if system.hours.is_empty() {
            let middle = (
                (frame.area.left + frame.area.right) / 2.0,
                (frame.area.top + frame.area.bottom) / 2.0,
            );
            scene.plate(
                "The machine never runs.",
                middle,
                Anchor::Middle,
                Type::small(),
            );
        }
    }
    draw_key(&mut scene, highest, below);
    Ok(Picture::new(title, alt(data, marks), scene))
}

fn draw_key(scene: &mut Scene, highest: usize, top: f64) -> f64 {
    let mut entries = cloud::key(highest);
    entries.push((Swatch::Line(BROWN, Dash::Solid, 3.0), "median".into()));
    scene.key(&entries, MARGIN, top, scene.width - 2.0 * MARGIN)
}

fn axes(data: &CopYear, columns: usize, marks: &Marks) -> (Axis, Axis) {
    let hours = || data.systems.iter().flat_map(|s| &s.hours);
    let low = hours().map(|h| h.0).fold(f64::INFINITY, f64::min);
    let high = hours().map(|h| h.0).fold(f64::NEG_INFINITY, f64::max);
    let top = hours().map(|h| h.1).fold(0.0, f64::max);
    (
        Axis::linear("Outdoor temperature, °C", low, high, 8 / columns, marks),
        Axis::linear(
            "COP (no unit)",
            0.0,
            if top > 0.0 { top } else { 1.0 },
            6,
            marks,
        ),
    )
}

fn draw_head(
    scene: &mut Scene,
    system: &CopSystem,
    left: f64,
    base: f64,
    wide: f64,
    columns: usize,
    marks: &Marks,
) {
    let set = Type::new(SMALL, Weight::Bold, INK);
    let right = left + wide - 12.0;
    let year = year_text(system, marks);
    let year = font::fit(&year, set.size, set.weight, wide * 0.45);
    scene.text(&year, (right, base), Anchor::End, set);
    let room = wide - 36.0 - set.width(&year);
    if columns == 1 {
        draw_name(scene, &system.label, false, base, room);
    } else {
        let set = Type::body();
        let name = font::fit(named(&system.label), set.size, set.weight, room);
        scene.text(&name, (left, base), Anchor::Start, set);
    }
}

fn year_text(system: &CopSystem, marks: &Marks) -> String {
    system.year.as_ref().map_or(String::new(), |(what, value)| {
        format!("{what} {}", marks.number(*value, 2))
    })
}

fn alt(data: &CopYear, marks: &Marks) -> String {
    let mut out =
        String::from("COP of each hour in which the machine runs, against outdoor temperature.");
    for system in &data.systems {
        let medians = cloud::medians(&system.hours, STEP_K);
        out += &format!(" {}: ", named(&system.label));
        match (medians.first(), medians.last()) {
            (Some(cold), Some(warm)) => {
                out += &format!(
                    "the median COP is {} near {} °C and {} near {} °C",
                    marks.number(cold.1, 1),
                    marks.number(cold.0, 1),
                    marks.number(warm.1, 1),
                    marks.number(warm.0, 1)
                );
            }
            _ => {
                out += &format!(
                    "{}, too few for medians",
                    marks.count(system.hours.len(), "hour")
                )
            }
        }
        let year = year_text(system, marks);
        out += &if year.is_empty() {
            ".".into()
        } else {
            format!("; {year} over the year.")
        };
    }
    out
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn alt_text_says_the_medians() {
        let hours: Vec<(f64, f64)> = (0..200)
            .map(|i| (f64::from(i % 20), 2.0 + f64::from(i % 20) * 0.1))
            .collect();
        let data = CopYear {
            systems: vec![CopSystem {
                label: "Air".into(),
                hours,
                year: Some(("SPF H2".into(), 2.9)),
            }],
        };
        let picture = cop_year(&data, &Marks::default()).unwrap();
        // Steps of 1 K from 0 to 19 °C: the first holds only 2.0, the last only 3.9.
        assert!(
            picture.alt.contains("2.0 near 0.5 °C and 3.9 near 19.5 °C"),
            "{}",
            picture.alt
        );
        assert!(picture.alt.contains("SPF H2 2.90 over the year"));
    }

    #[test]
    fn no_hours_and_bad_numbers_are_refused() {
        assert!(cop_year(&CopYear { systems: vec![] }, &Marks::default()).is_err());
        let system = CopSystem {
            label: String::new(),
            hours: vec![(0.0, f64::NAN)],
            year: None,
        };
        assert!(
            cop_year(
                &CopYear {
                    systems: vec![system]
                },
                &Marks::default()
            )
            .is_err()
        );
    }
}
