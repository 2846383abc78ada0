//! Cost of a year, system by system: one bar each, split into energy, standing charges and tax.

use super::frame::Axis;
use super::geometry::Point;
use super::numbers::{self, Marks, money_unit};
use super::palette::{AXIS, CORAL, Colour, Dash, GRID, Hatch, INK, MUTED, NAVY, PERIWINKLE, WHITE};
use super::scene::{Anchor, BODY, MARGIN, Rect, SMALL, Scene, Swatch, Type, WIDTH};
use super::{ChartError, Picture, finite, font, font::Weight, named};

const PICTURE: &str = "cost of a year";

/// What is drawn.
#[derive(Debug, Clone, PartialEq)]
pub struct AnnualCost {
    /// Currency code, for example GBP.
    pub currency: String,
    /// The systems, in the order they are to stand.
    pub systems: Vec<SystemCost>,
}

/// The bill of one system. Each part may be negative (a credit).
#[derive(Debug, Clone, PartialEq)]
pub struct SystemCost {
    /// Name.
    pub label: String,
    /// Whether this is what heats the home today; the others are compared with the first that is.
    pub today: bool,
    /// Energy of a year, in the currency.
    pub energy: f64,
    /// Standing charges of a year.
    pub standing: f64,
    /// Tax of a year.
    pub tax: f64,
}

impl SystemCost {
    fn parts(&self) -> [f64; 3] {
        [self.energy, self.standing, self.tax]
    }
    /// The whole bill.
    pub fn total(&self) -> f64 {
        self.energy + self.standing + self.tax
    }
}

/// Names and looks of the three parts.
const PARTS: [(&str, Colour, Hatch); 3] = [
    ("Energy", NAVY, Hatch::Plain),
    ("Standing charges", PERIWINKLE, Hatch::Plain),
    ("Tax", CORAL, Hatch::Rising),
];

const ROW: f64 = 66.0;
const BAR: f64 = 28.0;
/// How totals and differences are set.
const TOTAL: Type = Type::new(17.0, Weight::Bold, INK);
const DIFFERENCE: Type = Type::new(SMALL + 1.0, Weight::Regular, INK);

