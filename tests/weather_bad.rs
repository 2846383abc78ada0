//! Faulty files, one fault each: the exact message, or for a fault that is repaired every finding and the counts.
//!
//! The files are made by `tests/data/weather_bad/make.py`; the text expected of NAME stands in NAME.txt. With
//! WRITE_EXPECTED=1 the test writes those texts anew, to be read by a person before they are kept.
#![cfg(test)]

use std::fmt::Write;
use std::fs;
use std::path::Path;

use winterledger::weather::{ReadOptions, read_bytes};

/// What reading a file says.
fn said(name: &str, bytes: &[u8]) -> String {
    match read_bytes(name, bytes, &ReadOptions::default()) {
        Err(problems) => format!("refused\n{problems}\n"),
        Ok(weather) => {
            let mut text = format!(
                "read: {} hours, {} missing, {} repaired, {} doubled, {} joined\n",
                weather.axis.hours,
                weather.missing_hours,
                weather.repaired_hours(),
                weather.duplicate_hours,
                weather.joined_hours,
            );
            assert!(
                weather.outdoor_c.iter().all(|c| (-60.0..=55.0).contains(c)),
                "{name}"
            );
            for finding in &weather.findings {
                writeln!(text, "{finding}").unwrap();
            }
            text
        }
    }
}

#[test]
fn every_faulty_file_is_answered_as_expected() {
    let folder = Path::new(env!("CARGO_MANIFEST_DIR")).join("tests/data/weather_bad");
    let write = std::env::var_os("WRITE_EXPECTED").is_some();
    let mut files = 0;
    let mut wrong = Vec::new();
    let mut paths: Vec<_> = fs::read_dir(&folder)
        .unwrap()
        .map(|entry| entry.unwrap().path())
        .collect();
    paths.sort();
    for path in paths {
        let name = path.file_name().unwrap().to_str().unwrap().to_owned();
        if name.ends_with(".txt") || name == "make.py" {
            continue;
        }
        files += 1;
        let found = said(&name, &fs::read(&path).unwrap());
        let expected_path = folder.join(format!("{name}.txt"));
        if write {
            fs::write(&expected_path, &found).unwrap();
        }
        let expected = fs::read_to_string(&expected_path)
            .unwrap_or_else(|_| panic!("{name} has no expected message"));
        if found != expected {
            wrong.push(format!(
                "--- {name}\nexpected:\n{expected}\nfound:\n{found}"
            ));
        }
    }
    assert!(files >= 30, "only {files} files");
    assert!(wrong.is_empty(), "{}", wrong.join("\n"));
}
