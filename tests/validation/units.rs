//! Units, fuels and currencies.

use winterledger::units::{
    CalorificBasis, CalorificValue, Currency, Energy, Fuel, FuelUnit, Temperature, parse,
};

use crate::table::{Row, reference};

pub fn rows() -> Vec<Row> {
    let gas = FuelUnit::from_symbol("m³").unwrap();
    let value = CalorificValue::parse("39.3 MJ/m³").unwrap();
    let kwh = gas
        .gross_kwh(Fuel::Gas, CalorificBasis::Gross, Some(value), 1.02264)
        .unwrap();
    let therm = parse::<Energy>("1 therm").unwrap().kwh();
    let currencies = reference("tariff_currencies.csv");
    let agree = currencies.iter().filter(|row| {
        Currency::parse(&row[0]).is_ok_and(|currency| currency.minor_digits().to_string() == row[1])
    });
    vec![
        Row::new(
            "100 m³ of gas at 39.3 MJ/m³, kWh",
            "UK metering regulations: m³ × 1.02264 × CV/3.6",
            1116.382,
            100.0 * kwh,
            0.0005,
            "half of the last printed digit",
        ),
        Row::new(
            "One therm, kWh",
            "100 000 Btu (IT)",
            29.30711,
            therm,
            5e-6,
            "half of the last printed digit",
        ),
        Row::new(
            "Net over gross calorific value of methane",
            "heats of formation, NIST Chemistry WebBook [M]",
            net_over_gross(-74.6, 1.0, 2.0),
            Fuel::Gas.net_over_gross(),
            0.0005,
            "half of the last printed digit",
        ),
        Row::new(
            "Net over gross calorific value of propane",
            "heats of formation, NIST Chemistry WebBook [M]",
            net_over_gross(-104.7, 3.0, 4.0),
            Fuel::Lpg.net_over_gross(),
            0.0005,
            "half of the last printed digit",
        ),
        Row::new(
            "Annual mean of Greensboro, 57.8 °F, °C",
            "definition of the Fahrenheit scale",
            (57.8 - 32.0) / 1.8,
            parse::<Temperature>("57.8 °F").unwrap().c(),
            1e-9,
            "rounding",
        ),
        Row::new(
            "Currencies whose digits after the point agree",
            "ISO 4217 as in OpenJDK",
            155.0,
            agree.count() as f64,
            0.0,
            "a count",
        ),
    ]
}

/// Of a hydrocarbon by its heat of formation (kJ/mol), carbon dioxide and water that it burns to: heats of formation −393.51 of
/// carbon dioxide, −285.83 of water and −241.83 of steam, kJ/mol.
fn net_over_gross(formation: f64, carbon_dioxide: f64, water: f64) -> f64 {
    let gross = formation + 393.51 * carbon_dioxide + 285.83 * water;
    let net = formation + 393.51 * carbon_dioxide + 241.83 * water;
    net / gross
}
