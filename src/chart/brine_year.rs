//! Brine temperature through the year: one line a year of the installation's life, with limit and undisturbed ground.

use super::ends::{self, End};
use super::font::{self, Weight};
use super::frame::{Axis, Frame};
use super::geometry::Rect;
use super::label::{Anchor, SMALL, Type};
use super::numbers::Marks;
use super::palette::{AXIS, Dash, INK, series};
use super::scene::{MARGIN, Scene};
use super::{ChartError, Picture, finite, named, sentence};

const PICTURE: &str = "brine through the year";

/// What is drawn.
#[derive(Debug, Clone, PartialEq)]
pub struct BrineYear {
    /// Name of the system or the ground it draws from.
    pub source: String,
    /// One line each, for example "year 1" and "year 25".
    pub lines: Vec<BrineLine>,
    /// Days from the first at which a month begins, with its short name; see `calendar_months`.
    pub months: Vec<(f64, String)>,
    /// Temperature of the ground before anything is drawn, °C.
    pub undisturbed_c: Option<f64>,
    /// Lowest temperature that is allowed, with what sets it, for example ("lowest the machine accepts", −5).
    pub limit: Option<(String, f64)>,
}

/// Brine through one year.
#[derive(Debug, Clone, PartialEq)]
pub struct BrineLine {
    /// Name.
    pub label: String,
    /// Temperature of the brine that enters the machine, °C, hour by hour; not a number while nothing flows.
    pub hours_c: Vec<f64>,
}

const PLOT: f64 = 350.0;
const RIGHT: f64 = 110.0;

