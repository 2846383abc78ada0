//! Saving, SPF and size of the emitters along the design flow temperature, as panels over one axis.

use super::font::{self, Weight};
use super::frame::{Axis, Frame, around};
use super::geometry::Rect;
use super::label::{Anchor, SMALL, Type};
use super::numbers::{Marks, money_unit};
use super::palette::{Dash, INK, NAVY, WHITE};
use super::scene::{MARGIN, Scene};
use super::{ChartError, Picture, finite, named, sentence};

const PICTURE: &str = "emitters";

/// What is drawn.
#[derive(Debug, Clone, PartialEq)]
pub struct EmitterStudy {
    /// Name of the choice.
    pub choice: String,
    /// Currency code.
    pub currency: String,
    /// The steps, rising in the flow temperature.
    pub steps: Vec<EmitterStep>,
    /// Design flow temperature as it is now, °C.
    pub now_c: Option<f64>,
    /// Flow temperatures at which the saving is nothing, °C.
    pub crossings_c: Vec<f64>,
}

/// One design flow temperature.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct EmitterStep {
    /// °C.
    pub flow_c: f64,
    /// Output the emitters need, as a multiple of today's.
    pub times_today: f64,
    /// Saving in a year; nothing where the machine does not reach the flow.
    pub saving: Option<f64>,
    /// SPF with all auxiliaries.
    pub spf_h4: Option<f64>,
}

/// Heights of the panels, from the top.
const PANELS: [f64; 3] = [220.0, 140.0, 186.0];

/// Draws the panels.
///
/// # Errors
/// [`ChartError::Empty`] with fewer than two steps, [`ChartError::NotFinite`] for a value that is not a number.
pub fn emitter_study(data: &EmitterStudy, marks: &Marks) -> Result<Picture, ChartError> {
    let (Some(first), Some(last)) = (data.steps.first(), data.steps.last()) else {
        return Err(ChartError::Empty {
            picture: PICTURE,
            missing: "no flow temperature was looked at",
        });
    };
    if data.steps.len() < 2 {
        return Err(ChartError::Empty {
            picture: PICTURE,
            missing: "fewer than two flow temperatures were looked at",
        });
    }
    for step in &data.steps {
        finite(
            PICTURE,
            [
                ("flow temperature", step.flow_c),
                ("times today's output", step.times_today),
            ],
        )?;
        finite(PICTURE, step.saving.map(|v| ("saving", v)))?;
        finite(PICTURE, step.spf_h4.map(|v| ("SPF", v)))?;
    }
    finite(
        PICTURE,
        data.now_c
            .iter()
            .chain(&data.crossings_c)
            .map(|v| ("flow temperature", *v)),
    )?;
    let title = "Cooler water, larger emitters";
    let subtitle = format!(
        "{} Against the flow temperature on the design day.",
        sentence(&data.choice, 330.0)
    );
    let mut scene = Scene::of(marks);
    let top = scene.heading(title, &subtitle);
    scene.height = top + PANELS.iter().sum::<f64>() + 6.0;

    let line = |of: fn(&EmitterStep) -> Option<f64>| -> Vec<(f64, f64)> {
        data.steps
            .iter()
            .filter_map(|step| Some((step.flow_c, of(step)?)))
            .collect()
    };
    let lines = [
        line(|s| s.saving),
        line(|s| s.spf_h4),
        line(|s| Some(s.times_today)),
    ];
    let titles = [
        format!("Saving in a year, {}", money_unit(&data.currency)),
        "SPF with all auxiliaries (no unit)".to_owned(),
        "Emitters needed, times today’s output at ΔT 50 K".to_owned(),
    ];
    let mut y = top;
    let mut frames = Vec::new();
    for (i, ((line, title), height)) in lines.iter().zip(&titles).zip(PANELS).enumerate() {
        let ends = line
            .iter()
            .fold((f64::INFINITY, f64::NEG_INFINITY), |(l, h), p| {
                (l.min(p.1), h.max(p.1))
            });
        let (low, high) = match i {
            0 => (ends.0.min(0.0), ends.1.max(0.0)),
            2 => (0.0, ends.1.max(1.0)),
            _ => ends,
        };
        let below = if i == 2 {
            0.0
        } else {
            super::frame::BELOW - 12.0
        };
        let mut frame = Frame::inside(
            Rect {
                left: MARGIN,
                top: y,
                right: scene.width - MARGIN,
                bottom: y + height + below,
            },
            Axis::tight(
                "Design flow temperature, °C",
                first.flow_c,
                last.flow_c,
                7,
                marks,
            ),
            Axis::linear(title, low, high, 4, marks),
        );
        // All panels share the left edge.
        frame.area.left = MARGIN + 52.0;
        if i == 2 {
            frame.draw(&mut scene);
        } else {
            frame.draw_y(&mut scene);
            frame.draw_x_grid(&mut scene);
        }
        frames.push(frame);
        y += height;
    }
    for (i, (frame, line)) in frames.iter().zip(&lines).enumerate() {
        if i == 0 {
            frame.level(&mut scene, 0.0, INK, Dash::Solid);
        }
        if let Some(now) = data
            .now_c
            .filter(|now| *now >= first.flow_c && *now <= last.flow_c)
        {
            frame.upright(&mut scene, now, INK, Dash::Dotted);
        }
        frame.line(&mut scene, line, NAVY, 2.8, Dash::Solid);
        for &(x, value) in line {
            scene.disc(frame.at(x, value), 3.2, NAVY);
        }
    }
    label(&mut scene, &frames, data, marks);
    Ok(Picture::new(title, alt(data, marks), scene))
}

