//! From raw columns to physical units: unit decided, missing markers and impossible values set aside.

use super::columns::ValueColumn;
use super::layout::Layout;
use super::number;
use super::options::{ReadOptions, TemperatureUnit};
use super::rows::Rows;
use super::words::count;
use crate::bounds::{Bound, GLOBAL_W_PER_M2, OUTDOOR_C};
use crate::problem::{Finding, Place, Problem, Problems, Severity};

/// Up to this share of impossible readings is set aside and repaired; more means that the column is misunderstood.
const BEARABLE_SHARE: f64 = 0.01;
/// Up to this many impossible readings are set aside however short the file is.
const BEARABLE_COUNT: usize = 3;
/// No place on land has a higher annual mean in °C (common practice, no source): above it the unit is doubted.
const HOTTEST_MEAN_C: f64 = 32.0;
/// Readings a little below nothing, as pyranometers give at night, W/m².
const NIGHT_OFFSET_W_PER_M2: f64 = -20.0;
/// Relative humidity up to this is saturation read by a sensor that is slightly off.
const SATURATED: f64 = 1.05;
/// Hourly mean wind.
const WIND_M_PER_S: Bound = Bound {
    label: "wind speed",
    low: 0.0,
    high: 75.0,
    unit: "m/s",
};
/// Watt-hours in a kilojoule: an hour's kJ/m² as mean W/m².
const WH_PER_KJ: f64 = 1.0 / 3.6;

/// The readings of a file in °C, shares, W/m² and m/s. Missing is `NaN`.
#[derive(Debug, Clone, Default)]
pub(super) struct Values {
    pub outdoor_c: Vec<f64>,
    pub humidity: Option<Vec<f64>>,
    pub dew_point_c: Option<Vec<f64>>,
    pub global_w_per_m2: Option<Vec<f64>>,
    pub wind_m_per_s: Option<Vec<f64>>,
}

/// Converts all columns.
///
/// # Errors
/// No temperature at all, a temperature that fits no unit, too many impossible temperatures.
pub(super) fn values(
    place: &Place,
    rows: &mut Rows,
    layout: &Layout,
    options: &ReadOptions,
    findings: &mut Vec<Finding>,
) -> Result<Values, Problems> {
    let columns = &layout.columns;
    let unit = temperature_unit(
        place,
        &rows.temperature,
        &columns.temperature,
        options,
        findings,
    )?;
    let mut place_t = place.clone();
    place_t.field = layout.headings.get(columns.temperature.at).cloned();
    let mut outdoor_c = std::mem::take(&mut rows.temperature);
    temperature(&place_t, &rows.line, &mut outdoor_c, unit, findings)?;
    let mut note = |what: String, done: &str| {
        findings.push(Finding::new(Severity::Note, what, done).at(place));
    };
    Ok(Values {
        outdoor_c,
        humidity: rows
            .humidity
            .take()
            .zip(columns.humidity.as_ref())
            .map(|(v, c)| humidity(v, c, &mut note)),
        dew_point_c: rows
            .dew_point
            .take()
            .zip(columns.dew_point.as_ref())
            .map(|(mut v, c)| {
                let unit = c.unit.parse().unwrap_or(unit);
                v.iter_mut()
                    .for_each(|x| *x = within(unit.to_c(*x), &OUTDOOR_C));
                v
            }),
        global_w_per_m2: rows
            .radiation
            .take()
            .zip(columns.radiation.as_ref())
            .map(|(v, c)| radiation(v, c, &mut note)),
        wind_m_per_s: rows
            .wind
            .take()
            .zip(columns.wind.as_ref())
            .map(|(v, c)| wind(v, c, &mut note)),
    })
}

/// The value, or missing when it is out of bounds.
fn within(value: f64, bound: &Bound) -> f64 {
    if bound.holds(value) { value } else { f64::NAN }
}

