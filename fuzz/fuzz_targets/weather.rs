//! Any bytes as hourly weather, plain or packed.
#![no_main]

use libfuzzer_sys::fuzz_target;
use winterledger::weather::{ReadOptions, describe, read_bytes};

fuzz_target!(|bytes: &[u8]| {
    // Small, so that a packed file is told by its bytes and not by its size.
    let options = ReadOptions {
        max_expanded_bytes: Some(1 << 20),
        ..ReadOptions::default()
    };
    if let Ok(weather) = read_bytes("input", bytes, &options) {
        assert!(weather.outdoor_c.iter().all(|c| c.is_finite()));
        describe(std::slice::from_ref(&weather), &[15.5]);
    }
});
