//! What systems cost to put in and keep, and how the years of their life are counted.

use rust_decimal::prelude::ToPrimitive as _;
use schemars::JsonSchema;
use serde::Deserialize;

use super::capital::PutIn;
use super::defaults::{self, Default};
use super::notes::Notes;
use super::raw::{SystemKind, SystemTable};
use crate::bounds::{self, Bound};
use crate::document::{Check, Leaf, LeafValue, Section};
use crate::lifetime::{Outlay, Part, Path, Terms};
use crate::units::{Currency, Money, Share, UnitProblem, Years, parse};

/// How the years of a system's life are counted; everything in real terms, without inflation.
#[derive(Debug, Deserialize, JsonSchema)]
pub(super) struct LifetimeTable {
    /// Years over which the systems are compared.
    pub years: Option<Leaf<Years>>,
    /// Discount rate above inflation.
    pub discount_rate: Option<Leaf<Share>>,
    /// Change of the price of electricity above inflation, each year.
    pub electricity_change: Option<Leaf<Share>>,
    /// Price of electricity in each year as a share of today's, in place of electricity_change.
    pub electricity_path: Option<Leaf<Vec<Share>>>,
    /// Change of the price of gas above inflation, each year.
    pub gas_change: Option<Leaf<Share>>,
    /// Price of gas in each year as a share of today's, in place of gas_change.
    pub gas_path: Option<Leaf<Vec<Share>>>,
    /// Change of the carbon of electricity, each year.
    pub electricity_carbon_change: Option<Leaf<Share>>,
    /// Carbon of electricity in each year as a share of today's, in place of electricity_carbon_change.
    pub electricity_carbon_path: Option<Leaf<Vec<Share>>>,
}

/// What a system costs besides its capital, and how long its parts last.
#[derive(Debug, Deserialize, JsonSchema)]
pub(super) struct OutlayTable {
    /// What others pay towards it.
    pub grant: Option<Leaf<Money>>,
    /// Maintenance of a year.
    pub yearly_maintenance: Option<Leaf<Money>>,
    /// Years the system lasts, or those of its parts that lives does not name.
    pub life: Option<Leaf<Years>>,
    /// Years that parts of the capital last, by their names.
    pub lives: Option<Leaf<Lives>>,
    /// Years until today's system must be replaced; its capital is what that costs.
    pub due_in: Option<Leaf<Years>>,
}

/// Years that parts last, by the names of the parts.
#[derive(Debug, Clone, PartialEq)]
pub(super) struct Lives(Vec<(String, Years)>);

impl LeafValue for Lives {
    fn read(value: &toml::Value) -> Result<Self, UnitProblem> {
        let refuse = |found: String| UnitProblem {
            found,
            allowed: "years for each part".to_owned(),
            remedy: "write for example { machine = \"20 years\", loop = \"50 years\" }".to_owned(),
        };
        let table = value.as_table().ok_or_else(|| refuse(value.to_string()))?;
        let one = |(name, years): (&String, &toml::Value)| {
            let years = Years::read(years).map_err(|_| refuse(format!("{name} = {years}")))?;
            Ok((name.replace('_', " "), years))
        };
        table.iter().map(one).collect::<Result<_, _>>().map(Self)
    }

    fn schema() -> schemars::Schema {
        schemars::json_schema!({
            "type": "object",
            "additionalProperties": { "type": "string" },
            "examples": [{ "machine": "20 years", "loop": "50 years" }]
        })
    }
}

impl LeafValue for Money {
    fn read(value: &toml::Value) -> Result<Self, UnitProblem> {
        let text = value.as_str().ok_or_else(|| UnitProblem {
            found: value.to_string(),
            allowed: "an amount and the three letters of its currency, in quotes".to_owned(),
            remedy: "write for example \"11 400 GBP\"".to_owned(),
        })?;
        Self::parse(text)
    }

    fn schema() -> schemars::Schema {
        schemars::json_schema!({ "type": "string", "examples": ["11 400 GBP"] })
    }
}