/// Draws the cost of a year.
///
/// # Errors
/// [`ChartError::Empty`] without systems, [`ChartError::NotFinite`] for a cost that is not a number.
pub fn annual_cost(data: &AnnualCost, marks: &Marks) -> Result<Picture, ChartError> {
    if data.systems.is_empty() {
        return Err(ChartError::Empty {
            picture: PICTURE,
            missing: "no system was given",
        });
    }
    for system in &data.systems {
        finite(
            PICTURE,
            [
                (
                    format!("energy of “{}”", system.label).as_str(),
                    system.energy,
                ),
                (
                    format!("standing charges of “{}”", system.label).as_str(),
                    system.standing,
                ),
                (format!("tax of “{}”", system.label).as_str(), system.tax),
            ],
        )?;
    }
    let money = |v: f64| marks.money(&data.currency, v);
    let today = data.systems.iter().find(|s| s.today);

    let title = "What a year costs to run";
    let mut scene = Scene::new(f64::MAX);
    let below_title = scene.heading(title, &subtitle(data, today));
    let entries = PARTS.map(|(name, colour, hatch)| (Swatch::Area(colour, hatch), name));
    let top = scene.key(&entries, MARGIN, below_title, WIDTH - 2.0 * MARGIN) + 6.0;
    let bottom = top + ROW * data.systems.len() as f64;
    scene.height = (bottom + 52.0).ceil();

    // Parts above and below nothing are stacked each on its own side of the zero line.
    let side =
        |s: &SystemCost, sign: f64| s.parts().iter().map(|p| (sign * p).max(0.0)).sum::<f64>();
    let high = data
        .systems
        .iter()
        .map(|s| side(s, 1.0))
        .fold(0.0, f64::max);
    let low = -data
        .systems
        .iter()
        .map(|s| side(s, -1.0))
        .fold(0.0, f64::max);
    let unit = money_unit(&data.currency);
    let axis = Axis::tight(
        &format!("Cost of a year, {unit}"),
        low,
        if high > low { high } else { low + 1.0 },
        5,
        marks,
    );
    // Two columns at the right, as wide as their widest text; the bars take the rest.
    let widest = |set: Type, text: &dyn Fn(&SystemCost) -> String| {
        data.systems
            .iter()
            .map(|s| set.width(&text(s)))
            .fold(0.0, f64::max)
    };
    let words_wide = widest(DIFFERENCE, &|s| difference(s, today, &money));
    let total_wide = widest(TOTAL, &|s| money(s.total()));
    let words_at = WIDTH - MARGIN - words_wide;
    let total_at = words_at - if words_wide > 0.0 { 14.0 } else { 0.0 };
    let left = MARGIN;
    let right = (total_at - total_wide - 16.0).max(left + 120.0);
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
    scene.text(
        &axis.title,
        (right, bottom + 38.0),
        Anchor::End,
        Type::small(),
    );

    for (i, system) in data.systems.iter().enumerate() {
        let row = top + ROW * i as f64;
        let bar = row + 26.0;
        draw_name(&mut scene, system, row);
        draw_bar(&mut scene, system, bar, &at, &money);
        if let Some(today) = today.filter(|t| !std::ptr::eq(*t, system)) {
            let mark = at(today.total());
            let ends = [(mark, bar - 4.0), (mark, bar + BAR + 4.0)];
            scene.line(&ends, WHITE, 4.0);
            scene.dashed(&ends, INK, 2.0, Dash::Short);
        }
        let base = bar + BAR / 2.0 + 5.4;
        scene.text(&money(system.total()), (total_at, base), Anchor::End, TOTAL);
        let words = difference(system, today, &money);
        scene.text(&words, (words_at, base), Anchor::Start, DIFFERENCE);
    }
    let alt = alt(data, today, &money);
    Ok(Picture::new(title, alt, scene))
}

fn subtitle(data: &AnnualCost, today: Option<&SystemCost>) -> String {
    match today {
        Some(_) if data.systems.len() > 1 => {
            "Bills of one year by system. The dashed mark is what today’s system costs.".into()
        }
        _ => "Bills of one year by system.".into(),
    }
}

fn draw_name(scene: &mut Scene, system: &SystemCost, row: f64) {
    let room = WIDTH - 2.0 * MARGIN - 70.0;
    let weight = if system.today {
        Weight::Bold
    } else {
        Weight::Regular
    };
    let set = Type::new(BODY, weight, INK);
    let name = font::fit(named(&system.label), set.size, set.weight, room);
    scene.plate(&name, (MARGIN, row + 18.0), Anchor::Start, set);
    if system.today {
        let tag = Type::new(SMALL - 1.0, Weight::Bold, MUTED);
        let x = MARGIN + set.width(&name) + 12.0;
        let pill = Rect {
            left: x,
            top: row + 4.0,
            right: x + tag.width("today") + 14.0,
            bottom: row + 22.0,
        };
        scene.area(&pill.corners(), WHITE, 1.0);
        scene.outline(&pill.corners(), AXIS, 1.2);
        scene.text("today", (x + 7.0, row + 17.2), Anchor::Start, tag);
    }
}

