//! What an engineer asks of a weather file first: how cold, how often, how long.

use std::ops::Range;

use chrono::NaiveDate;

use super::degree_days::{self, Rule};
use super::distribution::Distribution;
use super::whole_years::YEAR_SLACK_HOURS;
use super::{Kind, Weather};
use crate::problem::{Finding, Severity};

/// Shares of the hours that are colder, for the list of percentiles.
const PERCENTILES: [f64; 9] = [0.004, 0.01, 0.05, 0.10, 0.25, 0.50, 0.75, 0.90, 0.99];
/// Days shorter than this are the cut ends of a file.
const WHOLE_DAY_HOURS: usize = 23;
/// Lengths of the cold spells that are told, days: 1, 3 and 5 as design standards look at, and a week and a fortnight.
pub const SPELL_DAYS: [usize; 5] = [1, 3, 5, 7, 14];
/// Real air of one hour differs from the same hour a day before by 2 to 5 K (standard deviation); the mean of many years
/// hardly at all. Common practice, no source.
const SMOOTH_K: f64 = 1.0;

/// A stretch of time and its mean temperature.
#[derive(Debug, Clone, PartialEq)]
pub struct Spell {
    /// Its beginning on the file's own clock.
    pub from: String,
    /// The series it lies in, and its hours there.
    pub series: usize,
    /// Hours of that series.
    pub hours: Range<usize>,
    /// Mean outdoor temperature, °C.
    pub mean_c: f64,
}

/// Degree-days and how they were counted.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct DegreeDays {
    /// Base temperature, °C.
    pub base_c: f64,
    /// The rule.
    pub rule: Rule,
    /// K·d.
    pub value: f64,
}

/// The figures of one weather year.
#[derive(Debug, Clone, PartialEq)]
pub struct YearFigures {
    /// Its name, see [`Weather::years`].
    pub year: i32,
    /// Its hours.
    pub hours: usize,
    /// Mean, lowest and highest hourly temperature, °C.
    pub mean_c: f64,
    /// Lowest hour.
    pub min_c: f64,
    /// Highest hour.
    pub max_c: f64,
    /// Hours filled in.
    pub repaired_hours: usize,
    /// Degree-days of this year at every base and by every rule.
    pub degree_days: Vec<DegreeDays>,
}

/// A weather file in figures.
#[derive(Debug, Clone, PartialEq)]
pub struct Description {
    /// Hours in all.
    pub hours: usize,
    /// Length in years.
    pub years: f64,
    /// Years that are whole; annual figures are means over them, or sums over the file when there is none.
    pub whole_years: usize,
    /// Mean outdoor temperature, °C.
    pub mean_c: f64,
    /// Lowest hour, °C.
    pub min_c: f64,
    /// Highest hour, °C.
    pub max_c: f64,
    /// Share of the hours that are colder, and the temperature, °C.
    pub percentiles: Vec<(f64, f64)>,
    /// Temperature that 0.4 % of the hours fall below, °C: 35 h a year.
    pub design_99_6_c: f64,
    /// Temperature that 1 % of the hours fall below, °C: 88 h a year.
    pub design_99_c: f64,
    /// The coldest hour.
    pub coldest_hour: Spell,
    /// The coldest day of the file's clock, if there is a whole one.
    pub coldest_day: Option<Spell>,
    /// The coldest three days in a row.
    pub coldest_three_days: Option<Spell>,
    /// The coldest run of days of each length in [`SPELL_DAYS`] that the file is long enough for.
    pub coldest_spells: Vec<(usize, Spell)>,
    /// Hours from each whole degree up to the next.
    pub hours_per_degree: Vec<(i32, usize)>,
    /// Annual degree-days.
    pub degree_days: Vec<DegreeDays>,
    /// Each weather year.
    pub by_year: Vec<YearFigures>,
    /// What the weather is not fit for.
    pub findings: Vec<Finding>,
}

