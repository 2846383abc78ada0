//! The report of the main job through the real binary: well-formed, self-contained, equal to result.json, safe with any label.
#![cfg(test)]

use std::collections::{HashMap, HashSet};
use std::fs;
use std::path::Path;

use assert_cmd::Command;
use roxmltree::{Document, Node};
use serde_json::Value;
use sha2::{Digest as _, Sha256};

fn root() -> &'static Path {
    Path::new(env!("CARGO_MANIFEST_DIR"))
}

fn estimate(arguments: &[&str]) -> std::process::Output {
    Command::cargo_bin("winterledger")
        .unwrap()
        .current_dir(root())
        .arg("estimate")
        .args(arguments)
        .output()
        .unwrap()
}

/// Runs a brief (the demonstration without one) into a folder; the report's page and result.json.
fn run(brief: Option<&str>) -> (tempfile::TempDir, String, Value) {
    let folder = tempfile::tempdir().unwrap();
    let out = folder.path().join("out");
    let mut arguments = vec!["--out", out.to_str().unwrap()];
    let path = folder.path().join("brief.toml");
    if let Some(text) = brief {
        fs::write(&path, text).unwrap();
        arguments.insert(0, path.to_str().unwrap());
    }
    let output = estimate(&arguments);
    assert!(
        output.status.success(),
        "{}",
        String::from_utf8_lossy(&output.stderr)
    );
    let page = fs::read_to_string(out.join("report.html")).unwrap();
    let result = serde_json::from_slice(&fs::read(out.join("result.json")).unwrap()).unwrap();
    (folder, page, result)
}

/// The demonstration, run once for all that look at it.
fn demonstration() -> &'static (tempfile::TempDir, String, Value) {
    static RUN: std::sync::OnceLock<(tempfile::TempDir, String, Value)> =
        std::sync::OnceLock::new();
    RUN.get_or_init(|| run(None))
}

/// The body as XML: it holds no element that HTML leaves open but the one taken out here.
fn body(page: &str) -> String {
    let from = page.find("<body>").unwrap();
    let to = page.rfind("</body>").unwrap() + "</body>".len();
    page[from..to].replace("<wbr>", "")
}

fn text(node: Node<'_, '_>) -> String {
    let parts = node
        .descendants()
        .filter(Node::is_text)
        .filter_map(|n| n.text());
    parts.collect::<String>().trim().to_owned()
}

fn named<'a>(node: Node<'a, 'a>, tag: &'a str) -> impl Iterator<Item = Node<'a, 'a>> {
    node.descendants()
        .filter(move |n| n.is_element() && n.tag_name().name() == tag)
}

fn section<'a>(document: &'a Document<'a>, id: &str) -> Node<'a, 'a> {
    let mut all = document.descendants();
    all.find(|n| n.attribute("id") == Some(id))
        .unwrap_or_else(|| panic!("no section {id}"))
}

/// A table as rows of texts, its head first.
fn rows(table: Node<'_, '_>) -> Vec<Vec<String>> {
    let rows = table.descendants().filter(|n| n.has_tag_name("tr"));
    rows.map(|row| row.children().filter(Node::is_element).map(text).collect())
        .collect()
}

/// A figure as it is printed with English marks; nothing for a dash.
fn figure(cell: &str) -> Option<f64> {
    let plain: String = cell
        .replace('−', "-")
        .chars()
        .filter(|c| c.is_ascii_digit() || "-.".contains(*c))
        .collect();
    plain.parse().ok()
}

