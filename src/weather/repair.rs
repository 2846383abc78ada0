//! Filling gaps by a stated policy.

use std::collections::BTreeMap;

use super::hours::Hours;
use super::options::RepairPolicy;
use super::words::count;
use crate::problem::{Finding, Problem, Problems, Severity};

const HOURS_A_DAY: usize = 24;
/// A column that is not needed is dropped when more than this share of it is missing.
const MOST_MISSING_SHARE: f64 = 0.10;

/// What was done to the temperatures.
#[derive(Debug, Clone)]
pub(super) struct Repaired {
    pub flags: Vec<bool>,
    pub missing_hours: usize,
}

/// Fills the gaps of the outdoor temperature; the other columns are filled in the same way or dropped.
///
/// # Errors
/// Every gap that is longer than the policy allows.
pub(super) fn repair(
    hours: &mut Hours,
    policy: RepairPolicy,
    findings: &mut Vec<Finding>,
) -> Result<Repaired, Problems> {
    let gaps = gaps(&hours.outdoor_c);
    let mut problems = Problems::new();
    let mut filled: BTreeMap<(Severity, &str), Vec<(usize, usize)>> = BTreeMap::new();
    for &(from, to) in &gaps {
        let length = to - from;
        if length > policy.neighbour_hours && !policy.fill_longer {
            problems.push(Problem::new(
                hours.place(from),
                gap_in_words(hours, (from, to)),
                format!("gaps up to {}", count(policy.neighbour_hours, "hour")),
                "find the readings, leave the year out, or allow longer gaps to be filled",
            ));
            continue;
        }
        let done = if by_line(&hours.outdoor_c, from, to, policy) {
            "filled by a straight line"
        } else {
            "filled from the same hours of the neighbouring days"
        };
        let severity = if length > policy.line_hours {
            Severity::Warning
        } else {
            Severity::Note
        };
        filled.entry((severity, done)).or_default().push((from, to));
    }
    for ((severity, done), gaps) in filled {
        findings.extend(told(hours, &gaps, severity, done));
    }
    let flags: Vec<bool> = hours.outdoor_c.iter().map(|c| c.is_nan()).collect();
    problems.or(())?;
    fill(&mut hours.outdoor_c, &gaps, policy);
    let total = hours.outdoor_c.len();
    let whole = hours.whole();
    for (what, values) in [
        ("relative humidity", &mut hours.humidity),
        ("dew point", &mut hours.dew_point_c),
        ("global radiation", &mut hours.global_w_per_m2),
        ("wind speed", &mut hours.wind_m_per_s),
    ] {
        let Some(column) = values else {
            continue;
        };
        let missing = column.iter().filter(|value| value.is_nan()).count();
        if missing as f64 > MOST_MISSING_SHARE * total as f64 {
            findings.push(
                Finding::new(
                    Severity::Warning,
                    format!("{what} is missing in {missing} of {}", count(total, "hour")),
                    "the column is not used",
                )
                .at(&whole),
            );
            *values = None;
        } else if missing > 0 {
            let gaps = self::gaps(column);
            fill(column, &gaps, policy);
            findings.push(
                Finding::new(
                    Severity::Note,
                    format!("{what} is missing in {}", count(missing, "hour")),
                    "filled like the temperature",
                )
                .at(&whole),
            );
        }
    }
    Ok(Repaired {
        missing_hours: flags.iter().filter(|&&flag| flag).count(),
        flags,
    })
}

/// Gaps that were filled alike: each told while they are few, else all of them as one.
fn told(hours: &Hours, gaps: &[(usize, usize)], severity: Severity, done: &str) -> Vec<Finding> {
    /// More gaps than this nobody reads one by one.
    const FEW: usize = 5;
    let at = |from| hours.place(from);
    if gaps.len() <= FEW {
        let each = gaps
            .iter()
            .map(|&gap| Finding::new(severity, gap_in_words(hours, gap), done).at(&at(gap.0)));
        return each.collect();
    }
    let lengths = gaps.iter().map(|(from, to)| to - from);
    let longest = lengths.clone().max().unwrap_or(0);
    let (first, last) = (gaps[0].0, gaps[gaps.len() - 1].0);
    let span = format!(
        "the first {}, the last {}",
        hours.local(first),
        hours.local(last)
    );
    let what = if longest == 1 {
        format!("{} single hours without a temperature, {span}", gaps.len())
    } else {
        format!(
            "{} gaps of up to {longest} hours without a temperature, {} hours in all, {span}",
            gaps.len(),
            lengths.sum::<usize>()
        )
    };
    vec![Finding::new(severity, what, done).at(&at(first))]
}

