//! A room imports only rooms of a lower rank, never its own rank or a higher one.
#![cfg(test)]

use std::fs;
use std::path::{Path, PathBuf};

/// The rooms by rank, as DEVELOPERS.md draws them.
const RANKS: &[&[&str]] = &[
    &[
        "air", "bounds", "calendar", "extremes", "fault", "limits", "locale", "problem", "units",
    ],
    &["document", "refrigerant", "series", "weather"],
    &["carbon", "heater", "heatpump", "home", "source", "tariff"],
    &["year"],
    &["bill", "lifetime", "plan", "signature"],
    &["study"],
    &["answer"],
    &["chart"],
    &["brief", "report"],
    &["cli"],
];

fn rank(room: &str) -> Option<usize> {
    RANKS.iter().position(|rooms| rooms.contains(&room))
}

fn sources(folder: &Path, found: &mut Vec<PathBuf>) {
    for entry in fs::read_dir(folder).unwrap() {
        let path = entry.unwrap().path();
        if path.is_dir() {
            sources(&path, found);
        } else if path.extension().is_some_and(|extension| extension == "rs") {
            found.push(path);
        }
    }
}

/// Every `crate::room` in a text: in imports, also grouped ones, and in paths.
fn rooms_named(text: &str) -> Vec<String> {
    let mut rooms = Vec::new();
    for (at, _) in text.match_indices("crate::") {
        let rest = &text[at + "crate::".len()..];
        let group = rest
            .strip_prefix('{')
            .map(|inner| inner.split('}').next().unwrap_or(""));
        for part in
            group
                .unwrap_or(rest)
                .split(',')
                .take(if group.is_some() { usize::MAX } else { 1 })
        {
            let name: String = part
                .trim()
                .chars()
                .take_while(|c| c.is_ascii_lowercase() || *c == '_')
                .collect();
            if !name.is_empty() {
                rooms.push(name);
            }
        }
    }
    rooms
}

#[test]
fn imports_run_one_way() {
    let root = Path::new(env!("CARGO_MANIFEST_DIR")).join("src");
    let mut files = Vec::new();
    sources(&root, &mut files);
    let mut wrong = Vec::new();
    let mut seen = 0;
    for file in files {
        let inside = file.strip_prefix(&root).unwrap();
        let room = inside
            .iter()
            .next()
            .unwrap()
            .to_str()
            .unwrap()
            .trim_end_matches(".rs")
            .to_owned();
        if room == "lib" || room == "main" {
            continue;
        }
        let own = rank(&room).unwrap_or_else(|| {
            panic!("{room} has no rank: add it to tests/ranks.rs and DEVELOPERS.md")
        });
        let text = fs::read_to_string(&file).unwrap();
        // Comments may point anywhere; only code imports.
        let code: String = text
            .lines()
            .filter(|line| !line.trim_start().starts_with("//"))
            .collect::<Vec<_>>()
            .join("\n");
        for named in rooms_named(&code) {
            let Some(other) = rank(&named) else { continue };
            seen += 1;
            if named != room && other >= own {
                wrong.push(format!(
                    "{}: {room} (rank {own}) imports {named} (rank {other})",
                    inside.display()
                ));
            }
        }
    }
    assert!(
        seen > 20,
        "the scan found only {seen} imports: it no longer reads the sources"
    );
    assert!(wrong.is_empty(), "{}", wrong.join("\n"));
}

#[test]
fn the_scan_sees_grouped_and_plain_paths() {
    assert_eq!(
        rooms_named("use crate::{units::X, year};"),
        ["units", "year"]
    );
    assert_eq!(
        rooms_named("use crate::problem::{A, B};\nlet x = crate::bill::y();"),
        ["problem", "bill"]
    );
}
