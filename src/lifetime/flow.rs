//! The years of a system laid out, and what they are worth today.

use super::outlay::Outlay;
use super::terms::Terms;

/// What a system uses in a year at today's prices.
#[derive(Debug, Clone, Copy, Default, PartialEq)]
pub struct Running {
    /// Electricity bill.
    pub electricity: f64,
    /// Fuel bill.
    pub fuel: f64,
    /// Carbon of electricity, kg CO2e.
    pub electricity_carbon_kg: f64,
    /// Carbon of fuel, kg CO2e.
    pub fuel_carbon_kg: f64,
    /// Heat that reaches rooms and taps, kWh.
    pub heat_kwh: f64,
}

impl Running {
    /// The same in another year, known by what a system of its kind uses in that year and in the one that this is: everything in
    /// proportion.
    #[must_use]
    pub fn as_in(&self, other: &Self, this: &Self) -> Self {
        // What is not used in one year is not used in another.
        let times = |own: f64, other: f64, this: f64| {
            if this == 0.0 { own } else { own * other / this }
        };
        Self {
            electricity: times(self.electricity, other.electricity, this.electricity),
            fuel: times(self.fuel, other.fuel, this.fuel),
            electricity_carbon_kg: times(
                self.electricity_carbon_kg,
                other.electricity_carbon_kg,
                this.electricity_carbon_kg,
            ),
            fuel_carbon_kg: times(
                self.fuel_carbon_kg,
                other.fuel_carbon_kg,
                this.fuel_carbon_kg,
            ),
            heat_kwh: times(self.heat_kwh, other.heat_kwh, this.heat_kwh),
        }
    }
}

/// What is paid at the end of one year; year 0 is today.
#[derive(Debug, Clone, Copy, Default, PartialEq)]
pub struct YearFlow {
    /// Year from 0.
    pub year: usize,
    /// Parts that are bought.
    pub capital: f64,
    /// Grant, a positive amount that comes in.
    pub grant: f64,
    /// What the parts are still worth at the end of the last year, a positive amount that comes in.
    pub left: f64,
    /// Maintenance.
    pub maintenance: f64,
    /// Electricity bill.
    pub electricity: f64,
    /// Fuel bill.
    pub fuel: f64,
    /// What all of it is multiplied by to be worth the same today.
    pub discount: f64,
    /// Carbon, kg CO2e.
    pub carbon_kg: f64,
    /// Heat, kWh.
    pub heat_kwh: f64,
}

impl YearFlow {
    /// What is paid in the year, before what is left at the end.
    pub fn spent(&self) -> f64 {
        self.capital - self.grant + self.maintenance + self.electricity + self.fuel
    }
}

/// The years of one system.
#[derive(Debug, Clone, PartialEq)]
pub struct CashFlow {
    /// Year 0 to the last.
    pub years: Vec<YearFlow>,
}

impl CashFlow {
    /// Lays out the years, all alike. Beyond the end of a given price path its last value holds; [`Terms::check`] refuses such terms.
    pub fn of(terms: &Terms, outlay: &Outlay, running: &Running) -> Self {
        Self::by_year(terms, outlay, |_| *running)
    }

    /// The same where each year (from 1) has figures of its own, such as those of a loop whose ground cools.
    pub fn by_year(terms: &Terms, outlay: &Outlay, running_in: impl Fn(usize) -> Running) -> Self {
        let last = terms.years;
        let mut held = [1.0; 3];
        let years = (0..=last).map(|year| {
            let capital = outlay
                .parts
                .iter()
                .filter(|part| part.is_bought(year, last))
                .fold(0.0, |sum, part| sum + part.amount);
            let mut flow = YearFlow {
                year,
                capital,
                discount: terms.discount(year),
                ..YearFlow::default()
            };
            if year == 0 {
                flow.grant = outlay.grant;
                return flow;
            }
            let paths = [&terms.electricity, &terms.fuel, &terms.electricity_carbon];
            for (held, path) in held.iter_mut().zip(paths) {
                *held = path.at(year).unwrap_or(*held);
            }
            let running = running_in(year);
            flow.maintenance = outlay.maintenance;
            flow.electricity = running.electricity * held[0];
            flow.fuel = running.fuel * held[1];
            flow.carbon_kg = running.electricity_carbon_kg * held[2] + running.fuel_carbon_kg;
            flow.heat_kwh = running.heat_kwh;
            if year == last {
                flow.left = outlay.parts.iter().map(|part| part.left_after(last)).sum();
            }
            flow
        });
        Self {
            years: years.collect(),
        }
    }

    /// Everything that is paid less what is left at the end, in today's worth: the net present value of the spending.
    pub fn present_cost(&self) -> f64 {
        let worth = |flow: &YearFlow| (flow.spent() - flow.left) * flow.discount;
        self.years.iter().map(worth).sum()
    }

