//! How far each uncertain quantity moves the outcome: one line a lever, from its low end to its high end, on one axis.

use super::font::{self, Weight};
use super::frame::Axis;
use super::label::{Anchor, BODY, SMALL, Type};
use super::numbers::{Marks, money_unit};
use super::palette::{AXIS, Dash, GRID, INK, MUTED, NAVY, WHITE};
use super::scene::{MARGIN, Scene};
use super::{ChartError, Picture, finite, named};

const PICTURE: &str = "swings";

/// What is drawn.
#[derive(Debug, Clone, PartialEq)]
pub struct Swings {
    /// What moves, for example "Saving in a year of Air source, larger radiators".
    pub outcome: String,
    /// Currency code of the outcome.
    pub currency: String,
    /// The outcome with everything at its likely value.
    pub likely: f64,
    /// The levers; they are drawn with the longest swing first.
    pub levers: Vec<Swing>,
}

/// One lever.
#[derive(Debug, Clone, PartialEq)]
pub struct Swing {
    /// Name of the lever, for example "Electricity price".
    pub label: String,
    /// Its low end as it is to be written, for example "21 p/kWh".
    pub low_text: String,
    /// Its high end as it is to be written.
    pub high_text: String,
    /// Outcome with the lever at its low end.
    pub low: f64,
    /// Outcome with the lever at its high end.
    pub high: f64,
}

impl Swing {
    fn length(&self) -> f64 {
        (self.high - self.low).abs()
    }
}

const ROW: f64 = 50.0;
/// Room kept beside the axis for what the ends are.
const SIDE: f64 = 120.0;
const SIDE_NARROW: f64 = 62.0;

/// Draws the swings.
///
/// # Errors
/// [`ChartError::Empty`] without levers, [`ChartError::NotFinite`] for a value that is not a number.
pub fn swings(data: &Swings, marks: &Marks) -> Result<Picture, ChartError> {
    if data.levers.is_empty() {
        return Err(ChartError::Empty {
            picture: PICTURE,
            missing: "no lever was given",
        });
    }
    finite(PICTURE, [("likely outcome", data.likely)])?;
    for l in &data.levers {
        finite(
            PICTURE,
            [(l.label.as_str(), l.low), (l.label.as_str(), l.high)],
        )?;
    }
    let mut levers: Vec<&Swing> = data.levers.iter().collect();
    levers.sort_by(|a, b| b.length().total_cmp(&a.length()));

    let title = "What would change the answer";
    let outcome = font::fit(named(&data.outcome), SMALL, Weight::Regular, 420.0);
    let subtitle = format!("{outcome}, when one thing changes and all others stay as they are.");
    let mut scene = Scene::of(marks);
    let below = scene.heading(title, &subtitle);
    let top = draw_key(&mut scene, below) + 16.0;
    let bottom = top + ROW * levers.len() as f64 + 6.0;
    scene.height = bottom + 52.0;

    let values = || {
        levers
            .iter()
            .flat_map(|l| [l.low, l.high])
            .chain([data.likely, 0.0])
    };
    let low = values().fold(f64::INFINITY, f64::min);
    let high = values().fold(f64::NEG_INFINITY, f64::max);
    let axis = Axis::linear(
        &format!("Outcome, {}", money_unit(&data.currency)),
        low,
        high,
        if scene.narrow() { 4 } else { 6 },
        marks,
    );
    let side = if scene.narrow() { SIDE_NARROW } else { SIDE };
    let (left, right) = (MARGIN + side, scene.width - MARGIN - side);
    let at = |v: f64| left + (v - axis.low) / (axis.high - axis.low) * (right - left);

    for (value, text) in &axis.ticks {
        let x = at(*value);
        scene.line(&[(x, top), (x, bottom)], GRID, 1.0);
        scene.tick(text, (x, bottom + 18.0), Anchor::Middle);
    }
    scene.line(&[(left, bottom), (right, bottom)], AXIS, 1.2);
    scene.text(
        &axis.title,
        (right, bottom + 38.0),
        Anchor::End,
        Type::small(),
    );
    scene.line(&[(at(0.0), top), (at(0.0), bottom)], INK, 1.4);
    let likely = at(data.likely);
    scene.dashed(
        &[(likely, top - 2.0), (likely, bottom)],
        INK,
        1.6,
        Dash::Short,
    );
    let text = format!("likely {}", marks.money(&data.currency, data.likely));
    let set = Type::new(SMALL, Weight::Bold, INK);
    scene.plate(&text, (likely, top - 8.0), Anchor::Middle, set);

    for (i, lever) in levers.iter().enumerate() {
        draw_lever(&mut scene, lever, top + ROW * i as f64, &at);
    }
    Ok(Picture::new(title, alt(data, &levers, marks), scene))
}

