//! An outcome along one lever, with the zero line and the place where it is crossed.

use super::ends::{self, End};
use super::font::{self, Weight};
use super::frame::{Axis, Frame, around};
use super::geometry::Rect;
use super::label::{Anchor, SMALL, Type};
use super::numbers::{Marks, money_unit};
use super::palette::{Dash, INK, WHITE, series};
use super::scene::{MARGIN, Scene};
use super::{ChartError, Picture, finite, named};

const PICTURE: &str = "break-even";

/// What is drawn.
#[derive(Debug, Clone, PartialEq)]
pub struct BreakEven {
    /// The lever, for example "Electricity price".
    pub lever: String,
    /// Its unit, for example "p/kWh".
    pub unit: String,
    /// What is drawn against it, for example "Saving in a year".
    pub outcome: String,
    /// Currency code of the outcome.
    pub currency: String,
    /// One line a choice.
    pub lines: Vec<BreakEvenLine>,
    /// The lever as it is now.
    pub now: Option<f64>,
}

/// One line.
#[derive(Debug, Clone, PartialEq)]
pub struct BreakEvenLine {
    /// Name of the choice.
    pub label: String,
    /// Lever and outcome, rising in the lever.
    pub points: Vec<(f64, f64)>,
    /// Values of the lever at which the outcome is nothing.
    pub crossings: Vec<f64>,
}

const PLOT: f64 = 370.0;
const RIGHT: f64 = 170.0;

/// Draws the line or lines.
///
/// # Errors
/// [`ChartError::Empty`] without points, [`ChartError::NotFinite`] for a value that is not a number.
pub fn break_even(data: &BreakEven, marks: &Marks) -> Result<Picture, ChartError> {
    if data.lines.iter().all(|l| l.points.is_empty()) {
        return Err(ChartError::Empty {
            picture: PICTURE,
            missing: "no line has a point",
        });
    }
    for line in &data.lines {
        for &(x, y) in &line.points {
            finite(
                PICTURE,
                [(data.lever.as_str(), x), (line.label.as_str(), y)],
            )?;
        }
        finite(PICTURE, line.crossings.iter().map(|c| ("crossing", *c)))?;
    }
    finite(PICTURE, data.now.map(|n| (data.lever.as_str(), n)))?;

    let outcome = font::fit(named(&data.outcome), 19.0, Weight::Bold, 420.0);
    let title = format!("{outcome}: where it breaks even");
    let lever = font::fit(named(&data.lever), SMALL, Weight::Regular, 330.0);
    let subtitle = format!(
        "Against {} alone; all else stays as it is.",
        lower_first(&lever)
    );
    let mut scene = Scene::of(marks);
    let top = scene.heading(&title, &subtitle);
    scene.height = top + PLOT + 6.0;

    let all = || data.lines.iter().flat_map(|l| l.points.iter().copied());
    let ends = |values: &mut dyn Iterator<Item = f64>| {
        values.fold((f64::INFINITY, f64::NEG_INFINITY), |(l, h), v| {
            (l.min(v), h.max(v))
        })
    };
    let x = ends(&mut all().map(|p| p.0).chain(data.now));
    let y = ends(&mut all().map(|p| p.1).chain([0.0]));
    let frame = Frame::inside(
        Rect {
            left: MARGIN,
            top,
            right: scene.width - MARGIN - scene.aside(RIGHT) + 12.0,
            bottom: top + PLOT,
        },
        Axis::tight(&format!("{lever}, {}", data.unit), x.0, x.1, 6, marks),
        Axis::linear(
            &format!("{outcome}, {}", money_unit(&data.currency)),
            y.0,
            y.1,
            6,
            marks,
        ),
    );
    frame.draw(&mut scene);
    frame.level(&mut scene, 0.0, INK, Dash::Solid);
    if let Some(now) = data.now {
        frame.upright(&mut scene, now, INK, Dash::Dotted);
    }
    let mut names = Vec::new();
    for (i, line) in data.lines.iter().enumerate() {
        let look = series(i);
        frame.line(&mut scene, &line.points, look.colour, 2.8, look.dash);
        if let Some(last) = line.points.last() {
            names.push(End {
                at: frame.at(last.0, last.1),
                text: named(&line.label).into(),
                colour: look.colour,
                bold: false,
            });
        }
    }
    let room = scene.aside(RIGHT);
    ends::draw(&mut scene, &frame, &names, room);
    draw_crossings(&mut scene, &frame, data, marks);
    Ok(Picture::new(&title, alt(data, marks), scene))
}

