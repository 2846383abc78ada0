//! From files to complete hourly weather: every step in order.

use std::path::{Path, PathBuf};
use std::sync::Arc;

use chrono::{DateTime, TimeDelta};

use super::hours::{self, Hours};
use super::words::count;
use super::{Kind, ReadOptions, Weather, bytes, check, clock, layout, repair, rows, values};
use crate::air;
use crate::calendar::HourAxis;
use crate::fault::{self, Fault};
use crate::limits::{LARGEST_DATA, check_lines, read_at_most};
use crate::problem::{Finding, Place, Problem, Problems, Severity};

const HOUR_S: i64 = 3600;
/// Files may overlap by this many hours, as when each holds the midnight at its end.
const MOST_OVERLAP_HOURS: usize = 24;

/// Reads one hourly weather file.
///
/// # Errors
/// Everything that keeps the file from being used, each with its line.
pub fn read(path: &Path, options: &ReadOptions) -> Result<Weather, Problems> {
    let name = path.display().to_string();
    read_bytes(&name, &contents(path)?, options)
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
    let mut findings = Vec::new();
    let hours = on_hours(&Arc::from(name), bytes, options, &mut findings)?;
    finish(hours, options, findings)
}

/// Reads several files, say one a year, into stretches of weather in order of time.
///
/// Files that follow each other with no more than a repairable gap become one stretch; a typical year stays its own.
///
/// # Errors
/// As [`read`], the problems of all files together; also files that cover the same time.
pub fn read_all(paths: &[PathBuf], options: &ReadOptions) -> Result<Vec<Weather>, Problems> {
    let mut problems = Problems::new();
    let mut parts = Vec::with_capacity(paths.len());
    for path in paths {
        let name: Arc<str> = Arc::from(path.display().to_string());
        let mut findings = Vec::new();
        let hours =
            contents(path).and_then(|bytes| on_hours(&name, &bytes, options, &mut findings));
        parts.extend(problems.take(hours).map(|hours| (hours, findings)));
    }
    problems.or(())?;
    parts.sort_by_key(|(hours, _)| hours.start_s);
    let mut stretches: Vec<(Hours, Vec<Finding>)> = Vec::new();
    for (next, next_findings) in parts {
        match stretches.last_mut() {
            Some((hours, findings)) if follows(hours, &next, options) => {
                append(hours, next, findings)?;
                findings.extend(next_findings);
            }
            _ => stretches.push((next, next_findings)),
        }
    }
    let mut problems = Problems::new();
    let mut weather = Vec::with_capacity(stretches.len());
    for (hours, findings) in stretches {
        weather.extend(problems.take(finish(hours, options, findings)));
    }
    problems.or(weather)
}

fn contents(path: &Path) -> Result<Vec<u8>, Problems> {
    read_at_most(path, LARGEST_DATA).map_err(|beyond| {
        let place = Place::file(path.display().to_string());
        Problem::new(place, beyond.found, beyond.allowed, "").into()
    })
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
    let text = if text.contains('\n') {
        text
    } else {
        text.replace('\r', "\n").into()
    };
    check_lines(&text).map_err(|beyond| {
        let place = place.clone().at_line(beyond.line.unwrap_or(0));
        Problem::new(
            place,
            beyond.found,
            beyond.allowed,
            "is this a file of hourly readings?",
        )
    })?;
    let layout = layout::layout(name, &text, options, findings)?;
    let mut rows = rows::rows(name, &text, &layout, options, findings)?;
    let values = values::values(&place, &mut rows, &layout, options, findings)?;
    let instants = clock::instants(&place, &mut rows, &layout, options, findings);
    Ok(hours::hours(&place, rows, values, instants, findings)?)
}

/// Whether a file belongs to the stretch before it.
fn follows(hours: &Hours, next: &Hours, options: &ReadOptions) -> bool {
    let gap = (next.start_s - hours.end_s()) / HOUR_S;
    let aligned = (next.start_s - hours.start_s) % HOUR_S == 0;
    let reach = i64::try_from(options.repair.neighbour_hours).unwrap_or(i64::MAX);
    hours.stitched.is_none()
        && next.stitched.is_none()
        && hours.zone == next.zone
        && aligned
        && gap <= reach
}

