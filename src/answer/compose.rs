//! From cases and outcomes to the estimate.

use super::account::{bill_answers, shifting_answer, signal_gap};
use super::bills::pair;
use super::estimate::{Assumption, Estimate, HomeUsed, InputFile, WeatherUsed};
use super::findings::{
    cool_stores, disagreement, hot_discharge, hygiene_cycles, shortfalls, source_too_cold,
    water_beyond_reach,
};
use super::home::{MeteredAnswer, PatternComparison, PatternFigures, RoomsAnswer};
use super::lever::break_evens;
use super::lifetime::lifetime;
use super::system::{ground_shown, system};
use super::weather_years::{succession, year_answers, year_spread};
use crate::home::Pattern;
use crate::problem::{Finding, Problems};
use crate::signature::{DailyWeather, Signature};
use crate::study::{Case, Outcome, under_pattern};

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
    /// The files that were read.
    pub inputs: Vec<InputFile>,
    /// The room table's verdict for each contender, in their order.
    pub rooms: Vec<Option<RoomsAnswer>>,
    /// Transmission and ventilation of the home as it is, W/K, where they are known apart.
    pub parts_w_per_k: Option<(f64, f64)>,
    /// What the meter readings say.
    pub bills: Option<BillsTold>,
}

/// What an estimate tells about meter readings.
#[derive(Debug, Clone, PartialEq)]
pub struct BillsTold {
    /// File of the readings.
    pub file: String,
    /// What they say.
    pub signature: Signature,
    /// What the heat loss of every system was multiplied by to meet them.
    pub scaled_by: Option<f64>,
}

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
    findings.extend(hygiene_cycles(case));
    let mut systems = Vec::with_capacity(outcomes.len());
    let break_evens = break_evens(case, outcomes)?;
    for (i, (contender, outcome)) in case.contenders.iter().zip(outcomes).enumerate() {
        let mut system = system(
            contender,
            outcome,
            outcomes,
            told.machines.get(i).cloned().flatten(),
        );
        system.rooms = told.rooms.get(i).cloned().flatten();
        system.by_year = year_answers(case, outcomes, i);
        system.year_spread = year_spread(case, outcomes, i);
        if contender.pattern != case.contenders[0].pattern {
            let as_today = under_pattern(case, contender, &case.contenders[0].pattern)?;
            let heat_kwh = as_today.mean_sums().space_heat_kwh();
            system.pattern_heat_kwh = Some(system.space_heat_kwh - heat_kwh);
            system.pattern_cost = Some(system.cost - as_today.costs.total);
        }
        system.shifting = shifting_answer(case, contender)?;
        findings.extend(signal_gap(contender, outcome)?);
        system.ground = ground_shown(case, contender, outcome)?;
        findings.extend(shortfalls(&system));
        findings.extend(water_beyond_reach(contender, outcome));
        findings.extend(hot_discharge(contender, outcome, &system));
        findings.extend(source_too_cold(&system));
        systems.push(system);
    }
    let site = &case.site;
    let today = &case.contenders[0];
    let metered = told
        .bills
        .as_ref()
        .map(|bills| metered(bills, case, &outcomes[0]));
    if let (Some(metered), Some(bills)) = (&metered, &told.bills) {
        findings.extend(disagreement(metered, &bills.signature));
    }
    let fabric = &today.system.home.fabric;
    Ok(Estimate {
        weather: WeatherUsed {
            file: told.weather_file.clone(),
            hours: site.outdoor_c.len(),
            years: site.years.len(),
            mean_c: site.outdoor_c.iter().sum::<f64>() / site.outdoor_c.len() as f64,
            min_c: site.outdoor_c.iter().copied().fold(f64::INFINITY, f64::min),
            repaired_hours: site.repaired.iter().filter(|&&repaired| repaired).count(),
            part_year_days: None,
        },
        home: HomeUsed {
            label: told.home_label.clone(),
            heat_loss_w_per_k: fabric.heat_loss_w_per_k(),
            design_outdoor_c: today.design_outdoor_c,
            design_heat_load_kw: today.design_load_kw,
            transmission_w_per_k: told.parts_w_per_k.map(|parts| parts.0),
            ventilation_w_per_k: told.parts_w_per_k.map(|parts| parts.1),
            metered,
        },
        systems,
        patterns: Vec::new(),
        what_if: Vec::new(),
        break_even: break_evens,
        odds: None,
        lifetime: lifetime(case, outcomes),
        currency: case.currency.code().to_owned(),
        carbon_scope: told.carbon_scope.clone(),
        assumptions: told
            .assumptions
            .iter()
            .cloned()
            .chain(succession(case))
            .collect(),
        findings,
        inputs: told.inputs.clone(),
    })
}

