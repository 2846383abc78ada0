//! Cost of a year with its spread: a mark from P10 to P90 for every system, a dot in the middle.

use super::font::Weight;
use super::frame::Axis;
use super::label::{SMALL, Type};
use super::numbers::{Marks, money_unit};
use super::palette::{INK, MUTED, NAVY, WHITE};
use super::rows::{FromTo, RowSizes, Rows};
use super::scene::Scene;
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

const SIZES: RowSizes = RowSizes {
    row: 54.0,
    line: 18.0,
    left: 22.0,
};
const SPREAD: FromTo = FromTo {
    colour: NAVY,
    width: 5.0,
    across: 7.0,
    end_width: 2.4,
};

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
    let low = all().fold(f64::INFINITY, f64::min);
    let high = all().fold(f64::NEG_INFINITY, f64::max);
    let axis = format!("Cost of a year, {}", money_unit(&data.currency));
    let axis = Axis::linear(&axis, low, high, 7, marks);
    let count = data.systems.len();
    let rows = Rows::set(&mut scene, (title, subtitle), axis, count, &SIZES);
    for (i, system) in data.systems.iter().enumerate() {
        let small = Type::new(SMALL, Weight::Regular, MUTED);
        let spread = format!(
            "{} to {}, middle {}",
            marks.money(&data.currency, system.p10),
            marks.money(&data.currency, system.p90),
            marks.money(&data.currency, system.p50)
        );
        rows.label(&mut scene, i, &system.label, (&spread, small));
        let y = rows.line(i) + 20.0;
        rows.extent(&mut scene, (system.p10, system.p90), y, &SPREAD);
        scene.disc((rows.at(system.p50), y), 7.0, INK);
        scene.disc((rows.at(system.p50), y), 4.0, WHITE);
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
