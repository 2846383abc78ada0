//! The years of the weather beside each other, in text.

use super::table::plain_table_within;
use super::text::WIDTH;
use crate::answer::{ExtentAnswer, SystemAnswer, YearSpread};
use crate::locale::Marks;

/// More years than this are shown by their extremes only.
const MOST_YEARS: usize = 12;

/// The years of some systems, today's first; nothing for a single year.
pub(super) fn weather_years_text(
    systems: &[&SystemAnswer],
    currency: &str,
    marks: &Marks,
) -> Option<String> {
    let today = systems.first()?;
    let years = today.by_year.len();
    if years < 2 {
        return None;
    }
    let mut text = if years <= MOST_YEARS {
        format!("{}\n\n", each_year(systems, currency, marks))
    } else {
        String::new()
    };
    text += &spreads(systems, currency, years, marks);
    Some(text)
}

fn each_year(systems: &[&SystemAnswer], currency: &str, marks: &Marks) -> String {
    let names = systems.iter().map(|system| {
        if system.today {
            format!("{}: cost", system.label)
        } else {
            format!("{}: saving", system.label)
        }
    });
    let header = [currency.to_owned(), "Outdoors, mean, lowest °C".to_owned()]
        .into_iter()
        .chain(names);
    let years = systems.first().map_or(&[][..], |today| &today.by_year);
    let rows = years.iter().enumerate().map(|(i, year)| {
        let outdoors = format!("{:.1}, {:.1}", year.mean_outdoor_c, year.min_outdoor_c);
        let outdoors = marks.localized(&outdoors);
        let figures = systems.iter().map(|system| {
            let year = system.by_year.get(i);
            let figure = year.and_then(|year| match year.saving {
                Some(saving) => Some(format!("{saving:+.0}")),
                None => system.today.then(|| format!("{:.0}", year.cost)),
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
    fn(f64) -> String,
);

const LINES: &[Line] = &[
    ("Cost of a year", |s| Some(&s.cost), |v| format!("{v:.0}")),
    ("Saving", |s| s.saving.as_ref(), |v| format!("{v:+.0}")),
    (
        "Carbon, kg CO2e",
        |s| Some(&s.carbon_kg),
        |v| format!("{v:.0}"),
    ),
    ("SPF, H4", |s| s.spf_h4.as_ref(), |v| format!("{v:.2}")),
    (
        "Backup, kWh",
        |s| s.backup_kwh.as_ref(),
        |v| format!("{v:.0}"),
    ),
    (
        "Coldest indoors, °C",
        |s| Some(&s.min_indoor_c),
        |v| format!("{v:.1}"),
    ),
];

fn spreads(systems: &[&SystemAnswer], currency: &str, years: usize, marks: &Marks) -> String {
    let header = std::iter::once(format!("{years} years, {currency}"))
        .chain(systems.iter().map(|system| system.label.clone()));
    let rows = LINES.iter().filter_map(|(name, of, written)| {
        let extents: Vec<_> = systems
            .iter()
            .map(|system| system.year_spread.as_ref().and_then(of))
            .collect();
        let known = extents.iter().any(Option::is_some);
        let cells = extents.into_iter().map(|extent| match extent {
            Some(extent) => marks.localized(&format!(
                "{} to {}",
                written(extent.least),
                written(extent.greatest)
            )),
            None => "–".to_owned(),
        });
        known.then(|| std::iter::once((*name).to_owned()).chain(cells).collect())
    });
    plain_table_within(WIDTH, header, rows)
}
