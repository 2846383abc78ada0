//! What a system's years came to.

use rust_decimal::prelude::ToPrimitive;

use super::case::{Account, Contender};
use crate::bill::{Bill, price_reading};
use crate::problem::Problems;
use crate::tariff::Reading;
use crate::year::{Sums, Totals};

/// Money of a year, in currency units.
#[derive(Debug, Clone, Copy, Default, PartialEq)]
pub struct Costs {
    /// Everything.
    pub total: f64,
    /// Energy before tax that is added.
    pub energy: f64,
    /// Standing and demand charges before tax that is added.
    pub standing: f64,
    /// Tax that is added.
    pub tax: f64,
    /// Total of each civil month.
    pub months: [f64; 12],
}

/// One year of a system.
#[derive(Debug, Clone, PartialEq)]
pub struct YearOutcome {
    /// Year of the weather.
    pub year: i32,
    /// Hours of it.
    pub hours: u32,
    /// Sums by civil month.
    pub months: [Sums; 12],
    /// Sums of the year.
    pub sums: Sums,
    /// Money.
    pub costs: Costs,
    /// What the electricity meter read.
    pub electricity: Reading,
    /// What the fuel meter read.
    pub fuel: Option<Reading>,
    /// Lowest indoor temperature, °C.
    pub min_indoor_c: f64,
    /// Greatest hourly mean of electric power, kW.
    pub peak_electric_kw: f64,
    /// Hours in which backup or immersion heater ran.
    pub hours_backup: u32,
    /// Hours that ended short of heat.
    pub hours_short: u32,
}

impl YearOutcome {
    pub(super) fn new(year: i32, totals: &Totals<'_>, costs: Costs) -> Self {
        Self {
            year,
            hours: totals.hours,
            months: totals.months,
            sums: totals.all(),
            costs,
            electricity: totals.electricity.clone(),
            fuel: totals.fuel.clone(),
            min_indoor_c: totals.min_indoor_c,
            peak_electric_kw: totals.peak_electric_kw,
            hours_backup: totals.hours_backup,
            hours_short: totals.hours_short,
        }
    }
}

/// All years of a system.
#[derive(Debug, Clone, PartialEq)]
pub struct Outcome {
    /// Year by year.
    pub years: Vec<YearOutcome>,
}

impl Outcome {
    /// Mean of a figure over the years.
    pub fn mean(&self, figure: impl Fn(&YearOutcome) -> f64) -> f64 {
        self.years.iter().map(figure).sum::<f64>() / self.years.len() as f64
    }

    /// Sums of a mean year.
    pub fn mean_sums(&self) -> Sums {
        let mut mean = Sums::default();
        for year in &self.years {
            mean.add_scaled(&year.sums, 1.0 / self.years.len() as f64);
        }
        mean
    }

    /// Cost of a mean year.
    pub fn cost(&self) -> f64 {
        self.mean(|year| year.costs.total)
    }
}

/// What the readings of a year cost under a contender's tariffs.
pub(super) fn costs_of(contender: &Contender, totals: &Totals<'_>) -> Result<Costs, Problems> {
    price(contender, &totals.electricity, totals.fuel.as_ref())
}

/// Prices readings under a contender's tariffs.
pub(super) fn price(
    contender: &Contender,
    electricity: &Reading,
    fuel: Option<&Reading>,
) -> Result<Costs, Problems> {
    let mut costs = Costs::default();
    add(&mut costs, &bill(contender, &contender.electricity, electricity)?);
    if let (Some(account), Some(reading)) = (&contender.fuel, fuel) {
        add(&mut costs, &bill(contender, account, reading)?);
    }
    Ok(costs)
}

fn bill(contender: &Contender, account: &Account, reading: &Reading) -> Result<Bill, Problems> {
    price_reading(&account.tariff, &account.meter, reading, contender.connection())
}

fn add(costs: &mut Costs, bill: &Bill) {
    // Decimal amounts of a household are far inside what an f64 holds exactly to the cent.
    let number = |amount: rust_decimal::Decimal| amount.to_f64().unwrap_or(f64::NAN);
    costs.total += number(bill.total());
    costs.energy += number(bill.energy());
    costs.standing += number(bill.standing() + bill.demand());
    costs.tax += bill.tax().map_or(0.0, number);
    for month in &bill.months {
        costs.months[month.month0] += number(month.amount);
    }
}
