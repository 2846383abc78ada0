//! One state of moist air.

use super::AirError;
use super::saturation::{
    dew_point_c, saturation_in_range_pa, saturation_pressure_over_water_pa, saturation_pressure_pa,
};

/// Molar mass of water over that of dry air (ASHRAE Fundamentals 2017, chapter 1, equation 20).
const MASS_RATIO: f64 = 0.621_945;
/// Width of the bracket at which the wet bulb's iteration ends, K.
const WET_BULB_TOLERANCE_K: f64 = 1e-6;
/// Halving 100 K to a micro-kelvin takes 27 steps; the secant steps between need fewer.
const WET_BULB_MOST_STEPS: usize = 80;

/// Moist air, known by dry-bulb temperature, partial pressure of the vapour and total pressure.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct MoistAir {
    temperature_c: f64,
    vapour_pressure_pa: f64,
    pressure_pa: f64,
}

impl MoistAir {
    /// Air as a weather station states it: temperature from −100 to 200 °C, relative humidity from 0 to 1 **over liquid water
    /// at all temperatures** (WMO-No. 8, volume I, chapter 4), total pressure in Pa.
    ///
    /// # Errors
    /// Whichever of the three is out of range; the pressure must exceed that of saturated vapour.
    ///
    /// ```
    /// use winterledger::air::{MoistAir, SEA_LEVEL_PA};
    /// let air = MoistAir::at_station(2.0, 0.85, SEA_LEVEL_PA)?;
    /// assert!(air.dew_point_c()? < air.wet_bulb_c()? && air.wet_bulb_c()? < 2.0);
    /// assert!(MoistAir::at_station(2.0, 85.0, SEA_LEVEL_PA).is_err());
    /// # Ok::<(), winterledger::air::AirError>(())
    /// ```
    pub fn at_station(
        temperature_c: f64,
        relative_humidity: f64,
        pressure_pa: f64,
    ) -> Result<Self, AirError> {
        let saturated = saturation_pressure_over_water_pa(temperature_c)?;
        if !(0.0..=1.0).contains(&relative_humidity) {
            return Err(AirError::RelativeHumidity(relative_humidity));
        }
        if !(pressure_pa > saturated && pressure_pa.is_finite()) {
            return Err(AirError::Pressure(pressure_pa));
        }
        Self::with_vapour(temperature_c, relative_humidity * saturated, pressure_pa)
    }

    /// Air in balance with water, or below 0.01 °C with ice, at its own temperature.
    ///
    /// # Errors
    /// As [`MoistAir::with_vapour`].
    pub fn saturated(temperature_c: f64, pressure_pa: f64) -> Result<Self, AirError> {
        let vapour_pressure_pa = saturation_pressure_pa(temperature_c)?;
        Self::with_vapour(temperature_c, vapour_pressure_pa, pressure_pa)
    }

    /// Air of a temperature from −100 to 200 °C, with a partial pressure of vapour of 0 or more, below the total pressure, both
    /// in Pa.
    ///
    /// # Errors
    /// Whichever of the three is out of range.
    pub fn with_vapour(
        temperature_c: f64,
        vapour_pressure_pa: f64,
        pressure_pa: f64,
    ) -> Result<Self, AirError> {
        saturation_pressure_pa(temperature_c)?;
        if vapour_pressure_pa.is_nan() || vapour_pressure_pa < 0.0 {
            return Err(AirError::VapourPressure(vapour_pressure_pa));
        }
        if !(pressure_pa > vapour_pressure_pa && pressure_pa.is_finite()) {
            return Err(AirError::Pressure(pressure_pa));
        }
        Ok(Self {
            temperature_c,
            vapour_pressure_pa,
            pressure_pa,
        })
    }

    /// Dry-bulb temperature, °C.
    pub fn temperature_c(&self) -> f64 {
        self.temperature_c
    }

    /// Partial pressure of the vapour, Pa (ASHRAE Fundamentals 2017, chapter 1, equation 22).
    pub fn vapour_pressure_pa(&self) -> f64 {
        self.vapour_pressure_pa
    }

    /// Water per dry air, kg/kg (equation 20).
    pub fn humidity_ratio(&self) -> f64 {
        ratio(self.vapour_pressure_pa, self.pressure_pa)
    }

    /// Enthalpy per kilogram of dry air, kJ/kg, zero at 0 °C dry (equation 30).
    pub fn enthalpy_kj_per_kg(&self) -> f64 {
        1.006 * self.temperature_c + self.humidity_ratio() * (2501.0 + 1.86 * self.temperature_c)
    }

    /// Dew point, °C; below 0.01 °C the frost point.
    ///
    /// # Errors
    /// [`AirError::VapourPressure`] for air without moisture.
    pub fn dew_point_c(&self) -> Result<f64, AirError> {
        Ok(dew_point_c(self.vapour_pressure_pa)?.min(self.temperature_c))
    }

