//! What each choice saves in all samples: one heap a choice over one axis, the zero line through all, the chance beside it.

use super::font::{self, Weight};
use super::frame::Axis;
use super::label::{Anchor, BODY, Type};
use super::numbers::{Marks, money_unit};
use super::palette::{AXIS, CORAL, Colour, GRID, Hatch, INK, NAVY};
use super::scene::{MARGIN, Scene};
use super::{ChartError, Picture, finite, named};

const PICTURE: &str = "odds of saving";

/// What is drawn.
#[derive(Debug, Clone, PartialEq)]
pub struct SavingOdds {
    /// Currency code of the savings.
    pub currency: String,
    /// The choices, in the order they are to stand.
    pub choices: Vec<ChoiceSaving>,
}

/// The savings of one choice.
#[derive(Debug, Clone, PartialEq)]
pub struct ChoiceSaving {
    /// Name.
    pub label: String,
    /// Saving against today in every sample; below zero where the choice is dearer.
    pub saving: Vec<f64>,
    /// Standard error of the chance of being cheaper, 0 to 1, where it is known.
    pub chance_error: Option<f64>,
}

impl ChoiceSaving {
    /// Share of the samples in which it is cheaper.
    fn chance(&self) -> f64 {
        let cheaper = self.saving.iter().filter(|saving| **saving > 0.0).count();
        cheaper as f64 / self.saving.len() as f64
    }

    fn chance_text(&self) -> String {
        let error = self.chance_error.map_or_else(String::new, |error| {
            format!(" ± {:.0}", (error * 100.0).max(1.0))
        });
        format!("cheaper in {:.0}{error} of 100", self.chance() * 100.0)
    }
}

/// Height of a row: name, heap.
const ROW: f64 = 112.0;
/// Height of the highest heap.
const HEAP: f64 = 70.0;
/// Slices of a step of the axis, so that zero lies between two of them.
const SLICES: f64 = 5.0;

/// Draws the savings of every choice.
///
/// # Errors
/// [`ChartError::Empty`] without choices or samples, [`ChartError::NotFinite`] for a saving that is not a number.
pub fn saving_odds(data: &SavingOdds, marks: &Marks) -> Result<Picture, ChartError> {
    let is_empty = |choice: &ChoiceSaving| choice.saving.is_empty();
    if data.choices.is_empty() || data.choices.iter().any(is_empty) {
        return Err(ChartError::Empty {
            picture: PICTURE,
            missing: "no sample was given",
        });
    }
    let all = || data.choices.iter().flat_map(|choice| &choice.saving);
    finite(PICTURE, all().map(|saving| ("saving", *saving)))?;

    let title = "How sure the saving is";
    let subtitle = "Saving of a year against today's system in every sample; right of the line the choice is cheaper.";
    let mut scene = Scene::of(marks);
    let top = scene.heading(title, subtitle) + 6.0;
    // Where name and chance do not fit beside each other, the chance stands below.
    let second = if scene.narrow() { 20.0 } else { 0.0 };
    let row = ROW + second;
    let bottom = top + row * data.choices.len() as f64 + 6.0;
    scene.height = bottom + 52.0;
    let low = all().copied().fold(0.0, f64::min);
    let high = all().copied().fold(0.0, f64::max);
    let axis = Axis::linear(
        &format!("Saving of a year, {}", money_unit(&data.currency)),
        low,
        high,
        7,
        marks,
    );
    let (left, right) = (MARGIN + 22.0, scene.width - MARGIN - 22.0);
    let at = |v: f64| left + (v - axis.low) / (axis.high - axis.low) * (right - left);
    for (value, text) in &axis.ticks {
        scene.line(&[(at(*value), top), (at(*value), bottom)], GRID, 1.0);
        scene.tick(text, (at(*value), bottom + 18.0), Anchor::Middle);
    }
    scene.line(&[(left, bottom), (right, bottom)], AXIS, 1.2);
    scene.text(
        &axis.title,
        (right, bottom + 38.0),
        Anchor::End,
        Type::small(),
    );
    let step = axis
        .ticks
        .windows(2)
        .next()
        .map_or(1.0, |pair| pair[1].0 - pair[0].0);
    let slice = step / SLICES;
    let heaps: Vec<Vec<(i64, f64)>> = data
        .choices
        .iter()
        .map(|c| heap(&c.saving, slice))
        .collect();
    let highest = heaps
        .iter()
        .flatten()
        .map(|(_, share)| *share)
        .fold(0.0, f64::max);
    for (i, heap) in heaps.iter().enumerate() {
        let base = top + row * (i + 1) as f64;
        for (place, share) in heap {
            let (from, to) = (*place as f64 * slice, (*place + 1) as f64 * slice);
            let height = share / highest * HEAP;
            let look: (Colour, Hatch) = if *place < 0 {
                (CORAL, Hatch::Rising)
            } else {
                (NAVY, Hatch::Plain)
            };
            let corners = [
                (at(from), base),
                (at(from), base - height),
                (at(to), base - height),
                (at(to), base),
            ];
            scene.hatched(&corners, look.0, look.1);
        }
        scene.line(&[(left, base), (right, base)], AXIS, 1.0);
    }
    scene.line(&[(at(0.0), top), (at(0.0), bottom)], INK, 1.8);
    for (i, choice) in data.choices.iter().enumerate() {
        let line = top + row * i as f64 + 20.0;
        let chance = choice.chance_text();
        let bold = Type::new(BODY, Weight::Bold, INK);
        let beside = if scene.narrow() {
            0.0
        } else {
            bold.width(&chance) + 28.0
        };
        let room = scene.width - 2.0 * MARGIN - beside;
        let name = font::fit(named(&choice.label), BODY, Weight::Regular, room);
        scene.plate(&name, (MARGIN, line), Anchor::Start, Type::body());
        let place = (scene.width - MARGIN, line + second);
        scene.plate(&chance, place, Anchor::End, bold);
    }
    Ok(Picture::new(title, alt(data, marks), scene))
}

/// Share of the values in each slice that holds any, from the lowest.
fn heap(values: &[f64], slice: f64) -> Vec<(i64, f64)> {
    let mut heap = std::collections::BTreeMap::new();
    for value in values {
        *heap.entry((value / slice).floor() as i64).or_insert(0.0) += 1.0 / values.len() as f64;
    }
    heap.into_iter().collect()
}

fn alt(data: &SavingOdds, marks: &Marks) -> String {
    let mut out = "Spread of the yearly saving of every choice against today's system.".to_owned();
    for choice in &data.choices {
        let low = choice.saving.iter().copied().fold(f64::INFINITY, f64::min);
        let high = choice
            .saving
            .iter()
            .copied()
            .fold(f64::NEG_INFINITY, f64::max);
        out += &format!(
            " {}: {}, from {} to {}.",
            named(&choice.label),
            choice.chance_text(),
            marks.money(&data.currency, low),
            marks.money(&data.currency, high)
        );
    }
    out
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn the_chance_is_counted_and_zero_parts_two_slices() {
        let choice = ChoiceSaving {
            label: "A".into(),
            saving: vec![-5.0, -0.1, 0.1, 4.0],
            chance_error: Some(0.02),
        };
        assert_eq!(choice.chance_text(), "cheaper in 50 ± 2 of 100");
        assert_eq!(
            heap(&choice.saving, 4.0),
            [(-2, 0.25), (-1, 0.25), (0, 0.25), (1, 0.25)]
        );
        let none = SavingOdds {
            currency: "GBP".into(),
            choices: Vec::new(),
        };
        assert!(saving_odds(&none, &Marks::default()).is_err());
    }
}
