//! Month by month, system by system: what it costs and how much energy is bought.

use super::bars::draw_name;
use super::font::{self, Weight};
use super::frame::{Axis, Frame};
use super::geometry::Rect;
use super::key::Swatch;
use super::label::{Anchor, SMALL, Type};
use super::numbers::{Marks, money_unit};
use super::palette::{AXIS, AZURE, BROWN, Colour, Hatch, INK, NAVY};
use super::scene::{MARGIN, Scene};
use super::{ChartError, Picture, finite, named};

const PICTURE: &str = "month by month";

/// What is drawn.
#[derive(Debug, Clone, PartialEq)]
pub struct Monthly {
    /// Currency code, for example GBP.
    pub currency: String,
    /// Short names of the months, in order.
    pub months: Vec<String>,
    /// The systems, in the order they are to stand.
    pub systems: Vec<MonthlySystem>,
}

/// The months of one system; each list is as long as the months.
#[derive(Debug, Clone, PartialEq)]
pub struct MonthlySystem {
    /// Name.
    pub label: String,
    /// Whether this is what heats the home today.
    pub today: bool,
    /// Cost in the currency.
    pub cost: Vec<f64>,
    /// Electricity bought, kWh.
    pub electricity_kwh: Vec<f64>,
    /// Fuel bought, kWh.
    pub fuel_kwh: Vec<f64>,
}

const BLOCK: f64 = 168.0;
/// Height of the line of sums where it stands below the name.
const SUMS: f64 = 20.0;
const PLOT: f64 = 92.0;
const MONTH: Type = Type::new(11.0, Weight::Regular, super::palette::MUTED);

/// Draws the months.
///
/// # Errors
/// [`ChartError::Empty`] without systems or months, [`ChartError::Uneven`] for lists of different length,
/// [`ChartError::NotFinite`] for a value that is not a number.
pub fn monthly(data: &Monthly, marks: &Marks) -> Result<Picture, ChartError> {
    check(data)?;
    let title = "Month by month";
    let mut scene = Scene::of(marks);
    let below = scene.heading(
        title,
        "Cost with all charges, and energy bought, by system. All systems share one scale.",
    );
    let entries = [
        (Swatch::Area(NAVY, Hatch::Plain), "cost"),
        (Swatch::Area(AZURE, Hatch::Plain), "electricity"),
        (Swatch::Area(BROWN, Hatch::Rising), "fuel"),
    ];
    let top = scene.key(&entries, MARGIN, below, scene.width - 2.0 * MARGIN) + 4.0;
    // On a phone the sums stand below the name.
    let below_name = if scene.narrow() { SUMS } else { 0.0 };
    let block = BLOCK + below_name;
    scene.height = top + block * data.systems.len() as f64 + 8.0;

    let ends = |values: &mut dyn Iterator<Item = f64>| {
        let (low, high) = values.fold((0.0_f64, 0.0_f64), |(l, h), v| (l.min(v), h.max(v)));
        if high > low { (low, high) } else { (0.0, 1.0) }
    };
    let cost = ends(&mut data.systems.iter().flat_map(|s| s.cost.iter().copied()));
    let energy = ends(&mut data.systems.iter().flat_map(|s| {
        s.electricity_kwh
            .iter()
            .zip(&s.fuel_kwh)
            .flat_map(|(e, f)| [e.max(0.0) + f.max(0.0), e.min(0.0) + f.min(0.0)])
    }));
    let cost_title = format!("Cost, {}", money_unit(&data.currency));
    let cost_axis = Axis::linear(&cost_title, cost.0, cost.1, 3, marks);
    let energy_axis = Axis::linear("Energy bought, kWh", energy.0, energy.1, 3, marks);

    for (i, system) in data.systems.iter().enumerate() {
        let y = top + block * i as f64;
        let set = Type::new(SMALL, Weight::Regular, INK);
        let sums = sums(data, system, marks);
        let full = scene.width - 2.0 * MARGIN;
        let room = if scene.narrow() {
            let sums = font::fit(&sums, set.size, set.weight, full);
            scene.text(&sums, (MARGIN, y + 16.0 + SUMS), Anchor::Start, set);
            full
        } else {
            let sums = font::fit(&sums, set.size, set.weight, full - 200.0);
            scene.text(&sums, (MARGIN + full - 12.0, y + 16.0), Anchor::End, set);
            full - MARGIN - 16.0 - set.width(&sums)
        };
        draw_name(
            &mut scene,
            &system.label,
            system.today,
            y + 16.0,
            room.max(80.0),
        );
        let y = y + below_name;
        let middle = scene.width / 2.0 + 4.0;
        let left = panel(data, MARGIN, middle - 6.0, y + 22.0, &cost_axis);
        columns(
            &mut scene,
            &left,
            data,
            &[(&system.cost, NAVY, Hatch::Plain)],
        );
        let right = panel(
            data,
            middle + 6.0,
            scene.width - MARGIN,
            y + 22.0,
            &energy_axis,
        );
        let layers = [
            (&system.electricity_kwh, AZURE, Hatch::Plain),
            (&system.fuel_kwh, BROWN, Hatch::Rising),
        ];
        columns(&mut scene, &right, data, &layers);
    }
    Ok(Picture::new(title, alt(data, marks), scene))
}