fn draw_bar(
    scene: &mut Scene,
    system: &SystemCost,
    y: f64,
    at: &impl Fn(f64) -> f64,
    money: &impl Fn(f64) -> String,
) {
    let (mut up, mut down) = (0.0, 0.0);
    scene.line(&[(at(0.0), y - 4.0), (at(0.0), y + BAR + 4.0)], INK, 1.4);
    for (value, (_, colour, hatch)) in system.parts().into_iter().zip(PARTS) {
        let from = if value < 0.0 { &mut down } else { &mut up };
        let (a, b) = (at(*from), at(*from + value));
        *from += value;
        let (a, b) = (a.min(b), a.max(b));
        if b - a < 0.05 {
            continue;
        }
        let piece: [Point; 4] = [(a, y), (b, y), (b, y + BAR), (a, y + BAR)];
        scene.hatched(&piece, colour, hatch);
        scene.line(&[(b, y), (b, y + BAR)], WHITE, 1.2);
        let set = Type::new(SMALL, Weight::Regular, colour.text_on());
        let text = money(value);
        if hatch == Hatch::Plain && set.width(&text) + 12.0 < b - a {
            scene.text(
                &text,
                ((a + b) / 2.0, y + BAR / 2.0 + 4.6),
                Anchor::Middle,
                set,
            );
        }
    }
}

fn difference(
    system: &SystemCost,
    today: Option<&SystemCost>,
    money: &impl Fn(f64) -> String,
) -> String {
    match today {
        None => String::new(),
        Some(_) if system.today => String::new(),
        Some(today) => {
            let saved = today.total() - system.total();
            match money(saved.abs()) {
                same if same == money(0.0) => "about the same".into(),
                less if saved > 0.0 => format!("{less} less"),
                more => format!("{more} more"),
            }
        }
    }
}

fn alt(data: &AnnualCost, today: Option<&SystemCost>, money: &impl Fn(f64) -> String) -> String {
    let count = data.systems.len();
    let mut out = format!(
        "Bar chart of what a year costs to run, {count} {}.",
        if count == 1 { "system" } else { "systems" }
    );
    for system in &data.systems {
        let mut parts = vec![
            format!("energy {}", money(system.energy)),
            format!("standing charges {}", money(system.standing)),
        ];
        if system.tax != 0.0 {
            parts.push(format!("tax {}", money(system.tax)));
        }
        let when = if system.today { " (today)" } else { "" };
        let against = match difference(system, today, money) {
            words if words.is_empty() => String::new(),
            words if words == "about the same" => ", about the same as today".into(),
            words => format!(", {words} than today"),
        };
        out += &format!(
            " {}{when}: {}{against}, made of {}.",
            named(&system.label),
            money(system.total()),
            numbers::list(&parts)
        );
    }
    out
}

#[cfg(test)]
mod tests {
    use super::*;

    fn two() -> AnnualCost {
        let system = |label: &str, today, energy| SystemCost {
            label: label.into(),
            today,
            energy,
            standing: 300.0,
            tax: 60.0,
        };
        AnnualCost {
            currency: "GBP".into(),
            systems: vec![
                system("Boiler", true, 1100.0),
                system("Air source", false, 900.0),
            ],
        }
    }

    #[test]
    fn the_picture_says_totals_and_the_difference() {
        let picture = annual_cost(&two(), &Marks::default()).unwrap();
        let texts: Vec<&str> = picture.labels().iter().map(|l| l.text.as_str()).collect();
        for wanted in ["£1,460", "£1,260", "£200 less", "today"] {
            assert!(texts.contains(&wanted), "{wanted} not in {texts:?}");
        }
        assert!(
            picture
                .alt
                .contains("Air source: £1,260, £200 less than today")
        );
    }

    #[test]
    fn without_today_nothing_is_compared() {
        let mut data = two();
        data.systems[0].today = false;
        let picture = annual_cost(&data, &Marks::default()).unwrap();
        assert!(!picture.alt.contains("today"));
    }

    #[test]
    fn nothing_and_not_a_number_are_refused() {
        let none = AnnualCost {
            currency: "GBP".into(),
            systems: vec![],
        };
        assert!(matches!(
            annual_cost(&none, &Marks::default()),
            Err(ChartError::Empty { .. })
        ));
        let mut data = two();
        data.systems[1].tax = f64::NAN;
        let error = annual_cost(&data, &Marks::default()).unwrap_err();
        assert!(error.to_string().contains("tax of “Air source”"), "{error}");
    }
}