fn draw_key(scene: &mut Scene, top: f64) -> f64 {
    let set = Type::new(SMALL, Weight::Regular, INK);
    let y = top + 9.0;
    let mut x = MARGIN + 6.0;
    for (open, text) in [(true, "at its low end"), (false, "at its high end")] {
        dot(scene, (x, y), open);
        scene.text(text, (x + 14.0, y + 4.6), Anchor::Start, set);
        x += 14.0 + set.width(text) + 28.0;
    }
    top + 22.0
}

/// The end of a swing: open where the lever is low, filled where it is high.
fn dot(scene: &mut Scene, at: (f64, f64), open: bool) {
    scene.disc(at, 6.4, NAVY);
    if open {
        scene.disc(at, 3.8, WHITE);
    }
}

fn draw_lever(scene: &mut Scene, lever: &Swing, row: f64, at: &dyn Fn(f64) -> f64) {
    let set = Type::new(BODY, Weight::Regular, INK);
    let name = font::fit(
        named(&lever.label),
        set.size,
        set.weight,
        scene.width - 2.0 * MARGIN,
    );
    scene.plate(&name, (MARGIN, row + 16.0), Anchor::Start, set);
    let y = row + 34.0;
    let (low, high) = (at(lever.low), at(lever.high));
    scene.line(&[(low, y), (high, y)], NAVY, 4.0);
    dot(scene, (low, y), true);
    dot(scene, (high, y), false);
    let small = Type::new(SMALL, Weight::Regular, MUTED);
    let write = |scene: &mut Scene, text: &str, x: f64, anchor: Anchor| {
        let room = if anchor == Anchor::End {
            x - 4.0
        } else {
            scene.width - 4.0 - x
        };
        let text = font::fit(text, small.size, small.weight, room);
        scene.plate(&text, (x, y + 4.6), anchor, small);
    };
    let (first, last) = if low <= high {
        ((low, &lever.low_text), (high, &lever.high_text))
    } else {
        ((high, &lever.high_text), (low, &lever.low_text))
    };
    write(scene, first.1, first.0 - 12.0, Anchor::End);
    write(scene, last.1, last.0 + 12.0, Anchor::Start);
}

fn alt(data: &Swings, levers: &[&Swing], marks: &Marks) -> String {
    let money = |v: f64| marks.money(&data.currency, v);
    let mut out = format!(
        "{}: likely {}. Moved by one lever at a time, the longest swing first.",
        named(&data.outcome),
        money(data.likely)
    );
    for l in levers {
        out += &format!(
            " {} from {} to {}: {} to {}.",
            named(&l.label),
            l.low_text,
            l.high_text,
            money(l.low),
            money(l.high)
        );
    }
    out
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn the_longest_swing_stands_first() {
        let swing = |label: &str, low, high| Swing {
            label: label.into(),
            low_text: "a".into(),
            high_text: "b".into(),
            low,
            high,
        };
        let data = Swings {
            outcome: "Saving".into(),
            currency: "GBP".into(),
            likely: 100.0,
            levers: vec![swing("short", 90.0, 110.0), swing("long", 300.0, -50.0)],
        };
        let picture = swings(&data, &Marks::default()).unwrap();
        let y = |text: &str| {
            picture
                .labels()
                .iter()
                .find(|l| l.text == text)
                .unwrap()
                .area
                .top
        };
        assert!(y("long") < y("short"));
        assert!(picture.alt.contains("long from a to b: £300 to −£50"));
    }
}
