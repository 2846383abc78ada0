//! Bills against the regulator's published household, and the break-even that follows from its rates.

use rust_decimal::Decimal;
use rust_decimal::prelude::ToPrimitive;
use winterledger::bill::{self, Connection};
use winterledger::calendar::HourAxis;
use winterledger::study::{Prices, break_even_spf};
use winterledger::tariff::{Covers, Tariff, Tax};

use crate::table::{Row, Worst, numbers};

const SOURCE: &str = "regulator of Great Britain, price cap April to June 2026: £1641";

fn total(fuel: &str, rate: &str, standing: &str, tax_included: bool, kwh: f64) -> f64 {
    let basis = match fuel {
        "gas" => "calorific_basis = \"gross\"\n",
        _ => "",
    };
    let text = format!(
        "label = \"A\"\nfuel = \"{fuel}\"\ncurrency = \"GBP\"\nrates_include_tax = true\n{basis}\
        standing = \"{standing} p/day\"\n[[band]]\nrate = \"{rate} p/kWh\"\n"
    );
    let mut tariff = Tariff::from_text("a.toml", &text, "".as_ref())
        .unwrap_or_else(|problems| panic!("{problems}"));
    tariff.prices[0].tax = Tax {
        share: Some(Decimal::new(5, 2)),
        covers: Covers::ALL,
        included: tax_included,
    };
    let zone: chrono_tz::Tz = "Europe/London".parse().unwrap();
    let civil = HourAxis::civil_year(2023, zone).unwrap().civil(zone);
    let evenly = vec![kwh / civil.len() as f64; civil.len()];
    let bill = bill::price(&tariff, &civil, &evenly, Connection::Kept).unwrap();
    bill.total().to_f64().unwrap()
}

fn household(tax_included: bool) -> f64 {
    total("electricity", "24.67", "57.21", tax_included, 2700.0)
        + total("gas", "5.74", "29.09", tax_included, 11_500.0)
}

pub fn rows() -> Vec<Row> {
    let mut rows = vec![
        Row::new(
            "Household of 2700 and 11 500 kWh, £ a year",
            SOURCE,
            1641.19,
            household(true),
            1e-9,
            "to the penny",
        ),
        Row::new(
            "The same rates if they did not hold tax, £ a year",
            "tax of 5 % added again, by hand: £1723",
            1723.25,
            household(false),
            1e-9,
            "to the penny: 1641.19 and 5 % of each fuel",
        ),
    ];
    let (mut unit_rates, mut whole) = (Worst::absolute(1e-9), Worst::absolute(1e-9));
    for v in numbers("study_break_even_spf.csv") {
        let spf = break_even_spf(&Prices {
            electricity_per_kwh: 0.2467,
            fuel_per_kwh: 0.0574,
            fuel_kwh: v[0],
            efficiency: v[1],
            fuel_standing: 365.0 * 0.2909,
            boiler_electricity_kwh: v[2],
        })
        .unwrap();
        unit_rates.see(v[3], spf.unit_rates);
        whole.see(v[4], spf.whole_bill);
        if v[0] == 12_000.0 {
            rows.push(Row::new(
                format!(
                    "Break-even SPF by unit rates against a boiler of {:.0} %",
                    100.0 * v[1]
                ),
                "GB price cap April to June 2026, unit rates, by hand",
                if v[1] == 0.85 { 3.65 } else { 3.87 },
                spf.unit_rates,
                0.005,
                "half of the last printed digit",
            ));
        }
        if v[0] == 12_000.0 && v[1] == 0.85 {
            rows.push(Row::new(
                "The same when the gas connection ends, 12 000 kWh",
                "GB price cap April to June 2026, whole bill, by hand: about 3.0",
                3.0,
                spf.whole_bill,
                0.05,
                "\"about\"",
            ));
        }
    }
    let source = "scipy, both bills made equal (tests/reference/study_break_even_spf.py)";
    rows.push(unit_rates.row("Break-even SPF by unit rates", source, 6, "rounding"));
    rows.push(whole.row("Break-even SPF by the whole bill", source, 6, "rounding"));
    rows
}
