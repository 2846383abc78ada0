//! A sink that reads the household's meters.

use super::Sink;
use super::row::Row;
use crate::tariff::{Flows, Meter, Metering, Reading};

/// What the home uses and makes beside its heating, hour by hour.
#[derive(Debug, Clone, Default, PartialEq)]
pub struct Household {
    /// Electricity of everything but heating, kWh; nothing where it is not part of the account.
    pub used_kwh: Option<Vec<f64>>,
    /// Own generation, kWh.
    pub made_kwh: Option<Vec<f64>>,
}

impl Household {
    /// What it uses in an hour, kWh.
    pub fn used(&self, hour: usize) -> f64 {
        self.used_kwh.as_ref().map_or(0.0, |column| column[hour])
    }

    /// What it makes in an hour, kWh.
    pub fn made(&self, hour: usize) -> f64 {
        self.made_kwh.as_ref().map_or(0.0, |column| column[hour])
    }

    /// What its own meter reads where the heating has another one.
    pub fn reading(&self, meter: &Meter) -> Reading {
        let mut reading = meter.zero();
        for hour in 0..meter.hours() {
            let flows = Flows::net(self.used(hour), self.made(hour));
            reading.record(meter, hour, flows);
        }
        reading
    }
}

/// What the electricity meter of the heating and the fuel meter read.
#[derive(Debug, Clone, PartialEq)]
pub struct Metered<'a> {
    metering: Metering,
    household: &'a Household,
    electricity_meter: &'a Meter,
    fuel_meter: Option<&'a Meter>,
    /// Electricity.
    pub electricity: Reading,
    /// Fuel, where there is a meter for it.
    pub fuel: Option<Reading>,
}

impl<'a> Metered<'a> {
    /// Meters at zero. The electricity meter counts the household's use too, unless it is the heating's own.
    pub fn new(
        metering: Metering,
        household: &'a Household,
        electricity: &'a Meter,
        fuel: Option<&'a Meter>,
    ) -> Self {
        Self {
            metering,
            household,
            electricity_meter: electricity,
            fuel_meter: fuel,
            electricity: electricity.zero(),
            fuel: fuel.map(Meter::zero),
        }
    }
}

impl Sink for Metered<'_> {
    fn take(&mut self, hour: usize, row: &Row) {
        let (used_kwh, made_kwh) = (self.household.used(hour), self.household.made(hour));
        let (flows, _) = self
            .metering
            .flows(row.electricity_kwh(), used_kwh, made_kwh);
        self.electricity.record(self.electricity_meter, hour, flows);
        if let (Some(meter), Some(reading)) = (self.fuel_meter, &mut self.fuel) {
            let bought = Flows::net(row.fuel_kwh, 0.0);
            reading.record(meter, hour, bought);
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::calendar::HourAxis;
    use crate::tariff::Tariff;

    fn meter() -> Meter {
        let text = "label = \"A\"\nfuel = \"electricity\"\ncurrency = \"GBP\"\nrates_include_tax = true\n\
            [[band]]\nrate = \"24 p/kWh\"\n";
        let tariff = Tariff::from_text("a.toml", text, "".as_ref()).unwrap();
        let axis = HourAxis {
            start: "2023-01-01T00:00:00Z".parse().unwrap(),
            hours: 3,
        };
        tariff.meter(&axis.civil(chrono_tz::Tz::UTC)).unwrap()
    }

    /// By hand: heating 2 kWh an hour, household 0.5, own generation 0, 1 and 4: bought 2.5 + 1.5, fed back 1.5. On a meter of
    /// its own the heating buys 6 and the household 0.5, feeding back 0.5 + 3.5.
    #[test]
    fn the_household_and_its_generation_meet_the_heating_on_one_meter_only() {
        let meter = meter();
        let household = Household {
            used_kwh: Some(vec![0.5; 3]),
            made_kwh: Some(vec![0.0, 1.0, 4.0]),
        };
        let row = Row {
            compressor_kwh: 2.0,
            ..Row::default()
        };
        let read = |metering| {
            let mut metered = Metered::new(metering, &household, &meter, None);
            (0..3).for_each(|hour| metered.take(hour, &row));
            (
                metered.electricity.import_kwh.iter().sum::<f64>(),
                metered.electricity.export_kwh.iter().sum::<f64>(),
            )
        };
        assert_eq!(read(Metering::Home), (4.0, 1.5));
        assert_eq!(read(Metering::HeatPump), (6.0, 0.0));
        let own = household.reading(&meter);
        assert_eq!(own.import_kwh.iter().sum::<f64>(), 0.5);
        assert_eq!(own.export_kwh.iter().sum::<f64>(), 4.0);
    }
}
