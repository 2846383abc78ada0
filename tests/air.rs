//! Moist air against psychrolib 2.5.0, on the grid that `tests/reference/air.py` makes, and against an open weather file.
#![cfg(test)]

use winterledger::air::{MoistAir, relative_humidity_at_dew_point, saturation_pressure_pa};

/// The library's own stated tolerance, PSYCHROLIB_TOLERANCE in SI.
const TOLERANCE_K: f64 = 0.001;
/// Closed formulas differ only by rounding.
const ROUNDING: f64 = 1e-9;
/// Below this the library replaces the humidity ratio by its own least value (MIN_HUM_RATIO), and we do not.
const LEAST_RATIO: f64 = 1e-7;

#[test]
fn the_grid_agrees_within_the_librarys_tolerance() {
    let mut reader = csv::Reader::from_path(concat!(
        env!("CARGO_MANIFEST_DIR"),
        "/tests/reference/air.csv"
    ))
    .unwrap();
    let mut points = 0;
    let mut two_ways = 0;
    let mut worst: f64 = 0.0;
    for row in reader.deserialize::<[f64; 8]>() {
        let [c, rh, pa, saturation, ratio, dew, wet, enthalpy] = row.unwrap();
        // The library reads relative humidity over ice below 0 °C; the vapour is what both agree on.
        let air = MoistAir::with_vapour(c, rh * saturation, pa).unwrap();
        let at = format!("{c} °C {rh} {pa} Pa");
        assert!(ratio > LEAST_RATIO, "{at}");
        assert!(
            (saturation_pressure_pa(c).unwrap() / saturation - 1.0).abs() < ROUNDING,
            "{at}"
        );
        assert!(
            (air.humidity_ratio() / ratio - 1.0).abs() < ROUNDING,
            "{at}"
        );
        assert!((air.enthalpy_kj_per_kg() - enthalpy).abs() < 1e-6, "{at}");
        assert!(
            (air.dew_point_c().unwrap() - dew).abs() < TOLERANCE_K,
            "{at}"
        );
        let found = air.wet_bulb_c().unwrap();
        if (found - wet).abs() >= TOLERANCE_K {
            // Around 0 °C the handbook's equations over water and over ice both hold; the library's halving may end on
            // the ice, ours is on the water.
            assert!(
                found >= 0.0 && wet < 0.0 && found - wet < 0.5,
                "{at}: {found} {wet}"
            );
            two_ways += 1;
        } else {
            worst = worst.max((found - wet).abs());
        }
        points += 1;
    }
    println!("{points} points, {two_ways} with two answers, wet bulb within {worst:.6} K");
    assert_eq!(points, 780);
    assert!(two_ways < 20, "{two_ways}");
}

/// Which convention weather files keep: the open file of Greensboro (TMY3) states dew point and relative humidity apart. In its
/// hours below −3 °C humidity from the dew point agrees with the stated one over water, within what rounding to 0.1 K and 1 %
/// leaves on average; over ice it would be 2.5 points too low.
#[test]
fn weather_files_state_humidity_over_water() {
    let text = std::fs::read_to_string(concat!(
        env!("CARGO_MANIFEST_DIR"),
        "/tests/data/723170TYA.CSV"
    ))
    .unwrap();
    let (_, table) = text.split_once('\n').unwrap();
    let mut reader = csv::Reader::from_reader(table.as_bytes());
    let headers = reader.headers().unwrap().clone();
    let at = |name: &str| headers.iter().position(|header| header == name).unwrap();
    let columns = [at("Dry-bulb (C)"), at("Dew-point (C)"), at("RHum (%)")];
    let (mut water, mut ice, mut hours) = (0.0, 0.0, 0.0);
    for row in reader.records() {
        let row = row.unwrap();
        let [dry, dew, stated] = columns.map(|column| row[column].parse::<f64>().unwrap());
        if dry < -3.0 {
            water += 100.0 * relative_humidity_at_dew_point(dry, dew).unwrap() - stated;
            let over_ice =
                saturation_pressure_pa(dew).unwrap() / saturation_pressure_pa(dry).unwrap();
            ice += 100.0 * over_ice - stated;
            hours += 1.0;
        }
    }
    assert!(hours > 400.0, "{hours}");
    assert!((water / hours).abs() < 0.5, "{}", water / hours);
    assert!(ice / hours < -2.0, "{}", ice / hours);
}
