//! What `weather` answers: a weather file in figures.

use std::collections::BTreeMap;

use serde::Serialize;

use super::Assumption;
use crate::problem::Finding;
use crate::weather::{Adjusted, Description, Kind, TypicalYear, Weather};

/// A weather file, or several, in figures. Temperatures are outdoor dry bulb.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct WeatherAnswer {
    /// The files, as the user named them.
    pub file: String,
    /// Clock of the files, by which days and years are counted.
    pub time_zone: String,
    /// Local time at which the first hour begins.
    pub from: String,
    /// Local time at which the last hour begins.
    pub to: String,
    /// `measured` or `typical`.
    pub kind: &'static str,
    /// For a typical year, the year each month comes from, January first, where the file tells.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub source_years: Option<[i32; 12]>,
    /// Hours in all.
    pub hours: usize,
    /// Length in years.
    pub years: f64,
    /// Mean temperature.
    pub mean_c: f64,
    /// Lowest hour.
    pub min_c: f64,
    /// Highest hour.
    pub max_c: f64,
    /// Hours that had no usable temperature.
    pub missing_hours: usize,
    /// Hours that were filled in.
    pub repaired_hours: usize,
    /// Hours in which an instant occurred more than once.
    pub duplicate_hours: usize,
    /// Hours made by joining readings more than an hour apart.
    pub joined_hours: usize,
    /// Which columns the file has beside the temperature.
    pub columns: Vec<&'static str>,
    /// Degree-days a year: means over the whole years, or sums over the file when it holds none.
    pub degree_days: Vec<DegreeDaysAnswer>,
    /// Temperatures that 0.4 % and 1 % of the hours fall below, by the share that is warmer.
    pub design_c: BTreeMap<&'static str, f64>,
    /// Shares of the hours and the temperature they fall below.
    pub percentiles: Vec<PercentileAnswer>,
    /// The coldest hour.
    pub coldest_hour: SpellAnswer,
    /// The coldest day of the file's clock.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub coldest_day: Option<SpellAnswer>,
    /// The coldest three days in a row.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub coldest_three_days: Option<SpellAnswer>,
    /// The coldest runs of 1, 3, 5, 7 and 14 days, as far as the file is long enough.
    pub coldest_spells: Vec<SpellOfDays>,
    /// Hours from each whole degree up to the next.
    pub hours_per_degree: Vec<DegreeAnswer>,
    /// Each weather year.
    pub by_year: Vec<WeatherYearAnswer>,
    /// The typical year that was chosen, when one was asked for.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub typical_year: Option<TypicalYearAnswer>,
    /// What was assumed.
    pub assumptions: Vec<Assumption>,
    /// What was odd, the gravest first.
    pub findings: Vec<Finding>,
}

/// Degree-days and how they were counted.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct DegreeDaysAnswer {
    /// Base temperature.
    pub base_c: f64,
    /// Name of the rule.
    pub rule: &'static str,
    /// K·d.
    pub value: f64,
}

/// A share of the hours and the temperature they fall below.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct PercentileAnswer {
    /// Share of the hours that are colder, %.
    pub colder_percent: f64,
    /// The temperature.
    pub temperature_c: f64,
}

/// A cold stretch.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct SpellAnswer {
    /// Local time at which it begins.
    pub from: String,
    /// Its mean temperature.
    pub mean_c: f64,
}

/// The coldest run of a number of days.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct SpellOfDays {
    /// Days in a row.
    pub days: usize,
    /// Local time at which it begins.
    pub from: String,
    /// Its mean temperature.
    pub mean_c: f64,
}

/// Hours of one whole degree.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct DegreeAnswer {
    /// The lower end of the degree.
    pub from_c: i32,
    /// Hours.
    pub hours: usize,
}

/// One weather year.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct WeatherYearAnswer {
    /// Its name.
    pub year: i32,
    /// Its hours.
    pub hours: usize,
    /// Mean temperature.
    pub mean_c: f64,
    /// Lowest hour.
    pub min_c: f64,
    /// Highest hour.
    pub max_c: f64,
    /// Hours that were filled in.
    pub repaired_hours: usize,
    /// Degree-days of this year.
    pub degree_days: Vec<DegreeDaysAnswer>,
}

/// A typical year that was chosen.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct TypicalYearAnswer {
    /// Where it was written.
    pub file: String,
    /// How it was chosen.
    pub procedure: String,
    /// The year each month comes from, January first.
    pub years: [i32; 12],
}

