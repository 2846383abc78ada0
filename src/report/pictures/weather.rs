//! The weather, and the electricity that follows it, hour by hour.

use std::ops::Range;

use super::{Drawn, Material, drawn, of_the_year};
use crate::chart::{self, ChartError, calendar_months};
use crate::report::hours::{coldest_days_of, coldest_year};
use crate::report::sentences::file;

/// Hours of a day's column.
const HOURS: usize = 24;

/// The coldest year as a carpet of outdoor temperature, its coldest three days marked.
pub(super) fn weather_carpet(material: &Material<'_>) -> Result<Option<Drawn>, ChartError> {
    let site = &material.case.site;
    let data = carpet(
        material,
        "The weather, hour by hour",
        ("Outdoor temperature", "°C"),
        |hour| site.outdoor_c.get(hour).copied(),
    );
    let Some(data) = data else {
        return Ok(None);
    };
    let picture = chart::carpet(&data, &material.locale.marks)?;
    let caption = format!(
        "Every hour{} that the systems were run through.",
        of_the_year(material)
    );
    Ok(Some(drawn("weather-carpet", caption, picture)))
}

/// The electricity of the cheapest choice as a carpet.
pub(super) fn electricity_carpet(material: &Material<'_>) -> Result<Option<Drawn>, ChartError> {
    let systems = material.estimate.systems.iter().enumerate();
    let cheapest = systems.filter(|(_, system)| !system.today).min_by(|a, b| {
        let cold = a.1.leaves_cold.is_some().cmp(&b.1.leaves_cold.is_some());
        cold.then(a.1.cost.total_cmp(&b.1.cost))
    });
    let Some((system, answer)) = cheapest else {
        return Ok(None);
    };
    let ledger = &material.ledgers[system];
    let data = carpet(
        material,
        "When it takes electricity",
        ("Electricity of heating", "kW"),
        |hour| {
            let row = ledger.rows.get(hour.checked_sub(ledger.first_hour)?)?;
            Some(row.electricity_kwh())
        },
    );
    let Some(data) = data else {
        return Ok(None);
    };
    let picture = chart::carpet(&data, &material.locale.marks)?;
    let caption = format!(
        "{}, the cheapest choice: electricity of every hour{}.",
        answer.name(),
        of_the_year(material)
    );
    Ok(Some(drawn("electricity-carpet", caption, picture)))
}

/// How many hours of all years are how cold.
pub(super) fn weather_duration(material: &Material<'_>) -> Result<Option<Drawn>, ChartError> {
    let site = &material.case.site;
    if site.outdoor_c.is_empty() {
        return Ok(None);
    }
    let data = chart::DurationCurve {
        place: file(&material.estimate.weather.file),
        outdoor_c: site.outdoor_c.clone(),
        levels: vec![("design".to_owned(), material.estimate.home.design_outdoor_c)],
    };
    let picture = chart::duration_curve(&data, &material.locale.marks)?;
    let caption = "The hours in order of their temperature: how many are colder than any temperature, and how few are as cold as the home is designed for.";
    Ok(Some(drawn("weather-duration", caption, picture)))
}

/// The brine of each choice that draws on the ground, through the coldest year.
pub(super) fn brine(material: &Material<'_>, system: usize) -> Result<Option<Drawn>, ChartError> {
    let contender = &material.case.contenders[system];
    let Some(machine) = contender.system.heating.machine() else {
        return Ok(None);
    };
    let rows = super::year_rows(material, system);
    if contender.kind != "ground-source" || rows.is_empty() {
        return Ok(None);
    }
    let hours_c: Vec<f64> = rows
        .iter()
        .map(|row| row.source_c.unwrap_or(f64::NAN))
        .collect();
    if hours_c.iter().all(|c| c.is_nan()) {
        return Ok(None);
    }
    let data = chart::BrineYear {
        source: material.estimate.systems[system].label.clone(),
        lines: vec![chart::BrineLine {
            label: format!("year {}", contender.shown_year),
            hours_c,
        }],
        months: calendar_months(rows.len() > 365 * HOURS),
        undisturbed_c: None,
        limit: Some((
            "lowest the machine accepts".to_owned(),
            machine.machine.limits().lowest_source_c,
        )),
    };
    let picture = chart::brine_year(&data, &material.locale.marks)?;
    let caption = format!(
        "Brine that enters the machine in each day of year {} of the loop’s life.",
        contender.shown_year
    );
    Ok(Some(drawn(
        format!("brine-{}", system + 1),
        caption,
        picture,
    )))
}

/// A quantity of every hour of the coldest year by the home's clock: a doubled hour is shown once, a skipped one stays white.
fn carpet(
    material: &Material<'_>,
    title: &str,
    (quantity, unit): (&str, &str),
    value: impl Fn(usize) -> Option<f64>,
) -> Option<chart::Carpet> {
    let site = &material.case.site;
    let (year, hours) = coldest_year(site)?;
    let cold = coldest_days_of(site).unwrap_or(0..0);
    let mut cells: Vec<Option<f64>> = Vec::new();
    let mut months: Vec<(f64, String)> = Vec::new();
    let mut spell: Option<Range<usize>> = None;
    let mut last = None;
    for hour in hours {
        let civil = site.civil.get(hour)?;
        if last != Some(civil.date) {
            last = Some(civil.date);
            let day = cells.len() / HOURS;
            cells.extend([None; HOURS]);
            let month = civil.date.format("%b").to_string();
            if months.last().is_none_or(|(_, before)| *before != month) {
                months.push((day as f64, month));
            }
            if cold.contains(&hour) {
                let first = spell.map_or(day, |spell| spell.start);
                spell = Some(first..day + 1);
            }
        }
        let column = cells.len() - HOURS;
        if let Some(cell) = cells.get_mut(column + usize::from(civil.hour))
            && cell.is_none()
        {
            *cell = value(hour);
        }
    }
    let several = site.years.len() > 1;
    Some(chart::Carpet {
        title: if several {
            format!("{title}: {year}")
        } else {
            title.to_owned()
        },
        quantity: quantity.to_owned(),
        unit: unit.to_owned(),
        hours: cells,
        months,
        spell: spell.map(|days| chart::Spell {
            first_day: days.start,
            days: days.len(),
            label: "the coldest three days".to_owned(),
        }),
    })
}