/// The terms of a brief; nothing when something is wrong.
pub(super) fn terms(
    table: Option<&Section<LifetimeTable>>,
    told: bool,
    check: &mut Check,
    notes: &mut Notes,
) -> Option<Terms> {
    // Without any capital in the brief nothing is counted over the years, so nothing was assumed for it.
    let mut unused = Notes::default();
    let notes = if told || table.is_some() {
        notes
    } else {
        &mut unused
    };
    let years = whole_years(
        table.and_then(|table| table.years.as_ref()),
        &bounds::COMPARED_YEARS,
        &defaults::COMPARED_YEARS,
        check,
        notes,
    );
    let none = None;
    let rate = notes.quantity(
        check,
        table.map_or(&none, |table| &table.discount_rate),
        &bounds::DISCOUNT_RATE,
        &defaults::DISCOUNT_RATE,
    );
    let none = (None, None);
    let mut course = |change: fn(&LifetimeTable) -> &Option<Leaf<Share>>,
                      given: fn(&LifetimeTable) -> &Option<Leaf<Vec<Share>>>,
                      default: &Default| {
        let change = table.map_or(&none.0, |table| change(table));
        let given = table.map_or(&none.1, |table| given(table));
        path(change, given, years, default, check, notes)
    };
    let electricity = course(
        |t| &t.electricity_change,
        |t| &t.electricity_path,
        &defaults::ELECTRICITY_CHANGE,
    );
    let fuel = course(|t| &t.gas_change, |t| &t.gas_path, &defaults::GAS_CHANGE);
    let electricity_carbon = course(
        |t| &t.electricity_carbon_change,
        |t| &t.electricity_carbon_path,
        &defaults::ELECTRICITY_CARBON_CHANGE,
    );
    let terms = Terms {
        years: years?,
        discount_rate: rate?.fraction(),
        electricity: electricity?,
        fuel: fuel?,
        electricity_carbon: electricity_carbon?,
    };
    check.take(terms.check())?;
    Some(terms)
}

/// A course that is a yearly change, or a list with a value for every year.
fn path(
    change: &Option<Leaf<Share>>,
    given: &Option<Leaf<Vec<Share>>>,
    years: Option<usize>,
    default: &Default,
    check: &mut Check,
    notes: &mut Notes,
) -> Option<Path> {
    if let (Some(_), Some(leaf)) = (change, given) {
        check.refuse(
            &leaf.span(),
            "both a yearly change and a path",
            "one of them",
            "remove the one that is not meant",
        );
        return None;
    }
    let Some(leaf) = given else {
        let change = notes.quantity(check, change, &bounds::YEARLY_CHANGE, default)?;
        return Some(Path::Change(change.fraction()));
    };
    let multiples: Vec<f64> = check
        .value(given)?
        .iter()
        .map(|share| share.fraction())
        .collect();
    if let Some(wrong) = multiples
        .iter()
        .find(|multiple| !bounds::PATH_MULTIPLE.holds(**multiple))
    {
        check.refuse(
            &leaf.span(),
            format!("{} %", wrong * 100.0),
            bounds::PATH_MULTIPLE.words(),
            "give each year as a share of today's, \"104 %\"",
        );
        return None;
    }
    let years = years?;
    if multiples.len() < years {
        check.refuse(
            &leaf.span(),
            format!(
                "a path of {} years for a life of {years} years",
                multiples.len()
            ),
            format!("a value for each of the {years} years"),
            "give the missing years, or compare over fewer years",
        );
        return None;
    }
    Some(Path::Given(multiples))
}

/// How long parts usually last, by the words their names hold; any other lasts as long as the machine or boiler.
const USUAL_LIVES: [(&str, &Default); 10] = [
    ("loop", &defaults::LOOP_LIFE),
    ("bore", &defaults::LOOP_LIFE),
    ("trench", &defaults::LOOP_LIFE),
    ("radiator", &defaults::EMITTERS_LIFE),
    ("emitter", &defaults::EMITTERS_LIFE),
    ("floor", &defaults::EMITTERS_LIFE),
    ("store", &defaults::STORE_LIFE),
    ("cylinder", &defaults::STORE_LIFE),
    ("installation", &defaults::INSTALLATION_LIFE),
    ("work", &defaults::INSTALLATION_LIFE),
];

/// What a system costs to put in and keep. Outer: could not be read; inner: not given.
#[allow(
    clippy::option_option,
    reason = "outer: could not be read; inner: not given"
)]
pub(super) fn outlay(
    table: &SystemTable,
    capital: Option<&PutIn>,
    (kind, today): (Option<SystemKind>, bool),
    currency: Option<Currency>,
    check: &mut Check,
    notes: &mut Notes,
) -> Option<Option<Outlay>> {
    let own = table.outlay.as_ref();
    if table.capital.is_none() && own.is_none() {
        return Some(None);
    }
    let grant = own.map_or(Some(0.0), |own| money(&own.grant, currency, check));
    let maintenance = own.map_or(Some(0.0), |own| {
        money(&own.yearly_maintenance, currency, check)
    });
    let parts = parts(table, capital, (kind, today), check, notes);
    let (grant, maintenance, parts) = (grant?, maintenance?, parts?);
    let outlay = Outlay {
        parts,
        grant,
        maintenance,
    };
    let grant_leaf = own.and_then(|own| own.grant.as_ref());
    if let (true, Some(leaf)) = (outlay.grant > outlay.capital(), grant_leaf) {
        check.refuse(
            &leaf.span(),
            format!(
                "a grant of {} for a capital of {}",
                outlay.grant,
                outlay.capital()
            ),
            "a grant no larger than what is paid at the beginning",
            "give the capital before the grant, or a smaller grant",
        );
        return None;
    }
    Some(Some(outlay))
}

