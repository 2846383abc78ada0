//! What becomes of the report when it cannot be written: told before the long work, and nothing half-written.
#![cfg(all(test, unix))]

use std::fs;
use std::path::Path;
use std::process::{Command as Shell, Output};
use std::time::Instant;

use assert_cmd::cargo::cargo_bin;

fn run(prelude: &str, out: &Path, more: &str) -> Output {
    let script = format!(
        "{prelude} exec '{}' estimate {more} --out '{}'",
        cargo_bin("winterledger").display(),
        out.display()
    );
    Shell::new("sh").arg("-c").arg(script).output().unwrap()
}

fn said(output: &Output) -> String {
    String::from_utf8_lossy(&output.stderr).into_owned()
}

/// A place that is a file, and one below a file, cannot hold the folder. No progress is shown before it is said.
#[test]
fn a_folder_that_cannot_be_made_is_told_before_the_long_work() {
    let folder = tempfile::tempdir().unwrap();
    let file = folder.path().join("taken");
    fs::write(&file, "kept").unwrap();
    for out in [file.clone(), file.join("below")] {
        let begun = Instant::now();
        let output = run("", &out, "");
        assert_eq!(output.status.code(), Some(3), "{}", said(&output));
        assert!(said(&output).contains("taken"), "{}", said(&output));
        // Reading the brief comes first; the years, pictures and report take ten times as long even when built for speed.
        assert!(!said(&output).contains("pictures"), "{:?}", begun.elapsed());
        assert_eq!(fs::read_to_string(&file).unwrap(), "kept");
    }
}

/// A limit on the size of files stands for a disk that fills: a ledger is the first that does not fit. The shell's block is 512
/// bytes (POSIX.1-2017, ulimit), and the signal of the limit must be ignored for the write to fail as on a full disk.
#[test]
fn a_disk_that_fills_leaves_nothing_half_written() {
    let folder = tempfile::tempdir().unwrap();
    let out = folder.path().join("out");
    let output = run("trap '' XFSZ; ulimit -f 400;", &out, "");
    assert_eq!(output.status.code(), Some(3), "{}", said(&output));
    assert!(said(&output).contains("ledger"), "{}", said(&output));
    let left: Vec<_> = fs::read_dir(&out).unwrap().collect();
    assert!(left.is_empty(), "{left:?}");
}

/// With --force an earlier report stays whole when the new one does not fit.
#[test]
fn an_earlier_report_is_kept_when_the_new_one_does_not_fit() {
    let folder = tempfile::tempdir().unwrap();
    let out = folder.path().join("out");
    fs::create_dir(&out).unwrap();
    for name in ["report.html", "report.pdf", "result.json"] {
        fs::write(out.join(name), "earlier").unwrap();
    }
    let output = run("trap '' XFSZ; ulimit -f 400;", &out, "--force");
    assert_eq!(output.status.code(), Some(3), "{}", said(&output));
    for name in ["report.html", "report.pdf", "result.json"] {
        assert_eq!(fs::read_to_string(out.join(name)).unwrap(), "earlier");
    }
    assert_eq!(fs::read_dir(&out).unwrap().count(), 3);
}
