//! Cost of a year with its spread: a mark from P10 to P90 for every system, a dot in the middle.

use super::font::{self, Weight};
use super::frame::Axis;
use super::label::{Anchor, BODY, SMALL, Type};
use super::numbers::{Marks, money_unit};
use super::palette::{AXIS, GRID, INK, MUTED, NAVY, WHITE};
use super::scene::{MARGIN, Scene};
use super::{ChartError, Picture, finite, named};

const PICTURE: &str = "odds of cost";

/// What is drawn.
#[derive(Debug, Clone, PartialEq)]
pub struct CostOdds {
    /// Currency code of the costs.
    pub currency: String,
    /// The systems, in the order they are to stand.
    pub systems: Vec<CostSpread>,
}

/// The cost of one system.
#[derive(Debug, Clone, PartialEq)]
pub struct CostSpread {
    /// Name.
    pub label: String,
    /// One in ten is cheaper.
    pub p10: f64,
    /// Half are cheaper.
    pub p50: f64,
    /// Nine in ten are cheaper.
    pub p90: f64,
}

const ROW: f64 = 54.0;

/// Draws the cost of every system with its spread.
///
/// # Errors
/// [`ChartError::Empty`] without systems, [`ChartError::NotFinite`] for a cost that is not a number.
pub fn cost_odds(data: &CostOdds, marks: &Marks) -> Result<Picture, ChartError> {
    if data.systems.is_empty() {
        return Err(ChartError::Empty {
            picture: PICTURE,
            missing: "no system was given",
        });
    }
    let all = || data.systems.iter().flat_map(|s| [s.p10, s.p50, s.p90]);
    finite(PICTURE, all().map(|cost| ("cost", cost)))?;

    let title = "Cost of a year and how far it may be off";
    let subtitle =
        "From the line's left to its right end in eight cases of ten; the ring is the middle.";
    let mut scene = Scene::of(marks);
    let top = scene.heading(title, subtitle) + 6.0;
    // Where name and figures do not fit beside each other, the figures stand below.
    let second = if scene.narrow() { 20.0 } else { 0.0 };
    let row = ROW + second;
    let bottom = top + row * data.systems.len() as f64 + 6.0;
    scene.height = bottom + 52.0;
    let low = all().fold(f64::INFINITY, f64::min);
    let high = all().fold(f64::NEG_INFINITY, f64::max);
    let axis = Axis::linear(
        &format!("Cost of a year, {}", money_unit(&data.currency)),
        low,
        high,
        7,
        marks,
    );
    let (left, right) = (MARGIN + 22.0, scene.width - MARGIN - 22.0);
    let at = |v: f64| left + (v - axis.low) / (axis.high - axis.low) * (right - left);
    for (value, text) in &axis.ticks {
        scene.line(&[(at(*value), top), (at(*value), bottom)], GRID, 1.0);
        scene.tick(text, (at(*value), bottom + 18.0), Anchor::Middle);
    }
    scene.line(&[(left, bottom), (right, bottom)], AXIS, 1.2);
    scene.text(
        &axis.title,
        (right, bottom + 38.0),
        Anchor::End,
        Type::small(),
    );
    for (i, system) in data.systems.iter().enumerate() {
        let line = top + row * i as f64 + 18.0;
        let y = line + second + 20.0;
        let small = Type::new(SMALL, Weight::Regular, MUTED);
        let spread = format!(
            "{} to {}, middle {}",
            marks.money(&data.currency, system.p10),
            marks.money(&data.currency, system.p90),
            marks.money(&data.currency, system.p50)
        );
        let beside = if scene.narrow() {
            0.0
        } else {
            small.width(&spread) + 28.0
        };
        let room = scene.width - 2.0 * MARGIN - beside;
        let name = font::fit(named(&system.label), BODY, Weight::Regular, room);
        scene.plate(&name, (MARGIN, line), Anchor::Start, Type::body());
        let place = (scene.width - MARGIN, line + second);
        scene.plate(&spread, place, Anchor::End, small);
        scene.line(&[(at(system.p10), y), (at(system.p90), y)], NAVY, 5.0);
        for end in [system.p10, system.p90] {
            scene.line(&[(at(end), y - 7.0), (at(end), y + 7.0)], NAVY, 2.4);
        }
        scene.disc((at(system.p50), y), 7.0, INK);
        scene.disc((at(system.p50), y), 4.0, WHITE);
    }
    let mut alt = "Cost of a year of every system with its spread.".to_owned();
    for system in &data.systems {
        alt += &format!(
            " {}: {} in the middle, {} to {} in eight cases of ten.",
            named(&system.label),
            marks.money(&data.currency, system.p50),
            marks.money(&data.currency, system.p10),
            marks.money(&data.currency, system.p90)
        );
    }
    Ok(Picture::new(title, alt, scene))
}
