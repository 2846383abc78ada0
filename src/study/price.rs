//! From readings to the costs of a mean year and of each year of the weather.

use rust_decimal::Decimal;
use rust_decimal::prelude::ToPrimitive;

use super::case::{Account, Beside, Contender};
use super::month_shares::MonthShares;
use super::outcome::Costs;
use crate::bill::{Bill, Charge, Line, Period, price_reading};
use crate::problem::Problems;
use crate::tariff::Reading;
use crate::units::Fuel;
use crate::year::Site;

/// Prices readings under a contender's tariffs; `only` is the place of the one year they are of, nothing for all years.
///
/// # Errors
/// When a reading is not a number or below 0.
pub(super) fn price(
    site: &Site,
    only: Option<usize>,
    contender: &Contender,
    electricity: &Reading,
    fuel: Option<&Reading>,
) -> Result<Costs, Problems> {
    let years = only.map_or(site.years.len(), |_| 1);
    let counting = Counting {
        shares: MonthShares::of(site),
        only,
        years: years as f64,
    };
    let mut costs = Costs {
        by_year: vec![0.0; years],
        ..Costs::default()
    };
    let electricity = bill(contender, &contender.electricity, electricity)?;
    counting.add(&mut costs, Fuel::Electricity, &electricity);
    if let (Some(account), Some(reading)) = (&contender.fuel, fuel) {
        let fuel = bill(contender, account, reading)?;
        counting.add(&mut costs, account.tariff.fuel, &fuel);
    }
    for Beside { account, reading } in &contender.beside {
        let bill = bill(contender, account, reading)?;
        counting.add(&mut costs, account.tariff.fuel, &bill);
    }
    Ok(costs)
}

/// The bill of a reading of one account.
///
/// # Errors
/// When the reading is not a number or below 0.
pub(super) fn bill(
    contender: &Contender,
    account: &Account,
    reading: &Reading,
) -> Result<Bill, Problems> {
    price_reading(
        &account.tariff,
        &account.meter,
        reading,
        contender.connection(),
    )
}

/// Decimal amounts of a household are far inside what an `f64` holds exactly to the cent.
fn number(amount: Decimal) -> f64 {
    amount.to_f64().unwrap_or(f64::NAN)
}

/// From bills over all years to the costs of a mean year, or of the only one.
struct Counting {
    shares: MonthShares,
    only: Option<usize>,
    years: f64,
}

impl Counting {
    /// Adds a bill.
    fn add(&self, costs: &mut Costs, fuel: Fuel, bill: &Bill) {
        // Energy less what is paid for energy fed back.
        let energy = self.mean(bill, |charge| {
            matches!(charge, Charge::Energy | Charge::Export)
        });
        let standing = self.mean(bill, |charge| {
            matches!(charge, Charge::Standing | Charge::Demand)
        });
        let tax = bill
            .tax()
            .map(|_| self.mean(bill, |charge| charge == Charge::Tax));
        let total = self.mean(bill, |_| true);
        costs.total += total;
        costs.energy += energy;
        costs.standing += standing;
        if let Some(tax) = tax {
            *costs.tax.get_or_insert(0.0) += tax;
        }
        if fuel == Fuel::Electricity {
            costs.electricity += total;
            costs.electricity_energy += energy;
            costs.electricity_standing += standing;
        } else {
            costs.fuel += total;
            costs.fuel_energy += energy;
            costs.fuel_standing += standing;
        }
        match self.only {
            None => self.add_months(costs, bill),
            Some(place) => {
                costs.by_year[0] += total;
                self.add_months_of(costs, bill, place, total);
            }
        }
    }

    fn add_months(&self, costs: &mut Costs, bill: &Bill) {
        for month in &bill.months {
            let amount = number(month.amount);
            costs.months[month.month0] += amount / self.years;
            let months = month.month0..month.month0 + 1;
            let shares = self.shares.shares(month.year, months);
            for (year, share) in costs.by_year.iter_mut().zip(shares) {
                *year += amount * share;
            }
        }
    }

    /// The months of one year, brought to its total: in a month that it shares with another year the reading is its own already.
    fn add_months_of(&self, costs: &mut Costs, bill: &Bill, place: usize, total: f64) {
        let parts = bill.months.iter().map(|month| {
            let months = month.month0..month.month0 + 1;
            let share = self.shares.shares(month.year, months)[place];
            (month.month0, number(month.amount) * share)
        });
        let parts: Vec<(usize, f64)> = parts.collect();
        let sum: f64 = parts.iter().map(|(_, amount)| amount).sum();
        let scale = if sum == 0.0 { 0.0 } else { total / sum };
        for (month0, amount) in parts {
            costs.months[month0] += amount * scale;
        }
    }

    /// Lines of some kinds in a mean year, or in the only year.
    ///
    /// A reading of one year holds its own energy only, so energy counts in full; what runs by time is shared by time, and tax
    /// follows what it is put on.
    fn mean(&self, bill: &Bill, holds: impl Fn(Charge) -> bool) -> f64 {
        let Some(place) = self.only else {
            return number(bill.sum(holds)) / self.years;
        };
        let share_of =
            |Period { year, month0, span }| self.shares.shares(year, span.months(month0))[place];
        let own = |line: &Line| match line.charge {
            Charge::Energy | Charge::Export => number(line.amount),
            _ => number(line.amount) * share_of(line.period),
        };
        let taxed = |period| {
            let mine = move |line: &&Line| line.period == period && line.charge != Charge::Tax;
            bill.lines.iter().filter(mine)
        };
        let lines = bill.lines.iter().filter(|line| holds(line.charge));
        lines
            .map(|line| {
                if line.charge != Charge::Tax {
                    return own(line);
                }
                let all: f64 = taxed(line.period).map(|line| number(line.amount)).sum();
                let of_year: f64 = taxed(line.period).map(own).sum();
                if all == 0.0 {
                    0.0
                } else {
                    number(line.amount) * of_year / all
                }
            })
            .sum()
    }
}
