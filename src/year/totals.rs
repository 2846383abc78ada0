//! A sink that keeps sums by month and the extremes.

use super::Sink;
use super::row::{Flags, Row, Sums};
use crate::extremes::{greater, lesser};

/// Sums of a stretch of hours by civil month, with the extremes.
#[derive(Debug, Clone, PartialEq)]
pub struct Totals<'a> {
    month0: &'a [u8],
    /// Sums of each civil month.
    pub months: [Sums; 12],
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
    /// Hours in which hot water came out too cool.
    pub hours_water_short: u32,
    /// Hours in which the machine stood because its source was outside its limits.
    pub hours_stopped: u32,
    /// Hours in which it was turned down so that its source would not fall below its limit.
    pub hours_turned_down: u32,
    /// Lowest temperature of air, brine or water entering the machine, °C; infinite when it never ran.
    pub min_source_c: f64,
}

impl<'a> Totals<'a> {
    /// Nothing yet; the column gives the civil month from 0 of every hour of the axis.
    pub fn new(month0: &'a [u8]) -> Self {
        Self {
            month0,
            months: [Sums::default(); 12],
            hours: 0,
            min_indoor_c: f64::INFINITY,
            peak_electric_kw: 0.0,
            hours_backup: 0,
            hours_short: 0,
            hours_water_short: 0,
            hours_stopped: 0,
            hours_turned_down: 0,
            min_source_c: f64::INFINITY,
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
    #[inline]
    fn take(&mut self, hour: usize, row: &Row) {
        self.months[usize::from(self.month0[hour])].add(row);
        self.hours += 1;
        self.min_indoor_c = lesser(row.indoor_c, self.min_indoor_c);
        self.peak_electric_kw = greater(row.electricity_kwh(), self.peak_electric_kw);
        let backed = row.flags.has(Flags::BACKUP) || row.flags.has(Flags::IMMERSION);
        self.hours_backup += u32::from(backed);
        self.hours_short += u32::from(row.flags.has(Flags::SHORT));
        self.hours_water_short += u32::from(row.flags.has(Flags::WATER_SHORT));
        self.hours_stopped += u32::from(row.flags.has(Flags::MACHINE_STOPPED));
        self.hours_turned_down += u32::from(row.flags.has(Flags::TURNED_DOWN));
        if let Some(source_c) = row.source_c {
            self.min_source_c = lesser(source_c, self.min_source_c);
        }
    }
}
