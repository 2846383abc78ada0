//! Weather as plain CSV, in the form that the reader takes back without a question.

use std::fmt::Write;

use super::zone::local_hours;
use super::{Kind, Weather, Zone};

/// The weather as CSV: remark lines, a heading with units, one row an hour.
///
/// Stamps are ISO 8601 with their offset and begin the hour. Numbers are written in full, so that reading the text gives
/// back the same hours.
///
/// ```
/// use winterledger::weather::{ReadOptions, read_bytes, to_csv};
/// let text = "time,temp (F)\n2023-01-01T00:00Z,40\n2023-01-01T01:00Z,39\n";
/// let weather = read_bytes("w", text.as_bytes(), &ReadOptions::default())?;
/// let again = read_bytes("w", to_csv(&weather, &[]).as_bytes(), &ReadOptions::default())?;
/// assert_eq!(again.outdoor_c, weather.outdoor_c);
/// # Ok::<(), winterledger::problem::Problems>(())
/// ```
pub fn to_csv(weather: &Weather, remarks: &[String]) -> String {
    let mut text = String::with_capacity(weather.axis.hours * 48);
    let mut remark = |line: &str| {
        for line in line.lines() {
            text.push_str("# ");
            text.push_str(line);
            text.push('\n');
        }
    };
    if matches!(weather.kind, Kind::Typical { .. }) {
        remark("A typical year: made for annual energy, not for peak load.");
    }
    remarks.iter().for_each(|line| remark(line));
    text.push_str("time beginning,temperature (°C)");
    let columns = [
        (&weather.relative_humidity, "relative humidity (0-1)"),
        (&weather.global_w_per_m2, "global radiation (W/m²)"),
        (&weather.wind_m_per_s, "wind speed (m/s)"),
    ];
    for (_, heading) in columns.iter().filter(|(column, _)| column.is_some()) {
        text.push(',');
        text.push_str(heading);
    }
    text.push('\n');
    let local = local_hours(weather.zone, weather.axis.start, weather.axis.hours);
    for (i, (c, local)) in weather.outdoor_c.iter().zip(local).enumerate() {
        let instant = weather.axis.at(i);
        let offset = local - instant.timestamp();
        let wall = chrono::DateTime::from_timestamp(local, 0).unwrap_or(instant);
        // Writing to a string cannot fail.
        let _ = write!(
            text,
            "{}{},{c}",
            wall.format("%Y-%m-%dT%H:%M"),
            offset_text(weather.zone, offset)
        );
        for column in columns.iter().filter_map(|(column, _)| column.as_ref()) {
            let _ = write!(text, ",{}", column[i]);
        }
        text.push('\n');
    }
    text
}

fn offset_text(zone: Zone, offset_s: i64) -> String {
    if zone == Zone::utc() {
        return "Z".to_owned();
    }
    let sign = if offset_s < 0 { '-' } else { '+' };
    format!(
        "{sign}{:02}:{:02}",
        offset_s.abs() / 3600,
        offset_s.abs() / 60 % 60
    )
}
