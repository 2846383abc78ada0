//! The years of the weather beside each other, in text.

use super::table::plain_table_within;
use super::text::WIDTH;
use super::told::Told;
use crate::answer::{ExtentAnswer, SystemAnswer, YearSpread};

/// More years than this are shown by their extremes only.
const MOST_YEARS: usize = 12;

/// The years of some systems, today's first; nothing for a single year.
pub(super) fn weather_years_text(systems: &[&SystemAnswer], told: &Told<'_>) -> Option<String> {
    let today = systems.first()?;
    let years = today.by_year.len();
    if years < 2 {
        return None;
    }
    let mut text = if years <= MOST_YEARS {
        format!("{}\n\n", each_year(systems, told))
    } else {
        String::new()
    };
    text += &spreads(systems, years, told);
    Some(text)
}

fn each_year(systems: &[&SystemAnswer], told: &Told<'_>) -> String {
    let names = systems.iter().map(|system| {
        if system.today {
            format!("{}: cost", system.label)
        } else {
            format!("{}: saving", system.label)
        }
    });
    let header = [
        told.currency().to_owned(),
        "Outdoors, mean, lowest °C".to_owned(),
    ]
    .into_iter()
    .chain(names);
    let years = systems.first().map_or(&[][..], |today| &today.by_year);
    let rows = years.iter().enumerate().map(|(i, year)| {
        let [mean, least] = [year.mean_outdoor_c, year.min_outdoor_c].map(|c| told.n(c, 1));
        // A comma would not part figures that have one themselves.
        let outdoors = format!("{mean}; {least}");
        let figures = systems.iter().map(|system| {
            let year = system.by_year.get(i);
            let figure = year.and_then(|year| match year.saving {
                Some(saving) => Some(told.signed_money(saving)),
                None => system.today.then(|| told.money(year.cost)),
            });
            figure.unwrap_or_else(|| "–".to_owned())
        });
        [year.year.to_string(), outdoors]
            .into_iter()
            .chain(figures)
            .collect()
    });
    plain_table_within(WIDTH, header, rows)
}

/// A figure's name, its extent in a system, and how a value is written.
type Line = (
    &'static str,
    fn(&YearSpread) -> Option<&ExtentAnswer>,
    fn(&Told<'_>, f64) -> String,
);

const LINES: &[Line] = &[
    ("Cost of a year", |s| Some(&s.cost), |t, v| t.money(v)),
    ("Saving", |s| s.saving.as_ref(), |t, v| t.signed_money(v)),
    ("Carbon, kg CO2e", |s| Some(&s.carbon_kg), |t, v| t.n(v, 0)),
    ("SPF, H4", |s| s.spf_h4.as_ref(), |t, v| t.n(v, 2)),
    ("Backup, kWh", |s| s.backup_kwh.as_ref(), |t, v| t.n(v, 0)),
    (
        "Coldest indoors, °C",
        |s| Some(&s.min_indoor_c),
        |t, v| t.n(v, 1),
    ),
];

fn spreads(systems: &[&SystemAnswer], years: usize, told: &Told<'_>) -> String {
    let header = std::iter::once(format!("{years} years, {}", told.currency()))
        .chain(systems.iter().map(|system| system.label.clone()));
    let rows = LINES.iter().filter_map(|(name, of, written)| {
        let extents: Vec<_> = systems
            .iter()
            .map(|system| system.year_spread.as_ref().and_then(of))
            .collect();
        let known = extents.iter().any(Option::is_some);
        let cells = extents.into_iter().map(|extent| match extent {
            Some(extent) => {
                let [least, greatest] = [extent.least, extent.greatest].map(|v| written(told, v));
                format!("{least} to {greatest}")
            }
            None => "–".to_owned(),
        });
        known.then(|| std::iter::once((*name).to_owned()).chain(cells).collect())
    });
    plain_table_within(WIDTH, header, rows)
}