/// Joins a file to the stretch before it.
fn append(hours: &mut Hours, mut next: Hours, findings: &mut Vec<Finding>) -> Result<(), Problem> {
    let gap = (next.start_s - hours.end_s()) / HOUR_S;
    let overlap = usize::try_from(-gap).unwrap_or(0);
    if overlap > MOST_OVERLAP_HOURS {
        return Err(Problem::new(
            next.whole(),
            format!(
                "{} from {} on are in {} too",
                count(overlap.min(next.outdoor_c.len()), "hour"),
                next.local(0),
                hours.files.last().map_or("another file", |(_, name)| name)
            ),
            "files that follow each other",
            "list each file once",
        ));
    }
    if overlap > 0 {
        findings.push(
            Finding::new(
                Severity::Note,
                format!(
                    "the first {} are in the file before it too",
                    count(overlap, "hour")
                ),
                "those of the file before are kept",
            )
            .at(&next.whole()),
        );
    }
    let hole = usize::try_from(gap).unwrap_or(0);
    let from = hours.outdoor_c.len() + hole;
    for (at, name) in std::mem::take(&mut next.files) {
        hours.files.push((from + at.saturating_sub(overlap), name));
    }
    let extend = |values: &mut Vec<f64>, more: &[f64]| {
        values.extend(std::iter::repeat_n(f64::NAN, hole));
        values.extend(more.iter().skip(overlap));
    };
    let length = next.outdoor_c.len();
    extend(&mut hours.outdoor_c, &next.outdoor_c);
    let before = from - hole;
    for (values, more) in [
        (&mut hours.humidity, next.humidity),
        (&mut hours.dew_point_c, next.dew_point_c),
        (&mut hours.global_w_per_m2, next.global_w_per_m2),
        (&mut hours.wind_m_per_s, next.wind_m_per_s),
    ] {
        if values.is_none() && more.is_none() {
            continue;
        }
        // A column that one of the files lacks is missing there.
        let column = values.get_or_insert_with(|| vec![f64::NAN; before]);
        extend(column, &more.unwrap_or_else(|| vec![f64::NAN; length]));
    }
    hours.line.extend(std::iter::repeat_n(0, hole));
    hours.line.extend(next.line.iter().skip(overlap));
    hours.duplicate_hours += next.duplicate_hours;
    hours.joined_hours += next.joined_hours;
    hours.zone_known &= next.zone_known;
    Ok(())
}

/// Checks, repairs, and puts together.
fn finish(
    mut hours: Hours,
    options: &ReadOptions,
    mut findings: Vec<Finding>,
) -> Result<Weather, Problems> {
    check::spikes(&mut hours, &mut findings);
    check::stuck(&hours, &mut findings);
    check::clock_artefacts(&hours, &mut findings);
    let repaired = repair::repair(&mut hours, options.repair, &mut findings)?;
    check::warmest_hour(&hours, &mut findings);
    let Some(start) = DateTime::from_timestamp(hours.start_s, 0) else {
        return Err(Problem::new(
            hours.whole(),
            "the first stamp is out of range",
            "years 1800 to 2200",
            "",
        )
        .into());
    };
    let late_h = i64::from(fault::on(Fault::HourEndingStamps));
    let axis = HourAxis {
        start: start + TimeDelta::hours(late_h),
        hours: hours.outdoor_c.len(),
    };
    check::whole_years(&hours, axis.years(), &mut findings);
    let relative_humidity = hours
        .humidity
        .take()
        .or_else(|| humidity_from_dew_point(&hours, &mut findings));
    findings.sort_by(|a, b| b.severity.cmp(&a.severity).then(a.line.cmp(&b.line)));
    let names: Vec<&str> = hours.files.iter().map(|(_, name)| name.as_ref()).collect();
    Ok(Weather {
        file: names.join(", "),
        axis,
        zone: hours.zone,
        kind: match (hours.stitched, hours.called_typical) {
            (Some(years), _) => Kind::Typical {
                source_years: Some(years),
            },
            (None, true) => Kind::Typical { source_years: None },
            (None, false) => Kind::Measured,
        },
        outdoor_c: hours.outdoor_c,
        relative_humidity,
        global_w_per_m2: hours.global_w_per_m2,
        wind_m_per_s: hours.wind_m_per_s,
        repaired: repaired.flags,
        missing_hours: repaired.missing_hours,
        duplicate_hours: hours.duplicate_hours,
        joined_hours: hours.joined_hours,
        findings,
    })
}

fn humidity_from_dew_point(hours: &Hours, findings: &mut Vec<Finding>) -> Option<Vec<f64>> {
    let dew = hours.dew_point_c.as_ref()?;
    let humidity: Result<Vec<f64>, _> = hours
        .outdoor_c
        .iter()
        .zip(dew)
        .map(|(&air, &dew)| air::relative_humidity_at_dew_point(air, dew))
        .collect();
    let humidity = humidity.ok()?;
    findings.push(
        Finding::new(
            Severity::Note,
            "the file has dew points",
            "relative humidity is computed from them",
        )
        .at(&hours.whole()),
    );
    Some(humidity)
}
