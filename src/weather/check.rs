//! Checks of the hourly temperatures that need no standard: spikes, stuck sensors, clock artefacts, whole years.

use chrono::DateTime;

use super::clock_change;
use super::hours::Hours;
use super::words::count;
use super::zone::{Zone, local_hours};
use crate::problem::{Finding, Severity};

/// An hour that lies this far above or below both neighbours is a fault of the sensor, not weather, K.
/// Common practice, no source: the air has not been seen to go and come back by 10 K within two hours.
const SPIKE_K: f64 = 10.0;
/// Neighbours of a spike agree with each other to within this share of it.
const SPIKE_AGREEMENT: f64 = 0.5;
/// Hours without the least change after which a sensor is taken to be stuck. Common practice, no source: coarse
/// sensors in fog stay put for half a day.
const STUCK_HOURS: usize = 24;
/// Hours of the day between which the mean daily peak of outdoor temperature lies on a local clock.
const WARMEST_HOURS: std::ops::RangeInclusive<usize> = 11..=18;
/// Mean daily swing below which the warmest hour says nothing, K.
const FLAT_SWING_K: f64 = 1.0;
const HOUR_S: i64 = 3600;

/// Sets spikes aside as missing.
pub(super) fn spikes(hours: &mut Hours, findings: &mut Vec<Finding>) {
    let values = &hours.outdoor_c;
    let spikes: Vec<usize> = (1..values.len().saturating_sub(1))
        .filter(|&i| {
            let (up, down) = (values[i] - values[i - 1], values[i] - values[i + 1]);
            // A missing neighbour makes every comparison false.
            up * down > 0.0
                && up.abs().min(down.abs()) > SPIKE_K
                && (values[i + 1] - values[i - 1]).abs()
                    < SPIKE_AGREEMENT * up.abs().min(down.abs())
        })
        .collect();
    for &i in &spikes {
        let what = format!(
            "{:.1} °C at {} between {:.1} and {:.1} °C is a spike",
            hours.outdoor_c[i],
            hours.local(i),
            hours.outdoor_c[i - 1],
            hours.outdoor_c[i + 1]
        );
        findings
            .push(Finding::new(Severity::Warning, what, "taken as missing").at(&hours.place(i)));
    }
    for i in spikes {
        hours.outdoor_c[i] = f64::NAN;
    }
}

/// Reports sensors that did not move.
pub(super) fn stuck(hours: &Hours, findings: &mut Vec<Finding>) {
    let mut from = 0;
    for run in hours.outdoor_c.chunk_by(|a, b| a == b) {
        if run.len() >= STUCK_HOURS {
            findings.push(
                Finding::new(
                    Severity::Warning,
                    format!(
                        "{:.1} °C without change for {} hours from {}",
                        run[0],
                        run.len(),
                        hours.local(from)
                    ),
                    "kept; is the sensor stuck?",
                )
                .at(&hours.place(from)),
            );
        }
        from += run.len();
    }
}

/// Reports holes that look like a civil clock read as if it never changed.
pub(super) fn clock_artefacts(hours: &Hours, findings: &mut Vec<Finding>) {
    if hours.zone_known {
        return;
    }
    for i in 1..hours.outdoor_c.len().saturating_sub(1) {
        let alone = hours.line[i] == 0 && hours.line[i - 1] > 0 && hours.line[i + 1] > 0;
        if !alone {
            continue;
        }
        let Some(instant) =
            DateTime::from_timestamp(hours.start_s + i64::try_from(i).unwrap_or(0) * HOUR_S, 0)
        else {
            continue;
        };
        if clock_change::could_be(hours.zone.local(instant)) {
            findings.push(
                Finding::new(
                    Severity::Warning,
                    format!(
                        "the one hour {} is missing, as when clocks go forward",
                        hours.local(i)
                    ),
                    "do the stamps follow a civil clock? declare its zone",
                )
                .at(&hours.place(i)),
            );
        }
    }
}

/// Reports a mean day whose warmest hour does not fit the declared clock. Needs repaired hours.
pub(super) fn warmest_hour(hours: &Hours, findings: &mut Vec<Finding>) {
    // An undeclared clock has its own finding, and UTC says nothing of where the place lies.
    let utc = hours.zone == Zone::utc();
    if !hours.zone_known || utc || hours.outdoor_c.len() < 24 * 28 {
        return;
    }
    let Some(start) = DateTime::from_timestamp(hours.start_s, 0) else {
        return;
    };
    let mut sums = [(0.0, 0usize); 24];
    for (c, local) in
        hours
            .outdoor_c
            .iter()
            .zip(local_hours(hours.zone, start, hours.outdoor_c.len()))
    {
        let hour = usize::try_from(local.div_euclid(HOUR_S).rem_euclid(24)).unwrap_or(0);
        if let Some((sum, n)) = sums.get_mut(hour) {
            *sum += c;
            *n += 1;
        }
    }
    let means = sums.map(|(sum, n)| if n > 0 { sum / n as f64 } else { f64::NAN });
    let (mut warmest, mut coldest) = (0, 0);
    for hour in 1..24 {
        if means[hour] > means[warmest] {
            warmest = hour;
        }
        if means[hour] < means[coldest] {
            coldest = hour;
        }
    }
    if means[warmest] - means[coldest] > FLAT_SWING_K && !WARMEST_HOURS.contains(&warmest) {
        findings.push(
            Finding::new(
                Severity::Warning,
                format!(
                    "by the clock of {} the warmest hour of the mean day begins at {warmest:02}:00",
                    hours.zone
                ),
                "is the time zone right?",
            )
            .at(&hours.whole()),
        );
    }
}

/// Reports a file that does not hold whole years.
pub(super) fn whole_years(hours: &Hours, years: f64, findings: &mut Vec<Finding>) {
    if years >= 1.0 && years.fract() == 0.0 {
        return;
    }
    let last = hours.outdoor_c.len().saturating_sub(1);
    findings.push(
        Finding::new(
            Severity::Warning,
            format!(
                "the file runs from {} to {}, {}: not whole years",
                hours.local(0),
                hours.local(last),
                count(last + 1, "hour")
            ),
            "annual figures cover only these hours",
        )
        .at(&hours.whole()),
    );
}
