//! A sink that keeps sums by month and by price band, and the extremes.

use super::Sink;
use super::row::{Flags, Row, Sums};

/// Sums of a year: by month and by meter bucket, with the extremes of the hours.
#[derive(Debug, Clone, PartialEq)]
pub struct Totals<'a> {
    month0: &'a [u8],
    electricity_bucket: &'a [u16],
    fuel_bucket: &'a [u16],
    /// Sums of each month.
    pub months: [Sums; 12],
    /// Electricity in each bucket of its meter, kWh.
    pub electricity_kwh: Vec<f64>,
    /// Fuel in each bucket of its meter, kWh.
    pub fuel_kwh: Vec<f64>,
    /// Lowest indoor temperature, °C.
    pub min_indoor_c: f64,
    /// Greatest hourly mean of electric power, kW.
    pub peak_electric_kw: f64,
    /// Hours in which backup or immersion heater ran.
    pub hours_backup: u32,
    /// Hours that ended short of heat.
    pub hours_short: u32,
    /// Hours whose weather was repaired.
    pub hours_repaired: u32,
}

impl<'a> Totals<'a> {
    /// Nothing yet; the columns give month and meter bucket of every hour of the axis.
    pub fn new(
        month0: &'a [u8],
        electricity_bucket: &'a [u16],
        electricity_buckets: usize,
        fuel_bucket: &'a [u16],
        fuel_buckets: usize,
    ) -> Self {
        Self {
            month0,
            electricity_bucket,
            fuel_bucket,
            months: [Sums::default(); 12],
            electricity_kwh: vec![0.0; electricity_buckets],
            fuel_kwh: vec![0.0; fuel_buckets],
            min_indoor_c: f64::INFINITY,
            peak_electric_kw: 0.0,
            hours_backup: 0,
            hours_short: 0,
            hours_repaired: 0,
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
        self.months[usize::from(self.month0[hour])].add(row);
        let electricity_kwh = row.electricity_kwh();
        self.electricity_kwh[usize::from(self.electricity_bucket[hour])] += electricity_kwh;
        if let Some(&bucket) = self.fuel_bucket.get(hour) {
            self.fuel_kwh[usize::from(bucket)] += row.fuel_kwh;
        }
        self.min_indoor_c = self.min_indoor_c.min(row.indoor_c);
        self.peak_electric_kw = self.peak_electric_kw.max(electricity_kwh);
        let backed = row.flags.has(Flags::BACKUP) || row.flags.has(Flags::IMMERSION);
        self.hours_backup += u32::from(backed);
        self.hours_short += u32::from(row.flags.has(Flags::SHORT));
        self.hours_repaired += u32::from(row.flags.has(Flags::WEATHER_REPAIRED));
    }
}
