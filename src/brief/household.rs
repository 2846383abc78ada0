//! What the home uses and makes beside its heating.

use chrono_tz::Tz;

use super::columns::DayShape;
use super::defaults;
use super::files::Folder;
use super::notes::Notes;
use super::raw::HouseholdTable;
use crate::bounds;
use crate::calendar::CivilHour;
use crate::document::{Check, Leaf, Section};
use crate::series::{Layout, Series, Stamp, WithinHour, read_text};
use crate::year::Household;

/// Electricity of a home without its heating over the day: least at night, most in the early evening. Common practice, no source.
const USUAL_DAY: [f64; 24] = [
    0.60, 0.50, 0.45, 0.45, 0.45, 0.50, 0.70, 1.00, 1.10, 1.00, 0.95, 0.95, 1.05, 1.00, 0.95, 1.00,
    1.20, 1.55, 1.70, 1.65, 1.50, 1.35, 1.10, 0.85,
];

/// Reads the household's columns over the hours of a clock.
pub(super) fn household(
    table: Option<&Section<HouseholdTable>>,
    folder: &Folder,
    civil: &[CivilHour],
    zone: Tz,
    check: &mut Check,
    notes: &mut Notes,
) -> Option<Household> {
    let Some(table) = table else {
        return Some(Household::default());
    };
    let before = check.problems().len();
    let files = Files {
        table,
        folder,
        civil,
        zone,
    };
    let yearly = check.within(&table.electricity, &bounds::HOUSEHOLD_KWH);
    let shape = check.value(&table.shape);
    if let (Some(leaf), Some(_)) = (&table.shape, &table.load) {
        check.refuse(
            &leaf.span(),
            "both shape and load",
            "one of them: a load has a shape of its own",
            "remove shape",
        );
    }
    if let (Some(leaf), None, None) = (&table.shape, &table.electricity, &table.load) {
        check.refuse(
            &leaf.span(),
            "a shape without an amount",
            "electricity, the amount of a year, beside shape",
            "write for example electricity = \"2700 kWh\"",
        );
    }
    let load = files.column(&table.load, &table.load_column, check);
    let made_kwh = files.column(&table.generation, &table.generation_column, check);
    if check.problems().len() > before {
        return None;
    }
    let used_kwh = match (load, yearly) {
        (Some(mut load), Some(yearly)) => {
            let years = load.len() as f64 / HOURS_PER_YEAR;
            let sum: f64 = load.iter().sum();
            if sum > 0.0 {
                let factor = yearly.kwh() * years / sum;
                load.iter_mut().for_each(|kwh| *kwh *= factor);
            }
            Some(load)
        }
        (Some(load), None) => Some(load),
        (None, Some(yearly)) => {
            let shape = shape.map_or_else(
                || {
                    notes.used(&defaults::HOUSEHOLD_SHAPE);
                    let sum: f64 = USUAL_DAY.iter().sum();
                    USUAL_DAY.map(|part| part / sum)
                },
                |DayShape(parts)| parts,
            );
            Some(spread(yearly.kwh(), &shape, civil))
        }
        (None, None) => None,
    };
    if made_kwh.is_some() {
        notes.add(
            "own generation",
            "serves the home in the same hour first; counts no carbon, and what is fed back earns none",
            "a choice of ours",
        );
    }
    Some(Household { used_kwh, made_kwh })
}

/// Hours of a mean year.
const HOURS_PER_YEAR: f64 = 8766.0;

/// A yearly amount over the hours, every day alike.
fn spread(yearly_kwh: f64, shape: &[f64; 24], civil: &[CivilHour]) -> Vec<f64> {
    let hour_kwh = |hour: &CivilHour| {
        let days = if hour.date.leap_year() { 366.0 } else { 365.0 };
        yearly_kwh / days * shape[usize::from(hour.hour)]
    };
    civil.iter().map(hour_kwh).collect()
}

/// Hourly files of the household.
struct Files<'a> {
    table: &'a Section<HouseholdTable>,
    folder: &'a Folder,
    civil: &'a [CivilHour],
    zone: Tz,
}

impl Files<'_> {
    fn column(
        &self,
        path: &Option<Leaf<String>>,
        column: &Option<Leaf<String>>,
        check: &mut Check,
    ) -> Option<Vec<f64>> {
        let (leaf, path) = (path.as_ref()?, check.value(path)?);
        let layout = Layout {
            column: check.value(column),
            stamp: check
                .value(&self.table.stamps)
                .map_or(Stamp::Beginning, |(stamps,)| stamps.0),
            zone: self.zone,
            within_hour: WithinHour::Sum,
        };
        let every_year = check.value(&self.table.every_year).unwrap_or(false);
        let text = check.take(self.folder.text(&path))?;
        let series = check.take(read_text(&self.folder.name(&path), &text, &layout))?;
        let outside = |kwh: &f64| !bounds::HOURLY_KWH.holds(*kwh);
        if let Some(at) = series.values().iter().position(outside) {
            check.refuse(
                &leaf.span(),
                format!("{} kWh in hour {} of the file", series.values()[at], at + 1),
                bounds::HOURLY_KWH.words(),
                "give kilowatt-hours of each hour; what is fed back is not part of a load",
            );
            return None;
        }
        let values: Vec<f64> = self
            .civil
            .iter()
            .filter_map(|hour| value(&series, hour, every_year))
            .collect();
        if values.len() < self.civil.len() {
            check.refuse(
                &leaf.span(),
                format!(
                    "no value for {} of the {} hours of the weather",
                    self.civil.len() - values.len(),
                    self.civil.len()
                ),
                format!("a value for every hour; the file covers {}", series.covers()),
                "give the same year as the weather, or set every_year = true to use one year for any",
            );
            return None;
        }
        Some(values)
    }
}

fn value(series: &Series, hour: &CivilHour, every_year: bool) -> Option<f64> {
    if every_year {
        series.at_any_year(hour)
    } else {
        series.at(hour)
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::calendar::HourAxis;

    /// A civil year holds the year's amount, also with 366 days; a day's clock change moves less than an hour's worth.
    #[test]
    fn a_year_holds_its_amount() {
        let zone: Tz = "Europe/London".parse().unwrap();
        let sum: f64 = USUAL_DAY.iter().sum();
        let shape = USUAL_DAY.map(|part| part / sum);
        for year in [2023, 2024] {
            let civil = HourAxis::civil_year(year, zone).unwrap().civil(zone);
            let total: f64 = spread(2700.0, &shape, &civil).iter().sum();
            assert!((total - 2700.0).abs() < 1.0, "{year}: {total}");
        }
    }
}
