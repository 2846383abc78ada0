//! Any text as a tariff, and a bill under it.
#![no_main]

use libfuzzer_sys::fuzz_target;
use winterledger::bill::{self, Connection};
use winterledger::calendar::HourAxis;
use winterledger::tariff::Tariff;

fuzz_target!(|text: &str| {
    let Ok(tariff) = Tariff::from_text("input", text, "no/such/folder".as_ref()) else {
        return;
    };
    let Ok(start) = "2023-03-20T00:00:00Z".parse() else {
        return;
    };
    let civil = HourAxis { start, hours: 300 }.civil(chrono_tz::Europe::London);
    let _ = bill::price(&tariff, &civil, &vec![1.3; civil.len()], Connection::Kept);
});
