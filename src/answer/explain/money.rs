//! The boiler, and what the hour cost.

use super::{Lines, Part, n, sum};
use crate::study::{Case, Contender, Traced};
use crate::year::Row;

pub(super) fn boiler(row: &Row) -> Part {
    let mut part = Lines::new();
    part.given("flow", row.space_flow_c, "°C", "set, or following the load");
    part.given("return", row.space_return_c, "°C", "flow less spread");
    part.add(
        "heat to rooms",
        row.heater_space_kwh,
        "kWh",
        "heat wanted, as far as boiler and emitters carry it",
    );
    part.add(
        "heat to hot water",
        row.heater_water_kwh,
        "kWh",
        "what the taps or the store ask",
    );
    part.add(
        "gas, gross",
        row.fuel_kwh,
        "kWh",
        "each heat over its efficiency on gross calorific value",
    );
    part.add(
        "lost",
        row.fuel_loss_kwh,
        "kWh",
        format!(
            "gas − heat = {} − {} − {}",
            n(row.fuel_kwh),
            n(row.heater_space_kwh),
            n(row.heater_water_kwh)
        ),
    );
    part.add(
        "pump and fan",
        row.heater_electricity_kwh,
        "kWh",
        "share of the heat",
    );
    part.part("The boiler")
}

pub(super) fn cost(case: &Case, contender: &Contender, traced: &Traced) -> Part {
    let row = &traced.row;
    let mut part = Lines::new();
    let electricity = row.electricity_kwh();
    part.add(
        "electricity",
        electricity,
        "kWh",
        format!(
            "compressor, fan or pump, defrost, allowance, at rest, circulation, backup, immersion, boiler or heater = {}",
            sum(&[
                row.compressor_kwh,
                row.source_side_kwh,
                row.defrost_kwh,
                row.allowance_kwh,
                row.idle_kwh,
                row.circulation_kwh,
                row.backup_kwh,
                row.immersion_kwh,
                row.heater_electricity_kwh,
            ])
        ),
    );
    let code = case.currency.code();
    part.add(
        "price of electricity",
        row.electricity_price,
        "/kWh",
        format!("tariff, {code}, tax included"),
    );
    part.given(
        "price of fuel",
        row.fuel_price,
        "/kWh",
        "tariff, tax included",
    );
    let fuel = row.fuel_price.map_or_else(String::new, |price| {
        format!(" + {} × {}", n(row.fuel_kwh), n(price))
    });
    // Own generation makes some kilowatt-hours cheaper than the price of the others.
    let bought =
        electricity * row.electricity_price + row.fuel_kwh * row.fuel_price.unwrap_or_default();
    let plain = (bought - row.energy_cost).abs() < 1e-6;
    part.add(
        "cost of the hour's energy",
        row.energy_cost,
        code,
        if plain {
            format!(
                "energy × price; standing charges are the year's = {} × {}{fuel}",
                n(electricity),
                n(row.electricity_price)
            )
        } else {
            "energy at its prices, own generation at what feeding it back would have paid"
                .to_owned()
        },
    );
    let plan = &contender.plan;
    let factor = plan.electricity.carbon_kg[traced.hour];
    let of_fuel = plan.fuel.as_ref().map(|fuel| fuel.carbon_kg[traced.hour]);
    let plain = (electricity * factor + row.fuel_kwh * of_fuel.unwrap_or_default() - row.carbon_kg)
        .abs()
        < 1e-6;
    let fuel = of_fuel.map_or_else(String::new, |of_fuel| {
        format!(" + {} × {}", n(row.fuel_kwh), n(of_fuel))
    });
    part.add(
        "carbon",
        row.carbon_kg,
        "kg CO2e",
        if plain {
            format!("energy × factor = {} × {}{fuel}", n(electricity), n(factor))
        } else {
            "energy at its factors, own generation without".to_owned()
        },
    );
    part.part("What it cost")
}
