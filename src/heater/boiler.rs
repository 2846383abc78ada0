//! A condensing boiler whose efficiency follows the water that comes back to it.

use super::efficiency::GrossEfficiency;

/// Ideal gross efficiency of burning natural gas with 25 % excess air against flue-exit temperature (°C).
///
/// methods §6, computed from the combustion balance: flue loss and condensation, no casing or standing loss.
const IDEAL: [(f64, f64); 8] = [
    (30.0, 0.974),
    (40.0, 0.952),
    (45.0, 0.936),
    (50.0, 0.915),
    (55.0, 0.888),
    (60.0, 0.886),
    (70.0, 0.881),
    (80.0, 0.877),
];

/// Flue gas leaves this much warmer than the water comes back, K: 2 to 10 K, methods §6 \[from memory\].
const FLUE_APPROACH_K: f64 = 5.0;

/// What a boiler keeps in a home of its ideal flue efficiency: casing, cycling, purge and hot-water losses stand between.
///
/// Published field figures are 82.5 % (combi) and 85.3 % (regular) gross \[methods §6, from memory\] where the ideal curve at
/// the return temperatures of such homes (about 50 °C) gives 0.915: 0.84 / 0.915 = 0.92.
pub const FIELD_FACTOR: f64 = 0.92;

/// Electricity of pump and fan per kilowatt-hour of heat.
///
/// 130 + 45 kWh a year (methods §6) in a home that takes 11 500 kWh of gas (methods §7) at 85 %: 175 / 9775.
const ELECTRICITY_PER_HEAT: f64 = 175.0 / 9775.0;

/// Ideal gross efficiency at a flue-exit temperature (°C): straight lines between the published points, constant beyond.
pub fn ideal_gross_efficiency(flue_exit_c: f64) -> f64 {
    let (mut low, mut high) = (IDEAL[0], IDEAL[0]);
    for point in IDEAL {
        high = point;
        if flue_exit_c <= point.0 {
            break;
        }
        low = point;
    }
    if high.0 <= low.0 || flue_exit_c <= low.0 {
        return low.1;
    }
    let share = ((flue_exit_c - low.0) / (high.0 - low.0)).min(1.0);
    low.1 + share * (high.1 - low.1)
}

/// How a boiler's efficiency is known.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum BoilerEfficiency {
    /// One seasonal figure that already holds what homes lose: measured, or an official seasonal rating.
    Seasonal(GrossEfficiency),
    /// The flue-loss curve times an allowance for what homes lose.
    FollowingReturn {
        /// Share of the ideal that is kept, 0.5 to 1.
        field_factor: f64,
    },
}

/// A gas boiler.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Boiler {
    /// Greatest heat output, kW.
    pub output_kw: f64,
    /// How its efficiency is known.
    pub efficiency: BoilerEfficiency,
    /// Pump and fan electricity per kilowatt-hour of heat.
    pub electricity_per_heat: f64,
}

impl Boiler {
    /// A boiler of an output and an efficiency, with the pump and fan electricity of published homes.
    pub fn new(output_kw: f64, efficiency: BoilerEfficiency) -> Self {
        Self {
            output_kw,
            efficiency,
            electricity_per_heat: ELECTRICITY_PER_HEAT,
        }
    }

    /// Heat out per fuel in on gross calorific value when the water comes back at a temperature (°C).
    pub fn gross_efficiency(&self, return_c: f64) -> f64 {
        match self.efficiency {
            BoilerEfficiency::Seasonal(efficiency) => efficiency.fraction(),
            BoilerEfficiency::FollowingReturn { field_factor } => {
                field_factor * ideal_gross_efficiency(return_c + FLUE_APPROACH_K)
            }
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    /// methods §6: 30 °C 0.974, 50 °C 0.915, 80 °C 0.877; between points a straight line; dew point about 55 °C.
    #[test]
    fn the_ideal_curve_honours_its_points() {
        for (flue, efficiency) in IDEAL {
            assert!((ideal_gross_efficiency(flue) - efficiency).abs() < 1e-12);
        }
        assert!((ideal_gross_efficiency(42.5) - 0.944).abs() < 1e-12);
        assert_eq!(ideal_gross_efficiency(10.0), 0.974);
        assert_eq!(ideal_gross_efficiency(95.0), 0.877);
    }

    /// Published field efficiencies: combi 82.5 %, regular 85.3 % gross \[methods §6, from memory\].
    #[test]
    fn a_boiler_in_a_home_lands_among_published_field_figures() {
        let boiler = Boiler::new(
            24.0,
            BoilerEfficiency::FollowingReturn {
                field_factor: FIELD_FACTOR,
            },
        );
        let typical = boiler.gross_efficiency(47.0);
        assert!((0.825..0.853).contains(&typical), "{typical}");
        assert!(boiler.gross_efficiency(30.0) > boiler.gross_efficiency(60.0));
    }
}
