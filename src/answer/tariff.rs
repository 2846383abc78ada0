//! What `tariff` answers: the bill of a load.

use rust_decimal::Decimal;
use rust_decimal::prelude::ToPrimitive;
use serde::Serialize;

use crate::bill::{Bill, Line};
use crate::problem::Finding;
use crate::tariff::Tariff;

/// The bill of a load under a tariff. Amounts are in the currency's main unit.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct TariffAnswer {
    /// What people call the tariff.
    pub label: String,
    /// What it sells.
    pub fuel: String,
    /// ISO 4217 code.
    pub currency: String,
    /// What was priced.
    pub load: LoadAnswer,
    /// Everything to pay.
    pub total: f64,
    /// Energy, before tax that is added.
    pub energy: f64,
    /// Standing charge, before tax that is added.
    pub standing: f64,
    /// Demand charge, before tax that is added; absent when the tariff has none.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub demand: Option<f64>,
    /// Tax that is added; absent when the rates hold it.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub tax: Option<f64>,
    /// Every line.
    pub lines: Vec<LineAnswer>,
    /// What each month costs; the months add up to the total.
    pub monthly: Vec<MonthAnswer>,
    /// What was odd.
    pub findings: Vec<Finding>,
}

/// The load that was priced.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct LoadAnswer {
    /// Its energy.
    pub kwh: f64,
    /// Its hours.
    pub hours: usize,
    /// Where it comes from: a file, or `the same every hour`.
    pub from: String,
}

/// One line of a bill.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct LineAnswer {
    /// The bill it stands on, such as `2026` or `2026-01`.
    pub period: String,
    /// What it is called.
    pub what: String,
    /// How much.
    pub quantity: f64,
    /// Of what.
    pub unit: String,
    /// Currency units for one; a share for tax.
    pub rate: f64,
    /// To pay, rounded.
    pub amount: f64,
}

/// What one month costs.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct MonthAnswer {
    /// Such as `2026-01`.
    pub month: String,
    /// Tax and standing charge included.
    pub cost: f64,
}

/// A decimal as the nearest number that JSON can carry.
fn number(decimal: Decimal) -> f64 {
    decimal.to_f64().unwrap_or(f64::NAN)
}

impl TariffAnswer {
    /// The answer of a bill.
    pub fn new(tariff: &Tariff, load: LoadAnswer, bill: &Bill, findings: Vec<Finding>) -> Self {
        let has_demand = tariff.prices.iter().any(|prices| prices.demand.is_some());
        Self {
            label: tariff.label.clone(),
            fuel: tariff.fuel.name().to_owned(),
            currency: tariff.currency.code().to_owned(),
            load,
            total: number(bill.total()),
            energy: number(bill.energy()),
            standing: number(bill.standing()),
            demand: has_demand.then(|| number(bill.demand())),
            tax: bill.tax().map(number),
            lines: bill.lines.iter().map(LineAnswer::from).collect(),
            monthly: bill
                .months
                .iter()
                .map(|month| MonthAnswer {
                    month: format!("{}-{:02}", month.year, month.month0 + 1),
                    cost: number(month.amount),
                })
                .collect(),
            findings,
        }
    }
}

impl From<&Line> for LineAnswer {
    fn from(line: &Line) -> Self {
        Self {
            period: line.period.to_string(),
            what: line.what.clone(),
            quantity: number(line.quantity),
            unit: line.unit.clone(),
            rate: number(line.rate),
            amount: number(line.amount),
        }
    }
}
