//! Every picture, drawn from realistic invented data and from named hostile cases.
//!
//! Checked for each: labels stay on the canvas and touch no other label, the SVG is well-formed XML with title,
//! description and fonts, the PNG has the size promised, the alt text says something. The PNG and SVG files are left
//! in the test's folder under `target/tmp/gallery` to be looked at.

use std::path::PathBuf;
use winterledger::chart::{AnnualCost, Marks, PNG_PIXELS, Picture, SystemCost, WIDTH, annual_cost};

fn folder() -> PathBuf {
    let folder = PathBuf::from(env!("CARGO_TARGET_TMPDIR")).join("gallery");
    std::fs::create_dir_all(&folder).expect("folder for pictures");
    folder
}

/// Checks what holds for every picture; `name` is the file it is left under.
fn check(name: &str, picture: &Picture) {
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
        .filter_map(|n| n.text().map(|t| t.trim().to_string()))
        .collect();
    let labels: Vec<String> = picture.labels().iter().map(|l| l.text.clone()).collect();
    assert_eq!(texts, labels, "{name}: SVG texts are the labels");
    assert!(
        picture.alt.len() > 60 && picture.alt.ends_with('.'),
        "{name}: {}",
        picture.alt
    );

    let bytes = picture.png().expect("PNG");
    let info = png::Decoder::new(bytes.as_slice())
        .read_info()
        .expect("readable PNG")
        .info()
        .clone();
    assert_eq!(info.width, WIDTH as u32 * PNG_PIXELS, "{name}");
    assert_eq!(
        info.height,
        picture.canvas().bottom.ceil() as u32 * PNG_PIXELS,
        "{name}"
    );
    std::fs::write(folder().join(format!("{name}.png")), bytes).expect("written");
    std::fs::write(folder().join(format!("{name}.svg")), svg).expect("written");
    std::fs::write(folder().join(format!("{name}.txt")), &picture.alt).expect("written");
}

/// Names that have broken pictures before: other scripts, markup, control characters, nothing at all.
const NAMES: [&str; 8] = [
    "Gas boiler as it runs today",
    "Air source, larger radiators",
    "<script>alert(\"1\")</script> & 'quotes'",
    "بيت الشتاء مع مضخة حرارية",
    "🏠🔥 Wärme für 90 m² – Łódź",
    "line\nbreak\tand \u{202E}reversed\u{0}",
    "בית חורף 5 kW",
    "",
];

fn long_name() -> String {
    "Ground source with two bores and underfloor heating downstairs ".repeat(7)[..400].to_string()
}

fn english() -> Marks {
    Marks::default()
}

mod annual {
    use super::*;

    fn system(label: &str, today: bool, energy: f64, standing: f64, tax: f64) -> SystemCost {
        SystemCost {
            label: label.into(),
            today,
            energy,
            standing,
            tax,
        }
    }

    fn draw(name: &str, currency: &str, systems: Vec<SystemCost>) {
        let data = AnnualCost {
            currency: currency.into(),
            systems,
        };
        check(
            &format!("annual_cost_{name}"),
            &annual_cost(&data, &english()).expect("drawn"),
        );
    }

    #[test]
    fn realistic() {
        draw(
            "realistic",
            "GBP",
            vec![
                system(NAMES[0], true, 1013.0, 311.0, 66.2),
                system("New boiler, turned down", false, 938.0, 311.0, 62.5),
                system(NAMES[1], false, 1024.0, 197.0, 61.1),
                system("Ground source, larger radiators", false, 849.0, 197.0, 52.3),
            ],
        );
    }

    #[test]
    fn one_system() {
        draw(
            "one",
            "EUR",
            vec![system("Boiler", true, 900.0, 120.0, 190.0)],
        );
    }

    #[test]
    fn eight_systems_with_hostile_names() {
        let systems = NAMES
            .iter()
            .enumerate()
            .map(|(i, n)| system(n, i == 0, 1000.0 - 90.0 * i as f64, 200.0, 60.0))
            .collect();
        draw("eight", "CHF", systems);
    }

    #[test]
    fn name_of_400_characters() {
        draw(
            "long",
            "GBP",
            vec![
                system(&long_name(), true, 1000.0, 300.0, 60.0),
                system(&long_name(), false, 900.0, 200.0, 50.0),
            ],
        );
    }

    #[test]
    fn credits_dearer_choices_and_the_same() {
        draw(
            "credits",
            "GBP",
            vec![
                system("Boiler", true, 700.0, 300.0, 50.0),
                system("Exports more than it buys", false, -640.0, 200.0, -22.0),
                system("Dearer", false, 1500.0, 200.0, 85.0),
                system("The same", false, 700.2, 300.0, 50.0),
            ],
        );
    }

