//! Carbon of each year of the life, system by system, as the electricity of the grid changes.

use super::ends::{self, Course};
use super::frame::{Axis, Frame};
use super::numbers::Marks;
use super::scene::Scene;
use super::{ChartError, Picture, finite, font, named};

const PICTURE: &str = "carbon by year";

/// What is drawn.
#[derive(Debug, Clone, PartialEq)]
pub struct CarbonByYear {
    /// First year.
    pub first_year: i32,
    /// What the factors cover and how they change, for the subtitle.
    pub scope: String,
    /// The systems, in the order they are to stand.
    pub systems: Vec<SystemYears>,
}

/// The years of one system.
#[derive(Debug, Clone, PartialEq)]
pub struct SystemYears {
    /// Name.
    pub label: String,
    /// Whether this is what heats the home today.
    pub today: bool,
    /// Carbon of each year, kg CO₂e.
    pub carbon_kg: Vec<f64>,
}

/// Room for the names at the right.
const RIGHT: f64 = 190.0;
/// Height of the plot with its axis.
const PLOT: f64 = 340.0;

/// Draws carbon by year.
///
/// # Errors
/// [`ChartError::Empty`] with fewer than two years, [`ChartError::Uneven`] when systems differ in years,
/// [`ChartError::NotFinite`] for an amount that is not a number.
pub fn carbon_by_year(data: &CarbonByYear, marks: &Marks) -> Result<Picture, ChartError> {
    let years = data.systems.first().map_or(0, |s| s.carbon_kg.len());
    if years < 2 {
        return Err(ChartError::Empty {
            picture: PICTURE,
            missing: "fewer than two years were given",
        });
    }
    if let Some(other) = data.systems.iter().find(|s| s.carbon_kg.len() != years) {
        return Err(ChartError::Uneven {
            picture: PICTURE,
            what: format!(
                "{years} years, and {} of “{}”",
                other.carbon_kg.len(),
                other.label
            ),
        });
    }
    let all = || data.systems.iter().flat_map(|s| &s.carbon_kg).copied();
    for s in &data.systems {
        finite(PICTURE, s.carbon_kg.iter().map(|v| (s.label.as_str(), *v)))?;
    }
    let title = "Greenhouse gas year by year";
    let scope = font::clean(&data.scope);
    let subtitle = match scope.as_str() {
        "" => "Of each year from now on.".to_owned(),
        scope => format!("Of each year from now on; factors: {scope}."),
    };
    let mut scene = Scene::of(marks);
    let top = scene.heading(title, &subtitle);
    scene.height = top + PLOT + 6.0;
    let year = |i: usize| f64::from(data.first_year) + i as f64;
    let plain = Marks {
        thousands: None,
        ..*marks
    };
    let frame = Frame::inside(
        ends::area(&scene, top, PLOT, scene.aside(RIGHT)),
        Axis::tight("Year", year(0), year(years - 1), 6, &plain),
        Axis::linear(
            "kg CO₂e in the year",
            all().fold(0.0, f64::min),
            all().fold(0.0, f64::max),
            6,
            marks,
        ),
    );
    frame.draw(&mut scene);
    let courses: Vec<Course<'_>> = data
        .systems
        .iter()
        .map(|system| Course {
            label: &system.label,
            today: system.today,
            points: system
                .carbon_kg
                .iter()
                .enumerate()
                .map(|(y, v)| (year(y), *v))
                .collect(),
        })
        .collect();
    let room = scene.aside(RIGHT);
    ends::courses(&mut scene, &frame, &courses, room);
    Ok(Picture::new(title, alt(data, years, marks), scene))
}

fn alt(data: &CarbonByYear, years: usize, marks: &Marks) -> String {
    let last = i64::from(data.first_year) + years as i64 - 1;
    let mut out = format!(
        "Greenhouse gas of each year from {} to {last}.",
        data.first_year
    );
    for s in &data.systems {
        if let (Some(first), Some(end)) = (s.carbon_kg.first(), s.carbon_kg.last()) {
            out += &format!(
                " {}: from {} to {} kg CO₂e, {} kg in all.",
                named(&s.label),
                marks.number(*first, 0),
                marks.number(*end, 0),
                marks.number(s.carbon_kg.iter().sum(), 0)
            );
        }
    }
    out
}

#[cfg(test)]
mod tests {
    use super::*;

    fn data() -> CarbonByYear {
        let system = |label: &str, today, carbon_kg: Vec<f64>| SystemYears {
            label: label.into(),
            today,
            carbon_kg,
        };
        CarbonByYear {
            first_year: 2026,
            scope: String::new(),
            systems: vec![
                system("Boiler", true, vec![3300.0; 3]),
                system("Air", false, vec![850.0, 700.0, 600.0]),
            ],
        }
    }

    #[test]
    fn first_and_last_year_are_told() {
        let picture = carbon_by_year(&data(), &Marks::default()).unwrap();
        assert!(picture.alt.contains("from 2026 to 2028"), "{}", picture.alt);
        assert!(
            picture
                .alt
                .contains("Air: from 850 to 600 kg CO₂e, 2,150 kg in all")
        );
    }

    #[test]
    fn uneven_years_are_refused() {
        let mut data = data();
        data.systems[1].carbon_kg.pop();
        assert!(matches!(
            carbon_by_year(&data, &Marks::default()),
            Err(ChartError::Uneven { .. })
        ));
    }
}
