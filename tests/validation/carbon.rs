//! Carbon factors as published, and mixtures refused.

use winterledger::carbon::{Course, Factor, Factors, Leakage, PUBLISHED, Published, Scope};
use winterledger::problem::Place;
use winterledger::units::Fuel;

use crate::table::Row;

fn constant(set: &str, fuel: Fuel) -> f64 {
    match Published::of(set)
        .unwrap()
        .factors()
        .of(fuel)
        .map(|factor| factor.course.clone())
    {
        Some(Course::Constant(kg)) => kg,
        Some(Course::Monthly(kg)) => kg.iter().sum::<f64>() / 12.0,
        _ => f64::NAN,
    }
}

pub fn rows() -> Vec<Row> {
    let uk = "UK government conversion factors 2025";
    let mut rows = Vec::new();
    for (what, source, expected, set, fuel, tolerance) in [
        ("Gas, gross", uk, 0.18296, "uk-2025", Fuel::Gas, 1e-9),
        (
            "Electricity as generated",
            uk,
            0.177,
            "uk-2025-generation",
            Fuel::Electricity,
            1e-9,
        ),
        (
            "Electricity with grid losses, 0.177 + 0.01853 [M]",
            uk,
            0.19553,
            "uk-2025",
            Fuel::Electricity,
            1e-9,
        ),
        (
            "Gas with upstream",
            "SAP 10.2, table 12",
            0.210,
            "sap-10.2",
            Fuel::Gas,
            1e-9,
        ),
        (
            "Electricity, mean of the months",
            "SAP 10.2: 0.136 for the year",
            0.136,
            "sap-10.2",
            Fuel::Electricity,
            0.0035,
        ),
        (
            "EU-27 electricity 2023",
            "European Environment Agency",
            0.210,
            "eu-2023",
            Fuel::Electricity,
            1e-9,
        ),
    ] {
        let because = if tolerance > 1e-6 {
            "the year is weighted by use, and months between are from memory"
        } else {
            "a table value"
        };
        rows.push(Row::new(
            format!("{what}, kg CO2e/kWh"),
            source,
            expected,
            constant(set, fuel),
            tolerance,
            because,
        ));
    }
    let factor = |fuel, scope| Factor {
        fuel,
        course: Course::Constant(0.2),
        scope,
        source: String::new(),
        place: Place::default(),
    };
    let mixed = Factors::new(vec![
        factor(Fuel::Electricity, Scope::WithUpstream),
        factor(Fuel::Gas, Scope::Burning),
    ]);
    let alike = Factors::new(vec![
        factor(Fuel::Electricity, Scope::Burning),
        factor(Fuel::Gas, Scope::Burning),
    ]);
    rows.push(Row::holds(
        "A combustion-only gas factor beside a full-assessment electricity factor is refused, two of one scope are not",
        "common practice, no source: the scope travels with the factor",
        mixed.is_err() && alike.is_ok(),
    ));
    rows.push(Row::new(
        "Published sets whose factors are all of the scope they name",
        "common practice, no source: a factor and its scope belong together",
        PUBLISHED.len() as f64,
        PUBLISHED
            .iter()
            .filter(|set| set.factors().scope() == set.scope())
            .count() as f64,
        0.0,
        "a count: all of them",
    ));
    let leakage = Leakage {
        charge_kg: 1.2,
        gwp100: 675.0,
        per_year: 0.02,
        at_end: 0.15,
    };
    rows.push(Row::new(
        "1.2 kg of R32 leaking 2 % a year and 15 % after 15 years, kg CO2e a year",
        "EU 517/2014: GWP 675 [M], by hand",
        24.3,
        leakage.kg_per_year(15.0),
        1e-9,
        "rounding",
    ));
    rows
}
