//! The energy signature: metered fuel against outdoor temperature, with the line that was fitted.

use super::font::Weight;
use super::frame::{Axis, Frame, around};
use super::geometry::Rect;
use super::key::Swatch;
use super::label::{SMALL, Type};
use super::numbers::Marks;
use super::palette::{BROWN, CORAL, Dash, Hatch, INK, Mark, NAVY, Series, WHITE};
use super::scene::{MARGIN, Scene, width_of};
use super::{ChartError, Picture, finite};

const PICTURE: &str = "energy signature";

/// What is drawn.
#[derive(Debug, Clone, PartialEq)]
pub struct SignaturePlot {
    /// The metered intervals.
    pub points: Vec<MeterPoint>,
    /// Fuel without heating, kWh a day.
    pub base_load_kwh_per_day: f64,
    /// Fuel for each degree below the base temperature, kWh a day and kelvin.
    pub slope_kwh_per_k_day: f64,
    /// Outdoor temperature below which the home is heated, °C.
    pub base_temperature_c: f64,
    /// Heat-loss coefficient that follows, W/K.
    pub heat_loss_w_per_k: f64,
    /// Its 95 % limits.
    pub heat_loss_95: (f64, f64),
    /// Whether it is an effective coefficient, which holds how the sun goes with the cold.
    pub is_effective: bool,
}

/// One interval between two readings.
#[derive(Debug, Clone, PartialEq)]
pub struct MeterPoint {
    /// Mean outdoor temperature, °C.
    pub outdoor_c: f64,
    /// Fuel a day, kWh.
    pub kwh_per_day: f64,
    /// What it is called, for example "2023-01-03 to 2023-02-02".
    pub name: String,
    /// Whether it is too far off the line for chance.
    pub odd: bool,
}

const PLOT: f64 = 390.0;
/// The line is carried this far beyond the coldest and the mildest point, K.
const BEYOND_K: f64 = 2.0;
const USUAL: Series = Series {
    colour: NAVY,
    hatch: Hatch::Plain,
    dash: Dash::Solid,
    mark: Mark::Circle,
};
const ODD: Series = Series {
    colour: CORAL,
    hatch: Hatch::Plain,
    dash: Dash::Solid,
    mark: Mark::Square,
};

/// Draws the signature.
///
/// # Errors
/// [`ChartError::Empty`] without a point, [`ChartError::NotFinite`] for a value that is not a number.
pub fn signature_plot(data: &SignaturePlot, marks: &Marks) -> Result<Picture, ChartError> {
    check(data)?;
    let title = "What the meter says about the home";
    let subtitle = format!(
        "{} {}\u{a0}W/K, with 95\u{a0}% confidence {} to {}\u{a0}W/K.",
        if data.is_effective {
            "Effective loss, sun and all,"
        } else {
            "Heat loss of the home’s own model"
        },
        marks.number(data.heat_loss_w_per_k, 0),
        marks.number(data.heat_loss_95.0, 0),
        marks.number(data.heat_loss_95.1, 0)
    );
    let mut scene = Scene::of(marks);
    let below = scene.heading(title, &subtitle);
    let mut entries = vec![
        (Swatch::Point(USUAL), "between two readings"),
        (Swatch::Line(BROWN, Dash::Solid, 2.8), "straight fit"),
    ];
    if data.points.iter().any(|point| point.odd) {
        entries.insert(1, (Swatch::Point(ODD), "odd, kept in the fit"));
    }
    let top = scene.key(&entries, MARGIN, below, scene.width - 2.0 * MARGIN);
    scene.height = top + PLOT + 6.0;
    let ends = ends(data);
    let frame = frame(data, top, ends, marks);
    frame.draw(&mut scene);
    frame.upright(&mut scene, data.base_temperature_c, INK, Dash::Dotted);
    let line = [
        ends.0,
        data.base_temperature_c.clamp(ends.0, ends.1),
        ends.1,
    ]
    .map(|c| (c, fitted(data, c)));
    frame.cased(&mut scene, &line, BROWN, 2.8, Dash::Solid);
    for point in &data.points {
        let at = frame.at(point.outdoor_c, point.kwh_per_day);
        scene.disc(at, 7.0, WHITE);
        scene.mark(at, 5.4, if point.odd { ODD } else { USUAL });
    }
    let set = Type::new(SMALL, Weight::Regular, INK);
    for point in data.points.iter().filter(|point| point.odd) {
        let (x, y) = frame.at(point.outdoor_c, point.kwh_per_day);
        scene.place_for(&frame.area, (x, y), &point.name, &around(x, y, 11.0), set);
    }
    let strong = Type::new(SMALL + 1.0, Weight::Bold, INK);
    let text = format!(
        "base temperature {}\u{a0}°C",
        marks.number(data.base_temperature_c, 1)
    );
    let (x, y) = (frame.at_x(data.base_temperature_c), frame.area.top + 18.0);
    scene.place_for(&frame.area, (x, y), &text, &around(x, y, 8.0), strong);
    Ok(Picture::new(title, alt(data, marks), scene))
}

