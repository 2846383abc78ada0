//! The pictures of an estimate, filled from outcomes and ledgers.
//!
//! One place knows which column feeds which picture; the chart room only draws.

mod carbon;
mod cold;
mod flow;
mod machine;
mod money;
mod signature;
mod weather;

use super::hours::coldest_year;
use crate::answer::Estimate;
use crate::chart::{ChartError, Picture};
use crate::locale::Locale;
use crate::signature::Signature;
use crate::study::{Case, Outcome};
use crate::year::{Flags, Heating, Ledger, Row};

pub use signature::signature_picture;

/// A picture with the name of its file and the sentence that stands below it.
#[derive(Debug, Clone)]
pub struct Drawn {
    /// Name without ending; one of a system ends in the system's number, counted from 1.
    pub name: String,
    /// How to read it.
    pub caption: String,
    /// The picture.
    pub picture: Picture,
    /// The same as bars for a page that is too narrow for it; empty where it has no such form.
    pub narrow: Vec<Bar>,
}

/// One bar of several parts.
#[derive(Debug, Clone)]
pub struct Bar {
    /// What it is of.
    pub label: String,
    /// From the left.
    pub parts: Vec<BarPart>,
    /// What they come to, as it is written.
    pub total: String,
}

/// A part of a bar.
#[derive(Debug, Clone)]
pub struct BarPart {
    /// What it is.
    pub name: String,
    /// How long it is.
    pub amount: f64,
    /// The same as it is written.
    pub written: String,
}

/// What the pictures are filled from. Outcomes and ledgers stand in the order of the case.
#[derive(Debug, Clone, Copy)]
pub struct Material<'a> {
    /// The systems.
    pub case: &'a Case,
    /// What their years came to.
    pub outcomes: &'a [Outcome],
    /// Their hours.
    pub ledgers: &'a [Ledger],
    /// The answer.
    pub estimate: &'a Estimate,
    /// What the meter readings of the brief show; nothing where it names none.
    pub signature: Option<&'a Signature>,
    /// How figures are written.
    pub locale: Locale,
}

/// Draws every picture that the systems have something for.
///
/// # Errors
/// When a figure cannot be drawn.
pub fn pictures(material: &Material<'_>) -> Result<Vec<Drawn>, ChartError> {
    let mut all = vec![
        money::annual_cost(material)?,
        carbon::carbon(material)?,
        money::monthly(material)?,
    ];
    all.extend(money::spend(material)?);
    all.extend(carbon::carbon_by_year(material)?);
    all.extend(signature::signature(material)?);
    all.extend(weather::weather_carpet(material)?);
    all.extend(weather::weather_duration(material)?);
    all.extend(weather::electricity_carpet(material)?);
    all.extend(machine::cop_year(material)?);
    for system in 0..material.case.contenders.len() {
        all.extend(flow::energy_flow(material, system)?);
        if material.case.contenders[system]
            .system
            .heating
            .machine()
            .is_some()
        {
            all.extend(machine::demand_and_output(material, system)?);
            all.extend(machine::load_duration(material, system)?);
            all.extend(weather::brine(material, system)?);
        }
        if !material.case.contenders[system].today {
            all.extend(cold::coldest_days(material, system)?);
        }
    }
    Ok(all)
}

/// A picture without a narrow form.
pub(super) fn drawn(
    name: impl Into<String>,
    caption: impl Into<String>,
    picture: Picture,
) -> Drawn {
    Drawn {
        name: name.into(),
        caption: caption.into(),
        picture,
        narrow: Vec::new(),
    }
}

/// Heat that the rooms missed, kWh. An hour that a block of hot water took is bridged by the warmth of the building and made up
/// later; only rooms that grew cold were short.
fn not_met(row: &Row) -> f64 {
    if row.flags.has(Flags::SHORT) {
        (row.space_wanted_kwh - row.space_heat_kwh()).max(0.0)
    } else {
        0.0
    }
}

/// What makes the heat before backup does.
fn heater_name(heating: &Heating) -> &'static str {
    match heating {
        Heating::HeatPump(_) => "heat pump",
        Heating::Hybrid(_) => "heat pump and boiler",
        Heating::Boiler { .. } => "boiler",
        Heating::DirectElectric { .. } => "electric heater",
    }
}

/// The rows of the year that pictures of hours show: the coldest of the weather.
fn year_rows<'a>(material: &Material<'a>, system: usize) -> &'a [Row] {
    let ledger = &material.ledgers[system];
    coldest_year(&material.case.site)
        .and_then(|(_, hours)| {
            let first = hours.start.checked_sub(ledger.first_hour)?;
            ledger.rows.get(first..first + hours.len())
        })
        .unwrap_or(&[])
}

/// Which year that is, when there are several.
fn of_the_year(material: &Material<'_>) -> String {
    let site = &material.case.site;
    match coldest_year(site) {
        Some((year, _)) if site.years.len() > 1 => {
            format!(" of {year}, the coldest of {} years", site.years.len())
        }
        _ => " of the year".to_owned(),
    }
}
