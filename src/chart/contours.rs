//! Saving over two prices: lines of equal saving, the zero line, today's point, lines of constant price ratio.

use super::font::Weight;
use super::frame::{Axis, Frame};
use super::geometry::Rect;
use super::isolines::isolines;
use super::key::Swatch;
use super::label::{Anchor, SMALL, Type};
use super::numbers::{self, Marks};
use super::palette::{AXIS, Dash, INK, NAVY, OCHRE, WHITE};
use super::scene::{MARGIN, Scene};
use super::{ChartError, Picture, finite, named, sentence};

const PICTURE: &str = "saving over two prices";

/// What is drawn.
#[derive(Debug, Clone, PartialEq)]
pub struct Contours {
    /// What is drawn, for example "Saving in a year of Air source".
    pub outcome: String,
    /// Currency code of the outcome.
    pub currency: String,
    /// Name and unit of the price along x, for example ("Electricity price", "p/kWh").
    pub x_name: (String, String),
    /// Name and unit of the price along y.
    pub y_name: (String, String),
    /// Prices along x, rising.
    pub x: Vec<f64>,
    /// Prices along y, rising.
    pub y: Vec<f64>,
    /// The outcome: one row a price along y, one value a price along x.
    pub values: Vec<Vec<f64>>,
    /// The prices as they are now.
    pub now: Option<(f64, f64)>,
    /// Ratios of x to y whose lines are drawn.
    pub ratios: Vec<f64>,
}

const PLOT: f64 = 430.0;

/// Draws the lines.
///
/// # Errors
/// [`ChartError::Empty`] with fewer than two prices on an axis, [`ChartError::Uneven`] when rows do not match,
/// [`ChartError::NotFinite`] for a value that is not a number.
pub fn contours(data: &Contours, marks: &Marks) -> Result<Picture, ChartError> {
    check(data)?;
    // Lines of constant ratio are drawn over two prices only.
    let title = if data.ratios.is_empty() {
        "Where it pays, over two quantities"
    } else {
        "Where it pays, over both prices"
    };
    let outcome = sentence(&data.outcome, 420.0);
    let subtitle = format!("{outcome} Each line joins prices with the same result.");
    let mut scene = Scene::of(marks);
    let below = scene.heading(title, &subtitle);
    let mut entries = vec![
        (Swatch::Line(NAVY, Dash::Solid, 1.8), "gain"),
        (Swatch::Line(INK, Dash::Solid, 3.6), "break-even"),
        (Swatch::Line(NAVY, Dash::Short, 1.8), "loss"),
    ];
    if !data.ratios.is_empty() {
        entries.push((
            Swatch::Line(AXIS, Dash::Dotted, 1.8),
            "constant price ratio",
        ));
    }
    let top = scene.key(&entries, MARGIN, below, scene.width - 2.0 * MARGIN);
    scene.height = top + PLOT + 6.0;
    let title_of = |(name, unit): &(String, String)| format!("{}, {unit}", named(name));
    let span = |v: &[f64]| (v[0], v[v.len() - 1]);
    let (x, y) = (span(&data.x), span(&data.y));
    let frame = Frame::inside(
        Rect {
            left: MARGIN,
            top,
            right: scene.width - MARGIN - 20.0,
            bottom: top + PLOT,
        },
        Axis::tight(&title_of(&data.x_name), x.0, x.1, 7, marks),
        Axis::tight(&title_of(&data.y_name), y.0, y.1, 7, marks),
    );
    frame.draw(&mut scene);
    frame.border(&mut scene);
    draw_ratios(&mut scene, &frame, data);
    let lines = draw_levels(&mut scene, &frame, data);
    draw_now(&mut scene, &frame, data, marks);
    for (level, line) in &lines {
        label_level(&mut scene, &frame, data, *level, line, marks);
    }
    label_ratios(&mut scene, &frame, data, marks);
    let zero = lines.iter().any(|(level, _)| *level == 0.0);
    Ok(Picture::new(title, alt(data, zero, marks), scene))
}

