//! Bars of several systems, one below the other, each split into parts, with the whole and a remark at the right.

use super::font::{self, Weight};
use super::frame::Axis;
use super::geometry::{Point, Rect};
use super::key::Swatch;
use super::label::{Anchor, BODY, SMALL, Type};
use super::palette::{AXIS, Colour, Dash, GRID, Hatch, INK, MUTED, WHITE};
use super::scene::{MARGIN, Scene};
use super::{Marks, named, numbers};

/// One bar.
pub(crate) struct Bar<'a> {
    pub label: &'a str,
    pub today: bool,
    /// Parts in the order of the looks; a negative one is drawn to the other side of zero.
    pub parts: Vec<f64>,
    /// What is written beside the whole.
    pub remark: String,
}

impl Bar<'_> {
    pub(crate) fn whole(&self) -> f64 {
        self.parts.iter().sum()
    }
    /// Sum of the parts on one side of zero.
    fn side(&self, sign: f64) -> f64 {
        self.parts.iter().map(|p| (sign * p).max(0.0)).sum()
    }
}

/// The bars of systems, each with what it is more or less than that of today, as `write` writes it.
pub(crate) fn compared<'a>(
    systems: impl Iterator<Item = (&'a str, bool, Vec<f64>)>,
    write: &dyn Fn(f64) -> String,
) -> Vec<Bar<'a>> {
    let mut bars: Vec<Bar<'a>> = systems
        .map(|(label, today, parts)| Bar {
            label,
            today,
            parts,
            remark: String::new(),
        })
        .collect();
    let today = bars.iter().find(|bar| bar.today).map(Bar::whole);
    for bar in bars.iter_mut().filter(|bar| !bar.today) {
        if let Some(today) = today {
            bar.remark = difference(bar.whole(), today, write);
        }
    }
    bars
}

