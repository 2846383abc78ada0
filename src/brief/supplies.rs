//! The tariffs a system buys by, and what is bought beside it.

use super::energy::{Energy, Supply};
use super::raw::SystemTable;
use super::system::Surroundings;
use crate::document::{Check, Leaf, Section};
use crate::problem::Finding;
use crate::study::Beside;
use crate::tariff::Metering;
use crate::units::Fuel;
use crate::year::{Metered, Plan, Site, State, System, run};

/// What a system is supplied with.
pub(super) struct Supplies {
    pub electricity: Supply,
    pub fuel: Option<Supply>,
    pub beside: Vec<Beside>,
    pub findings: Vec<Finding>,
}

/// The tariffs of a system: its own where it names them, else the home's; and what goes on beside it.
pub(super) fn supplies(
    table: &Section<SystemTable>,
    burnt: Option<Fuel>,
    around: &Surroundings<'_>,
    check: &mut Check,
) -> Option<Supplies> {
    let (energy, site) = (around.energy?, around.site?);
    let before = check.problems().len();
    let mut findings = Vec::new();
    let mut own = |leaf: &Option<Leaf<String>>, fuel: Fuel, check: &mut Check| {
        let supply = energy.of_choice(leaf, fuel, around.folder, site, check)?;
        findings.extend(supply.findings.iter().cloned());
        Some(supply)
    };
    let electricity = own(&table.electricity, Fuel::Electricity, check);
    let fuel =
        burnt.and_then(|fuel| own(&table.fuel, fuel, check).or_else(|| energy.fuel(fuel).cloned()));
    if let (Some(burnt), None, None) = (burnt, &fuel, &table.fuel) {
        let field = format!("energy.{}", burnt.name().replace('-', "_"));
        let example = format!("\"../tariffs/….toml\", a tariff of {burnt}, which its boiler needs");
        check.missing(&table.span(), &field, &example);
    }
    let mut beside = Vec::new();
    if let Some(own) = &electricity
        && own.account.tariff.metering == Metering::HeatPump
    {
        let account = energy.electricity.account.clone();
        let reading = energy.household.reading(&account.meter);
        beside.push(Beside { account, reading });
    }
    let keeps_gas = check.value(&table.keeps_gas).unwrap_or(false);
    if keeps_gas && burnt != Some(Fuel::Gas) {
        if let Some(gas) = energy.fuel(Fuel::Gas) {
            let account = gas.account.clone();
            let reading = account.meter.zero();
            beside.push(Beside { account, reading });
        } else {
            check.missing(
                &table.span(),
                "energy.gas",
                "\"../tariffs/flat_gas.toml\", whose standing charge keeps_gas keeps",
            );
        }
    }
    if check.problems().len() > before {
        return None;
    }
    Some(Supplies {
        electricity: electricity.unwrap_or_else(|| energy.electricity.clone()),
        fuel,
        beside,
        findings,
    })
}

/// What the electricity meter of a system reads in a mean year.
pub(super) fn expected_kwh(
    electricity: &Supply,
    energy: &Energy,
    site: &Site,
    system: &System,
    plan: &impl Fn(&Supply) -> Plan,
    indoor_c: f64,
) -> f64 {
    let account = &electricity.account;
    let metering = account.tariff.metering;
    let mut metered = Metered::new(metering, &energy.household, &account.meter, None);
    let mut state = State::at_rest(system, indoor_c);
    let hours = 0..site.outdoor_c.len();
    run(
        site,
        system,
        &plan(electricity),
        hours,
        &mut state,
        &mut metered,
    );
    let read_kwh: f64 = metered.electricity.import_kwh.iter().sum();
    read_kwh / site.years.len() as f64
}
