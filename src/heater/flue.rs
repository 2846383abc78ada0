//! What goes up the flue: the combustion balance of a fuel, with condensation.

use crate::air::{SEA_LEVEL_PA, tabulated_saturation_pressure_pa};
use crate::extremes::lesser;

/// Heat of condensation of water at 25 °C, kJ/mol (NIST).
const LATENT_KJ_PER_MOL: f64 = 43.99;
/// Temperature that gross calorific values are referred to, °C.
const REFERENCE_C: f64 = 25.0;
/// Nitrogen and argon per oxygen of dry air, mol/mol.
const NITROGEN_PER_OXYGEN: f64 = 3.76;

/// Mean heat capacities between 25 and 80 °C, kJ/mol K (NIST, ideal gas; water liquid).
const CARBON_DIOXIDE: f64 = 0.0380;
const NITROGEN: f64 = 0.0291;
const OXYGEN: f64 = 0.0296;
const STEAM: f64 = 0.0337;
const WATER: f64 = 0.0753;

/// What is burnt, for one atom of carbon: CHₓ.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Combustion {
    /// Hydrogen atoms for each atom of carbon.
    hydrogen: f64,
    /// Gross heat of combustion for each mole of carbon, kJ.
    gross_kj: f64,
    /// Dry air over the air that burning needs.
    air_ratio: f64,
}

impl Combustion {
    /// Natural gas as methane, 890.6 kJ/mol gross (NIST), 25 % excess air (common practice, no source).
    pub const GAS: Self = Self {
        hydrogen: 4.0,
        gross_kj: 890.6,
        air_ratio: 1.25,
    };
    /// Liquefied petroleum gas as propane, 2219.2 kJ/mol gross for three carbons \[from memory\].
    pub const LPG: Self = Self {
        hydrogen: 8.0 / 3.0,
        gross_kj: 2219.2 / 3.0,
        air_ratio: 1.25,
    };
    /// Heating oil as CH₁.₉ with 46.2 MJ/kg gross \[from memory\].
    pub const OIL: Self = Self {
        hydrogen: 1.9,
        gross_kj: 46.2 * (12.011 + 1.9 * 1.008),
        air_ratio: 1.25,
    };

    /// Gross efficiency when the flue gas leaves at a temperature (°C, 20 to 100) in equilibrium with its condensate.
    ///
    /// One less sensible heat of flue gas and condensate above 25 °C, less the latent heat of the steam that stays; dry
    /// combustion air at sea level; no loss of casing, starts or standing.
    pub fn gross_efficiency(&self, flue_c: f64) -> f64 {
        let (dry_mol, dry_kj_per_k) = self.dry_gas();
        let water_mol = self.hydrogen / 2.0;
        let saturation_pa = tabulated_saturation_pressure_pa(flue_c);
        // Outside the range of the saturation curve nothing condenses.
        let steam_mol = if saturation_pa < SEA_LEVEL_PA {
            lesser(
                dry_mol * saturation_pa / (SEA_LEVEL_PA - saturation_pa),
                water_mol,
            )
        } else {
            water_mol
        };
        let warmer_k = flue_c - REFERENCE_C;
        let sensible_kj =
            warmer_k * (dry_kj_per_k + steam_mol * STEAM + (water_mol - steam_mol) * WATER);
        1.0 - (sensible_kj + steam_mol * LATENT_KJ_PER_MOL) / self.gross_kj
    }

    /// Moles of dry flue gas for each mole of carbon, and their heat capacity.
    fn dry_gas(&self) -> (f64, f64) {
        let needed = 1.0 + self.hydrogen / 4.0;
        let nitrogen = NITROGEN_PER_OXYGEN * self.air_ratio * needed;
        let oxygen = (self.air_ratio - 1.0) * needed;
        (
            1.0 + nitrogen + oxygen,
            CARBON_DIOXIDE + nitrogen * NITROGEN + oxygen * OXYGEN,
        )
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::air::dew_point_c;

    /// Combustion balance computed with CoolProp 8.0.0: ideal gross efficiency of methane with 25 % excess air.
    /// Heat capacities are constant here and the table is rounded to 0.001: 0.003 is allowed.
    #[test]
    fn gas_follows_the_published_flue_loss() {
        for (flue_c, efficiency) in [
            (30.0, 0.974),
            (40.0, 0.952),
            (45.0, 0.936),
            (50.0, 0.915),
            (55.0, 0.888),
            (60.0, 0.886),
            (70.0, 0.881),
            (80.0, 0.877),
        ] {
            let found = Combustion::GAS.gross_efficiency(flue_c);
            assert!((found - efficiency).abs() < 0.003, "{flue_c} °C: {found}");
        }
    }

    /// Dalton's law with CoolProp 8.0.0: dew point 55.7 to 54.2 °C at 20 to 30 % excess air.
    #[test]
    fn gas_condenses_below_the_published_dew_point() {
        for (air_ratio, published_c) in [(1.2, 55.7), (1.3, 54.2)] {
            let gas = Combustion {
                air_ratio,
                ..Combustion::GAS
            };
            let water = gas.hydrogen / 2.0;
            let share = water / (water + gas.dry_gas().0);
            let found_c = dew_point_c(share * SEA_LEVEL_PA).unwrap();
            // Rounded to 0.1 K, saturation curve of another source.
            assert!((found_c - published_c).abs() < 0.2, "{found_c}");
        }
    }

    /// Net over gross is what is left when all steam leaves at the reference temperature: methane 0.901 (CoolProp 8.0.0),
    /// propane 0.921 \[from memory\]; oil about 0.94 \[from memory\].
    #[test]
    fn steam_is_the_difference_between_net_and_gross() {
        for (fuel, net) in [
            (Combustion::GAS, 0.901),
            (Combustion::LPG, 0.921),
            (Combustion::OIL, 0.94),
        ] {
            let found = 1.0 - fuel.hydrogen / 2.0 * LATENT_KJ_PER_MOL / fuel.gross_kj;
            assert!((found - net).abs() < 0.006, "{found} {net}");
        }
    }

    /// The less hydrogen, the less steam there is to win: oil gains least from cool water, gas most.
    #[test]
    fn fuels_gain_from_condensing_by_their_hydrogen() {
        let gain = |fuel: Combustion| fuel.gross_efficiency(35.0) - fuel.gross_efficiency(70.0);
        assert!(gain(Combustion::GAS) > gain(Combustion::LPG));
        assert!(gain(Combustion::LPG) > gain(Combustion::OIL));
        assert!(gain(Combustion::OIL) > 0.02);
    }
}