fn check(data: &Contours) -> Result<(), ChartError> {
    if data.x.len() < 2 || data.y.len() < 2 {
        return Err(ChartError::Empty {
            picture: PICTURE,
            missing: "fewer than two prices on an axis",
        });
    }
    if data.values.len() != data.y.len() || data.values.iter().any(|r| r.len() != data.x.len()) {
        return Err(ChartError::Uneven {
            picture: PICTURE,
            what: format!(
                "{} × {} prices, {} rows of values, the first of {}",
                data.y.len(),
                data.x.len(),
                data.values.len(),
                data.values.first().map_or(0, Vec::len)
            ),
        });
    }
    finite(PICTURE, data.x.iter().chain(&data.y).map(|v| ("price", *v)))?;
    finite(
        PICTURE,
        data.values.iter().flatten().map(|v| ("outcome", *v)),
    )?;
    finite(PICTURE, data.ratios.iter().map(|v| ("price ratio", *v)))?;
    finite(
        PICTURE,
        data.now
            .iter()
            .flat_map(|n| [("price now", n.0), ("price now", n.1)]),
    )
}

fn draw_levels(scene: &mut Scene, frame: &Frame, data: &Contours) -> Vec<(f64, Vec<(f64, f64)>)> {
    let all = || data.values.iter().flatten().copied();
    let low = all().fold(f64::INFINITY, f64::min);
    let high = all().fold(f64::NEG_INFINITY, f64::max);
    let mut levels = numbers::ticks(low, high, 12).values;
    // Zero is a multiple of every step, but make sure of it: it is what the picture is for.
    if !levels.iter().any(|l| l.abs() < 1e-9) {
        levels.push(0.0);
    }
    let mut out = Vec::new();
    for level in levels {
        let level = if level.abs() < 1e-9 { 0.0 } else { level };
        for line in isolines(&data.x, &data.y, &data.values, level) {
            match level {
                0.0 => frame.cased(scene, &line, INK, 3.6, Dash::Solid),
                l if l > 0.0 => frame.line(scene, &line, NAVY, 1.8, Dash::Solid),
                _ => frame.line(scene, &line, NAVY, 1.8, Dash::Short),
            }
            out.push((level, line));
        }
    }
    out
}

fn label_level(
    scene: &mut Scene,
    frame: &Frame,
    data: &Contours,
    level: f64,
    line: &[(f64, f64)],
    marks: &Marks,
) {
    let zero = level == 0.0;
    let weight = if zero { Weight::Bold } else { Weight::Regular };
    let set = Type::new(SMALL, weight, INK);
    let text = marks.money(&data.currency, level);
    // On the line, at the first of a few places along it that is free; never near the frame, where ticks stand.
    let places: Vec<_> = [0.5, 0.4, 0.6, 0.3, 0.7, 0.2, 0.8]
        .iter()
        .filter_map(|share| {
            line.get((share * (line.len().saturating_sub(1)) as f64).round() as usize)
        })
        .map(|&(x, y)| frame.at(x, y))
        .filter(|p| {
            frame.area.grown(-14.0).contains(&Rect {
                left: p.0,
                right: p.0,
                top: p.1,
                bottom: p.1,
            })
        })
        .map(|(x, y)| ((x, y + 4.6), Anchor::Middle))
        .collect();
    scene.place(&frame.area, &text, &places, set);
}

fn draw_ratios(scene: &mut Scene, frame: &Frame, data: &Contours) {
    for ratio in data.ratios.iter().filter(|r| **r > 0.0) {
        let ends = [
            (frame.x.low, frame.x.low / ratio),
            (frame.x.high, frame.x.high / ratio),
        ];
        frame.line(scene, &ends, AXIS, 1.8, Dash::Dotted);
    }
}

