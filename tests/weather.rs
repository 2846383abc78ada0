//! Weather read from the samples and from open files.

use std::path::Path;

use winterledger::weather::{Kind, ReadOptions, Weather, read};

fn load(path: &str, zone: Option<&str>) -> Weather {
    let options = ReadOptions {
        zone: zone.map(|zone| zone.parse().unwrap()),
        ..Default::default()
    };
    let path = Path::new(env!("CARGO_MANIFEST_DIR")).join(path);
    read(&path, &options).unwrap_or_else(|problems| panic!("{problems}"))
}

#[test]
fn the_samples_are_whole_and_clean() {
    for sample in ["morvane_sound", "ostrel_plain"] {
        let weather = load(&format!("weather_samples/{sample}.csv"), None);
        assert_eq!(weather.axis.hours, 8760, "{sample}");
        assert_eq!(weather.missing_hours, 0);
        assert!(weather.relative_humidity.is_some() && weather.global_w_per_m2.is_some());
        assert!(weather.wind_m_per_s.is_some());
        assert!(weather.findings.is_empty(), "{:?}", weather.findings);
        assert_eq!(weather.years(), [(2023, 0..8760)]);
    }
}

#[test]
fn greensboro_is_a_typical_year() {
    let weather = load("tests/data/723170TYA.CSV", Some("-05:00"));
    println!("{:#?}", weather.findings);
    assert_eq!(weather.axis.hours, 8760);
    assert!(matches!(
        weather.kind,
        Kind::Typical {
            source_years: Some(_)
        }
    ));
    let mean = weather.outdoor_c.iter().sum::<f64>() / 8760.0;
    assert!((mean - 14.42).abs() < 0.005, "{mean}");
}
