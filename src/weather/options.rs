//! What a user may say about a weather file, each with the default that holds when nothing is said.

use std::fmt;
use std::str::FromStr;

use super::time_stamp::DateForm;
use super::zone::Zone;

/// Most bytes that a compressed file may unpack to.
pub const MAX_EXPANDED_BYTES: u64 = 128 * 1024 * 1024;

/// How to read one weather file. What is left out is detected; what cannot be detected gets the default named
/// beside the field, and a finding says so.
#[derive(Debug, Clone, Default)]
pub struct ReadOptions {
    /// The clock of stamps that carry no offset. Default: UTC.
    pub zone: Option<Zone>,
    /// Which end of the hour a stamp marks. Default: its beginning.
    pub stamp_marks: Option<StampMarks>,
    /// The order of day and month where a date has the year last. Default: day first.
    pub date_order: Option<DateOrder>,
    /// Where the columns are. Default: found by their headings.
    pub columns: ColumnChoice,
    /// Unit of the temperature column. Default: the heading's, else °C.
    pub temperature_unit: Option<TemperatureUnit>,
    /// Lines to pass over before the heading or the first reading. Default: as many as it takes to find a heading.
    pub skip_lines: Option<usize>,
    /// What separates the fields. Default: the one that splits the first lines evenly.
    pub delimiter: Option<u8>,
    /// Whether decimals are written with a comma. Default: yes where the delimiter is no comma and numbers have one.
    pub decimal_comma: Option<bool>,
    /// Text encoding by its WHATWG label, such as `windows-1252`. Default: UTF-8.
    pub encoding: Option<String>,
    /// Further texts or numbers that stand for a missing reading.
    pub missing: Vec<String>,
    /// How gaps are filled.
    pub repair: RepairPolicy,
    /// The civil year that a typical year is placed on. Default: 2023, or 2024 when the file has a 29 February.
    pub nominal_year: Option<i32>,
    /// Most bytes a compressed file may unpack to. Default: [`MAX_EXPANDED_BYTES`].
    pub max_expanded_bytes: Option<u64>,
}

/// Which end of its hour a stamp marks.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum StampMarks {
    /// 03:00 stands for 03:00 to 04:00.
    Beginning,
    /// 03:00 stands for 02:00 to 03:00.
    Ending,
}

impl FromStr for StampMarks {
    type Err = String;

    fn from_str(text: &str) -> Result<Self, String> {
        match text.to_ascii_lowercase().as_str() {
            "beginning" | "start" => Ok(Self::Beginning),
            "ending" | "end" => Ok(Self::Ending),
            _ => Err("allowed: beginning or ending".to_owned()),
        }
    }
}

/// Order of day and month where the year comes last.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum DateOrder {
    /// 31/01/2024.
    DayFirst,
    /// 01/31/2024.
    MonthFirst,
}

impl DateOrder {
    /// The date form that has this order.
    pub(super) fn form(self) -> DateForm {
        match self {
            Self::DayFirst => DateForm::DayFirst,
            Self::MonthFirst => DateForm::MonthFirst,
        }
    }
}

impl FromStr for DateOrder {
    type Err = String;

    fn from_str(text: &str) -> Result<Self, String> {
        match text.to_ascii_lowercase().as_str() {
            "day-first" => Ok(Self::DayFirst),
            "month-first" => Ok(Self::MonthFirst),
            _ => Err("allowed: day-first or month-first".to_owned()),
        }
    }
}

/// Unit of a temperature column.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum TemperatureUnit {
    /// Degrees Celsius.
    Celsius,
    /// Degrees Fahrenheit.
    Fahrenheit,
    /// Kelvin.
    Kelvin,
    /// Tenths of a degree Celsius.
    TenthsCelsius,
    /// Tenths of a degree Fahrenheit.
    TenthsFahrenheit,
}

impl TemperatureUnit {
    /// A reading in °C.
    pub fn to_c(self, reading: f64) -> f64 {
        match self {
            Self::Celsius => reading,
            Self::Fahrenheit => (reading - 32.0) / 1.8,
            Self::Kelvin => reading - 273.15,
            Self::TenthsCelsius => reading / 10.0,
            Self::TenthsFahrenheit => (reading / 10.0 - 32.0) / 1.8,
        }
    }
}

impl fmt::Display for TemperatureUnit {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        f.write_str(match self {
            Self::Celsius => "°C",
            Self::Fahrenheit => "°F",
            Self::Kelvin => "K",
            Self::TenthsCelsius => "tenths of °C",
            Self::TenthsFahrenheit => "tenths of °F",
        })
    }
}

impl FromStr for TemperatureUnit {
    type Err = String;

    fn from_str(text: &str) -> Result<Self, String> {
        let plain: String = text
            .to_lowercase()
            .replace("degrees", "")
            .replace("deg", "")
            .chars()
            .filter(|c| !matches!(c, '°' | 'º' | ' ' | '_'))
            .collect();
        match plain.as_str() {
            "c" | "celsius" => Ok(Self::Celsius),
            "f" | "fahrenheit" => Ok(Self::Fahrenheit),
            "k" | "kelvin" => Ok(Self::Kelvin),
            "0.1c" | "c/10" | "c*10" | "tenths" | "tenthsc" | "tenthsofc" | "tenthsofac" => {
                Ok(Self::TenthsCelsius)
            }
            "0.1f" | "f/10" | "f*10" | "tenthsf" | "tenthsoff" => Ok(Self::TenthsFahrenheit),
            _ => Err("allowed: °C, °F, K, tenths of °C or tenths of °F".to_owned()),
        }
    }
}

