//! Frost on an outdoor coil and what it costs to melt it.
//!
//! Frost grows where the coil is below freezing and the air holds more moisture than air at the coil would. Its latent
//! share of the heat taken from the air tells how much of it grows per kilowatt-hour; melting it, the heat borrowed from
//! the house and the standstill meanwhile cost in proportion. One strength, fitted to the sheet's own points that
//! contain defrost, scales both losses.

use crate::air::{MoistAir, SEA_LEVEL_PA, humidity_ratio_at_station, humidity_ratio_over_ice};
use crate::extremes::lesser;

/// Heat of sublimation of ice at 0 °C, kJ/kg (handbook value 2834).
pub const SUBLIMATION_KJ_PER_KG: f64 = 2834.0;
/// Specific heat of moist air, kJ/(kg K); handbook value.
pub const AIR_KJ_PER_KG_K: f64 = 1.006;
/// How far the coil's surface stands towards the refrigerant, as a share of the approach. With 9 K of approach frost
/// begins at about +5 °C, where it begins in maritime air (common practice, no source).
pub const SURFACE_SHARE: f64 = 0.6;
/// Below this surface temperature the whole coil frosts, °C; between it and 0 °C part of it stays wet: `x² (3 − 2x)` of it frosts at
/// the share x of the way. Common practice, no source.
pub const FULL_GROWTH_C: f64 = -4.0;
/// Loss of output over loss of COP: the US test procedure's 35 °F point has capacity 0.90 and power 0.985 of the
/// frost-free line, so COP 0.914 \[from memory\].
pub const OUTPUT_OVER_COP: f64 = 0.100 / 0.086;
/// Largest loss of COP, a share: a coil that frosts faster than this defrosts out of turn.
pub const GREATEST_LOSS: f64 = 0.35;
/// Share of the output that any frost leaves.
pub(super) const LEAST_LEFT: f64 = 1.0 - GREATEST_LOSS * OUTPUT_OVER_COP;
/// Wet-bulb depression of the standard rating conditions of outdoor air, K: 7(6), 2(1), −7(−8) °C dry (wet) bulb (EN 14511).
/// It stands in where the weather has no humidity.
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

/// How a loss came about.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct FrostSteps {
    /// Coil's surface, °C.
    pub surface_c: f64,
    /// Humidity ratio of air saturated over ice at the surface, kg/kg.
    pub surface_humidity_ratio: f64,
    /// Share of the coil that frosts instead of staying wet, 0..1.
    pub frosted_share: f64,
    /// Share of the heat taken from the air that is heat of sublimation, 0..1.
    pub latent_share: f64,
    /// What it costs.
    pub loss: FrostLoss,
}

/// Outdoor temperature above which no coil freezes, °C: it would take an approach of 25 K.
const FROST_FREE_C: f64 = 15.0;
/// A coil with a largest approach up to this, K, is coldest at the air's own temperature; one beyond it might freeze in milder air yet,
/// where a cool flow keeps the evaporator below the air.
const USUAL_APPROACH_K: f64 = 16.0;

/// Outdoor temperature above which a coil with a largest approach (K) stays above freezing, °C.
pub fn frost_free_above_c(largest_approach_k: f64) -> f64 {
    if largest_approach_k > USUAL_APPROACH_K {
        FROST_FREE_C
    } else {
        SURFACE_SHARE * largest_approach_k
    }
}

impl Frost {
    /// Loss at an outdoor temperature, an evaporating temperature and a humidity ratio of the outdoor air (kg/kg).
    #[inline]
    pub fn loss(&self, outdoor_c: f64, evaporating_c: f64, humidity_ratio: f64) -> FrostLoss {
        let surface_c = surface_c(outdoor_c, evaporating_c);
        if surface_c >= 0.0 {
            return FrostLoss::default();
        }
        self.growth(outdoor_c, surface_c, humidity_ratio).loss
    }

    /// The same with what leads to it.
    pub fn steps(&self, outdoor_c: f64, evaporating_c: f64, humidity_ratio: f64) -> FrostSteps {
        self.growth(
            outdoor_c,
            surface_c(outdoor_c, evaporating_c),
            humidity_ratio,
        )
    }

    #[inline]
    fn growth(&self, outdoor_c: f64, surface_c: f64, humidity_ratio: f64) -> FrostSteps {
        let ramp = (surface_c / FULL_GROWTH_C).clamp(0.0, 1.0);
        let frosted_share = ramp * ramp * (3.0 - 2.0 * ramp);
        let surface_humidity_ratio = if surface_c < 0.0 {
            humidity_ratio_over_ice(surface_c)
        } else {
            saturated_humidity_ratio(surface_c)
        };
        let latent_share = latent_share(
            outdoor_c - surface_c,
            humidity_ratio - surface_humidity_ratio,
        );
        let cop = lesser(self.strength * frosted_share * latent_share, GREATEST_LOSS);
        FrostSteps {
            surface_c,
            surface_humidity_ratio,
            frosted_share,
            latent_share,
            loss: FrostLoss {
                output: cop * OUTPUT_OVER_COP,
                cop,
            },
        }
    }
}

/// Temperature of the coil's surface, °C.
fn surface_c(outdoor_c: f64, evaporating_c: f64) -> f64 {
    outdoor_c - SURFACE_SHARE * (outdoor_c - evaporating_c)
}

