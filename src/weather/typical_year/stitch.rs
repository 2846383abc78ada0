//! The chosen months as one year.

use chrono::{DateTime, FixedOffset, NaiveDate, Utc};

use super::Candidate;
use crate::calendar::HourAxis;
use crate::problem::{Finding, Severity};
use crate::weather::{Kind, Weather, Zone};

/// Hours on either side of a join of months that are smoothed.
const SMOOTHED_HOURS: usize = 8;
/// The year the result is placed on: a common year, as the procedure leaves 29 February out.
const NOMINAL_YEAR: i32 = 2023;
const HOURS_A_DAY: usize = 24;

/// Days in a month of a common year.
pub(super) fn days_in_month(month0: usize) -> usize {
    [31, 28, 31, 30, 31, 30, 31, 31, 30, 31, 30, 31][month0 % 12]
}

/// Puts the chosen months one after the other on the nominal year and smooths the joins.
pub(super) fn stitch(
    series: &[Weather],
    candidates: &[Vec<Candidate>; 12],
    years: [i32; 12],
    offset_s: i32,
    mut findings: Vec<Finding>,
) -> Option<Weather> {
    let zone = Zone::Fixed(FixedOffset::east_opt(offset_s)?);
    let midnight = NaiveDate::from_ymd_opt(NOMINAL_YEAR, 1, 1)?
        .and_time(chrono::NaiveTime::MIN)
        .and_utc();
    let start: DateTime<Utc> = midnight - chrono::Duration::seconds(i64::from(offset_s));
    let chosen: Vec<&Candidate> = candidates
        .iter()
        .filter_map(|month| month.first())
        .collect();
    let gather = |of: &dyn Fn(&Weather) -> Option<&[f64]>| -> Option<Vec<f64>> {
        let mut column = Vec::with_capacity(8760);
        for month in &chosen {
            column.extend_from_slice(of(series.get(month.series)?)?.get(month.hours.clone())?);
        }
        Some(column)
    };
    let mut outdoor_c = gather(&|w| Some(&w.outdoor_c))?;
    let mut relative_humidity = gather(&|w| w.relative_humidity.as_deref());
    let mut wind_m_per_s = gather(&|w| w.wind_m_per_s.as_deref());
    let mut repaired = Vec::with_capacity(outdoor_c.len());
    for month in &chosen {
        repaired.extend_from_slice(
            series
                .get(month.series)?
                .repaired
                .get(month.hours.clone())?,
        );
    }
    smooth_joins(&mut outdoor_c, years);
    if let Some(humidity) = &mut relative_humidity {
        smooth_joins(humidity, years);
        humidity
            .iter_mut()
            .for_each(|share| *share = share.clamp(0.0, 1.0));
    }
    if let Some(wind) = &mut wind_m_per_s {
        smooth_joins(wind, years);
        wind.iter_mut().for_each(|speed| *speed = speed.max(0.0));
    }
    findings.push(Finding::new(
        Severity::Note,
        format!("months of different years are joined on {NOMINAL_YEAR}"),
        format!("{SMOOTHED_HOURS} hours on either side of each join are smoothed, radiation aside"),
    ));
    let missing_hours = repaired.iter().filter(|&&flag| flag).count();
    Some(Weather {
        file: series
            .first()
            .map(|weather| weather.file.clone())
            .unwrap_or_default(),
        axis: HourAxis {
            start,
            hours: outdoor_c.len(),
        },
        zone,
        kind: Kind::Typical {
            source_years: Some(years),
        },
        outdoor_c,
        relative_humidity,
        global_w_per_m2: gather(&|w| w.global_w_per_m2.as_deref()),
        wind_m_per_s,
        repaired,
        missing_hours,
        duplicate_hours: 0,
        joined_hours: 0,
        findings,
    })
}

/// Takes the step out of every join, the one from December to January included, so that the year can be repeated.
///
/// Half of the step is added before the join and half taken away after it, fading over eight hours: the weather's own ups
/// and downs stay.
fn smooth_joins(values: &mut [f64], years: [i32; 12]) {
    let length = values.len();
    let mut join = 0;
    for month0 in 0..12 {
        let before = (month0 + 11) % 12;
        if years[before] != years[month0] {
            let last = (join + length - 1) % length;
            let step = values[join] - values[last];
            for k in 0..SMOOTHED_HOURS {
                let share = 0.5 * step * (SMOOTHED_HOURS - k) as f64 / SMOOTHED_HOURS as f64;
                values[(last + length - k) % length] += share;
                values[(join + k) % length] -= share;
            }
        }
        join += days_in_month(month0) * HOURS_A_DAY;
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_join_loses_its_step_and_nothing_else_moves() {
        let mut years = [2000; 12];
        years[1] = 2001;
        let mut values = vec![10.0; 8760];
        values[31 * 24..59 * 24].fill(4.0);
        smooth_joins(&mut values, years);
        let join = 31 * 24;
        assert!((values[join] - values[join - 1]).abs() < 1e-9);
        assert!((values[join] - 7.0).abs() < 1e-9);
        assert_eq!((values[join - 9], values[join + 8]), (10.0, 4.0));
        assert!(values.windows(2).all(|w| (w[1] - w[0]).abs() < 1.0));
    }
}
