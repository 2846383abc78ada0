//! Energy flow of a year: from source and meters through the heater to rooms and taps, each band as high as its energy.

use super::font::{self, Weight};
use super::geometry::Point;
use super::label::{Anchor, BODY, SMALL, Type};
use super::numbers::{self, Marks};
use super::palette::{
    AXIS, AZURE, BROWN, CORAL, Colour, GRID, Hatch, INK, MUTED, NAVY, OCHRE, TEAL,
};
use super::scene::{MARGIN, Scene};
use super::{ChartError, Picture, finite, named, sentence};

const PICTURE: &str = "energy flow";

/// What is drawn.
#[derive(Debug, Clone, PartialEq)]
pub struct EnergyFlow {
    /// Name of the system.
    pub system: String,
    /// What stands in the middle, for example "heat pump".
    pub heater: String,
    /// What goes in.
    pub from: Vec<Flow>,
    /// What comes out; the sum is that of what goes in.
    pub to: Vec<Flow>,
}

/// One flow.
#[derive(Debug, Clone, PartialEq)]
pub struct Flow {
    /// What it is.
    pub kind: FlowKind,
    /// Its name.
    pub label: String,
    /// Energy of a year, kWh, 0 or more.
    pub kwh: f64,
}

/// What a flow is, which is how it looks.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum FlowKind {
    /// Heat of air or ground.
    Surroundings,
    /// Electricity.
    Electricity,
    /// Electricity that becomes heat without a machine.
    Backup,
    /// Fuel.
    Fuel,
    /// Heat to the rooms.
    Rooms,
    /// Hot water.
    HotWater,
    /// What is lost.
    Loss,
}

impl FlowKind {
    fn look(self) -> (Colour, Hatch) {
        match self {
            Self::Surroundings => (AZURE, Hatch::Plain),
            Self::Electricity => (NAVY, Hatch::Plain),
            Self::Backup => (CORAL, Hatch::Rising),
            Self::Fuel => (BROWN, Hatch::Rising),
            Self::Rooms => (OCHRE, Hatch::Plain),
            Self::HotWater => (TEAL, Hatch::Falling),
            Self::Loss => (AXIS, Hatch::Level),
        }
    }
}

/// Height of the whole energy.
const TALL: f64 = 210.0;
/// Least room of a flow, for its two lines of text.
const SLOT: f64 = 44.0;
/// Height of a line of a name.
const LINE: f64 = 17.0;
/// Width of a node.
const NODE: f64 = 16.0;
/// Left edges of the three nodes, and those on a phone.
const NODES: [f64; 3] = [212.0, 352.0, 492.0];
const PHONE_NODES: [f64; 3] = [128.0, 194.0, 260.0];
/// Straight pieces of a bent edge.
const PIECES: usize = 24;

/// Left edges of the nodes on this canvas.
fn nodes(scene: &Scene) -> [f64; 3] {
    if scene.narrow() { PHONE_NODES } else { NODES }
}

/// Draws the energy flow.
///
/// # Errors
/// [`ChartError::Empty`] when no energy flows, [`ChartError::NotFinite`] for a flow that is not a number or below 0.
pub fn energy_flow(data: &EnergyFlow, marks: &Marks) -> Result<Picture, ChartError> {
    for flow in data.from.iter().chain(&data.to) {
        let kwh = if flow.kwh < 0.0 { f64::NAN } else { flow.kwh };
        finite(PICTURE, [(flow.label.as_str(), kwh)])?;
    }
    let sides: [Vec<&Flow>; 2] =
        [&data.from, &data.to].map(|side| side.iter().filter(|f| f.kwh > 0.0).collect());
    let sum = |side: &[&Flow]| side.iter().map(|f| f.kwh).sum::<f64>();
    let whole = sum(&sides[0]).max(sum(&sides[1]));
    if whole <= 0.0 {
        return Err(ChartError::Empty {
            picture: PICTURE,
            missing: "no energy flows",
        });
    }
    let title = "Where the heat comes from and goes to";
    let subtitle = format!(
        "{} Energy of a year; each band is as high as its energy.",
        sentence(&data.system, 320.0)
    );
    let mut scene = Scene::of(marks);
    let top = scene.heading(title, &subtitle) + 26.0;
    let scale = TALL / whole;
    let nodes = nodes(&scene);
    // On a phone a name takes two lines.
    let least = if scene.narrow() { SLOT + LINE } else { SLOT };
    let room = |side: &[&Flow]| side.iter().map(|f| (f.kwh * scale).max(least)).sum::<f64>();
    let tall = room(&sides[0]).max(room(&sides[1])).max(TALL);
    scene.height = (top + tall + 2.0 * MARGIN).ceil();

    let centre = top + tall / 2.0;
    let heater = [
        (nodes[1], centre - TALL / 2.0),
        (nodes[1] + NODE, centre + TALL / 2.0),
    ];
    for (left, side) in [(true, &sides[0]), (false, &sides[1])] {
        let mut slot = centre - room(side) / 2.0;
        let mut at_heater = heater[0].1;
        for flow in side {
            let high = flow.kwh * scale;
            let y = slot + (high.max(least) - high) / 2.0;
            draw_band(&mut scene, flow, left, (y, at_heater), high);
            draw_label(&mut scene, flow, left, y + high / 2.0, whole, marks);
            slot += high.max(least);
            at_heater += high;
        }
    }
    let block = [
        heater[0],
        (heater[1].0, heater[0].1),
        heater[1],
        (heater[0].0, heater[1].1),
    ];
    scene.area(&block, INK, 1.0);
    let set = Type::new(BODY, Weight::Bold, INK);
    let name = font::fit(named(&data.heater), set.size, set.weight, 260.0);
    let above = (nodes[1] + NODE / 2.0, heater[0].1 - 10.0);
    if scene.narrow() {
        scene.plate(&name, above, Anchor::Middle, set);
    } else {
        scene.text(&name, above, Anchor::Middle, set);
    }
    Ok(Picture::new(title, alt(data, &sides, marks), scene))
}

