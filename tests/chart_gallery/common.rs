//! What every picture is checked for, and invented data to draw.

use std::path::PathBuf;
use winterledger::chart::{Marks, PNG_PIXELS, Picture};

fn folder() -> PathBuf {
    let folder = PathBuf::from(env!("CARGO_TARGET_TMPDIR")).join("gallery");
    std::fs::create_dir_all(&folder).expect("folder for pictures");
    folder
}

/// Checks labels, SVG and alt text; gives back the SVG.
pub fn check_svg(name: &str, picture: &Picture) -> String {
    for (i, a) in picture.labels().iter().enumerate() {
        assert!(
            picture.canvas().contains(&a.area),
            "{name}: “{}” leaves the canvas: {:?} of {:?}",
            a.text,
            a.area,
            picture.canvas()
        );
        for b in &picture.labels()[..i] {
            assert!(
                !a.area.overlaps(&b.area),
                "{name}: “{}” {:?} lies on “{}” {:?}",
                a.text,
                a.area,
                b.text,
                b.area
            );
        }
    }
    let svg = picture.svg().expect("SVG");
    let tree = roxmltree::Document::parse(&svg).unwrap_or_else(|e| panic!("{name}: {e}"));
    let root = tree.root_element();
    let child = |tag: &str| {
        root.children()
            .find(|n| n.has_tag_name(tag))
            .and_then(|n| n.text())
    };
    assert_eq!(child("title"), Some(picture.title.as_str()), "{name}");
    assert_eq!(child("desc"), Some(picture.alt.as_str()), "{name}");
    assert!(
        child("style").is_some_and(|s| s.contains("@font-face")),
        "{name}"
    );
    let texts: Vec<String> = root
        .descendants()
        .filter(|n| n.has_tag_name("text"))
        .filter_map(|n| n.text().map(|t| t.trim_matches('\n').to_string()))
        .collect();
    let labels: Vec<String> = picture.labels().iter().map(|l| l.text.clone()).collect();
    assert_eq!(texts, labels, "{name}: SVG texts are the labels");
    assert!(
        picture.alt.len() > 60 && picture.alt.ends_with('.'),
        "{name}: {}",
        picture.alt
    );
    svg
}

/// Checks what holds for every picture, and leaves it under `name` to be looked at.
pub fn check(name: &str, picture: &Picture) {
    let svg = check_svg(name, picture);
    let bytes = picture.png().expect("PNG");
    let info = png::Decoder::new(bytes.as_slice())
        .read_info()
        .expect("readable PNG")
        .info()
        .clone();
    let width = picture.canvas().right as u32;
    assert_eq!(info.width, width * PNG_PIXELS, "{name}");
    assert_eq!(
        info.height,
        picture.canvas().bottom.ceil() as u32 * PNG_PIXELS,
        "{name}"
    );
    if name.ends_with("_realistic") {
        crate::stored::compare(name, &bytes);
    }
    std::fs::write(folder().join(format!("{name}.png")), bytes).expect("written");
    std::fs::write(folder().join(format!("{name}.svg")), svg).expect("written");
    std::fs::write(folder().join(format!("{name}.txt")), &picture.alt).expect("written");
}

/// Names that have broken pictures before: other scripts, markup, control characters, nothing at all.
pub const NAMES: [&str; 8] = [
    "Gas boiler as it runs today",
    "Air source, larger radiators",
    "<script>alert(\"1\")</script> & 'quotes'",
    "بيت الشتاء مع مضخة حرارية",
    "🏠🔥 Wärme für 90 m² – Łódź",
    "line\nbreak\tand \u{202E}reversed\u{0}",
    "בית חורף 5 kW",
    "",
];

pub fn long_name() -> String {
    "Ground source with two bores and underfloor heating downstairs ".repeat(7)[..400].to_string()
}

pub fn english() -> Marks {
    Marks::default()
}

/// One invented hour of a home with an air source machine.
#[derive(Clone, Copy)]
pub struct Hour {
    pub outdoor_c: f64,
    pub demand_kw: f64,
    pub machine_kw: f64,
    pub backup_kw: f64,
    pub electricity_kw: f64,
    pub cop: f64,
}

/// Greatest output of the invented machine, kW at an outdoor temperature in °C.
pub fn output_kw(outdoor_c: f64) -> f64 {
    5.0 + 0.11 * outdoor_c
}

/// An invented year: season, day, weather of several days and a hard spell in January. Only shapes matter: nothing
/// that is tested about the tool's numbers rests on it.
pub fn year() -> Vec<Hour> {
    (0..8760)
        .map(|i| {
            let h = f64::from(i);
            let season = -7.2 * ((h / 8760.0 - 0.055) * std::f64::consts::TAU).cos();
            let day = -2.6 * ((h % 24.0 - 3.0) / 24.0 * std::f64::consts::TAU).cos();
            let weather =
                2.2 * (h / 61.0).sin() + 1.6 * (h / 37.0 + 1.0).sin() + 1.1 * (h / 13.7).sin();
            let spell = -9.0 * (-((h - 430.0) / 60.0).powi(2)).exp();
            let outdoor_c = 9.8 + season + day + weather + spell;
            let hot_water: f64 = if [6, 7, 18].contains(&(i % 24)) {
                1.1
            } else {
                0.0
            };
            let wobble = 0.25 * (h / 5.3).sin();
            let demand_kw = (0.212 * (15.5 - outdoor_c) + wobble).max(0.0) + hot_water;
            let machine_kw = demand_kw.min(output_kw(outdoor_c));
            let flow_c =
                30.0 + 0.9 * (15.5 - outdoor_c).max(0.0) + if hot_water > 0.0 { 12.0 } else { 0.0 };
            let cop = 0.45 * (flow_c + 273.15) / (flow_c - outdoor_c + 6.0).max(12.0)
                + 0.1 * (h / 3.1).sin();
            let backup_kw = demand_kw - machine_kw;
            Hour {
                outdoor_c,
                demand_kw,
                machine_kw,
                backup_kw,
                electricity_kw: machine_kw / cop + backup_kw,
                cop,
            }
        })
        .collect()
}
