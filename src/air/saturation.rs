//! Saturation pressure of water and ice, and its inverse, the dew point.
//!
//! Below the triple point there are two: over ice, which is what frost on a coil is in balance with, and over liquid
//! (supercooled) water, which is what relative humidity and dew point of weather stations are read against at all
//! temperatures (WMO-No. 8, Guide to Instruments and Methods of Observation, volume I, chapter 4). At −7 °C they stand
//! 7 % apart.

use super::AirError;

/// Range of the saturation equations, °C.
const RANGE_C: std::ops::RangeInclusive<f64> = -100.0..=200.0;
/// The two equations meet at the triple point of water, °C, and not at 0 °C, where the handbook parts them: there they
/// would leave a step on which the dew point's iteration can stick.
const TRIPLE_POINT_C: f64 = 0.01;
const KELVIN: f64 = 273.15;
/// Change of the dew point at which its iteration ends, K.
const DEW_POINT_TOLERANCE_K: f64 = 1e-9;
/// The logarithm of saturation pressure is nearly straight, so that Newton needs 3 to 6 steps.
const DEW_POINT_MOST_STEPS: usize = 40;

/// Coefficients of ln p = c0/T + c1 + c2·T + c3·T² + c4·T³ + c5·T⁴ + c6·ln T, T in kelvin, p in Pa.
type Coefficients = [f64; 7];

/// Over ice, −100 to 0 °C: ASHRAE Fundamentals 2017, chapter 1, equation 5.
const ICE: Coefficients = [
    -5.674_535_9e3,
    6.392_524_7,
    -9.677_843e-3,
    6.221_570_1e-7,
    2.074_782_5e-9,
    -9.484_024e-13,
    4.163_501_9,
];
/// Over water, 0 to 200 °C: equation 6.
const WATER: Coefficients = [
    -5.800_220_6e3,
    1.391_499_3,
    -4.864_023_9e-2,
    4.176_476_8e-5,
    -1.445_209_3e-8,
    0.0,
    6.545_967_3,
];

fn coefficients(temperature_c: f64) -> &'static Coefficients {
    if temperature_c <= TRIPLE_POINT_C {
        &ICE
    } else {
        &WATER
    }
}

/// ln of the saturation pressure, and its slope per kelvin.
fn logarithm(temperature_c: f64) -> (f64, f64) {
    evaluate(coefficients(temperature_c), temperature_c)
}

fn evaluate(coefficients: &Coefficients, temperature_c: f64) -> (f64, f64) {
    let [c0, c1, c2, c3, c4, c5, c6] = *coefficients;
    let t = temperature_c + KELVIN;
    let value = c0 / t + c1 + t * (c2 + t * (c3 + t * (c4 + t * c5))) + c6 * t.ln();
    let slope = -c0 / (t * t) + c2 + t * (2.0 * c3 + t * (3.0 * c4 + t * 4.0 * c5)) + c6 / t;
    (value, slope)
}

/// What air is saturated over.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(super) enum Phase {
    Ice,
    Water,
}

/// Saturation pressure over a phase, Pa, and its slope, Pa/K, for a temperature in range.
pub(super) fn pressure_and_slope(phase: Phase, temperature_c: f64) -> (f64, f64) {
    let coefficients = match phase {
        Phase::Ice => &ICE,
        Phase::Water => &WATER,
    };
    let (logarithm, slope) = evaluate(coefficients, temperature_c);
    let pressure_pa = logarithm.exp();
    (pressure_pa, pressure_pa * slope)
}

/// Saturation pressure over a phase, Pa; not a number out of range.
pub(super) fn saturation_pressure_of(phase: Phase, temperature_c: f64) -> f64 {
    if RANGE_C.contains(&temperature_c) {
        pressure_and_slope(phase, temperature_c).0
    } else {
        f64::NAN
    }
}

/// The saturation pressure for a temperature that is known to be in range, Pa.
pub(super) fn saturation_in_range_pa(temperature_c: f64) -> f64 {
    logarithm(temperature_c).0.exp()
}

/// Saturation pressure of water vapour over liquid water, supercooled below 0.01 °C, −100 to 200 °C, in Pa.
///
/// ASHRAE Fundamentals 2017, chapter 1, equation 6, continued below the triple point. The continuation stays within
/// 0.25 % of Murphy & Koop 2005 (Q. J. R. Meteorol. Soc. 131, equation 10) down to −30 °C and 0.75 % down to −40 °C;
/// colder than that there is next to no moisture to be wrong about.
///
/// # Errors
/// [`AirError::Temperature`] outside the range.
///
/// ```
/// use winterledger::air::{saturation_pressure_over_water_pa, saturation_pressure_pa};
/// let (water, ice) = (saturation_pressure_over_water_pa(-7.0)?, saturation_pressure_pa(-7.0)?);
/// assert!((water / ice - 1.07).abs() < 0.002);
/// # Ok::<(), winterledger::air::AirError>(())
/// ```
pub fn saturation_pressure_over_water_pa(temperature_c: f64) -> Result<f64, AirError> {
    if !RANGE_C.contains(&temperature_c) {
        return Err(AirError::Temperature(temperature_c));
    }
    Ok(evaluate(&WATER, temperature_c).0.exp())
}

