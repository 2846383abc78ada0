//! Reading a tariff file: every problem of it at once, with its line.

mod fields;
mod prices;
mod pricing;
mod steps;
mod tax;
mod times;

pub use fields::{Date, TariffFields};

use std::path::Path;

use chrono_tz::Tz;

use super::{Holidays, Metering, Prices, Tariff};
use crate::document::{Check, Document, Leaf, read_text};
use crate::problem::{Place, Problems};
use crate::units::{CalorificBasis, Currency, Fuel, UnitProblem};
use fields::LaterFields;
use prices::Given;
use pricing::Pricing;

/// The byte range that stands for the whole document.
const DOCUMENT: std::ops::Range<usize> = 0..0;

impl Tariff {
    /// JSON Schema of a tariff file.
    pub fn schema() -> schemars::Schema {
        Document::<TariffFields>::schema()
    }

    /// Reads a tariff file.
    ///
    /// # Errors
    /// Every problem of the file and of the price series it names.
    pub fn read(path: &Path) -> Result<Self, Problems> {
        let text = read_text(path)?;
        let folder = path.parent().unwrap_or(Path::new(""));
        Self::from_text(&path.display().to_string(), &text, folder)
    }

    /// Reads a tariff from its text, with the name of the file and the folder that series are relative to.
    ///
    /// # Errors
    /// As [`Tariff::read`].
    ///
    /// ```
    /// use winterledger::tariff::Tariff;
    /// let text = "label = \"Plain\"\nfuel = \"electricity\"\ncurrency = \"GBP\"\nrates_include_tax = true\n\
    ///     standing = \"57.21 p/day\"\n[[band]]\nrate = \"24.67 p/kWh\"\n";
    /// let tariff = Tariff::from_text("plain.toml", text, "".as_ref())?;
    /// assert_eq!(tariff.prices[0].bands.len(), 1);
    /// let hole = text.replace("rate =", "from = \"00:30\"\nrate =");
    /// let problems = Tariff::from_text("plain.toml", &hole, "".as_ref()).unwrap_err();
    /// assert!(problems.to_string().contains("00:00–00:30"));
    /// # Ok::<(), winterledger::problem::Problems>(())
    /// ```
    pub fn from_text(file: &str, text: &str, folder: &Path) -> Result<Self, Problems> {
        let (fields, mut check) = Document::<TariffFields>::read(file, text)?;
        let tariff = read(&fields, &mut check, folder, file);
        check.finish(tariff)
    }
}

/// The tariff of its fields; nothing when something that it cannot do without was refused.
fn read(fields: &TariffFields, check: &mut Check, folder: &Path, file: &str) -> Option<Tariff> {
    let label = check.required(&fields.label, &DOCUMENT, "label", "\"Quiet Nights\"");
    let fuel = check.required(&fields.fuel, &DOCUMENT, "fuel", "\"electricity\"");
    let fuel = fuel.map(|(fuel,)| fuel);
    if fields.currency.is_none() {
        check.missing(&DOCUMENT, "currency", "\"GBP\"");
    }
    let currency = parsed(check, &fields.currency, Currency::parse);
    let time_zone = parsed(check, &fields.time_zone, zone);
    let metering = check.value(&fields.metering).map(|(metering,)| metering);
    let billing = check.value(&fields.billing).map(|(billing,)| billing);
    let holidays = holidays(fields, check);
    let mut pricing = Pricing::read(fields, check, currency, fuel);

    let mut prices: Vec<Prices> = Vec::new();
    let first = Given::first(fields).prices(check, &mut pricing, None, folder);
    prices.extend(first);
    for later in &fields.later {
        let before = prices.last().cloned();
        let read = Given::later(later).prices(check, &mut pricing, before.as_ref(), folder);
        in_order(later, before.as_ref(), check);
        prices.extend(read);
    }
    electricity_only(fields, fuel, check);
    Some(Tariff {
        label: label?,
        place: Place::file(file),
        fuel: fuel?,
        currency: currency?,
        time_zone,
        metering: metering.unwrap_or_default(),
        billing: billing.unwrap_or_default(),
        holidays,
        prices,
        findings: pricing.findings,
    })
}

