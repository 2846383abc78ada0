//! What a refrigerant is, beside its equation: safety class, climate effect, cautions.

use super::Refrigerant;
use std::fmt;

/// Safety class of ISO 817: toxicity letter and flammability number.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum SafetyClass {
    /// Lower toxicity, no flame propagation.
    A1,
    /// Lower toxicity, lower flammability.
    A2L,
    /// Lower toxicity, higher flammability.
    A3,
}

impl SafetyClass {
    /// Whether the fluid can burn.
    pub fn flammable(self) -> bool {
        self != SafetyClass::A1
    }
}

impl fmt::Display for SafetyClass {
    fn fmt(&self, formatter: &mut fmt::Formatter<'_>) -> fmt::Result {
        formatter.write_str(match self {
            SafetyClass::A1 => "A1",
            SafetyClass::A2L => "A2L",
            SafetyClass::A3 => "A3",
        })
    }
}

/// Fixed facts of one refrigerant.
#[derive(Clone, Debug, PartialEq)]
pub struct Facts {
    /// Name of the substance.
    pub substance: &'static str,
    /// Molar mass, g/mol (from the publication of its equation).
    pub molar_mass_g_per_mol: f64,
    /// Critical temperature, °C (from the publication of its equation).
    pub critical_temperature_c: f64,
    /// Critical pressure, kPa (from the publication of its equation).
    pub critical_pressure_kpa: f64,
    /// Whether it is a blend that is computed as if it were one substance.
    pub pseudo_pure: bool,
    /// Safety class of ISO 817.
    pub safety_class: SafetyClass,
    /// 100-year global warming potential of IPCC AR4 (2007), where that report gives one.
    pub gwp100_ar4: Option<f64>,
    /// 100-year global warming potential of IPCC AR5 (2013), where that report gives one.
    pub gwp100_ar5: Option<f64>,
    /// Where the two figures stand, and what to know about them.
    pub gwp_source: &'static str,
    /// What a person near the machine must know.
    pub caution: &'static str,
}

const KELVIN: f64 = 273.15;

const CAUTION_A1: &str = "does not burn, but displaces air in closed rooms; only people licensed for \
    refrigerants may open the circuit.";
const CAUTION_A2L: &str = "mildly flammable (A2L): charge limits, ventilation and distance from \
    ignition sources follow local codes; only people licensed for flammable refrigerants may open \
    the circuit.";
const CAUTION_A3: &str = "highly flammable (A3): charge limits, a protective zone free of openings, \
    drains and ignition sources, and siting follow local codes; only people licensed for flammable \
    refrigerants may open the circuit.";

