//! What a system's years came to.

use super::case::Contender;
use super::price::bill;
use crate::bill::Bill;
use crate::lifetime::Running;
use crate::problem::Problems;
use crate::tariff::Reading;
use crate::units::Fuel;
use crate::year::{Sums, Totals};

/// Money of a mean year, in currency units.
#[derive(Debug, Clone, Default, PartialEq)]
pub struct Costs {
    /// Everything.
    pub total: f64,
    /// Energy before tax that is added.
    pub energy: f64,
    /// Standing and demand charges before tax that is added.
    pub standing: f64,
    /// Tax that is added; nothing where every rate holds it already.
    pub tax: Option<f64>,
    /// Of the total, what the electricity bill comes to, tax included.
    pub electricity: f64,
    /// Of the total, what the fuel bill comes to, tax included.
    pub fuel: f64,
    /// Of the electricity bill, the energy before tax that is added.
    pub electricity_energy: f64,
    /// Of the electricity bill, standing and demand charges before tax that is added.
    pub electricity_standing: f64,
    /// Of the fuel bill, the energy before tax that is added.
    pub fuel_energy: f64,
    /// Of the fuel bill, standing and demand charges before tax that is added.
    pub fuel_standing: f64,
    /// Total of each civil month.
    pub months: [f64; 12],
    /// Total of each year of the weather.
    pub by_year: Vec<f64>,
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
    /// Of the carbon, that of the fuel by civil month, kg CO2e.
    pub fuel_carbon_kg: [f64; 12],
    /// Lowest indoor temperature, °C.
    pub min_indoor_c: f64,
    /// Greatest hourly mean of electric power, kW.
    pub peak_electric_kw: f64,
    /// Hours in which backup or immersion heater ran.
    pub hours_backup: u32,
    /// Hours that ended short of heat.
    pub hours_short: u32,
    /// Hours in which hot water came out too cool.
    pub hours_water_short: u32,
    /// Hours in which the machine stood because its source was outside its limits.
    pub hours_stopped: u32,
    /// Hours in which it was turned down so that its source would not fall below its limit.
    pub hours_turned_down: u32,
    /// Lowest temperature of air, brine or water entering the machine, °C; infinite when it never ran.
    pub min_source_c: f64,
}

impl YearOutcome {
    pub(super) fn new(year: i32, totals: &Totals<'_>, fuel_carbon_kg: [f64; 12]) -> Self {
        Self {
            year,
            hours: totals.hours,
            months: totals.months,
            sums: totals.all(),
            fuel_carbon_kg,
            min_indoor_c: totals.min_indoor_c,
            peak_electric_kw: totals.peak_electric_kw,
            hours_backup: totals.hours_backup,
            hours_short: totals.hours_short,
            hours_water_short: totals.hours_water_short,
            hours_stopped: totals.hours_stopped,
            hours_turned_down: totals.hours_turned_down,
            min_source_c: totals.min_source_c,
        }
    }
}

/// All years of a system.
#[derive(Debug, Clone, PartialEq)]
pub struct Outcome {
    /// Year by year.
    pub years: Vec<YearOutcome>,
    /// What the electricity meter read over all years.
    pub electricity: Reading,
    /// What the fuel meter read over all years.
    pub fuel: Option<Reading>,
    /// Money of a mean year.
    pub costs: Costs,
}

impl Outcome {
    /// Mean of a figure over the years.
    pub fn mean(&self, figure: impl Fn(&YearOutcome) -> f64) -> f64 {
        self.years.iter().map(figure).sum::<f64>() / self.years.len() as f64
    }

    /// Carbon of a mean year, kg CO2e.
    pub fn carbon_kg(&self) -> f64 {
        self.mean(|year| year.sums.carbon_kg)
    }

    /// What it uses in a mean year, for the years of its life. Heat is that to the rooms and at the taps, which is the same for
    /// every system of a home.
    pub fn running(&self) -> Running {
        let fuel_carbon_kg = self.mean(|year| year.fuel_carbon_kg.iter().sum());
        Running {
            electricity: self.costs.electricity,
            fuel: self.costs.fuel,
            electricity_carbon_kg: self.carbon_kg() - fuel_carbon_kg,
            fuel_carbon_kg,
            heat_kwh: self.mean(|year| year.sums.space_heat_kwh() + year.sums.water_drawn_kwh),
        }
    }

    /// The same years with the carbon of electricity multiplied.
    pub(super) fn with_electricity_carbon_times(mut self, factor: f64) -> Self {
        for year in &mut self.years {
            let fuels = year.fuel_carbon_kg;
            for (month, fuel) in year.months.iter_mut().zip(fuels) {
                month.carbon_kg = (month.carbon_kg - fuel) * factor + fuel;
            }
            let fuel: f64 = fuels.iter().sum();
            year.sums.carbon_kg = (year.sums.carbon_kg - fuel) * factor + fuel;
        }
        self
    }

    /// Sums of a mean year.
    pub fn mean_sums(&self) -> Sums {
        let mut mean = Sums::default();
        for year in &self.years {
            mean.add_scaled(&year.sums, 1.0 / self.years.len() as f64);
        }
        mean
    }

    /// Sums of a civil month of a mean year.
    pub fn mean_month(&self, month0: usize) -> Sums {
        let mut mean = Sums::default();
        for year in &self.years {
            mean.add_scaled(&year.months[month0], 1.0 / self.years.len() as f64);
        }
        mean
    }
}

/// The bills of one account over all years.
#[derive(Debug, Clone, PartialEq)]
pub struct AccountBill {
    /// What people call the tariff.
    pub tariff: String,
    /// What it sells.
    pub fuel: Fuel,
    /// Every line, by period.
    pub bill: Bill,
}

/// What a household would find in its letter box: the bills of every account of a system.
///
/// # Errors
/// When a reading is not a number or below 0.
pub fn bills(contender: &Contender, outcome: &Outcome) -> Result<Vec<AccountBill>, Problems> {
    let heating = [
        (Some(&contender.electricity), Some(&outcome.electricity)),
        (contender.fuel.as_ref(), outcome.fuel.as_ref()),
    ];
    let heating = heating
        .into_iter()
        .filter_map(|(account, reading)| account.zip(reading));
    let beside = contender
        .beside
        .iter()
        .map(|beside| (&beside.account, &beside.reading));
    heating
        .chain(beside)
        .map(|(account, reading)| {
            Ok(AccountBill {
                tariff: account.tariff.label.clone(),
                fuel: account.tariff.fuel,
                bill: bill(contender, account, reading)?,
            })
        })
        .collect()
}
