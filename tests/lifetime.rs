//! Present value, levelised cost and payback against numpy-financial.
#![cfg(test)]

use winterledger::lifetime::{CashFlow, Outlay, Part, Path, Payback, Running, Terms, payback};

/// `tests/reference/lifetime.py`: 40 cases made with numpy-financial 1.0.0.
#[test]
fn the_years_agree_with_numpy_financial() {
    let mut rows = csv::Reader::from_path("tests/reference/lifetime.csv").unwrap();
    let header = rows.headers().unwrap().clone();
    let (mut seen, mut paid_back) = (0, 0);
    for row in rows.records() {
        let row = row.unwrap();
        let field = |name: &str| {
            row.get(header.iter().position(|held| held == name).unwrap())
                .unwrap()
        };
        let number = |name: &str| field(name).parse::<f64>().unwrap();
        let whole = |name: &str| field(name).parse::<usize>().unwrap();
        let terms = Terms {
            years: whole("years"),
            discount_rate: number("rate"),
            electricity: Path::Change(number("electricity_change")),
            fuel: Path::Change(number("fuel_change")),
            electricity_carbon: Path::STEADY,
        };
        let outlay = Outlay {
            parts: vec![Part {
                label: "machine".into(),
                amount: number("capital"),
                life_years: whole("life"),
                due_in: whole("due"),
            }],
            grant: number("grant"),
            maintenance: number("maintenance"),
        };
        let running = |electricity, fuel| Running {
            electricity: number(electricity),
            fuel: number(fuel),
            heat_kwh: number("heat"),
            ..Running::default()
        };
        let choice = CashFlow::of(&terms, &outlay, &running("electricity", "fuel"));
        let today = CashFlow::of(
            &terms,
            &Outlay::default(),
            &running("today_electricity", "today_fuel"),
        );
        // The same sums in another order: rounding of doubles.
        let near =
            |a: f64, b: f64| assert!((a - b).abs() <= 1e-9 * b.abs().max(1.0), "{row:?}: {a} {b}");
        near(choice.present_cost(), number("present_value"));
        near(choice.cost_per_kwh_heat().unwrap(), number("levelised"));
        match (payback(&choice, &today), field("payback")) {
            (Payback::Never, "") => {}
            (Payback::AtOnce, "0.0") => {}
            (Payback::After(years), expected) => {
                near(years, expected.parse().unwrap());
                paid_back += 1;
            }
            other => panic!("{row:?}: {other:?}"),
        }
        seen += 1;
    }
    assert!(seen == 40 && paid_back > 5, "{seen} {paid_back}");
}

/// A path of the same change is the same as the change.
#[test]
fn a_given_path_and_a_yearly_change_agree() {
    let running = Running {
        electricity: 900.0,
        ..Running::default()
    };
    let terms = |electricity| Terms {
        years: 15,
        discount_rate: 0.035,
        electricity,
        fuel: Path::STEADY,
        electricity_carbon: Path::STEADY,
    };
    let given = Path::Given((0..15).map(|year| 1.02_f64.powi(year)).collect());
    let cost = |path| CashFlow::of(&terms(path), &Outlay::default(), &running).present_cost();
    assert!((cost(given) - cost(Path::Change(0.02))).abs() < 1e-9);
}

#[test]
fn terms_that_cannot_be_counted_with_are_told_all_at_once() {
    let terms = Terms {
        years: 0,
        discount_rate: -0.6,
        electricity: Path::STEADY,
        fuel: Path::STEADY,
        electricity_carbon: Path::STEADY,
    };
    assert_eq!(terms.check().unwrap_err().len(), 2);
    let short = Terms {
        years: 20,
        discount_rate: 0.0,
        fuel: Path::Given(vec![1.0; 12]),
        ..terms
    };
    let told = short.check().unwrap_err().to_string();
    assert!(
        told.contains("a path of 12 years for a life of 20 years"),
        "{told}"
    );
}
