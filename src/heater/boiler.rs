//! A boiler whose efficiency follows the water that comes back to it.

use super::efficiency::GrossEfficiency;
use super::flue::Combustion;
use crate::fault::{self, Fault};
use crate::units::Fuel;

/// Flue gas leaves this much warmer than the water comes back, K: 2 to 10 K \[from memory\].
const FLUE_APPROACH_K: f64 = 5.0;

/// Return to a boiler while it makes hot water, °C. Common practice, no source.
const WATER_RETURN_C: f64 = 55.0;

/// What a boiler keeps in a home of its ideal flue efficiency: casing, cycling and purge stand between.
///
/// The published field figure of boilers that do not heat water as it is drawn is 85.3 % gross, of all 82.5 % and more
/// \[from memory\], where the ideal curve at the return temperatures of such homes (about 45 to 50 °C) gives 0.915:
/// 0.84 / 0.915 = 0.92.
pub const FIELD_FACTOR: f64 = 0.92;

/// What is kept besides when hot water is heated as it is drawn: every draw starts a cold heat exchanger.
///
/// Of the published field figures \[from memory\] 82.5 % is with and 85.3 % without water heated as drawn. With a
/// fifth of the heat going to hot water, 1/0.825 = 0.8/0.853 + 0.2/η gives η = 0.73 for the water, which is 0.89 of
/// 0.92 × 0.886, the field factor times the ideal efficiency at 60 °C.
pub const DRAWN_WATER_FACTOR: f64 = 0.89;

/// Electricity of pump and fan per kilowatt-hour of heat.
///
/// 130 + 45 kWh a year of pump and fan (published field figure, secondary source) in a home that takes 11 500 kWh of gas (typical use
/// of the British cap, 2026) at 85 %: 175 / 9775. Taken for every fuel; what feeds pellets or atomises oil is not known here.
const ELECTRICITY_PER_HEAT: f64 = 175.0 / 9775.0;

/// How a boiler's efficiency is known.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum BoilerEfficiency {
    /// One seasonal figure that already holds what homes lose: measured, or an official seasonal rating.
    Seasonal(GrossEfficiency),
    /// The flue-loss curve times an allowance for what homes lose.
    FollowingReturn {
        /// What is burnt.
        combustion: Combustion,
        /// Share of the ideal that is kept, 0.5 to 1.
        field_factor: f64,
    },
}

/// A boiler.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Boiler {
    /// What it burns.
    pub fuel: Fuel,
    /// Greatest heat output, kW.
    pub output_kw: f64,
    /// How its efficiency is known.
    pub efficiency: BoilerEfficiency,
    /// Pump and fan electricity per kilowatt-hour of heat.
    pub electricity_per_heat: f64,
}

impl Boiler {
    /// A boiler of an output and an efficiency, with the pump and fan electricity of published homes.
    pub fn new(fuel: Fuel, output_kw: f64, efficiency: BoilerEfficiency) -> Self {
        Self {
            fuel,
            output_kw,
            efficiency,
            electricity_per_heat: ELECTRICITY_PER_HEAT,
        }
    }

    /// The same boiler with an efficiency that is a multiple of it, as far as a boiler can reach.
    pub fn with_efficiency_times(self, factor: f64) -> Self {
        let efficiency = match self.efficiency {
            BoilerEfficiency::Seasonal(seasonal) => BoilerEfficiency::Seasonal(
                GrossEfficiency::new((seasonal.fraction() * factor).min(1.0)).unwrap_or(seasonal),
            ),
            BoilerEfficiency::FollowingReturn {
                combustion,
                field_factor,
            } => BoilerEfficiency::FollowingReturn {
                combustion,
                field_factor: (field_factor * factor).min(1.0),
            },
        };
        Self { efficiency, ..self }
    }

    /// Heat out per fuel in on gross calorific value when the water comes back at a temperature (°C).
    pub fn gross_efficiency(&self, return_c: f64) -> f64 {
        match self.efficiency {
            BoilerEfficiency::Seasonal(efficiency) => efficiency.fraction(),
            BoilerEfficiency::FollowingReturn {
                combustion,
                field_factor,
            } => {
                let kept = if fault::on(Fault::IdealBoiler) {
                    1.0
                } else {
                    field_factor
                };
                kept * combustion.gross_efficiency(return_c + FLUE_APPROACH_K)
            }
        }
    }

    /// The same while it makes hot water, for a store or as it is drawn.
    pub fn water_efficiency(&self, has_store: bool) -> f64 {
        let kept = match self.efficiency {
            BoilerEfficiency::FollowingReturn { .. } if !has_store => DRAWN_WATER_FACTOR,
            _ => 1.0,
        };
        kept * self.gross_efficiency(WATER_RETURN_C)
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn in_a_home() -> Boiler {
        let efficiency = BoilerEfficiency::FollowingReturn {
            combustion: Combustion::GAS,
            field_factor: FIELD_FACTOR,
        };
        Boiler::new(Fuel::Gas, 24.0, efficiency)
    }

    /// Published field efficiencies: combi 82.5 %, regular 85.3 % gross \[from memory\].
    #[test]
    fn a_boiler_in_a_home_lands_among_published_field_figures() {
        let typical = in_a_home().gross_efficiency(47.0);
        assert!((0.825..0.853).contains(&typical), "{typical}");
        assert!(in_a_home().gross_efficiency(30.0) > in_a_home().gross_efficiency(60.0));
    }

    /// Water heated as it is drawn takes more fuel; a seasonal figure holds that already.
    #[test]
    fn drawn_water_costs_more_unless_the_figure_holds_it() {
        let boiler = in_a_home();
        assert!(boiler.water_efficiency(false) < boiler.water_efficiency(true));
        assert!((boiler.water_efficiency(false) - 0.73).abs() < 0.01);
        let Some(rated) = GrossEfficiency::new(0.84) else {
            panic!("0.84 is an efficiency");
        };
        let rated = Boiler::new(Fuel::Gas, 24.0, BoilerEfficiency::Seasonal(rated));
        assert_eq!(rated.water_efficiency(false), 0.84);
    }
}
