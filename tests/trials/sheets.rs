//! Whether the typical sheets of the trials' homes are even-handed: their COP beside public certificates.

use std::path::Path;

use winterledger::heatpump::rating::{Application, Climate, rate_machine};
use winterledger::heatpump::{Sheet, fit};

/// Mean ratio of a sheet's COP to the middle certificate of its kind at the four part-load points (`tests/reference/certificates.py`).
fn against_certificates(name: &str, source: &str) -> f64 {
    let machine = fit(&Sheet::typical(name).unwrap()).unwrap().heat_pump;
    let path = Path::new(env!("CARGO_MANIFEST_DIR")).join("tests/reference/certificates.csv");
    let mut ratios = Vec::new();
    for row in csv::Reader::from_path(path).unwrap().records() {
        let row = row.unwrap();
        let number = |column: usize| row[column].parse::<f64>().unwrap();
        if &row[0] != source {
            continue;
        }
        let application = match &row[1] {
            "low" => Application::Low,
            _ => Application::Medium,
        };
        let rated = rate_machine(&machine, Climate::Average, application, None).unwrap();
        let point = rated
            .rating
            .points
            .iter()
            .find(|point| point.declared.outdoor_c == number(2))
            .unwrap();
        ratios.push(point.cop / number(6));
    }
    assert_eq!(ratios.len(), 4);
    ratios.iter().sum::<f64>() / 4.0
}

/// A ground-source sheet that were poor for its kind would explain a ground source that misses its trial. It is not: the ground's is 3 %
/// above the middle certificate. Of the air sheets R290's is 1 % above and R32's 5 % below, so that a comparison with the R32 sheet
/// favours the ground by 8 % and one with the R290 sheet by 2 %. Quartiles lie 3 to 6 % from the middle; held is 5 %.
#[test]
fn the_sheets_are_neither_poor_nor_good_for_their_kind() {
    for (name, source) in [
        ("ground, R410A, variable speed", "brine"),
        ("air, R290, variable speed", "air"),
        ("air, R32, variable speed", "air"),
    ] {
        let ratio = against_certificates(name, source);
        assert!((ratio - 1.0).abs() < 0.05, "{name}: {ratio}");
    }
}