fn gap_in_words(hours: &Hours, (from, to): (usize, usize)) -> String {
    match to - from {
        1 => format!("1 hour without a temperature, {}", hours.local(from)),
        length => format!(
            "{length} hours without a temperature, {} to {}",
            hours.local(from),
            hours.local(to - 1)
        ),
    }
}

/// Runs of missing hours, each from its first to one past its last.
fn gaps(values: &[f64]) -> Vec<(usize, usize)> {
    let mut gaps = Vec::new();
    let mut from = None;
    for (i, value) in values.iter().enumerate() {
        match (value.is_nan(), from) {
            (true, None) => from = Some(i),
            (false, Some(start)) => {
                gaps.push((start, i));
                from = None;
            }
            _ => {}
        }
    }
    gaps.extend(from.map(|start| (start, values.len())));
    gaps
}

/// Whether a gap is short enough for a straight line and has an hour on either side.
fn by_line(values: &[f64], from: usize, to: usize, policy: RepairPolicy) -> bool {
    to - from <= policy.line_hours && from > 0 && to < values.len()
}

fn fill(values: &mut [f64], gaps: &[(usize, usize)], policy: RepairPolicy) {
    if gaps.is_empty() {
        return;
    }
    let before = values.to_vec();
    for &(from, to) in gaps {
        if by_line(&before, from, to, policy) {
            let (a, b) = (before[from - 1], before[to]);
            for (k, value) in values[from..to].iter_mut().enumerate() {
                *value = a + (b - a) * (k + 1) as f64 / (to - from + 1) as f64;
            }
            continue;
        }
        for (i, value) in values.iter_mut().enumerate().take(to).skip(from) {
            *value = from_neighbouring_days(&before, i);
        }
    }
}

/// The same hour of the nearest day before and of the nearest day after, the nearer one counting more; where no such
/// hour exists, the nearest reading there is.
fn from_neighbouring_days(values: &[f64], i: usize) -> f64 {
    let day = |mut steps: Box<dyn Iterator<Item = usize>>| steps.find(|&j| !values[j].is_nan());
    let earlier = day(Box::new(
        (0..i).rev().skip(HOURS_A_DAY - 1).step_by(HOURS_A_DAY),
    ));
    let later = day(Box::new(
        (i + HOURS_A_DAY..values.len()).step_by(HOURS_A_DAY),
    ));
    match (earlier, later) {
        (Some(a), Some(b)) => {
            let (to_a, to_b) = ((i - a) as f64, (b - i) as f64);
            (values[a] * to_b + values[b] * to_a) / (to_a + to_b)
        }
        (Some(a), None) => values[a],
        (None, Some(b)) => values[b],
        (None, None) => {
            let nearest = (1..values.len()).find_map(|k| {
                let earlier = i.checked_sub(k).map(|j| values[j]);
                let later = values.get(i + k).copied();
                [earlier, later]
                    .into_iter()
                    .flatten()
                    .find(|value| !value.is_nan())
            });
            nearest.unwrap_or(f64::NAN)
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    const MISSING: f64 = f64::NAN;

    fn filled(values: &[f64]) -> Vec<f64> {
        let mut filled = values.to_vec();
        fill(&mut filled, &gaps(values), RepairPolicy::default());
        filled
    }

    #[test]
    fn short_gaps_are_straight_lines() {
        let values = filled(&[1.0, MISSING, MISSING, MISSING, 5.0, MISSING, 7.0]);
        assert_eq!(values, [1.0, 2.0, 3.0, 4.0, 5.0, 6.0, 7.0]);
    }

    #[test]
    fn a_missing_day_is_the_mean_of_its_neighbours() {
        let mut values: Vec<f64> = (0..72).map(|i| f64::from(i / 24 * 10 + i % 24)).collect();
        let whole = values.clone();
        values[24..48].fill(MISSING);
        assert_eq!(filled(&values), whole);
    }

    #[test]
    fn two_missing_days_lean_on_the_nearer_one() {
        let mut values: Vec<f64> = (0..96).map(|i| f64::from(i / 24 * 3)).collect();
        let whole = values.clone();
        values[24..72].fill(MISSING);
        let filled = filled(&values);
        assert!(
            filled
                .iter()
                .zip(&whole)
                .all(|(a, b)| (a - b).abs() < 1e-12)
        );
    }

    #[test]
    fn gaps_at_the_ends_take_what_there_is() {
        let mut values = vec![MISSING; 3];
        values.extend((0..45).map(f64::from));
        assert_eq!(filled(&values)[0..3], [21.0, 22.0, 23.0]);
        assert_eq!(filled(&[MISSING, 4.0, MISSING]), [4.0, 4.0, 4.0]);
    }
}