fn temperature_unit(
    place: &Place,
    readings: &[f64],
    column: &ValueColumn,
    options: &ReadOptions,
    findings: &mut Vec<Finding>,
) -> Result<TemperatureUnit, Problems> {
    if let Some(unit) = options.temperature_unit {
        return Ok(unit);
    }
    if let Ok(unit) = column.unit.parse() {
        return Ok(unit);
    }
    let plausible: Vec<f64> = readings
        .iter()
        .copied()
        .filter(|&x| x.is_finite() && !(number::is_marker(x) && !OUTDOOR_C.holds(x)))
        .collect();
    if plausible.is_empty() {
        // Said better where the readings are counted.
        return Ok(TemperatureUnit::Celsius);
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
    Ok(unit)
}

/// Converts to °C, and sets markers and impossible values aside.
fn temperature(
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

fn humidity(
    mut values: Vec<f64>,
    column: &ValueColumn,
    note: &mut impl FnMut(String, &str),
) -> Vec<f64> {
    let fraction = match column.unit.as_str() {
        "%" | "percent" | "pct" => false,
        "-" | "1" | "0-1" | "0..1" | "0–1" | "fraction" => true,
        _ => {
            let greatest = values
                .iter()
                .copied()
                .filter(|x| x.is_finite() && *x <= SATURATED * 100.0)
                .fold(0.0, f64::max);
            let fraction = greatest <= SATURATED;
            if fraction {
                note(
                    format!("no unit is stated for relative humidity up to {greatest}"),
                    "read as a share of one",
                );
            }
            fraction
        }
    };
    let mut odd = 0;
    for value in &mut values {
        let share = if fraction { *value } else { *value / 100.0 };
        *value = if (0.0..=1.0).contains(&share) {
            share
        } else if share > 1.0 && share <= SATURATED {
            1.0
        } else {
            odd += usize::from(!value.is_nan());
            f64::NAN
        };
    }
    if odd > 0 {
        note(
            format!(
                "{} of relative humidity are impossible or marks",
                count(odd, "reading")
            ),
            "taken as missing",
        );
    }
    values
}

fn radiation(
    mut values: Vec<f64>,
    column: &ValueColumn,
    note: &mut impl FnMut(String, &str),
) -> Vec<f64> {
    let plain: String = column
        .unit
        .chars()
        .filter(|c| !matches!(c, ' ' | '^' | '*' | '·'))
        .collect();
    let factor = match plain.replace('²', "2").as_str() {
        "kj/m2" | "kjm-2" => WH_PER_KJ,
        "mj/m2" | "mjm-2" => WH_PER_KJ * 1000.0,
        "j/cm2" | "jcm-2" => WH_PER_KJ * 10.0,
        "kwh/m2" | "kw/m2" => 1000.0,
        _ => 1.0,
    };
    if factor != 1.0 {
        note(
            format!("radiation is given in {}", column.unit),
            "taken as the sum of each hour",
        );
    }
    let mut odd = 0;
    for value in &mut values {
        let w = *value * factor;
        *value = if (NIGHT_OFFSET_W_PER_M2..0.0).contains(&w) {
            0.0
        } else if GLOBAL_W_PER_M2.holds(w) {
            w
        } else {
            odd += usize::from(!w.is_nan());
            f64::NAN
        };
    }
    if odd > 0 {
        note(
            format!(
                "{} of radiation are impossible or marks",
                count(odd, "reading")
            ),
            "taken as missing",
        );
    }
    values
}

fn wind(
    mut values: Vec<f64>,
    column: &ValueColumn,
    note: &mut impl FnMut(String, &str),
) -> Vec<f64> {
    let factor = match column.unit.replace(' ', "").as_str() {
        "km/h" | "kmh" | "kph" | "kmh-1" => 1.0 / 3.6,
        "mph" | "mi/h" => 0.447_04,
        "kn" | "kt" | "kts" | "knots" | "knot" => 1852.0 / 3600.0,
        _ => 1.0,
    };
    let mut odd = 0;
    for value in &mut values {
        let speed = *value * factor;
        odd += usize::from(!speed.is_nan() && !WIND_M_PER_S.holds(speed));
        *value = within(speed, &WIND_M_PER_S);
    }
    if odd > 0 {
        note(
            format!("{} of wind are impossible or marks", count(odd, "reading")),
            "taken as missing",
        );
    }
    values
}
