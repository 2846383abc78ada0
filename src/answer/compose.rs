//! From cases and outcomes to the estimate.

use std::collections::BTreeMap;

use super::account::{bill_answers, meter_answers, shifting_answer, signal_gap};
use super::estimate::{
    Assumption, Estimate, HomeUsed, LeverAnswer, MonthAnswer, SystemAnswer, WeatherUsed, YearAnswer,
};
use crate::problem::{Finding, Problems, Severity};
use crate::source::Memory;
use crate::study::{
    BalancePoint, BreakEven, Case, Contender, Lever, Outcome, balance_point, break_even,
};
use crate::units::Fuel;
use crate::year::Heating;

/// What an estimate tells beside the figures of its case.
#[derive(Debug, Clone, Default)]
pub struct Told {
    /// What the home is called.
    pub home_label: Option<String>,
    /// Weather file as the brief names it.
    pub weather_file: String,
    /// What the carbon factors count.
    pub carbon_scope: Option<String>,
    /// What was assumed.
    pub assumptions: Vec<Assumption>,
    /// What was found while reading.
    pub findings: Vec<Finding>,
    /// The machine of each contender, in their order.
    pub machines: Vec<Option<String>>,
}

/// Years over which refrigerant that escapes at the end of a machine's life is spread. Common practice, no source.
const LEAKAGE_LIFE_YEARS: f64 = 15.0;

impl Estimate {
    /// The same estimate with the bills of every system.
    ///
    /// # Errors
    /// When a reading cannot be priced.
    pub fn with_bills(mut self, case: &Case, outcomes: &[Outcome]) -> Result<Self, Problems> {
        for ((system, contender), outcome) in
            self.systems.iter_mut().zip(&case.contenders).zip(outcomes)
        {
            system.bills = Some(bill_answers(contender, outcome)?);
        }
        Ok(self)
    }
}

/// Makes the estimate.
///
/// # Errors
/// When a case cannot be run with a lever moved.
pub fn compose(case: &Case, outcomes: &[Outcome], told: &Told) -> Result<Estimate, Problems> {
    let mut findings = told.findings.clone();
    findings.extend(cool_stores(case));
    let mut systems = Vec::with_capacity(outcomes.len());
    let mut break_evens = BTreeMap::new();
    for (i, (contender, outcome)) in case.contenders.iter().zip(outcomes).enumerate() {
        let mut system = system(
            contender,
            outcome,
            outcomes,
            told.machines.get(i).cloned().flatten(),
        );
        system.shifting = shifting_answer(case, contender)?;
        findings.extend(signal_gap(contender, outcome)?);
        findings.extend(left_cold(&system));
        if i > 0 {
            let levers = [
                Lever::ElectricityRate,
                Lever::FuelRate,
                Lever::FlowTemperature,
            ];
            let mut answers = Vec::new();
            for lever in levers {
                if let Some(found) = break_even(case, outcomes, i, lever)? {
                    answers.push(lever_answer(&found, &system.label));
                }
            }
            break_evens.insert(system.label.clone(), answers);
        }
        systems.push(system);
    }
    let site = &case.site;
    let today = &case.contenders[0];
    let fabric = &today.system.home.fabric;
    Ok(Estimate {
        weather: WeatherUsed {
            file: told.weather_file.clone(),
            hours: site.outdoor_c.len(),
            years: site.years.len(),
            mean_c: site.outdoor_c.iter().sum::<f64>() / site.outdoor_c.len() as f64,
            min_c: site.outdoor_c.iter().copied().fold(f64::INFINITY, f64::min),
            repaired_hours: site.repaired.iter().filter(|&&repaired| repaired).count(),
        },
        home: HomeUsed {
            label: told.home_label.clone(),
            heat_loss_w_per_k: fabric.heat_loss_w_per_k(),
            design_outdoor_c: today.design_outdoor_c,
            design_heat_load_kw: fabric.design_load_kw(today.indoor_c, today.design_outdoor_c),
        },
        systems,
        break_even: break_evens,
        currency: case.currency.code().to_owned(),
        carbon_scope: told.carbon_scope.clone(),
        assumptions: told.assumptions.clone(),
        findings,
    })
}

