//! What a machine takes when it does not heat.

/// Standby power measured on a unit of 5 kW, W (published measurement): scaled with output where a sheet says nothing.
const MEASURED_STANDBY_W: f64 = 31.0;
/// Output of that unit, kW.
const MEASURED_OUTPUT_KW: f64 = 5.0;

/// Powers of the modes of EN 14825, kW.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct IdlePower {
    /// Ready, waiting for a demand.
    pub standby_kw: f64,
    /// Heating season, room warm enough.
    pub thermostat_off_kw: f64,
    /// Crankcase heater.
    pub crankcase_kw: f64,
    /// Switched off.
    pub off_kw: f64,
}

impl IdlePower {
    /// Powers for a machine of an output whose sheet states none: the standby power measured on a unit of 5 kW in every mode,
    /// the crankcase heater contained in it.
    pub fn usual(output_kw: f64) -> Self {
        let standby_kw = MEASURED_STANDBY_W / 1000.0 * output_kw / MEASURED_OUTPUT_KW;
        Self {
            standby_kw,
            thermostat_off_kw: standby_kw,
            crankcase_kw: 0.0,
            off_kw: standby_kw,
        }
    }

    /// The same for a machine of another size.
    pub fn scaled(&self, factor: f64) -> Self {
        Self {
            standby_kw: self.standby_kw * factor,
            thermostat_off_kw: self.thermostat_off_kw * factor,
            crankcase_kw: self.crankcase_kw * factor,
            off_kw: self.off_kw * factor,
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    /// Published measurement: standby 31 W, a 5 kW unit.
    #[test]
    fn usual_standby_is_the_measured_one() {
        assert!((IdlePower::usual(5.0).standby_kw - 0.031).abs() < 1e-12);
        assert!((IdlePower::usual(5.0).scaled(2.0).off_kw - 0.062).abs() < 1e-12);
    }
}
