//! Output and COP of a machine against source temperature, one line a flow temperature, tested points on them.

use super::ends::{self, End};
use super::font::Weight;
use super::frame::{Axis, Frame};
use super::geometry::Rect;
use super::key::Swatch;
use super::label::{Anchor, SMALL, Type};
use super::numbers::Marks;
use super::palette::{AXIS, Dash, GRID, Hatch, INK, Mark, Series, WHITE, series};
use super::scene::{MARGIN, Scene, WIDTH};
use super::{ChartError, Picture, finite, named, sentence};

const PICTURE: &str = "machine performance";

/// What is drawn.
#[derive(Debug, Clone, PartialEq)]
pub struct MachinePerformance {
    /// Name of the machine.
    pub machine: String,
    /// What the source temperature is of, for example "Outdoor air" or "Brine entering".
    pub source: String,
    /// One line a flow temperature.
    pub flows: Vec<FlowCurve>,
    /// Points of the datasheet.
    pub tested: Vec<TestedPoint>,
    /// Lowest and highest source temperature at which the machine may run, °C.
    pub envelope: Option<(f64, f64)>,
}

/// The model at one flow temperature.
#[derive(Debug, Clone, PartialEq)]
pub struct FlowCurve {
    /// Flow temperature, °C.
    pub flow_c: f64,
    /// Source temperature in °C, greatest output in kW, COP; rising in source temperature.
    pub points: Vec<(f64, f64, f64)>,
}

/// One point of the datasheet.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct TestedPoint {
    /// Source temperature, °C.
    pub source_c: f64,
    /// Flow temperature, °C.
    pub flow_c: f64,
    /// Output, kW.
    pub output_kw: f64,
    /// COP.
    pub cop: f64,
}

const PLOT: f64 = 220.0;
const RIGHT: f64 = 96.0;
/// A tested point belongs to a line when its flow temperature is no further off than this, K.
const SAME_FLOW_K: f64 = 0.6;
/// How a tested point at another flow temperature is drawn.
const OTHER: Series = Series {
    colour: INK,
    hatch: Hatch::Plain,
    dash: Dash::Solid,
    mark: Mark::Cross,
};

/// Draws output and COP.
///
/// # Errors
/// [`ChartError::Empty`] without a line, [`ChartError::NotFinite`] for a value that is not a number.
pub fn machine_performance(
    data: &MachinePerformance,
    marks: &Marks,
) -> Result<Picture, ChartError> {
    check(data)?;
    let title = "Output and COP of the machine";
    let mut subtitle = format!("{} Lines: the model.", sentence(&data.machine, 320.0));
    if !data.tested.is_empty() {
        subtitle += " Points: tested, from the datasheet.";
    }
    let mut scene = Scene::new(f64::MAX);
    let below = scene.heading(title, &subtitle);
    let mut entries: Vec<(Swatch, String)> = data
        .flows
        .iter()
        .enumerate()
        .map(|(i, f)| {
            (
                Swatch::Series(series(i)),
                format!("flow {}\u{a0}°C", marks.number(f.flow_c, 0)),
            )
        })
        .collect();
    if data.tested.iter().any(|t| line_of(data, t).is_none()) {
        entries.push((
            Swatch::Point(OTHER),
            "tested at another flow temperature".into(),
        ));
    }
    if data.envelope.is_some() {
        entries.push((
            Swatch::Area(AXIS, Hatch::Rising),
            "outside its limits".into(),
        ));
    }
    let top = scene.key(&entries, MARGIN, below, WIDTH - 2.0 * MARGIN);
    let panel = PLOT + super::frame::ABOVE + super::frame::BELOW;
    scene.height = top + 2.0 * panel + 4.0;
    let picks = [OUTPUT, COP];
    let mut frames = [0, 1].map(|i| frame(data, &picks[i], top + panel * i as f64, panel, marks));
    let left = frames[0].area.left.max(frames[1].area.left);
    for (frame, pick) in frames.iter_mut().zip(&picks) {
        frame.area.left = left;
        draw_panel(&mut scene, frame, data, pick, marks);
    }
    Ok(Picture::new(title, alt(data, marks), scene))
}

/// What a panel shows.
struct Pick {
    title: &'static str,
    of: fn((f64, f64, f64)) -> f64,
}

const OUTPUT: Pick = Pick {
    title: "Greatest output, kW",
    of: |p| p.1,
};
const COP: Pick = Pick {
    title: "COP (no unit)",
    of: |p| p.2,
};

fn check(data: &MachinePerformance) -> Result<(), ChartError> {
    if data.flows.iter().all(|f| f.points.is_empty()) {
        return Err(ChartError::Empty {
            picture: PICTURE,
            missing: "no flow temperature has a point",
        });
    }
    for f in &data.flows {
        finite(PICTURE, [("flow temperature", f.flow_c)])?;
        for p in &f.points {
            finite(
                PICTURE,
                [("source temperature", p.0), ("output", p.1), ("COP", p.2)],
            )?;
        }
    }
    for t in &data.tested {
        finite(
            PICTURE,
            [
                ("tested source temperature", t.source_c),
                ("tested flow temperature", t.flow_c),
                ("tested output", t.output_kw),
                ("tested COP", t.cop),
            ],
        )?;
    }
    finite(
        PICTURE,
        data.envelope
            .iter()
            .flat_map(|e| [("lower limit", e.0), ("upper limit", e.1)]),
    )
}

