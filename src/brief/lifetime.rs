//! What systems cost to put in and keep, and how the years of their life are counted.

use rust_decimal::prelude::ToPrimitive as _;
use schemars::JsonSchema;
use serde::Deserialize;

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

/// What a system costs to put in and to keep.
#[derive(Debug, Deserialize, JsonSchema)]
pub(super) struct OutlayTable {
    /// The machine or boiler, put in; of today's system, what its replacement will cost.
    pub machine: Option<Leaf<Money>>,
    /// The loop in the ground.
    #[serde(rename = "loop")]
    pub ground_loop: Option<Leaf<Money>>,
    /// New radiators or floors.
    pub emitters: Option<Leaf<Money>>,
    /// A hot-water store.
    pub store: Option<Leaf<Money>>,
    /// Work that is done once.
    pub installation: Option<Leaf<Money>>,
    /// What others pay towards it.
    pub grant: Option<Leaf<Money>>,
    /// Maintenance of a year.
    pub yearly_maintenance: Option<Leaf<Money>>,
    /// Years the machine or boiler lasts.
    pub machine_life: Option<Leaf<Years>>,
    /// Years the loop lasts.
    pub loop_life: Option<Leaf<Years>>,
    /// Years the emitters last.
    pub emitters_life: Option<Leaf<Years>>,
    /// Years the store lasts.
    pub store_life: Option<Leaf<Years>>,
    /// Years until today's boiler must be replaced.
    pub due_in: Option<Leaf<Years>>,
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

/// What a system costs to put in and keep. Outer: could not be read; inner: not given.
#[allow(
    clippy::option_option,
    reason = "outer: could not be read; inner: not given"
)]
pub(super) fn outlay(
    table: &SystemTable,
    kind: Option<SystemKind>,
    today: bool,
    currency: Option<Currency>,
    check: &mut Check,
    notes: &mut Notes,
) -> Option<Option<Outlay>> {
    let own = table.outlay.as_ref();
    if table.capital.is_none() && own.is_none() {
        return Some(None);
    }
    let machine_life = if kind == Some(SystemKind::GasBoiler) {
        &defaults::BOILER_LIFE
    } else {
        &defaults::MACHINE_LIFE
    };
    let due_in = own.and_then(|own| own.due_in.as_ref());
    if let (Some(leaf), false) = (due_in, today) {
        check.refuse(
            &leaf.span(),
            "due_in of a choice",
            "due_in belongs to today's system: the years until it must be replaced",
            "remove it",
        );
    }
    let due_in_years = match due_in {
        Some(_) => whole_years(
            due_in,
            &bounds::DUE_IN_YEARS,
            &defaults::DUE_IN,
            check,
            notes,
        ),
        None if today => {
            notes.used(&defaults::DUE_IN);
            parse::<Years>(defaults::DUE_IN.value)
                .ok()
                .map(|years| years.years() as usize)
        }
        None => Some(0),
    };
    let mut parts = Vec::new();
    let mut sound = due_in_years.is_some();
    let mut buy = |label: &str,
                   price: &Option<Leaf<Money>>,
                   life: Option<&Leaf<Years>>,
                   usual: &Default,
                   check: &mut Check| {
        if price.is_none() {
            if let Some(leaf) = life {
                check.refuse(
                    &leaf.span(),
                    format!("a life of the {label} without its price"),
                    "",
                    "give the price too",
                );
                sound = false;
            }
            return;
        }
        let amount = money(price, currency, check);
        let life_years = whole_years(life, &bounds::PART_LIFE_YEARS, usual, check, notes);
        match (amount, life_years) {
            (Some(amount), Some(life_years)) => parts.push(Part {
                label: label.to_owned(),
                amount,
                life_years,
                due_in: due_in_years.unwrap_or(0),
            }),
            _ => sound = false,
        }
    };
    let life = |of: fn(&OutlayTable) -> &Option<Leaf<Years>>| own.and_then(|own| of(own).as_ref());
    if let Some(leaf) = &table.capital {
        let by_part = own.is_some_and(|own| {
            own.machine.is_some()
                || own.ground_loop.is_some()
                || own.emitters.is_some()
                || own.store.is_some()
                || own.installation.is_some()
        });
        if by_part {
            check.refuse(
                &leaf.span(),
                "capital beside prices of its parts in outlay",
                "one of them",
                "remove capital, or the prices of the parts",
            );
            return None;
        }
        buy(
            "machine",
            &table.capital,
            life(|o| &o.machine_life),
            machine_life,
            check,
        );
    } else if let Some(own) = own {
        buy(
            "machine",
            &own.machine,
            own.machine_life.as_ref(),
            machine_life,
            check,
        );
    }
    if let Some(own) = own {
        buy(
            "loop",
            &own.ground_loop,
            own.loop_life.as_ref(),
            &defaults::LOOP_LIFE,
            check,
        );
        buy(
            "emitters",
            &own.emitters,
            own.emitters_life.as_ref(),
            &defaults::EMITTERS_LIFE,
            check,
        );
        buy(
            "store",
            &own.store,
            own.store_life.as_ref(),
            &defaults::STORE_LIFE,
            check,
        );
        buy(
            "installation",
            &own.installation,
            None,
            &defaults::INSTALLATION_LIFE,
            check,
        );
    }
    let mut paid = |price: Option<&Option<Leaf<Money>>>| match price {
        Some(price) if price.is_some() => money(price, currency, check),
        _ => Some(0.0),
    };
    let grant = paid(own.map(|own| &own.grant));
    let maintenance = paid(own.map(|own| &own.yearly_maintenance));
    let outlay = Outlay {
        parts,
        grant: grant?,
        maintenance: maintenance?,
    };
    let grant_leaf = own.and_then(|own| own.grant.as_ref());
    if let (true, Some(leaf)) = (outlay.grant > outlay.capital() && sound, grant_leaf) {
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
    sound.then_some(Some(outlay))
}

/// An amount from 0 in the currency of the tariffs.
fn money(leaf: &Option<Leaf<Money>>, currency: Option<Currency>, check: &mut Check) -> Option<f64> {
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
