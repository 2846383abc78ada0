//! A sink that keeps sums by month, what the meters read, and the extremes.

use super::Sink;
use super::row::{Flags, Row, Sums};
use super::site::Site;
use crate::tariff::{Flows, Meter, Reading};

/// Sums of a stretch of hours: by month and by meter, with the extremes.
#[derive(Debug, Clone, PartialEq)]
pub struct Totals<'a> {
    site: &'a Site,
    electricity_meter: &'a Meter,
    fuel_meter: Option<&'a Meter>,
    /// Sums of each civil month.
    pub months: [Sums; 12],
    /// What the electricity meter read.
    pub electricity: Reading,
    /// What the fuel meter read.
    pub fuel: Option<Reading>,
    /// Hours taken.
    pub hours: u32,
    /// Lowest indoor temperature, °C.
    pub min_indoor_c: f64,
    /// Greatest hourly mean of electric power, kW.
    pub peak_electric_kw: f64,
    /// Hours in which backup or immersion heater ran.
    pub hours_backup: u32,
    /// Hours that ended short of heat.
    pub hours_short: u32,
}

impl<'a> Totals<'a> {
    /// Nothing yet.
    pub fn new(site: &'a Site, electricity: &'a Meter, fuel: Option<&'a Meter>) -> Self {
        Self {
            site,
            electricity_meter: electricity,
            fuel_meter: fuel,
            months: [Sums::default(); 12],
            electricity: electricity.zero(),
            fuel: fuel.map(Meter::zero),
            hours: 0,
            min_indoor_c: f64::INFINITY,
            peak_electric_kw: 0.0,
            hours_backup: 0,
            hours_short: 0,
        }
    }

    /// Sums of all months.
    pub fn all(&self) -> Sums {
        let mut all = Sums::default();
        for month in &self.months {
            all.add_scaled(month, 1.0);
        }
        all
    }
}

impl Sink for Totals<'_> {
    fn take(&mut self, hour: usize, row: &Row) {
        self.months[usize::from(self.site.month0[hour])].add(row);
        let electricity_kwh = row.electricity_kwh();
        let bought = |import_kwh| Flows { import_kwh, export_kwh: 0.0 };
        self.electricity.record(self.electricity_meter, hour, bought(electricity_kwh));
        if let (Some(meter), Some(reading)) = (self.fuel_meter, &mut self.fuel) {
            reading.record(meter, hour, bought(row.fuel_kwh));
        }
        self.hours += 1;
        self.min_indoor_c = self.min_indoor_c.min(row.indoor_c);
        self.peak_electric_kw = self.peak_electric_kw.max(electricity_kwh);
        let backed = row.flags.has(Flags::BACKUP) || row.flags.has(Flags::IMMERSION);
        self.hours_backup += u32::from(backed);
        self.hours_short += u32::from(row.flags.has(Flags::SHORT));
    }
}
