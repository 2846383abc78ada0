//! Every sheet under `tests/data/sheet_bad/` is refused with exactly the message beside it: all problems at once, with file, line,
//! what was found, what is allowed and what to write.

#![cfg(test)] // so that the lints know the code below for test code

use std::fs;
use std::path::Path;

use winterledger::heatpump::Sheet;

#[test]
fn every_bad_sheet_is_refused_with_its_message() {
    let folder = Path::new(env!("CARGO_MANIFEST_DIR")).join("tests/data/sheet_bad");
    let mut wrong = String::new();
    let mut seen = 0;
    for entry in fs::read_dir(&folder).unwrap() {
        let path = entry.unwrap().path();
        if path.extension().is_none_or(|extension| extension != "toml") {
            continue;
        }
        seen += 1;
        let name = path.file_name().unwrap().to_str().unwrap();
        let text = fs::read_to_string(&path).unwrap();
        let message = match Sheet::parse(name, &text) {
            Ok(_) => "was not refused".to_owned(),
            Err(problems) => problems.to_string(),
        };
        let expected = fs::read_to_string(path.with_extension("txt")).unwrap_or_default();
        if message.trim_end() != expected.trim_end() {
            wrong.push_str(&format!("=== {name}\n{message}\n"));
        }
    }
    assert!(seen >= 24, "{seen} files");
    assert!(wrong.is_empty(), "{wrong}");
}

#[test]
fn a_missing_file_is_named() {
    let problems = Sheet::read(Path::new("no/such/sheet.toml")).unwrap_err();
    assert!(
        problems.to_string().contains("no/such/sheet.toml"),
        "{problems}"
    );
}