fn check(data: &Monthly) -> Result<(), ChartError> {
    if data.systems.is_empty() || data.months.is_empty() {
        return Err(ChartError::Empty {
            picture: PICTURE,
            missing: "no system or no month was given",
        });
    }
    for system in &data.systems {
        let lists = [&system.cost, &system.electricity_kwh, &system.fuel_kwh];
        if lists.iter().any(|l| l.len() != data.months.len()) {
            return Err(ChartError::Uneven {
                picture: PICTURE,
                what: format!(
                    "months {}, of “{}” cost {}, electricity {}, fuel {}",
                    data.months.len(),
                    system.label,
                    lists[0].len(),
                    lists[1].len(),
                    lists[2].len()
                ),
            });
        }
        for (list, what) in lists.iter().zip(["cost", "electricity", "fuel"]) {
            finite(PICTURE, list.iter().map(|v| (what, *v)))?;
        }
    }
    Ok(())
}

fn panel(data: &Monthly, left: f64, right: f64, top: f64, axis: &Axis) -> Frame {
    /// Narrowest panel in which every month has its letter, points.
    const ALL_MONTHS: f64 = 220.0;
    let n = data.months.len() as f64;
    let every = if right - left < ALL_MONTHS { 3 } else { 1 };
    let names = data
        .months
        .iter()
        .enumerate()
        .step_by(every)
        .map(|(i, m)| (i as f64, m.clone()))
        .collect();
    let mut frame = Frame::inside(
        Rect {
            left,
            top,
            right,
            bottom: top + PLOT + super::frame::ABOVE + super::frame::BELOW,
        },
        Axis::named("", -0.5, n - 0.5, names),
        axis.clone(),
    );
    frame.area.bottom = frame.area.top + PLOT;
    frame
}

fn columns(
    scene: &mut Scene,
    frame: &Frame,
    data: &Monthly,
    layers: &[(&Vec<f64>, Colour, Hatch)],
) {
    frame.draw_y(scene);
    let step = frame.at_x(1.0) - frame.at_x(0.0);
    let half = (step * 0.36).min(22.0);
    // Names that do not fit all give way to their first letters.
    let whole = data.months.iter().all(|m| MONTH.width(m) < step - 4.5);
    for (i, month) in data.months.iter().enumerate() {
        let x = frame.at_x(i as f64);
        let (mut up, mut down) = (0.0, 0.0);
        for (values, colour, hatch) in layers {
            let value = values[i];
            let from = if value < 0.0 { &mut down } else { &mut up };
            let (a, b) = (frame.at_y(*from), frame.at_y(*from + value));
            *from += value;
            if (a - b).abs() > 0.05 {
                let bar = [(x - half, a), (x + half, a), (x + half, b), (x - half, b)];
                scene.hatched(&bar, *colour, *hatch);
            }
        }
        let name = if whole {
            month.clone()
        } else {
            month.chars().take(1).collect()
        };
        let y = frame.area.bottom + 16.0;
        scene.place_bare(&name, (x, y), Anchor::Middle, MONTH);
    }
    let zero = frame.at_y(0.0);
    scene.line(
        &[(frame.area.left, zero), (frame.area.right, zero)],
        AXIS,
        1.4,
    );
}

fn sums(data: &Monthly, system: &MonthlySystem, marks: &Marks) -> String {
    let mut text = marks.money(&data.currency, system.cost.iter().sum());
    for (list, what) in [
        (&system.electricity_kwh, "electricity"),
        (&system.fuel_kwh, "fuel"),
    ] {
        if list.iter().any(|v| *v != 0.0) {
            text += &format!(" · {}\u{a0}kWh {what}", marks.number(list.iter().sum(), 0));
        }
    }
    text
}

fn alt(data: &Monthly, marks: &Marks) -> String {
    let mut out = format!(
        "Bar charts of cost and energy bought in {} {} by system.",
        data.months.len(),
        if data.months.len() == 1 {
            "month"
        } else {
            "months"
        }
    );
    for system in &data.systems {
        let dearest =
            (0..data.months.len()).max_by(|&a, &b| system.cost[a].total_cmp(&system.cost[b]));
        let dearest = dearest.map_or(String::new(), |i| {
            format!(
                "; the dearest month is {} with {}",
                data.months[i],
                marks.money(&data.currency, system.cost[i])
            )
        });
        out += &format!(
            " {}: in all {}{dearest}.",
            named(&system.label),
            sums(data, system, marks).replace(" · ", ", ")
        );
    }
    out
}

#[cfg(test)]
mod tests {
    use super::*;

    fn data() -> Monthly {
        Monthly {
            currency: "GBP".into(),
            months: vec!["Jan".into(), "Feb".into()],
            systems: vec![MonthlySystem {
                label: "Boiler".into(),
                today: true,
                cost: vec![150.4, 120.4],
                electricity_kwh: vec![30.0, 25.0],
                fuel_kwh: vec![1800.0, 1500.0],
            }],
        }
    }

    #[test]
    fn sums_are_those_of_the_months_before_rounding() {
        let picture = monthly(&data(), &Marks::default()).unwrap();
        let wanted = "£271 · 55\u{a0}kWh electricity · 3,300\u{a0}kWh fuel";
        assert!(picture.labels().iter().any(|l| l.text == wanted));
        assert!(picture.alt.contains("the dearest month is Jan with £150"));
    }

    #[test]
    fn lists_of_another_length_are_refused_with_their_lengths() {
        let mut bad = data();
        bad.systems[0].fuel_kwh.pop();
        let error = monthly(&bad, &Marks::default()).unwrap_err().to_string();
        assert!(
            error.contains("months 2") && error.contains("fuel 1"),
            "{error}"
        );
    }
}
