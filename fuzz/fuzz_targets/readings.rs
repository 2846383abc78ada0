//! Any text as meter readings.
#![no_main]

use libfuzzer_sys::fuzz_target;
use winterledger::signature::{Conversion, Readings};
use winterledger::units::Fuel;

fuzz_target!(|text: &str| {
    let conversion = Conversion {
        fuel: Fuel::Gas,
        calorific_value: None,
        volume_correction: 1.02264,
    };
    if let Ok(readings) = Readings::read("input", text, &conversion) {
        assert!(readings.intervals.iter().all(|interval| interval.kwh.is_finite()));
    }
});
