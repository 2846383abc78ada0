//! Any text as a brief. It names files of the repository's folders when it is begun from `briefs/`.
#![no_main]

use libfuzzer_sys::fuzz_target;
use winterledger::brief::Brief;

fuzz_target!(|text: &str| {
    let path = std::path::Path::new(concat!(env!("CARGO_MANIFEST_DIR"), "/../briefs/.fuzz-input.toml"));
    if std::fs::write(path, text).is_ok() {
        let _ = Brief::read(path);
    }
});
