//! States of a refrigerant.

/// One state of a refrigerant.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct StatePoint {
    /// Temperature, °C.
    pub temperature_c: f64,
    /// Pressure, kPa absolute.
    pub pressure_kpa: f64,
    /// Specific enthalpy, kJ/kg (200 kJ/kg for saturated liquid at 0 °C).
    pub enthalpy_kj_per_kg: f64,
    /// Specific entropy, kJ/kgK (1 kJ/kgK for saturated liquid at 0 °C).
    pub entropy_kj_per_kg_k: f64,
    /// Density, kg/m³.
    pub density_kg_per_m3: f64,
    /// Mass fraction of vapour, 0 to 1, in a saturated state; absent in a single phase.
    pub quality: Option<f64>,
}

/// Liquid and vapour in equilibrium.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Saturation {
    /// Temperature, °C.
    pub temperature_c: f64,
    /// Pressure, kPa absolute.
    pub pressure_kpa: f64,
    /// Saturated liquid, quality 0.
    pub liquid: StatePoint,
    /// Saturated vapour, quality 1.
    pub vapour: StatePoint,
}

impl Saturation {
    /// The mixture that holds the mass fraction `quality` of vapour.
    pub(super) fn mixture(&self, quality: f64) -> StatePoint {
        let blend = |liquid: f64, vapour: f64| liquid + quality * (vapour - liquid);
        let (liquid, vapour) = (&self.liquid, &self.vapour);
        StatePoint {
            temperature_c: self.temperature_c,
            pressure_kpa: self.pressure_kpa,
            enthalpy_kj_per_kg: blend(liquid.enthalpy_kj_per_kg, vapour.enthalpy_kj_per_kg),
            entropy_kj_per_kg_k: blend(liquid.entropy_kj_per_kg_k, vapour.entropy_kj_per_kg_k),
            density_kg_per_m3: 1.0
                / blend(
                    1.0 / liquid.density_kg_per_m3,
                    1.0 / vapour.density_kg_per_m3,
                ),
            quality: Some(quality),
        }
    }
}
