//! A typical year out of many, by the Finkelstein–Schafer procedure of ISO 15927-4.

mod stitch;

use std::ops::Range;

use chrono::{DateTime, Datelike, NaiveDate};

use self::stitch::{days_in_month, stitch};
use super::Weather;
use super::words::count;
use crate::problem::{Finding, Place, Problem, Severity};

/// Years that the standard asks for at least.
const STANDARD_YEARS: usize = 10;
/// Fewer years than this have nothing typical among them.
const LEAST_YEARS: usize = 3;
/// Months that the wind decides between.
const BEST_MONTHS: usize = 3;
/// A month with more of its hours filled in than this is no candidate.
const MOST_REPAIRED_SHARE: f64 = 0.05;
const HOURS_A_DAY: usize = 24;

/// A typical year and how it was chosen.
#[derive(Debug, Clone, PartialEq)]
pub struct TypicalYear {
    /// The year itself, 8760 h on a clock without changes.
    pub weather: Weather,
    /// The year each month comes from, January first.
    pub years: [i32; 12],
    /// The procedure, named a variant where it had to leave something out.
    pub procedure: String,
    /// For every month the candidates, the best first.
    pub candidates: [Vec<Candidate>; 12],
}

/// One month of one year and how typical it is.
#[derive(Debug, Clone, PartialEq)]
pub struct Candidate {
    /// The year.
    pub year: i32,
    /// Finkelstein–Schafer statistic of temperature, radiation and humidity, as far as they exist.
    pub statistics: Vec<f64>,
    /// Sum of the ranks of the statistics, 1 being the most typical.
    pub rank_sum: usize,
    /// How far the month's mean wind lies from that of all years, m/s.
    pub wind_deviation: Option<f64>,
    series: usize,
    hours: Range<usize>,
}

/// Chooses a typical year out of series that hold several.
///
/// ISO 15927-4:2005 [steps from memory]: for each calendar month the daily means of dry bulb, global radiation and relative
/// humidity are ranked over all years, Φ = K/(N+1), and within each year, F = J/(n+1); FS = Σ|F − Φ|; years are ranked by
/// each FS and the ranks added; of the best three months the one with the least deviation of mean wind is taken. Eight hours
/// on either side of each join are smoothed. 29 February is left out. Without radiation, humidity or wind the procedure goes
/// on without them and is named a variant. Days are counted on a clock without changes, that of standard time.
///
/// # Errors
/// Fewer than three whole years of a month.
pub fn typical_year(series: &[Weather]) -> Result<TypicalYear, Problem> {
    let place = || {
        series
            .first()
            .map_or_else(Place::default, |weather| Place::file(weather.file.as_str()))
    };
    let offset = series.iter().map(standard_offset_s).min().unwrap_or(0);
    let has = |column: fn(&Weather) -> &Option<Vec<f64>>| {
        series.iter().all(|weather| column(weather).is_some())
    };
    let radiation = has(|w| &w.global_w_per_m2);
    let humidity = has(|w| &w.relative_humidity);
    let wind = has(|w| &w.wind_m_per_s);
    let months: Vec<Month> = series
        .iter()
        .enumerate()
        .flat_map(|(s, weather)| whole_months(s, weather, offset))
        .collect();
    let mut candidates: [Vec<Candidate>; 12] = Default::default();
    for (month0, slot) in candidates.iter_mut().enumerate() {
        let of_month: Vec<&Month> = months
            .iter()
            .filter(|month| month.month0 == month0)
            .collect();
        if of_month.len() < LEAST_YEARS {
            return Err(Problem::new(
                place(),
                format!(
                    "{} of {} are whole and hardly repaired",
                    count(of_month.len(), "month"),
                    chrono::Month::try_from(u8::try_from(month0 + 1).unwrap_or(1))
                        .map_or("a month", |m| m.name())
                ),
                format!(
                    "at least {LEAST_YEARS} years to choose from, {STANDARD_YEARS} for ISO 15927-4"
                ),
                "give more years",
            ));
        }
        *slot = ranked(series, &of_month, radiation, humidity, wind);
    }
    let years = std::array::from_fn(|m| candidates[m].first().map_or(0, |best| best.year));
    let fewest = candidates.iter().map(Vec::len).min().unwrap_or(0);
    let without: Vec<&str> = [
        (radiation, "radiation"),
        (humidity, "humidity"),
        (wind, "wind"),
    ]
    .into_iter()
    .filter_map(|(there, what)| (!there).then_some(what))
    .collect();
    let mut procedure = if without.is_empty() {
        "Finkelstein–Schafer procedure of ISO 15927-4".to_owned()
    } else {
        format!(
            "variant of the Finkelstein–Schafer procedure of ISO 15927-4, without {}",
            without.join(" and ")
        )
    };
    let mut findings = Vec::new();
    if fewest < STANDARD_YEARS {
        procedure += &format!(", from {fewest} years instead of {STANDARD_YEARS}");
        findings.push(Finding::new(
            Severity::Warning,
            format!("only {fewest} years to choose a typical year from"),
            format!("ISO 15927-4 asks for {STANDARD_YEARS}"),
        ));
    }
    let weather = stitch(series, &candidates, years, offset, findings)
        .ok_or_else(|| Problem::new(place(), "the typical year cannot be placed", "", ""))?;
    Ok(TypicalYear {
        weather,
        years,
        procedure,
        candidates,
    })
}

