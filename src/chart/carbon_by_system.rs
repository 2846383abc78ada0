//! Carbon of a year, system by system, split by where it comes from.

use super::bars::{self, Part};
use super::numbers::Marks;
use super::palette::{AZURE, BROWN, Hatch, MINT};
use super::scene::Scene;
use super::{ChartError, Picture, finite};

const PICTURE: &str = "carbon of a year";

/// What is drawn.
#[derive(Debug, Clone, PartialEq)]
pub struct CarbonBySystem {
    /// The systems, in the order they are to stand.
    pub systems: Vec<SystemCarbon>,
    /// What the factors cover, for the subtitle, for example "generation and losses, average of the year".
    pub scope: String,
}

/// Carbon of one system in kg CO2e of a year.
#[derive(Debug, Clone, PartialEq)]
pub struct SystemCarbon {
    /// Name.
    pub label: String,
    /// Whether this is what heats the home today.
    pub today: bool,
    /// From electricity.
    pub electricity_kg: f64,
    /// From fuel burnt in the home.
    pub fuel_kg: f64,
    /// From refrigerant that escapes.
    pub refrigerant_kg: f64,
}

impl SystemCarbon {
    /// The whole of a year.
    pub fn total(&self) -> f64 {
        self.electricity_kg + self.fuel_kg + self.refrigerant_kg
    }
}

const PARTS: [Part; 3] = [
    ("Electricity", AZURE, Hatch::Plain),
    ("Fuel burnt at home", BROWN, Hatch::Plain),
    ("Refrigerant that escapes", MINT, Hatch::Rising),
];

/// Draws the carbon of a year.
///
/// # Errors
/// [`ChartError::Empty`] without systems, [`ChartError::NotFinite`] for a value that is not a number.
pub fn carbon_by_system(data: &CarbonBySystem, marks: &Marks) -> Result<Picture, ChartError> {
    if data.systems.is_empty() {
        return Err(ChartError::Empty {
            picture: PICTURE,
            missing: "no system was given",
        });
    }
    for s in &data.systems {
        for (part, value) in [
            ("electricity", s.electricity_kg),
            ("fuel", s.fuel_kg),
            ("refrigerant", s.refrigerant_kg),
        ] {
            finite(
                PICTURE,
                [(format!("carbon of {part} of “{}”", s.label).as_str(), value)],
            )?;
        }
    }
    let kg = |v: f64| format!("{}\u{a0}kg", marks.number(v, 0));
    let systems = data.systems.iter();
    let bars = bars::compared(
        systems.map(|s| {
            let parts = vec![s.electricity_kg, s.fuel_kg, s.refrigerant_kg];
            (s.label.as_str(), s.today, parts)
        }),
        &kg,
    );

    let title = "Carbon of a year";
    let scope = super::font::clean(&data.scope);
    let mut subtitle = String::from("Greenhouse gases in kg CO₂e");
    subtitle += &if scope.is_empty() {
        ".".into()
    } else {
        format!(": {scope}.")
    };
    if bars::has_comparison(&bars) {
        subtitle += " The dashed mark is today’s system.";
    }
    let mut scene = Scene::of(marks);
    let top = scene.heading(title, &subtitle);
    bars::draw(
        &mut scene,
        top,
        &bars,
        &PARTS,
        "Carbon of a year, kg CO₂e",
        &kg,
        marks,
    );
    let what = "the greenhouse gases of a year, in kg CO₂e";
    let alt = bars::in_words(what, &bars, &PARTS, &kg);
    Ok(Picture::new(title, alt, scene))
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn carbon_is_compared_with_today_and_zero_stays_zero() {
        let system = |today, electricity_kg, fuel_kg| SystemCarbon {
            label: "System".into(),
            today,
            electricity_kg,
            fuel_kg,
            refrigerant_kg: 0.0,
        };
        let data = CarbonBySystem {
            systems: vec![system(true, 20.0, 2300.0), system(false, 0.0, 0.0)],
            scope: String::new(),
        };
        let picture = carbon_by_system(&data, &Marks::default()).unwrap();
        let texts: Vec<&str> = picture.labels().iter().map(|l| l.text.as_str()).collect();
        assert!(
            texts.contains(&"0\u{a0}kg") && texts.contains(&"2,320\u{a0}kg less"),
            "{texts:?}"
        );
        assert!(!texts.contains(&"Refrigerant that escapes"));
    }
}
