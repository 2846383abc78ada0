//! The supply chain: licences, the reasons of DEVELOPERS.md, and the pinned toolchain.
//!
//! Licences are read from what Cargo itself knows of every crate that is built in. Advisories need a database from the network:
//! `.ci/run` asks for them where `cargo audit` is installed.
#![cfg(test)]

use std::collections::{BTreeMap, BTreeSet};
use std::fs;
use std::path::Path;
use std::process::Command;

use serde_json::Value;

/// Licences that ask for no more than a notice. An expression may choose with OR; every part of an AND must stand here.
const ALLOWED: &[&str] = &[
    "0BSD",
    "Apache-2.0",
    "Apache-2.0 WITH LLVM-exception",
    "BSD-2-Clause",
    "BSD-3-Clause",
    "BSL-1.0",
    "CC0-1.0",
    "ISC",
    "MIT",
    "MIT-0",
    "Unicode-3.0",
    "Unlicense",
    "Zlib",
];

fn root() -> &'static Path {
    Path::new(env!("CARGO_MANIFEST_DIR"))
}

/// What Cargo knows of the crates that are built here; those of other systems are not at hand without the network.
fn metadata() -> Value {
    let told = Command::new("rustc")
        .current_dir(root())
        .arg("-vV")
        .output()
        .unwrap();
    let told = String::from_utf8(told.stdout).unwrap();
    let host = told
        .lines()
        .find_map(|line| line.strip_prefix("host: "))
        .unwrap();
    let output = Command::new(env!("CARGO"))
        .current_dir(root())
        .args([
            "metadata",
            "--format-version",
            "1",
            "--locked",
            "--offline",
            "--filter-platform",
            host,
        ])
        .output()
        .unwrap();
    assert!(
        output.status.success(),
        "{}",
        String::from_utf8_lossy(&output.stderr)
    );
    serde_json::from_slice(&output.stdout).unwrap()
}

/// Whether an SPDX expression is met by what is allowed: `(MIT OR Apache-2.0) AND Unicode-3.0`, also the older `MIT/Apache-2.0`, and
/// the operator in small letters.
fn is_allowed(expression: &str) -> bool {
    let text = expression.replace('/', " OR ").replace(" or ", " OR ");
    // AND binds stronger than OR; parentheses are the only nesting that is met.
    let parts = |text: &str, word: &str| -> Vec<String> {
        let (mut depth, mut found, mut from) = (0, Vec::new(), 0);
        for (at, letter) in text.char_indices() {
            match letter {
                '(' => depth += 1,
                ')' => depth -= 1,
                ' ' if depth == 0 && text[at..].starts_with(word) => {
                    found.push(text[from..at].to_owned());
                    from = at + word.len();
                }
                _ => {}
            }
        }
        found.push(text[from.min(text.len())..].to_owned());
        found
    };
    parts(&text, " OR ").iter().any(|choice| {
        parts(choice, " AND ").iter().all(|part| {
            let part = part.trim();
            match part
                .strip_prefix('(')
                .and_then(|part| part.strip_suffix(')'))
            {
                Some(inner) => is_allowed(inner),
                None => ALLOWED.contains(&part),
            }
        })
    })
}

#[test]
fn expressions_are_understood() {
    for good in [
        "MIT",
        "MIT/Apache-2.0",
        "MIT or Apache-2.0",
        "GPL-3.0 OR MIT",
        "(MIT OR Apache-2.0) AND Unicode-3.0",
        "Apache-2.0 WITH LLVM-exception OR MIT",
    ] {
        assert!(is_allowed(good), "{good}");
    }
    for bad in [
        "GPL-3.0",
        "MIT AND GPL-3.0",
        "(GPL-3.0 OR LGPL-2.1) AND MIT",
        "",
    ] {
        assert!(!is_allowed(bad), "{bad}");
    }
}

#[test]
fn every_licence_is_allowed() {
    let metadata = metadata();
    let packages = metadata["packages"].as_array().unwrap();
    let mut refused = Vec::new();
    let mut seen: BTreeMap<&str, usize> = BTreeMap::new();
    for package in packages {
        let licence = package["license"].as_str().unwrap_or("");
        *seen.entry(licence).or_default() += 1;
        if !is_allowed(licence) {
            refused.push(format!(
                "{} {}: \"{licence}\"",
                package["name"], package["version"]
            ));
        }
        // From the registry or from here: no copies of unknown origin.
        let from = package["source"].as_str();
        assert!(
            from.is_none_or(|from| from.starts_with("registry+")),
            "{} comes from {from:?}",
            package["name"]
        );
    }
    println!("{} packages: {seen:?}", packages.len());
    assert!(packages.len() > 100);
    assert!(refused.is_empty(), "{}", refused.join("\n"));
}

/// Every crate of Cargo.toml stands in the table of DEVELOPERS.md with its reason, and nothing stands there that is gone.
#[test]
fn every_dependency_has_its_reason() {
    let manifest: toml::Table = fs::read_to_string(root().join("Cargo.toml"))
        .unwrap()
        .parse()
        .unwrap();
    let named: BTreeSet<String> = ["dependencies", "dev-dependencies"]
        .iter()
        .flat_map(|table| manifest[*table].as_table().unwrap().keys().cloned())
        .collect();
    let text = fs::read_to_string(root().join("DEVELOPERS.md")).unwrap();
    let table = text.split("## Dependencies and why").nth(1).unwrap();
    let explained: BTreeSet<String> = table
        .lines()
        .skip_while(|line| !line.starts_with('|'))
        .take_while(|line| line.starts_with('|'))
        .filter(|line| line.starts_with("| `"))
        .flat_map(|line| {
            let cell = line.trim_start_matches('|').split('|').next().unwrap();
            assert!(
                line.split('|')
                    .nth(2)
                    .is_some_and(|why| why.trim().len() > 3),
                "{line}"
            );
            cell.split('`')
                .skip(1)
                .step_by(2)
                .map(str::to_owned)
                .collect::<Vec<_>>()
        })
        .collect();
    let missing: Vec<_> = named.difference(&explained).collect();
    let gone: Vec<_> = explained.difference(&named).collect();
    assert!(
        missing.is_empty() && gone.is_empty(),
        "no reason: {missing:?}; no longer there: {gone:?}"
    );
}

/// One exact toolchain, the same as the least that Cargo.toml states.
#[test]
fn the_toolchain_is_pinned() {
    let pinned: toml::Table = fs::read_to_string(root().join("rust-toolchain.toml"))
        .unwrap()
        .parse()
        .unwrap();
    let channel = pinned["toolchain"]["channel"].as_str().unwrap();
    let manifest: toml::Table = fs::read_to_string(root().join("Cargo.toml"))
        .unwrap()
        .parse()
        .unwrap();
    let least = manifest["package"]["rust-version"].as_str().unwrap();
    assert_eq!(
        channel.split('.').count(),
        3,
        "{channel} is no exact release"
    );
    assert!(channel.starts_with(least), "{channel} and {least}");
}