/// Share of the heat taken from the air that is heat of sublimation, 0..1, when air cools towards a surface below freezing by
/// `cooling_k` and leaves `deposited` (kg/kg) on it: `r Δw / (cp ΔT + r Δw)`, heat and moisture going the same way (Lewis number 1,
/// textbook).
fn latent_share(cooling_k: f64, deposited: f64) -> f64 {
    if deposited <= 0.0 {
        return 0.0;
    }
    let latent = SUBLIMATION_KJ_PER_KG * deposited;
    latent / (latent + AIR_KJ_PER_KG_K * cooling_k)
}

/// Humidity ratio of outdoor air, kg/kg, from its temperature and, where there is one, its relative humidity (0..1, over liquid
/// water at all temperatures, as weather stations state it: [`humidity_ratio_at_station`]).
///
/// Without humidity the air is taken as in the standard rating conditions, wet bulb 1 K below dry bulb.
pub fn humidity_ratio(outdoor_c: f64, relative_humidity: Option<f64>) -> f64 {
    match relative_humidity {
        Some(share) => humidity_ratio_at_station(outdoor_c, share.clamp(0.0, 1.0)),
        None => standard_humidity_ratio(outdoor_c),
    }
}

/// Humidity ratio of air in a laboratory at a standard rating condition, kg/kg, by the psychrometer equations of the ASHRAE
/// Handbook – Fundamentals (2017), chapter 1, equations 33 and 35.
pub fn standard_humidity_ratio(outdoor_c: f64) -> f64 {
    let wet_c = outdoor_c - STANDARD_DEPRESSION_K;
    let (at_zero, per_k, dry, wet) = if wet_c < 0.0 {
        (2830.0, 0.24, 1.86, 2.1)
    } else {
        (2501.0, 2.326, 1.86, 4.186)
    };
    ((at_zero - per_k * wet_c) * saturated_humidity_ratio(wet_c)
        - AIR_KJ_PER_KG_K * STANDARD_DEPRESSION_K)
        / (at_zero + dry * outdoor_c - wet * wet_c)
}

/// Humidity ratio of saturated air, kg/kg, over ice below 0 °C; not a number outside −100 to 200 °C.
fn saturated_humidity_ratio(temperature_c: f64) -> f64 {
    MoistAir::saturated(temperature_c, SEA_LEVEL_PA).map_or(f64::NAN, |air| air.humidity_ratio())
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;

    const TYPICAL: Frost = Frost { strength: 0.3 };
    /// Approach of an air coil at full load, K (7–12 \[from memory\]).
    const APPROACH_K: f64 = 9.0;

    fn damp(outdoor_c: f64, relative_humidity: f64) -> FrostLoss {
        let moisture = humidity_ratio(outdoor_c, Some(relative_humidity));
        TYPICAL.loss(outdoor_c, outdoor_c - APPROACH_K, moisture)
    }

    /// psychrolib 2.5.0 `GetHumRatioFromTWetBulb(t, t − 1, 101325)`; it holds the same handbook equations, so only rounding differs.
    #[test]
    fn moisture_of_the_standard_conditions() {
        for (outdoor_c, expected) in STANDARD_MOISTURE {
            let found = standard_humidity_ratio(outdoor_c);
            assert!(
                (found / expected - 1.0).abs() < 1e-4,
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

    /// About 9 % of COP at 35 °F in the US procedure \[from memory\]; worst near 0 °C, frequent from −12 to −1 °C,
    /// in maritime air from about +5 °C down, fading in dry cold.
    #[test]
    fn frost_is_worst_near_freezing_and_fades_in_dry_cold() {
        let loss = |outdoor_c: f64| damp(outdoor_c, 0.85).cop;
        assert!((0.06..=0.12).contains(&loss(1.7)), "{}", loss(1.7));
        assert_eq!(loss(7.0), 0.0);
        assert!(damp(4.0, 0.95).cop > 0.0 && damp(4.0, 0.95).cop < loss(1.7));
        assert!(loss(-7.0) < loss(0.0));
        // Dry cold: 73 % over water at −15 °C is 85 % over ice, as 85 % is at 0 °C. At 85 % over water that air is all but
        // saturated over ice, and still frosts less.
        assert!(damp(-15.0, 0.73).cop < 0.5 * loss(0.0));
        assert!(loss(-15.0) < 0.7 * loss(0.0), "{}", loss(-15.0) / loss(0.0));
        assert!(damp(-10.0, 0.4).cop < 0.2 * damp(-1.0, 0.9).cop);
    }

    #[test]
    fn a_coil_above_freezing_has_no_frost() {
        let moisture = humidity_ratio(2.0, Some(1.0));
        assert_eq!(TYPICAL.loss(2.0, 1.0, moisture), FrostLoss::default());
    }

    /// A station's 90 % at −7 °C is 0.90 × 362.0 Pa over water (Murphy & Koop 2005): 2.006 g/kg by hand. Reading it over ice
    /// (0.90 × 338.0 Pa, 1.873 g/kg) would leave a sixth of the frost out.
    #[test]
    fn a_stations_humidity_in_the_cold_is_over_water() {
        let moisture = humidity_ratio(-7.0, Some(0.9));
        assert!((moisture * 1000.0 - 2.006).abs() < 0.004, "{moisture}");
        let over_ice = TYPICAL.loss(-7.0, -7.0 - APPROACH_K, 0.001_873).cop;
        let understated = 1.0 - over_ice / TYPICAL.loss(-7.0, -7.0 - APPROACH_K, moisture).cop;
        assert!((0.1..0.2).contains(&understated), "{understated}");
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
