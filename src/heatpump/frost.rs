//! Frost on an outdoor coil and what it costs to melt it.
//!
//! Frost grows where the coil is below freezing and the air holds more moisture than air at the coil would. Its latent
//! share of the heat taken from the air tells how much of it grows per kilowatt-hour; melting it, the heat borrowed from
//! the house and the standstill meanwhile cost in proportion. One strength, fitted to the sheet's own points that
//! contain defrost, scales both losses.

/// Heat of sublimation of ice at 0 °C, kJ/kg (handbook value 2834).
const SUBLIMATION_KJ_PER_KG: f64 = 2834.0;
/// Heat of evaporation of water near 0 °C, kJ/kg (handbook value 2501).
const EVAPORATION_KJ_PER_KG: f64 = 2501.0;
/// Specific heat of moist air, kJ/(kg K); handbook value.
const AIR_KJ_PER_KG_K: f64 = 1.006;
/// Ratio of the molar masses of water and air.
const MOLAR_MASS_RATIO: f64 = 0.621_945;
/// Pressure of the outdoor air, kPa.
const ATMOSPHERE_KPA: f64 = 101.325;
/// How far the coil's surface stands towards the refrigerant, as a share of the approach. With 9 K of approach frost
/// begins at about +5 °C, where it begins in maritime air (methods §9, common practice).
const SURFACE_SHARE: f64 = 0.6;
/// Below this surface temperature frost is in full growth, K; between it and 0 °C part of the coil stays wet.
const FULL_GROWTH_C: f64 = -1.5;
/// Loss of output over loss of COP: the US test procedure's 35 °F point has capacity 0.90 and power 0.985 of the
/// frost-free line, so COP 0.914 (methods §9, \[from memory\]).
const OUTPUT_OVER_COP: f64 = 0.100 / 0.086;
/// Largest loss of COP, a share: a coil that frosts faster than this defrosts out of turn.
const GREATEST_LOSS: f64 = 0.35;
/// Wet-bulb depression of the standard rating conditions of outdoor air, K: 7(6), 2(1), −7(−8) °C dry (wet) bulb (EN 14511,
/// methods §1). It stands in where the weather has no humidity.
const STANDARD_DEPRESSION_K: f64 = 1.0;

/// How strongly a machine's output and COP suffer from frost.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Frost {
    /// Loss of COP per unit of latent share, ≥ 0.
    pub strength: f64,
}

/// Shares lost to frosting and defrosting.
#[derive(Debug, Clone, Copy, PartialEq, Default)]
pub struct FrostLoss {
    /// Share of the frost-free output that does not reach the house, 0..1.
    pub output: f64,
    /// Share of the frost-free COP that is lost, 0..1.
    pub cop: f64,
}

impl Frost {
    /// Loss at an outdoor temperature, an evaporating temperature and a humidity ratio of the outdoor air (kg/kg).
    pub fn loss(&self, outdoor_c: f64, evaporating_c: f64, humidity_ratio: f64) -> FrostLoss {
        let surface_c = outdoor_c - SURFACE_SHARE * (outdoor_c - evaporating_c);
        if surface_c >= 0.0 {
            return FrostLoss::default();
        }
        let ramp = (surface_c / FULL_GROWTH_C).min(1.0);
        let grown = ramp * ramp * (3.0 - 2.0 * ramp);
        let cop = (self.strength * grown * latent_share(outdoor_c, surface_c, humidity_ratio))
            .min(GREATEST_LOSS);
        FrostLoss {
            output: cop * OUTPUT_OVER_COP,
            cop,
        }
    }
}

/// Share of the heat taken from the air that is heat of sublimation, 0..1, when air cools towards a surface below freezing:
/// `r Δw / (cp ΔT + r Δw)`, heat and moisture going the same way (Lewis number 1, textbook).
fn latent_share(outdoor_c: f64, surface_c: f64, humidity_ratio: f64) -> f64 {
    let deposited = humidity_ratio - saturated_humidity_ratio(surface_c);
    if deposited <= 0.0 {
        return 0.0;
    }
    let latent = SUBLIMATION_KJ_PER_KG * deposited;
    latent / (latent + AIR_KJ_PER_KG_K * (outdoor_c - surface_c))
}

/// Humidity ratio of outdoor air, kg/kg, from its temperature and, where there is one, its relative humidity (0..1, over
/// water as meteorologists measure it).
///
/// Without humidity the air is taken as in the standard rating conditions, wet bulb 1 K below dry bulb.
pub fn humidity_ratio(outdoor_c: f64, relative_humidity: Option<f64>) -> f64 {
    match relative_humidity {
        Some(share) => {
            let vapour = share.clamp(0.0, 1.0) * pressure_over_water_kpa(outdoor_c);
            MOLAR_MASS_RATIO * vapour / (ATMOSPHERE_KPA - vapour)
        }
        None => standard_humidity_ratio(outdoor_c),
    }
}