/// Names of the ratio lines, written when all lines are drawn.
fn label_ratios(scene: &mut Scene, frame: &Frame, data: &Contours, marks: &Marks) {
    for ratio in data.ratios.iter().filter(|r| **r > 0.0) {
        // The end that leaves through the top or the right edge.
        let x = (ratio * frame.y.high).min(frame.x.high);
        let (px, py) = frame.at(x, x / ratio);
        let decimals = [0, 1]
            .into_iter()
            .find(|d| is_round(*ratio, *d))
            .unwrap_or(2);
        let text = format!("{}\u{a0}:\u{a0}1", marks.number(*ratio, decimals));
        let places = [
            ((px - 4.0, py + 18.0), Anchor::End),
            ((px - 8.0, py - 6.0), Anchor::End),
        ];
        if frame.area.grown(1.0).contains(&Rect {
            left: px,
            right: px,
            top: py,
            bottom: py,
        }) {
            scene.place(&frame.area, &text, &places, Type::small());
        }
    }
}

/// Whether `value` is written in full with so many decimals.
fn is_round(value: f64, decimals: usize) -> bool {
    let scaled = value * 10_f64.powi(decimals as i32);
    (scaled - scaled.round()).abs() < 1e-9
}

fn draw_now(scene: &mut Scene, frame: &Frame, data: &Contours, marks: &Marks) {
    let Some((x, y)) = data.now else { return };
    let at = frame.at(x, y);
    if !frame.area.contains(&Rect {
        left: at.0,
        right: at.0,
        top: at.1,
        bottom: at.1,
    }) {
        return;
    }
    scene.disc(at, 9.0, WHITE);
    scene.disc(at, 7.0, OCHRE);
    let text = format!("now {} and {}", marks.number(x, 1), marks.number(y, 1));
    let set = Type::new(SMALL, Weight::Bold, INK);
    scene.place_for(
        &frame.area,
        at,
        &text,
        &super::frame::around(at.0, at.1, 12.0),
        set,
    );
}

fn alt(data: &Contours, zero: bool, marks: &Marks) -> String {
    let all = || data.values.iter().flatten().copied();
    let mut out = format!(
        "Lines of equal {} over {} and {}, from {} to {}.",
        named(&data.outcome).to_lowercase(),
        named(&data.x_name.0).to_lowercase(),
        named(&data.y_name.0).to_lowercase(),
        marks.money(&data.currency, all().fold(f64::INFINITY, f64::min)),
        marks.money(&data.currency, all().fold(f64::NEG_INFINITY, f64::max))
    );
    out += if zero {
        " The break-even line crosses the picture."
    } else {
        " Nothing breaks even in this range."
    };
    if let Some((x, y)) = data.now {
        out += &format!(
            " They are now {} {} and {} {}.",
            marks.number(x, 1),
            data.x_name.1,
            marks.number(y, 1),
            data.y_name.1
        );
    }
    out
}

#[cfg(test)]
mod tests {
    use super::*;

    fn data() -> Contours {
        let x: Vec<f64> = (15..=40).map(f64::from).collect();
        let y: Vec<f64> = (4..=12).map(f64::from).collect();
        let values = y
            .iter()
            .map(|g| x.iter().map(|e| 140.0 * g - 42.0 * e + 110.0).collect())
            .collect();
        Contours {
            outcome: "Saving in a year".into(),
            currency: "GBP".into(),
            x_name: ("Electricity price".into(), "p/kWh".into()),
            y_name: ("Gas price".into(), "p/kWh".into()),
            x,
            y,
            values,
            now: Some((24.5, 6.3)),
            ratios: vec![3.0],
        }
    }

    #[test]
    fn the_zero_line_is_drawn_and_labelled() {
        let picture = contours(&data(), &Marks::default()).unwrap();
        assert!(picture.labels().iter().any(|l| l.text == "£0"));
        assert!(picture.alt.contains("break-even line crosses"));
    }

    #[test]
    fn rows_that_do_not_match_are_refused() {
        let mut bad = data();
        bad.values.pop();
        assert!(matches!(
            contours(&bad, &Marks::default()),
            Err(ChartError::Uneven { .. })
        ));
    }
}
