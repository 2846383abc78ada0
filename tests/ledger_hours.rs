//! Three hours of the demonstration's ledger, reckoned again with a pocket calculator.
//!
//! Every number is from the brief (`briefs/terrace.toml`), its tariffs, the weather file or a table cited in the code; none is from
//! the program. Intermediate results are written out as they stand on the paper, to five figures or more.
#![cfg(test)]

use winterledger::brief::Brief;
use winterledger::study::Case;
use winterledger::year::{Ledger, Row};

fn rows(case: &Case, label: &str) -> Vec<Row> {
    let contender = case
        .contenders
        .iter()
        .find(|contender| contender.system.label == label)
        .unwrap();
    let mut ledger = Ledger::default();
    case.run_one(contender, Some(&mut ledger)).unwrap();
    ledger.rows
}

/// The paper was kept to five figures.
fn agrees(paper: f64, row: f64, what: &str) {
    assert!(
        (paper - row).abs() <= 2e-5 * paper.abs().max(1.0),
        "{what}: paper {paper}, ledger {row}"
    );
}

/// 21 January, 08:00: 6.8 °C, 5 W/m² of sun, the rooms at their set point.
#[test]
fn an_hour_of_the_boiler() {
    let case = Brief::demonstration().unwrap().case;
    let row = rows(&case, "Gas boiler")[20 * 24 + 8];
    agrees(6.8, row.outdoor_c, "outdoor");
    // Gains: 4 W/m² × 96 m² = 0.384 kW; 3 % × 96 m² = 2.88 m² of aperture × 5 W/m² = 0.0144 kW.
    agrees(0.3984, row.gains_kwh, "gains");
    // Loss 0.212 kW/K × (20 − 6.8) K = 2.7984 kW; less gains 2.4000 kW.
    agrees(2.4, row.heater_space_kwh, "heat to the rooms");
    // Set to 65 °C with 8 K of spread the return is 57 °C and the flue gas 62 °C: 0.886 − 0.2 × 0.005 = 0.885 ideal, × 0.92 = 0.8142.
    // Hot water returns at 55 °C, flue gas 60 °C: 0.886 × 0.92 = 0.81512, and × 0.89 as it is heated as it is drawn: 0.72546.
    let fuel = 2.4 / 0.8142 + row.water_drawn_kwh / 0.72546;
    // The table on paper has three digits and straight lines: 0.885 is right to 0.001.
    assert!(
        (fuel / row.fuel_kwh - 1.0).abs() < 2e-3,
        "gas: paper {fuel}, ledger {}",
        row.fuel_kwh
    );
    let fuel = row.fuel_kwh;
    // Pump and fan: 175 kWh for 9775 kWh of heat.
    let electricity = (2.4 + row.water_drawn_kwh) * 175.0 / 9775.0;
    agrees(electricity, row.heater_electricity_kwh, "pump and fan");
    // 6.05 p and 25.30 p a kilowatt-hour; 0.18296 and 0.19553 kg.
    agrees(fuel * 0.0605 + electricity * 0.253, row.energy_cost, "cost");
    agrees(
        fuel * 0.18296 + electricity * 0.19553,
        row.carbon_kg,
        "carbon",
    );
}

/// 1 January, 00:00: 0.7 °C, no sun, everything at rest: the first hour of the year.
#[test]
fn an_hour_of_the_machine_for_the_rooms() {
    let case = Brief::demonstration().unwrap().case;
    let row = rows(&case, "Air source, larger radiators")[0];
    agrees(0.7, row.outdoor_c, "outdoor");
    // 0.212 × (20 − 0.7) − 0.384 = 3.7076 kW.
    agrees(3.7076, row.machine_space_kwh, "heat to the rooms");
    // Radiators of 42/37 °C carry 0.212 × 23 = 4.876 kW at a mean excess of 19.5 K: share 0.76038.
    // Excess 19.5 × 0.76038^(1/1.3) = 19.5 × 0.81001 = 15.795 K; spread 5 × 0.76038 = 3.8019 K; flow 20 + 15.795 + 1.9010.
    agrees(37.696, row.space_flow_c.unwrap(), "flow");
    agrees(37.696 - 3.8019, row.space_return_c.unwrap(), "return");
    // What a sheet's test would read, and the allowance of 1/0.85 − 1 = 0.17647 on it.
    let laboratory = row.compressor_kwh + row.source_side_kwh + row.defrost_kwh;
    agrees(laboratory * 0.176_470_6, row.allowance_kwh, "allowance");
    agrees(
        3.7076 / (laboratory * 1.176_470_6),
        row.space_cop.unwrap(),
        "COP",
    );
    // The circuit pump takes 25 W; nothing else runs.
    let electricity = laboratory * 1.176_470_6 + 0.025;
    agrees(electricity, row.electricity_kwh(), "electricity");
    agrees(electricity * 0.253, row.energy_cost, "cost");
    agrees(electricity * 0.19553, row.carbon_kg, "carbon");
    agrees(20.0, row.indoor_c, "rooms after");
}

/// The first block of hot water of the year.
#[test]
fn an_hour_with_a_block_of_hot_water() {
    let case = Brief::demonstration().unwrap().case;
    let rows = rows(&case, "Air source, larger radiators");
    let hour = rows
        .iter()
        .position(|row| row.machine_water_kwh > 0.0)
        .unwrap();
    let (before, row) = (rows[hour - 1], rows[hour]);
    // The day's 23 draws of profile M begin at 07:00.
    assert_eq!(hour, 7);
    // 200 L × 4.186 / 3600 = 0.232556 kWh/K; label class C: 200^0.4 = 8.3255, 16.66 + 8.33 × 8.3255 = 86.012 W at 45 K, 1.91137 W/K.
    let loss = 0.001_911_37 * (before.store_c.unwrap() - 20.0);
    agrees(loss, row.store_loss_kwh, "standing loss");
    let after_draw = before.store_c.unwrap() - (row.water_drawn_kwh + loss) / 0.232_556;
    // The block ends at 50 °C; its coil needs 5 K more than the store, on average over the block.
    agrees(
        0.232_556 * (50.0 - after_draw),
        row.machine_water_kwh,
        "heat to the store",
    );
    agrees(
        (after_draw + 50.0) / 2.0 + 5.0,
        row.water_flow_c.unwrap(),
        "flow to the coil",
    );
    agrees(50.0, row.store_c.unwrap(), "store after");
    // Each duty has its own COP.
    let water = row.machine_water_kwh / row.machine_water_electricity_kwh;
    let space = row.machine_space_kwh / row.machine_space_electricity_kwh;
    agrees(water, row.water_cop.unwrap(), "COP of hot water");
    agrees(space, row.space_cop.unwrap(), "COP of the rooms");
    assert!(space > water, "{space} {water}");
}
