//! Heat load in order of size: how many hours the machine carries alone, and what backup adds at the top.

use super::frame::{Axis, Frame};
use super::geometry::Rect;
use super::key::Swatch;
use super::layers::{self, Layer};
use super::numbers::{self, Marks};
use super::palette::{CORAL, Colour, Dash, Hatch, INK, OCHRE, TEAL};
use super::scene::{MARGIN, Scene};
use super::{ChartError, Picture, finite, named, sentence};

const PICTURE: &str = "load duration";

/// What is drawn. The lists are hourly, of equal length, in the same order.
#[derive(Debug, Clone, PartialEq, Default)]
pub struct LoadDuration {
    /// Name of the system.
    pub system: String,
    /// Heat from the machine in each hour, kW.
    pub machine_kw: Vec<f64>,
    /// Heat from backup in each hour, kW.
    pub backup_kw: Vec<f64>,
    /// Heat that was asked for and not given in each hour, kW.
    pub short_kw: Vec<f64>,
}

/// Names and looks of the layers, from the axis upwards.
const LAYERS: [(&str, Colour, Hatch); 3] = [
    ("machine", TEAL, Hatch::Plain),
    ("backup", CORAL, Hatch::Rising),
    ("not met", OCHRE, Hatch::Crossed),
];

const PLOT: f64 = 350.0;
/// The right-hand panel shows this many hours, or fewer, beside the whole.
const TOP_HOURS: usize = 300;
/// Hours are averaged into columns this wide.
const COLUMN: f64 = 1.5;

/// Draws the load duration.
///
/// # Errors
/// [`ChartError::Empty`] without hours, [`ChartError::Uneven`] for lists of different length,
/// [`ChartError::NotFinite`] for a value that is not a number.
pub fn load_duration(data: &LoadDuration, marks: &Marks) -> Result<Picture, ChartError> {
    let loads = sorted(data)?;
    let hours = loads.len();
    let title = "Heat load in order of size";
    let subtitle = format!(
        "{} Hour by hour, the largest load first.",
        sentence(&data.system, 320.0)
    );
    let mut scene = Scene::of(marks);
    let below = scene.heading(title, &subtitle);
    let sums = energy(&loads);
    let texts: Vec<String> = (0..3)
        .map(|i| {
            let share = if sums.iter().sum::<f64>() > 0.0 {
                sums[i] / sums.iter().sum::<f64>() * 100.0
            } else {
                0.0
            };
            format!(
                "{} {}\u{a0}kWh ({}\u{a0}%)",
                LAYERS[i].0,
                marks.number(sums[i], 0),
                marks.number(share, 1)
            )
        })
        .collect();
    let shown: Vec<usize> = (0..3).filter(|&i| i < 2 || sums[i] > 0.0).collect();
    let entries: Vec<(Swatch, &String)> = shown
        .iter()
        .map(|&i| (Swatch::Area(LAYERS[i].1, LAYERS[i].2), &texts[i]))
        .collect();
    let top = scene.key(&entries, MARGIN, below, scene.width - 2.0 * MARGIN) + 4.0;

    let peak = loads
        .iter()
        .map(|l| l.iter().sum::<f64>())
        .fold(0.0, f64::max);
    let y = Axis::linear(
        "Heat, kW",
        0.0,
        if peak > 0.0 { peak } else { 1.0 },
        6,
        marks,
    );
    let two = hours > TOP_HOURS * 2;
    // Side by side, or on a phone one below the other.
    let (beside, below) = (two && !scene.narrow(), two && scene.narrow());
    let lower = if below { top + PLOT + 6.0 } else { top };
    scene.height = lower + PLOT + 6.0;
    let split = if beside {
        MARGIN + 0.60 * (scene.width - 2.0 * MARGIN)
    } else {
        scene.width - MARGIN
    };
    let panel = |(left, top): (f64, f64), right: f64, title: &str, end: usize, wanted: usize| {
        Frame::inside(
            Rect {
                left,
                top,
                right,
                bottom: top + PLOT,
            },
            Axis::tight(title, 0.0, end.max(1) as f64, wanted, marks),
            y.clone(),
        )
    };
    let whole = panel((MARGIN, top), split, "Hours, largest load first", hours, 5);
    draw_panel(&mut scene, &whole, &loads);
    if two {
        let first = format!("The {TOP_HOURS} hours of largest load");
        let left = if beside { split + 16.0 } else { MARGIN };
        let close = panel((left, lower), scene.width - MARGIN, &first, TOP_HOURS, 3);
        draw_panel(&mut scene, &close, &loads[..TOP_HOURS]);
    }
    Ok(Picture::new(
        title,
        alt(data, &loads, &texts, &shown, marks),
        scene,
    ))
}

/// The three parts of each hour, largest sum first.
fn sorted(data: &LoadDuration) -> Result<Vec<[f64; 3]>, ChartError> {
    let hours = data.machine_kw.len();
    let lists = [&data.machine_kw, &data.backup_kw, &data.short_kw];
    if hours == 0 {
        return Err(ChartError::Empty {
            picture: PICTURE,
            missing: "no hour was given",
        });
    }
    if lists.iter().any(|l| l.len() != hours) {
        return Err(ChartError::Uneven {
            picture: PICTURE,
            what: format!(
                "machine {hours}, backup {}, not met {}",
                data.backup_kw.len(),
                data.short_kw.len()
            ),
        });
    }
    for (list, (name, ..)) in lists.iter().zip(LAYERS) {
        finite(PICTURE, list.iter().map(|v| (name, *v)))?;
    }
    let mut loads: Vec<[f64; 3]> = (0..hours).map(|i| lists.map(|l| l[i].max(0.0))).collect();
    loads.sort_by(|a, b| b.iter().sum::<f64>().total_cmp(&a.iter().sum::<f64>()));
    Ok(loads)
}

