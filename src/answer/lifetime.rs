//! The years of every system's life.

use serde::Serialize;

use super::comfort::{leaves_cold, named};

use crate::lifetime::{CashFlow, Outlay, Part, Path, Payback, payback};
use crate::study::{Case, Outcome, cash_flow};

/// Money and carbon over the years, in real terms and today's worth.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct LifetimeAnswer {
    /// Years counted.
    pub years: usize,
    /// Real discount rate, as a fraction.
    pub discount_rate: f64,
    /// How prices and carbon go on, in words.
    pub terms: String,
    /// Whether and when today's system is bought anew within these years, in words: what the choices avoid.
    pub todays_next: String,
    /// Today's system first, then every choice whose capital is known.
    pub systems: Vec<SystemLifetime>,
}

/// One system over the years.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct SystemLifetime {
    /// What it is called.
    pub label: String,
    /// Whether it heats the home today.
    pub today: bool,
    /// Why it is no fair answer however cheap it is; absent where rooms and water are kept warm.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub leaves_cold: Option<String>,
    /// What it is made of.
    pub parts: Vec<PartAnswer>,
    /// What is paid at the beginning, before the grant.
    pub capital: f64,
    /// What others pay towards it.
    pub grant: f64,
    /// Net present value of all that is paid, less what the parts are worth at the end.
    pub present_cost: f64,
    /// Today's present cost less it; absent for today's system.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub net_present_saving: Option<f64>,
    /// Years until its discounted spending has fallen to that of today's system; absent when never, and for today's system.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub payback_years: Option<f64>,
    /// The same in words: "after 11.4 years", "never".
    #[serde(skip_serializing_if = "Option::is_none")]
    pub payback: Option<String>,
    /// Present cost over the present worth of the heat to rooms and taps.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub cost_per_kwh_heat: Option<f64>,
    /// Carbon of all years.
    pub carbon_kg: f64,
    /// Whether each year has figures of its own, because the ground of its loop cools; else all years are the one that is shown.
    pub each_year_its_own: bool,
    /// Year 0 is today; what a year costs stands at its end.
    pub by_year: Vec<LifetimeYear>,
}

impl SystemLifetime {
    /// What it is called where it stands beside others: marked when it leaves rooms or water cold.
    pub fn name(&self) -> String {
        named(&self.label, &self.leaves_cold)
    }
}

/// One part that is bought.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct PartAnswer {
    /// What it is.
    pub part: String,
    /// What it costs.
    pub amount: f64,
    /// Years it lasts.
    pub life_years: usize,
    /// Years until it is bought first.
    pub due_in: usize,
}

/// One year of a system's life.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct LifetimeYear {
    /// Year from 0.
    pub year: usize,
    /// Parts bought.
    pub capital: f64,
    /// Grant that comes in.
    pub grant: f64,
    /// Maintenance.
    pub maintenance: f64,
    /// Electricity bill.
    pub electricity: f64,
    /// Fuel bill.
    pub fuel: f64,
    /// What the parts are worth at the end.
    pub left: f64,
    /// Paid in the year, before what is left.
    pub spent: f64,
    /// Paid so far, in today's worth.
    pub spent_so_far_discounted: f64,
    /// Carbon.
    pub carbon_kg: f64,
}

/// The lifetime of a case; nothing when no choice has its capital.
pub(super) fn lifetime(case: &Case, outcomes: &[Outcome]) -> Option<LifetimeAnswer> {
    let flows: Vec<Option<CashFlow>> = outcomes
        .iter()
        .enumerate()
        .map(|(i, outcome)| cash_flow(case, i, outcome))
        .collect();
    let today = flows.first()?.as_ref()?;
    let systems: Vec<SystemLifetime> = case
        .contenders
        .iter()
        .zip(outcomes)
        .zip(&flows)
        .filter_map(|((contender, outcome), flow)| {
            let flow = flow.as_ref()?;
            let outlay = contender.outlay.clone().unwrap_or_default();
            let mut answer = system(
                &contender.system.label,
                &outlay,
                flow,
                (!contender.today).then_some(today),
                contender.life.is_some(),
            );
            answer.leaves_cold = leaves_cold(contender, outcome);
            Some(answer)
        })
        .collect();
    (systems.len() > 1).then(|| LifetimeAnswer {
        years: case.terms.years,
        discount_rate: case.terms.discount_rate,
        terms: terms_in_words(case),
        todays_next: todays_next(case),
        systems,
    })
}