/// Humidity ratio of air in a laboratory at a standard rating condition, kg/kg, by the psychrometer equation.
pub fn standard_humidity_ratio(outdoor_c: f64) -> f64 {
    let wet_c = outdoor_c - STANDARD_DEPRESSION_K;
    let latent = if wet_c < 0.0 {
        SUBLIMATION_KJ_PER_KG
    } else {
        EVAPORATION_KJ_PER_KG
    };
    saturated_humidity_ratio(wet_c) - AIR_KJ_PER_KG_K * STANDARD_DEPRESSION_K / latent
}

/// Humidity ratio of saturated air, kg/kg, over ice below 0 °C.
fn saturated_humidity_ratio(temperature_c: f64) -> f64 {
    let vapour = if temperature_c < 0.0 {
        // Magnus form over ice, Alduchov and Eskridge 1996 [from memory]; within 0.4 % from −40 to 0 °C.
        0.611_21 * (22.587 * temperature_c / (temperature_c + 273.86)).exp()
    } else {
        pressure_over_water_kpa(temperature_c)
    };
    MOLAR_MASS_RATIO * vapour / (ATMOSPHERE_KPA - vapour)
}

/// Saturation pressure over water, kPa: Magnus form, Alduchov and Eskridge 1996 \[from memory\]; within 0.4 % from −40 to
/// 50 °C.
fn pressure_over_water_kpa(temperature_c: f64) -> f64 {
    0.610_94 * (17.625 * temperature_c / (temperature_c + 243.04)).exp()
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;

    const TYPICAL: Frost = Frost { strength: 0.3 };
    /// Approach of an air coil at full load, K (methods §13: 7–12).
    const APPROACH_K: f64 = 9.0;

    fn damp(outdoor_c: f64, relative_humidity: f64) -> FrostLoss {
        let moisture = humidity_ratio(outdoor_c, Some(relative_humidity));
        TYPICAL.loss(outdoor_c, outdoor_c - APPROACH_K, moisture)
    }

    /// Humidity ratios from psychrolib 2.5.0, `GetHumRatioFromTWetBulb` and `GetHumRatioFromRelHum`, 101325 Pa
    /// (`tests/reference/rating_air.py`); Magnus forms and a constant heat of evaporation are within 1 %.
    #[test]
    fn moisture_of_the_standard_conditions() {
        for (outdoor_c, expected) in STANDARD_MOISTURE {
            let found = standard_humidity_ratio(outdoor_c);
            assert!(
                (found / expected - 1.0).abs() < 0.015,
                "{outdoor_c}: {found} {expected}"
            );
        }
        for (outdoor_c, share, expected) in DAMP_MOISTURE {
            let found = humidity_ratio(outdoor_c, Some(share));
            assert!(
                (found / expected - 1.0).abs() < 0.01,
                "{outdoor_c}: {found} {expected}"
            );
        }
    }

    const STANDARD_MOISTURE: [(f64, f64); 5] = [
        (12.0, 0.007_751_3),
        (7.0, 0.005_385_6),
        (2.0, 0.003_654_2),
        (-7.0, 0.001_552_3),
        (-15.0, 0.000_570_9),
    ];
    const DAMP_MOISTURE: [(f64, f64, f64); 2] =
        [(5.0, 0.95, 0.005_129_6), (0.0, 0.90, 0.003_394_6)];

    /// methods §9: about 9 % of COP at 35 °F in the US procedure \[from memory\]; worst near 0 °C, frequent from −12 to −1 °C,
    /// in maritime air from about +5 °C down, fading in dry cold.
    #[test]
    fn frost_is_worst_near_freezing_and_fades_in_dry_cold() {
        let loss = |outdoor_c: f64| damp(outdoor_c, 0.85).cop;
        assert!((0.06..=0.12).contains(&loss(1.7)), "{}", loss(1.7));
        assert_eq!(loss(7.0), 0.0);
        assert!(damp(4.0, 0.95).cop > 0.0 && damp(4.0, 0.95).cop < loss(1.7));
        assert!(loss(-7.0) < loss(0.0));
        assert!(loss(-15.0) < 0.5 * loss(0.0));
        assert!(damp(-10.0, 0.4).cop < 0.2 * damp(-1.0, 0.9).cop);
    }

    #[test]
    fn a_coil_above_freezing_has_no_frost() {
        let moisture = humidity_ratio(2.0, Some(1.0));
        assert_eq!(TYPICAL.loss(2.0, 1.0, moisture), FrostLoss::default());
    }

    proptest! {
        #[test]
        fn losses_are_shares_and_grow_with_moisture(
            outdoor_c in -30.0..20.0_f64, approach in 5.0..15.0_f64, share in 0.0..0.95_f64,
        ) {
            let at = |share| {
                TYPICAL.loss(outdoor_c, outdoor_c - approach, humidity_ratio(outdoor_c, Some(share)))
            };
            let (less, more) = (at(share), at(share + 0.05));
            prop_assert!((0.0..0.5).contains(&less.output) && (0.0..0.5).contains(&less.cop));
            prop_assert!(more.cop >= less.cop && more.output >= less.output);
        }
    }
}