    /// Thermodynamic wet-bulb temperature, °C: over water from 0 °C up, over ice below.
    ///
    /// ASHRAE Fundamentals 2017, chapter 1, equations 33 and 35, solved between dew point and dry bulb. The two
    /// equations overlap for a few tenths of a kelvin around 0 °C; where both hold, the bulb is taken to be wet and not
    /// frozen.
    ///
    /// # Errors
    /// [`AirError::VapourPressure`] for air without moisture, [`AirError::NotConverged`] should the iteration not settle.
    pub fn wet_bulb_c(&self) -> Result<f64, AirError> {
        let dew = self.dew_point_c()?;
        let wanted = self.humidity_ratio();
        let dry = self.temperature_c;
        let over_water = dry > 0.0 && wanted >= self.ratio_at_wet_bulb(0.0, true);
        let (mut low, mut high) = if over_water {
            (dew.max(0.0), dry)
        } else {
            (dew, dry.min(0.0))
        };
        let excess = |wet: f64| self.ratio_at_wet_bulb(wet, over_water) - wanted;
        let (mut at_low, mut at_high) = (excess(low), excess(high));
        if at_low >= 0.0 {
            return Ok(low);
        }
        if at_high <= 0.0 {
            return Ok(high);
        }
        // Secant steps inside a bracket; the end that stays twice is weighted down (Illinois), so that both ends move.
        let mut stayed = 0;
        for _ in 0..WET_BULB_MOST_STEPS {
            let guess = (low * at_high - high * at_low) / (at_high - at_low);
            let at_guess = excess(guess);
            if at_guess == 0.0 {
                return Ok(guess);
            }
            let moved = if at_guess < 0.0 {
                guess - low
            } else {
                high - guess
            };
            if at_guess < 0.0 {
                (low, at_low) = (guess, at_guess);
                if stayed == -1 {
                    at_high /= 2.0;
                }
                stayed = -1;
            } else {
                (high, at_high) = (guess, at_guess);
                if stayed == 1 {
                    at_low /= 2.0;
                }
                stayed = 1;
            }
            if high - low <= WET_BULB_TOLERANCE_K || moved <= WET_BULB_TOLERANCE_K * 1e-3 {
                return Ok(guess);
            }
        }
        Err(AirError::NotConverged(dry))
    }

    /// The humidity ratio that air of this dry bulb would have at a wet bulb (equations 33 and 35).
    fn ratio_at_wet_bulb(&self, wet_c: f64, over_water: bool) -> f64 {
        let saturated = ratio(saturation_in_range_pa(wet_c), self.pressure_pa);
        let dry_c = self.temperature_c;
        if over_water {
            ((2501.0 - 2.326 * wet_c) * saturated - 1.006 * (dry_c - wet_c))
                / (2501.0 + 1.86 * dry_c - 4.186 * wet_c)
        } else {
            ((2830.0 - 0.24 * wet_c) * saturated - 1.006 * (dry_c - wet_c))
                / (2830.0 + 1.86 * dry_c - 2.1 * wet_c)
        }
    }
}

pub(super) fn ratio(vapour_pressure_pa: f64, pressure_pa: f64) -> f64 {
    MASS_RATIO * vapour_pressure_pa / (pressure_pa - vapour_pressure_pa)
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::air::SEA_LEVEL_PA;
    use proptest::prelude::*;

    #[test]
    fn saturated_air_has_one_temperature() {
        for c in [-15.0, -0.5, 0.0, 3.0, 20.0] {
            let air = MoistAir::saturated(c, SEA_LEVEL_PA).unwrap();
            assert!((air.dew_point_c().unwrap() - c).abs() < 1e-5, "{c}");
            assert!(
                (air.wet_bulb_c().unwrap() - c).abs() < 1e-4,
                "{c} {}",
                air.wet_bulb_c().unwrap()
            );
        }
    }

    #[test]
    fn what_cannot_be_is_refused() {
        assert_eq!(
            MoistAir::at_station(20.0, 1.1, SEA_LEVEL_PA),
            Err(AirError::RelativeHumidity(1.1))
        );
        assert_eq!(
            MoistAir::at_station(120.0, 0.5, SEA_LEVEL_PA),
            Err(AirError::Pressure(SEA_LEVEL_PA))
        );
        assert!(MoistAir::at_station(f64::NAN, 0.5, SEA_LEVEL_PA).is_err());
        assert!(
            MoistAir::at_station(20.0, 0.0, SEA_LEVEL_PA)
                .unwrap()
                .dew_point_c()
                .is_err()
        );
    }

    /// At −7 °C and 80 % a station's air holds 0.80 × 362.1 Pa = 289.7 Pa: humidity ratio
    /// 0.621945 × 289.7/(101325 − 289.7) = 1.783 g/kg by hand, 86 % of saturation over ice (338.0 Pa, metpy 1.7.1). Read over
    /// ice it would be 1.665 g/kg.
    #[test]
    fn humidity_below_freezing_is_over_water() {
        let air = MoistAir::at_station(-7.0, 0.8, SEA_LEVEL_PA).unwrap();
        assert!((air.humidity_ratio() * 1000.0 - 1.783).abs() < 0.002);
        let frosted = MoistAir::saturated(-7.0, SEA_LEVEL_PA).unwrap();
        assert!((air.vapour_pressure_pa() / frosted.vapour_pressure_pa() - 0.857).abs() < 0.001);
    }

    proptest! {
        /// Dew point ≤ wet bulb ≤ dry bulb, for any air that a heat pump can meet.
        #[test]
        fn the_wet_bulb_lies_between(c in -40.0f64..50.0, rh in 0.02f64..=1.0, pa in 70_000.0f64..105_000.0) {
            let air = MoistAir::at_station(c, rh, pa).unwrap();
            let (dew, wet) = (air.dew_point_c().unwrap(), air.wet_bulb_c().unwrap());
            prop_assert!(dew <= wet + 1e-4 && wet <= c + 1e-9, "{dew} {wet} {c}");
        }
    }
}