/// What the comparison holds of the day when today's system is worn out.
fn todays_next(case: &Case) -> String {
    let years = case.terms.years;
    let today = case.contenders.first();
    let parts = today.and_then(|today| today.outlay.as_ref());
    let parts = parts.map_or(&[][..], |outlay| outlay.parts.as_slice());
    let first = (0..years).find(|&year| parts.iter().any(|part| part.is_bought(year, years)));
    match (parts, first) {
        ([], _) => "What today's system costs to replace is not in this: the next one comes for nothing here, so payback and spending \
                    speak against the choices. Give capital under [today] and due_in under [today.outlay]."
            .to_owned(),
        (_, Some(0)) => "Today's system is bought anew at once, and its cost over the years holds that.".to_owned(),
        (_, Some(year)) => format!(
            "Today's system must be bought anew too when it is worn out, first in year {year}; its cost over the years holds that."
        ),
        (_, None) => format!("Today's system lasts longer than the {years} years, so nothing for a new one is in its cost."),
    }
}

fn system(
    label: &str,
    outlay: &Outlay,
    flow: &CashFlow,
    today: Option<&CashFlow>,
    each_year_its_own: bool,
) -> SystemLifetime {
    let paid_back = today.map(|today| payback(flow, today));
    let so_far = flow.spent_so_far();
    SystemLifetime {
        label: label.to_owned(),
        today: today.is_none(),
        leaves_cold: None,
        parts: outlay.parts.iter().map(part).collect(),
        capital: outlay.capital(),
        grant: outlay.grant,
        present_cost: flow.present_cost(),
        net_present_saving: today.map(|today| today.present_cost() - flow.present_cost()),
        payback_years: paid_back.and_then(|paid_back| match paid_back {
            Payback::AtOnce => Some(0.0),
            Payback::After(years) => Some(years),
            Payback::Never => None,
        }),
        payback: paid_back.map(|paid_back| match paid_back {
            Payback::AtOnce => "at once".to_owned(),
            Payback::After(years) => format!("after {years:.1} years"),
            Payback::Never => "never".to_owned(),
        }),
        cost_per_kwh_heat: flow.cost_per_kwh_heat(),
        carbon_kg: flow.carbon_kg(),
        each_year_its_own,
        by_year: flow
            .years
            .iter()
            .zip(so_far)
            .map(|(year, spent_so_far_discounted)| LifetimeYear {
                year: year.year,
                capital: year.capital,
                grant: year.grant,
                maintenance: year.maintenance,
                electricity: year.electricity,
                fuel: year.fuel,
                left: year.left,
                spent: year.spent(),
                spent_so_far_discounted,
                carbon_kg: year.carbon_kg,
            })
            .collect(),
    }
}

fn part(part: &Part) -> PartAnswer {
    PartAnswer {
        part: part.label.clone(),
        amount: part.amount,
        life_years: part.life_years,
        due_in: part.due_in,
    }
}

fn terms_in_words(case: &Case) -> String {
    let terms = &case.terms;
    let course = |what: &str, path: &Path| match path {
        Path::Change(0.0) => format!("{what} as today"),
        Path::Change(change) => format!("{what} {:+.1} % a year", change * 100.0),
        Path::Given(_) => format!("{what} by its path"),
    };
    format!(
        "{} years, real, discounted at {:.1} % a year; {}, {}, {}",
        terms.years,
        terms.discount_rate * 100.0,
        course("electricity", &terms.electricity),
        course("gas", &terms.fuel),
        course("carbon of electricity", &terms.electricity_carbon),
    )
}
