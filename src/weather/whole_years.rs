//! The whole years of a series: yearly figures of a run are means over years, so a part of one must not count as one.

use super::Weather;
use crate::calendar::{HOURS_PER_YEAR, HourAxis};
use crate::problem::{Finding, Severity};

/// Hours a year may lack and still count as whole: half a day for files that begin or end off midnight.
pub(super) const YEAR_SLACK_HOURS: usize = 12;

impl Weather {
    /// The series without the part of a year at its end, and a finding where there was one.
    ///
    /// A series that is shorter than a year stays as it is.
    pub fn in_whole_years(mut self) -> (Self, Option<Finding>) {
        let years = self.years();
        let (Some((_, last)), true) = (years.last(), years.len() > 1) else {
            return (self, None);
        };
        if last.len() + YEAR_SLACK_HOURS >= HOURS_PER_YEAR {
            return (self, None);
        }
        let mut finding = Finding::new(
            Severity::Warning,
            format!(
                "the {} hours from {} are no whole year",
                last.len(),
                self.local_text(last.start)
            ),
            format!(
                "left out: {} are run",
                super::words::count(years.len() - 1, "whole year")
            ),
        );
        finding.file = Some(self.file.clone());
        let hours = last.start;
        self.axis = HourAxis { hours, ..self.axis };
        self.outdoor_c.truncate(hours);
        self.repaired.truncate(hours);
        for column in [
            &mut self.relative_humidity,
            &mut self.global_w_per_m2,
            &mut self.wind_m_per_s,
        ]
        .into_iter()
        .flatten()
        {
            column.truncate(hours);
        }
        (self, Some(finding))
    }
}

#[cfg(test)]
mod tests {
    use crate::weather::{ReadOptions, Weather, read_bytes};

    fn hours(number: usize) -> Weather {
        let start: chrono::DateTime<chrono::Utc> = "2021-01-01T00:00:00Z".parse().unwrap();
        let mut text = "time,temp (C),RH (%)\n".to_owned();
        for i in 0..number {
            let stamp = start + chrono::Duration::hours(i as i64);
            text += &format!("{},{},80\n", stamp.format("%Y-%m-%dT%H:%MZ"), i % 24);
        }
        read_bytes("w", text.as_bytes(), &ReadOptions::default()).unwrap()
    }

    #[test]
    fn a_part_of_a_year_after_a_whole_one_is_left_out_and_said() {
        let (weather, finding) = hours(8760 + 100).in_whole_years();
        assert_eq!((weather.axis.hours, weather.outdoor_c.len()), (8760, 8760));
        assert_eq!(weather.relative_humidity.unwrap().len(), 8760);
        let finding = finding.unwrap().to_string();
        assert!(
            finding.contains("100 hours from 2022-01-01 00:00"),
            "{finding}"
        );
    }

    #[test]
    fn whole_years_and_less_than_one_stay() {
        for number in [100, 8760, 8760 + 8755] {
            let (weather, finding) = hours(number).in_whole_years();
            assert!(
                weather.axis.hours == number && finding.is_none(),
                "{number}"
            );
        }
    }
}
