//! A value for every hour of the axis.

use std::ops::{Deref, DerefMut};
use std::sync::Arc;

/// A value for every hour of the axis, shared by its copies until one of them is changed.
///
/// Thirty years are 2 MB a column: systems that see the same prices, carbon or set points see one column.
#[derive(Debug, Clone, Default, PartialEq)]
pub struct HourColumn(Arc<[f64]>);

impl HourColumn {
    /// Shares the other's values where they are the same.
    pub fn share(&mut self, other: &Self) {
        if !Arc::ptr_eq(&self.0, &other.0) && self == other {
            self.clone_from(other);
        }
    }
}

impl Deref for HourColumn {
    type Target = [f64];

    fn deref(&self) -> &[f64] {
        &self.0
    }
}

impl DerefMut for HourColumn {
    /// Makes the values this column's own.
    fn deref_mut(&mut self) -> &mut [f64] {
        Arc::make_mut(&mut self.0)
    }
}

impl From<Vec<f64>> for HourColumn {
    fn from(values: Vec<f64>) -> Self {
        Self(values.into())
    }
}

impl FromIterator<f64> for HourColumn {
    fn from_iter<T: IntoIterator<Item = f64>>(values: T) -> Self {
        Self(values.into_iter().collect())
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_copy_is_shared_until_it_is_changed() {
        let one = HourColumn::from(vec![1.0, 2.0]);
        let mut other = one.clone();
        assert!(Arc::ptr_eq(&one.0, &other.0));
        other[1] = 3.0;
        assert_eq!((&one[..], &other[..]), (&[1.0, 2.0][..], &[1.0, 3.0][..]));
        let mut same: HourColumn = [1.0, 2.0].into_iter().collect();
        same.share(&other);
        assert!(!Arc::ptr_eq(&same.0, &other.0));
        same.share(&one);
        assert!(Arc::ptr_eq(&same.0, &one.0));
    }
}
