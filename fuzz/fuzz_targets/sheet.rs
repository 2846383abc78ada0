//! Any text as a machine sheet.
#![no_main]

use libfuzzer_sys::fuzz_target;
use winterledger::heatpump::{Sheet, fit};

fuzz_target!(|text: &str| {
    if let Ok(sheet) = Sheet::parse("input", text) {
        let _ = fit(&sheet);
    }
});
