//! The refrigerant cycle on its pressure–enthalpy diagram: saturation dome, cycle, numbered state points.

use super::font::{self, Weight};
use super::frame::{Axis, Frame, around};
use super::geometry::{self, Rect};
use super::label::{Anchor, BODY, SMALL, Type};
use super::numbers::Marks;
use super::palette::{Dash, INK, NAVY, TEAL, WHITE};
use super::scene::{MARGIN, Scene, WIDTH};
use super::{ChartError, Picture, finite};

const PICTURE: &str = "pressure–enthalpy diagram";

/// What is drawn. Points are (specific enthalpy in kJ/kg, absolute pressure in kPa).
#[derive(Debug, Clone, PartialEq)]
pub struct PressureEnthalpy {
    /// Name of the refrigerant.
    pub fluid: String,
    /// Saturation line: boiling liquid from low pressure up to the critical point, then dry vapour down again.
    pub dome: Vec<(f64, f64)>,
    /// The cycle as a line; it is closed by the picture.
    pub cycle: Vec<(f64, f64)>,
    /// The state points, in the order of the flow.
    pub states: Vec<StatePoint>,
    /// Evaporating temperature in °C.
    pub evaporating_c: f64,
    /// Condensing temperature in °C.
    pub condensing_c: f64,
    /// Heating COP, when it is to be written.
    pub cop_heating: Option<f64>,
}

/// A numbered state.
#[derive(Debug, Clone, PartialEq)]
pub struct StatePoint {
    /// Number or short sign, written at the point.
    pub point: String,
    /// What happens there, for the table.
    pub name: String,
    /// Temperature in °C.
    pub temperature_c: f64,
    /// Absolute pressure in kPa.
    pub pressure_kpa: f64,
    /// Specific enthalpy in kJ/kg.
    pub enthalpy_kj_per_kg: f64,
}

const PLOT: f64 = 372.0;
const TABLE_ROW: f64 = 21.0;

/// Draws the diagram.
///
/// # Errors
/// [`ChartError::Empty`] without a cycle, [`ChartError::NotFinite`] for a value that is not a number or a pressure that
/// is not above zero.
pub fn pressure_enthalpy(data: &PressureEnthalpy, marks: &Marks) -> Result<Picture, ChartError> {
    check(data)?;
    let temperature = |t: f64| format!("{}\u{a0}°C", marks.number(t, 1));
    let title = format!("{}: the cycle in the pressure–enthalpy diagram", data.fluid);
    let mut subtitle = format!(
        "Evaporating at {}, condensing at {}.",
        temperature(data.evaporating_c),
        temperature(data.condensing_c)
    );
    if let Some(cop) = data.cop_heating {
        subtitle += &format!(" Heating COP of the cycle {}.", marks.number(cop, 2));
    }
    let mut scene = Scene::new(f64::MAX);
    let top = scene.heading(&title, &subtitle);
    let table_rows = data.states.len() as f64 + 1.0;
    let table = top + PLOT + 10.0;
    scene.height = (table + table_rows * TABLE_ROW + 14.0).ceil();

    let frame = frame(data, top, marks);
    frame.draw(&mut scene);
    draw_bar_axis(&mut scene, &frame, marks);
    frame.border(&mut scene);
    draw_dome(&mut scene, &frame, data);
    draw_cycle(&mut scene, &frame, data);
    label_phases(&mut scene, &frame, data, &temperature);
    draw_table(&mut scene, data, table, marks);
    let alt = alt(data, &subtitle, marks);
    Ok(Picture::new(&title, alt, scene))
}

fn check(data: &PressureEnthalpy) -> Result<(), ChartError> {
    if data.cycle.len() < 2 {
        return Err(ChartError::Empty {
            picture: PICTURE,
            missing: "the cycle has no points",
        });
    }
    let states = data
        .states
        .iter()
        .map(|s| (s.enthalpy_kj_per_kg, s.pressure_kpa));
    for (h, p) in data.dome.iter().chain(&data.cycle).copied().chain(states) {
        finite(PICTURE, [("enthalpy", h), ("pressure", p)])?;
        if p <= 0.0 {
            return Err(ChartError::NotFinite {
                picture: PICTURE,
                what: "the logarithm of a pressure".into(),
                value: p,
            });
        }
    }
    finite(
        PICTURE,
        [
            ("evaporating temperature", data.evaporating_c),
            ("condensing temperature", data.condensing_c),
        ],
    )?;
    finite(PICTURE, data.cop_heating.map(|cop| ("heating COP", cop)))?;
    finite(
        PICTURE,
        data.states
            .iter()
            .map(|s| (s.name.as_str(), s.temperature_c)),
    )
}