/// The line a tested point belongs to.
fn line_of(data: &MachinePerformance, tested: &TestedPoint) -> Option<usize> {
    data.flows
        .iter()
        .position(|f| (f.flow_c - tested.flow_c).abs() <= SAME_FLOW_K)
}

fn all<'a>(data: &'a MachinePerformance) -> impl Iterator<Item = (f64, f64, f64)> + 'a {
    let tested = data.tested.iter().map(|t| (t.source_c, t.output_kw, t.cop));
    data.flows
        .iter()
        .flat_map(|f| f.points.iter().copied())
        .chain(tested)
}

fn frame(data: &MachinePerformance, pick: &Pick, top: f64, panel: f64, marks: &Marks) -> Frame {
    let ends = |value: &dyn Fn((f64, f64, f64)) -> f64| {
        all(data).fold((f64::INFINITY, f64::NEG_INFINITY), |(low, high), p| {
            (low.min(value(p)), high.max(value(p)))
        })
    };
    let x = ends(&|p| p.0);
    let high = ends(&pick.of).1;
    let title = format!("{} temperature, °C", named(&data.source));
    Frame::inside(
        Rect {
            left: MARGIN,
            top,
            right: WIDTH - MARGIN - RIGHT + 12.0,
            bottom: top + panel,
        },
        Axis::linear(&title, x.0, x.1, 7, marks),
        Axis::linear(
            pick.title,
            0.0,
            if high > 0.0 { high } else { 1.0 },
            5,
            marks,
        ),
    )
}

fn draw_panel(
    scene: &mut Scene,
    frame: &Frame,
    data: &MachinePerformance,
    pick: &Pick,
    marks: &Marks,
) {
    if let Some((low, high)) = data.envelope {
        let (low, high) = (low.max(frame.x.low), high.min(frame.x.high));
        for (from, to) in [(frame.x.low, low), (high, frame.x.high)] {
            if to > from {
                let shade = Rect {
                    left: frame.at_x(from),
                    right: frame.at_x(to),
                    ..frame.area
                };
                scene.hatched(&shade.corners(), GRID, Hatch::Rising);
                scene.line(
                    &[
                        (frame.at_x(to), frame.area.top),
                        (frame.at_x(to), frame.area.bottom),
                    ],
                    GRID,
                    1.0,
                );
            }
        }
    }
    frame.draw(scene);
    let mut names = Vec::new();
    for (i, flow) in data.flows.iter().enumerate() {
        let look = series(i);
        let line: Vec<(f64, f64)> = flow.points.iter().map(|p| (p.0, (pick.of)(*p))).collect();
        frame.line(scene, &line, look.colour, 2.6, look.dash);
        if let Some(last) = line.last() {
            names.push(End {
                at: frame.at(last.0, last.1),
                text: format!("{}\u{a0}°C", marks.number(flow.flow_c, 0)),
                colour: look.colour,
                bold: false,
            });
        }
    }
    for tested in &data.tested {
        let value = (pick.of)((tested.source_c, tested.output_kw, tested.cop));
        let at = frame.at(tested.source_c, value);
        let look = line_of(data, tested).map_or(OTHER, series);
        scene.disc(at, 6.2, WHITE);
        scene.mark(at, 5.0, look);
    }
    ends::draw(scene, frame, &names, RIGHT);
    let set = Type::new(SMALL, Weight::Regular, super::palette::MUTED);
    let head = (frame.area.right + 16.0, frame.area.top - 11.0);
    scene.place_bare("flow", head, Anchor::Start, set);
}

fn alt(data: &MachinePerformance, marks: &Marks) -> String {
    let mut out = format!(
        "Greatest output and COP of {} against {} temperature.",
        named(&data.machine),
        named(&data.source).to_lowercase()
    );
    for flow in &data.flows {
        if let (Some(cold), Some(warm)) = (flow.points.first(), flow.points.last()) {
            out += &format!(
                " At {} °C flow: {} kW and COP {} at {} °C, {} kW and COP {} at {} °C.",
                marks.number(flow.flow_c, 0),
                marks.number(cold.1, 1),
                marks.number(cold.2, 2),
                marks.number(cold.0, 0),
                marks.number(warm.1, 1),
                marks.number(warm.2, 2),
                marks.number(warm.0, 0)
            );
        }
    }
    if let Some((low, high)) = data.envelope {
        out += &format!(
            " It may run from {} to {} °C.",
            marks.number(low, 0),
            marks.number(high, 0)
        );
    }
    out += &format!(" {} tested points are drawn.", data.tested.len());
    out
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_tested_point_goes_to_the_line_of_its_flow_temperature() {
        let flow = |flow_c| FlowCurve {
            flow_c,
            points: vec![(-7.0, 5.0, 2.5), (7.0, 7.0, 4.0)],
        };
        let data = MachinePerformance {
            machine: "M".into(),
            source: "Outdoor air".into(),
            flows: vec![flow(35.0), flow(55.0)],
            tested: vec![],
            envelope: None,
        };
        let tested = |flow_c| TestedPoint {
            source_c: 2.0,
            flow_c,
            output_kw: 6.0,
            cop: 3.0,
        };
        assert_eq!(line_of(&data, &tested(55.0)), Some(1));
        assert_eq!(line_of(&data, &tested(45.0)), None);
    }
}