fn draw_crossings(scene: &mut Scene, frame: &Frame, data: &BreakEven, marks: &Marks) {
    let digits = digits(frame);
    let strong = Type::new(SMALL, Weight::Bold, INK);
    if let Some(now) = data.now {
        let x = frame.at_x(now);
        let text = format!("now {}", marks.number(now, digits));
        let y = frame.area.top + 16.0;
        let lower = frame.area.bottom - 8.0;
        let places = [
            ((x + 7.0, y), Anchor::Start),
            ((x - 7.0, y), Anchor::End),
            ((x + 7.0, lower), Anchor::Start),
            ((x - 7.0, lower), Anchor::End),
        ];
        scene.place(&frame.area, &text, &places, strong);
    }
    for crossing in data.lines.iter().flat_map(|l| &l.crossings) {
        if *crossing < frame.x.low || *crossing > frame.x.high {
            continue;
        }
        let (x, y) = frame.at(*crossing, 0.0);
        scene.disc((x, y), 6.5, INK);
        scene.disc((x, y), 3.6, WHITE);
        let unit = font::fit(&data.unit, SMALL, Weight::Bold, 90.0);
        let text = format!("{}\u{a0}{unit}", marks.number(*crossing, digits));
        scene.place_for(&frame.area, (x, y), &text, &around(x, y, 11.0), strong);
    }
}

/// Decimals that tell a crossing from its neighbours: one more than the ticks have.
fn digits(frame: &Frame) -> usize {
    let step = match frame.x.ticks.as_slice() {
        [a, b, ..] => b.0 - a.0,
        _ => 1.0,
    };
    (1.0 - step.log10().floor()).clamp(0.0, 6.0) as usize
}

/// The first letter in lower case, as a name stands in a sentence.
fn lower_first(text: &str) -> String {
    let mut chars = text.chars();
    let second_is_lower = text.chars().nth(1).is_some_and(char::is_lowercase);
    match chars.next() {
        Some(first) if second_is_lower => first.to_lowercase().chain(chars).collect(),
        _ => text.to_string(),
    }
}

fn alt(data: &BreakEven, marks: &Marks) -> String {
    let money = |v: f64| marks.money(&data.currency, v);
    let mut out = format!(
        "{} against {}.",
        named(&data.outcome),
        lower_first(named(&data.lever))
    );
    if let Some(now) = data.now {
        out += &format!(" It is now {} {}.", marks.number(now, 2), data.unit);
    }
    for line in &data.lines {
        let (Some(first), Some(last)) = (line.points.first(), line.points.last()) else {
            continue;
        };
        out += &format!(
            " {}: from {} at {} to {} at {} {};",
            named(&line.label),
            money(first.1),
            marks.number(first.0, 1),
            money(last.1),
            marks.number(last.0, 1),
            data.unit
        );
        let crossings: Vec<String> = line.crossings.iter().map(|c| marks.number(*c, 2)).collect();
        out += &if crossings.is_empty() {
            " it does not break even in this range.".into()
        } else {
            format!(
                " it breaks even at {} {}.",
                super::numbers::list(&crossings),
                data.unit
            )
        };
    }
    out
}

#[cfg(test)]
mod tests {
    use super::*;

    fn data(crossings: Vec<f64>) -> BreakEven {
        BreakEven {
            lever: "Electricity price".into(),
            unit: "p/kWh".into(),
            outcome: "Saving in a year".into(),
            currency: "GBP".into(),
            lines: vec![BreakEvenLine {
                label: "Air".into(),
                points: vec![(15.0, 400.0), (35.0, -300.0)],
                crossings,
            }],
            now: Some(24.5),
        }
    }

    #[test]
    fn the_crossing_is_written_at_the_zero_line() {
        let picture = break_even(&data(vec![26.43]), &Marks::default()).unwrap();
        assert!(picture.labels().iter().any(|l| l.text == "26.4\u{a0}p/kWh"));
        assert!(picture.labels().iter().any(|l| l.text == "now 24.5"));
    }

    #[test]
    fn no_crossing_is_said() {
        let picture = break_even(&data(vec![]), &Marks::default()).unwrap();
        assert!(picture.alt.contains("does not break even in this range"));
    }

    #[test]
    fn an_abbreviation_keeps_its_capitals() {
        assert_eq!(lower_first("COP"), "COP");
        assert_eq!(lower_first("Gas price"), "gas price");
    }
}
