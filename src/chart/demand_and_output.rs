//! Heat demand of every hour against outdoor temperature, with what the machine can give and the balance point.

use super::frame::{Axis, Frame, around};
use super::geometry::Rect;
use super::key::Swatch;
use super::label::{Anchor, SMALL, Type};
use super::numbers::Marks;
use super::palette::{BROWN, Dash, INK, OCHRE};
use super::scene::{MARGIN, Scene, width_of};
use super::{ChartError, Picture, cloud, finite, font::Weight, named, sentence};

const PICTURE: &str = "demand and output";

/// What is drawn.
#[derive(Debug, Clone, PartialEq)]
pub struct DemandAndOutput {
    /// Name of the system.
    pub system: String,
    /// Each hour: outdoor temperature in °C and heat demand in kW.
    pub hours: Vec<(f64, f64)>,
    /// Greatest output: source or outdoor temperature in °C and kW, rising in temperature.
    pub greatest_output: Vec<(f64, f64)>,
    /// Least output without cycling, when there is one.
    pub least_output: Vec<(f64, f64)>,
    /// Outdoor temperature below which the machine alone is not enough, if it ever is not.
    pub balance_point_c: Option<f64>,
    /// Design condition: outdoor temperature in °C and heat load in kW.
    pub design: Option<(f64, f64)>,
}

const PLOT: f64 = 390.0;

/// Draws demand and output.
///
/// # Errors
/// [`ChartError::Empty`] without hours, [`ChartError::NotFinite`] for a value that is not a number.
pub fn demand_and_output(data: &DemandAndOutput, marks: &Marks) -> Result<Picture, ChartError> {
    if data.hours.is_empty() {
        return Err(ChartError::Empty {
            picture: PICTURE,
            missing: "no hour was given",
        });
    }
    for &(t, kw) in data
        .hours
        .iter()
        .chain(&data.greatest_output)
        .chain(&data.least_output)
        .chain(&data.design)
    {
        finite(PICTURE, [("temperature", t), ("heat", kw)])?;
    }
    finite(PICTURE, data.balance_point_c.map(|t| ("balance point", t)))?;

    let title = "Heat demand and what the machine can give";
    let above = data.hours.iter().filter(|h| short(data, h.0, h.1)).count();
    let subtitle = format!(
        "{} Each cell counts hours of the year.",
        sentence(&data.system, 320.0)
    );
    let mut scene = Scene::of(marks);
    let top = scene.heading(title, &subtitle);
    // The shades follow from the plot, which stands below the key: the room is kept for a key with every shade.
    let plot_top = draw_key(&mut scene.clone(), data, cloud::ALL, top);
    scene.height = plot_top + PLOT + 6.0;
    let frame = frame(data, plot_top, marks);
    frame.draw(&mut scene);
    let highest = cloud::draw(&mut scene, &frame, &data.hours);
    draw_key(&mut scene, data, highest, top);
    frame.cased(&mut scene, &data.greatest_output, BROWN, 3.0, Dash::Solid);
    frame.cased(&mut scene, &data.least_output, BROWN, 2.2, Dash::Short);
    let strong = Type::new(SMALL + 1.0, Weight::Bold, INK);
    if let Some(balance) = data.balance_point_c {
        frame.upright(&mut scene, balance, INK, Dash::Dotted);
        let text = format!("balance point {}\u{a0}°C", marks.number(balance, 1));
        let x = frame.at_x(balance);
        let y = frame.area.top + 18.0;
        scene.place(
            &frame.area,
            &text,
            &[((x + 7.0, y), Anchor::Start), ((x - 7.0, y), Anchor::End)],
            strong,
        );
        if let Some(kw) = at(&data.greatest_output, balance) {
            let centre = frame.at(balance, kw);
            scene.disc(centre, 6.5, INK);
            scene.disc(centre, 3.6, super::palette::WHITE);
        }
    }
    if let Some((t, kw)) = data.design {
        let (x, y) = frame.at(t, kw);
        let look = super::palette::Series {
            colour: OCHRE,
            hatch: super::palette::Hatch::Plain,
            dash: Dash::Solid,
            mark: super::palette::Mark::Diamond,
        };
        scene.disc((x, y), 8.5, super::palette::WHITE);
        scene.mark((x, y), 6.0, look);
        let text = format!(
            "design {}\u{a0}kW at {}\u{a0}°C",
            marks.number(kw, 1),
            marks.number(t, 1)
        );
        let mut places = vec![
            ((x - 12.0, y + 20.0), Anchor::End),
            ((x, y + 28.0), Anchor::Middle),
        ];
        places.extend(around(x, y, 12.0));
        scene.place_for(
            &frame.area,
            (x, y),
            &text,
            &places,
            Type::new(SMALL, Weight::Regular, INK),
        );
    }
    Ok(Picture::new(title, alt(data, above, marks), scene))
}

