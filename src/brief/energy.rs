//! Tariffs, currency, carbon and household: what all systems of a brief share, and what a choice changes of it.

use std::sync::Arc;

use chrono_tz::Tz;

use super::carbon::factors;
use super::files::Folder;
use super::household::household;
use super::notes::Notes;
use super::raw;
use crate::carbon::Factors;
use crate::document::{Check, Leaf};
use crate::problem::{Finding, Problems};
use crate::study::Account;
use crate::tariff::{Metering, Tariff};
use crate::units::{Currency, Fuel};
use crate::year::{Household, OwnGeneration, Signal, Site};

/// Tariffs, currency, carbon and household.
#[derive(Debug, Clone)]
pub(super) struct Energy {
    /// What everything is paid in.
    pub currency: Currency,
    /// The home's electricity.
    pub electricity: Supply,
    /// Fuels that the brief has a tariff for.
    fuels: Vec<Supply>,
    /// What the home uses and makes beside its heating.
    pub household: Arc<Household>,
    /// What the carbon factors count, in words.
    pub carbon_scope: String,
    factors: Factors,
    zone: Tz,
}

/// One supply: its account, and its price and carbon in every hour.
#[derive(Debug, Clone)]
pub(super) struct Supply {
    pub account: Account,
    pub signal: Signal,
    /// What is odd about pricing these hours with it.
    pub findings: Vec<Finding>,
}

/// Reads the tariffs and the carbon factors; nothing when something is wrong or there is no weather to lay them over.
pub(super) fn energy(
    raw: &raw::Brief,
    folder: &Folder,
    site: Option<&Site>,
    zone: Option<Tz>,
    check: &mut Check,
    notes: &mut Notes,
) -> Option<Energy> {
    let table = raw.energy.as_ref()?;
    let before = check.problems().len();
    let electricity = check.required(
        &table.electricity,
        &table.span(),
        "energy.electricity",
        "\"../tariffs/flat_electricity.toml\"",
    );
    let electricity = electricity
        .and_then(|path| tariff(&path, &table.electricity, Fuel::Electricity, folder, check));
    if let (Some(tariff), Some(leaf)) = (&electricity, &table.electricity)
        && tariff.metering == Metering::HeatPump
    {
        check.refuse(
            &leaf.span(),
            "a tariff of a heat pump's own meter for the whole home",
            "a tariff of the home's meter",
            "name the home's tariff here, and this one as electricity of a choice",
        );
    }
    let mut tariffs = Vec::new();
    for (fuel, leaf) in [
        (Fuel::Gas, &table.gas),
        (Fuel::HeatingOil, &table.heating_oil),
        (Fuel::Lpg, &table.lpg),
        (Fuel::Pellets, &table.pellets),
    ] {
        let Some(path) = check.value(leaf) else {
            continue;
        };
        let Some(tariff) = tariff(&path, leaf, fuel, folder, check) else {
            continue;
        };
        if let Some(electricity) = &electricity {
            same_currency(&tariff, electricity.currency, leaf, check);
        }
        tariffs.push(tariff);
    }
    let factors = factors(table, folder, check, notes);
    let (site, zone) = (site?, zone?);
    let household = household(
        raw.household.as_ref(),
        folder,
        &site.civil,
        zone,
        check,
        notes,
    );
    let (electricity, factors, household) = (electricity?, factors?, household?);
    if check.problems().len() > before {
        return None;
    }
    let currency = electricity.currency;
    let carbon_scope = factors.scope().words().to_owned();
    let mut fuels = Vec::with_capacity(tariffs.len());
    for tariff in tariffs {
        fuels.push(check.take(supply(tariff, &factors, &household, site, zone))?);
    }
    let electricity = check.take(supply(electricity, &factors, &household, site, zone))?;
    Some(Energy {
        currency,
        electricity,
        fuels,
        household: Arc::new(household),
        carbon_scope,
        factors,
        zone,
    })
}

fn same_currency(
    tariff: &Tariff,
    currency: Currency,
    leaf: &Option<Leaf<String>>,
    check: &mut Check,
) {
    let Some(leaf) = leaf.as_ref().filter(|_| tariff.currency != currency) else {
        return;
    };
    check.refuse(
        &leaf.span(),
        format!(
            "{} is paid in {}, the home's electricity in {currency}",
            tariff.fuel, tariff.currency
        ),
        "one currency for all tariffs of a brief",
        "give tariffs of one country, or convert one of them",
    );
}

