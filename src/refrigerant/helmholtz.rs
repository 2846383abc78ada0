//! The one place that sees feos: coefficients in, pressure, enthalpy and entropy at (T, ρ) out.
//!
//! feos takes the molar gas constant of the 2019 SI; each publication states its own, older one, from
//! which it differs by about one part in a million. A Helmholtz equation is fitted in its reduced
//! form, so that going back to the published constant multiplies pressure, enthalpy and entropy by
//! the same factor and leaves densities alone. That is done here, once.

use super::{PropertyError, Refrigerant};
use feos::core::parameter::{Parameters, PureRecord};
use feos::core::{Contributions, PhaseEquilibrium, SolverOptions, State};
use feos::multiparameter::{MultiParameter, MultiParameterEquationOfState, MultiParameterRecord};
use quantity::{JOULE, KELVIN, METER, MOL, PASCAL, RGAS};
use serde::Deserialize;

/// One coefficient file; `record` is what feos reads, the rest is ours.
#[derive(Deserialize)]
struct CoefficientFile {
    fluid: Refrigerant,
    gas_constant_j_per_mol_k: f64,
    critical_temperature_k: f64,
    critical_pressure_kpa: f64,
    critical_density_mol_per_m3: f64,
    record: PureRecord<MultiParameterRecord, ()>,
}

/// The text of a fluid's coefficient file, named by its publication.
fn coefficient_text(refrigerant: Refrigerant) -> &'static str {
    match refrigerant {
        Refrigerant::R290 => include_str!("coefficients/lemmon_2009_r290.json"),
        Refrigerant::R32 => include_str!("coefficients/tillner_roth_1997_r32.json"),
        Refrigerant::R410A => include_str!("coefficients/lemmon_2003_r410a.json"),
        Refrigerant::R134a => include_str!("coefficients/tillner_roth_1994_r134a.json"),
        Refrigerant::R1234yf => include_str!("coefficients/lemmon_2022_r1234yf.json"),
        Refrigerant::R600a => include_str!("coefficients/buecker_2006_r600a.json"),
    }
}

type FeosState<'a> = State<&'a MultiParameterEquationOfState>;

/// The Helmholtz-energy equation of one fluid.
pub(super) struct Helmholtz {
    equation: MultiParameterEquationOfState,
    refrigerant: Refrigerant,
    /// Published gas constant over the one feos uses.
    gas_constant_ratio: f64,
    /// kg/mol
    molar_mass: f64,
    /// Critical temperature, K.
    pub critical_temperature_k: f64,
    /// Critical pressure, kPa.
    pub critical_pressure_kpa: f64,
    /// Critical density, kg/m³.
    pub critical_density: f64,
}

/// One phase at given temperature and density; enthalpy and entropy with the publication's own zero.
#[derive(Clone, Copy, Debug)]
pub(super) struct Phase {
    /// K
    pub temperature_k: f64,
    /// kg/m³
    pub density: f64,
    /// kPa
    pub pressure: f64,
    /// kJ/kg
    pub enthalpy: f64,
    /// kJ/kgK
    pub entropy: f64,
}

impl Helmholtz {
    /// Reads the coefficients of one fluid.
    pub fn new(refrigerant: Refrigerant) -> Result<Helmholtz, PropertyError> {
        let damaged = |detail: String| PropertyError::Coefficients {
            refrigerant,
            detail,
        };
        let file: CoefficientFile = serde_json::from_str(coefficient_text(refrigerant))
            .map_err(|error| damaged(error.to_string()))?;
        if file.fluid != refrigerant {
            return Err(damaged(format!("it is the file of {}", file.fluid)));
        }
        let molar_mass = file.record.molarweight / 1000.0;
        let parameters =
            Parameters::new_pure(file.record).map_err(|error| damaged(error.to_string()))?;
        let feos_gas_constant = RGAS.convert_into(JOULE / (MOL * KELVIN));
        Ok(Helmholtz {
            // panics on a term it does not know; the files are built in and the tests load every one
            equation: MultiParameter::new(parameters),
            refrigerant,
            gas_constant_ratio: file.gas_constant_j_per_mol_k / feos_gas_constant,
            molar_mass,
            critical_temperature_k: file.critical_temperature_k,
            critical_pressure_kpa: file.critical_pressure_kpa,
            critical_density: file.critical_density_mol_per_m3 * molar_mass,
        })
    }

    /// The fluid.
    pub fn refrigerant(&self) -> Refrigerant {
        self.refrigerant
    }

