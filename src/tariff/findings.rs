//! What is worth knowing about a tariff when it prices certain hours.

use super::Tariff;
use crate::calendar::CivilHour;
use crate::problem::{Finding, Severity};

impl Tariff {
    /// What was odd in the file, and what is odd about pricing these hours with it.
    pub fn findings_over(&self, civil: &[CivilHour]) -> Vec<Finding> {
        let mut findings = self.findings.clone();
        let mut note = |what: String, done: String| {
            findings.push(Finding::new(Severity::Note, what, done).at(&self.place));
        };
        let (Some(first), Some(last)) = (civil.first(), civil.last()) else {
            return findings;
        };
        let valid_from = self.prices.first().and_then(|prices| prices.valid_from);
        if let Some(from) = valid_from.filter(|from| first.date < *from) {
            let hours = civil.iter().filter(|hour| hour.date < from).count();
            note(
                format!("{hours} hours from {} on lie before {from}", first.date),
                format!("they are priced as from {from}"),
            );
        }
        for later in self
            .prices
            .iter()
            .skip(1)
            .filter_map(|prices| prices.valid_from)
        {
            if last.date < later {
                note(
                    format!(
                        "prices from {later} begin after the last hour, {}",
                        last.date
                    ),
                    "they are not used".to_owned(),
                );
            }
        }
        for hourly in self
            .prices
            .iter()
            .filter_map(|prices| prices.hourly.as_ref())
        {
            let values = hourly.per_kwh.values();
            let negative = values.iter().filter(|price| **price < 0.0).count();
            if negative > 0 {
                note(
                    format!("{negative} of {} hourly prices are negative", values.len()),
                    "they are used as they are".to_owned(),
                );
            }
            // Less than a day is the edge between two clocks, not another year.
            let elsewhere = civil
                .iter()
                .filter(|hour| hourly.per_kwh.at(hour).is_none());
            if hourly.every_year && elsewhere.count() >= 24 {
                let covers = hourly.per_kwh.covers();
                note(
                    format!(
                        "hourly prices of {covers} serve for {} to {}",
                        first.date, last.date
                    ),
                    "by day and hour, so that weekends do not match".to_owned(),
                );
            }
        }
        findings
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::calendar::HourAxis;

    #[test]
    fn hours_before_the_first_prices_are_told() {
        let text = "label = \"A\"\nfuel = \"electricity\"\ncurrency = \"GBP\"\nrates_include_tax = true\n\
            valid_from = \"2023-12-31\"\n[[band]]\nrate = \"24.67 GBP/kWh\"\n[[later]]\nvalid_from = \"2026-01-01\"\n";
        let tariff = Tariff::from_text("a.toml", text, "".as_ref()).unwrap();
        let zone = chrono_tz::Tz::UTC;
        let civil = HourAxis::civil_year(2023, zone).unwrap().civil(zone);
        let told: Vec<_> = tariff
            .findings_over(&civil)
            .iter()
            .map(ToString::to_string)
            .collect();
        assert_eq!(
            told,
            [
                "warning: a.toml line 7: 24.67 GBP for a kilowatt-hour is a lot; it is used as written; is the unit right?",
                "note: a.toml: 8736 hours from 2023-01-01 on lie before 2023-12-31; they are priced as from 2023-12-31",
                "note: a.toml: prices from 2026-01-01 begin after the last hour, 2023-12-31; they are not used",
            ]
        );
    }
}
