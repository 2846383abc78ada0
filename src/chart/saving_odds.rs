//! What each choice saves in all samples: one heap a choice over one axis, the zero line through all, the chance beside it.

use super::font::Weight;
use super::frame::Axis;
use super::label::{BODY, Type};
use super::numbers::{Marks, money_unit};
use super::palette::{AXIS, CORAL, Colour, Hatch, INK, NAVY};
use super::rows::{RowSizes, Rows};
use super::scene::Scene;
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
    /// Chance of being cheaper as it is said, in percent ("48 ± 4", "more than 96"); nothing to have it counted in the samples.
    pub chance: Option<String>,
}

impl ChoiceSaving {
    fn chance_text(&self) -> String {
        match &self.chance {
            Some(said) => format!("cheaper in {said} of 100"),
            None => {
                let cheaper = self.saving.iter().filter(|saving| **saving > 0.0).count();
                format!("cheaper in {cheaper} of {}", self.saving.len())
            }
        }
    }
}

const SIZES: RowSizes = RowSizes {
    row: 112.0,
    line: 20.0,
    left: 22.0,
};
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
    let low = all().copied().fold(0.0, f64::min);
    let high = all().copied().fold(0.0, f64::max);
    let axis = format!("Saving of a year, {}", money_unit(&data.currency));
    let axis = Axis::linear(&axis, low, high, 7, marks);
    let count = data.choices.len();
    let rows = Rows::set(&mut scene, (title, subtitle), axis, count, &SIZES);
    let at = |value: f64| rows.at(value);
    let slice = rows.step() / SLICES;
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
        let base = rows.foot(i);
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
        scene.line(&[(rows.left, base), (rows.right, base)], AXIS, 1.0);
    }
    scene.line(&[(at(0.0), rows.top), (at(0.0), rows.bottom)], INK, 1.8);
    for (i, choice) in data.choices.iter().enumerate() {
        let bold = Type::new(BODY, Weight::Bold, INK);
        rows.label(&mut scene, i, &choice.label, (&choice.chance_text(), bold));
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
            chance: None,
        };
        assert_eq!(choice.chance_text(), "cheaper in 2 of 4");
        let said = ChoiceSaving {
            chance: Some("more than 96".into()),
            ..choice.clone()
        };
        assert_eq!(said.chance_text(), "cheaper in more than 96 of 100");
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