    fn state(&self, temperature_k: f64, density: f64) -> Option<FeosState<'_>> {
        let molar = density / self.molar_mass * MOL / METER.powi::<3>();
        State::new_pure(&&self.equation, temperature_k * KELVIN, molar).ok()
    }

    /// Pressure (kPa) and its slope with density (kPa per kg/m³) at constant temperature.
    pub fn pressure_and_slope(&self, temperature_k: f64, density: f64) -> Option<(f64, f64)> {
        let state = self.state(temperature_k, density)?;
        // the second derivative first: feos then has the first one at hand
        let slope = state
            .dp_drho(Contributions::Total)
            .convert_into(PASCAL * METER.powi::<3>() / MOL);
        let pressure = state.pressure(Contributions::Total).convert_into(PASCAL);
        let ratio = self.gas_constant_ratio / 1000.0;
        Some((pressure * ratio, slope * ratio / self.molar_mass))
    }

    /// The phase at temperature and density.
    pub fn phase(&self, temperature_k: f64, density: f64) -> Option<Phase> {
        Some(self.read(&self.state(temperature_k, density)?, density))
    }

    /// The phase and its isobaric heat capacity, kJ/kgK.
    pub fn phase_and_heat_capacity(
        &self,
        temperature_k: f64,
        density: f64,
    ) -> Option<(Phase, f64)> {
        let state = self.state(temperature_k, density)?;
        // the heat capacity first: feos then has the lower derivatives at hand
        let heat_capacity = state
            .molar_isobaric_heat_capacity(Contributions::Total)
            .convert_into(JOULE / (MOL * KELVIN));
        Some((
            self.read(&state, density),
            heat_capacity * self.per_kilogram(),
        ))
    }

    fn read(&self, state: &FeosState<'_>, density: f64) -> Phase {
        let total = Contributions::Total;
        Phase {
            temperature_k: state.temperature.convert_into(KELVIN),
            density,
            pressure: state.pressure(total).convert_into(PASCAL) * self.gas_constant_ratio / 1000.0,
            enthalpy: state.molar_enthalpy(total).convert_into(JOULE / MOL) * self.per_kilogram(),
            entropy: state
                .molar_entropy(total)
                .convert_into(JOULE / (MOL * KELVIN))
                * self.per_kilogram(),
        }
    }

    /// From J/mol with the gas constant of feos to kJ/kg with the published one.
    fn per_kilogram(&self) -> f64 {
        self.gas_constant_ratio / (1000.0 * self.molar_mass)
    }

    /// Liquid and vapour in equilibrium at a temperature below the critical one: equal pressure and
    /// equal Gibbs energy. For a pseudo-pure fluid this one pressure stands for bubble and dew point.
    ///
    /// Inside the dome these equations swing so widely that equal pressure and Gibbs energy are also met
    /// by densities that are no phases; started without a guess, the solver has been seen to end there
    /// (R290 and R1234yf, a few of 100 000 temperatures, near 80 °C). So a guess of the densities (liquid, vapour; kg/m³) is needed, and a solution
    /// that is further than `nearness` from it, relatively, is refused.
    pub fn equilibrium(
        &self,
        temperature_k: f64,
        (liquid, vapour): (f64, f64),
        nearness: f64,
    ) -> Option<(Phase, Phase)> {
        let guess = PhaseEquilibrium::two_phase(
            self.state(temperature_k, vapour)?,
            self.state(temperature_k, liquid)?,
        );
        let found = self.solve_equilibrium(temperature_k, Some(&guess))?;
        let near = |found: f64, guess: f64| (found / guess - 1.0).abs() <= nearness;
        (near(found.0.density, liquid) && near(found.1.density, vapour)).then_some(found)
    }

    /// The equilibrium without a guess, safe far below the critical point, where vapour is nearly ideal.
    pub fn cold_equilibrium(&self, temperature_k: f64) -> Option<(Phase, Phase)> {
        self.solve_equilibrium(temperature_k, None)
    }

    fn solve_equilibrium(
        &self,
        temperature_k: f64,
        guess: Option<&PhaseEquilibrium<&MultiParameterEquationOfState, 2>>,
    ) -> Option<(Phase, Phase)> {
        let (_, densities) = PhaseEquilibrium::pure_t(
            &&self.equation,
            temperature_k * KELVIN,
            guess,
            SolverOptions::default(),
        )
        .ok()?;
        let [vapour, liquid] = densities
            .map(|density| density.convert_into(MOL / METER.powi::<3>()) * self.molar_mass);
        Some((
            self.phase(temperature_k, liquid)?,
            self.phase(temperature_k, vapour)?,
        ))
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn every_coefficient_file_is_read_and_agrees_with_the_facts() {
        for refrigerant in Refrigerant::ALL {
            let held = Helmholtz::new(refrigerant).unwrap();
            let facts = refrigerant.facts();
            assert_eq!(held.refrigerant(), refrigerant);
            assert!((held.molar_mass * 1000.0 - facts.molar_mass_g_per_mol).abs() < 1e-9);
            assert_eq!(
                held.critical_temperature_k - 273.15,
                facts.critical_temperature_c
            );
            assert_eq!(held.critical_pressure_kpa, facts.critical_pressure_kpa);
        }
    }
}
