//! Briefs that cannot be used: every problem of one at once, with its line and what to write; nothing written.
#![cfg(test)]

use std::fs;
use std::path::Path;

use assert_cmd::Command;

/// Runs `estimate` on every brief of the corpus; what it says is a snapshot.
#[test]
fn every_bad_brief_is_told_what_is_wrong_with_it() {
    let root = Path::new(env!("CARGO_MANIFEST_DIR"));
    let mut names: Vec<_> = fs::read_dir(root.join("tests/data/brief_bad"))
        .unwrap()
        .map(|entry| entry.unwrap().file_name().into_string().unwrap())
        .collect();
    names.sort();
    assert!(
        names.len() >= 20,
        "the corpus has shrunk to {}",
        names.len()
    );
    for name in names {
        let out = tempfile::tempdir().unwrap();
        let output = Command::cargo_bin("winterledger")
            .unwrap()
            .current_dir(root)
            .arg("estimate")
            .arg(format!("tests/data/brief_bad/{name}"))
            .arg("--out")
            .arg(out.path().join("out"))
            .output()
            .unwrap();
        assert_eq!(output.status.code(), Some(1), "{name}");
        assert!(
            output.stdout.is_empty(),
            "{name}: something was printed as a result"
        );
        assert!(
            !out.path().join("out").exists(),
            "{name}: something was written"
        );
        let told = String::from_utf8(output.stderr).unwrap();
        insta::assert_snapshot!(name.trim_end_matches(".toml"), told);
    }
}
