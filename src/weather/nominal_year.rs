//! Typical years stitched from months of different years: told by their stamps, and placed on one nominal year.

use chrono::{DateTime, Datelike, NaiveDate};

use super::clock::ASIDE;
use super::options::ReadOptions;
use super::rows::Rows;
use super::words::count;
use crate::problem::{Finding, Place, Severity};

const DAY_S: i64 = 86_400;
/// The nominal years of a typical year: recent, so that today's clock-change dates hold.
const NOMINAL_YEAR: i32 = 2023;
const NOMINAL_LEAP_YEAR: i32 = 2024;

/// The first local second of a month.
fn month_start(year: i32, month0: usize) -> Option<i64> {
    let month = u32::try_from(month0).ok()? + 1;
    Some(
        NaiveDate::from_ymd_opt(year, month, 1)?
            .and_time(chrono::NaiveTime::MIN)
            .and_utc()
            .timestamp(),
    )
}

/// Months of a file in the order they come, runs of the same month as one.
fn months(local: &[i64]) -> impl Iterator<Item = (i32, usize)> {
    let mut current: Option<(i64, i64)> = None;
    local.iter().filter_map(move |&at| {
        if current.is_some_and(|(from, to)| (from..to).contains(&at)) {
            return None;
        }
        let date = DateTime::from_timestamp(at, 0)?.date_naive();
        let (year, month0) = (date.year(), date.month0() as usize);
        let next = if month0 == 11 {
            month_start(year + 1, 0)
        } else {
            month_start(year, month0 + 1)
        };
        current = month_start(year, month0).zip(next);
        Some((year, month0))
    })
}

/// The source years when twelve calendar months follow each other in order but come from different years.
pub(super) fn stitched_years(local: &[i64]) -> Option<[i32; 12]> {
    let runs: Vec<_> = months(local).take(13).collect();
    if runs.len() != 12 {
        return None;
    }
    let in_order = runs.windows(2).all(|w| w[1].1 == (w[0].1 + 1) % 12);
    let count = |(year, month0): (i32, usize)| i64::from(year) * 12 + month0 as i64;
    let one_stretch = runs.windows(2).all(|w| count(w[1]) == count(w[0]) + 1);
    if !in_order || one_stretch {
        return None;
    }
    let mut years = [0; 12];
    for (year, month0) in runs {
        years[month0] = year;
    }
    Some(years)
}

/// Moves every month to the nominal year; a 29 February that it lacks is set aside.
pub(super) fn place_on_nominal_year(
    place: &Place,
    rows: &Rows,
    local: &mut [i64],
    years: &[i32; 12],
    options: &ReadOptions,
    findings: &mut Vec<Finding>,
) {
    let february = month_start(years[1], 1).unwrap_or(0);
    let leap = local.iter().any(|&at| {
        (february + 28 * DAY_S..february + 29 * DAY_S).contains(&at) && is_leap(years[1])
    });
    let nominal = options.nominal_year.unwrap_or(if leap {
        NOMINAL_LEAP_YEAR
    } else {
        NOMINAL_YEAR
    });
    let mut dropped = 0;
    for at in local.iter_mut() {
        let Some(date) = DateTime::from_timestamp(*at, 0).map(|t| t.date_naive()) else {
            continue;
        };
        let month0 = date.month0() as usize;
        let (Some(from), Some(to)) = (
            month_start(date.year(), month0),
            month_start(nominal, month0),
        ) else {
            continue;
        };
        if month0 == 1 && date.day() == 29 && !is_leap(nominal) {
            *at = ASIDE;
            dropped += 1;
        } else {
            *at += to - from;
        }
    }
    let mut sources: Vec<_> = years.to_vec();
    sources.sort_unstable();
    sources.dedup();
    let first = rows
        .line
        .first()
        .and_then(|&line| usize::try_from(line).ok());
    let mut top = place.clone();
    top.line = first;
    findings.push(
        Finding::new(
            Severity::Note,
            format!(
                "the months come from {} ({} to {}): a typical year",
                count(sources.len(), "year"),
                sources.first().unwrap_or(&nominal),
                sources.last().unwrap_or(&nominal),
            ),
            format!("placed on {nominal}"),
        )
        .at(&top),
    );
    if dropped > 0 {
        findings.push(
            Finding::new(
                Severity::Note,
                format!(
                    "29 February has {} but {nominal} has no such day",
                    count(dropped, "row")
                ),
                "set aside",
            )
            .at(place),
        );
    }
}

fn is_leap(year: i32) -> bool {
    NaiveDate::from_ymd_opt(year, 2, 29).is_some()
}

#[cfg(test)]
mod tests {
    use super::*;

    const HOUR_S: i64 = 3600;

    #[test]
    fn months_from_different_years_are_a_typical_year_and_one_stretch_is_not() {
        let month = |year: i32, month0: usize| {
            let from = month_start(year, month0).unwrap();
            (0..28 * 24).map(move |h| from + h * HOUR_S)
        };
        let years = [
            1988, 1995, 1983, 1998, 1998, 1990, 2001, 1988, 1992, 2003, 1997, 2000,
        ];
        let stitched: Vec<i64> = years
            .iter()
            .enumerate()
            .flat_map(|(m, &y)| month(y, m))
            .collect();
        assert_eq!(stitched_years(&stitched), Some(years));
        let winter_to_winter: Vec<i64> = (0..12)
            .flat_map(|m| month(2010 + i32::from(m >= 6), (6 + m) % 12))
            .collect();
        assert_eq!(stitched_years(&winter_to_winter), None);
        let one_year: Vec<i64> = (0..8760)
            .map(|h| month_start(2010, 0).unwrap() + h * HOUR_S)
            .collect();
        assert_eq!(stitched_years(&one_year), None);
    }
}
