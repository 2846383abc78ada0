//! Relative humidity where the file has it, and an assumption where it has none.

use std::borrow::Cow;

use super::Weather;
use crate::air;
use crate::problem::{Finding, Severity};

impl Weather {
    /// Relative humidity of every hour, 0 to 1: measured, or assumed with a finding that says so.
    ///
    /// Without a measurement the dew point is taken as the lowest temperature of the day on the file's own clock
    /// (FAO Irrigation and Drainage Paper 56, equation 48). Frost depends on it.
    pub fn humidity_or_assumed(&self) -> (Cow<'_, [f64]>, Option<Finding>) {
        if let Some(measured) = &self.relative_humidity {
            return (Cow::Borrowed(measured), None);
        }
        let mut humidity = Vec::with_capacity(self.axis.hours);
        for (_, hours) in self.days() {
            let day = &self.outdoor_c[hours];
            let lowest = day.iter().copied().fold(f64::INFINITY, f64::min);
            // Outdoor temperatures are within the range of the equations, so there is no error to pass on.
            humidity.extend(
                day.iter()
                    .map(|&c| air::assumed_relative_humidity(c, lowest).unwrap_or(1.0)),
            );
        }
        let mut finding = Finding::new(
            Severity::Warning,
            "the weather file has no humidity",
            "the dew point is assumed to be the day's lowest temperature (FAO Paper 56, equation 48); frost depends on it",
        );
        finding.file = Some(self.file.clone());
        (Cow::Owned(humidity), Some(finding))
    }
}

#[cfg(test)]
mod tests {
    use crate::weather::{ReadOptions, read_bytes};

    #[test]
    fn measured_humidity_is_kept_and_missing_humidity_is_assumed_and_said() {
        let with = "time,temp (C),RH (%)\n2023-01-01T00:00Z,5,80\n2023-01-01T01:00Z,3,90\n";
        let weather = read_bytes("w", with.as_bytes(), &ReadOptions::default()).unwrap();
        let (humidity, finding) = weather.humidity_or_assumed();
        assert_eq!((humidity.as_ref(), finding), ([0.8, 0.9].as_slice(), None));
        let without = "time,temp (C)\n2023-01-01T00:00Z,5\n2023-01-01T01:00Z,3\n";
        let weather = read_bytes("w", without.as_bytes(), &ReadOptions::default()).unwrap();
        let (humidity, finding) = weather.humidity_or_assumed();
        assert!(humidity[0] < 1.0 && (humidity[1] - 1.0).abs() < 1e-12 && finding.is_some());
    }
}