/// Draws a flow's node and its band to or from the heater; `ys` are the upper edges at the node and at the heater.
fn draw_band(scene: &mut Scene, flow: &Flow, left: bool, ys: (f64, f64), high: f64) {
    let nodes = nodes(scene);
    let (colour, hatch) = flow.kind.look();
    let (node, from, to) = if left {
        (nodes[0], nodes[0] + NODE, nodes[1])
    } else {
        (nodes[2], nodes[2], nodes[1] + NODE)
    };
    // A smooth step from one height to the other.
    let edge = |by: f64| -> Vec<Point> {
        (0..=PIECES)
            .map(|i| {
                let t = i as f64 / PIECES as f64;
                let bent = t * t * (3.0 - 2.0 * t);
                (from + (to - from) * t, ys.0 + (ys.1 - ys.0) * bent + by)
            })
            .collect()
    };
    let mut band = edge(0.0);
    band.extend(edge(high).into_iter().rev());
    scene.area(&band, colour.lighter(0.5), 1.0);
    let corners = [
        (node, ys.0),
        (node + NODE, ys.0),
        (node + NODE, ys.0 + high),
        (node, ys.0 + high),
    ];
    scene.hatched(&corners, colour, hatch);
    scene.outline(&corners, GRID, 0.6);
}

fn draw_label(scene: &mut Scene, flow: &Flow, left: bool, middle: f64, whole: f64, marks: &Marks) {
    let nodes = nodes(scene);
    let (x, anchor, room) = if left {
        (nodes[0] - 10.0, Anchor::End, nodes[0] - 10.0 - MARGIN)
    } else {
        let x = nodes[2] + NODE + 10.0;
        (x, Anchor::Start, scene.width - MARGIN - x)
    };
    let most = if scene.narrow() { 2 } else { 1 };
    let size = if scene.narrow() { SMALL } else { BODY };
    let name = Type::new(size, Weight::Regular, INK);
    let lines = font::wrap(named(&flow.label), name.size, name.weight, room, most);
    let mut y = middle - 2.0 - LINE / 2.0 * (lines.len() as f64 - 1.0);
    for line in &lines {
        scene.text(line, (x, y), anchor, name);
        y += LINE;
    }
    let amount = font::fit(&amount(flow, whole, marks), SMALL, Weight::Regular, room);
    scene.text(
        &amount,
        (x, y),
        anchor,
        Type::new(SMALL, Weight::Regular, MUTED),
    );
}

fn amount(flow: &Flow, whole: f64, marks: &Marks) -> String {
    let percent = flow.kwh / whole * 100.0;
    let share = if percent < 0.5 {
        "under 1".to_owned()
    } else {
        marks.number(percent, 0)
    };
    let kwh = marks.number(flow.kwh, 0);
    if marks.phone {
        format!("{kwh} kWh")
    } else {
        format!("{kwh} kWh, {share} %")
    }
}

fn alt(data: &EnergyFlow, sides: &[Vec<&Flow>; 2], marks: &Marks) -> String {
    let side = |flows: &[&Flow]| {
        let parts: Vec<String> = flows
            .iter()
            .map(|f| format!("{} {} kWh", named(&f.label), marks.number(f.kwh, 0)))
            .collect();
        numbers::list(&parts)
    };
    format!(
        "Energy of a year through the {} of {}. In: {}. Out: {}.",
        named(&data.heater),
        named(&data.system),
        side(&sides[0]),
        side(&sides[1])
    )
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn every_flow_is_named_with_its_energy() {
        let flow = |kind, label: &str, kwh| Flow {
            kind,
            label: label.into(),
            kwh,
        };
        let data = EnergyFlow {
            system: "Air".into(),
            heater: "heat pump".into(),
            from: vec![
                flow(FlowKind::Surroundings, "outdoor air", 9000.0),
                flow(FlowKind::Electricity, "electricity", 3000.0),
                flow(FlowKind::Backup, "backup", 0.0),
            ],
            to: vec![flow(FlowKind::Rooms, "rooms", 12_000.0)],
        };
        let picture = energy_flow(&data, &Marks::default()).unwrap();
        assert!(
            picture
                .alt
                .contains("outdoor air 9,000 kWh and electricity 3,000 kWh")
        );
        assert!(!picture.alt.contains("backup"));
        assert!(picture.labels().iter().any(|l| l.text == "9,000 kWh, 75 %"));
        let nothing = EnergyFlow {
            from: vec![],
            to: vec![],
            ..data
        };
        assert!(energy_flow(&nothing, &Marks::default()).is_err());
    }
}
