//! Units, fuels and currencies.

use winterledger::heater::NET_PER_GROSS_METHANE;
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
            "CoolProp 8.0.0 and heats of formation",
            0.901,
            NET_PER_GROSS_METHANE,
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
