//! Hours that are shown: the coldest year, the coldest three days, the coldest hour.

use std::ops::Range;

use crate::year::Site;

/// Days of a cold spell.
const DAYS: usize = 3;
/// Least hours of a spell: a clock change takes one.
const LEAST_HOURS: usize = DAYS * 24 - 1;

/// The year with the lowest mean outdoor temperature, and its hours.
pub(super) fn coldest_year(site: &Site) -> Option<(i32, Range<usize>)> {
    let mean = |hours: &Range<usize>| {
        site.outdoor_c
            .get(hours.clone())
            .map_or(f64::INFINITY, |column| {
                column.iter().sum::<f64>() / column.len() as f64
            })
    };
    site.years
        .iter()
        .min_by(|a, b| mean(&a.1).total_cmp(&mean(&b.1)))
        .cloned()
}

/// The three whole days of the home's clock, one after the other, with the lowest mean outdoor temperature.
pub(super) fn coldest_days_of(site: &Site) -> Option<Range<usize>> {
    let mut days: Vec<Range<usize>> = Vec::new();
    for (hour, civil) in site.civil.iter().enumerate() {
        match days.last_mut() {
            Some(day) if site.civil[day.start].date == civil.date => day.end = hour + 1,
            _ => days.push(hour..hour + 1),
        }
    }
    days.windows(DAYS)
        .filter_map(|spell| {
            let hours = spell.first()?.start..spell.last()?.end;
            let column = site.outdoor_c.get(hours.clone())?;
            (hours.len() >= LEAST_HOURS)
                .then(|| (column.iter().sum::<f64>() / column.len() as f64, hours))
        })
        .min_by(|a, b| a.0.total_cmp(&b.0))
        .map(|(_, hours)| hours)
}

/// The hour with the lowest outdoor temperature; the first of equals.
pub(super) fn coldest_hour(site: &Site) -> Option<usize> {
    let hours = site.outdoor_c.iter().enumerate();
    hours
        .min_by(|a, b| a.1.total_cmp(b.1))
        .map(|(hour, _)| hour)
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::calendar::HourAxis;
    use chrono::{TimeZone as _, Utc};

    fn site(outdoor_c: Vec<f64>) -> Site {
        let axis = HourAxis {
            start: Utc.with_ymd_and_hms(2023, 1, 1, 0, 0, 0).unwrap(),
            hours: outdoor_c.len(),
        };
        let half = outdoor_c.len() / 2;
        Site {
            civil: axis.civil("Etc/UTC".parse().unwrap()),
            month0: vec![0; outdoor_c.len()],
            years: vec![(2023, 0..half), (2024, half..outdoor_c.len())],
            relative_humidity: None,
            global_w_per_m2: None,
            repaired: vec![false; outdoor_c.len()],
            axis,
            outdoor_c,
        }
    }

    #[test]
    fn the_coldest_spell_begins_at_midnight() {
        let mut outdoor_c = vec![5.0; 24 * 10];
        outdoor_c[24 * 6..24 * 9].fill(-1.0);
        outdoor_c[30] = -9.0;
        let site = site(outdoor_c);
        assert_eq!(coldest_days_of(&site), Some(24 * 6..24 * 9));
        assert_eq!(coldest_hour(&site), Some(30));
        assert_eq!(coldest_year(&site), Some((2024, 120..240)));
    }

    #[test]
    fn two_days_are_no_spell() {
        assert_eq!(coldest_days_of(&site(vec![0.0; 48])), None);
    }
}
