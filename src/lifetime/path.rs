//! How a price or a carbon factor goes on from today.

/// A course over the years, as a multiple of today's value.
#[derive(Debug, Clone, PartialEq)]
pub enum Path {
    /// The same change every year: 0.02 is 2 % more each year than in the year before. Year 1 is at today's value.
    Change(f64),
    /// A multiple for each year, the first for year 1.
    Given(Vec<f64>),
}

impl Path {
    /// It stays as it is today.
    pub const STEADY: Self = Self::Change(0.0);

    /// The multiple of today's value in a year from 1; nothing beyond the end of a given path.
    ///
    /// ```
    /// use winterledger::lifetime::Path;
    /// assert_eq!(Path::Change(0.10).at(1), Some(1.0));
    /// assert_eq!(Path::Given(vec![1.0, 0.9]).at(2), Some(0.9));
    /// assert_eq!(Path::Given(vec![1.0, 0.9]).at(3), None);
    /// ```
    pub fn at(&self, year: usize) -> Option<f64> {
        let before = year.checked_sub(1)?;
        match self {
            Self::Change(change) => {
                // A life is far shorter than what an i32 counts.
                Some((1.0 + change).powi(i32::try_from(before).unwrap_or(i32::MAX)))
            }
            Self::Given(multiples) => multiples.get(before).copied(),
        }
    }

    /// Years it says something about; nothing where it goes on for ever.
    pub fn years(&self) -> Option<usize> {
        match self {
            Self::Change(_) => None,
            Self::Given(multiples) => Some(multiples.len()),
        }
    }
}