/// Whether there is a bar of today that others are compared with.
pub(crate) fn has_comparison(bars: &[Bar<'_>]) -> bool {
    bars.len() > 1 && bars.iter().any(|bar| bar.today)
}

/// The bars as sentences behind `what` they show; parts that are nothing are left out.
pub(crate) fn in_words(
    what: &str,
    bars: &[Bar<'_>],
    parts: &[Part],
    write: &dyn Fn(f64) -> String,
) -> String {
    let mut out = format!(
        "Bar chart of {what}, {} {}.",
        bars.len(),
        if bars.len() == 1 { "system" } else { "systems" }
    );
    for bar in bars {
        let made_of: Vec<String> = parts
            .iter()
            .zip(&bar.parts)
            .filter(|(_, amount)| **amount != 0.0)
            .map(|((name, ..), amount)| format!("{} {}", name.to_lowercase(), write(*amount)))
            .collect();
        let made_of = if made_of.is_empty() {
            String::new()
        } else {
            format!(", made of {}", numbers::list(&made_of))
        };
        let when = if bar.today { " (today)" } else { "" };
        out += &format!(
            " {}{when}: {}{}{made_of}.",
            named(bar.label),
            write(bar.whole()),
            against_today(&bar.remark)
        );
    }
    out
}

/// Name and look of a part.
pub(crate) type Part = (&'static str, Colour, Hatch);

const ROW: f64 = 66.0;
const BAR: f64 = 28.0;
/// Distance from the top of a row, where the name stands, to its bar.
const TO_BAR: f64 = 26.0;
const WHOLE: Type = Type::new(17.0, Weight::Bold, INK);
const REMARK: Type = Type::new(SMALL + 1.0, Weight::Regular, INK);

/// Draws key, axis and bars below `top` and sets the height of the scene.
pub(crate) fn draw(
    scene: &mut Scene,
    top: f64,
    bars: &[Bar<'_>],
    parts: &[Part],
    axis_title: &str,
    write: &dyn Fn(f64) -> String,
    marks: &Marks,
) {
    // A part that no bar has is no part of the picture.
    let drawn = |part: usize| bars.iter().any(|b| b.parts[part] != 0.0);
    let entries: Vec<(Swatch, &str)> = parts
        .iter()
        .enumerate()
        .filter(|(part, _)| drawn(*part))
        .map(|(_, (name, colour, hatch))| (Swatch::Area(*colour, *hatch), *name))
        .collect();
    let top = scene.key(&entries, MARGIN, top, scene.width - 2.0 * MARGIN) + 6.0;
    let bottom = top + ROW * bars.len() as f64;
    scene.height = (bottom + 52.0).ceil();

    let high = bars.iter().map(|b| b.side(1.0)).fold(0.0, f64::max);
    let low = -bars.iter().map(|b| b.side(-1.0)).fold(0.0, f64::max);
    let high = if high > low { high } else { low + 1.0 };
    let axis = Axis::tight(axis_title, low, high, 5, marks);
    // Two columns at the right, as wide as their widest text; the bars take the rest.
    let widest = |set: Type, text: &dyn Fn(&Bar<'_>) -> String| {
        bars.iter().map(|b| set.width(&text(b))).fold(0.0, f64::max)
    };
    let remark_wide = widest(REMARK, &|b| b.remark.clone());
    let whole_wide = widest(WHOLE, &|b| write(b.whole()));
    let remark_at = scene.width - MARGIN - remark_wide;
    let whole_at = remark_at - if remark_wide > 0.0 { 14.0 } else { 0.0 };
    let left = MARGIN;
    let right = (whole_at - whole_wide - 16.0).max(left + 120.0);
    let at = |v: f64| left + (v - axis.low) / (axis.high - axis.low) * (right - left);

    for (value, text) in &axis.ticks {
        let x = at(*value);
        if *value != 0.0 {
            scene.line(&[(x, top), (x, bottom)], GRID, 1.0);
        }
        let x_text = x.max(MARGIN + Type::small().width(text) / 2.0 - 8.0);
        scene.tick(text, (x_text, bottom + 18.0), Anchor::Middle);
    }
    scene.line(&[(left, bottom), (right, bottom)], AXIS, 1.2);
    let title = font::fit(
        &axis.title,
        SMALL,
        Weight::Regular,
        scene.width - 2.0 * MARGIN,
    );
    let title_at = right.max(left + Type::small().width(&title));
    scene.text(
        &title,
        (title_at, bottom + 38.0),
        Anchor::End,
        Type::small(),
    );

    let today = bars.iter().position(|b| b.today);
    for (i, bar) in bars.iter().enumerate() {
        let row = top + ROW * i as f64;
        let y = row + TO_BAR;
        draw_name(
            scene,
            bar.label,
            bar.today,
            row + 18.0,
            scene.width - 2.0 * MARGIN,
        );
        draw_bar(scene, bar, parts, y, &at, write);
        if let Some(t) = today.filter(|t| *t != i) {
            let mark = at(bars[t].whole());
            let ends = [(mark, y - 4.0), (mark, y + BAR + 4.0)];
            scene.line(&ends, WHITE, 4.0);
            scene.dashed(&ends, INK, 2.0, Dash::Short);
        }
        let base = y + BAR / 2.0 + 5.4;
        scene.text(&write(bar.whole()), (whole_at, base), Anchor::End, WHOLE);
        scene.text(&bar.remark, (remark_at, base), Anchor::Start, REMARK);
    }
}

/// Writes the name of a system on a base line at the left margin; today's is bold and tagged. Gives back where it ends.
pub(crate) fn draw_name(scene: &mut Scene, label: &str, today: bool, base: f64, room: f64) -> f64 {
    let weight = if today { Weight::Bold } else { Weight::Regular };
    let set = Type::new(BODY, weight, INK);
    let room = room - if today { 70.0 } else { 0.0 };
    let name = font::fit(named(label), set.size, set.weight, room);
    scene.plate(&name, (MARGIN, base), Anchor::Start, set);
    let end = MARGIN + set.width(&name);
    if !today {
        return end;
    }
    let tag = Type::new(SMALL - 1.0, Weight::Bold, MUTED);
    let frame = Rect {
        left: end + 12.0,
        top: base - 14.0,
        right: end + 26.0 + tag.width("today"),
        bottom: base + 4.0,
    };
    scene.area(&frame.corners(), WHITE, 1.0);
    scene.outline(&frame.corners(), AXIS, 1.2);
    scene.text("today", (end + 19.0, base - 0.8), Anchor::Start, tag);
    frame.right
}

fn draw_bar(
    scene: &mut Scene,
    bar: &Bar<'_>,
    parts: &[Part],
    y: f64,
    at: &dyn Fn(f64) -> f64,
    write: &dyn Fn(f64) -> String,
) {
    let (mut up, mut down) = (0.0, 0.0);
    scene.line(&[(at(0.0), y - 4.0), (at(0.0), y + BAR + 4.0)], INK, 1.4);
    for (&value, (_, colour, hatch)) in bar.parts.iter().zip(parts) {
        let from = if value < 0.0 { &mut down } else { &mut up };
        let (a, b) = (at(*from), at(*from + value));
        *from += value;
        let (a, b) = (a.min(b), a.max(b));
        if b - a < 0.05 {
            continue;
        }
        let piece: [Point; 4] = [(a, y), (b, y), (b, y + BAR), (a, y + BAR)];
        scene.hatched(&piece, *colour, *hatch);
        scene.line(&[(b, y), (b, y + BAR)], WHITE, 1.2);
        let set = Type::new(SMALL, Weight::Regular, colour.text_on());
        let text = write(value);
        if *hatch == Hatch::Plain && set.width(&text) + 12.0 < b - a {
            let middle = ((a + b) / 2.0, y + BAR / 2.0 + 4.6);
            scene.text(&text, middle, Anchor::Middle, set);
        }
    }
}

/// How a bar compares with today's: so much less or more, or about the same when the difference would be written
/// as nothing.
fn difference(value: f64, today: f64, write: &dyn Fn(f64) -> String) -> String {
    let saved = today - value;
    match write(saved.abs()) {
        same if same == write(0.0) => "about the same".into(),
        less if saved > 0.0 => format!("{less} less"),
        more => format!("{more} more"),
    }
}

/// The remark of a bar as the end of a sentence.
fn against_today(remark: &str) -> String {
    match remark {
        "" => String::new(),
        "about the same" => ", about the same as today".into(),
        words => format!(", {words} than today"),
    }
}
