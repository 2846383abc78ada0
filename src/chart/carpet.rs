//! A year as a carpet: one column a day, one row an hour, shaded by a quantity such as outdoor temperature.

use super::frame::{Axis, Frame};
use super::geometry::Rect;
use super::label::{Anchor, SMALL, Type};
use super::numbers::{self, Marks};
use super::palette::{AXIS, INK};
use super::ramp;
use super::scene::{MARGIN, Scene};
use super::{ChartError, Picture, finite, font, font::Weight};

const PICTURE: &str = "carpet of the year";

/// What is drawn.
#[derive(Debug, Clone, PartialEq)]
pub struct Carpet {
    /// Title of the picture, for example "Outdoor temperature of the year".
    pub title: String,
    /// What is shaded, for example "Outdoor temperature".
    pub quantity: String,
    /// Its unit, for example "°C".
    pub unit: String,
    /// The hours in order, the first at midnight of the home's clock; none where one is missing.
    pub hours: Vec<Option<f64>>,
    /// Days from the first at which a month begins, with its short name.
    pub months: Vec<(f64, String)>,
    /// A stretch of days to be marked.
    pub spell: Option<Spell>,
}

/// Days that are marked.
#[derive(Debug, Clone, PartialEq)]
pub struct Spell {
    /// First day, counted from 0.
    pub first_day: usize,
    /// Number of days.
    pub days: usize,
    /// What they are, for example "coldest three days, −6.3 °C on average".
    pub label: String,
}

const PLOT: f64 = 250.0;
/// Shades that are told apart.
const SHADES: usize = 20;
const KEY: f64 = 260.0;

/// Draws a carpet.
///
/// # Errors
/// [`ChartError::Empty`] without a single value, [`ChartError::NotFinite`] for a value that is not a number.
pub fn carpet(data: &Carpet, marks: &Marks) -> Result<Picture, ChartError> {
    finite(
        PICTURE,
        data.hours
            .iter()
            .flatten()
            .map(|v| (data.quantity.as_str(), *v)),
    )?;
    let values = || data.hours.iter().flatten().copied();
    if values().next().is_none() {
        return Err(ChartError::Empty {
            picture: PICTURE,
            missing: "no hour has a value",
        });
    }
    let low = values().fold(f64::INFINITY, f64::min);
    let high = values().fold(f64::NEG_INFINITY, f64::max);
    let scale = numbers::ticks(low, high, 5);
    let ends = (scale.values[0], scale.values[scale.values.len() - 1]);
    let share = |v: f64| (v - ends.0) / (ends.1 - ends.0);

    let mut scene = Scene::of(marks);
    let missing = data.hours.iter().filter(|h| h.is_none()).count();
    let mut subtitle = format!("{}, one column a day, one row an hour.", data.quantity);
    if missing > 0 {
        subtitle += &format!(" White: {} without a value.", marks.count(missing, "hour"));
    }
    let below = scene.heading(&data.title, &subtitle);
    let key_bottom = draw_key(&mut scene, data, &scale, below, marks);
    let spell_room = if data.spell.is_some() { 20.0 } else { 0.0 };
    let top = key_bottom + spell_room;
    scene.height = top + PLOT + 6.0;

    let days = data.hours.len().div_ceil(24);
    let frame = frame(data, days, top, scene.width);
    frame.draw_y(&mut scene);
    draw_cells(&mut scene, &frame, data, &share);
    draw_months(&mut scene, &frame, data, days);
    frame.border(&mut scene);
    draw_spell(&mut scene, &frame, data, days);
    let alt = alt(data, days, (low, high), missing, marks);
    Ok(Picture::new(&data.title, alt, scene))
}

/// A strip of the scale with its ticks; gives back the y below it.
fn draw_key(
    scene: &mut Scene,
    data: &Carpet,
    scale: &numbers::Ticks,
    top: f64,
    marks: &Marks,
) -> f64 {
    let steps = 48;
    let wide = KEY / f64::from(steps);
    for i in 0..steps {
        let left = MARGIN + 10.0 + f64::from(i) * wide;
        let cell = Rect {
            left,
            top,
            right: left + wide,
            bottom: top + 14.0,
        };
        scene.area(
            &cell.corners(),
            ramp::colour((f64::from(i) + 0.5) / f64::from(steps)),
            1.0,
        );
    }
    let (low, high) = (scale.values[0], scale.values[scale.values.len() - 1]);
    for value in &scale.values {
        let x = MARGIN + 10.0 + KEY * (value - low) / (high - low);
        scene.line(&[(x, top + 14.0), (x, top + 18.0)], AXIS, 1.0);
        let text = marks.number(*value, scale.decimals);
        scene.tick(&text, (x, top + 32.0), Anchor::Middle);
    }
    let unit = font::fit(&data.unit, SMALL, Weight::Regular, 240.0);
    scene.text(
        &unit,
        (MARGIN + 10.0 + KEY + 12.0, top + 12.0),
        Anchor::Start,
        Type::small(),
    );
    top + 40.0
}

fn frame(data: &Carpet, days: usize, top: f64, width: f64) -> Frame {
    let hours = [0, 6, 12, 18, 24].map(|h| (f64::from(h), format!("{h:02}:00")));
    let outer = Rect {
        left: MARGIN,
        top,
        right: width - MARGIN,
        bottom: top + PLOT,
    };
    let mut frame = Frame::inside(
        outer,
        Axis::named("", 0.0, days as f64, data.months.clone()),
        Axis::named("Hour", 0.0, 24.0, hours.to_vec()),
    );
    frame.area.bottom += 18.0;
    frame
}

