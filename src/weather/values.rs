//! From raw columns to physical units: unit decided, missing markers and impossible values set aside.

use super::columns::ValueColumn;
use super::layout::Layout;
use super::options::ReadOptions;
use super::rows::Rows;
use super::temperature::{temperature, temperature_unit};
use super::words::count;
use crate::bounds::{Bound, GLOBAL_W_PER_M2, OUTDOOR_C};
use crate::problem::{Finding, Place, Problems, Severity};

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
    );
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
