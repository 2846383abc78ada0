//! The ledger as CSV: one row an hour, header with units from the one declaration of the columns.

use chrono::{SecondsFormat, TimeZone as _};
use chrono_tz::Tz;

use crate::calendar::HourAxis;
use crate::year::{COLUMNS, Ledger};

/// Digits after the point: far below what any figure means, but thousands of hours at rest are alike, and what rounding takes
/// from one it takes from all.
const DIGITS: usize = 6;

/// The ledger of one system as CSV. Missing is blank; times are the beginning of the hour.
///
/// # Errors
/// When the CSV writer fails, which memory alone can make it do.
pub fn ledger_csv(ledger: &Ledger, axis: &HourAxis, zone: Tz) -> Result<Vec<u8>, csv::Error> {
    let mut writer = csv::Writer::from_writer(Vec::with_capacity(ledger.rows.len() * 256));
    let names = COLUMNS.iter().map(|column| column.name);
    writer.write_record(
        ["time_utc", "time_local"]
            .into_iter()
            .chain(names)
            .chain(["flags"]),
    )?;
    let mut field = String::new();
    for (i, row) in ledger.rows.iter().enumerate() {
        let utc = axis.at(ledger.first_hour + i);
        let local = zone.from_utc_datetime(&utc.naive_utc());
        writer.write_field(utc.to_rfc3339_opts(SecondsFormat::Secs, true))?;
        writer.write_field(local.format("%Y-%m-%dT%H:%M%:z").to_string())?;
        for value in row.values() {
            field.clear();
            if let Some(value) = value {
                use std::fmt::Write as _;
                // Writing to a String cannot fail.
                let _ = write!(field, "{value:.DIGITS$}");
                shorten(&mut field);
            }
            writer.write_field(&field)?;
        }
        writer.write_field(row.flags.words())?;
        writer.write_record(None::<&[u8]>)?;
    }
    writer
        .into_inner()
        .map_err(|error| csv::Error::from(error.into_error()))
}

/// Takes away trailing zeros and a minus before nothing.
fn shorten(field: &mut String) {
    let kept = field.trim_end_matches('0').trim_end_matches('.').len();
    field.truncate(kept);
    if field == "-0" {
        field.remove(0);
    }
}

/// The columns of the ledger and what they mean, one a line.
pub fn ledger_legend() -> String {
    let width = COLUMNS
        .iter()
        .map(|column| column.name.len())
        .max()
        .unwrap_or(0);
    COLUMNS
        .iter()
        .map(|column| format!("{:width$}  {}\n", column.name, column.meaning))
        .collect()
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::year::{Row, Sink as _};
    use chrono::Utc;

    #[test]
    fn missing_is_blank_and_numbers_are_short() {
        let mut ledger = Ledger::default();
        ledger.take(
            0,
            &Row {
                outdoor_c: -3.5,
                fuel_price: None,
                gains_kwh: 0.25,
                ..Row::default()
            },
        );
        let axis = HourAxis {
            start: Utc.with_ymd_and_hms(2023, 6, 1, 0, 0, 0).unwrap(),
            hours: 1,
        };
        let bytes = ledger_csv(&ledger, &axis, "Europe/London".parse().unwrap()).unwrap();
        let mut reader = csv::Reader::from_reader(bytes.as_slice());
        let header = reader.headers().unwrap().clone();
        let row = reader.records().next().unwrap().unwrap();
        let field = |name: &str| &row[header.iter().position(|column| column == name).unwrap()];
        assert_eq!(field("time_utc"), "2023-06-01T00:00:00Z");
        assert_eq!(field("time_local"), "2023-06-01T01:00+01:00");
        assert_eq!(field("outdoor_c"), "-3.5");
        assert_eq!(field("fuel_price"), "");
        assert_eq!(field("gains_kwh"), "0.25");
        assert_eq!(header.len(), COLUMNS.len() + 3);
    }
}