    #[test]
    fn all_nothing() {
        draw(
            "nothing",
            "GBP",
            vec![
                system("Boiler", true, 0.0, 0.0, 0.0),
                system("None", false, 0.0, 0.0, 0.0),
            ],
        );
    }

    #[test]
    fn huge_and_tiny() {
        draw(
            "huge",
            "ISK",
            vec![
                system("Boiler", true, 123_456_789.0, 300.0, 50.0),
                system("Tiny", false, 0.02, 0.001, 0.0),
            ],
        );
    }
}

mod cycle {
    use super::*;
    use winterledger::chart::{PressureEnthalpy, StatePoint, pressure_enthalpy};

    /// Saturation line and cycle of R290 (kJ/kg, kPa): PyPI CoolProp 8.0.0, default reference state, −5/45 °C, 5 K
    /// superheat, 3 K subcooling, isentropic efficiency 0.7. Only their shape matters here.
    const DOME: [(f64, f64); 33] = [
        (105.1, 111.1),
        (125.8, 161.8),
        (147.0, 228.7),
        (168.6, 314.7),
        (190.8, 423.1),
        (213.6, 557.3),
        (237.0, 720.7),
        (261.1, 917.0),
        (286.1, 1149.9),
        (312.0, 1423.4),
        (339.1, 1741.8),
        (367.6, 2109.6),
        (398.0, 2532.2),
        (431.0, 3015.7),
        (469.2, 3568.5),
        (529.6, 4205.1),
        (555.2, 4251.2),
        (583.2, 4205.1),
        (622.0, 3568.5),
        (629.6, 3015.7),
        (630.2, 2532.2),
        (627.3, 2109.6),
        (622.2, 1741.8),
        (615.6, 1423.4),
        (607.9, 1149.9),
        (599.4, 917.0),
        (590.3, 720.7),
        (580.7, 557.3),
        (570.8, 423.1),
        (560.5, 314.7),
        (550.0, 228.7),
        (539.3, 161.8),
        (528.5, 111.1),
    ];

    fn state(point: &str, name: &str, t: f64, p: f64, h: f64) -> StatePoint {
        StatePoint {
            point: point.into(),
            name: name.into(),
            temperature_c: t,
            pressure_kpa: p,
            enthalpy_kj_per_kg: h,
        }
    }

    fn r290() -> PressureEnthalpy {
        PressureEnthalpy {
            fluid: "R290".into(),
            dome: DOME.to_vec(),
            cycle: vec![
                (577.8, 406.0),
                (669.3, 1534.3),
                (618.1, 1534.3),
                (321.8, 1534.3),
                (312.9, 1534.3),
                (312.9, 406.0),
            ],
            states: vec![
                state("1", "compressor inlet", 0.0, 406.0, 577.8),
                state("2", "compressor outlet", 67.6, 1534.3, 669.3),
                state("3", "condenser outlet", 42.0, 1534.3, 312.9),
                state("4", "evaporator inlet", -5.0, 406.0, 312.9),
            ],
            evaporating_c: -5.0,
            condensing_c: 45.0,
            cop_heating: Some(3.894),
        }
    }

    #[test]
    fn realistic() {
        check(
            "pressure_enthalpy_realistic",
            &pressure_enthalpy(&r290(), &english()).expect("drawn"),
        );
    }

    #[test]
    fn tiny_lift_and_hostile_names() {
        let mut data = r290();
        data.fluid = long_name();
        for (p, name) in data.states.iter_mut().zip(NAMES) {
            p.name = name.into();
            p.point = name.into();
            p.pressure_kpa = if p.pressure_kpa > 500.0 { 430.0 } else { 406.0 };
        }
        data.cycle = data
            .states
            .iter()
            .map(|s| (s.enthalpy_kj_per_kg, s.pressure_kpa))
            .collect();
        check(
            "pressure_enthalpy_hostile",
            &pressure_enthalpy(&data, &english()).expect("drawn"),
        );
    }

    #[test]
    fn eight_states_without_a_dome() {
        let mut data = r290();
        data.dome.clear();
        for i in 0..4 {
            let at = data.states[i].enthalpy_kj_per_kg + 6.0;
            data.states.push(state(
                &format!("{}′", i + 1),
                "near by",
                1.0,
                data.states[i].pressure_kpa * 1.02,
                at,
            ));
        }
        check(
            "pressure_enthalpy_eight",
            &pressure_enthalpy(&data, &english()).expect("drawn"),
        );
    }
}
