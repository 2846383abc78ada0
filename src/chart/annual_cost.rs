//! Cost of a year, system by system: one bar each, split into energy, standing charges and tax.

use super::bars::{self, Part};
use super::numbers::{Marks, money_unit};
use super::palette::{CORAL, Hatch, NAVY, PERIWINKLE};
use super::scene::Scene;
use super::{ChartError, Picture, finite};

const PICTURE: &str = "cost of a year";

/// What is drawn.
#[derive(Debug, Clone, PartialEq)]
pub struct AnnualCost {
    /// Currency code, for example GBP.
    pub currency: String,
    /// The systems, in the order they are to stand.
    pub systems: Vec<SystemCost>,
}

/// The bill of one system. Each part may be negative (a credit).
#[derive(Debug, Clone, PartialEq)]
pub struct SystemCost {
    /// Name.
    pub label: String,
    /// Whether this is what heats the home today; the others are compared with the first that is.
    pub today: bool,
    /// Energy of a year, in the currency.
    pub energy: f64,
    /// Standing charges of a year.
    pub standing: f64,
    /// Tax of a year.
    pub tax: f64,
}

impl SystemCost {
    /// The whole bill.
    pub fn total(&self) -> f64 {
        self.energy + self.standing + self.tax
    }
}

const PARTS: [Part; 3] = [
    ("Energy", NAVY, Hatch::Plain),
    ("Standing charges", PERIWINKLE, Hatch::Plain),
    ("Tax", CORAL, Hatch::Rising),
];

/// Draws the cost of a year.
///
/// # Errors
/// [`ChartError::Empty`] without systems, [`ChartError::NotFinite`] for a cost that is not a number.
pub fn annual_cost(data: &AnnualCost, marks: &Marks) -> Result<Picture, ChartError> {
    if data.systems.is_empty() {
        return Err(ChartError::Empty {
            picture: PICTURE,
            missing: "no system was given",
        });
    }
    for s in &data.systems {
        for (part, value) in [
            ("energy", s.energy),
            ("standing charges", s.standing),
            ("tax", s.tax),
        ] {
            finite(
                PICTURE,
                [(format!("{part} of “{}”", s.label).as_str(), value)],
            )?;
        }
    }
    let money = |v: f64| marks.money(&data.currency, v);
    let systems = data.systems.iter();
    let bars = bars::compared(
        systems.map(|s| (s.label.as_str(), s.today, vec![s.energy, s.standing, s.tax])),
        &money,
    );
    let subtitle = if bars::has_comparison(&bars) {
        "Bills of one year by system. The dashed mark is what today’s system costs."
    } else {
        "Bills of one year by system."
    };
    let title = "What a year costs to run";
    let mut scene = Scene::of(marks);
    let top = scene.heading(title, subtitle);
    let axis = format!("Cost of a year, {}", money_unit(&data.currency));
    bars::draw(&mut scene, top, &bars, &PARTS, &axis, &money, marks);
    let alt = bars::in_words("what a year costs to run", &bars, &PARTS, &money);
    Ok(Picture::new(title, alt, scene))
}

#[cfg(test)]
mod tests {
    use super::*;

    fn two() -> AnnualCost {
        let system = |label: &str, today, energy| SystemCost {
            label: label.into(),
            today,
            energy,
            standing: 300.0,
            tax: 60.0,
        };
        AnnualCost {
            currency: "GBP".into(),
            systems: vec![
                system("Boiler", true, 1100.0),
                system("Air source", false, 900.0),
            ],
        }
    }

    #[test]
    fn the_picture_says_totals_and_the_difference() {
        let picture = annual_cost(&two(), &Marks::default()).unwrap();
        let texts: Vec<&str> = picture.labels().iter().map(|l| l.text.as_str()).collect();
        for wanted in ["£1,460", "£1,260", "£200 less", "today"] {
            assert!(texts.contains(&wanted), "{wanted} not in {texts:?}");
        }
        assert!(
            picture
                .alt
                .contains("Air source: £1,260, £200 less than today")
        );
    }

    #[test]
    fn without_today_nothing_is_compared() {
        let mut data = two();
        data.systems[0].today = false;
        let picture = annual_cost(&data, &Marks::default()).unwrap();
        assert!(!picture.alt.contains("today"));
    }

    #[test]
    fn nothing_and_not_a_number_are_refused() {
        let none = AnnualCost {
            currency: "GBP".into(),
            systems: vec![],
        };
        assert!(matches!(
            annual_cost(&none, &Marks::default()),
            Err(ChartError::Empty { .. })
        ));
        let mut data = two();
        data.systems[1].tax = f64::NAN;
        let error = annual_cost(&data, &Marks::default()).unwrap_err();
        assert!(error.to_string().contains("tax of “Air source”"), "{error}");
    }
}
