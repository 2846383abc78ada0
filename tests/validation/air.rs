//! Moist air against psychrolib, on the grid that `tests/reference/air.py` makes.

use winterledger::air::{MoistAir, relative_humidity_at_dew_point, saturation_pressure_pa};

use crate::table::{Row, Worst, numbers};

const SOURCE: &str = "psychrolib 2.5.0 (ASHRAE Handbook 2017, chapter 1)";

pub fn rows() -> Vec<Row> {
    let closed = || Worst::relative(1e-9);
    let (mut saturation, mut ratio, mut enthalpy) = (closed(), closed(), Worst::absolute(1e-6));
    let (mut dew, mut wet) = (Worst::absolute(1e-3), Worst::absolute(1e-3));
    let mut two_answers = 0;
    for row in numbers("air.csv") {
        // The library reads relative humidity over ice below 0 °C; the vapour is what both agree on.
        let air = MoistAir::with_vapour(row[0], row[1] * row[3], row[2]).unwrap();
        saturation.see(row[3], saturation_pressure_pa(row[0]).unwrap());
        ratio.see(row[4], air.humidity_ratio());
        dew.see(row[5], air.dew_point_c().unwrap());
        let found = air.wet_bulb_c().unwrap();
        // Around 0 °C the handbook's equations over water and over ice both hold; the library's halving may end on the ice, ours
        // is on the water.
        if found >= 0.0 && row[6] < 0.0 && found - row[6] < 0.5 {
            two_answers += 1;
        } else {
            wet.see(row[6], found);
        }
        enthalpy.see(row[7], air.enthalpy_kj_per_kg());
    }
    let rounding = "closed formulas: rounding";
    let library = "the library's own stated tolerance";
    let mut rows = vec![
        saturation.row("Saturation pressure, Pa", SOURCE, 780, rounding),
        ratio.row("Humidity ratio, kg/kg", SOURCE, 780, rounding),
        enthalpy.row("Enthalpy, kJ/kg", SOURCE, 780, rounding),
        dew.row("Dew point, °C", SOURCE, 780, library),
        wet.row("Wet bulb, °C", SOURCE, 760, library),
        Row::new(
            "Points at which wet bulb over water and over ice both hold, left out above",
            SOURCE,
            0.0,
            f64::from(two_answers),
            19.0,
            "both solve the handbook's equations; a few of the 780 near 0 °C",
        ),
    ];
    rows.push(over_water());
    rows
}

/// Which convention weather files keep: an open file that states dew point and relative humidity apart, in its hours below −3 °C.
fn over_water() -> Row {
    let path = concat!(env!("CARGO_MANIFEST_DIR"), "/tests/data/723170TYA.CSV");
    let text = std::fs::read_to_string(path).unwrap();
    let (_, table) = text.split_once('\n').unwrap();
    let mut reader = csv::Reader::from_reader(table.as_bytes());
    let headers = reader.headers().unwrap().clone();
    let at = |name: &str| headers.iter().position(|header| header == name).unwrap();
    let columns = [at("Dry-bulb (C)"), at("Dew-point (C)"), at("RHum (%)")];
    let (mut stated, mut found, mut hours) = (0.0, 0.0, 0.0);
    for row in reader.records() {
        let row = row.unwrap();
        let [dry, dew, percent] = columns.map(|column| row[column].parse::<f64>().unwrap());
        if dry < -3.0 {
            stated += percent;
            found += 100.0 * relative_humidity_at_dew_point(dry, dew).unwrap();
            hours += 1.0;
        }
    }
    Row::new(
        "Mean relative humidity from the dew point below −3 °C at Greensboro, %",
        "the file's own humidity (TMY3)",
        stated / hours,
        found / hours,
        0.5,
        "rounding to 0.1 K and 1 %; over ice it would be 2.5 points less",
    )
}
