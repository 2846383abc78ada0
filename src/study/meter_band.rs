//! What a meter should read month by month, to compare with after installation.

use std::collections::BTreeMap;

use super::case::{Account, Contender};
use super::outcome::Outcome;
use crate::tariff::Reading;
use crate::units::Fuel;

/// Fewest years of weather whose spread says something about a month.
const ENOUGH_YEARS: usize = 5;
/// Spread of a month's reading around one year's where there are fewer, as a fraction. Common practice, no source.
const STATED_SPREAD: f64 = 0.20;
/// A month that the weather covers by less than this share is left out.
const WHOLE: f64 = 0.95;

/// The readings of a meter that would be no surprise.
#[derive(Debug, Clone, PartialEq)]
pub struct MeterBand {
    /// What people call the tariff.
    pub tariff: String,
    /// What the meter counts.
    pub fuel: Fuel,
    /// What the band is made of, in words.
    pub basis: String,
    /// The civil months that the weather covers.
    pub months: Vec<MeterMonth>,
}

/// A month of it, kWh bought.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct MeterMonth {
    /// Civil month from 0.
    pub month0: usize,
    /// Lowest reading that would be no surprise.
    pub low_kwh: f64,
    /// Mean of the years of weather.
    pub likely_kwh: f64,
    /// Highest reading that would be no surprise.
    pub high_kwh: f64,
}

/// The bands of a system's meters: that of its electricity and that of its fuel.
pub fn meter_band(contender: &Contender, outcome: &Outcome) -> Vec<MeterBand> {
    let electricity = band(&contender.electricity, &outcome.electricity);
    let fuel = contender
        .fuel
        .as_ref()
        .zip(outcome.fuel.as_ref())
        .map(|(account, reading)| band(account, reading));
    std::iter::once(electricity).chain(fuel).collect()
}

fn band(account: &Account, reading: &Reading) -> MeterBand {
    let mut years = 0;
    let months: Vec<_> = (0..12)
        .filter_map(|month0| {
            let readings = readings(account, reading, month0);
            years = years.max(readings.len());
            month(month0, &readings)
        })
        .collect();
    let basis = if years >= ENOUGH_YEARS {
        format!(
            "lowest and highest of {years} years of weather; people who live otherwise are not in it"
        )
    } else {
        format!(
            "{years} year{} of weather, ± {:.0} % (common practice, no source)",
            if years == 1 { "" } else { "s" },
            STATED_SPREAD * 100.0
        )
    };
    MeterBand {
        tariff: account.tariff.label.clone(),
        fuel: account.tariff.fuel,
        basis,
        months,
    }
}

/// What the meter read in a civil month of each year that has it whole.
fn readings(account: &Account, reading: &Reading, month0: usize) -> Vec<f64> {
    let segments = account.meter.segments();
    let mut by_year: BTreeMap<i32, (f64, f64)> = BTreeMap::new();
    for segment in segments.iter().filter(|segment| segment.month0 == month0) {
        by_year.entry(segment.year).or_default().1 += segment.days / segment.month_days();
    }
    for (bucket, kwh) in account.meter.buckets().iter().zip(&reading.import_kwh) {
        let segment = &segments[bucket.segment];
        if segment.month0 == month0 {
            by_year.entry(segment.year).or_default().0 += kwh;
        }
    }
    by_year
        .into_values()
        .filter(|(_, covered)| *covered >= WHOLE)
        .map(|(kwh, _)| kwh)
        .collect()
}

fn month(month0: usize, readings: &[f64]) -> Option<MeterMonth> {
    if readings.is_empty() {
        return None;
    }
    let likely_kwh = readings.iter().sum::<f64>() / readings.len() as f64;
    let lowest = readings.iter().copied().fold(f64::INFINITY, f64::min);
    let highest = readings.iter().copied().fold(f64::NEG_INFINITY, f64::max);
    let (low_kwh, high_kwh) = if readings.len() >= ENOUGH_YEARS {
        (lowest, highest)
    } else {
        (
            lowest * (1.0 - STATED_SPREAD),
            highest * (1.0 + STATED_SPREAD),
        )
    };
    Some(MeterMonth {
        month0,
        low_kwh,
        likely_kwh,
        high_kwh,
    })
}

#[cfg(test)]
mod tests {
    use super::*;

    /// By hand: one year of 100 kWh is 80 to 120; five years are their lowest and highest.
    #[test]
    fn few_years_are_widened_and_many_speak_for_themselves() {
        let one = month(0, &[100.0]).unwrap();
        assert!((one.low_kwh - 80.0).abs() < 1e-9 && (one.high_kwh - 120.0).abs() < 1e-9);
        let five = month(0, &[90.0, 100.0, 110.0, 95.0, 105.0]).unwrap();
        assert_eq!(
            (five.low_kwh, five.likely_kwh, five.high_kwh),
            (90.0, 100.0, 110.0)
        );
        assert_eq!(month(0, &[]), None);
    }
}