/// Structure that a screen reader and a printer need, and nothing that leaves the page.
fn check_page(page: &str) {
    let body = body(page);
    let document = Document::parse(&body).unwrap_or_else(|e| panic!("{e}"));
    let everything = || document.descendants().filter(Node::is_element);
    let mut ids = HashSet::new();
    for id in everything().filter_map(|n| n.attribute("id")) {
        assert!(ids.insert(id.to_owned()), "{id} twice");
    }
    for node in everything() {
        let name = node.tag_name().name();
        assert!(
            !["script", "iframe", "img", "link", "object", "embed"].contains(&name),
            "{name}"
        );
        for attribute in node.attributes() {
            assert!(
                !attribute.name().starts_with("on"),
                "{name} {}",
                attribute.name()
            );
            if ["href", "src"].contains(&attribute.name()) {
                let target = attribute
                    .value()
                    .strip_prefix('#')
                    .expect("a link inside the page");
                assert!(ids.contains(target), "no #{target}");
            }
        }
        match name {
            // The bars of a narrow form stand beside their figures in words.
            "svg" if node.attribute("aria-hidden") == Some("true") => {}
            "svg" => {
                assert_eq!(node.attribute("role"), Some("img"));
                for tag in ["title", "desc"] {
                    let words = named(node, tag).next().map(text).unwrap_or_default();
                    assert!(words.len() > 8, "a picture without {tag}");
                }
            }
            "table" => {
                assert!(named(node, "th").any(|th| th.attribute("scope") == Some("col")));
                for row in named(node, "tbody").flat_map(|b| named(b, "tr").collect::<Vec<_>>()) {
                    let first = row.children().find(Node::is_element).unwrap();
                    assert_eq!(first.attribute("scope"), Some("row"));
                }
                let widths: HashSet<_> = rows(node).iter().map(Vec::len).collect();
                assert_eq!(
                    widths.len(),
                    1,
                    "rows of different length in {:?}",
                    rows(node)[0]
                );
            }
            _ => {}
        }
    }
    let levels: Vec<u32> = everything()
        .filter_map(|n| n.tag_name().name().strip_prefix('h')?.parse().ok())
        .collect();
    assert_eq!(levels.iter().filter(|level| **level == 1).count(), 1);
    assert!(
        levels.windows(2).all(|pair| pair[1] <= pair[0] + 1),
        "a heading level is jumped over"
    );
    assert_eq!(
        page.matches("@font-face").count(),
        2,
        "fonts are embedded once, in two weights"
    );
    for outside in ["http:", "https:", "//"] {
        let kept = page.replace("http://www.w3.org/2000/svg", "");
        assert!(
            !kept.contains(&format!("url({outside}")) && !kept.contains(&format!("\"{outside}"))
        );
    }
}

/// Every figure of the tables of systems and money is that of result.json, rounded.
#[test]
fn figures_equal_the_result() {
    let (_folder, page, result) = demonstration();
    check_page(page);
    let body = body(page);
    let document = Document::parse(&body).unwrap();
    let systems = result["systems"].as_array().unwrap();
    let label = |cell: &str| cell.replace(" (today)", "");
    let names: HashMap<&str, (&str, f64)> = HashMap::from([
        ("Cost of the year", ("cost", 0.5)),
        ("Less than today", ("saving", 0.5)),
        ("Energy", ("cost_energy", 0.5)),
        ("Standing charges", ("cost_standing", 0.5)),
        ("What it costs to put in", ("capital", 0.5)),
        ("Greenhouse gas, kg CO₂e", ("carbon_kg", 0.5)),
        ("kg CO₂e", ("carbon_kg", 0.5)),
        ("kg CO₂e less than today", ("carbon_saving_kg", 0.5)),
        ("Heat to the rooms, kWh", ("space_heat_kwh", 0.5)),
        ("Heat to hot water, kWh", ("hot_water_kwh", 0.5)),
        ("Heat at rooms and taps, kWh", ("delivered_kwh", 0.5)),
        ("Electricity, kWh", ("electricity_kwh", 0.5)),
        (
            "of it backup and immersion heater, kWh",
            ("backup_kwh", 0.5),
        ),
        ("Fuel, gross kWh", ("fuel_kwh", 0.5)),
        ("SPF H1, machine alone", ("spf_h1", 0.005)),
        ("SPF H2, with fan or brine pump", ("spf_h2", 0.005)),
        ("SPF H3, with backup", ("spf_h3", 0.005)),
        ("SPF H4, with all auxiliaries", ("spf_h4", 0.005)),
        ("SPF H4", ("spf_h4", 0.005)),
        (
            "Highest hour of electricity, kW",
            ("peak_electric_kw", 0.05),
        ),
        ("Coldest the rooms get, °C", ("min_indoor_c", 0.05)),
        (
            "Hours a year more than 1 K below the set point",
            ("hours_short", 0.5),
        ),
    ]);
    let mut compared = 0;
    for id in ["systems", "air-ground", "money", "carbon", "cold"] {
        for table in named(section(&document, id), "table") {
            let rows = rows(table);
            for row in &rows[1..] {
                let Some((field, half)) = names.get(row[0].as_str()) else {
                    continue;
                };
                for (cell, head) in row[1..].iter().zip(&rows[0][1..]) {
                    let system = systems.iter().find(|s| s["label"] == label(head)).unwrap();
                    match (figure(cell), system[field].as_f64()) {
                        (Some(shown), Some(exact)) => {
                            assert!(
                                (shown - exact).abs() <= half + 1e-9,
                                "{field} of {head}: {cell}, {exact}"
                            );
                            compared += 1;
                        }
                        (None, None) => {}
                        (shown, exact) => panic!("{field} of {head}: {shown:?}, {exact:?}"),
                    }
                }
            }
        }
    }
    assert!(compared > 80, "only {compared} figures were found");
}

