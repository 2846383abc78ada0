//! What the README shows is what the program does.
#![cfg(test)]

use std::fs;
use std::path::Path;

use assert_cmd::Command;

fn readme() -> String {
    fs::read_to_string(Path::new(env!("CARGO_MANIFEST_DIR")).join("README.md")).unwrap()
}

/// The content of the fence below a mark.
fn block(mark: &str) -> String {
    let readme = readme();
    let after = readme.split_once(&format!("<!-- {mark} -->")).unwrap().1;
    after
        .split_once("```")
        .unwrap()
        .1
        .split_once('\n')
        .unwrap()
        .1
        .split_once("```")
        .unwrap()
        .0
        .to_owned()
}

#[test]
fn the_result_shown_is_the_result() {
    let shown = block("first-result");
    let output = Command::cargo_bin("winterledger")
        .unwrap()
        .arg("estimate")
        .output()
        .unwrap();
    let printed = String::from_utf8(output.stdout).unwrap();
    let count = shown.lines().count();
    assert!(count > 20, "the README shows only {count} lines");
    let printed: Vec<_> = printed.lines().take(count).collect();
    assert_eq!(
        shown.lines().collect::<Vec<_>>(),
        printed,
        "copy the program's output into README.md"
    );
}

#[test]
fn every_command_that_is_named_exists() {
    let help = Command::cargo_bin("winterledger")
        .unwrap()
        .arg("--help")
        .output()
        .unwrap();
    let help = String::from_utf8(help.stdout).unwrap();
    let mut named = 0;
    for line in readme().lines().filter(|line| line.starts_with("| `")) {
        let command = line[3..].split(['`', ' ']).next().unwrap();
        if line.contains("answers") || !command.chars().all(|c| c.is_ascii_lowercase()) {
            continue;
        }
        named += 1;
        assert!(
            help.contains(&format!("  {command} ")),
            "{command} is not in --help"
        );
    }
    assert!(named >= 4, "only {named} commands are named");
}

/// Every file and folder that the README names is there.
#[test]
fn every_path_that_is_named_exists() {
    let root = Path::new(env!("CARGO_MANIFEST_DIR"));
    for path in [
        "briefs/terrace.toml",
        "weather_samples",
        "tariffs",
        "briefs/machines",
        "DEVELOPERS.md",
        "tests/data",
    ] {
        assert!(readme().contains(path), "{path} is no longer named");
        assert!(root.join(path).exists(), "{path}");
    }
}