/// Describes weather in one or several series, with degree-days at the given bases in °C.
///
/// Returns nothing for no hours at all.
pub fn describe(series: &[Weather], bases_c: &[f64]) -> Option<Description> {
    let spread = Distribution::new(
        series
            .iter()
            .map(|weather| weather.outdoor_c.as_slice())
            .collect(),
    )?;
    let days: Vec<Vec<(NaiveDate, Range<usize>)>> = series.iter().map(Weather::days).collect();
    let mut by_year = Vec::new();
    for (weather, days) in series.iter().zip(&days) {
        for (year, hours) in weather.years() {
            by_year.push(year_figures(weather, days, year, hours, bases_c));
        }
    }
    let whole: Vec<&YearFigures> = by_year
        .iter()
        .filter(|year| year.hours + YEAR_SLACK_HOURS >= crate::calendar::HOURS_PER_YEAR)
        .collect();
    let degree_days = mean_degree_days(&whole).unwrap_or_else(|| total_degree_days(&by_year));
    let colder = spread.colder(&PERCENTILES);
    // The first two of the list are the design shares.
    let [design_99_6_c, design_99_c, ..] = colder[..] else {
        return None;
    };
    Some(Description {
        hours: spread.hours,
        years: series.iter().map(|weather| weather.axis.years()).sum(),
        whole_years: whole.len(),
        mean_c: spread.mean_c,
        min_c: spread.min_c,
        max_c: spread.max_c,
        percentiles: PERCENTILES.into_iter().zip(colder).collect(),
        design_99_6_c,
        design_99_c,
        coldest_hour: coldest_hour(series)?,
        coldest_day: coldest_days_of(series, &days, 1),
        coldest_three_days: coldest_days_of(series, &days, 3),
        coldest_spells: SPELL_DAYS
            .into_iter()
            .filter_map(|number| Some((number, coldest_days_of(series, &days, number)?)))
            .collect(),
        hours_per_degree: spread.per_degree(),
        degree_days,
        by_year,
        findings: series.iter().filter_map(unfit_for_peak_load).collect(),
    })
}

fn year_figures(
    weather: &Weather,
    days: &[(NaiveDate, Range<usize>)],
    year: i32,
    hours: Range<usize>,
    bases_c: &[f64],
) -> YearFigures {
    let readings = &weather.outdoor_c[hours.clone()];
    let value =
        |base_c, rule| degree_days::count(&weather.outdoor_c, days, hours.clone(), base_c, rule);
    YearFigures {
        year,
        hours: readings.len(),
        mean_c: readings.iter().sum::<f64>() / readings.len() as f64,
        min_c: readings.iter().copied().fold(f64::INFINITY, f64::min),
        max_c: readings.iter().copied().fold(f64::NEG_INFINITY, f64::max),
        repaired_hours: weather.repaired[hours.clone()]
            .iter()
            .filter(|&&flag| flag)
            .count(),
        degree_days: bases_c
            .iter()
            .flat_map(|&base_c| {
                Rule::ALL.map(|rule| DegreeDays {
                    base_c,
                    rule,
                    value: value(base_c, rule),
                })
            })
            .collect(),
    }
}

fn mean_degree_days(years: &[&YearFigures]) -> Option<Vec<DegreeDays>> {
    let first = years.first()?;
    let mean = |i: usize| {
        years
            .iter()
            .map(|year| year.degree_days[i].value)
            .sum::<f64>()
            / years.len() as f64
    };
    Some(
        first
            .degree_days
            .iter()
            .enumerate()
            .map(|(i, entry)| DegreeDays {
                value: mean(i),
                ..*entry
            })
            .collect(),
    )
}

fn total_degree_days(years: &[YearFigures]) -> Vec<DegreeDays> {
    let total = |i: usize| years.iter().map(|year| year.degree_days[i].value).sum();
    let first = years
        .first()
        .map(|year| year.degree_days.as_slice())
        .unwrap_or_default();
    first
        .iter()
        .enumerate()
        .map(|(i, entry)| DegreeDays {
            value: total(i),
            ..*entry
        })
        .collect()
}

fn coldest_hour(series: &[Weather]) -> Option<Spell> {
    let hours = series.iter().enumerate().flat_map(|(s, weather)| {
        weather
            .outdoor_c
            .iter()
            .enumerate()
            .map(move |(i, &c)| (c, s, i))
    });
    let (mean_c, s, i) = hours.min_by(|a, b| a.0.total_cmp(&b.0))?;
    Some(Spell {
        from: series.get(s)?.local_text(i),
        series: s,
        hours: i..i + 1,
        mean_c,
    })
}

