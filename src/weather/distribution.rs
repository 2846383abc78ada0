//! How the hours are spread over the temperatures: whole degrees counted, and any percentile exactly.
//!
//! Counting by whole degree and looking closer at one degree at a time is several times faster than sorting all hours.

/// Hours counted by whole degree.
#[derive(Debug)]
pub(super) struct Distribution<'a> {
    columns: Vec<&'a [f64]>,
    /// The lowest whole degree, and the hours from each degree up to the next.
    lowest: i32,
    counts: Vec<usize>,
    pub hours: usize,
    pub mean_c: f64,
    pub min_c: f64,
    pub max_c: f64,
}

/// The whole degree at or below a temperature.
fn degree(c: f64) -> i32 {
    // Truncation of a positive number is its floor; no temperature lies below −1000 °C.
    (c + 1000.0) as i32 - 1000
}

impl<'a> Distribution<'a> {
    /// Counts the hours of several columns together; nothing for no hours.
    pub(super) fn new(columns: Vec<&'a [f64]>) -> Option<Self> {
        let all = || columns.iter().copied().flatten().copied();
        let (mut sum, mut min_c, mut max_c, mut hours) = (0.0, f64::INFINITY, f64::NEG_INFINITY, 0);
        for c in all() {
            sum += c;
            min_c = if c < min_c { c } else { min_c };
            max_c = if c > max_c { c } else { max_c };
            hours += 1;
        }
        if hours == 0 || !(min_c.is_finite() && max_c.is_finite()) {
            return None;
        }
        let lowest = degree(min_c);
        let mut counts = vec![0; usize::try_from(degree(max_c) - lowest).ok()? + 1];
        for c in all() {
            if let Some(count) = usize::try_from(degree(c) - lowest)
                .ok()
                .and_then(|class| counts.get_mut(class))
            {
                *count += 1;
            }
        }
        Some(Self {
            columns,
            lowest,
            counts,
            hours,
            mean_c: sum / hours as f64,
            min_c,
            max_c,
        })
    }

    /// The temperatures that shares of the hours fall below: as many hours are colder as the share says, rounded down.
    pub(super) fn colder(&self, shares: &[f64]) -> Vec<f64> {
        // Where each share lies: its degree, and how many hours of that degree come before it.
        let places: Vec<(usize, usize)> = shares
            .iter()
            .map(|share| {
                let mut left = ((share * self.hours as f64).floor() as usize).min(self.hours - 1);
                let class = self.counts.iter().position(|&count| {
                    let here = left < count;
                    left -= if here { 0 } else { count };
                    here
                });
                (class.unwrap_or(0), left)
            })
            .collect();
        let mut members: Vec<Option<Vec<f64>>> = vec![None; self.counts.len()];
        for &(class, _) in &places {
            members[class] = Some(Vec::with_capacity(self.counts[class]));
        }
        for &c in self.columns.iter().copied().flatten() {
            let class = usize::try_from(degree(c) - self.lowest).ok();
            if let Some(Some(members)) = class.and_then(|class| members.get_mut(class)) {
                members.push(c);
            }
        }
        let mut nth = |&(class, left): &(usize, usize)| match members[class].as_mut() {
            Some(members) => *members.select_nth_unstable_by(left, f64::total_cmp).1,
            None => self.max_c,
        };
        places.iter().map(&mut nth).collect()
    }

    /// Hours from each whole degree up to the next; degrees without any are left out.
    pub(super) fn per_degree(&self) -> Vec<(i32, usize)> {
        (self.lowest..)
            .zip(self.counts.iter().copied())
            .filter(|&(_, hours)| hours > 0)
            .collect()
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;

    #[test]
    fn as_many_hours_are_colder_as_the_share_says() {
        let hours: Vec<f64> = (0..8760)
            .rev()
            .map(|i| f64::from(i) / 100.0 - 30.0)
            .collect();
        let spread = Distribution::new(vec![&hours]).unwrap();
        let found = spread.colder(&[0.004, 0.01, 1.0]);
        assert_eq!(
            found,
            [35.0 / 100.0 - 30.0, 87.0 / 100.0 - 30.0, spread.max_c]
        );
        assert!(Distribution::new(vec![&[]]).is_none());
    }

    proptest! {
        /// The same as sorting all hours.
        #[test]
        fn percentiles_are_those_of_the_sorted_hours(hours in prop::collection::vec(-60.0f64..55.0, 1..300), share in 0.0f64..1.0) {
            let spread = Distribution::new(vec![&hours]).unwrap();
            let mut sorted = hours.clone();
            sorted.sort_by(f64::total_cmp);
            prop_assert_eq!(spread.colder(&[share])[0], sorted[(share * hours.len() as f64) as usize]);
            for (degree, number) in spread.per_degree() {
                prop_assert_eq!(sorted.iter().filter(|c| c.floor() as i32 == degree).count(), number);
            }
        }
    }
}