impl WeatherAnswer {
    /// Puts together what is known of the weather.
    pub fn new(series: &[Weather], described: &Description, adjusted: &[Adjusted]) -> Self {
        let sum = |of: fn(&Weather) -> usize| series.iter().map(of).sum();
        let all = |of: fn(&Weather) -> bool| !series.is_empty() && series.iter().all(of);
        let (first, last) = (series.first(), series.last());
        let kind = first.map(|weather| &weather.kind);
        let mut findings: Vec<Finding> = series
            .iter()
            .flat_map(|weather| &weather.findings)
            .chain(&described.findings)
            .cloned()
            .collect();
        findings.sort_by_key(|finding| std::cmp::Reverse(finding.severity));
        let columns = [
            (all(|w| w.relative_humidity.is_some()), "relative humidity"),
            (all(|w| w.global_w_per_m2.is_some()), "global radiation"),
            (all(|w| w.wind_m_per_s.is_some()), "wind speed"),
        ];
        let spell = |spell: &crate::weather::Spell| SpellAnswer {
            from: spell.from.clone(),
            mean_c: spell.mean_c,
        };
        Self {
            file: series
                .iter()
                .map(|weather| weather.file.as_str())
                .collect::<Vec<_>>()
                .join(", "),
            time_zone: first.map_or_else(String::new, |weather| weather.zone.to_string()),
            from: first.map_or_else(String::new, |weather| weather.local_text(0)),
            to: last.map_or_else(String::new, |weather| {
                weather.local_text(weather.axis.hours.saturating_sub(1))
            }),
            kind: match kind {
                Some(Kind::Typical { .. }) => "typical",
                _ => "measured",
            },
            source_years: match kind {
                Some(Kind::Typical { source_years }) => *source_years,
                _ => None,
            },
            hours: described.hours,
            years: described.years,
            mean_c: described.mean_c,
            min_c: described.min_c,
            max_c: described.max_c,
            missing_hours: sum(|weather| weather.missing_hours),
            repaired_hours: sum(Weather::repaired_hours),
            duplicate_hours: sum(|weather| weather.duplicate_hours),
            joined_hours: sum(|weather| weather.joined_hours),
            columns: columns
                .into_iter()
                .filter_map(|(there, name)| there.then_some(name))
                .collect(),
            degree_days: degree_days(&described.degree_days),
            design_c: BTreeMap::from([
                ("99.6", described.design_99_6_c),
                ("99", described.design_99_c),
            ]),
            percentiles: described
                .percentiles
                .iter()
                .map(|&(share, temperature_c)| PercentileAnswer {
                    colder_percent: share * 100.0,
                    temperature_c,
                })
                .collect(),
            coldest_hour: spell(&described.coldest_hour),
            coldest_day: described.coldest_day.as_ref().map(spell),
            coldest_three_days: described.coldest_three_days.as_ref().map(spell),
            coldest_spells: described
                .coldest_spells
                .iter()
                .map(|(days, spell)| SpellOfDays {
                    days: *days,
                    from: spell.from.clone(),
                    mean_c: spell.mean_c,
                })
                .collect(),
            hours_per_degree: described
                .hours_per_degree
                .iter()
                .map(|&(from_c, hours)| DegreeAnswer { from_c, hours })
                .collect(),
            by_year: described
                .by_year
                .iter()
                .map(|year| WeatherYearAnswer {
                    year: year.year,
                    hours: year.hours,
                    mean_c: year.mean_c,
                    min_c: year.min_c,
                    max_c: year.max_c,
                    repaired_hours: year.repaired_hours,
                    degree_days: degree_days(&year.degree_days),
                })
                .collect(),
            typical_year: None,
            assumptions: adjusted
                .iter()
                .map(|done| Assumption {
                    name: done.name.clone(),
                    value: done.value.clone(),
                    from: done.from.clone(),
                })
                .collect(),
            findings,
        }
    }

    /// Adds the typical year that was chosen and written to a file.
    pub fn with_typical_year(mut self, file: String, chosen: &TypicalYear) -> Self {
        self.findings
            .extend(chosen.weather.findings.iter().cloned());
        self.typical_year = Some(TypicalYearAnswer {
            file,
            procedure: chosen.procedure.clone(),
            years: chosen.years,
        });
        self
    }
}

fn degree_days(entries: &[crate::weather::DegreeDays]) -> Vec<DegreeDaysAnswer> {
    entries
        .iter()
        .map(|entry| DegreeDaysAnswer {
            base_c: entry.base_c,
            rule: entry.rule.name(),
            value: entry.value,
        })
        .collect()
}