/// The coldest run of whole days on the file's own clock.
pub fn coldest_days(series: &[Weather], number: usize) -> Option<Spell> {
    let days: Vec<_> = series.iter().map(Weather::days).collect();
    coldest_days_of(series, &days, number)
}

fn coldest_days_of(
    series: &[Weather],
    days: &[Vec<(NaiveDate, Range<usize>)>],
    number: usize,
) -> Option<Spell> {
    let mut coldest: Option<(f64, usize, Range<usize>)> = None;
    for (s, (weather, days)) in series.iter().zip(days).enumerate() {
        for run in days.windows(number.max(1)) {
            if run.iter().any(|(_, day)| day.len() < WHOLE_DAY_HOURS) {
                continue;
            }
            let hours = run[0].1.start..run[run.len() - 1].1.end;
            let readings = &weather.outdoor_c[hours.clone()];
            let mean = readings.iter().sum::<f64>() / readings.len() as f64;
            if coldest.as_ref().is_none_or(|(least, ..)| mean < *least) {
                coldest = Some((mean, s, hours));
            }
        }
    }
    let (mean_c, s, hours) = coldest?;
    Some(Spell {
        from: series.get(s)?.local_text(hours.start),
        series: s,
        hours,
        mean_c,
    })
}

/// Warns of weather that smooths the cold away and must not judge peak load: a typical year, or the average of many.
pub fn unfit_for_peak_load(weather: &Weather) -> Option<Finding> {
    let (what, done) = if let Some(change) = day_to_day_k(weather).filter(|&k| k < SMOOTH_K) {
        (
            format!(
                "the same hour of two days in a row differs by only {change:.1} K: these are means of many years"
            ),
            "of no use for peak load; take measured years or a station's design temperatures",
        )
    } else if matches!(weather.kind, Kind::Typical { .. }) {
        (
            "a typical year is made for annual energy: its coldest hours may be some kelvin off, either way".to_owned(),
            "size a machine by the design temperatures of a station's table, not by this file",
        )
    } else {
        return None;
    };
    let mut finding = Finding::new(Severity::Warning, what, done);
    finding.file = Some(weather.file.clone());
    Some(finding)
}

/// Standard deviation of the change from one day to the next at the same hour, K; nothing for less than four weeks.
fn day_to_day_k(weather: &Weather) -> Option<f64> {
    let readings = &weather.outdoor_c;
    if readings.len() < 24 * 28 {
        return None;
    }
    let changes = readings
        .iter()
        .skip(24)
        .zip(readings)
        .map(|(now, before)| now - before);
    let (mut sum, mut squares, mut n) = (0.0, 0.0, 0.0);
    for change in changes {
        sum += change;
        squares += change * change;
        n += 1.0;
    }
    Some((squares / n - (sum / n) * (sum / n)).max(0.0).sqrt())
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::weather::{ReadOptions, read_bytes};

    fn ramp() -> Weather {
        let mut text = "time,temp (C)\n".to_owned();
        for hour in 0..24i32 * 10 {
            text += &format!(
                "2023-01-{:02}T{:02}:00Z,{}\n",
                hour / 24 + 1,
                hour % 24,
                (hour / 24 - 4).abs()
            );
        }
        read_bytes("ramp", text.as_bytes(), &ReadOptions::default()).unwrap()
    }

    #[test]
    fn spells_and_classes_of_a_known_series() {
        let weather = ramp();
        let described = describe(std::slice::from_ref(&weather), &[15.5]).unwrap();
        assert_eq!(described.hours, 240);
        assert_eq!(described.whole_years, 0);
        let day = described.coldest_day.unwrap();
        assert_eq!(
            (day.from.as_str(), day.mean_c, day.hours),
            ("2023-01-05 00:00", 0.0, 96..120)
        );
        let three = described.coldest_three_days.unwrap();
        assert_eq!((three.hours, three.mean_c), (72..144, 2.0 / 3.0));
        assert_eq!(
            described.hours_per_degree,
            [(0, 24), (1, 48), (2, 48), (3, 48), (4, 48), (5, 24)]
        );
    }

    #[test]
    fn no_hours_have_no_description() {
        assert!(describe(&[], &[15.5]).is_none());
    }
}