/// What a meter may read in each month is that of result.json, rounded.
fn check_band(rows: &[Vec<String>], column: usize, system: &Value) {
    let head = &rows[0][column];
    let meters = system["meters"].as_array().unwrap();
    let meter = meters
        .iter()
        .find(|meter| head.contains(meter["fuel"].as_str().unwrap()))
        .unwrap();
    for (row, month) in rows[1..].iter().zip(meter["months"].as_array().unwrap()) {
        let (low, high) = row[column].split_once(" to ").unwrap();
        for (shown, field) in [(low, "low_kwh"), (high, "high_kwh")] {
            let exact = month[field].as_f64().unwrap();
            assert!((figure(shown).unwrap() - exact).abs() <= 0.5 + 1e-9);
        }
    }
}

/// The months as printed add up to the year as printed, and each is that of result.json but for its rounding.
#[test]
fn months_add_up() {
    let (_folder, page, result) = demonstration();
    let body = body(page);
    let document = Document::parse(&body).unwrap();
    let tables: Vec<_> = named(section(&document, "meter"), "table").collect();
    let systems = result["systems"].as_array().unwrap();
    assert_eq!(tables.len(), systems.len());
    for (table, system) in tables.into_iter().zip(systems) {
        let rows = rows(table);
        assert_eq!(rows.len(), 14);
        for column in 1..rows[0].len() {
            if rows[0][column].starts_with("No surprise") {
                check_band(&rows, column, system);
                continue;
            }
            let shown: Vec<f64> = rows[1..]
                .iter()
                .map(|row| figure(&row[column]).unwrap())
                .collect();
            let sum: f64 = shown[..12].iter().sum();
            assert_eq!(sum, shown[12], "{} of {}", rows[0][column], system["label"]);
            let field = match rows[0][column].split(',').next().unwrap() {
                "Heat" => "heat_kwh",
                "Electricity" => "electricity_kwh",
                "Fuel" => "fuel_kwh",
                _ => "cost",
            };
            for (month, shown) in shown[..12].iter().enumerate() {
                let exact = system["monthly"][month][field].as_f64().unwrap();
                assert!(
                    (shown - exact).abs() < 1.0,
                    "{field} of month {month}: {shown}, {exact}"
                );
            }
        }
    }
}

fn brief(label: &str, other: &str, more: &str) -> String {
    let at = |path: &str| format!("'{}'", root().join(path).display());
    let text = |words: &str| serde_json::to_string(words).unwrap();
    format!(
        "{more}
[home]
label = {label}
heat_loss = \"212 W/K\"
floor_area = \"96 m²\"
[home.emitters]
flow = \"50 °C\"
[weather]
file = {weather}
[energy]
electricity = {electricity}
gas = {gas}
[today]
label = {label}
kind = \"gas-boiler\"
[[choice]]
label = {other}
kind = \"air-source\"
machine = {machine}
",
        label = text(label),
        other = text(other),
        weather = at("weather_samples/morvane_sound.csv"),
        electricity = at("tariffs/flat_electricity.toml"),
        gas = at("tariffs/flat_gas.toml"),
        machine = at("briefs/machines/air-r290-small.toml"),
    )
}

