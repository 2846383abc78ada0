//! The coldest days hour by hour: outdoor temperature, heat by source, electricity and indoor temperature on one clock.

use super::font::{self, Weight};
use super::frame::{Axis, Frame};
use super::geometry::{Point, Rect};
use super::key::Swatch;
use super::label::{Anchor, SMALL, Type};
use super::layers::{self, Layer};
use super::numbers::Marks;
use super::palette::{AXIS, AZURE, CORAL, Dash, GRID, Hatch, INK, NAVY, OCHRE, TEAL};
use super::scene::{MARGIN, Scene, width_of};
use super::{ChartError, Picture, finite, named, sentence};

const PICTURE: &str = "coldest days";

/// What is drawn.
#[derive(Debug, Clone, PartialEq)]
pub struct ColdestDays {
    /// Name of the system.
    pub system: String,
    /// What makes the heat before backup does, for example "heat pump".
    pub main_heater: String,
    /// Hour of the home's clock, 0 to 23, at which the first row begins.
    pub first_hour: usize,
    /// Names of the days in order, for example "Tue 14 Jan".
    pub days: Vec<String>,
    /// The hours in order.
    pub hours: Vec<ColdHour>,
    /// Indoor temperature that is asked for, °C.
    pub set_point_c: Option<f64>,
}

/// One hour.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct ColdHour {
    /// Outdoor temperature, °C.
    pub outdoor_c: f64,
    /// Heat asked for, kW.
    pub demand_kw: f64,
    /// Heat of the main heater, kW.
    pub main_kw: f64,
    /// Heat of backup, kW.
    pub backup_kw: f64,
    /// Electricity, kW.
    pub electricity_kw: f64,
    /// Indoor temperature, °C, when it is followed.
    pub indoor_c: Option<f64>,
}

const PANEL: f64 = 96.0;
const HEAT: f64 = 150.0;
const GAP: f64 = 32.0;

/// Draws the coldest days.
///
/// # Errors
/// [`ChartError::Empty`] without hours, [`ChartError::NotFinite`] for a value that is not a number.
pub fn coldest_days(data: &ColdestDays, marks: &Marks) -> Result<Picture, ChartError> {
    check(data)?;
    let title = "The coldest days, hour by hour";
    let subtitle = format!(
        "{} On the clock of the home.",
        sentence(&data.system, 320.0)
    );
    let mut scene = Scene::of(marks);
    let below = scene.heading(title, &subtitle);
    let main = named(&data.main_heater);
    let mut entries = vec![
        (Swatch::Area(TEAL, Hatch::Plain), main.to_string()),
        (Swatch::Area(CORAL, Hatch::Rising), "backup".into()),
        (Swatch::Line(INK, Dash::Solid, 2.0), "heat asked for".into()),
    ];
    if data.hours.iter().any(|h| short(h) > 0.0) {
        entries.insert(2, (Swatch::Area(OCHRE, Hatch::Crossed), "not met".into()));
    }
    let top = scene.key(&entries, MARGIN, below, scene.width - 2.0 * MARGIN);

    let indoor: Vec<f64> = data.hours.iter().filter_map(|h| h.indoor_c).collect();
    let heights: Vec<f64> = [PANEL, HEAT, PANEL]
        .into_iter()
        .chain((!indoor.is_empty()).then_some(PANEL))
        .collect();
    let frames = frames(data, top, &heights, &indoor, marks);
    let Some(last) = frames.last() else {
        return Err(ChartError::Drawing("no panel".into()));
    };
    scene.height = last.area.bottom + 50.0;
    for frame in &frames {
        draw_clock_grid(&mut scene, frame, data);
        frame.draw_y(&mut scene);
    }
    draw_outdoor(&mut scene, &frames[0], data, marks);
    draw_heat(&mut scene, &frames[1], data);
    draw_electricity(&mut scene, &frames[2], data, marks);
    if let Some(frame) = frames.get(3) {
        draw_indoor(&mut scene, frame, data, marks);
    }
    draw_clock(&mut scene, last, data);
    Ok(Picture::new(title, alt(data, &indoor, marks), scene))
}

