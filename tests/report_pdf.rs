//! report.pdf of the main job through the real binary, read back by another PDF library.
#![cfg(all(test, feature = "pdf"))]

use std::fs;
use std::path::Path;
use std::sync::OnceLock;

use assert_cmd::Command;
use lopdf::{Document, Object};
use serde_json::Value;

struct Run {
    bytes: Vec<u8>,
    document: Document,
    text: String,
    result: Value,
}

/// Runs a brief (the demonstration without one) and reads what it wrote.
fn run(brief: Option<&str>) -> Run {
    let folder = tempfile::tempdir().unwrap();
    let out = folder.path().join("out");
    let mut command = Command::cargo_bin("winterledger").unwrap();
    command
        .current_dir(Path::new(env!("CARGO_MANIFEST_DIR")))
        .arg("estimate");
    if let Some(text) = brief {
        let path = folder.path().join("brief.toml");
        fs::write(&path, text).unwrap();
        command.arg(path);
    }
    let output = command.arg("--out").arg(&out).output().unwrap();
    assert!(
        output.status.success(),
        "{}",
        String::from_utf8_lossy(&output.stderr)
    );
    let bytes = fs::read(out.join("report.pdf")).unwrap();
    let document = Document::load_mem(&bytes).unwrap();
    let pages: Vec<u32> = document.get_pages().into_keys().collect();
    let text = document.extract_text(&pages).unwrap();
    Run {
        text: text.split_whitespace().collect::<Vec<_>>().join(" "),
        bytes,
        document,
        result: serde_json::from_slice(&fs::read(out.join("result.json")).unwrap()).unwrap(),
    }
}

fn demonstration() -> &'static Run {
    static RUN: OnceLock<Run> = OnceLock::new();
    RUN.get_or_init(|| run(None))
}

/// A whole number as the demonstration's place writes it.
fn written(value: f64) -> String {
    let digits = format!("{value:.0}");
    match digits.len() {
        0..=3 => digits,
        n => format!("{},{}", &digits[..n - 3], &digits[n - 3..]),
    }
}

#[test]
fn its_figures_are_those_of_the_result() {
    let run = demonstration();
    for system in run.result["systems"].as_array().unwrap() {
        for field in ["cost", "carbon_kg", "space_heat_kwh", "electricity_kwh"] {
            let figure = written(system[field].as_f64().unwrap());
            assert!(run.text.contains(&figure), "{field} {figure} is missing");
        }
        let label = system["label"].as_str().unwrap();
        assert!(run.text.contains(label), "{label}");
    }
}

/// ISO 32000-1: 14.7.1 (mark information), 14.9.2 (language), 12.3.3 (outline); ISO 14289-1, 7.1 (title shown).
#[test]
fn it_is_tagged_titled_and_has_an_outline() {
    let document = &demonstration().document;
    let catalog = document.catalog().unwrap();
    let mark = document
        .dereference(catalog.get(b"MarkInfo").unwrap())
        .unwrap()
        .1;
    assert_eq!(
        mark.as_dict().unwrap().get(b"Marked").unwrap(),
        &Object::Boolean(true)
    );
    assert_eq!(catalog.get(b"Lang").unwrap().as_str().unwrap(), b"en");
    assert!(catalog.has(b"Outlines") && catalog.has(b"StructTreeRoot"));
    let view = document
        .dereference(catalog.get(b"ViewerPreferences").unwrap())
        .unwrap()
        .1;
    assert_eq!(
        view.as_dict().unwrap().get(b"DisplayDocTitle").unwrap(),
        &Object::Boolean(true)
    );
    let kinds: Vec<String> = document
        .objects
        .values()
        .filter_map(|object| object.as_dict().ok())
        .filter(|dict| dict.get(b"P").is_ok() && dict.get(b"K").is_ok())
        .filter_map(|dict| dict.get(b"S").ok()?.as_name().ok())
        .map(|name| String::from_utf8_lossy(name).into_owned())
        .collect();
    let count = |kind: &str| kinds.iter().filter(|k| *k == kind).count();
    assert_eq!(count("H1"), 1);
    for kind in [
        "H2", "H3", "P", "L", "LI", "Table", "TH", "TD", "Link", "Figure",
    ] {
        assert!(count(kind) > 2, "{kind}: {}", count(kind));
    }
    // Every picture says in words what it shows.
    for dict in document.objects.values().filter_map(|o| o.as_dict().ok()) {
        let kind = dict.get(b"S").and_then(Object::as_name).unwrap_or_default();
        if kind == b"Figure" {
            assert!(dict.get(b"Alt").unwrap().as_str().unwrap().len() > 40);
        }
    }
}

#[test]
fn every_font_is_embedded() {
    let document = &demonstration().document;
    let descriptors: Vec<_> = document
        .objects
        .values()
        .filter_map(|object| object.as_dict().ok())
        .filter(|dict| dict.has_type(b"FontDescriptor"))
        .collect();
    assert!(!descriptors.is_empty());
    for descriptor in descriptors {
        assert!(descriptor.has(b"FontFile3"), "{descriptor:?}");
    }
}

#[test]
fn pages_are_numbered_and_of_the_size_of_the_place() {
    let run = demonstration();
    let pages = run.document.get_pages();
    assert!((10..40).contains(&pages.len()), "{} pages", pages.len());
    for number in 1..=pages.len() {
        let foot = format!("{number} / {}", pages.len());
        let text = run.document.extract_text(&[number as u32]).unwrap();
        assert!(text.contains(&foot), "page {number}");
    }
    for page in pages.into_values() {
        let page = run.document.get_dictionary(page).unwrap();
        let sides = page.get(b"MediaBox").unwrap().as_array().unwrap();
        // A4, ISO 216: 210 mm × 297 mm at 72 points to the inch of 25.4 mm.
        assert!((sides[2].as_float().unwrap() - 595.28).abs() < 0.01);
        assert!((sides[3].as_float().unwrap() - 841.89).abs() < 0.01);
    }
}

#[test]
fn the_same_input_gives_the_same_bytes() {
    assert!(run(None).bytes == demonstration().bytes);
}
