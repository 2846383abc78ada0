//! Weather of less than a year: standing charges, payback and chances of a year cannot be told from it.

use super::Brief;
use crate::problem::{Place, Problem, Problems};

/// Days of weather that may stand for a year: a few lost at the ends hardly move a bill. A choice of ours.
const LEAST_DAYS: usize = 360;
const HOURS_PER_DAY: usize = 24;

impl Brief {
    /// Days of the weather where they are less than a year.
    pub fn days_of_a_part_year(&self) -> Option<usize> {
        let hours = self.case.site.outdoor_c.len();
        (hours < LEAST_DAYS * HOURS_PER_DAY).then(|| hours.div_ceil(HOURS_PER_DAY))
    }

    /// The brief, when its weather makes a year.
    ///
    /// # Errors
    /// When the weather is shorter; `otherwise` says what can be done with it all the same.
    pub fn of_a_year(self, otherwise: &str) -> Result<Self, Problems> {
        let Some(days) = self.days_of_a_part_year() else {
            return Ok(self);
        };
        let remedy = "a bill, a payback and a chance need every season: ask the weather service for twelve months in a row, or name \
                      the files of the missing months as well, file = [\"one.csv\", \"two.csv\"]";
        Err(Problem::new(
            Place::file(self.told.weather_file.as_str()),
            format!(
                "{} hours, {days} days: no whole year",
                self.case.site.outdoor_c.len()
            ),
            format!("hourly weather of a whole year, at least {LEAST_DAYS} days"),
            format!("{remedy}{otherwise}"),
        )
        .into())
    }
}