/// The value that a text stands for, when it is there and right.
fn parsed<T>(
    check: &mut Check,
    leaf: &Option<Leaf<String>>,
    parse: impl FnOnce(&str) -> Result<T, UnitProblem>,
) -> Option<T> {
    let text = check.value(leaf)?;
    match parse(&text) {
        Ok(value) => Some(value),
        Err(problem) => {
            let span = leaf.as_ref().map_or(DOCUMENT, Leaf::span);
            check.refuse(&span, problem.found, problem.allowed, problem.remedy);
            None
        }
    }
}

/// A time zone of its name.
fn zone(text: &str) -> Result<Tz, UnitProblem> {
    text.parse().map_err(|_| {
        let near = chrono_tz::TZ_VARIANTS
            .iter()
            .map(|zone| (strsim::jaro_winkler(text, zone.name()), zone.name()))
            .max_by(|a, b| a.0.total_cmp(&b.0));
        UnitProblem {
            found: format!("\"{text}\" is not a time zone"),
            allowed: "a name of the IANA time zone database".to_owned(),
            remedy: format!("did you mean \"{}\"?", near.map_or("UTC", |(_, name)| name)),
        }
    })
}

fn holidays(fields: &TariffFields, check: &mut Check) -> Holidays {
    let mut holidays = Holidays::default();
    for text in check.value(&fields.holidays).unwrap_or_default() {
        if !holidays.add(&text) {
            let span = fields.holidays.as_ref().map_or(DOCUMENT, Leaf::span);
            check.refuse(
                &span,
                format!("\"{text}\" is not a day"),
                "\"25 Dec\" for every year or \"2026-04-03\" for one",
                "write the day and the month, or the date",
            );
        }
    }
    holidays
}

/// A later price list must begin after the one before it.
fn in_order(later: &LaterFields, before: Option<&Prices>, check: &mut Check) {
    let (Some(leaf), Some(before)) = (&later.valid_from, before) else {
        return;
    };
    if let (Ok(Date(from)), Some(last)) = (leaf.value(), before.valid_from)
        && *from <= last
    {
        check.refuse(
            &leaf.span(),
            format!("{from} is not after {last}"),
            "price lists in the order of their dates",
            "move this [[later]] before the other, or correct its date",
        );
    }
}

/// Refuses what only makes sense for electricity.
fn electricity_only(fields: &TariffFields, fuel: Option<Fuel>, check: &mut Check) {
    let Some(fuel) = fuel else { return };
    let mut refuse =
        |span: Option<std::ops::Range<usize>>, wrong: bool, what: &str, remedy: &str| {
            if let Some(span) = span.filter(|_| wrong) {
                check.refuse(&span, format!("{what} with fuel = \"{fuel}\""), "", remedy);
            }
        };
    let burnt = fuel.is_burnt();
    let export = fields.export.as_ref().map(Leaf::span);
    refuse(
        export,
        burnt,
        "export",
        "only electricity is fed back: remove it",
    );
    let heat_pump = fields.metering.as_ref().filter(|leaf| {
        leaf.value()
            .is_ok_and(|(metering,)| *metering == Metering::HeatPump)
    });
    let remedy = "only electricity drives a heat pump: remove it";
    refuse(
        heat_pump.map(Leaf::span),
        burnt,
        "metering = \"heat-pump\"",
        remedy,
    );
    let value = fields.calorific_value.as_ref().map(Leaf::span);
    let remedy = "electricity has no calorific value: remove it";
    refuse(value, !burnt, "calorific_value", remedy);
    let net = fields.calorific_basis.as_ref().filter(|leaf| {
        leaf.value()
            .is_ok_and(|(basis,)| *basis == CalorificBasis::Net)
    });
    refuse(
        net.map(Leaf::span),
        !burnt,
        "calorific_basis = \"net\"",
        remedy,
    );
}