fn frame(data: &PressureEnthalpy, top: f64, marks: &Marks) -> Frame {
    let extent = |values: &mut dyn Iterator<Item = f64>| {
        values.fold((f64::INFINITY, f64::NEG_INFINITY), |(low, high), v| {
            (low.min(v), high.max(v))
        })
    };
    let cycle_p = extent(&mut data.cycle.iter().map(|c| c.1));
    let all_p = extent(&mut data.cycle.iter().chain(&data.dome).map(|c| c.1));
    // Pressures far below the cycle say nothing about it: the dome is cut there.
    let y = Axis::logarithmic(
        "Pressure, kPa (log scale)",
        cycle_p.0 * 0.62,
        all_p.1 * 1.08,
        marks,
    );
    let seen = data
        .cycle
        .iter()
        .chain(data.dome.iter().filter(|d| d.1 >= y.low));
    let h = extent(&mut seen.map(|c| c.0));
    let x = Axis::linear("Specific enthalpy, kJ/kg", h.0, h.1, 7, marks);
    Frame::inside(
        Rect {
            left: MARGIN,
            top,
            right: WIDTH - MARGIN - 30.0,
            bottom: top + PLOT,
        },
        x,
        y,
    )
}

/// The same pressures in bar at the right edge.
fn draw_bar_axis(scene: &mut Scene, frame: &Frame, marks: &Marks) {
    let right = frame.area.right;
    for (kpa, _) in &frame.y.ticks {
        let bar = kpa / 100.0;
        let decimals = (-bar.log10().floor()).max(0.0) as usize;
        let at = (right + 6.0, frame.at_y(*kpa) + 4.6);
        scene.tick(&marks.number(bar, decimals), at, Anchor::Start);
    }
    scene.text(
        "bar",
        (WIDTH - MARGIN, frame.area.top - 11.0),
        Anchor::End,
        Type::small(),
    );
}

fn draw_dome(scene: &mut Scene, frame: &Frame, data: &PressureEnthalpy) {
    let points: Vec<_> = data.dome.iter().map(|&(h, p)| frame.at(h, p)).collect();
    let inside = geometry::clip_area(&points, &frame.area);
    scene.area(&inside, TEAL.lighter(0.88), 1.0);
    frame.line(scene, &data.dome, TEAL, 2.0, Dash::Solid);
}

fn draw_cycle(scene: &mut Scene, frame: &Frame, data: &PressureEnthalpy) {
    let mut ring = data.cycle.clone();
    ring.push(data.cycle[0]);
    frame.line(scene, &ring, NAVY, 3.0, Dash::Solid);
    // One arrow a side, between state points, so that a finely drawn side has one as well.
    let corners: Vec<_> = data
        .states
        .iter()
        .map(|s| frame.at(s.enthalpy_kj_per_kg, s.pressure_kpa))
        .collect();
    for (i, &from) in corners.iter().enumerate() {
        scene.arrow(from, corners[(i + 1) % corners.len()], NAVY);
    }
    for state in &data.states {
        let at = frame.at(state.enthalpy_kj_per_kg, state.pressure_kpa);
        scene.disc(at, 6.0, NAVY);
        scene.disc(at, 3.4, WHITE);
    }
    let set = Type::new(BODY + 1.0, Weight::Bold, INK);
    let centre = corners
        .iter()
        .fold((0.0, 0.0), |c, p| (c.0 + p.0, c.1 + p.1));
    let centre = (
        centre.0 / corners.len().max(1) as f64,
        centre.1 / corners.len().max(1) as f64,
    );
    for (state, &(x, y)) in data.states.iter().zip(&corners) {
        // Outside the cycle, away from its middle, first.
        let anchor = if x < centre.0 {
            Anchor::End
        } else {
            Anchor::Start
        };
        let side = if x < centre.0 { -9.0 } else { 9.0 };
        let lift = if y < centre.1 { -8.0 } else { 20.0 };
        let mut places = vec![((x + side, y + lift), anchor)];
        places.extend(around(x, y, 10.0));
        let sign = font::fit(&state.point, set.size, set.weight, 60.0);
        scene.place(&frame.area, &sign, &places, set);
    }
}

