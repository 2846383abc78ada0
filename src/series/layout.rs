//! How a file of hourly values is to be read.

use chrono_tz::Tz;

/// What the time beside a value marks.
#[derive(Debug, Clone, Copy, Default, PartialEq, Eq)]
pub enum Stamp {
    /// The beginning of the interval.
    #[default]
    Beginning,
    /// Its end.
    Ending,
}

/// What several values within an hour come to.
#[derive(Debug, Clone, Copy, Default, PartialEq, Eq)]
pub enum WithinHour {
    /// Their mean: prices, intensities, powers.
    #[default]
    Mean,
    /// Their sum: amounts of energy.
    Sum,
}

/// How a file is to be read.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Layout {
    /// Header of the column of values; may be left out when there is only one beside the times.
    pub column: Option<String>,
    /// What its times mark.
    pub stamp: Stamp,
    /// The clock of times that do not carry an offset.
    pub zone: Tz,
    /// What several values within an hour come to.
    pub within_hour: WithinHour,
}