/// Reads a tariff of a fuel.
fn tariff(
    path: &str,
    leaf: &Option<Leaf<String>>,
    fuel: Fuel,
    folder: &Folder,
    check: &mut Check,
) -> Option<Tariff> {
    let text = check.take(folder.text(path))?;
    let name = folder.name(path);
    let beside = std::path::Path::new(&name)
        .parent()
        .unwrap_or_else(|| "".as_ref());
    let tariff = check.take(Tariff::from_text(&name, &text, beside))?;
    for hourly in tariff
        .prices
        .iter()
        .filter_map(|prices| prices.hourly.as_ref())
    {
        // Read with the tariff; here its checksum is kept.
        let path = std::path::Path::new(path).with_file_name(&hourly.file);
        check.take(folder.bytes(&path.to_string_lossy()));
    }
    if tariff.fuel != fuel {
        let span = leaf.as_ref().map(Leaf::span).unwrap_or_default();
        check.refuse(
            &span,
            format!("a tariff of {}", tariff.fuel),
            format!("a tariff of {fuel}"),
            "name the file of the right tariff",
        );
        return None;
    }
    Some(tariff)
}

fn supply(
    tariff: Tariff,
    factors: &Factors,
    household: &Household,
    site: &Site,
    zone: Tz,
) -> Result<Supply, Problems> {
    let civil = tariff.civil(&site.axis, zone);
    let meter = tariff.meter(&civil)?;
    let own = if tariff.fuel == Fuel::Electricity && tariff.metering == Metering::Home {
        own_generation(&tariff, household, site)
    } else {
        None
    };
    Ok(Supply {
        findings: tariff.findings_over(&civil),
        signal: Signal {
            price: meter.price_column(&tariff, None).into(),
            carbon_kg: factors.carbon_column(tariff.fuel, &site.civil)?.into(),
            own,
        },
        account: Account {
            tariff: Arc::new(tariff),
            meter: Arc::new(meter),
            expected_kwh: None,
        },
    })
}

/// What the household leaves over of its own generation, and what feeding it back would pay.
fn own_generation(tariff: &Tariff, household: &Household, site: &Site) -> Option<OwnGeneration> {
    household.made_kwh.as_ref()?;
    let hours = 0..site.civil.len();
    let paid = |hour: usize| {
        let prices = &tariff.prices[tariff.in_force(site.civil[hour].date)];
        prices
            .export
            .as_ref()
            .map_or(0.0, |rate| rate.per_gross_kwh())
    };
    Some(OwnGeneration {
        spare_kwh: hours
            .clone()
            .map(|hour| (household.made(hour) - household.used(hour)).max(0.0))
            .collect(),
        price: hours.map(paid).collect(),
    })
}

impl Supply {
    /// Whether its price depends on how much is used.
    pub fn has_steps(&self) -> bool {
        let prices = &self.account.tariff.prices;
        prices.iter().any(|prices| prices.steps.is_some())
    }

    /// The same supply with the price signal of what its meter is expected to read in a year.
    pub fn expecting(&self, kwh: f64) -> Self {
        let Account { tariff, meter, .. } = &self.account;
        let mut supply = self.clone();
        supply.signal.price = meter.price_column(tariff, Some(kwh)).into();
        supply.account.expected_kwh = Some(kwh);
        supply
    }
}

impl Energy {
    /// The supply of a fuel, where the brief has a tariff for it.
    pub fn fuel(&self, fuel: Fuel) -> Option<&Supply> {
        self.fuels
            .iter()
            .find(|supply| supply.account.tariff.fuel == fuel)
    }

    /// Every supply that all systems share.
    pub fn supplies(&self) -> impl Iterator<Item = &Supply> {
        std::iter::once(&self.electricity).chain(&self.fuels)
    }

    /// The supply of a tariff that a choice names.
    pub fn of_choice(
        &self,
        leaf: &Option<Leaf<String>>,
        fuel: Fuel,
        folder: &Folder,
        site: &Site,
        check: &mut Check,
    ) -> Option<Supply> {
        let path = check.value(leaf)?;
        let tariff = tariff(&path, leaf, fuel, folder, check)?;
        let before = check.problems().len();
        same_currency(&tariff, self.currency, leaf, check);
        if check.problems().len() > before {
            return None;
        }
        let supply = supply(tariff, &self.factors, &self.household, site, self.zone);
        check.take(supply)
    }
}
