//! Moist-air functions: saturation, humidity ratio, dew point, wet bulb.
//!
//! Equations of the ASHRAE Handbook – Fundamentals (2017), chapter 1, in SI units. Frost needs them: a coil below both the
//! freezing point and the dew point of the air grows ice.
//!
//! **Relative humidity is over liquid water at all temperatures**, as weather stations state it (WMO-No. 8). The handbook
//! reads it over ice below 0 °C, which would make air at −7 °C 7 % drier than it is. Frost itself, and the wet bulb below
//! 0 °C, are over ice.

mod error;
mod moist;
mod saturation;
mod tabulated;

pub use error::AirError;
pub use moist::MoistAir;
pub use saturation::{
    dew_point_c, relative_humidity_at_dew_point, saturation_pressure_over_water_pa,
    saturation_pressure_pa,
};
pub use tabulated::{
    humidity_ratio_at_station, humidity_ratio_over_ice, tabulated_saturation_pressure_pa,
};

/// Pressure of the standard atmosphere at sea level, Pa (ASHRAE Fundamentals 2017, chapter 1, equation 3).
pub const SEA_LEVEL_PA: f64 = 101_325.0;

/// Pressure of the standard atmosphere at an altitude in metres, −500 to 11 000, in Pa.
///
/// ASHRAE Fundamentals 2017, chapter 1, equation 3; outside the range the altitude is held at its end.
pub fn pressure_at_altitude_pa(altitude_m: f64) -> f64 {
    SEA_LEVEL_PA * (1.0 - 2.255_77e-5 * altitude_m.clamp(-500.0, 11_000.0)).powf(5.2559)
}

/// Relative humidity over liquid water, 0 to 1, where none was measured: the air is taken to be saturated at the day's lowest
/// temperature.
///
/// Allen et al. 1998, FAO Irrigation and Drainage Paper 56, equation 48: at night the air cools until dew forms. Good in
/// humid climates; in dry ones the dew point lies some kelvin lower. Below 0 °C, which the paper is not made for, what forms
/// is hoar, so that the air is then saturated over ice. `temperature_c` may lie below `day_minimum_c` by rounding, which
/// gives saturation.
///
/// # Errors
/// [`AirError::Temperature`] outside −100 to 200 °C.
pub fn assumed_relative_humidity(temperature_c: f64, day_minimum_c: f64) -> Result<f64, AirError> {
    let vapour = saturation_pressure_pa(day_minimum_c.min(temperature_c))?;
    Ok((vapour / saturation_pressure_over_water_pa(temperature_c)?).min(1.0))
}

#[cfg(test)]
mod tests {
    use super::*;

    /// ICAO standard atmosphere (Doc 7488): 89 874.6 Pa at 1000 m, 79 495.2 Pa at 2000 m; the ASHRAE fit states no
    /// tolerance, 20 Pa is what it is seen to keep.
    #[test]
    fn pressure_falls_as_in_the_standard_atmosphere() {
        assert!((pressure_at_altitude_pa(0.0) - 101_325.0).abs() < 1e-9);
        assert!((pressure_at_altitude_pa(1000.0) - 89_874.6).abs() < 20.0);
        assert!((pressure_at_altitude_pa(2000.0) - 79_495.2).abs() < 20.0);
    }

    #[test]
    fn assumed_humidity_is_saturation_at_the_coldest_hour() {
        assert!((assumed_relative_humidity(3.0, 3.0).unwrap() - 1.0).abs() < 1e-12);
        // Over ice at −3 °C: 475.7 Pa, over water 489.7 Pa (Murphy & Koop 2005).
        assert!((assumed_relative_humidity(-3.0, -3.0).unwrap() - 0.9713).abs() < 5e-4);
        assert!(assumed_relative_humidity(4.0, -3.0).unwrap() < 0.7);
    }
}
