//! Which electricity passes which meter.

/// What a tariff's meter counts.
#[derive(Debug, Clone, Copy, Default, PartialEq, Eq)]
pub enum Metering {
    /// Everything the home uses: steps and demand charges see the total, and own generation reduces it.
    #[default]
    Home,
    /// The heat pump alone, on a meter of its own; the rest of the home is on another tariff.
    HeatPump,
}

/// What passes a meter in an hour, kilowatt-hours.
#[derive(Debug, Clone, Copy, Default, PartialEq)]
pub struct Flows {
    /// Bought.
    pub import_kwh: f64,
    /// Fed back.
    pub export_kwh: f64,
}

impl Flows {
    /// A load behind a meter with own generation beside it: the load takes what is generated in the same hour first.
    pub fn net(load_kwh: f64, generation_kwh: f64) -> Self {
        Self {
            import_kwh: (load_kwh - generation_kwh).max(0.0),
            export_kwh: (generation_kwh - load_kwh).max(0.0),
        }
    }
}

impl Metering {
    /// What passes the heating's meter and, where that is another one, the household's.
    ///
    /// `heating_kwh` is all electricity of the heating, `household_kwh` the rest of the home, `generation_kwh` what
    /// the home makes. Generation is connected on the household's side of a separate heat-pump meter (common
    /// practice, no source), so it does not reduce the heat pump's metered use there.
    pub fn flows(
        self,
        heating_kwh: f64,
        household_kwh: f64,
        generation_kwh: f64,
    ) -> (Flows, Option<Flows>) {
        match self {
            Self::Home => (
                Flows::net(heating_kwh + household_kwh, generation_kwh),
                None,
            ),
            Self::HeatPump => (
                Flows::net(heating_kwh, 0.0),
                Some(Flows::net(household_kwh, generation_kwh)),
            ),
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn generation_serves_the_home_first_and_never_both_ways_at_once() {
        let (meter, other) = Metering::Home.flows(2.0, 0.5, 1.0);
        assert_eq!(
            (meter.import_kwh, meter.export_kwh, other),
            (1.5, 0.0, None)
        );
        let (meter, _) = Metering::Home.flows(0.0, 0.5, 3.0);
        assert_eq!((meter.import_kwh, meter.export_kwh), (0.0, 2.5));
    }

    #[test]
    fn a_heat_pump_meter_sees_the_heat_pump_only() {
        let (meter, other) = Metering::HeatPump.flows(2.0, 0.5, 1.0);
        assert_eq!((meter.import_kwh, meter.export_kwh), (2.0, 0.0));
        let other = other.unwrap();
        assert_eq!((other.import_kwh, other.export_kwh), (0.0, 0.5));
    }
}
