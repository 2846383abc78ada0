//! Paths and terms; figures stand against numpy-financial in `tests/validation/lifetime.rs`.
#![cfg(test)]

use winterledger::lifetime::{CashFlow, Outlay, Path, Running, Terms};

/// A path of the same change is the same as the change.
#[test]
fn a_given_path_and_a_yearly_change_agree() {
    let running = Running {
        electricity: 900.0,
        ..Running::default()
    };
    let terms = |electricity| Terms {
        years: 15,
        discount_rate: 0.035,
        electricity,
        fuel: Path::STEADY,
        electricity_carbon: Path::STEADY,
    };
    let given = Path::Given((0..15).map(|year| 1.02_f64.powi(year)).collect());
    let cost = |path| CashFlow::of(&terms(path), &Outlay::default(), &running).present_cost();
    assert!((cost(given) - cost(Path::Change(0.02))).abs() < 1e-9);
}

#[test]
fn terms_that_cannot_be_counted_with_are_told_all_at_once() {
    let terms = Terms {
        years: 0,
        discount_rate: -0.6,
        electricity: Path::STEADY,
        fuel: Path::STEADY,
        electricity_carbon: Path::STEADY,
    };
    assert_eq!(terms.check().unwrap_err().len(), 2);
    let short = Terms {
        years: 20,
        discount_rate: 0.0,
        fuel: Path::Given(vec![1.0; 12]),
        ..terms
    };
    let told = short.check().unwrap_err().to_string();
    assert!(
        told.contains("a path of 12 years for a life of 20 years"),
        "{told}"
    );
}
