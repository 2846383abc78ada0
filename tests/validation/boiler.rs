//! A condensing boiler: the ideal flue, net and gross, and what homes lose.

use winterledger::document::LeafValue;
use winterledger::heater::{
    Boiler, BoilerEfficiency, Combustion, FIELD_FACTOR, GrossEfficiency, StatedEfficiency,
};
use winterledger::units::Fuel;

use crate::table::Row;

pub fn rows() -> Vec<Row> {
    let mut rows: Vec<Row> = [
        (30.0, 0.974),
        (40.0, 0.952),
        (45.0, 0.936),
        (50.0, 0.915),
        (55.0, 0.888),
        (60.0, 0.886),
        (70.0, 0.881),
        (80.0, 0.877),
    ]
    .into_iter()
    .map(|(flue_c, expected)| {
        Row::new(
            format!("Ideal gross efficiency, flue gas leaving at {flue_c} °C"),
            "combustion balance of methane, 25 % excess air, CoolProp 8.0.0",
            expected,
            Combustion::GAS.gross_efficiency(flue_c),
            0.003,
            "constant heat capacities here, and the table is rounded to 0.001",
        )
    })
    .collect();
    let read = |text: &str, fuel: Fuel| {
        let stated = StatedEfficiency::read(&toml::Value::String(text.to_owned())).ok()?;
        stated.of(fuel).map(GrossEfficiency::fraction)
    };
    rows.push(Row::new(
        "108 % on net calorific value is gross, %",
        "108 % × 0.901, by hand: 97.3 %",
        97.3,
        100.0 * read("108 % net", Fuel::Gas).unwrap_or(f64::NAN),
        0.05,
        "half of the last printed digit",
    ));
    rows.push(Row::new(
        "93 % of an oil boiler on net calorific value is gross, %",
        "IPCC Guidelines 2006, volume 2: net is about 5 % below gross for oil [M]; 93 % × 0.95",
        88.4,
        100.0 * read("93 % net", Fuel::HeatingOil).unwrap_or(f64::NAN),
        0.1,
        "\"about 5 %\", and half of the last printed digit",
    ));
    rows.push(Row::holds(
        "A boiler above 100 % gross is refused",
        "energy balance: no more heat than the fuel holds",
        read("108 % gross", Fuel::Gas).is_none() && read("120 % net", Fuel::Gas).is_none(),
    ));
    let boiler = |has_store| {
        let efficiency = BoilerEfficiency::FollowingReturn {
            combustion: Combustion::GAS,
            field_factor: FIELD_FACTOR,
        };
        let boiler = Boiler::new(Fuel::Gas, 24.0, efficiency);
        if has_store {
            boiler.gross_efficiency(47.0)
        } else {
            0.8 * boiler.gross_efficiency(47.0) + 0.2 * boiler.water_efficiency(false)
        }
    };
    for (what, has_store, expected) in [
        ("that heats rooms alone", true, 85.3),
        ("that heats water as it is drawn", false, 82.5),
    ] {
        rows.push(Row::new(
            format!("Boiler in a home {what}, gross efficiency, %"),
            "UK field figures [M]",
            expected,
            100.0 * boiler(has_store),
            2.5,
            "return at 47 °C and a fifth for hot water are assumed; ideal would be 6 points higher",
        ));
    }
    rows
}