    /// Spent so far at the end of each year, in today's worth, before what is left.
    pub fn spent_so_far(&self) -> Vec<f64> {
        let mut so_far = 0.0;
        let add = |flow: &YearFlow| {
            so_far += flow.spent() * flow.discount;
            so_far
        };
        self.years.iter().map(add).collect()
    }

    /// Present cost over the present worth of the heat: the levelised cost of a kilowatt-hour of heat.
    /// Nothing when there is no heat.
    pub fn cost_per_kwh_heat(&self) -> Option<f64> {
        let heat: f64 = self
            .years
            .iter()
            .map(|flow| flow.heat_kwh * flow.discount)
            .sum();
        (heat > 0.0).then(|| self.present_cost() / heat)
    }

    /// Carbon of all years, kg CO2e.
    pub fn carbon_kg(&self) -> f64 {
        self.years.iter().map(|flow| flow.carbon_kg).sum()
    }
}

/// When a choice has paid for itself, in today's worth.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum Payback {
    /// It costs no more from the beginning.
    AtOnce,
    /// After so many years, straight within the year.
    After(f64),
    /// Not within the years counted.
    Never,
}

/// When the discounted spending of a choice first falls to that of today's system. Parts bought again later may part the two
/// once more; the picture of the spending shows that.
pub fn payback(choice: &CashFlow, today: &CashFlow) -> Payback {
    let gap: Vec<f64> = choice
        .spent_so_far()
        .iter()
        .zip(today.spent_so_far())
        .map(|(choice, today)| choice - today)
        .collect();
    if gap.first().is_some_and(|gap| *gap <= 0.0) {
        return Payback::AtOnce;
    }
    let met = gap.windows(2).enumerate().find(|(_, pair)| pair[1] <= 0.0);
    met.map_or(Payback::Never, |(year, pair)| {
        Payback::After(year as f64 + pair[0] / (pair[0] - pair[1]))
    })
}

#[cfg(test)]
mod tests {
    use super::super::outlay::Part;
    use super::super::path::Path;
    use super::*;
    use proptest::prelude::*;

    fn terms(years: usize, discount_rate: f64) -> Terms {
        Terms {
            years,
            discount_rate,
            electricity: Path::STEADY,
            fuel: Path::STEADY,
            electricity_carbon: Path::STEADY,
        }
    }

    fn outlay(amount: f64, life_years: usize) -> Outlay {
        let label = "machine".to_owned();
        Outlay {
            parts: vec![Part {
                label,
                amount,
                life_years,
                due_in: 0,
            }],
            ..Outlay::default()
        }
    }

    fn bill(electricity: f64) -> Running {
        Running {
            electricity,
            heat_kwh: 10_000.0,
            ..Running::default()
        }
    }

    /// The present worth of an annuity is known in closed form: `a (1 − (1+r)^−n)/r`.
    #[test]
    fn an_even_bill_is_worth_its_annuity() {
        let flow = CashFlow::of(&terms(20, 0.035), &Outlay::default(), &bill(1000.0));
        let annuity = 1000.0 * (1.0 - 1.035_f64.powi(-20)) / 0.035;
        assert!((flow.present_cost() - annuity).abs() < 1e-9 * annuity);
        // An even bill over even heat costs the same a kilowatt-hour whatever the rate.
        assert!(
            flow.cost_per_kwh_heat()
                .is_some_and(|cost| (cost - 0.1).abs() < 1e-12)
        );
    }

    #[test]
    fn without_discount_payback_is_capital_over_saving() {
        let terms = terms(20, 0.0);
        let today = CashFlow::of(&terms, &Outlay::default(), &bill(1400.0));
        let choice =
            |capital, bill_of_it| CashFlow::of(&terms, &outlay(capital, 20), &bill(bill_of_it));
        assert!(
            matches!(payback(&choice(5000.0, 900.0), &today), Payback::After(years) if (years - 10.0).abs() < 1e-9)
        );
        assert_eq!(payback(&choice(5000.0, 1200.0), &today), Payback::Never);
        assert_eq!(payback(&choice(0.0, 1300.0), &today), Payback::AtOnce);
    }

    proptest! {
        #[test]
        fn what_is_put_in_never_falls_with_the_rate_of_buying(amount in 0.0..20_000.0, life in 1_usize..40, years in 1_usize..40) {
            let flow = CashFlow::of(&terms(years, 0.0), &outlay(amount, life), &Running::default());
            // Without discount, buying less what is left is straight-line wear over the years.
            let wear = amount * years as f64 / life as f64;
            prop_assert!((flow.present_cost() - wear).abs() < 1e-6);
        }
    }
}
