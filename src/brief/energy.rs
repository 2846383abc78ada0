//! Tariffs, currency and carbon: what all systems of a brief share.

use std::sync::Arc;

use chrono_tz::Tz;

use super::files::Folder;
use super::notes::Notes;
use super::raw;
use crate::bounds;
use crate::carbon::{Course, Factor, Factors, PUBLISHED, Published, Scope};
use crate::document::{Check, Leaf, Section};
use crate::problem::{Place, Problems};
use crate::study::Account;
use crate::tariff::Tariff;
use crate::units::{CarbonFactor, Currency, Fuel};
use crate::year::{Signal, Site};

/// Tariffs, currency and carbon.
#[derive(Debug, Clone)]
pub(super) struct Energy {
    /// What everything is paid in.
    pub currency: Currency,
    /// Electricity.
    pub electricity: Supply,
    /// Gas, where the brief has a tariff for it.
    pub gas: Option<Supply>,
    /// What the carbon factors count, in words.
    pub carbon_scope: String,
}

/// One supply: its account, and its price and carbon in every hour.
#[derive(Debug, Clone)]
pub(super) struct Supply {
    pub account: Account,
    pub signal: Signal,
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
    let electricity = check.required(
        &table.electricity,
        &table.span(),
        "energy.electricity",
        "\"../tariffs/flat_electricity.toml\"",
    );
    let electricity = electricity
        .and_then(|path| tariff(&path, &table.electricity, Fuel::Electricity, folder, check));
    let gas_path = check.value(&table.gas);
    let gas = gas_path.and_then(|path| tariff(&path, &table.gas, Fuel::Gas, folder, check));
    if let (Some(electricity), Some(gas), Some(leaf)) = (&electricity, &gas, &table.gas)
        && electricity.currency != gas.currency
    {
        check.refuse(
            &leaf.span(),
            format!(
                "gas is paid in {}, electricity in {}",
                gas.currency, electricity.currency
            ),
            "one currency for all tariffs of a brief",
            "give tariffs of one country, or convert one of them",
        );
    }
    let factors = factors(table, check, notes);
    let (electricity, factors, site, zone) = (electricity?, factors?, site?, zone?);
    let currency = electricity.currency;
    let carbon_scope = factors.scope().words().to_owned();
    let supply = |tariff: Tariff, check: &mut Check| supply(tariff, &factors, site, zone, check);
    let electricity = supply(electricity, check);
    let gas = match (gas, &table.gas) {
        (Some(tariff), _) => Some(supply(tariff, check)?),
        (None, Some(_)) => return None,
        (None, None) => None,
    };
    Some(Energy {
        currency,
        electricity: electricity?,
        gas,
        carbon_scope,
    })
}

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
    site: &Site,
    zone: Tz,
    check: &mut Check,
) -> Option<Supply> {
    let made = || -> Result<Supply, Problems> {
        let civil = tariff.civil(&site.axis, zone);
        let meter = tariff.meter(&civil)?;
        let signal = Signal {
            price: meter.price_column(&tariff, None),
            carbon_kg: factors.carbon_column(tariff.fuel, &site.civil)?,
        };
        Ok(Supply {
            account: Account {
                tariff: Arc::new(tariff.clone()),
                meter: Arc::new(meter),
            },
            signal,
        })
    };
    check.take(made())
}

fn factors(
    table: &Section<raw::Energies>,
    check: &mut Check,
    notes: &mut Notes,
) -> Option<Factors> {
    let set = match (&table.carbon, check.value(&table.carbon)) {
        (None, _) => Published::default_set(),
        (Some(leaf), Some(name)) => match Published::of(&name) {
            Some(set) => set,
            None => {
                let names: Vec<_> = PUBLISHED
                    .iter()
                    .map(|set| format!("\"{}\"", set.name))
                    .collect();
                check.refuse(
                    &leaf.span(),
                    format!("\"{name}\""),
                    names.join(", "),
                    "name one of the published sets",
                );
                return None;
            }
        },
        (Some(_), None) => return None,
    };
    let own_scope = scope(table, check);
    let electricity = own(
        &table.electricity_carbon,
        Fuel::Electricity,
        own_scope,
        table,
        check,
    );
    let gas = own(&table.gas_carbon, Fuel::Gas, own_scope, table, check);
    let published: Vec<Factor> = set.factors().iter().cloned().collect();
    let factors: Vec<Factor> = [Fuel::Electricity, Fuel::Gas]
        .into_iter()
        .zip([electricity, gas])
        .filter_map(|(fuel, own)| {
            own.or_else(|| published.iter().find(|factor| factor.fuel == fuel).cloned())
        })
        .collect();
    for factor in &factors {
        if let Course::Constant(kg) = factor.course {
            notes.add(
                format!("carbon of {}", factor.fuel),
                format!("{kg:.5} kg CO2e/kWh"),
                factor.source.clone(),
            );
        } else {
            notes.add(
                format!("carbon of {}", factor.fuel),
                "by month or hour",
                factor.source.clone(),
            );
        }
    }
    check.take(Factors::new(factors))
}

fn scope(table: &Section<raw::Energies>, check: &mut Check) -> Option<Scope> {
    let leaf = table.carbon_scope.as_ref()?;
    let name = check.value(&table.carbon_scope)?;
    let scope = Scope::from_name(&name);
    if scope.is_none() {
        let names: Vec<_> = Scope::ALL
            .iter()
            .map(|scope| format!("\"{}\" ({})", scope.name(), scope.words()))
            .collect();
        check.refuse(
            &leaf.span(),
            format!("\"{name}\""),
            names.join(", "),
            "say what the carbon factors count",
        );
    }
    scope
}

fn own(
    leaf: &Option<Leaf<CarbonFactor>>,
    fuel: Fuel,
    scope: Option<Scope>,
    table: &Section<raw::Energies>,
    check: &mut Check,
) -> Option<Factor> {
    let factor = check.within(leaf, &bounds::CARBON_KG_PER_KWH)?;
    let place: Place = leaf
        .as_ref()
        .map(|leaf| check.place(&leaf.span()))
        .unwrap_or_default();
    if scope.is_none() && table.carbon_scope.is_none() {
        check.missing(
            &table.span(),
            "energy.carbon_scope",
            "\"burning-at-the-meter\", which says what the factor counts",
        );
    }
    Some(Factor {
        fuel,
        course: Course::Constant(factor.kg_per_kwh()),
        scope: scope?,
        source: "brief".to_owned(),
        place,
    })
}