fn draw_key(scene: &mut Scene, data: &DemandAndOutput, highest: usize, top: f64) -> f64 {
    let mut entries: Vec<(Swatch, String)> = cloud::key(highest);
    if !data.greatest_output.is_empty() {
        entries.push((
            Swatch::Line(BROWN, Dash::Solid, 3.0),
            "greatest output".into(),
        ));
    }
    if !data.least_output.is_empty() {
        entries.push((Swatch::Line(BROWN, Dash::Short, 2.2), "least output".into()));
    }
    scene.key(&entries, MARGIN, top, scene.width - 2.0 * MARGIN)
}

fn frame(data: &DemandAndOutput, top: f64, marks: &Marks) -> Frame {
    let temperatures = || {
        data.hours
            .iter()
            .map(|h| h.0)
            .chain(data.design.map(|d| d.0))
    };
    let low = temperatures().fold(f64::INFINITY, f64::min);
    let high = temperatures().fold(f64::NEG_INFINITY, f64::max);
    let kw = data
        .hours
        .iter()
        .chain(&data.design)
        .chain(
            data.greatest_output
                .iter()
                .filter(|o| o.0 >= low && o.0 <= high),
        )
        .map(|h| h.1)
        .fold(0.0, f64::max);
    let x = Axis::linear("Outdoor temperature, °C", low, high, 7, marks);
    let y = Axis::linear("Heat, kW", 0.0, if kw > 0.0 { kw } else { 1.0 }, 6, marks);
    let outer = Rect {
        left: MARGIN,
        top,
        right: width_of(marks) - MARGIN,
        bottom: top + PLOT,
    };
    Frame::inside(outer, x, y)
}

/// The value of a curve at `x`, between its points; none outside.
fn at(curve: &[(f64, f64)], x: f64) -> Option<f64> {
    curve.windows(2).find_map(|p| {
        let ((x0, y0), (x1, y1)) = (p[0], p[1]);
        (x0 <= x && x <= x1 && x1 > x0).then(|| y0 + (y1 - y0) * (x - x0) / (x1 - x0))
    })
}

fn short(data: &DemandAndOutput, t: f64, kw: f64) -> bool {
    at(&data.greatest_output, t).is_some_and(|output| kw > output)
}

fn alt(data: &DemandAndOutput, above: usize, marks: &Marks) -> String {
    let peak = data.hours.iter().map(|h| h.1).fold(0.0, f64::max);
    let coldest = data.hours.iter().map(|h| h.0).fold(f64::INFINITY, f64::min);
    let mut out = format!(
        "Heat demand of {} against outdoor temperature for {}. Demand rises to {} kW; the coldest hour is {} °C.",
        marks.count(data.hours.len(), "hour"),
        named(&data.system),
        marks.number(peak, 1),
        marks.number(coldest, 1)
    );
    match data.balance_point_c {
        Some(t) => out += &format!(" The balance point is {} °C.", marks.number(t, 1)),
        None => out += " The machine is enough at every temperature shown.",
    }
    if !data.greatest_output.is_empty() {
        let share = above as f64 / data.hours.len() as f64 * 100.0;
        out += &format!(
            " In {}, {} % of all, demand is above the machine’s greatest output.",
            marks.count(above, "hour"),
            marks.number(share, 1)
        );
    }
    out
}

#[cfg(test)]
mod tests {
    use super::*;

    fn data() -> DemandAndOutput {
        DemandAndOutput {
            system: "Air source".into(),
            hours: (0..100)
                .map(|i| {
                    (
                        f64::from(i) / 4.0 - 9.0,
                        (16.0 - f64::from(i) / 4.0 + 9.0) * 0.2,
                    )
                })
                .collect(),
            greatest_output: vec![(-15.0, 3.0), (20.0, 8.0)],
            least_output: vec![],
            balance_point_c: Some(-1.3),
            design: None,
        }
    }

    #[test]
    fn the_balance_point_is_written_and_hours_above_are_counted() {
        let picture = demand_and_output(&data(), &Marks::default()).unwrap();
        assert!(
            picture
                .labels()
                .iter()
                .any(|l| l.text == "balance point −1.3\u{a0}°C")
        );
        // Demand 0.2·(16 − t) above 3 + (t + 15)/7 where t < −5.667: of −9, −8.75 … that is 14 hours.
        assert!(
            picture.alt.contains("In 14 hours, 14.0 % of all"),
            "{}",
            picture.alt
        );
    }

    #[test]
    fn curve_values_lie_between_points_and_nowhere_else() {
        let curve = [(0.0, 1.0), (10.0, 3.0)];
        assert_eq!(at(&curve, 5.0), Some(2.0));
        assert_eq!(at(&curve, 10.5), None);
    }

    #[test]
    fn no_hours_and_bad_numbers_are_refused() {
        let mut bad = data();
        bad.hours[3].1 = f64::NAN;
        assert!(demand_and_output(&bad, &Marks::default()).is_err());
        bad.hours.clear();
        assert!(matches!(
            demand_and_output(&bad, &Marks::default()),
            Err(ChartError::Empty { .. })
        ));
    }
}