fn system(
    contender: &Contender,
    outcome: &Outcome,
    all: &[Outcome],
    machine: Option<String>,
) -> SystemAnswer {
    let sums = outcome.mean_sums();
    let heating = &contender.system.heating;
    let is_machine = heating.machine().is_some();
    let burns_fuel = heating.boiler().is_some();
    let ground = contender
        .aged
        .map_or_else(Memory::default, |aged| aged.memory);
    let balance = |with_hot_water| {
        let machine = heating.machine()?;
        balance_point(
            &contender.system,
            machine,
            contender.indoor_c,
            with_hot_water,
            ground,
        )
    };
    let balance_points = (balance(false), balance(true));
    let today = &all[0];
    let compared = |mine: f64, todays: f64| (!contender.today).then_some(todays - mine);
    let costs = &outcome.costs;
    let years = outcome.years.len() as f64;
    let household = &contender.household;
    let accounted = household.used_kwh.is_some() || household.made_kwh.is_some();
    let beside = contender
        .beside
        .iter()
        .filter(|beside| beside.account.tariff.fuel == Fuel::Electricity);
    let readings =
        std::iter::once(&outcome.electricity).chain(beside.map(|beside| &beside.reading));
    let (bought_kwh, fed_back_kwh) = readings.fold((0.0, 0.0), |(bought, fed), reading| {
        (
            bought + reading.import_kwh.iter().sum::<f64>() / years,
            fed + reading.export_kwh.iter().sum::<f64>() / years,
        )
    });
    SystemAnswer {
        label: contender.system.label.clone(),
        kind: contender.kind.to_owned(),
        today: contender.today,
        machine,
        space_heat_kwh: sums.space_heat_kwh(),
        hot_water_kwh: sums.water_heat_kwh(),
        delivered_kwh: sums.space_heat_kwh() + sums.water_drawn_kwh,
        electricity_kwh: sums.electricity_kwh(),
        backup_kwh: is_machine.then_some(sums.backup_kwh + sums.immersion_kwh),
        fuel_kwh: burns_fuel.then_some(sums.fuel_kwh),
        fuel: heating.boiler().map(|boiler| boiler.fuel.name().to_owned()),
        hybrid: match heating {
            Heating::Hybrid(hybrid) => Some(hybrid.rule.word().to_owned()),
            _ => None,
        },
        boiler_heat_kwh: (is_machine && burns_fuel)
            .then_some(sums.heater_space_kwh + sums.heater_water_kwh),
        household_kwh: household
            .used_kwh
            .as_ref()
            .map(|column| column.iter().sum::<f64>() / years),
        bought_kwh: accounted.then_some(bought_kwh),
        fed_back_kwh: household.made_kwh.is_some().then_some(fed_back_kwh),
        spf_h1: sums.spf_h1(),
        spf_h2: sums.spf_h2(),
        spf_h3: sums.spf_h3(),
        spf_h4: sums.spf_h4(),
        seasonal_efficiency: sums.fuel_efficiency(),
        balance_point_c: balance_points.0.and_then(BalancePoint::c),
        balance_point_with_hot_water_c: balance_points.1.and_then(BalancePoint::c),
        balance_point: balance_points.0.map(balance_words),
        peak_electric_kw: outcome
            .years
            .iter()
            .map(|year| year.peak_electric_kw)
            .fold(0.0, f64::max),
        hours_backup: outcome.mean(|year| f64::from(year.hours_backup)),
        hours_short: outcome.mean(|year| f64::from(year.hours_short)),
        min_indoor_c: outcome
            .years
            .iter()
            .map(|year| year.min_indoor_c)
            .fold(f64::INFINITY, f64::min),
        starts: is_machine.then_some(sums.starts),
        cost: costs.total,
        cost_energy: costs.energy,
        cost_standing: costs.standing,
        cost_tax: costs.tax,
        carbon_kg: sums.carbon_kg,
        refrigerant_kg: contender
            .leakage
            .map(|leakage| leakage.kg_per_year(LEAKAGE_LIFE_YEARS)),
        saving: compared(costs.total, today.costs.total),
        carbon_saving_kg: compared(sums.carbon_kg, today.mean_sums().carbon_kg),
        capital: contender.capital,
        monthly: (0..12)
            .map(|month0| {
                let month = outcome.mean_month(month0);
                MonthAnswer {
                    heat_kwh: month.space_heat_kwh() + month.water_heat_kwh(),
                    electricity_kwh: month.electricity_kwh(),
                    fuel_kwh: burns_fuel.then_some(month.fuel_kwh),
                    cost: costs.months[month0],
                }
            })
            .collect(),
        by_year: outcome
            .years
            .iter()
            .zip(&costs.by_year)
            .map(|(year, &cost)| YearAnswer {
                year: year.year,
                cost,
                spf_h4: year.sums.spf_h4(),
            })
            .collect(),
        shifting: None,
        meters: meter_answers(contender, outcome),
        bills: None,
    }
}