/// One calendar month of one year.
struct Month {
    series: usize,
    year: i32,
    month0: usize,
    hours: Range<usize>,
}

/// The offset of standard time: the least that the series' clock has, seconds east.
fn standard_offset_s(weather: &Weather) -> i32 {
    let half = weather.axis.at(weather.axis.hours.min(HOURS_A_DAY * 182));
    weather
        .zone
        .offset_s(weather.axis.start)
        .min(weather.zone.offset_s(half))
}

/// The whole months of a series on a clock of fixed offset, 29 February cut off.
fn whole_months(series: usize, weather: &Weather, offset_s: i32) -> Vec<Month> {
    let local = weather.axis.start.timestamp() + i64::from(offset_s);
    let index = |date: NaiveDate| -> Option<usize> {
        let midnight = date.and_time(chrono::NaiveTime::MIN).and_utc().timestamp();
        let seconds = midnight - local;
        // A clock at half an hour from ours has its midnight inside an hour; the hour that follows is taken.
        usize::try_from(seconds.div_euclid(3600) + i64::from(seconds.rem_euclid(3600) > 0)).ok()
    };
    let first = DateTime::from_timestamp(local, 0).map_or(0, |t| t.year());
    let years = i32::try_from(weather.axis.hours / 8760).unwrap_or(0) + 1;
    let mut months = Vec::new();
    for year in first..=first + years {
        for month0 in 0..12 {
            let from = NaiveDate::from_ymd_opt(year, month0 + 1, 1).and_then(&index);
            let Some(from) = from else { continue };
            let hours = from..from + days_in_month(month0 as usize) * HOURS_A_DAY;
            let Some(repaired) = weather.repaired.get(hours.clone()) else {
                continue;
            };
            let filled = repaired.iter().filter(|&&flag| flag).count();
            if filled as f64 <= MOST_REPAIRED_SHARE * hours.len() as f64 {
                months.push(Month {
                    series,
                    year,
                    month0: month0 as usize,
                    hours,
                });
            }
        }
    }
    months
}

fn daily_means(values: &[f64]) -> Vec<f64> {
    values
        .chunks(HOURS_A_DAY)
        .map(|day| day.iter().sum::<f64>() / day.len() as f64)
        .collect()
}

/// Finkelstein–Schafer statistics of several sets of daily means against all of them together.
fn statistics(months: &[Vec<f64>]) -> Vec<f64> {
    let mut all: Vec<f64> = months.iter().flatten().copied().collect();
    all.sort_unstable_by(f64::total_cmp);
    // Equal values share the rank of the last of them.
    let rank = |sorted: &[f64], value: f64| sorted.partition_point(|&other| other <= value) as f64;
    months
        .iter()
        .map(|month| {
            let mut own = month.clone();
            own.sort_unstable_by(f64::total_cmp);
            month
                .iter()
                .map(|&value| {
                    let over_all = rank(&all, value) / (all.len() as f64 + 1.0);
                    let in_month = rank(&own, value) / (own.len() as f64 + 1.0);
                    (in_month - over_all).abs()
                })
                .sum()
        })
        .collect()
}

