//! Which weather year pays which bill. Bills follow the civil calendar, a weather year runs from one anniversary of the
//! file's first hour to the next: where a year begins inside a bill's period the bill is shared by time.

use std::ops::Range;

use chrono::Datelike;

use crate::calendar::CivilHour;
use crate::year::Site;

const MONTHS: f64 = 12.0;

/// The weather years of a site on the civil calendar, in months counted from the year 0.
#[derive(Debug, Clone)]
pub(super) struct MonthShares {
    spans: Vec<Range<f64>>,
}

impl MonthShares {
    /// Every year of the site, in its order.
    pub(super) fn of(site: &Site) -> Self {
        let spans = site.years.iter().map(|(_, hours)| {
            let from = site.civil.get(hours.start).map_or(0.0, position);
            let last = site.civil.get(hours.end.wrapping_sub(1));
            let to = match site.civil.get(hours.end) {
                Some(next) => position(next),
                None => last.map_or(0.0, |last| position(last) + hour_of(last)),
            };
            from..to
        });
        Self {
            spans: spans.collect(),
        }
    }

    /// How a bill of some civil months is shared among the weather years; the shares add up to 1.
    ///
    /// A period that the hours of the file cover in part belongs to the years that they lie in.
    pub(super) fn shares(&self, year: i32, months: Range<usize>) -> Vec<f64> {
        let first = f64::from(year) * MONTHS;
        let (from, to) = (first + months.start as f64, first + months.end as f64);
        let mut shares: Vec<f64> = self
            .spans
            .iter()
            .map(|span| (span.end.min(to) - span.start.max(from)).max(0.0))
            .collect();
        let sum: f64 = shares.iter().sum();
        if sum > 0.0 {
            shares.iter_mut().for_each(|share| *share /= sum);
        } else if let Some(nearest) = self.nearest(from) {
            shares[nearest] = 1.0;
        }
        shares
    }

    /// The year that begins last before a place on the calendar, else the first.
    fn nearest(&self, place: f64) -> Option<usize> {
        let before = self.spans.iter().rposition(|span| span.start <= place);
        before.or((!self.spans.is_empty()).then_some(0))
    }
}

/// Part of its month that an hour is.
fn hour_of(hour: &CivilHour) -> f64 {
    1.0 / (24.0 * f64::from(hour.date.num_days_in_month()))
}

/// Where an hour begins on the calendar, in months.
fn position(hour: &CivilHour) -> f64 {
    let hours = f64::from(hour.date.day0()) * 24.0 + f64::from(hour.hour);
    f64::from(hour.year()) * MONTHS + hour.month0() as f64 + hours * hour_of(hour)
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::calendar::HourAxis;

    fn site(start: &str, zone: chrono_tz::Tz, years: Vec<(i32, Range<usize>)>) -> Site {
        let hours = years.last().unwrap().1.end;
        let axis = HourAxis {
            start: start.parse().unwrap(),
            hours,
        };
        Site {
            axis,
            civil: axis.civil(zone),
            month0: vec![0; hours],
            years,
            outdoor_c: vec![0.0; hours],
            relative_humidity: None,
            global_w_per_m2: None,
            repaired: vec![false; hours],
        }
    }

    /// From July to June: what the civil year 2022 bills in its first half belongs to the weather year before.
    #[test]
    fn a_month_belongs_to_the_weather_year_it_lies_in() {
        let years = vec![(2021, 0..8760), (2022, 8760..17520)];
        let shares = MonthShares::of(&site("2021-07-01T00:00:00Z", chrono_tz::Tz::UTC, years));
        assert_eq!(shares.shares(2022, 5..6), [1.0, 0.0]);
        assert_eq!(shares.shares(2022, 6..7), [0.0, 1.0]);
        assert_eq!(shares.shares(2022, 0..12), [0.5, 0.5]);
        // Half of the civil year 2021 is covered, and all of that is of the first weather year.
        assert_eq!(shares.shares(2021, 0..12), [1.0, 0.0]);
    }

    #[test]
    fn a_month_in_which_a_year_begins_is_shared_by_time() {
        let years = vec![(2021, 0..8760), (2022, 8760..17520)];
        let shares = MonthShares::of(&site("2021-06-16T00:00:00Z", chrono_tz::Tz::UTC, years));
        let june = shares.shares(2022, 5..6);
        assert!((june[0] - 0.5).abs() < 1e-12 && (june[1] - 0.5).abs() < 1e-12);
    }

    /// Five hours of the UTC year lie in December of the year before on this wall: they stay with their weather year.
    #[test]
    fn hours_in_the_civil_year_before_stay_with_their_year() {
        let years = vec![(2022, 0..8760), (2023, 8760..17520)];
        let zone = "America/New_York".parse().unwrap();
        let shares = MonthShares::of(&site("2022-01-01T00:00:00Z", zone, years));
        assert_eq!(shares.shares(2021, 11..12), [1.0, 0.0]);
        let december = shares.shares(2022, 11..12);
        assert!((december[1] - 5.0 / 744.0).abs() < 1e-9, "{december:?}");
    }
}
