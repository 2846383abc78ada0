//! Any text as one hourly column.
#![no_main]

use libfuzzer_sys::fuzz_target;
use winterledger::series::{Layout, Stamp, WithinHour, read_text};

fuzz_target!(|text: &str| {
    let layout = Layout {
        column: None,
        stamp: Stamp::Beginning,
        zone: chrono_tz::Europe::Berlin,
        within_hour: WithinHour::Mean,
    };
    if let Ok(series) = read_text("input", text, &layout) {
        assert!(series.values().iter().all(|value| value.is_finite()));
    }
});