/// One column, by its heading or by its number from 1.
#[derive(Debug, Clone, PartialEq, Eq)]
pub enum Column {
    /// The heading, letter case and surrounding spaces aside.
    Named(String),
    /// Its number, the first being 1.
    Numbered(usize),
}

impl FromStr for Column {
    type Err = String;

    fn from_str(text: &str) -> Result<Self, String> {
        let text = text.trim();
        match text.parse::<usize>() {
            Ok(0) => Err("allowed: a heading, or a number from 1".to_owned()),
            Ok(number) => Ok(Self::Numbered(number)),
            Err(_) if text.is_empty() => Err("allowed: a heading, or a number from 1".to_owned()),
            Err(_) => Ok(Self::Named(text.to_owned())),
        }
    }
}

impl fmt::Display for Column {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match self {
            Self::Named(name) => write!(f, "\"{name}\""),
            Self::Numbered(number) => write!(f, "column {number}"),
        }
    }
}

/// Which columns hold what; whatever is left out is found by its heading.
#[derive(Debug, Clone, Default)]
pub struct ColumnChoice {
    /// Date and time together, or the date alone when `clock` is given.
    pub time: Option<Column>,
    /// Time of day, where it stands apart from the date.
    pub clock: Option<Column>,
    /// Year, month, day, hour and perhaps minute, where each has a column of its own.
    pub parts: Option<PartColumns>,
    /// Outdoor air temperature.
    pub temperature: Option<Column>,
    /// Relative humidity.
    pub humidity: Option<Column>,
    /// Dew point, used where there is no relative humidity.
    pub dew_point: Option<Column>,
    /// Global radiation on the horizontal.
    pub radiation: Option<Column>,
    /// Wind speed.
    pub wind: Option<Column>,
}

/// The columns of a time that is spread over several.
#[derive(Debug, Clone)]
pub struct PartColumns {
    /// Year.
    pub year: Column,
    /// Month from 1.
    pub month: Column,
    /// Day of the month.
    pub day: Column,
    /// Hour, 0 to 23 or 1 to 24.
    pub hour: Column,
    /// Minute.
    pub minute: Option<Column>,
}

impl PartColumns {
    /// What can be given.
    pub const ALLOWED: &str = "the columns of year, month, day, hour and perhaps minute";

    /// Columns in the order year, month, day, hour, minute; the last may be left out.
    pub fn of(columns: &[Column]) -> Option<Self> {
        let [year, month, day, hour, rest @ ..] = columns else {
            return None;
        };
        (rest.len() <= 1).then(|| Self {
            year: year.clone(),
            month: month.clone(),
            day: day.clone(),
            hour: hour.clone(),
            minute: rest.first().cloned(),
        })
    }
}

/// What separates the fields of a row.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub struct Delimiter(pub u8);

impl FromStr for Delimiter {
    type Err = String;

    fn from_str(text: &str) -> Result<Self, String> {
        match (text, text.as_bytes()) {
            ("tab" | "\\t" | "\t", _) => Ok(Self(b'\t')),
            (_, &[byte]) if !byte.is_ascii_alphanumeric() && !matches!(byte, b'"' | b'\n') => {
                Ok(Self(byte))
            }
            _ => Err("one character such as ; or |, or tab".to_owned()),
        }
    }
}

/// A text encoding by its WHATWG label.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Encoding(pub String);

impl FromStr for Encoding {
    type Err = String;

    fn from_str(text: &str) -> Result<Self, String> {
        match encoding_rs::Encoding::for_label(text.as_bytes()) {
            Some(encoding) => Ok(Self(encoding.name().to_owned())),
            None => Err("a WHATWG label such as utf-8, windows-1252 or utf-16le".to_owned()),
        }
    }
}

/// How long a gap may be, and how it is filled.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub struct RepairPolicy {
    /// Gaps up to this many hours are filled by a straight line.
    pub line_hours: usize,
    /// Longer gaps up to this many hours are filled from the same hours of the neighbouring days.
    pub neighbour_hours: usize,
    /// Whether still longer gaps are filled in the same way instead of refused.
    pub fill_longer: bool,
}

impl Default for RepairPolicy {
    /// 3 h, 24 h, and nothing longer: common practice, no source.
    fn default() -> Self {
        Self {
            line_hours: 3,
            neighbour_hours: 24,
            fill_longer: false,
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    /// Fixed points of the scales: 32 °F = 273.15 K = 0 °C; −40 °F = −40 °C (BIPM SI brochure, NIST SP 811).
    #[test]
    fn units_agree_at_fixed_points() {
        use TemperatureUnit::*;
        for (unit, reading, c) in [
            (Fahrenheit, 32.0, 0.0),
            (Fahrenheit, -40.0, -40.0),
            (Kelvin, 273.15, 0.0),
            (TenthsCelsius, -123.0, -12.3),
            (TenthsFahrenheit, 320.0, 0.0),
        ] {
            assert!((unit.to_c(reading) - c).abs() < 1e-12, "{reading} {unit}");
        }
    }

    #[test]
    fn unit_texts_are_read_as_they_are_written_back() {
        use TemperatureUnit::*;
        for unit in [Celsius, Fahrenheit, Kelvin, TenthsCelsius, TenthsFahrenheit] {
            assert_eq!(unit.to_string().parse::<TemperatureUnit>(), Ok(unit));
        }
        assert!("furlong".parse::<TemperatureUnit>().is_err());
    }

    #[test]
    fn a_column_is_a_heading_or_a_number() {
        assert_eq!("7".parse(), Ok(Column::Numbered(7)));
        assert_eq!(
            " Dry bulb".parse(),
            Ok(Column::Named("Dry bulb".to_owned()))
        );
        assert!("0".parse::<Column>().is_err());
    }
}