fn label(scene: &mut Scene, frames: &[Frame], data: &EmitterStudy, marks: &Marks) {
    let strong = Type::new(SMALL, Weight::Bold, INK);
    let [saving, spf, times] = frames else { return };
    if let Some(now) = data.now_c {
        let x = saving.at_x(now);
        let text = format!("now {}\u{a0}°C", marks.number(now, 0));
        let (high, low) = (saving.area.top + 14.0, saving.area.bottom - 8.0);
        let places = [
            ((x + 7.0, high), Anchor::Start),
            ((x - 7.0, high), Anchor::End),
            ((x + 7.0, low), Anchor::Start),
            ((x - 7.0, low), Anchor::End),
        ];
        scene.place(&saving.area, &text, &places, strong);
    }
    for &crossing in &data.crossings_c {
        let (x, y) = saving.at(crossing, 0.0);
        if x < saving.area.left || x > saving.area.right {
            continue;
        }
        scene.disc((x, y), 6.5, INK);
        scene.disc((x, y), 3.6, WHITE);
        let text = format!("breaks even at {}\u{a0}°C", marks.number(crossing, 1));
        scene.place_for(&saving.area, (x, y), &text, &around(x, y, 11.0), strong);
    }
    // The first point stands at the edge, where a label would cover the line.
    for step in data.steps.iter().skip(2).step_by(2) {
        times.note(
            scene,
            &format!("×\u{a0}{}", marks.number(step.times_today, 2)),
            step.flow_c,
            step.times_today,
        );
        if let Some(value) = step.spf_h4 {
            spf.note(scene, &marks.number(value, 2), step.flow_c, value);
        }
    }
    if let Some(step) = data.steps.iter().find(|step| step.saving.is_none()) {
        let (x, y) = (saving.at_x(step.flow_c), saving.area.top + 30.0);
        let text = font::fit(
            "the machine does not reach this",
            SMALL,
            Weight::Regular,
            200.0,
        );
        let places = [((x + 4.0, y), Anchor::Start), ((x - 4.0, y), Anchor::End)];
        scene.place(&saving.area, &text, &places, Type::small());
    }
}

fn alt(data: &EmitterStudy, marks: &Marks) -> String {
    let mut out = format!(
        "{}: saving, SPF and emitter size against design flow temperature.",
        named(&data.choice)
    );
    for step in [data.steps.first(), data.steps.last()]
        .into_iter()
        .flatten()
    {
        out += &format!(
            " At {} °C the emitters need {} times today's output",
            marks.number(step.flow_c, 0),
            marks.number(step.times_today, 2)
        );
        if let Some(saving) = step.saving {
            out += &format!(" and a year saves {}", marks.money(&data.currency, saving));
        }
        out += ".";
    }
    for crossing in &data.crossings_c {
        out += &format!(" It breaks even at {} °C.", marks.number(*crossing, 1));
    }
    out
}

#[cfg(test)]
mod tests {
    use super::*;

    fn data() -> EmitterStudy {
        EmitterStudy {
            choice: "Air source".into(),
            currency: "GBP".into(),
            steps: (0..=6)
                .map(|i| {
                    let flow_c = 35.0 + 5.0 * f64::from(i);
                    EmitterStep {
                        flow_c,
                        times_today: (35.0 / (flow_c - 20.0)).powf(1.3),
                        saving: (i < 6).then_some(400.0 - 90.0 * f64::from(i)),
                        spf_h4: (i < 6).then_some(4.0 - 0.25 * f64::from(i)),
                    }
                })
                .collect(),
            now_c: Some(55.0),
            crossings_c: vec![57.2],
        }
    }

    #[test]
    fn now_and_break_even_are_written() {
        let picture = emitter_study(&data(), &Marks::default()).unwrap();
        for text in ["now 55\u{a0}°C", "breaks even at 57.2\u{a0}°C"] {
            assert!(
                picture.labels().iter().any(|label| label.text == text),
                "{text}"
            );
        }
        assert!(picture.alt.contains("It breaks even at 57.2 °C"));
    }

    #[test]
    fn labels_are_apart_and_one_step_is_refused() {
        let picture = emitter_study(&data(), &Marks::default()).unwrap();
        for (i, a) in picture.labels().iter().enumerate() {
            for b in &picture.labels()[..i] {
                assert!(!a.area.overlaps(&b.area), "{} and {}", a.text, b.text);
            }
        }
        let mut one = data();
        one.steps.truncate(1);
        assert!(matches!(
            emitter_study(&one, &Marks::default()),
            Err(ChartError::Empty { .. })
        ));
    }
}