/// What the readings say beside the model.
fn metered(bills: &BillsTold, case: &Case, today: &Outcome) -> MeteredAnswer {
    let signature = &bills.signature;
    let days = DailyWeather::of_hours(&case.site.civil, &case.site.outdoor_c);
    let years = case.site.years.len() as f64;
    let fuel = signature.fuel_kwh(days.all());
    let metered_kwh = fuel.value / years;
    let modelled_kwh = today.mean_sums().fuel_kwh;
    let difference_percent = (modelled_kwh / metered_kwh - 1.0) * 100.0;
    let loss = signature.heat_loss();
    let mut sentence = format!(
        "{}: {:.0} W/K ({:.0} to {:.0}); today's fuel in this weather {metered_kwh:.0} kWh by the meter, {modelled_kwh:.0} kWh \
         modelled ({difference_percent:+.0} %)",
        bills.file, loss.value, loss.low, loss.high
    );
    if let Some(factor) = bills.scaled_by {
        sentence += &format!(", after every heat loss was multiplied by {factor:.2}");
    }
    MeteredAnswer {
        file: bills.file.clone(),
        heat_loss_w_per_k: loss.value,
        heat_loss_95: pair(loss),
        base_temperature_c: signature.base_temperature_c.value,
        metered_kwh,
        metered_95: pair(fuel).map(|kwh| kwh / years),
        modelled_kwh,
        difference_percent,
        scaled_by: bills.scaled_by,
        sentence,
    }
}

/// Every system all day at its set point beside a set-back: its own, else today's, else `usual`.
///
/// # Errors
/// When a bill cannot be made.
pub fn compare_patterns(case: &Case, usual: &Pattern) -> Result<Vec<PatternComparison>, Problems> {
    let today = &case.contenders[0].pattern;
    case.contenders
        .iter()
        .map(|contender| {
            let patterns = [&contender.pattern, today, usual];
            let set_back = patterns
                .into_iter()
                .find(|pattern| !pattern.is_continuous())
                .unwrap_or(usual);
            let continuous = Pattern::continuous(set_back.comfort_c());
            let figures = |pattern: &Pattern| -> Result<PatternFigures, Problems> {
                let outcome = under_pattern(case, contender, pattern)?;
                let sums = outcome.mean_sums();
                let burns = contender.system.heating.boiler().is_some();
                Ok(PatternFigures {
                    pattern: pattern.words(),
                    space_heat_kwh: sums.space_heat_kwh(),
                    electricity_kwh: sums.electricity_kwh(),
                    fuel_kwh: burns.then_some(sums.fuel_kwh),
                    cost: outcome.costs.total,
                    hours_backup: outcome.mean(|year| f64::from(year.hours_backup)),
                    min_indoor_c: outcome
                        .years
                        .iter()
                        .map(|year| year.min_indoor_c)
                        .fold(f64::INFINITY, f64::min),
                })
            };
            let (continuous, set_back) = (figures(&continuous)?, figures(set_back)?);
            Ok(PatternComparison {
                label: contender.system.label.clone(),
                more_heat_percent: (continuous.space_heat_kwh / set_back.space_heat_kwh - 1.0)
                    * 100.0,
                continuous,
                set_back,
            })
        })
        .collect()
}