fn check(data: &ColdestDays) -> Result<(), ChartError> {
    if data.hours.is_empty() {
        return Err(ChartError::Empty {
            picture: PICTURE,
            missing: "no hour was given",
        });
    }
    for h in &data.hours {
        finite(
            PICTURE,
            [
                ("outdoor temperature", h.outdoor_c),
                ("heat asked for", h.demand_kw),
                ("heat of the main heater", h.main_kw),
                ("heat of backup", h.backup_kw),
                ("electricity", h.electricity_kw),
            ],
        )?;
        finite(PICTURE, h.indoor_c.map(|t| ("indoor temperature", t)))?;
    }
    finite(PICTURE, data.set_point_c.map(|t| ("set point", t)))
}

fn short(hour: &ColdHour) -> f64 {
    // Less than a watt is rounding of the sums, not cold rooms.
    let gap = hour.demand_kw - hour.main_kw - hour.backup_kw;
    if gap > 1e-3 { gap } else { 0.0 }
}

fn frames(
    data: &ColdestDays,
    top: f64,
    heights: &[f64],
    indoor: &[f64],
    marks: &Marks,
) -> Vec<Frame> {
    let span = |values: &mut dyn Iterator<Item = f64>| {
        values.fold((f64::INFINITY, f64::NEG_INFINITY), |(l, h), v| {
            (l.min(v), h.max(v))
        })
    };
    let outdoor = span(&mut data.hours.iter().map(|h| h.outdoor_c));
    let heat = data
        .hours
        .iter()
        .map(|h| h.demand_kw.max(h.main_kw + h.backup_kw))
        .fold(0.0, f64::max);
    let electricity = data
        .hours
        .iter()
        .map(|h| h.electricity_kw)
        .fold(0.0, f64::max);
    let inside = span(&mut indoor.iter().copied().chain(data.set_point_c));
    let positive = |v: f64| if v > 0.0 { v } else { 1.0 };
    let axes = [
        Axis::linear("Outdoor temperature, °C", outdoor.0, outdoor.1, 3, marks),
        Axis::linear("Heat, kW", 0.0, positive(heat), 4, marks),
        Axis::linear("Electricity, kW", 0.0, positive(electricity), 3, marks),
        Axis::linear("Indoor temperature, °C", inside.0, inside.1, 3, marks),
    ];
    let widest = axes
        .iter()
        .flat_map(|a| &a.ticks)
        .map(|(_, t)| Type::small().width(t))
        .fold(0.0, f64::max);
    let mut y = top;
    heights
        .iter()
        .zip(axes)
        .map(|(height, axis)| {
            let area = Rect {
                left: MARGIN + widest + 8.0,
                top: y + GAP,
                right: width_of(marks) - MARGIN - 12.0,
                bottom: y + GAP + height,
            };
            y = area.bottom;
            let end = data.hours.len() as f64;
            Frame {
                area,
                title_left: MARGIN,
                x: Axis::named("", 0.0, end, Vec::new()),
                y: axis,
            }
        })
        .collect()
}

/// Hours from the first row to each clock time that is a multiple of `step`, with the time.
fn clock_times(data: &ColdestDays, step: usize) -> Vec<(f64, usize)> {
    (0..=data.hours.len())
        .map(|i| (i as f64, (data.first_hour + i) % 24))
        .filter(|(_, clock)| clock % step == 0)
        .collect()
}

fn draw_clock_grid(scene: &mut Scene, frame: &Frame, data: &ColdestDays) {
    let step = if data.hours.len() > 96 { 12 } else { 6 };
    for (at, clock) in clock_times(data, step) {
        let x = frame.at_x(at);
        let (colour, width) = if clock == 0 { (AXIS, 1.2) } else { (GRID, 1.0) };
        scene.line(
            &[(x, frame.area.top), (x, frame.area.bottom)],
            colour,
            width,
        );
    }
}

