//! The twin test: machines built in Python from CoolProp with other exchangers and other efficiency curves
//! (`tests/reference/twin.py`, CoolProp 8.0.0) give six points each; the machine fitted to them predicts six unseen ones.

#![cfg(test)] // so that the lints know the helpers below for test code

use winterledger::heatpump::{ColdSide, Duty, HeatPump, Sheet, fit, rms};

struct Row {
    source_c: f64,
    flow_c: f64,
    at: String,
    output_kw: f64,
    cop: f64,
}

/// Given and unseen points of one twin.
fn twin(refrigerant: &str) -> (Vec<Row>, Vec<Row>) {
    let text = include_str!("reference/twin.csv");
    let mut reader = csv::Reader::from_reader(text.as_bytes());
    let rows: Vec<_> = reader
        .records()
        .map(Result::unwrap)
        .filter(|record| &record[0] == refrigerant)
        .map(|record| {
            let number = |i: usize| record[i].parse::<f64>().unwrap();
            let row = Row {
                source_c: number(2),
                flow_c: number(3),
                at: record[4].to_owned(),
                output_kw: number(5),
                cop: number(6),
            };
            (&record[1] == "given", row)
        })
        .collect();
    let (given, unseen): (Vec<_>, Vec<_>) = rows.into_iter().partition(|(given, _)| *given);
    let rows = |list: Vec<(bool, Row)>| list.into_iter().map(|(_, row)| row).collect();
    (rows(given), rows(unseen))
}

fn sheet(refrigerant: &str, given: &[Row]) -> Sheet {
    let mut text = format!(
        "[machine]\nlabel = \"Twin\"\nsource = \"air\"\nrefrigerant = \"{refrigerant}\"\nspeed = \"variable\"\n"
    );
    for row in given {
        text += &format!(
            "[[tested]]\nsource = \"{} °C\"\nflow = \"{} °C\"\noutput = \"{} kW\"\ncop = {}\nat = \"{}\"\ndefrost_included = false\n",
            row.source_c, row.flow_c, row.output_kw, row.cop, row.at
        );
    }
    Sheet::parse("twin.toml", &text).unwrap()
}

/// COP at a part-load output and greatest output, in dry air so that nothing frosts.
fn predict(machine: &HeatPump, row: &Row) -> (f64, f64) {
    let cold = ColdSide {
        open_c: row.source_c,
        k_per_kw: 0.0,
        relative_humidity: Some(0.0),
    };
    let greatest_kw = machine.greatest_output_kw(&cold, row.flow_c);
    let heat_kw = match row.at.as_str() {
        "maximum" => greatest_kw,
        _ => row.output_kw,
    };
    let duty = Duty {
        heat_kw,
        flow_c: row.flow_c,
        spread_k: 5.0,
        hours: 1.0,
        at_full_output: row.at == "maximum",
    };
    let delivered = machine.deliver(&cold, &duty);
    (
        delivered.heat_kwh / delivered.electricity_kwh(),
        greatest_kw,
    )
}

#[test]
fn six_points_predict_six_others() {
    for refrigerant in ["R290", "R32", "R410A"] {
        let (given, unseen) = twin(refrigerant);
        assert!(given.len() == 6 && unseen.len() == 6, "{refrigerant}");
        let fitted = fit(&sheet(refrigerant, &given)).unwrap();
        let machine = fitted.heat_pump.at_bench();
        let mut cop_percent = Vec::new();
        let mut output_percent = Vec::new();
        for row in &unseen {
            let (cop, greatest_kw) = predict(&machine, row);
            cop_percent.push(100.0 * (cop / row.cop - 1.0));
            if row.at == "maximum" {
                output_percent.push(100.0 * (greatest_kw / row.output_kw - 1.0));
            }
        }
        let error = rms(cop_percent.iter().copied());
        println!(
            "{refrigerant}: given {:.2} % by physics, unseen {error:.2} % ({cop_percent:.1?}), output {output_percent:.1?}",
            fitted.report.physics_rms_percent
        );
        // The issue's own bound.
        assert!(error < 6.0, "{refrigerant}: {error:.2} %");
        // Output beyond the points in the cold, by a speed that was not told: common practice asks for 10 %.
        assert!(
            output_percent.iter().all(|error| error.abs() < 10.0),
            "{refrigerant}"
        );
    }
}
