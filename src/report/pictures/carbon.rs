//! Greenhouse gas of the systems.

use super::money::lifetime_in_front;
use super::{Drawn, Material, drawn, in_front, some_of_them};
use crate::chart::{self, ChartError};
use crate::study::Contender;
use crate::year::Ledger;

pub(super) fn carbon(material: &Material<'_>) -> Result<Drawn, ChartError> {
    let years = material.case.site.years.len() as f64;
    let systems = in_front(material.estimate).into_iter().map(|i| {
        let (contender, ledger) = (&material.case.contenders[i], &material.ledgers[i]);
        let s = &material.estimate.systems[i];
        let fuel_kg = fuel_carbon_kg(contender, ledger) / years;
        chart::SystemCarbon {
            label: s.label.clone(),
            today: s.today,
            electricity_kg: s.carbon_kg - fuel_kg,
            fuel_kg,
            refrigerant_kg: 0.0,
        }
    });
    let data = chart::CarbonBySystem {
        systems: systems.collect(),
        scope: material.estimate.carbon_scope.clone().unwrap_or_default(),
    };
    let picture = chart::carbon_by_system(&data, &material.locale.marks)?;
    let caption = format!(
        "Greenhouse gas of a year, by where it comes from. Refrigerant that may leak is not in it.{}",
        some_of_them(material)
    );
    Ok(drawn("carbon", caption, picture))
}

fn fuel_carbon_kg(contender: &Contender, ledger: &Ledger) -> f64 {
    let Some(fuel) = &contender.plan.fuel else {
        return 0.0;
    };
    let factors = fuel.carbon_kg.iter().skip(ledger.first_hour);
    ledger
        .rows
        .iter()
        .zip(factors)
        .map(|(row, factor)| row.fuel_kwh * factor)
        .sum()
}

/// Greenhouse gas of each year, where the years are counted.
pub(super) fn carbon_by_year(material: &Material<'_>) -> Result<Option<Drawn>, ChartError> {
    if material.estimate.lifetime.is_none() {
        return Ok(None);
    }
    let systems = lifetime_in_front(material).map(|system| chart::SystemYears {
        label: system.label.clone(),
        today: system.today,
        // Year 0 is the day on which things are bought; nothing has been burnt then.
        carbon_kg: system
            .by_year
            .iter()
            .skip(1)
            .map(|year| year.carbon_kg)
            .collect(),
    });
    let data = chart::CarbonByYear {
        first_year: 1,
        scope: "those of today along their paths".to_owned(),
        systems: systems.collect(),
    };
    let picture = chart::carbon_by_year(&data, &material.locale.marks)?;
    let caption = format!(
        "Greenhouse gas of each year, counted from the day on which a choice is put in.{}",
        some_of_them(material)
    );
    Ok(Some(drawn("carbon-by-year", caption, picture)))
}
