//! What a household does not pay in; the currencies it does stand in `tests/validation/units.rs`.
#![cfg(test)]

use winterledger::units::Currency;

/// Withdrawn, metals and testing codes of ISO 4217.
#[test]
fn withdrawn_and_testing_currencies_are_refused() {
    for code in ["DEM", "FRF", "XAU", "XTS", "gbp", ""] {
        assert!(Currency::parse(code).is_err(), "{code}");
    }
}
