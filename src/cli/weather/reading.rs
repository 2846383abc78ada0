//! What the user may say about a weather file on the command line.

use std::str::FromStr;

use crate::problem::{Place, Problem, Problems};
use crate::weather::{
    Column, ColumnChoice, Delimiter, Encoding, PartColumns, ReadOptions, RepairPolicy,
};

/// How to read the files. Columns are named by heading or numbered from 1.
#[derive(Debug, clap::Args)]
#[command(next_help_heading = "Reading")]
pub struct ReadingArgs {
    /// Clock of stamps without an offset: UTC, -05:00 or Europe/London.
    #[arg(long, value_name = "ZONE", allow_hyphen_values = true)]
    time_zone: Option<String>,
    /// Which end of its hour a stamp marks: beginning or ending.
    #[arg(long, value_name = "END")]
    stamps: Option<String>,
    /// Order of day and month where the year comes last: day-first or month-first.
    #[arg(long, value_name = "ORDER")]
    date_order: Option<String>,
    /// Unit of the temperature: °C, °F, K, "tenths of °C" or "tenths of °F".
    #[arg(long, value_name = "UNIT")]
    temperature_unit: Option<String>,
    /// Column of the time, or of the date when there is a --clock-column.
    #[arg(long, value_name = "COLUMN")]
    time_column: Option<String>,
    /// Column of the time of day.
    #[arg(long, value_name = "COLUMN", requires = "time_column")]
    clock_column: Option<String>,
    /// Columns of year, month, day, hour and perhaps minute, separated by commas.
    #[arg(
        long,
        value_name = "COLUMNS",
        value_delimiter = ',',
        conflicts_with = "time_column"
    )]
    part_columns: Vec<String>,
    /// Column of the outdoor temperature.
    #[arg(long, value_name = "COLUMN")]
    temperature_column: Option<String>,
    /// Column of the relative humidity.
    #[arg(long, value_name = "COLUMN")]
    humidity_column: Option<String>,
    /// Column of the dew point, used where there is no relative humidity.
    #[arg(long, value_name = "COLUMN")]
    dew_point_column: Option<String>,
    /// Column of the global radiation.
    #[arg(long, value_name = "COLUMN")]
    radiation_column: Option<String>,
    /// Column of the wind speed.
    #[arg(long, value_name = "COLUMN")]
    wind_column: Option<String>,
    /// Lines to pass over at the beginning.
    #[arg(long, value_name = "N")]
    skip_lines: Option<usize>,
    /// What separates the fields: one character, or "tab".
    #[arg(long, value_name = "CHARACTER")]
    delimiter: Option<String>,
    /// Decimals are written with a comma.
    #[arg(long)]
    decimal_comma: bool,
    /// Encoding of the text, such as windows-1252.
    #[arg(long, value_name = "NAME")]
    encoding: Option<String>,
    /// A text or number that stands for a missing reading; may be given several times.
    #[arg(long, value_name = "TEXT", allow_hyphen_values = true)]
    missing: Vec<String>,
    /// Longest gap that is filled from the neighbouring days, hours.
    #[arg(long, value_name = "H", default_value_t = RepairPolicy::default().neighbour_hours)]
    longest_gap: usize,
    /// Fill longer gaps too instead of refusing the file.
    #[arg(long)]
    fill_longer_gaps: bool,
    /// Calendar year that a typical year is placed on.
    #[arg(long, value_name = "YEAR")]
    nominal_year: Option<i32>,
}

impl ReadingArgs {
    /// The options that they say.
    ///
    /// # Errors
    /// Every argument that cannot be understood.
    pub(super) fn options(&self) -> Result<ReadOptions, Problems> {
        let mut problems = Problems::new();
        let columns = ColumnChoice {
            time: parsed("--time-column", &self.time_column, &mut problems),
            clock: parsed("--clock-column", &self.clock_column, &mut problems),
            parts: self.parts(&mut problems),
            temperature: parsed(
                "--temperature-column",
                &self.temperature_column,
                &mut problems,
            ),
            humidity: parsed("--humidity-column", &self.humidity_column, &mut problems),
            dew_point: parsed("--dew-point-column", &self.dew_point_column, &mut problems),
            radiation: parsed("--radiation-column", &self.radiation_column, &mut problems),
            wind: parsed("--wind-column", &self.wind_column, &mut problems),
        };
        let options = ReadOptions {
            zone: parsed("--time-zone", &self.time_zone, &mut problems),
            stamp_marks: parsed("--stamps", &self.stamps, &mut problems),
            date_order: parsed("--date-order", &self.date_order, &mut problems),
            columns,
            temperature_unit: parsed("--temperature-unit", &self.temperature_unit, &mut problems),
            skip_lines: self.skip_lines,
            delimiter: parsed::<Delimiter>("--delimiter", &self.delimiter, &mut problems)
                .map(|delimiter| delimiter.0),
            decimal_comma: self.decimal_comma.then_some(true),
            encoding: parsed::<Encoding>("--encoding", &self.encoding, &mut problems)
                .map(|encoding| encoding.0),
            missing: self.missing.clone(),
            repair: RepairPolicy {
                neighbour_hours: self.longest_gap,
                fill_longer: self.fill_longer_gaps,
                ..RepairPolicy::default()
            },
            nominal_year: self.nominal_year,
            max_expanded_bytes: None,
        };
        problems.or(options)
    }

    fn parts(&self, problems: &mut Problems) -> Option<PartColumns> {
        if self.part_columns.is_empty() {
            return None;
        }
        let columns: Vec<Column> = self
            .part_columns
            .iter()
            .filter_map(|text| parsed("--part-columns", &Some(text.clone()), problems))
            .collect();
        let parts = PartColumns::of(&columns);
        if parts.is_none() {
            let found = format!("{} columns", columns.len());
            refuse("--part-columns", found, PartColumns::ALLOWED, problems);
        }
        parts
    }
}

fn parsed<T: FromStr<Err = String>>(
    name: &str,
    text: &Option<String>,
    problems: &mut Problems,
) -> Option<T> {
    let text = text.as_deref()?;
    match text.parse() {
        Ok(value) => Some(value),
        Err(allowed) => {
            let allowed = allowed
                .strip_prefix("allowed: ")
                .unwrap_or(&allowed)
                .to_owned();
            refuse(name, format!("\"{text}\""), allowed, problems);
            None
        }
    }
}

fn refuse(name: &str, found: String, allowed: impl Into<String>, problems: &mut Problems) {
    problems.push(Problem::new(Place::field(name), found, allowed, ""));
}
