//! Present value, levelised cost and payback against numpy-financial (`tests/reference/lifetime.py`).

use winterledger::lifetime::{CashFlow, Outlay, Part, Path, Payback, Running, Terms, payback};

use crate::table::{Row, Worst, number, reference};

/// Columns of the table, by their place.
const COLUMNS: [&str; 17] = [
    "years",
    "rate",
    "capital",
    "life",
    "due",
    "maintenance",
    "grant",
    "electricity",
    "fuel",
    "electricity_change",
    "fuel_change",
    "heat",
    "today_electricity",
    "today_fuel",
    "present_value",
    "levelised",
    "payback",
];

pub fn rows() -> Vec<Row> {
    let worst = || Worst::relative(1e-9);
    let (mut present, mut levelised, mut years) = (worst(), worst(), Worst::absolute(1e-8));
    let mut same_kind = 0;
    let table = reference("lifetime.csv");
    for row in &table {
        let text = |name: &str| &row[COLUMNS.iter().position(|held| *held == name).unwrap()];
        let value = |name: &str| number(text(name));
        let terms = Terms {
            years: value("years") as usize,
            discount_rate: value("rate"),
            electricity: Path::Change(value("electricity_change")),
            fuel: Path::Change(value("fuel_change")),
            electricity_carbon: Path::STEADY,
        };
        let outlay = Outlay {
            parts: vec![Part {
                label: "machine".into(),
                amount: value("capital"),
                life_years: value("life") as usize,
                due_in: value("due") as usize,
            }],
            grant: value("grant"),
            maintenance: value("maintenance"),
        };
        let running = |electricity, fuel| Running {
            electricity: value(electricity),
            fuel: value(fuel),
            heat_kwh: value("heat"),
            ..Running::default()
        };
        let choice = CashFlow::of(&terms, &outlay, &running("electricity", "fuel"));
        let kept = running("today_electricity", "today_fuel");
        let today = CashFlow::of(&terms, &Outlay::default(), &kept);
        present.see(value("present_value"), choice.present_cost());
        levelised.see(value("levelised"), choice.cost_per_kwh_heat().unwrap());
        same_kind += match (payback(&choice, &today), text("payback").as_str()) {
            (Payback::Never, "") | (Payback::AtOnce, "0.0") => 1,
            (Payback::After(found), told) if !told.is_empty() => {
                years.see(number(told), found);
                1
            }
            _ => 0,
        };
    }
    let source = "numpy-financial 1.0.0";
    vec![
        present.row("Present cost", source, 40, "the same sums in another order"),
        levelised.row(
            "Cost of a kWh of heat",
            source,
            40,
            "the same sums in another order",
        ),
        years.row(
            "Payback, years",
            source,
            5,
            "the same sums in another order",
        ),
        Row::new(
            "Cases that agree on paying back at once, later or never",
            source,
            40.0,
            f64::from(same_kind),
            0.0,
            "a count",
        ),
    ]
}
