//! Frost on an outdoor coil.

use winterledger::heatpump::{ColdSide, Frost, humidity_ratio, standard_humidity_ratio};

use crate::machine::{source, steady, typical};
use crate::table::{Row, Worst};

pub fn rows() -> Vec<Row> {
    let mut moisture = Worst::relative(1e-4);
    for (outdoor_c, expected) in [
        (12.0, 0.007_751_3),
        (7.0, 0.005_385_6),
        (2.0, 0.003_654_2),
        (-7.0, 0.001_552_3),
        (-15.0, 0.000_570_9),
    ] {
        moisture.see(expected, standard_humidity_ratio(outdoor_c));
    }
    // The US procedure's point: 35 °F dry, 33 °F wet bulb is near 82 % of saturation.
    let bench = typical("air, R410A, fixed speed").at_bench();
    let cop = |humidity: f64, outdoor_c: f64| {
        let cold = ColdSide {
            relative_humidity: Some(humidity),
            ..source(outdoor_c, true)
        };
        let given = bench.deliver(&cold, &steady(1000.0, 35.0));
        given.heat_kwh / given.electricity_kwh()
    };
    let lost = |outdoor_c: f64| 100.0 * (1.0 - cop(0.82, outdoor_c) / cop(0.0, outdoor_c));
    let worst_c = (-15..=8)
        .map(f64::from)
        .max_by(|a, b| lost(*a).total_cmp(&lost(*b)))
        .unwrap();
    let typical = Frost { strength: 0.3 };
    let damp = |outdoor_c: f64| {
        typical
            .loss(
                outdoor_c,
                outdoor_c - 9.0,
                humidity_ratio(outdoor_c, Some(0.9)),
            )
            .cop
    };
    let begins_c = (0..200)
        .map(|i| 10.0 - 0.05 * f64::from(i))
        .find(|&outdoor_c| damp(outdoor_c) > 0.0)
        .unwrap_or(f64::NAN);
    vec![
        moisture.row(
            "Moisture of the standard rating conditions, kg/kg",
            "psychrolib 2.5.0, GetHumRatioFromTWetBulb",
            5,
            "the digits given, same handbook equations",
        ),
        Row::new(
            "COP lost to frost at 35 °F of a usual machine, %",
            "US test procedure [M]: capacity 0.90, power 0.985",
            8.6,
            lost(1.7),
            5.0,
            "one machine's own sheet beside a rule for all",
        ),
        Row::new(
            "Outdoor temperature of the worst frost, °C",
            "osti.gov/biblio/5589942, field test: worst near 0 °C",
            0.0,
            worst_c,
            3.0,
            "\"near\"",
        ),
        Row::new(
            "Outdoor temperature below which maritime air frosts, °C",
            "common practice, no source: between +4 and +7 °C",
            5.5,
            begins_c,
            1.5,
            "the range itself",
        ),
    ]
}