fn draw_clock(scene: &mut Scene, frame: &Frame, data: &ColdestDays) {
    let bottom = frame.area.bottom;
    scene.line(
        &[(frame.area.left, bottom), (frame.area.right, bottom)],
        AXIS,
        1.2,
    );
    let step = if data.hours.len() > 96 { 12 } else { 6 };
    for (at, clock) in clock_times(data, step) {
        scene.tick(
            &format!("{clock:02}:00"),
            (frame.at_x(at), bottom + 20.0),
            Anchor::Middle,
        );
    }
    let set = Type::new(SMALL, Weight::Bold, INK);
    for (i, day) in data.days.iter().enumerate() {
        let start = (i as f64 * 24.0 - data.first_hour as f64).max(0.0);
        let end = ((i + 1) as f64 * 24.0 - data.first_hour as f64).min(data.hours.len() as f64);
        if end - start < 1.0 {
            continue;
        }
        let room = frame.at_x(end) - frame.at_x(start) - 6.0;
        let name = font::fit(day, set.size, set.weight, room);
        let x = frame.at_x((start + end) / 2.0);
        if name.chars().count() > 3 {
            scene.place_bare(&name, (x, bottom + 40.0), Anchor::Middle, set);
        }
    }
}

/// A value that holds for an hour as a level piece of that length.
fn steps(data: &ColdestDays, value: impl Fn(&ColdHour) -> f64) -> Vec<(f64, f64)> {
    data.hours
        .iter()
        .enumerate()
        .flat_map(|(i, h)| [(i as f64, value(h)), (i as f64 + 1.0, value(h))])
        .collect()
}

/// A value at the middle of its hour.
fn middles(data: &ColdestDays, value: impl Fn(&ColdHour) -> Option<f64>) -> Vec<(f64, f64)> {
    data.hours
        .iter()
        .enumerate()
        .map(|(i, h)| (i as f64 + 0.5, value(h).unwrap_or(f64::NAN)))
        .collect()
}

fn draw_outdoor(scene: &mut Scene, frame: &Frame, data: &ColdestDays, marks: &Marks) {
    let line = middles(data, |h| Some(h.outdoor_c));
    frame.line(scene, &line, NAVY, 2.4, Dash::Solid);
    let lowest = line.iter().copied().min_by(|a, b| a.1.total_cmp(&b.1));
    note_extreme(scene, frame, lowest, "°C", marks);
}

fn note_extreme(
    scene: &mut Scene,
    frame: &Frame,
    at: Option<(f64, f64)>,
    unit: &str,
    marks: &Marks,
) {
    if let Some((x, value)) = at {
        scene.disc(frame.at(x, value), 4.0, INK);
        frame.note(
            scene,
            &format!("{}\u{a0}{unit}", marks.number(value, 1)),
            x,
            value,
        );
    }
}

fn draw_heat(scene: &mut Scene, frame: &Frame, data: &ColdestDays) {
    let layer = |upper: fn(&ColdHour) -> f64, colour, hatch| Layer {
        upper: steps(data, upper),
        colour,
        hatch,
    };
    layers::draw(
        scene,
        frame,
        &[
            layer(|h| h.main_kw, TEAL, Hatch::Plain),
            layer(|h| h.main_kw + h.backup_kw, CORAL, Hatch::Rising),
            layer(
                |h| h.main_kw + h.backup_kw + short(h),
                OCHRE,
                Hatch::Crossed,
            ),
        ],
    );
    frame.line(scene, &steps(data, |h| h.demand_kw), INK, 2.0, Dash::Solid);
}

fn draw_electricity(scene: &mut Scene, frame: &Frame, data: &ColdestDays, marks: &Marks) {
    let line = steps(data, |h| h.electricity_kw);
    let mut shape: Vec<Point> = line.iter().map(|&(x, y)| frame.at(x, y)).collect();
    shape.push(frame.at(data.hours.len() as f64, 0.0));
    shape.push(frame.at(0.0, 0.0));
    scene.area(&shape, AZURE.lighter(0.6), 1.0);
    frame.line(scene, &line, AZURE, 2.0, Dash::Solid);
    let most = middles(data, |h| Some(h.electricity_kw))
        .into_iter()
        .max_by(|a, b| a.1.total_cmp(&b.1));
    note_extreme(scene, frame, most, "kW", marks);
}