/// Labels that would break a page, a table, a picture, a file name or a spreadsheet, were they not taken for what they are.
#[test]
fn any_label_is_only_text() {
    let hostile = [
        (
            "<script>alert(1)</script> & \"two\" 'one'",
            "=HYPERLINK(\"x\")|a|b|",
        ),
        (
            "![a](b) [c](javascript:d) **e** `f` {{ g }} {% h %}",
            "# heading\n- item\n| - | - |",
        ),
        (
            "../../etc/שלום عليكم \u{202e}turned",
            "😀 ﷽ ½ ₂ \u{0}\u{7} end",
        ),
    ];
    for (label, other) in hostile {
        let (folder, page, result) = run(Some(&brief(label, other, "")));
        check_page(&page);
        assert_eq!(result["systems"][0]["label"], label);
        let body = body(&page);
        let document = Document::parse(&body).unwrap();
        let shown: String = text(section(&document, "meter"))
            .split_whitespace()
            .collect();
        for label in [label, other] {
            let wanted: String = label
                .split_whitespace()
                .collect::<String>()
                .chars()
                .filter(|c| !c.is_control() && *c != '\u{202e}')
                .collect();
            assert!(shown.contains(&wanted), "{wanted} is not in {shown}");
        }
        for file in fs::read_dir(folder.path().join("out")).unwrap() {
            let name = file.unwrap().file_name().into_string().unwrap();
            if name.ends_with(".csv") {
                let csv = fs::read_to_string(folder.path().join("out").join(&name)).unwrap();
                let mut reader = csv::Reader::from_reader(csv.as_bytes());
                for field in reader
                    .records()
                    .take(200)
                    .flat_map(|r| r.unwrap().iter().map(str::to_owned).collect::<Vec<_>>())
                {
                    let number = field.parse::<f64>().is_ok();
                    assert!(
                        number || !field.starts_with(['=', '+', '-', '@']),
                        "{name}: {field}"
                    );
                }
            }
        }
    }
}

#[test]
fn a_name_of_400_characters_is_cut_where_many_stand_together() {
    let long = "Lang".repeat(100);
    let (_folder, page, _) = run(Some(&brief("Home", &long, "")));
    check_page(&page);
    let body = body(&page);
    let document = Document::parse(&body).unwrap();
    for table in named(section(&document, "systems"), "table") {
        assert!(rows(table)[0].iter().all(|cell| cell.chars().count() < 90));
    }
    assert!(
        text(section(&document, "systems")).contains(&long),
        "once it stands in full"
    );
}

/// Marks, dates and paper follow the brief; the figures stay what they are.
#[test]
fn a_place_writes_in_its_own_way() {
    let table =
        "[report]\ndecimal = ','\nthousands = '.'\ndates = 'year-first'\npaper = 'letter'\n";
    let (_folder, page, result) = run(Some(&brief("Haus", "Luft", table)));
    check_page(&page);
    assert!(page.contains("@page { size: letter; }"));
    let body = body(&page);
    let document = Document::parse(&body).unwrap();
    let systems = rows(
        named(section(&document, "systems"), "table")
            .next()
            .unwrap(),
    );
    let fuel = systems
        .iter()
        .find(|row| row[0] == "Fuel, gross kWh")
        .unwrap();
    let exact = result["systems"][0]["fuel_kwh"].as_f64().unwrap().round();
    assert_eq!(
        fuel[1],
        format!("{}.{:03}", (exact / 1000.0).floor(), exact % 1000.0)
    );
    let spf = systems
        .iter()
        .find(|row| row[0].starts_with("SPF H4"))
        .unwrap();
    assert!(spf[2].contains(',') && !spf[2].contains('.'));
    assert!(text(section(&document, "hour")).contains("2023-12-12"));
}

#[test]
fn marks_that_cannot_be_told_apart_are_refused() {
    let folder = tempfile::tempdir().unwrap();
    let path = folder.path().join("brief.toml");
    for (table, word) in [
        (
            "[report]\ndecimal = '.'\nthousands = '.'\n",
            "two different marks",
        ),
        ("[report]\npaper = 'B5'\n", "letter"),
        ("[report]\ndecimal = ';'\n", "\";\""),
    ] {
        fs::write(&path, brief("a", "b", table)).unwrap();
        let output = estimate(&[path.to_str().unwrap()]);
        let told = String::from_utf8(output.stderr).unwrap();
        assert_eq!(output.status.code(), Some(1), "{told}");
        assert!(
            told.contains(word) && told.contains("brief.toml line"),
            "{told}"
        );
    }
}

/// A folder that cannot be made is told without the work being done; one with an earlier report is left alone.
#[test]
fn the_folder_is_looked_at_first() {
    let folder = tempfile::tempdir().unwrap();
    let file = folder.path().join("file");
    fs::write(&file, "kept").unwrap();
    let below = file.join("out");
    let output = estimate(&["--out", below.to_str().unwrap()]);
    assert_eq!(output.status.code(), Some(3));
    assert!(output.stdout.is_empty());
    let earlier = folder.path().join("report.html");
    fs::write(&earlier, "kept").unwrap();
    let output = estimate(&["--out", folder.path().to_str().unwrap()]);
    assert_eq!(output.status.code(), Some(3));
    assert_eq!(fs::read_to_string(&earlier).unwrap(), "kept");
    assert_eq!(
        fs::read_dir(folder.path()).unwrap().count(),
        2,
        "nothing was written"
    );
}

