//! A sink that keeps every row.

use super::Sink;
use super::row::Row;

/// Every row of a run, in order.
#[derive(Debug, Clone, Default, PartialEq)]
pub struct Ledger {
    /// Hour of the axis of the first row.
    pub first_hour: usize,
    /// The rows.
    pub rows: Vec<Row>,
}

impl Ledger {
    /// Room for a number of hours.
    pub fn with_capacity(hours: usize) -> Self {
        Self {
            first_hour: 0,
            rows: Vec::with_capacity(hours),
        }
    }
}

impl Sink for Ledger {
    fn take(&mut self, hour: usize, row: &Row) {
        if self.rows.is_empty() {
            self.first_hour = hour;
        }
        self.rows.push(*row);
    }
}