/// Distance of the condensing line from the top of the dome that its name and that of the critical point need between them.
const ROOM_BELOW_DOME: f64 = 56.0;

fn label_phases(
    scene: &mut Scene,
    frame: &Frame,
    data: &PressureEnthalpy,
    temperature: &impl Fn(f64) -> String,
) {
    let level = |pick: fn(f64, f64) -> f64, start: f64| {
        let p = data.cycle.iter().map(|c| c.1).fold(start, pick);
        let on: Vec<f64> = data
            .cycle
            .iter()
            .filter(|c| (c.1 / p - 1.0).abs() < 0.01)
            .map(|c| c.0)
            .collect();
        let low = on.iter().copied().fold(f64::INFINITY, f64::min);
        let high = on.iter().copied().fold(f64::NEG_INFINITY, f64::max);
        frame.at((low + high) / 2.0, p)
    };
    let set = Type::new(SMALL + 1.0, Weight::Regular, NAVY);
    let condensing = format!("condensing {}", temperature(data.condensing_c));
    let (x, y) = level(f64::max, 0.0);
    // Condensing near the critical point, the top of the dome and its name fill the room above the line.
    let top_y = data
        .dome
        .iter()
        .map(|point| frame.at(point.0, point.1).1)
        .fold(f64::INFINITY, f64::min);
    let places: Vec<_> = if y - top_y < ROOM_BELOW_DOME {
        // Beside the middle as well, where the line of dry vapour comes down through it.
        [0.0, -25.0, -45.0, -65.0]
            .map(|dx| ((x + dx, y + 22.0), Anchor::Middle))
            .into()
    } else {
        [-10.0, 22.0, -24.0, 36.0]
            .map(|dy| ((x, y + dy), Anchor::Middle))
            .into()
    };
    scene.place(&frame.area, &condensing, &places, set);
    let evaporating = format!("evaporating {}", temperature(data.evaporating_c));
    let (x, y) = level(f64::min, f64::INFINITY);
    let places: Vec<_> = [22.0, -10.0, 36.0, -24.0]
        .map(|dy| ((x, y + dy), Anchor::Middle))
        .into();
    scene.place(&frame.area, &evaporating, &places, set);

    // Names of the regions, where the dome leaves room for them.
    let Some(top) = data.dome.iter().copied().max_by(|a, b| a.1.total_cmp(&b.1)) else {
        return;
    };
    let (crit_x, crit_y) = frame.at(top.0, top.1);
    let quiet = Type::small();
    scene.disc((crit_x, crit_y), 3.2, TEAL);
    scene.place_bare(
        "critical point",
        (crit_x, crit_y + 20.0),
        Anchor::Middle,
        quiet,
    );
    let area = frame.area;
    let third = area.top + 0.2 * (area.bottom - area.top);
    scene.place_bare("liquid", (area.left + 12.0, third), Anchor::Start, quiet);
    scene.place_bare("vapour", (area.right - 12.0, third), Anchor::End, quiet);
    let (_, upper) = level(f64::max, 0.0);
    let (x, lower) = level(f64::min, f64::INFINITY);
    // Only between lines that leave room for it.
    if lower - upper > 40.0 {
        let middle = (x, (upper + lower) / 2.0 + 5.0);
        scene.place_bare("liquid and vapour", middle, Anchor::Middle, quiet);
    }
}