fn draw_cells(scene: &mut Scene, frame: &Frame, data: &Carpet, share: &dyn Fn(f64) -> f64) {
    let shade = |v: f64| ((share(v) * SHADES as f64).floor().max(0.0) as usize).min(SHADES - 1);
    let look = |s: usize| ramp::colour((s as f64 + 0.5) / SHADES as f64);
    for (day, hours) in data.hours.chunks(24).enumerate() {
        let (left, right) = (frame.at_x(day as f64), frame.at_x(day as f64 + 1.0));
        // Hours of one shade, one after the other, are one piece: a day has far fewer pieces than hours.
        let mut start = 0;
        for piece in hours.chunk_by(|a, b| a.map(shade) == b.map(shade)) {
            let end = start + piece.len();
            if let Some(value) = piece[0] {
                let cell = Rect {
                    left,
                    right,
                    top: frame.at_y(end as f64),
                    bottom: frame.at_y(start as f64),
                };
                scene.area(&cell.corners(), look(shade(value)), 1.0);
            }
            start = end;
        }
    }
}

fn draw_months(scene: &mut Scene, frame: &Frame, data: &Carpet, days: usize) {
    let bottom = frame.area.bottom;
    for (i, (start, name)) in data.months.iter().enumerate() {
        if !(0.0..=days as f64).contains(start) {
            continue;
        }
        let end = data
            .months
            .get(i + 1)
            .map_or(days as f64, |m| m.0)
            .min(days as f64);
        let x = frame.at_x(*start);
        scene.line(&[(x, bottom), (x, bottom + 5.0)], AXIS, 1.2);
        let middle = (x + frame.at_x(end)) / 2.0;
        let name = if scene.narrow() {
            name.chars().next().map_or(String::new(), String::from)
        } else {
            name.clone()
        };
        let name = font::fit(
            &name,
            SMALL,
            Weight::Regular,
            (frame.at_x(end) - x - 3.0).max(14.0),
        );
        scene.tick(&name, (middle, bottom + 18.0), Anchor::Middle);
    }
}

fn draw_spell(scene: &mut Scene, frame: &Frame, data: &Carpet, days: usize) {
    let Some(spell) = &data.spell else { return };
    let first = spell.first_day.min(days) as f64;
    let last = (spell.first_day + spell.days).min(days) as f64;
    if last <= first {
        return;
    }
    // Brackets above and below, so that the days themselves stay in sight.
    let area = frame.area;
    let (left, right) = (frame.at_x(first), frame.at_x(last));
    for (edge, tip) in [(area.top - 5.0, 4.0), (area.bottom + 5.0, -4.0)] {
        let bracket = [
            (left, edge + tip),
            (left, edge),
            (right, edge),
            (right, edge + tip),
        ];
        scene.line(&bracket, INK, 2.4);
    }
    let set = Type::new(SMALL, Weight::Bold, INK);
    let clear = area.left;
    let text = font::fit(&spell.label, set.size, set.weight, area.right - clear);
    let wide = set.width(&text);
    let x = if right + wide + 8.0 <= area.right {
        (right + 8.0).max(clear)
    } else {
        (left - 8.0 - wide).max(clear).min(area.right - wide)
    };
    scene.text(&text, (x, area.top - 11.0), Anchor::Start, set);
}

fn alt(data: &Carpet, days: usize, ends: (f64, f64), missing: usize, marks: &Marks) -> String {
    let unit = &data.unit;
    let mut out = format!(
        "Heat map of {} over {} and 24 hours of the day, from {} to {} {unit}.",
        data.quantity.to_lowercase(),
        marks.count(days, "day"),
        marks.number(ends.0, 1),
        marks.number(ends.1, 1)
    );
    if missing > 0 {
        out += &format!(" Without a value: {}.", marks.count(missing, "hour"));
    }
    if let Some(spell) = &data.spell {
        out += &format!(" Marked: {}.", spell.label.trim_end_matches('.'));
    }
    out
}

/// The months of a year from 1 January with English short names, in days from the first.
pub fn calendar_months(leap: bool) -> Vec<(f64, String)> {
    let lengths = [
        31,
        if leap { 29 } else { 28 },
        31,
        30,
        31,
        30,
        31,
        31,
        30,
        31,
        30,
        31,
    ];
    let names = [
        "Jan", "Feb", "Mar", "Apr", "May", "Jun", "Jul", "Aug", "Sep", "Oct", "Nov", "Dec",
    ];
    let mut start = 0;
    lengths
        .into_iter()
        .zip(names)
        .map(|(length, name)| {
            let first = f64::from(start);
            start += length;
            (first, name.to_string())
        })
        .collect()
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn months_begin_where_the_calendar_says() {
        // 1 March is the 60th day of a common year and the 61st of a leap year (ISO 8601 ordinal dates).
        assert_eq!(calendar_months(false)[2], (59.0, "Mar".into()));
        assert_eq!(calendar_months(true)[2], (60.0, "Mar".into()));
        assert_eq!(calendar_months(true)[11].0, 335.0);
    }

    #[test]
    fn missing_hours_are_counted_and_all_missing_is_refused() {
        let mut data = Carpet {
            title: "Outdoor temperature".into(),
            quantity: "Outdoor temperature".into(),
            unit: "°C".into(),
            hours: vec![Some(1.0), None, Some(3.0)],
            months: vec![],
            spell: None,
        };
        let picture = carpet(&data, &Marks::default()).unwrap();
        assert!(
            picture.alt.contains("Without a value: 1 hour."),
            "{}",
            picture.alt
        );
        data.hours = vec![None; 48];
        assert!(matches!(
            carpet(&data, &Marks::default()),
            Err(ChartError::Empty { .. })
        ));
    }
}
