//! Degree-days by named rules.
//!
//! The choice of rule alone moves the annual figure by several per cent, so that a figure without its rule means little.

use std::fmt;
use std::ops::Range;

use chrono::{Datelike, NaiveDate};

use super::Weather;

/// How degree-days are counted.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Rule {
    /// Every hour below the base counts with a 24th of its difference.
    Hourly,
    /// The mean of a day's hours against the base.
    DailyMean,
    /// Half the sum of a day's highest and lowest hour against the base, as US degree-days are counted.
    MaxMin,
    /// The four cases of the UK daily rule: by highest and lowest hour and half their sum.
    UkDaily,
    /// Monthly means by Hitchin's formula.
    Hitchin,
}

/// Days shorter than this count by their share of 24 hours: the ends of a file, not the day the clock goes forward.
const WHOLE_DAY_HOURS: usize = 23;
/// Hitchin 1983, as quoted in the trade's degree-day guides [from memory], 1/K.
const HITCHIN_PER_K: f64 = 0.71;

impl Rule {
    /// Every rule.
    pub const ALL: [Self; 5] = [
        Self::Hourly,
        Self::DailyMean,
        Self::MaxMin,
        Self::UkDaily,
        Self::Hitchin,
    ];

    /// The rule's name, as answers carry it.
    pub fn name(self) -> &'static str {
        match self {
            Self::Hourly => "hourly",
            Self::DailyMean => "daily mean",
            Self::MaxMin => "max and min",
            Self::UkDaily => "UK daily",
            Self::Hitchin => "Hitchin",
        }
    }

    /// The degree-days of one day, K·d, from its lowest, highest and mean temperature.
    fn of_day(self, base_c: f64, lowest: f64, highest: f64, mean: f64) -> f64 {
        let middle = (highest + lowest) / 2.0;
        match self {
            Self::DailyMean => (base_c - mean).max(0.0),
            Self::MaxMin => (base_c - middle).max(0.0),
            Self::UkDaily if lowest > base_c => 0.0,
            Self::UkDaily if middle > base_c => (base_c - lowest) / 4.0,
            Self::UkDaily if highest >= base_c => {
                (base_c - lowest) / 2.0 - (highest - base_c) / 4.0
            }
            Self::UkDaily => base_c - middle,
            Self::Hourly | Self::Hitchin => 0.0,
        }
    }
}

impl fmt::Display for Rule {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        f.write_str(self.name())
    }
}

/// Heating degree-days of a range of hours below a base in °C, in K·d, by one rule.
///
/// Days and months are those of the file's own clock. UK daily rule: the first that applies of lowest > base: 0; middle >
/// base: (base − lowest)/4; highest ≥ base: (base − lowest)/2 − (highest − base)/4; else base − middle (UK Met Office).
/// `MaxMin` at 65 °F is the US definition (NOAA). Hitchin 1983: N·d/(1 − e^(−k·d)), d = base − monthly mean, k = 0.71 /K.
///
/// ```
/// use winterledger::weather::{ReadOptions, Rule, degree_days, read_bytes};
/// let text = "time,temp (C)\n2023-01-01T00:00Z,5.5\n2023-01-01T01:00Z,7.5\n";
/// let weather = read_bytes("w", text.as_bytes(), &ReadOptions::default())?;
/// assert!((degree_days(&weather, 0..2, 15.5, Rule::Hourly) - (10.0 + 8.0) / 24.0).abs() < 1e-12);
/// # Ok::<(), winterledger::problem::Problems>(())
/// ```
pub fn degree_days(weather: &Weather, hours: Range<usize>, base_c: f64, rule: Rule) -> f64 {
    count(&weather.outdoor_c, &weather.days(), hours, base_c, rule)
}

/// A day of the file's clock and its hours.
type Day = (NaiveDate, Range<usize>);

/// [`degree_days`] for days that are known already.
pub(super) fn count(
    outdoor_c: &[f64],
    days: &[Day],
    hours: Range<usize>,
    base_c: f64,
    rule: Rule,
) -> f64 {
    let hours = hours.start.min(outdoor_c.len())..hours.end.min(outdoor_c.len());
    let first = days.partition_point(|(_, day)| day.end <= hours.start);
    let end = days.partition_point(|(_, day)| day.start < hours.end);
    let days = days.get(first..end).unwrap_or_default();
    let within =
        |span: &Range<usize>| &outdoor_c[span.start.max(hours.start)..span.end.min(hours.end)];
    match rule {
        Rule::Hourly => {
            outdoor_c[hours]
                .iter()
                .map(|c| (base_c - c).max(0.0))
                .sum::<f64>()
                / 24.0
        }
        Rule::Hitchin => days
            .chunk_by(|(a, _), (b, _)| (a.year(), a.month0()) == (b.year(), b.month0()))
            .map(|month| {
                let span = month[0].1.start..month[month.len() - 1].1.end;
                hitchin(within(&span), base_c)
            })
            .sum(),
        _ => days
            .iter()
            .map(|(_, day)| {
                let readings = within(day);
                let lowest = readings.iter().copied().fold(f64::INFINITY, f64::min);
                let highest = readings.iter().copied().fold(f64::NEG_INFINITY, f64::max);
                let mean = readings.iter().sum::<f64>() / readings.len() as f64;
                day_share(readings.len()) * rule.of_day(base_c, lowest, highest, mean)
            })
            .sum(),
    }
}

fn day_share(hours: usize) -> f64 {
    if hours >= WHOLE_DAY_HOURS {
        1.0
    } else {
        hours as f64 / 24.0
    }
}

/// The degree-days of one month from its mean.
fn hitchin(readings: &[f64], base_c: f64) -> f64 {
    let below = base_c - readings.iter().sum::<f64>() / readings.len() as f64;
    // At the base itself the formula is 0/0; its limit is 1/k.
    let a_day = if (HITCHIN_PER_K * below).abs() < 1e-9 {
        1.0 / HITCHIN_PER_K
    } else {
        below / (1.0 - (-HITCHIN_PER_K * below).exp())
    };
    a_day * readings.len() as f64 / 24.0
}

#[cfg(test)]
mod tests {
    use super::*;

    /// The cases of the UK rule worked by hand for a base of 15.5 °C.
    #[test]
    fn the_uk_rule_has_four_cases() {
        for (lowest, highest, expected) in [
            (16.0, 22.0, 0.0),
            (13.5, 20.5, 2.0 / 4.0),
            (9.5, 16.5, 6.0 / 2.0 - 1.0 / 4.0),
            (3.5, 9.5, 15.5 - 6.5),
        ] {
            let found = Rule::UkDaily.of_day(15.5, lowest, highest, f64::NAN);
            assert!(
                (found - expected).abs() < 1e-12,
                "{lowest} {highest}: {found}"
            );
        }
    }

    #[test]
    fn names_differ() {
        let mut names: Vec<_> = Rule::ALL.iter().map(|rule| rule.name()).collect();
        names.dedup();
        assert_eq!(names.len(), Rule::ALL.len());
    }
}
