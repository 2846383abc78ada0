//! Seasonal rating by bins.

use winterledger::heatpump::IdlePower;
use winterledger::heatpump::rating::{
    Application, Climate, RatingCase, RatingPoint, cycling_cop, rate, rate_machine,
};

use crate::machine::typical;
use crate::table::Row;

const REGULATION: &str = "EU Regulations 811/2013 and 813/2013";

pub fn rows() -> Vec<Row> {
    let mut rows = Vec::new();
    for (climate, hours, sum) in [
        (Climate::Average, 4910.0, 2066.0),
        (Climate::Colder, 6446.0, 2465.0),
        (Climate::Warmer, 3590.0, 1336.0),
    ] {
        let total: f64 = climate.bins().map(|(_, hours)| hours).sum();
        rows.push(Row::new(
            format!("{} climate: hours of all bins", climate.word()),
            REGULATION,
            hours,
            total,
            0.0,
            "a count",
        ));
        let load: f64 = climate
            .bins()
            .map(|(outdoor_c, hours)| hours * climate.part_load_ratio(outdoor_c))
            .sum();
        rows.push(Row::new(
            format!("{} climate: hours of full load", climate.word()),
            REGULATION,
            sum,
            load,
            0.5,
            "half of the last printed digit",
        ));
    }
    rows.extend(worked_example());
    for (name, application, least) in [
        ("air, R290, variable speed", Application::Low, 125.0),
        ("air, R290, variable speed", Application::Medium, 110.0),
        ("ground, R410A, variable speed", Application::Low, 125.0),
    ] {
        let rated = rate_machine(&typical(name), Climate::Average, application, None).unwrap();
        rows.push(Row::at_least(
            format!("ηs of \"{name}\" at {} temperature, %", application.word()),
            "ecodesign floor since 2017, EU 813/2013 [M]",
            least,
            rated.rating.eta_s_percent,
            "a floor: a machine for sale may be better",
        ));
    }
    rows
}

/// Regression example of EN 14825 \[inputs from memory, result computed\]; the correction for cycling is made at the points.
fn worked_example() -> Vec<Row> {
    let point = |(outdoor_c, capacity_kw, cop)| RatingPoint {
        outdoor_c,
        capacity_kw,
        cop,
    };
    let points = [
        (-10.0, 7.80, 2.60),
        (-7.0, 9.55, 3.26),
        (-6.0, 9.70, 3.30),
        (2.0, 11.17, 4.00),
        (7.0, 12.66, 4.91),
        (12.0, 14.30, 5.50),
    ]
    .map(point);
    let case = RatingCase {
        climate: Climate::Average,
        design_load_kw: 11.46,
        operation_limit_c: -10.0,
        cycling_coefficient: 0.9,
        idle: IdlePower::usual(11.46),
        ground_pump: false,
    };
    let found = rate(&points, &case).unwrap();
    let part_load = |outdoor_c: f64| {
        let point = found
            .points
            .iter()
            .find(|point| point.declared.outdoor_c == outdoor_c);
        point.unwrap().cop
    };
    let by_hand = cycling_cop(
        4.00,
        11.46 * Climate::Average.part_load_ratio(2.0) / 11.17,
        0.9,
    );
    [
        ("part-load COP at 2 °C", 3.700, part_load(2.0), 0.001),
        ("part-load COP at 7 °C", 4.027, part_load(7.0), 0.001),
        ("part-load COP at 12 °C", 3.214, part_load(12.0), 0.001),
        (
            "part-load COP at 2 °C by the formula alone",
            3.700,
            by_hand,
            0.001,
        ),
        ("annual heat, kWh", 23672.0, found.heat_kwh, 1.0),
        (
            "annual heat of the heater, kWh",
            120.7,
            found.heater_kwh,
            0.1,
        ),
        ("SCOPon", 3.598, found.scop_on, 0.001),
        ("SCOPnet", 3.646, found.scop_net, 0.001),
    ]
    .into_iter()
    .map(|(what, expected, got, digit)| {
        Row::new(
            format!("Worked example, {what}"),
            "EN 14825; regression example [M], recomputed",
            expected,
            got,
            0.5 * digit,
            "half of the last printed digit",
        )
    })
    .collect()
}
