//! From a file to complete hourly weather: every step in order.

use std::path::Path;
use std::sync::Arc;

use chrono::DateTime;

use super::hours::Hours;
use super::{Kind, ReadOptions, Weather, bytes, check, clock, hours, layout, repair, rows, values};
use crate::calendar::HourAxis;
use crate::problem::{Finding, Place, Problem, Problems};

/// Reads one hourly weather file.
///
/// # Errors
/// Everything that keeps the file from being used, with its line: see the rooms of each step.
pub fn read(path: &Path, options: &ReadOptions) -> Result<Weather, Problems> {
    let name = path.display().to_string();
    let bytes = std::fs::read(path).map_err(|error| {
        Problem::new(
            Place::file(name.as_str()),
            format!("cannot be read: {error}"),
            "a file that can be read",
            "",
        )
    })?;
    read_bytes(&name, &bytes, options)
}

/// Reads hourly weather from bytes that are at hand already; `name` stands for the file in messages.
///
/// # Errors
/// As [`read`].
///
/// ```
/// use winterledger::weather::{ReadOptions, read_bytes};
/// let text = "time,temperature (°C)\n2023-01-01T00:00Z,3.5\n2023-01-01T01:00Z,3.1\n";
/// let weather = read_bytes("two hours", text.as_bytes(), &ReadOptions::default())?;
/// assert_eq!(weather.outdoor_c, [3.5, 3.1]);
/// assert!(read_bytes("none", b"", &ReadOptions::default()).is_err());
/// # Ok::<(), winterledger::problem::Problems>(())
/// ```
pub fn read_bytes(name: &str, bytes: &[u8], options: &ReadOptions) -> Result<Weather, Problems> {
    let name: Arc<str> = Arc::from(name);
    let mut findings = Vec::new();
    let hours = on_hours(&name, bytes, options, &mut findings)?;
    finish(&name, hours, options, findings)
}

/// Everything up to hours with holes.
fn on_hours(
    name: &Arc<str>,
    bytes: &[u8],
    options: &ReadOptions,
    findings: &mut Vec<Finding>,
) -> Result<Hours, Problems> {
    let place = Place::file(Arc::clone(name));
    let text = bytes::text(name, bytes, options, findings)?;
    let layout = layout::layout(name, &text, options, findings)?;
    let mut rows = rows::rows(name, &text, &layout, options, findings)?;
    let values = values::values(&place, &mut rows, &layout, options, findings)?;
    let instants = clock::instants(&place, &rows, &layout, options, findings);
    Ok(hours::hours(&place, &rows, values, instants, findings)?)
}

/// Checks, repairs, and puts together.
fn finish(
    name: &Arc<str>,
    mut hours: Hours,
    options: &ReadOptions,
    mut findings: Vec<Finding>,
) -> Result<Weather, Problems> {
    let place = Place::file(Arc::clone(name));
    let findings = &mut findings;
    check::spikes(&place, &mut hours, findings);
    check::stuck(&place, &hours, findings);
    check::clock_artefacts(&place, &hours, findings);
    let repaired = repair::repair(&place, &mut hours, options.repair, findings)?;
    check::warmest_hour(&place, &hours, findings);
    let Some(start) = DateTime::from_timestamp(hours.start_s, 0) else {
        return Err(Problem::new(
            place,
            "the first stamp is out of range",
            "years 1800 to 2200",
            "",
        )
        .into());
    };
    let axis = HourAxis {
        start,
        hours: hours.outdoor_c.len(),
    };
    check::whole_years(&place, &hours, axis.years(), findings);
    findings.sort_by(|a, b| b.severity.cmp(&a.severity).then(a.line.cmp(&b.line)));
    Ok(Weather {
        file: name.to_string(),
        axis,
        zone: hours.zone,
        kind: match hours.stitched {
            Some(years) => Kind::Typical {
                source_years: Some(years),
            },
            None => Kind::Measured,
        },
        outdoor_c: hours.outdoor_c,
        relative_humidity: hours.humidity,
        global_w_per_m2: hours.global_w_per_m2,
        wind_m_per_s: hours.wind_m_per_s,
        repaired: repaired.flags,
        missing_hours: repaired.missing_hours,
        duplicate_hours: hours.duplicate_hours,
        joined_hours: hours.joined_hours,
        findings: std::mem::take(findings),
    })
}