/// Ranks of values, 1 the least; equal values share the smaller rank.
fn ranks(values: &[f64]) -> Vec<usize> {
    values
        .iter()
        .map(|value| 1 + values.iter().filter(|other| *other < value).count())
        .collect()
}

/// The candidates of one calendar month, the best first.
fn ranked(
    series: &[Weather],
    months: &[&Month],
    radiation: bool,
    humidity: bool,
    wind: bool,
) -> Vec<Candidate> {
    let column = |month: &Month, of: fn(&Weather) -> &[f64]| {
        series
            .get(month.series)
            .and_then(|w| of(w).get(month.hours.clone()))
            .unwrap_or_default()
            .to_vec()
    };
    let daily = |of: fn(&Weather) -> &[f64]| -> Vec<Vec<f64>> {
        months
            .iter()
            .map(|month| daily_means(&column(month, of)))
            .collect()
    };
    let mut quantities = vec![daily(|w| &w.outdoor_c)];
    if radiation {
        quantities.push(daily(|w| w.global_w_per_m2.as_deref().unwrap_or_default()));
    }
    if humidity {
        quantities.push(daily(|w| {
            w.relative_humidity.as_deref().unwrap_or_default()
        }));
    }
    let statistics: Vec<Vec<f64>> = quantities
        .iter()
        .map(|months| self::statistics(months))
        .collect();
    let ranks: Vec<Vec<usize>> = statistics
        .iter()
        .map(|values| self::ranks(values))
        .collect();
    let mean = |values: &[f64]| values.iter().sum::<f64>() / values.len() as f64;
    let winds: Option<Vec<f64>> = wind.then(|| {
        months
            .iter()
            .map(|month| {
                mean(&column(month, |w| {
                    w.wind_m_per_s.as_deref().unwrap_or_default()
                }))
            })
            .collect()
    });
    let usual_wind = winds.as_deref().map(mean);
    let mut candidates: Vec<Candidate> = months
        .iter()
        .enumerate()
        .map(|(i, month)| Candidate {
            year: month.year,
            statistics: statistics.iter().map(|values| values[i]).collect(),
            rank_sum: ranks.iter().map(|ranks| ranks[i]).sum(),
            wind_deviation: winds
                .as_ref()
                .zip(usual_wind)
                .map(|(winds, usual)| (winds[i] - usual).abs()),
            series: month.series,
            hours: month.hours.clone(),
        })
        .collect();
    // Equal rank sums are settled by the temperature's statistic, then by the earlier year.
    let temperature = |c: &Candidate| c.statistics.first().copied().unwrap_or(f64::MAX);
    candidates.sort_by(|a, b| {
        a.rank_sum
            .cmp(&b.rank_sum)
            .then(temperature(a).total_cmp(&temperature(b)))
            .then(a.year.cmp(&b.year))
    });
    let best = candidates.len().min(BEST_MONTHS);
    if let Some(best) = candidates.get_mut(..best)
        && wind
    {
        best.sort_by(|a, b| {
            a.wind_deviation
                .unwrap_or(f64::MAX)
                .total_cmp(&b.wind_deviation.unwrap_or(f64::MAX))
        });
    }
    candidates
}

#[cfg(test)]
mod tests {
    use super::*;

    /// Two sets of two days worked by hand. All: 1 2 3 4, N = 4; the first set 1 3, n = 2:
    /// |1/3 − 1/5| + |2/3 − 3/5| = 0.2; the second 2 4: |1/3 − 2/5| + |2/3 − 4/5| = 0.2.
    #[test]
    fn the_statistic_of_four_days() {
        let found = statistics(&[vec![1.0, 3.0], vec![2.0, 4.0]]);
        assert!(
            (found[0] - 0.2).abs() < 1e-12 && (found[1] - 0.2).abs() < 1e-12,
            "{found:?}"
        );
    }

    #[test]
    fn ranks_start_at_one_and_ties_share() {
        assert_eq!(ranks(&[0.3, 0.1, 0.3, 0.2]), [3, 1, 3, 2]);
    }
}
