//! The temperature column: its unit decided, missing markers and impossible values set aside.

use super::columns::ValueColumn;
use super::number;
use super::options::{ReadOptions, TemperatureUnit};
use super::words::count;
use crate::bounds::OUTDOOR_C;
use crate::problem::{Finding, Place, Problem, Problems, Severity};

/// Up to this share of impossible readings is set aside and repaired; more means that the column is misunderstood.
const BEARABLE_SHARE: f64 = 0.01;
/// Up to this many impossible readings are set aside however short the file is.
const BEARABLE_COUNT: usize = 3;
/// No place on land has a higher annual mean in °C (common practice, no source): above it the unit is doubted.
const HOTTEST_MEAN_C: f64 = 32.0;

/// The unit of the temperatures: declared, else the heading's, else the one that fits.
/// What fits no unit is taken as °C, and the count of impossible readings says what is wrong.
pub(super) fn temperature_unit(
    place: &Place,
    readings: &[f64],
    column: &ValueColumn,
    options: &ReadOptions,
    findings: &mut Vec<Finding>,
) -> TemperatureUnit {
    if let Some(unit) = options.temperature_unit {
        return unit;
    }
    if let Ok(unit) = column.unit.parse() {
        return unit;
    }
    let plausible: Vec<f64> = readings
        .iter()
        .copied()
        .filter(|&x| x.is_finite() && (OUTDOOR_C.holds(x) || !number::is_marker(x)))
        .collect();
    if plausible.is_empty() {
        // Said better where the readings are counted.
        return TemperatureUnit::Celsius;
    }
    let most = |test: &dyn Fn(f64) -> bool| {
        let fails = plausible.iter().filter(|&&x| !test(x)).count();
        fails as f64 <= (plausible.len() as f64 * BEARABLE_SHARE).max(BEARABLE_COUNT as f64)
            && fails < plausible.len()
    };
    let fits = |unit: TemperatureUnit| most(&|x| OUTDOOR_C.holds(unit.to_c(x)));
    let mean = plausible.iter().sum::<f64>() / plausible.len() as f64;
    use TemperatureUnit::*;
    let unit = if fits(Celsius) && mean <= HOTTEST_MEAN_C {
        Celsius
    } else if fits(Kelvin) {
        Kelvin
    } else if fits(Fahrenheit) {
        Fahrenheit
    } else if fits(TenthsCelsius) && most(&|x| x.fract() == 0.0) {
        TenthsCelsius
    } else {
        // The count of impossible readings says what is wrong.
        Celsius
    };
    let (least, greatest) = plausible
        .iter()
        .fold((f64::MAX, f64::MIN), |(a, b), &x| (a.min(x), b.max(x)));
    findings.push(
        Finding::new(
            if unit == Celsius {
                Severity::Note
            } else {
                Severity::Warning
            },
            format!("no unit is stated for temperatures from {least} to {greatest}"),
            format!("read as {unit}; declare the unit if that is wrong"),
        )
        .at(place),
    );
    unit
}

/// Converts to °C, and sets markers and impossible values aside.
///
/// # Errors
/// Too many impossible temperatures, or none at all.
pub(super) fn temperature(
    place: &Place,
    lines: &[u32],
    readings: &mut [f64],
    unit: TemperatureUnit,
    findings: &mut Vec<Finding>,
) -> Result<(), Problems> {
    let mut marked = 0;
    let mut first_mark = None;
    let mut impossible: Vec<(u32, f64)> = Vec::new();
    let mut sum = 0.0;
    let mut present = 0;
    for (reading, &line) in readings.iter_mut().zip(lines) {
        if reading.is_nan() {
            continue;
        }
        let c = unit.to_c(*reading);
        if OUTDOOR_C.holds(c) {
            *reading = c;
            sum += c;
            present += 1;
            continue;
        }
        if number::is_marker(*reading) {
            marked += 1;
            first_mark.get_or_insert((line, *reading));
        } else {
            impossible.push((line, *reading));
        }
        *reading = f64::NAN;
    }
    let remedy = match unit {
        TemperatureUnit::Celsius => "is the file in °F, K or tenths? declare the temperature unit",
        _ => "is the temperature unit right? declare it",
    };
    let said = |reading: f64| {
        let c = unit.to_c(reading);
        let side = if c > OUTDOOR_C.high { "above" } else { "below" };
        let bound = if c > OUTDOOR_C.high {
            OUTDOOR_C.high
        } else {
            OUTDOOR_C.low
        };
        let as_read = if unit == TemperatureUnit::Celsius {
            String::new()
        } else {
            format!(" ({reading} read as {unit})")
        };
        format!(
            "{}{as_read} is {side} the {bound} °C bound for outdoor air",
            celsius(c)
        )
    };
    let at = |line: u32| place.clone().at_line(usize::try_from(line).unwrap_or(0));
    let bearable = (readings.len() as f64 * BEARABLE_SHARE).max(BEARABLE_COUNT as f64);
    if impossible.len() as f64 > bearable {
        let mut problems = Problems::new();
        for &(line, reading) in impossible.iter().take(5) {
            problems.push(Problem::new(
                at(line),
                said(reading),
                OUTDOOR_C.words(),
                remedy,
            ));
        }
        problems.push(Problem::new(
            place.clone(),
            format!(
                "{} of {} temperatures are impossible",
                impossible.len(),
                readings.len()
            ),
            format!(
                "at most {} % of the rows, which are then repaired",
                BEARABLE_SHARE * 100.0
            ),
            remedy,
        ));
        return Err(problems);
    }
    if present == 0 {
        return Err(Problem::new(
            place.clone(),
            format!(
                "none of the {} has a temperature",
                count(readings.len(), "row")
            ),
            "hourly temperatures",
            "say which column holds the temperature",
        )
        .into());
    }
    for (line, reading) in impossible {
        findings
            .push(Finding::new(Severity::Warning, said(reading), "taken as missing").at(&at(line)));
    }
    if let Some((line, reading)) = first_mark {
        findings.push(
            Finding::new(
                Severity::Note,
                format!(
                    "{reading} stands for a missing temperature in {}",
                    count(marked, "row")
                ),
                "taken as missing",
            )
            .at(&at(line)),
        );
    }
    let mean = sum / present as f64;
    if mean > HOTTEST_MEAN_C {
        findings.push(
            Finding::new(
                Severity::Warning,
                format!("the mean of {mean:.1} °C is above that of any place on land"),
                remedy,
            )
            .at(place),
        );
    }
    Ok(())
}

/// A temperature in words: one decimal, or the number as it is when it is absurd.
fn celsius(c: f64) -> String {
    if c.abs() < 1e6 {
        format!("{c:.1} °C")
    } else {
        format!("{c:e} °C")
    }
}