fn balance_words(point: BalancePoint) -> String {
    match point {
        BalancePoint::At(c) => format!("{c:.1} °C"),
        BalancePoint::BelowRange(c) => format!("below {c:.0} °C"),
        BalancePoint::AboveRange(c) => {
            format!("above {c:.0} °C: the machine never carries the load")
        }
    }
}

/// Rooms that a system leaves cold.
fn left_cold(system: &SystemAnswer) -> Option<Finding> {
    (system.hours_short >= 0.5).then(|| {
        Finding::new(
            Severity::Caution,
            format!(
                "\"{}\" leaves the rooms more than 1 K below the set point in {:.0} hours a year, down to {:.1} °C",
                system.label, system.hours_short, system.min_indoor_c
            ),
            "a larger machine, backup heat or larger emitters would be needed; size from a room-by-room heat-loss calculation by a competent person",
        )
    })
}

/// Stored hot water below the temperature of UK HSE guidance: 60 °C in the store, at the taps no less than 50 °C within a minute.
fn cool_stores(case: &Case) -> Option<Finding> {
    const HYGIENE_C: f64 = 60.0;
    let cool: Vec<_> = case
        .contenders
        .iter()
        .filter(|contender| {
            let store = contender
                .system
                .home
                .hot_water
                .as_ref()
                .and_then(|water| water.store);
            store.is_some_and(|store| store.set_point_c < HYGIENE_C)
        })
        .map(|contender| format!("\"{}\"", contender.system.label))
        .collect();
    (!cool.is_empty()).then(|| {
        Finding::new(
            Severity::Caution,
            format!("hot water is stored below {HYGIENE_C:.0} °C by {}", cool.join(", ")),
            "legionella can grow there, so a regular hygiene cycle is usual, and water above 50 °C scalds; follow local rules and a licensed installer",
        )
    })
}

fn lever_answer(found: &BreakEven, label: &str) -> LeverAnswer {
    let bound = found.lever.bound();
    let conditions: Vec<_> = found
        .crossings
        .iter()
        .map(|crossing| condition(found, crossing.value))
        .collect();
    let sentence = match conditions.as_slice() {
        [] => format!(
            "No {} makes \"{label}\" cost what today's system costs.",
            bound.words()
        ),
        _ => {
            let sides = found
                .crossings
                .iter()
                .zip(&conditions)
                .map(|(crossing, condition)| {
                    let side = if crossing.cheaper_above {
                        "above"
                    } else {
                        "below"
                    };
                    format!("{condition}; {side} that it is the cheaper one")
                });
            let sides: Vec<_> = sides.collect();
            format!(
                "\"{label}\" breaks even with {}.",
                sides.join(", and again with ")
            )
        }
    };
    LeverAnswer {
        lever: bound.label.to_owned(),
        unit: bound.unit.to_owned(),
        now: found.now,
        values: found
            .crossings
            .iter()
            .map(|crossing| crossing.value)
            .collect(),
        between: [bound.low, bound.high],
        conditions,
        sentence,
    }
}

/// A value of a lever as it is said aloud.
fn condition(found: &BreakEven, value: f64) -> String {
    let compared = |what: &str, more: &str, less: &str| {
        let percent = (value - 1.0) * 100.0;
        format!(
            "{what} {:.0} % {}",
            percent.abs(),
            if percent >= 0.0 { more } else { less }
        )
    };
    match found.lever {
        Lever::ElectricityRate => compared("electricity", "dearer", "cheaper"),
        Lever::FuelRate => compared("gas", "dearer", "cheaper"),
        Lever::HeatLoss => compared("a heat loss", "larger", "smaller"),
        Lever::FlowTemperature => {
            format!("a design flow of {value:.0} °C (now {:.0} °C)", found.now)
        }
        Lever::FieldFactor => {
            let percent = value * 100.0;
            format!(
                "{percent:.0} % of laboratory performance (now {:.0} %)",
                found.now * 100.0
            )
        }
    }
}
