//! The pictures of an estimate, filled from outcomes and ledgers.
//!
//! One place knows which column feeds which picture; the chart room only draws.

mod carbon;
mod cold;
mod first;
mod flow;
mod levers;
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

pub use levers::study_pictures;
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
    let mut all = first::glances(material)?;
    all.extend([
        money::annual_cost(material)?,
        carbon::carbon(material)?,
        money::monthly(material)?,
    ]);
    all.extend(money::spend(material)?);
    all.extend(carbon::carbon_by_year(material)?);
    all.extend(signature::signature(material)?);
    all.extend(weather::weather_carpet(material)?);
    all.extend(weather::weather_duration(material)?);
    all.extend(weather::electricity_carpet(material)?);
    all.extend(machine::cop_year(material)?);
    all.extend(what_moves(material)?);
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

/// What moves the saving: the emitters of the cheapest heat pump, everything else of the cheapest choice.
fn what_moves(material: &Material<'_>) -> Result<Vec<Drawn>, ChartError> {
    let Material {
        estimate, locale, ..
    } = material;
    let (currency, marks) = (&estimate.currency, &locale.marks);
    let mut choices: Vec<_> = estimate.systems.iter().enumerate().skip(1).collect();
    choices.sort_by(|a, b| a.1.cost.total_cmp(&b.1.cost));
    let looked_at = choices.into_iter().filter_map(|(i, system)| {
        let found = estimate.what_if.iter().find(|w| w.label == system.label)?;
        Some((i + 1, system, found))
    });
    let looked_at: Vec<_> = looked_at.collect();
    let mut all = Vec::new();
    if let Some((number, system, found)) = looked_at.first().filter(|one| !one.2.swings.is_empty())
    {
        let of = (*number, system.label.as_str());
        let saving = system.saving.unwrap_or(0.0);
        all.push(levers::swings(of, saving, &found.swings, currency, marks)?);
    }
    let machine = looked_at
        .iter()
        .find_map(|(number, system, found)| Some((*number, system, found.emitters.as_ref()?)));
    if let Some((number, system, steps)) = machine {
        let of = (number, system.label.as_str());
        let found = estimate.break_even.get(&system.label);
        let break_even = found.map_or(&[][..], Vec::as_slice);
        all.push(levers::emitters(of, steps, break_even, currency, marks)?);
    }
    Ok(all)
}

/// Systems that stand in front, today's among them.
const IN_FRONT: usize = 5;

/// The systems that pictures of several and the pages of each are of: all where they are few, else today's and the cheapest choices,
/// in the order of the brief. Tables hold every system.
pub fn in_front(estimate: &Estimate) -> Vec<usize> {
    let costs: Vec<_> = estimate.systems.iter().map(|s| (s.today, s.cost)).collect();
    cheapest(&costs)
}

fn cheapest(costs: &[(bool, f64)]) -> Vec<usize> {
    let mut order: Vec<usize> = (0..costs.len()).collect();
    order.sort_by(|&a, &b| {
        let key = |i: usize| (!costs[i].0, costs[i].1);
        let (a, b) = (key(a), key(b));
        a.0.cmp(&b.0).then(a.1.total_cmp(&b.1))
    });
    order.truncate(IN_FRONT);
    order.sort_unstable();
    order
}

/// What a caption says where a picture does not show every system.
fn some_of_them(material: &Material<'_>) -> String {
    let shown = in_front(material.estimate).len();
    if shown == material.estimate.systems.len() {
        return String::new();
    }
    format!(
        " Shown are today’s system and the {} cheapest choices.",
        shown - 1
    )
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

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn today_and_the_cheapest_stand_in_front() {
        let three = [(false, 3.0), (true, 9.0), (false, 1.0)];
        assert_eq!(cheapest(&three), [0, 1, 2]);
        let mut many: Vec<_> = (0..9).map(|i| (false, f64::from(10 - i))).collect();
        many[0].0 = true;
        assert_eq!(cheapest(&many), [0, 5, 6, 7, 8]);
    }
}