/// Saturation pressure of water vapour over ice below 0.01 °C and over water above, −100 to 200 °C, in Pa.
///
/// ASHRAE Fundamentals 2017, chapter 1, equations 5 and 6, parted at the triple point instead of 0 °C.
///
/// # Errors
/// [`AirError::Temperature`] outside the range.
///
/// ```
/// use winterledger::air::saturation_pressure_pa;
/// assert!((saturation_pressure_pa(20.0)? / 2338.8 - 1.0).abs() < 1e-3);
/// assert!(saturation_pressure_pa(300.0).is_err());
/// # Ok::<(), winterledger::air::AirError>(())
/// ```
pub fn saturation_pressure_pa(temperature_c: f64) -> Result<f64, AirError> {
    if !RANGE_C.contains(&temperature_c) {
        return Err(AirError::Temperature(temperature_c));
    }
    Ok(saturation_in_range_pa(temperature_c))
}

/// Dew point of air with a vapour pressure in Pa, in °C; below 0.01 °C it is the frost point, over ice.
///
/// Inverts the saturation equations by Newton's method on the logarithm.
///
/// # Errors
/// [`AirError::VapourPressure`] where no dew point lies between −100 and 200 °C, [`AirError::NotConverged`] should the
/// iteration not settle.
pub fn dew_point_c(vapour_pressure_pa: f64) -> Result<f64, AirError> {
    let (low, high) = (
        saturation_in_range_pa(*RANGE_C.start()),
        saturation_in_range_pa(*RANGE_C.end()),
    );
    if !(low..=high).contains(&vapour_pressure_pa) {
        return Err(AirError::VapourPressure(vapour_pressure_pa));
    }
    let wanted = vapour_pressure_pa.ln();
    let mut dew = 10.0;
    for _ in 0..DEW_POINT_MOST_STEPS {
        let (value, slope) = logarithm(dew);
        let next = (dew - (value - wanted) / slope).clamp(*RANGE_C.start(), *RANGE_C.end());
        if (next - dew).abs() <= DEW_POINT_TOLERANCE_K {
            return Ok(next);
        }
        dew = next;
    }
    Err(AirError::NotConverged(10.0))
}

/// Relative humidity as weather stations state it, 0 to 1, of air at a temperature with a dew point, both °C: both over
/// liquid water at all temperatures (WMO-No. 8, volume I, chapter 4). Above saturation it is 1.
///
/// # Errors
/// [`AirError::Temperature`] where either is out of range.
pub fn relative_humidity_at_dew_point(
    temperature_c: f64,
    dew_point_c: f64,
) -> Result<f64, AirError> {
    let vapour = saturation_pressure_over_water_pa(dew_point_c)?;
    let saturated = saturation_pressure_over_water_pa(temperature_c)?;
    Ok((vapour / saturated).min(1.0))
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;

    /// IAPWS R7-97: 611.657 Pa at the triple point, 0.01 °C; 101 418 Pa at 100 °C. IAPWS R14-08 over ice at −20 °C:
    /// 103.2 Pa. The equations are older: 0.1 % is what the handbook's own table keeps.
    #[test]
    fn saturation_agrees_with_the_steam_tables() {
        for (c, pa) in [
            (0.01, 611.657),
            (100.0, 101_418.0),
            (-20.0, 103.24),
            (20.0, 2339.2),
        ] {
            let found = saturation_pressure_pa(c).unwrap();
            assert!((found / pa - 1.0).abs() < 1e-3, "{c} °C: {found}");
        }
    }

    /// Murphy & Koop 2005 over supercooled water, computed from its equation 10; metpy 1.7.1 (Ambaum 2020) gives 421.54,
    /// 361.84, 125.49 and 50.96 Pa at −5, −7, −20 and −30 °C. WMO-No. 8, annex 4.B, states
    /// 611.2·exp(17.62 t/(243.12 + t)) for the same, which stands 0.14 % higher at −7 °C; 0.3 % covers all three.
    #[test]
    fn supercooled_water_agrees_with_what_is_published() {
        for (c, pa) in [
            (0.01, 611.657),
            (-5.0, 421.761),
            (-7.0, 362.001),
            (-20.0, 125.504),
            (-30.0, 50.936),
        ] {
            let found = saturation_pressure_over_water_pa(c).unwrap();
            assert!((found / pa - 1.0).abs() < 3e-3, "{c} °C: {found}");
            let magnus = 611.2 * (17.62 * c / (243.12 + c)).exp();
            assert!((found / magnus - 1.0).abs() < 3e-3, "{c} °C: {magnus}");
        }
    }

    #[test]
    fn outside_the_range_is_refused() {
        assert_eq!(
            saturation_pressure_pa(-100.1),
            Err(AirError::Temperature(-100.1))
        );
        assert!(saturation_pressure_pa(f64::NAN).is_err());
        assert_eq!(dew_point_c(0.0), Err(AirError::VapourPressure(0.0)));
        assert!(dew_point_c(f64::NAN).is_err());
    }

    proptest! {
        /// The dew point inverts saturation; 1e-6 K is far above the iteration's own tolerance.
        #[test]
        fn dew_point_inverts_saturation(c in -99.9f64..199.9) {
            let back = dew_point_c(saturation_pressure_pa(c).unwrap()).unwrap();
            prop_assert!((back - c).abs() < 1e-6, "{c} {back}");
        }
    }
}