fn check(data: &SignaturePlot) -> Result<(), ChartError> {
    if data.points.is_empty() {
        return Err(ChartError::Empty {
            picture: PICTURE,
            missing: "no interval was given",
        });
    }
    for point in &data.points {
        finite(
            PICTURE,
            [
                ("outdoor temperature", point.outdoor_c),
                ("fuel", point.kwh_per_day),
            ],
        )?;
    }
    finite(
        PICTURE,
        [
            ("base load", data.base_load_kwh_per_day),
            ("slope", data.slope_kwh_per_k_day),
            ("base temperature", data.base_temperature_c),
            ("heat loss", data.heat_loss_w_per_k),
            ("lower limit", data.heat_loss_95.0),
            ("upper limit", data.heat_loss_95.1),
        ],
    )
}

fn fitted(data: &SignaturePlot, outdoor_c: f64) -> f64 {
    data.base_load_kwh_per_day
        + data.slope_kwh_per_k_day * (data.base_temperature_c - outdoor_c).max(0.0)
}

/// Coldest and mildest outdoor temperature of the line, °C.
fn ends(data: &SignaturePlot) -> (f64, f64) {
    let outdoor = data.points.iter().map(|point| point.outdoor_c);
    let low = outdoor.clone().fold(f64::INFINITY, f64::min);
    let high = outdoor.fold(data.base_temperature_c, f64::max);
    (low - BEYOND_K, high + BEYOND_K)
}

fn frame(data: &SignaturePlot, top: f64, ends: (f64, f64), marks: &Marks) -> Frame {
    let high = data
        .points
        .iter()
        .map(|point| point.kwh_per_day)
        .fold(fitted(data, ends.0), f64::max);
    let outer = Rect {
        left: MARGIN,
        top,
        right: width_of(marks) - MARGIN,
        bottom: top + PLOT,
    };
    Frame::inside(
        outer,
        Axis::linear("Mean outdoor temperature, °C", ends.0, ends.1, 7, marks),
        Axis::linear(
            "Fuel, kWh a day",
            0.0,
            if high > 0.0 { high } else { 1.0 },
            6,
            marks,
        ),
    )
}

fn alt(data: &SignaturePlot, marks: &Marks) -> String {
    let mut out = format!(
        "Metered fuel a day against mean outdoor temperature, {}. Below a base temperature of {} °C fuel rises by {} kWh a day for \
         each degree; above it {} kWh a day are used. The heat loss is {} W/K.",
        marks.count(data.points.len(), "interval"),
        marks.number(data.base_temperature_c, 1),
        marks.number(data.slope_kwh_per_k_day, 1),
        marks.number(data.base_load_kwh_per_day, 1),
        marks.number(data.heat_loss_w_per_k, 0)
    );
    let odd: Vec<_> = data
        .points
        .iter()
        .filter(|point| point.odd)
        .map(|point| point.name.as_str())
        .collect();
    if !odd.is_empty() {
        out += &format!(" Too far off for chance: {}.", odd.join(", "));
    }
    out
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn odd_intervals_are_named_and_nothing_is_drawn_from_nothing() {
        let point = |outdoor_c: f64, kwh_per_day, odd| MeterPoint {
            outdoor_c,
            kwh_per_day,
            name: "2023-04-01 to 2023-05-01".into(),
            odd,
        };
        let mut data = SignaturePlot {
            points: vec![
                point(4.0, 70.0, false),
                point(9.0, 90.0, true),
                point(17.0, 9.0, false),
            ],
            base_load_kwh_per_day: 8.0,
            slope_kwh_per_k_day: 6.0,
            base_temperature_c: 15.0,
            heat_loss_w_per_k: 205.0,
            heat_loss_95: (180.0, 230.0),
            is_effective: false,
        };
        let picture = signature_plot(&data, &Marks::default()).unwrap();
        assert!(
            picture
                .labels()
                .iter()
                .any(|label| label.text.contains("2023-04-01"))
        );
        assert!(picture.alt.contains("Too far off"));
        data.points.clear();
        assert!(matches!(
            signature_plot(&data, &Marks::default()),
            Err(ChartError::Empty { .. })
        ));
    }
}