/// Draws the brine temperature. Hours that are not a number are gaps.
///
/// # Errors
/// [`ChartError::Empty`] without a single temperature, [`ChartError::NotFinite`] for a limit that is not a number.
pub fn brine_year(data: &BrineYear, marks: &Marks) -> Result<Picture, ChartError> {
    let all = || {
        data.lines
            .iter()
            .flat_map(|l| &l.hours_c)
            .copied()
            .filter(|t| t.is_finite())
    };
    if all().next().is_none() {
        return Err(ChartError::Empty {
            picture: PICTURE,
            missing: "no hour has a brine temperature",
        });
    }
    finite(
        PICTURE,
        data.undisturbed_c.map(|t| ("undisturbed ground", t)),
    )?;
    finite(
        PICTURE,
        data.limit.as_ref().map(|(name, t)| (name.as_str(), *t)),
    )?;

    let title = "Brine temperature through the year";
    let subtitle = format!(
        "{} Brine entering the machine: mean of each day, and its span.",
        sentence(&data.source, 320.0)
    );
    let mut scene = Scene::of(marks);
    let top = scene.heading(title, &subtitle);
    scene.height = top + PLOT + 6.0;
    let marked = || {
        all()
            .chain(data.undisturbed_c)
            .chain(data.limit.iter().map(|l| l.1))
    };
    let low = marked().fold(f64::INFINITY, f64::min);
    let high = marked().fold(f64::NEG_INFINITY, f64::max);
    let days = data
        .lines
        .iter()
        .map(|l| l.hours_c.len())
        .max()
        .unwrap_or(0) as f64
        / 24.0;
    let frame = Frame::inside(
        Rect {
            left: MARGIN,
            top,
            right: scene.width - MARGIN - scene.aside(RIGHT) + 12.0,
            bottom: top + PLOT,
        },
        Axis::named("", 0.0, days, Vec::new()),
        Axis::linear("Brine temperature, °C", low, high, 6, marks),
    );
    frame.draw_y(&mut scene);
    draw_months(&mut scene, &frame, data, days);
    let mut names = Vec::new();
    for (i, line) in data.lines.iter().enumerate() {
        let look = series(i);
        let days = days_of(line);
        for run in days.chunk_by(|a, b| b.day == a.day + 1.0) {
            let upper = run.iter().map(|d| frame.at(d.day + 0.5, d.highest));
            let lower = run.iter().rev().map(|d| frame.at(d.day + 0.5, d.lowest));
            let band: Vec<_> = upper.chain(lower).collect();
            scene.area(&band, look.colour.lighter(0.7), 1.0);
        }
        for run in days.chunk_by(|a, b| b.day == a.day + 1.0) {
            let mean: Vec<(f64, f64)> = run.iter().map(|d| (d.day + 0.5, d.mean)).collect();
            frame.line(&mut scene, &mean, look.colour, 2.4, look.dash);
        }
        if let Some(last) = days.last().map(|d| (d.day + 0.5, d.mean)) {
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
    draw_levels(&mut scene, &frame, data, marks);
    draw_lowest(&mut scene, &frame, data, marks);
    Ok(Picture::new(title, alt(data, marks), scene))
}

/// One day of brine.
struct Day {
    day: f64,
    lowest: f64,
    mean: f64,
    highest: f64,
}

/// The days on which brine flows.
fn days_of(line: &BrineLine) -> Vec<Day> {
    line.hours_c
        .chunks(24)
        .enumerate()
        .filter_map(|(day, hours)| {
            let flowing: Vec<f64> = hours.iter().copied().filter(|t| t.is_finite()).collect();
            (!flowing.is_empty()).then(|| Day {
                day: day as f64,
                lowest: flowing.iter().copied().fold(f64::INFINITY, f64::min),
                mean: flowing.iter().sum::<f64>() / flowing.len() as f64,
                highest: flowing.iter().copied().fold(f64::NEG_INFINITY, f64::max),
            })
        })
        .collect()
}

fn draw_months(scene: &mut Scene, frame: &Frame, data: &BrineYear, days: f64) {
    let bottom = frame.area.bottom;
    scene.line(
        &[(frame.area.left, bottom), (frame.area.right, bottom)],
        AXIS,
        1.2,
    );
    for (i, (start, name)) in data.months.iter().enumerate() {
        if !(0.0..days).contains(start) {
            continue;
        }
        let end = data.months.get(i + 1).map_or(days, |m| m.0).min(days);
        let x = frame.at_x(*start);
        scene.line(
            &[(x, frame.area.top), (x, bottom + 5.0)],
            super::palette::GRID,
            1.0,
        );
        let room = frame.at_x(end) - x - 3.0;
        let initial: String = name.chars().take(1).collect();
        let (name, least) = if scene.narrow() {
            (&initial, 11.0)
        } else {
            (name, 14.0)
        };
        if room > least {
            let name = font::fit(name, SMALL, Weight::Regular, room);
            scene.tick(
                &name,
                ((x + frame.at_x(end)) / 2.0, bottom + 20.0),
                Anchor::Middle,
            );
        }
    }
}

fn draw_levels(scene: &mut Scene, frame: &Frame, data: &BrineYear, marks: &Marks) {
    let levels = data
        .undisturbed_c
        .map(|t| ("undisturbed ground".to_string(), t, Dash::Dotted))
        .into_iter()
        .chain(
            data.limit
                .iter()
                .map(|(name, t)| (name.clone(), *t, Dash::Short)),
        );
    for (name, level, dash) in levels {
        frame.level(scene, level, INK, dash);
        let set = Type::new(SMALL, Weight::Regular, INK);
        let name = font::fit(&name, set.size, set.weight, 300.0);
        let text = format!("{name} {}\u{a0}°C", marks.number(level, 1));
        let y = frame.at_y(level);
        let (left, right) = (frame.area.left + 8.0, frame.area.right - 8.0);
        let middle = (left + right) / 2.0;
        let places = [
            ((left, y - 6.0), Anchor::Start),
            ((left, y + 16.0), Anchor::Start),
            ((middle, y - 6.0), Anchor::Middle),
            ((middle, y + 16.0), Anchor::Middle),
            ((right, y - 6.0), Anchor::End),
            ((right, y + 16.0), Anchor::End),
        ];
        scene.place(&frame.area, &text, &places, set);
    }
}

fn lowest(line: &BrineLine) -> Option<(usize, f64)> {
    line.hours_c
        .iter()
        .copied()
        .enumerate()
        .filter(|(_, t)| t.is_finite())
        .min_by(|a, b| a.1.total_cmp(&b.1))
}

fn draw_lowest(scene: &mut Scene, frame: &Frame, data: &BrineYear, marks: &Marks) {
    let coldest = data
        .lines
        .iter()
        .filter_map(lowest)
        .min_by(|a, b| a.1.total_cmp(&b.1));
    if let Some((hour, t)) = coldest {
        let x = (hour as f64 + 0.5) / 24.0;
        scene.disc(frame.at(x, t), 4.5, INK);
        frame.note(
            scene,
            &format!("lowest {}\u{a0}°C", marks.number(t, 1)),
            x,
            t,
        );
    }
}

fn alt(data: &BrineYear, marks: &Marks) -> String {
    let mut out = format!(
        "Brine temperature through the year of {}.",
        named(&data.source)
    );
    for line in &data.lines {
        if let Some((_, t)) = lowest(line) {
            out += &format!(" {}: lowest {} °C.", named(&line.label), marks.number(t, 1));
        }
    }
    if let Some(t) = data.undisturbed_c {
        out += &format!(" Undisturbed ground: {} °C.", marks.number(t, 1));
    }
    if let Some((name, t)) = &data.limit {
        out += &format!(" Limit, {name}: {} °C.", marks.number(*t, 1));
    }
    out
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn gaps_stay_gaps_and_the_lowest_is_written() {
        let mut hours_c = vec![4.0; 100];
        hours_c[50] = -1.2;
        hours_c[60] = f64::NAN;
        let data = BrineYear {
            source: "Bore".into(),
            lines: vec![BrineLine {
                label: "year 1".into(),
                hours_c,
            }],
            months: vec![],
            undisturbed_c: None,
            limit: None,
        };
        let picture = brine_year(&data, &Marks::default()).unwrap();
        assert!(picture.alt.contains("year 1: lowest −1.2 °C"));
        let days = days_of(&data.lines[0]);
        assert_eq!(days.len(), 5);
        // The third day holds hours 48 to 71: 22 hours at 4, one at −1.2, one in which nothing flows.
        assert!((days[2].mean - (22.0 * 4.0 - 1.2) / 23.0).abs() < 1e-12);
        let nothing = BrineYear {
            lines: vec![],
            ..data
        };
        assert!(matches!(
            brine_year(&nothing, &Marks::default()),
            Err(ChartError::Empty { .. })
        ));
    }
}
