//! Ground sources that cannot be: every problem of one at once, with its line and what to write.
#![cfg(test)]

use std::fs;
use std::path::Path;

use assert_cmd::Command;

#[test]
fn every_bad_ground_is_told_what_is_wrong_with_it() {
    let root = Path::new(env!("CARGO_MANIFEST_DIR"));
    let mut names: Vec<_> = fs::read_dir(root.join("tests/data/ground_bad"))
        .unwrap()
        .map(|entry| entry.unwrap().file_name().into_string().unwrap())
        .filter(|name| name.ends_with(".toml"))
        .collect();
    names.sort();
    assert!(
        names.len() >= 22,
        "the corpus has shrunk to {}",
        names.len()
    );
    for name in names {
        let output = Command::cargo_bin("winterledger")
            .unwrap()
            .current_dir(root)
            .arg("ground")
            .arg(format!("tests/data/ground_bad/{name}"))
            .output()
            .unwrap();
        let told = String::from_utf8(output.stderr).unwrap();
        assert_eq!(output.status.code(), Some(1), "{name}: {told}");
        assert!(
            output.stdout.is_empty(),
            "{name}: something was printed as a result"
        );
        insta::assert_snapshot!(name.trim_end_matches(".toml"), told);
    }
}
