//! A sink that reads the household's meters.

use super::Sink;
use super::row::Row;
use crate::tariff::{Flows, Meter, Reading};

/// What the electricity meter and the fuel meter read.
#[derive(Debug, Clone, PartialEq)]
pub struct Metered<'a> {
    electricity_meter: &'a Meter,
    fuel_meter: Option<&'a Meter>,
    /// Electricity.
    pub electricity: Reading,
    /// Fuel, where there is a meter for it.
    pub fuel: Option<Reading>,
}

impl<'a> Metered<'a> {
    /// Meters at zero.
    pub fn new(electricity: &'a Meter, fuel: Option<&'a Meter>) -> Self {
        Self {
            electricity_meter: electricity,
            fuel_meter: fuel,
            electricity: electricity.zero(),
            fuel: fuel.map(Meter::zero),
        }
    }
}

impl Sink for Metered<'_> {
    fn take(&mut self, hour: usize, row: &Row) {
        let bought = |import_kwh| Flows {
            import_kwh,
            export_kwh: 0.0,
        };
        self.electricity
            .record(self.electricity_meter, hour, bought(row.electricity_kwh()));
        if let (Some(meter), Some(reading)) = (self.fuel_meter, &mut self.fuel) {
            reading.record(meter, hour, bought(row.fuel_kwh));
        }
    }
}