/// The checksums are those of the files, and every file of the brief is there.
#[test]
fn inputs_are_told_with_their_checksums() {
    let (_folder, page, result) = demonstration();
    let inputs = result["inputs"].as_array().unwrap();
    let files: Vec<_> = inputs.iter().map(|i| i["file"].as_str().unwrap()).collect();
    for file in [
        "briefs/terrace.toml",
        "briefs/machines/air-r290-small.toml",
        "tariffs/flat_electricity.toml",
        "tariffs/flat_gas.toml",
        "weather_samples/morvane_sound.csv",
    ] {
        assert!(files.contains(&file), "{file} is not in {files:?}");
        let bytes = fs::read(root().join(file)).unwrap().len();
        let told = inputs.iter().find(|i| i["file"] == file).unwrap();
        assert_eq!(told["bytes"].as_u64(), Some(bytes as u64));
        let sum = told["sha256"].as_str().unwrap();
        assert!(body(page).contains(sum));
    }
}

/// Every file that was read stands with its checksum, the hourly prices among them: a changed price is another answer.
#[test]
fn the_checksums_cover_the_hourly_prices() {
    let folder = tempfile::tempdir().unwrap();
    let out = folder.path().join("out");
    let output = estimate(&[
        "tests/briefs/other_fuels.toml",
        "--samples",
        "0",
        "--out",
        out.to_str().unwrap(),
    ]);
    assert!(output.status.success());
    let result: Value =
        serde_json::from_slice(&fs::read(out.join("result.json")).unwrap()).unwrap();
    let inputs = result["inputs"].as_array().unwrap();
    let read = |ending: &str| {
        let mut all = inputs.iter();
        all.find(|input| input["file"].as_str().unwrap().ends_with(ending))
            .unwrap_or_else(|| panic!("{ending} is not among {inputs:?}"))
    };
    for (ending, path) in [
        ("other_fuels.toml", "tests/briefs/other_fuels.toml"),
        ("ostrel_plain.csv", "weather_samples/ostrel_plain.csv"),
        ("hourly_electricity.toml", "tariffs/hourly_electricity.toml"),
        ("hourly_prices.csv", "tariffs/hourly_prices.csv"),
        ("pellets.toml", "tariffs/pellets.toml"),
    ] {
        let content = fs::read(root().join(path)).unwrap();
        let sha256: String = Sha256::digest(&content)
            .iter()
            .map(|byte| format!("{byte:02x}"))
            .collect();
        assert_eq!(read(ending)["sha256"], sha256, "{path}");
        assert_eq!(read(ending)["bytes"], content.len(), "{path}");
    }
}

/// On a phone no picture scrolls: each has a form of its own whose smallest letters are at least 10 px in 360 px of page.
#[test]
fn every_picture_of_the_demonstration_has_a_form_for_a_phone() {
    let (_, page, _) = demonstration();
    let body = body(page);
    let document = Document::parse(&body).unwrap();
    // The small pictures of the first page are the same everywhere, one below the other on a phone.
    let small = |n: &Node<'_, '_>| {
        n.attribute("id")
            .is_some_and(|id| id.starts_with("picture-glance"))
    };
    let figures: Vec<_> = named(document.root(), "figure").collect();
    assert_eq!(figures.iter().filter(|n| small(n)).count(), 3);
    let figures: Vec<_> = figures.into_iter().filter(|n| !small(n)).collect();
    assert!(figures.len() > 15);
    for figure in figures {
        assert_eq!(
            figure.attribute("class"),
            Some("has-narrow"),
            "{:?}",
            figure.attribute("id")
        );
        let narrow = figure
            .children()
            .find(|n| n.attribute("class") == Some("narrow"))
            .unwrap();
        if narrow.tag_name().name() == "ul" {
            continue;
        }
        let svg = named(narrow, "svg").next().unwrap();
        let wide: f64 = svg
            .attribute("viewBox")
            .unwrap()
            .split(' ')
            .nth(2)
            .unwrap()
            .parse()
            .unwrap();
        for text in named(svg, "text") {
            let size = text
                .attribute("font-size")
                .unwrap_or_else(|| panic!("a text without size: {text:?}"));
            let size: f64 = size.trim_end_matches("px").parse().unwrap();
            assert!(size * 360.0 / wide >= 10.0, "{size} of {wide}");
        }
    }
}