/// The parts of the capital with their lives.
fn parts(
    table: &SystemTable,
    capital: Option<&PutIn>,
    (kind, today): (Option<SystemKind>, bool),
    check: &mut Check,
    notes: &mut Notes,
) -> Option<Vec<Part>> {
    let own = table.outlay.as_ref();
    let due = own.and_then(|own| own.due_in.as_ref());
    if let (Some(leaf), false) = (due, today) {
        check.refuse(
            &leaf.span(),
            "due_in of a choice",
            "due_in belongs to today's system: the years until it must be replaced",
            "remove it",
        );
    }
    let life = own.and_then(|own| own.life.as_ref());
    let machine = if kind.is_some_and(|kind| kind.burns().is_some()) {
        &defaults::BOILER_LIFE
    } else {
        &defaults::MACHINE_LIFE
    };
    // Checked also where nothing is bought, so that no mistake waits.
    let given_life = match life {
        Some(_) => Some(whole_years(
            life,
            &bounds::PART_LIFE_YEARS,
            machine,
            check,
            notes,
        )?),
        None => None,
    };
    let given_due = match due {
        Some(_) => Some(whole_years(
            due,
            &bounds::DUE_IN_YEARS,
            &defaults::DUE_IN,
            check,
            notes,
        )?),
        None => None,
    };
    let none = None;
    let lives = own.map_or(&none, |own| &own.lives);
    let named_lives = check.value(lives);
    let PutIn { whole, parts } = capital?;
    let bought = if parts.is_empty() {
        whole
            .iter()
            .map(|whole| ("system".to_owned(), *whole))
            .collect()
    } else {
        parts.clone()
    };
    if let (Some(leaf), Some(Lives(named))) = (lives, &named_lives) {
        for (name, years) in named {
            if !parts.iter().any(|(part, _)| part == name) {
                let held: Vec<_> = parts
                    .iter()
                    .map(|(part, _)| format!("\"{part}\""))
                    .collect();
                check.refuse(
                    &leaf.span(),
                    format!("a life of \"{name}\", which is no part of the capital"),
                    held.join(", "),
                    "name a part as capital does",
                );
                return None;
            }
            if !bounds::PART_LIFE_YEARS.holds(years.years()) || years.years().fract() != 0.0 {
                check.refuse(
                    &leaf.span(),
                    format!("{name} lasts {} years", years.years()),
                    format!("a whole number, {}", bounds::PART_LIFE_YEARS.words()),
                    "check the number and its unit",
                );
                return None;
            }
        }
    }
    let mut usual = |default: &Default| {
        notes.used(default);
        parse::<Years>(default.value)
            .ok()
            .map(|years| years.years() as usize)
    };
    let due_in = match given_due {
        Some(years) => years,
        None if today && !bought.is_empty() => usual(&defaults::DUE_IN)?,
        None => 0,
    };
    bought
        .into_iter()
        .map(|(label, amount)| {
            let named = named_lives
                .iter()
                .flat_map(|Lives(named)| named)
                .find(|(name, _)| *name == label);
            let known = USUAL_LIVES
                .iter()
                .find(|(word, _)| label.to_lowercase().contains(word));
            let life_years = match (named, known, given_life) {
                (Some((_, years)), _, _) => years.years() as usize,
                (None, Some((_, default)), _) => usual(default)?,
                (None, None, Some(years)) => years,
                (None, None, None) => usual(machine)?,
            };
            Some(Part {
                label,
                amount,
                life_years,
                due_in,
            })
        })
        .collect()
}

/// An amount from 0 in the currency of the tariffs.
fn money(leaf: &Option<Leaf<Money>>, currency: Option<Currency>, check: &mut Check) -> Option<f64> {
    if leaf.is_none() {
        return Some(0.0);
    }
    let money = check.value(leaf)?;
    let span = leaf.as_ref().map(Leaf::span)?;
    let currency = currency?;
    if money.currency != currency {
        check.refuse(
            &span,
            format!("{money}"),
            format!("an amount in {currency}, as the tariffs are"),
            "convert it",
        );
        return None;
    }
    if money.amount.is_sign_negative() {
        check.refuse(
            &span,
            format!("{money}"),
            "an amount from 0",
            "what comes in is a grant",
        );
        return None;
    }
    money.amount.to_f64()
}

/// A whole number of years within a bound, or the default, noted.
fn whole_years(
    leaf: Option<&Leaf<Years>>,
    bound: &Bound,
    default: &Default,
    check: &mut Check,
    notes: &mut Notes,
) -> Option<usize> {
    let leaf = leaf.cloned();
    let years = notes.quantity(check, &leaf, bound, default)?.years();
    if let (Some(leaf), true) = (&leaf, years.fract() != 0.0) {
        check.refuse(
            &leaf.span(),
            format!("{years} years"),
            "a whole number of years",
            "round it",
        );
        return None;
    }
    // Bounded above by the limits table.
    Some(years as usize)
}