fn draw_indoor(scene: &mut Scene, frame: &Frame, data: &ColdestDays, marks: &Marks) {
    if let Some(set_point) = data.set_point_c {
        frame.level(scene, set_point, INK, Dash::Short);
    }
    let line = middles(data, |h| h.indoor_c);
    frame.line(scene, &line, NAVY, 2.4, Dash::Solid);
    let lowest = line
        .iter()
        .copied()
        .filter(|p| p.1.is_finite())
        .min_by(|a, b| a.1.total_cmp(&b.1));
    note_extreme(scene, frame, lowest, "°C", marks);
    if let Some(set_point) = data.set_point_c {
        let (left, right) = (frame.area.left + 6.0, frame.area.right - 6.0);
        let y = frame.at_y(set_point);
        let text = format!("asked for {}\u{a0}°C", marks.number(set_point, 1));
        let places: Vec<_> = [1.0, 0.75, 0.5, 0.25, 0.0]
            .into_iter()
            .flat_map(|share: f64| {
                let x = left + share * (right - left);
                let anchor = match share {
                    0.0 => Anchor::Start,
                    1.0 => Anchor::End,
                    _ => Anchor::Middle,
                };
                [((x, y - 6.0), anchor), ((x, y + 16.0), anchor)]
            })
            .collect();
        scene.place(&frame.area, &text, &places, Type::small());
    }
}

fn alt(data: &ColdestDays, indoor: &[f64], marks: &Marks) -> String {
    let least = |values: &mut dyn Iterator<Item = f64>| values.fold(f64::INFINITY, f64::min);
    let most = |values: &mut dyn Iterator<Item = f64>| values.fold(0.0, f64::max);
    let sum = |value: fn(&ColdHour) -> f64| data.hours.iter().map(value).sum::<f64>();
    let mut out = format!(
        "Four measures of {} on one clock over {}: outdoor temperature falls to {} °C; heat asked for rises to {} kW; \
         {} gives {} kWh and backup {} kWh; electricity peaks at {} kW",
        named(&data.system),
        marks.count(data.hours.len(), "hour"),
        marks.number(least(&mut data.hours.iter().map(|h| h.outdoor_c)), 1),
        marks.number(most(&mut data.hours.iter().map(|h| h.demand_kw)), 1),
        named(&data.main_heater),
        marks.number(sum(|h| h.main_kw), 0),
        marks.number(sum(|h| h.backup_kw), 0),
        marks.number(most(&mut data.hours.iter().map(|h| h.electricity_kw)), 1)
    );
    if indoor.is_empty() {
        out = out.replacen("Four", "Three", 1);
    } else {
        let lowest = least(&mut indoor.iter().copied());
        out += &format!(
            "; indoor temperature falls to {} °C",
            marks.number(lowest, 1)
        );
    }
    let missing = sum(short);
    if missing > 0.0 {
        out += &format!("; {} kWh of heat are not met", marks.number(missing, 1));
    }
    out + "."
}

#[cfg(test)]
mod tests {
    use super::*;

    fn hour(demand_kw: f64, main_kw: f64, backup_kw: f64) -> ColdHour {
        ColdHour {
            outdoor_c: -5.0,
            demand_kw,
            main_kw,
            backup_kw,
            electricity_kw: 2.0,
            indoor_c: None,
        }
    }

    fn data() -> ColdestDays {
        ColdestDays {
            system: "Air".into(),
            main_heater: "heat pump".into(),
            first_hour: 22,
            days: vec!["Mon 13 Jan".into(), "Tue 14 Jan".into()],
            hours: vec![
                hour(5.0, 4.0, 1.0),
                hour(6.0, 4.0, 1.5),
                hour(4.0, 4.0, 0.0),
            ],
            set_point_c: None,
        }
    }

    #[test]
    fn the_clock_starts_at_the_first_hour() {
        assert_eq!(clock_times(&data(), 6), [(2.0, 0)]);
    }

    #[test]
    fn heat_not_met_is_said() {
        assert_eq!(short(&data().hours[1]), 0.5);
        let picture = coldest_days(&data(), &Marks::default()).unwrap();
        assert!(
            picture.alt.contains("0.5 kWh of heat are not met"),
            "{}",
            picture.alt
        );
        assert!(picture.alt.starts_with("Three measures"));
    }

    #[test]
    fn nothing_is_refused() {
        let mut none = data();
        none.hours.clear();
        assert!(matches!(
            coldest_days(&none, &Marks::default()),
            Err(ChartError::Empty { .. })
        ));
    }
}
