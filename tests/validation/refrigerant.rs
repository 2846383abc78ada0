//! The exact equations against CoolProp, an independent implementation of the same publications.

use winterledger::refrigerant::{Equation, Refrigerant};

use crate::table::{Row, Worst, number, reference};

const SOURCE: &str = "CoolProp 8.0.0";

pub fn rows() -> Vec<Row> {
    let saturated = reference("refrigerant_saturation.csv");
    let mut single = reference("refrigerant_superheated.csv");
    single.extend(reference("refrigerant_subcooled.csv"));
    let mut rows = Vec::new();
    for refrigerant in Refrigerant::ALL {
        let pseudo_pure = refrigerant == Refrigerant::R410A;
        let equation = Equation::new(refrigerant).unwrap();
        let own = |row: &&Vec<String>| row[0] == refrigerant.to_string();

        let mut worst = Worst::relative(if pseudo_pure { 3e-3 } else { 1e-8 });
        for row in saturated.iter().filter(own) {
            let v: Vec<f64> = row[1..].iter().map(|text| number(text)).collect();
            // As far as any table of the program goes.
            if pseudo_pure && v[0] > equation.critical_temperature_c() - 8.0 {
                continue;
            }
            let found = equation.saturation(v[0]).unwrap();
            for (expected, got) in [
                (v[1], found.pressure_kpa),
                (v[2], found.pressure_kpa),
                (v[3], found.liquid.enthalpy_kj_per_kg),
                (v[4], found.liquid.entropy_kj_per_kg_k),
                (v[5], found.liquid.density_kg_per_m3),
                (v[6], found.vapour.enthalpy_kj_per_kg),
                (v[7], found.vapour.entropy_kj_per_kg_k),
                (v[8], found.vapour.density_kg_per_m3),
            ] {
                worst.see(expected, got);
            }
        }
        let because = if pseudo_pure {
            "the library takes bubble and dew pressure from equations of their own, we one pressure in equilibrium"
        } else {
            "the ten digits of the file, and both solvers' tolerances near the critical point"
        };
        rows.push(worst.row(
            &format!("{refrigerant} saturation: pressure, enthalpy, entropy, density"),
            SOURCE,
            100,
            because,
        ));

        let mut worst = Worst::relative(if pseudo_pure { 3e-5 } else { 1e-7 });
        let mut back = Worst::absolute(1e-6);
        for row in single.iter().filter(own) {
            let v: Vec<f64> = row[1..].iter().map(|text| number(text)).collect();
            let found = equation.at_temperature_pressure(v[0], v[1]).unwrap();
            worst.see(v[2], found.enthalpy_kj_per_kg);
            worst.see(v[3], found.entropy_kj_per_kg_k);
            worst.see(v[4], found.density_kg_per_m3);
            let (h, s) = (found.enthalpy_kj_per_kg, found.entropy_kj_per_kg_k);
            for state in [
                equation.at_pressure_enthalpy(v[1], h).unwrap(),
                equation.at_pressure_entropy(v[1], s).unwrap(),
            ] {
                back.see(v[0], state.temperature_c);
            }
        }
        rows.push(back.row(
            &format!("{refrigerant} back from pressure and enthalpy or entropy, °C"),
            SOURCE,
            100,
            "the solver's own tolerance",
        ));
        let because = if pseudo_pure {
            "reference state, saturated liquid at 0 °C"
        } else {
            "the library ends its search for density at about 1e-8"
        };
        rows.push(worst.row(
            &format!("{refrigerant} vapour and liquid: enthalpy, entropy, density"),
            SOURCE,
            150,
            because,
        ));
    }
    rows
}
