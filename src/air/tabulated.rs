//! Saturation pressures and humidity ratios at sea level by table, for the hour loop: a few multiplications instead of a logarithm and an exponential.
//!
//! Saturation pressures stand as cubics (Hermite, through values and slopes of the equations) over half a kelvin each, from −60
//! to 100 °C; what is asked beyond is computed. The tables stay within 4e-8 of the equations, relative.

use std::sync::LazyLock;

use super::SEA_LEVEL_PA;
use super::moist::ratio;
use super::saturation::{Phase, pressure_and_slope, saturation_pressure_of};

/// Range of the tables, °C.
const LOW_C: f64 = -60.0;
const HIGH_C: f64 = 100.0;
/// Cells per kelvin.
const PER_K: f64 = 2.0;
const CELLS: usize = ((HIGH_C - LOW_C) * PER_K) as usize;

/// Saturation pressure over one phase: for every cell the cubic in the share of the way through it.
struct Table(Vec<[f64; 4]>);

static ICE: LazyLock<Table> = LazyLock::new(|| Table::of(Phase::Ice));
static WATER: LazyLock<Table> = LazyLock::new(|| Table::of(Phase::Water));

impl Table {
    fn of(phase: Phase) -> Self {
        let at = |i: usize| pressure_and_slope(phase, LOW_C + i as f64 / PER_K);
        let cell = |i: usize| {
            let ((from, from_slope), (to, to_slope)) = (at(i), at(i + 1));
            let (from_slope, to_slope) = (from_slope / PER_K, to_slope / PER_K);
            let rise = to - from;
            [
                from,
                from_slope,
                3.0 * rise - 2.0 * from_slope - to_slope,
                from_slope + to_slope - 2.0 * rise,
            ]
        };
        Self((0..CELLS).map(cell).collect())
    }

    /// Saturation pressure at a temperature, Pa; nothing outside the table.
    #[inline]
    fn at(&self, temperature_c: f64) -> Option<f64> {
        let steps = (temperature_c - LOW_C) * PER_K;
        // Below the table and NaN become 0, which the range then refuses.
        let cell = steps as u32;
        let [a, b, c, d] = *self.0.get(cell as usize)?;
        let x = steps - f64::from(cell);
        (x >= 0.0).then_some(a + x * (b + x * (c + x * d)))
    }
}

/// Humidity ratio at sea level of air saturated over ice at a temperature (°C), kg/kg; not a number outside −100 to 200 °C.
#[inline]
pub fn humidity_ratio_over_ice(temperature_c: f64) -> f64 {
    let tabulated = ICE.at(temperature_c);
    let pressure_pa =
        tabulated.unwrap_or_else(|| saturation_pressure_of(Phase::Ice, temperature_c));
    ratio(pressure_pa, SEA_LEVEL_PA)
}

/// Saturation pressure over liquid water at a temperature from −100 to 200 °C, Pa.
pub fn tabulated_saturation_pressure_pa(temperature_c: f64) -> f64 {
    let tabulated = WATER.at(temperature_c);
    tabulated.unwrap_or_else(|| saturation_pressure_of(Phase::Water, temperature_c))
}

/// Humidity ratio at sea level of air as a weather station states it, kg/kg: temperature (°C) and relative humidity (0 to 1) over
/// liquid water, see [`MoistAir::at_station`](super::MoistAir::at_station); not a number outside −100 to 99 °C.
#[inline]
pub fn humidity_ratio_at_station(temperature_c: f64, relative_humidity: f64) -> f64 {
    let saturated_pa = tabulated_saturation_pressure_pa(temperature_c);
    if saturated_pa < SEA_LEVEL_PA {
        ratio(relative_humidity * saturated_pa, SEA_LEVEL_PA)
    } else {
        f64::NAN
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::air::MoistAir;
    use proptest::prelude::*;

    proptest! {
        /// Against the equations themselves, in the table and beyond it. A cubic through values and slopes is off by at most
        /// `h⁴/384 · max|p⁗|` (textbook); p grows by at most 13 % a kelvin, which gives 0.5⁴/384 · 0.13⁴ = 5e-8.
        #[test]
        fn the_tables_are_the_equations(c in -99.0f64..99.0, share in 0.0f64..1.0) {
            let station = MoistAir::at_station(c, share, SEA_LEVEL_PA).unwrap().humidity_ratio();
            prop_assert!((humidity_ratio_at_station(c, share) - station).abs() <= 5e-8 * station, "{c} {share}");
            if c <= 0.0 {
                let ice = MoistAir::saturated(c, SEA_LEVEL_PA).unwrap().humidity_ratio();
                prop_assert!((humidity_ratio_over_ice(c) - ice).abs() <= 5e-8 * ice, "{c}");
            } else {
                let water = crate::air::saturation_pressure_pa(c).unwrap();
                prop_assert!((tabulated_saturation_pressure_pa(c) - water).abs() <= 5e-8 * water, "{c}");
            }
        }
    }

    #[test]
    fn what_is_out_of_range_is_no_number() {
        for c in [-101.0, 201.0, f64::NAN] {
            assert!(humidity_ratio_over_ice(c).is_nan());
            assert!(humidity_ratio_at_station(c, 0.5).is_nan());
        }
        assert!(humidity_ratio_at_station(120.0, 0.5).is_nan());
        assert!(humidity_ratio_at_station(5.0, f64::NAN).is_nan());
    }
}