// GWP: IPCC AR4 WG1 Tables 2.14 and 2.15 and AR5 WG1 Table 8.A.1 [from memory; the AR4 figures of R32, R410A and
// R134a agree with those in the fluid files of CoolProp 8.0.0]. Safety classes: ISO 817 [from memory].
static R290: Facts = Facts {
    substance: "propane",
    molar_mass_g_per_mol: 44.09562,
    critical_temperature_c: 369.89 - KELVIN,
    critical_pressure_kpa: 4251.2,
    pseudo_pure: false,
    safety_class: SafetyClass::A3,
    gwp100_ar4: Some(3.3),
    gwp100_ar5: None,
    gwp_source: "IPCC AR4 WG1 Table 2.15, indirect effect only; AR5 lists none",
    caution: CAUTION_A3,
};
static R32: Facts = Facts {
    substance: "difluoromethane",
    molar_mass_g_per_mol: 52.024,
    critical_temperature_c: 351.255 - KELVIN,
    critical_pressure_kpa: 5782.0,
    pseudo_pure: false,
    safety_class: SafetyClass::A2L,
    gwp100_ar4: Some(675.0),
    gwp100_ar5: Some(677.0),
    gwp_source: "IPCC AR4 WG1 Table 2.14; AR5 WG1 Table 8.A.1",
    caution: CAUTION_A2L,
};
static R410A: Facts = Facts {
    substance: "R32 and R125, half and half by mass",
    molar_mass_g_per_mol: 72.5854,
    critical_temperature_c: 344.494 - KELVIN,
    critical_pressure_kpa: 4901.2,
    pseudo_pure: true,
    safety_class: SafetyClass::A1,
    gwp100_ar4: Some(2087.5),
    gwp100_ar5: Some(1923.5),
    gwp_source: "mass-weighted from R32 (675; 677) and R125 (3500; 3170): IPCC AR4 WG1 Table 2.14; \
        AR5 WG1 Table 8.A.1",
    caution: CAUTION_A1,
};
static R134A: Facts = Facts {
    substance: "1,1,1,2-tetrafluoroethane",
    molar_mass_g_per_mol: 102.032,
    critical_temperature_c: 374.21 - KELVIN,
    critical_pressure_kpa: 4059.28,
    pseudo_pure: false,
    safety_class: SafetyClass::A1,
    gwp100_ar4: Some(1430.0),
    gwp100_ar5: Some(1300.0),
    gwp_source: "IPCC AR4 WG1 Table 2.14; AR5 WG1 Table 8.A.1",
    caution: CAUTION_A1,
};
static R1234YF: Facts = Facts {
    substance: "2,3,3,3-tetrafluoropropene",
    molar_mass_g_per_mol: 114.0416,
    critical_temperature_c: 367.85 - KELVIN,
    critical_pressure_kpa: 3384.4,
    pseudo_pure: false,
    safety_class: SafetyClass::A2L,
    gwp100_ar4: None,
    gwp100_ar5: Some(1.0),
    gwp_source: "AR5 WG1 Table 8.A.1 gives 'less than 1', held here as 1; AR4 lists none",
    caution: CAUTION_A2L,
};
static R600A: Facts = Facts {
    substance: "isobutane",
    molar_mass_g_per_mol: 58.1222,
    critical_temperature_c: 407.817 - KELVIN,
    critical_pressure_kpa: 3629.0,
    pseudo_pure: false,
    safety_class: SafetyClass::A3,
    gwp100_ar4: None,
    gwp100_ar5: None,
    gwp_source: "neither IPCC AR4 nor AR5 lists isobutane; Regulation (EU) 517/2014 Annex IV takes 3",
    caution: CAUTION_A3,
};

/// The facts of one refrigerant.
pub(super) fn of(refrigerant: Refrigerant) -> &'static Facts {
    match refrigerant {
        Refrigerant::R290 => &R290,
        Refrigerant::R32 => &R32,
        Refrigerant::R410A => &R410A,
        Refrigerant::R134a => &R134A,
        Refrigerant::R1234yf => &R1234YF,
        Refrigerant::R600a => &R600A,
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn every_fluid_that_burns_says_so() {
        for refrigerant in Refrigerant::ALL {
            let facts = refrigerant.facts();
            assert_eq!(
                facts.safety_class.flammable(),
                facts.caution.contains("flammable (A"),
                "{refrigerant}"
            );
            assert!(facts.caution.contains("licensed"));
        }
    }

    #[test]
    fn molar_masses_follow_from_atomic_weights() {
        // C 12.011, H 1.008, F 18.998 (IUPAC 2021 abridged), g/mol; R410A: 0.5/M(R32) + 0.5/M(R125).
        // 0.002 g/mol: papers round, and use the atomic weights of their own year.
        let sum = |c: f64, h: f64, f: f64| 12.011 * c + 1.008 * h + 18.998 * f;
        let r125 = sum(2.0, 1.0, 5.0);
        let r32 = sum(1.0, 2.0, 2.0);
        for (refrigerant, expected) in [
            (Refrigerant::R290, sum(3.0, 8.0, 0.0)),
            (Refrigerant::R32, r32),
            (Refrigerant::R410A, 1.0 / (0.5 / r32 + 0.5 / r125)),
            (Refrigerant::R134a, sum(2.0, 2.0, 4.0)),
            (Refrigerant::R1234yf, sum(3.0, 2.0, 4.0)),
            (Refrigerant::R600a, sum(4.0, 10.0, 0.0)),
        ] {
            let held = refrigerant.facts().molar_mass_g_per_mol;
            assert!(
                (held - expected).abs() < 0.002,
                "{refrigerant}: {held} against {expected}"
            );
        }
    }
}