fn draw_table(scene: &mut Scene, data: &PressureEnthalpy, top: f64, marks: &Marks) {
    if data.states.is_empty() {
        return;
    }
    let columns = [
        (MARGIN + 8.0, Anchor::Start),
        (MARGIN + 60.0, Anchor::Start),
        (400.0, Anchor::End),
        (540.0, Anchor::End),
        (WIDTH - MARGIN - 8.0, Anchor::End),
    ];
    let heads = [
        "Point",
        "",
        "Temperature, °C",
        "Pressure, kPa",
        "Enthalpy, kJ/kg",
    ];
    let mut y = top + 14.0;
    for (text, (x, anchor)) in heads.iter().zip(columns) {
        scene.text(text, (x, y), anchor, Type::small());
    }
    let set = Type::new(SMALL + 0.5, Weight::Regular, INK);
    for state in &data.states {
        scene.line(
            &[(MARGIN, y + 6.0), (WIDTH - MARGIN, y + 6.0)],
            super::palette::GRID,
            1.0,
        );
        y += TABLE_ROW;
        let room = [40.0, 220.0];
        let cells = [
            font::fit(&state.point, set.size, Weight::Bold, room[0]),
            font::fit(&state.name, set.size, set.weight, room[1]),
            marks.number(state.temperature_c, 1),
            marks.number(state.pressure_kpa, 0),
            marks.number(state.enthalpy_kj_per_kg, 1),
        ];
        for (i, (text, (x, anchor))) in cells.iter().zip(columns).enumerate() {
            let weight = if i == 0 {
                Weight::Bold
            } else {
                Weight::Regular
            };
            scene.text(text, (x, y), anchor, Type { weight, ..set });
        }
    }
}

fn alt(data: &PressureEnthalpy, subtitle: &str, marks: &Marks) -> String {
    let mut out = format!(
        "Pressure–enthalpy diagram of {} with its saturation dome and a refrigerant cycle of {} state points. {subtitle}",
        data.fluid,
        data.states.len()
    );
    for state in &data.states {
        out += &format!(
            " Point {}, {}: {} °C, {} kPa, {} kJ/kg.",
            state.point,
            state.name,
            marks.number(state.temperature_c, 1),
            marks.number(state.pressure_kpa, 0),
            marks.number(state.enthalpy_kj_per_kg, 1)
        );
    }
    out
}

#[cfg(test)]
mod tests {
    use super::*;

    fn small() -> PressureEnthalpy {
        let state = |point: &str, h, p| StatePoint {
            point: point.into(),
            name: "state".into(),
            temperature_c: 0.0,
            pressure_kpa: p,
            enthalpy_kj_per_kg: h,
        };
        PressureEnthalpy {
            fluid: "R290".into(),
            dome: vec![],
            cycle: vec![
                (578.0, 406.0),
                (669.0, 1534.0),
                (313.0, 1534.0),
                (313.0, 406.0),
            ],
            states: vec![state("1", 578.0, 406.0), state("2", 669.0, 1534.0)],
            evaporating_c: -5.0,
            condensing_c: 45.0,
            cop_heating: Some(3.894),
        }
    }

    #[test]
    fn state_points_and_temperatures_are_written() {
        let picture = pressure_enthalpy(&small(), &Marks::default()).unwrap();
        let texts: Vec<&str> = picture.labels().iter().map(|l| l.text.as_str()).collect();
        for wanted in [
            "condensing 45.0\u{a0}°C",
            "evaporating −5.0\u{a0}°C",
            "1",
            "2",
            "bar",
        ] {
            assert!(texts.contains(&wanted), "{wanted} not in {texts:?}");
        }
        assert!(picture.alt.contains("COP of the cycle 3.89"));
    }

    #[test]
    fn pressure_axis_encloses_the_cycle() {
        let f = frame(&small(), 0.0, &Marks::default());
        assert!(f.y.low < 406.0 && f.y.high > 1534.0);
    }

    #[test]
    fn impossible_values_are_refused() {
        let mut data = small();
        data.cycle[1].1 = 0.0;
        assert!(pressure_enthalpy(&data, &Marks::default()).is_err());
        data = small();
        data.states[0].temperature_c = f64::INFINITY;
        assert!(pressure_enthalpy(&data, &Marks::default()).is_err());
        data = small();
        data.cycle.clear();
        assert!(matches!(
            pressure_enthalpy(&data, &Marks::default()),
            Err(ChartError::Empty { .. })
        ));
    }
}
