//! All that is spent year after year, system by system, with the years in which a choice has caught up with today.

use super::ends::{self, Course};
use super::font::Weight;
use super::frame::{Axis, Frame, around};
use super::label::{SMALL, Type};
use super::numbers::{self, Marks, money_unit};
use super::palette::{INK, WHITE};
use super::scene::Scene;
use super::{ChartError, Picture, finite, named};

const PICTURE: &str = "spend over the years";

/// What is drawn.
#[derive(Debug, Clone, PartialEq)]
pub struct CumulativeSpend {
    /// Currency code.
    pub currency: String,
    /// How the money is counted, for the subtitle, for example "real, discounted at 3.5 % a year".
    pub terms: String,
    /// The systems, in the order they are to stand.
    pub systems: Vec<SystemSpend>,
}

/// The spend of one system.
#[derive(Debug, Clone, PartialEq)]
pub struct SystemSpend {
    /// Name.
    pub label: String,
    /// Whether this is what heats the home today.
    pub today: bool,
    /// All that was spent up to the end of each year; the first is year 0, with the capital.
    pub spent: Vec<f64>,
}

const PLOT: f64 = 390.0;
const RIGHT: f64 = 190.0;

/// Draws the spend.
///
/// # Errors
/// [`ChartError::Empty`] without years, [`ChartError::Uneven`] when systems differ in years, [`ChartError::NotFinite`] for a value that is not a number.
pub fn cumulative_spend(data: &CumulativeSpend, marks: &Marks) -> Result<Picture, ChartError> {
    let years = data
        .systems
        .iter()
        .map(|s| s.spent.len())
        .max()
        .unwrap_or(0);
    if years < 2 {
        return Err(ChartError::Empty {
            picture: PICTURE,
            missing: "fewer than two years were given",
        });
    }
    if data.systems.iter().any(|s| s.spent.len() != years) {
        let lengths: Vec<String> = data
            .systems
            .iter()
            .map(|s| s.spent.len().to_string())
            .collect();
        return Err(ChartError::Uneven {
            picture: PICTURE,
            what: format!("years of the systems: {}", numbers::list(&lengths)),
        });
    }
    for s in &data.systems {
        finite(PICTURE, s.spent.iter().map(|v| (s.label.as_str(), *v)))?;
    }
    let title = "What is spent over the years";
    let terms = super::font::clean(&data.terms);
    let how = if terms.is_empty() {
        String::new()
    } else {
        format!(", {terms}")
    };
    let subtitle =
        format!("Everything added up{how}. Rings: a choice has caught up with today’s system.");
    let mut scene = Scene::of(marks);
    let top = scene.heading(title, &subtitle);
    scene.height = top + PLOT + 6.0;

    let all = || {
        data.systems
            .iter()
            .flat_map(|s| s.spent.iter().copied())
            .chain([0.0])
    };
    let low = all().fold(f64::INFINITY, f64::min);
    let high = all().fold(f64::NEG_INFINITY, f64::max);
    let y_title = format!("Spent so far, {}", money_unit(&data.currency));
    let frame = Frame::inside(
        ends::area(&scene, top, PLOT, scene.aside(RIGHT)),
        Axis::tight("Years from now", 0.0, (years - 1) as f64, 6, marks),
        Axis::linear(&y_title, low, high, 6, marks),
    );
    frame.draw(&mut scene);
    let courses: Vec<Course<'_>> = data
        .systems
        .iter()
        .map(|system| Course {
            label: &system.label,
            today: system.today,
            points: system
                .spent
                .iter()
                .enumerate()
                .map(|(y, v)| (y as f64, *v))
                .collect(),
        })
        .collect();
    let room = scene.aside(RIGHT);
    ends::courses(&mut scene, &frame, &courses, room);
    let set = Type::new(SMALL, Weight::Bold, INK);
    for (_, (year, spent)) in caught_up(data) {
        let (x, y) = frame.at(year, spent);
        scene.disc((x, y), 6.5, INK);
        scene.disc((x, y), 3.6, WHITE);
        let text = format!("year {}", marks.number(year, 1));
        scene.place_for(&frame.area, (x, y), &text, &around(x, y, 12.0), set);
    }
    Ok(Picture::new(title, alt(data, marks), scene))
}

/// Where the spend of a system meets that of today's, straight between the years: system and (year, spend).
fn caught_up(data: &CumulativeSpend) -> Vec<(usize, (f64, f64))> {
    let Some(today) = data.systems.iter().position(|s| s.today) else {
        return Vec::new();
    };
    let base = &data.systems[today].spent;
    let mut out = Vec::new();
    for (i, system) in data.systems.iter().enumerate().filter(|(i, _)| *i != today) {
        let gap: Vec<f64> = system.spent.iter().zip(base).map(|(a, b)| a - b).collect();
        for (year, pair) in gap.windows(2).enumerate() {
            if (pair[0] > 0.0) != (pair[1] > 0.0) && pair[0] != pair[1] {
                let t = pair[0] / (pair[0] - pair[1]);
                let spent = base[year] + t * (base[year + 1] - base[year]);
                out.push((i, (year as f64 + t, spent)));
            }
        }
    }
    out
}

fn alt(data: &CumulativeSpend, marks: &Marks) -> String {
    let crossings = caught_up(data);
    let mut out = String::from("Line chart of all that is spent over the years.");
    for (i, system) in data.systems.iter().enumerate() {
        let (Some(first), Some(last)) = (system.spent.first(), system.spent.last()) else {
            continue;
        };
        let when = if system.today { " (today)" } else { "" };
        out += &format!(
            " {}{when}: {} at the start, {} after {}",
            named(&system.label),
            marks.money(&data.currency, *first),
            marks.money(&data.currency, *last),
            marks.count(system.spent.len() - 1, "year")
        );
        let met: Vec<String> = crossings
            .iter()
            .filter(|(s, _)| *s == i)
            .map(|(_, (year, _))| format!("year {}", marks.number(*year, 1)))
            .collect();
        if !met.is_empty() {
            out += &format!("; it meets today’s system in {}", numbers::list(&met));
        }
        out += ".";
    }
    out
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_choice_catches_up_where_the_lines_cross() {
        let system = |today, start: f64, yearly: f64| SystemSpend {
            label: "S".into(),
            today,
            spent: (0..=20).map(|y| start + yearly * f64::from(y)).collect(),
        };
        let data = CumulativeSpend {
            currency: "GBP".into(),
            terms: String::new(),
            systems: vec![system(true, 0.0, 1400.0), system(false, 5000.0, 900.0)],
        };
        // 5000 + 900 t = 1400 t where t = 10.
        let found = caught_up(&data);
        assert_eq!(found.len(), 1);
        assert!((found[0].1.0 - 10.0).abs() < 1e-9 && (found[0].1.1 - 14000.0).abs() < 1e-6);
    }
}
