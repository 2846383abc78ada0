//! Any name and any number: a picture comes out whole or an error says why; nothing panics.

use crate::common::*;
use proptest::prelude::*;
use winterledger::chart::{
    AnnualCost, BreakEven, BreakEvenLine, ChartError, CumulativeSpend, DemandAndOutput,
    LoadDuration, Monthly, MonthlySystem, Picture, Swing, Swings, SystemCost, SystemSpend,
    annual_cost, break_even, cumulative_spend, demand_and_output, load_duration, monthly, swings,
};

/// Numbers as they may come: ordinary, huge, tiny, none at all.
fn number() -> impl Strategy<Value = f64> {
    prop_oneof![
        100 => -3000.0..3000.0f64,
        25 => prop_oneof![Just(0.0), Just(-0.0), Just(1e-12), Just(9e11), Just(-9e11)],
        1 => prop_oneof![Just(f64::NAN), Just(f64::INFINITY), Just(f64::MAX), Just(f64::MIN_POSITIVE)],
    ]
}

fn sound(name: &str, drawn: Result<Picture, ChartError>) {
    match drawn {
        Ok(picture) => {
            check_svg(name, &picture);
        }
        Err(error) => assert!(error.to_string().starts_with("the picture “"), "{error}"),
    }
}

proptest! {
    #![proptest_config(ProptestConfig::with_cases(80))]

    #[test]
    fn bars(rows in prop::collection::vec((any::<String>(), any::<bool>(), number(), number(), number()), 0..9),
            currency in any::<String>()) {
        let systems = rows
            .iter()
            .map(|(label, today, energy, standing, tax)| SystemCost {
                label: label.clone(), today: *today, energy: *energy, standing: *standing, tax: *tax,
            })
            .collect();
        sound("annual cost", annual_cost(&AnnualCost { currency: currency.clone(), systems }, &english()));
        let systems = rows
            .iter()
            .map(|(label, today, a, b, c)| MonthlySystem {
                label: label.clone(),
                today: *today,
                cost: vec![*a, *b],
                electricity_kwh: vec![*b, *c],
                fuel_kwh: vec![*c, *a],
            })
            .collect();
        let months = vec!["Jan".to_string(), currency.clone()];
        sound("monthly", monthly(&Monthly { currency, months, systems }, &english()));
    }

    #[test]
    fn loads(hours in prop::collection::vec((number(), number()), 0..900), balance in prop::option::of(number()),
             system in any::<String>()) {
        sound("demand", demand_and_output(
            &DemandAndOutput {
                system: system.clone(),
                hours: hours.clone(),
                greatest_output: hours.iter().take(5).copied().collect(),
                least_output: vec![],
                balance_point_c: balance,
                design: hours.first().copied(),
            },
            &english(),
        ));
        sound("duration", load_duration(
            &LoadDuration {
                system,
                machine_kw: hours.iter().map(|h| h.0).collect(),
                backup_kw: hours.iter().map(|h| h.1).collect(),
                short_kw: vec![0.0; hours.len()],
            },
            &english(),
        ));
    }

    #[test]
    fn studies(rows in prop::collection::vec((any::<String>(), number(), number()), 0..9), likely in number(),
               unit in any::<String>()) {
        let levers = rows
            .iter()
            .map(|(label, low, high)| Swing {
                label: label.clone(), low_text: unit.clone(), high_text: label.clone(), low: *low, high: *high,
            })
            .collect();
        let currency = "GBP".to_string();
        sound("swings", swings(&Swings { outcome: unit.clone(), currency: currency.clone(), likely, levers }, &english()));
        let lines = rows
            .iter()
            .map(|(label, a, b)| BreakEvenLine {
                label: label.clone(), points: vec![(10.0, *a), (20.0, *b)], crossings: vec![*a],
            })
            .collect();
        sound("break-even", break_even(
            &BreakEven {
                lever: unit.clone(), unit: unit.clone(), outcome: unit.clone(), currency: currency.clone(), lines, now: Some(likely),
            },
            &english(),
        ));
        let systems = rows
            .iter()
            .enumerate()
            .map(|(i, (label, a, b))| SystemSpend { label: label.clone(), today: i == 0, spent: vec![*a, *b, *a + *b] })
            .collect();
        sound("spend", cumulative_spend(&CumulativeSpend { currency, terms: unit, systems }, &english()));
    }
}