fn energy(loads: &[[f64; 3]]) -> [f64; 3] {
    let mut sums = [0.0; 3];
    for load in loads {
        for (sum, part) in sums.iter_mut().zip(load) {
            *sum += part;
        }
    }
    sums
}

fn draw_panel(scene: &mut Scene, frame: &Frame, loads: &[[f64; 3]]) {
    frame.draw(scene);
    let columns = columns(frame, loads);
    let upper = |layer: usize| -> Vec<(f64, f64)> {
        columns
            .iter()
            .map(|(hour, parts)| (*hour, parts[..=layer].iter().sum()))
            .collect()
    };
    let stack: Vec<Layer> = LAYERS
        .iter()
        .enumerate()
        .map(|(i, (_, colour, hatch))| Layer {
            upper: upper(i),
            colour: *colour,
            hatch: *hatch,
        })
        .collect();
    layers::draw(scene, frame, &stack);
    let line = upper(LAYERS.len() - 1);
    frame.line(scene, &line, INK, 1.6, Dash::Solid);
}

/// Means of as many hours as fall on one column of the plot, each at its middle.
fn columns(frame: &Frame, loads: &[[f64; 3]]) -> Vec<(f64, [f64; 3])> {
    let room = ((frame.area.right - frame.area.left) / COLUMN).max(2.0);
    let size = (loads.len() as f64 / room).ceil().max(1.0) as usize;
    let mut out: Vec<(f64, [f64; 3])> = loads
        .chunks(size)
        .enumerate()
        .map(|(i, chunk)| {
            let mean = energy(chunk).map(|sum| sum / chunk.len() as f64);
            (i as f64 * size as f64 + chunk.len() as f64 / 2.0, mean)
        })
        .collect();
    // The ends are the largest and the smallest hour themselves, so that the peak is not averaged away.
    if let (Some(first), Some(last)) = (loads.first(), loads.last()) {
        out.insert(0, (0.0, *first));
        out.push((loads.len() as f64, *last));
    }
    out
}

fn alt(
    data: &LoadDuration,
    loads: &[[f64; 3]],
    texts: &[String],
    shown: &[usize],
    marks: &Marks,
) -> String {
    let peak = loads.first().map_or(0.0, |l| l.iter().sum());
    let parts: Vec<String> = shown.iter().map(|&i| texts[i].clone()).collect();
    format!(
        "Heat load of {} for {}, sorted from the largest, {} kW. Heat by source: {}. Backup runs in {}.",
        marks.count(loads.len(), "hour"),
        named(&data.system),
        marks.number(peak, 1),
        numbers::list(&parts),
        marks.count(loads.iter().filter(|l| l[1] > 0.0).count(), "hour")
    )
}

#[cfg(test)]
mod tests {
    use super::*;

    fn three() -> LoadDuration {
        LoadDuration {
            system: "Air".into(),
            machine_kw: vec![2.0, 5.0, 4.0],
            backup_kw: vec![0.0, 1.5, 0.0],
            short_kw: vec![0.0, 0.0, 0.0],
        }
    }

    #[test]
    fn hours_are_sorted_by_their_whole_load() {
        assert_eq!(
            sorted(&three()).unwrap(),
            [[5.0, 1.5, 0.0], [4.0, 0.0, 0.0], [2.0, 0.0, 0.0]]
        );
    }

    #[test]
    fn columns_keep_the_energy() {
        let loads: Vec<[f64; 3]> = (0..8760).rev().map(|i| [f64::from(i), 1.0, 0.0]).collect();
        let frame = Frame::inside(
            Rect {
                left: 0.0,
                top: 0.0,
                right: 400.0,
                bottom: 300.0,
            },
            Axis::tight("h", 0.0, 8760.0, 4, &Marks::default()),
            Axis::linear("kW", 0.0, 9000.0, 4, &Marks::default()),
        );
        let c = columns(&frame, &loads);
        let drawn: f64 = c
            .windows(2)
            .map(|p| (p[1].0 - p[0].0) * (p[0].1[0] + p[1].1[0]) / 2.0)
            .sum();
        // The trapezia between column means: exact on a straight load.
        let wanted = 8760.0 * 8759.0 / 2.0;
        assert!((drawn / wanted - 1.0).abs() < 1e-3);
    }

    #[test]
    fn energy_and_shares_are_written() {
        let picture = load_duration(&three(), &Marks::default()).unwrap();
        let texts: Vec<&str> = picture.labels().iter().map(|l| l.text.as_str()).collect();
        assert!(
            texts.contains(&"backup 2\u{a0}kWh (12.0\u{a0}%)"),
            "{texts:?}"
        );
        assert!(!texts.iter().any(|t| t.starts_with("not met")));
        assert!(picture.alt.contains("Backup runs in 1 hour."));
    }

    #[test]
    fn uneven_lists_are_refused() {
        let mut data = three();
        data.backup_kw.pop();
        let error = load_duration(&data, &Marks::default()).unwrap_err();
        assert!(error.to_string().contains("machine 3, backup 2"), "{error}");
    }
}
