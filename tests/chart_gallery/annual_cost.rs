//! Cost of a year.

use crate::common::*;
use winterledger::chart::{AnnualCost, SystemCost, annual_cost};

fn system(label: &str, today: bool, energy: f64, standing: f64, tax: f64) -> SystemCost {
    SystemCost {
        label: label.into(),
        today,
        energy,
        standing,
        tax,
    }
}

fn draw(name: &str, currency: &str, systems: Vec<SystemCost>) {
    let data = AnnualCost {
        currency: currency.into(),
        systems,
    };
    check(
        &format!("annual_cost_{name}"),
        &annual_cost(&data, &english()).expect("drawn"),
    );
}

#[test]
fn realistic() {
    draw(
        "realistic",
        "GBP",
        vec![
            system(NAMES[0], true, 1013.0, 311.0, 66.2),
            system("New boiler, turned down", false, 938.0, 311.0, 62.5),
            system(NAMES[1], false, 1024.0, 197.0, 61.1),
            system("Ground source, larger radiators", false, 849.0, 197.0, 52.3),
        ],
    );
}

#[test]
fn one_system() {
    draw(
        "one",
        "EUR",
        vec![system("Boiler", true, 900.0, 120.0, 190.0)],
    );
}

#[test]
fn eight_systems_with_hostile_names() {
    let systems = NAMES
        .iter()
        .enumerate()
        .map(|(i, n)| system(n, i == 0, 1000.0 - 90.0 * i as f64, 200.0, 60.0))
        .collect();
    draw("eight", "CHF", systems);
}

#[test]
fn name_of_400_characters() {
    draw(
        "long",
        "GBP",
        vec![
            system(&long_name(), true, 1000.0, 300.0, 60.0),
            system(&long_name(), false, 900.0, 200.0, 50.0),
        ],
    );
}

#[test]
fn credits_dearer_choices_and_the_same() {
    draw(
        "credits",
        "GBP",
        vec![
            system("Boiler", true, 700.0, 300.0, 50.0),
            system("Exports more than it buys", false, -640.0, 200.0, -22.0),
            system("Dearer", false, 1500.0, 200.0, 85.0),
            system("The same", false, 700.2, 300.0, 50.0),
        ],
    );
}

#[test]
fn all_nothing() {
    draw(
        "nothing",
        "GBP",
        vec![
            system("Boiler", true, 0.0, 0.0, 0.0),
            system("None", false, 0.0, 0.0, 0.0),
        ],
    );
}

#[test]
fn huge_and_tiny() {
    draw(
        "huge",
        "ISK",
        vec![
            system("Boiler", true, 123_456_789.0, 300.0, 50.0),
            system("Tiny", false, 0.02, 0.001, 0.0),
        ],
    );
}
