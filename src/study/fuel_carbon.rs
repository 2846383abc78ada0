//! A sink that keeps the carbon of the fuel apart from that of electricity, because they go different ways over the years.

use crate::year::{Row, Signal, Sink};

/// Sums the carbon of the fuel that is burnt, by civil month.
pub(super) struct CarbonOfFuel<'a> {
    kg_per_kwh: Option<&'a [f64]>,
    month0: &'a [u8],
    /// So far, kg CO2e.
    pub months: [f64; 12],
}

impl<'a> CarbonOfFuel<'a> {
    /// Nothing yet; the column gives the civil month from 0 of every hour of the axis.
    pub fn new(month0: &'a [u8], fuel: Option<&'a Signal>) -> Self {
        Self {
            kg_per_kwh: fuel.map(|signal| &*signal.carbon_kg),
            month0,
            months: [0.0; 12],
        }
    }
}

impl Sink for CarbonOfFuel<'_> {
    fn take(&mut self, hour: usize, row: &Row) {
        if let Some(factors) = self.kg_per_kwh {
            self.months[usize::from(self.month0[hour])] += row.fuel_kwh * factors[hour];
        }
    }
}

/// Two sinks as one.
pub(super) struct Both<'a, A, B>(pub &'a mut A, pub &'a mut B);

impl<A: Sink, B: Sink> Sink for Both<'_, A, B> {
    fn take(&mut self, hour: usize, row: &Row) {
        self.0.take(hour, row);
        self.1.take(hour, row);
    }
}
