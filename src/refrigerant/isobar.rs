//! Liquid and vapour beside a saturation.
//!
//! The saturation at a pressure brackets both phases on its isobar, so that neither density nor
//! temperature can be sought in the wrong phase.

use super::equation::{
    HIGHEST_TEMPERATURE_C, LOWEST_TEMPERATURE_C, TEMPERATURE_TOLERANCE, ZERO_CELSIUS_K,
};
use super::solve::increasing_root;
use super::{Equation, PropertyError, Saturation, StatePoint};

/// Relative step at which the density on an isotherm counts as found.
const DENSITY_TOLERANCE: f64 = 1e-11;
/// Within this distance of the saturation temperature, K, a state is taken as saturated.
const SATURATION_WIDTH_K: f64 = 1e-7;
/// Least fraction of the saturated vapour's density × (saturation temperature / temperature) that
/// superheated vapour on the same isobar can have: the ratio of compressibilities, above 0.27 even at
/// the critical point.
const LEAST_VAPOUR_FRACTION: f64 = 0.2;

/// What is known of a state on an isobar beside its pressure.
#[derive(Clone, Copy)]
enum Known {
    Enthalpy(f64),
    Entropy(f64),
}

impl Known {
    fn wanted(self) -> f64 {
        match self {
            Known::Enthalpy(value) | Known::Entropy(value) => value,
        }
    }

    fn of(self, point: &StatePoint) -> f64 {
        match self {
            Known::Enthalpy(_) => point.enthalpy_kj_per_kg,
            Known::Entropy(_) => point.entropy_kj_per_kg_k,
        }
    }

    /// Slope with temperature at constant pressure, from the isobaric heat capacity.
    fn slope(self, heat_capacity: f64, temperature_k: f64) -> f64 {
        match self {
            Known::Enthalpy(_) => heat_capacity,
            Known::Entropy(_) => heat_capacity / temperature_k,
        }
    }

    fn label(self) -> (&'static str, &'static str) {
        match self {
            Known::Enthalpy(_) => ("enthalpy", "kJ/kg"),
            Known::Entropy(_) => ("entropy", "kJ/kgK"),
        }
    }
}

impl Equation {
    /// [`Equation::at_temperature_pressure`] on the isobar of a saturation that is already known.
    ///
    /// # Errors
    ///
    /// [`PropertyError`] outside [`Equation::temperature_range_c`].
    pub fn beside_at_temperature(
        &self,
        saturation: &Saturation,
        temperature_c: f64,
    ) -> Result<StatePoint, PropertyError> {
        self.single_phase(saturation, self.check_temperature(temperature_c)?)
    }

    fn single_phase(
        &self,
        saturation: &Saturation,
        temperature_c: f64,
    ) -> Result<StatePoint, PropertyError> {
        let above_saturation = temperature_c - saturation.temperature_c;
        if above_saturation.abs() <= SATURATION_WIDTH_K {
            return Ok(saturation.vapour);
        }
        let temperature_k = temperature_c + ZERO_CELSIUS_K;
        let vapour = above_saturation > 0.0;
        self.density(saturation, vapour, temperature_k, None)
            .and_then(|density| self.helmholtz.phase(temperature_k, density))
            .map(|phase| StatePoint {
                temperature_c,
                pressure_kpa: saturation.pressure_kpa,
                ..self.point(phase, None)
            })
            .ok_or_else(|| {
                self.not_converged(
                    "density",
                    saturation.pressure_kpa,
                    Some((temperature_c, "°C")),
                )
            })
    }

    /// [`Equation::at_pressure_entropy`] on the isobar of a saturation that is already known.
    ///
    /// # Errors
    ///
    /// [`PropertyError`] when the resulting temperature lies outside the range.
    pub fn beside_at_entropy(
        &self,
        saturation: &Saturation,
        entropy_kj_per_kg_k: f64,
    ) -> Result<StatePoint, PropertyError> {
        self.beside(saturation, Known::Entropy(entropy_kj_per_kg_k))
    }

    /// [`Equation::at_pressure_enthalpy`] on the isobar of a saturation that is already known.
    ///
    /// # Errors
    ///
    /// [`PropertyError`] when the resulting temperature lies outside the range.
    pub fn beside_at_enthalpy(
        &self,
        saturation: &Saturation,
        enthalpy_kj_per_kg: f64,
    ) -> Result<StatePoint, PropertyError> {
        self.beside(saturation, Known::Enthalpy(enthalpy_kj_per_kg))
    }

    fn beside(&self, saturation: &Saturation, known: Known) -> Result<StatePoint, PropertyError> {
        let wanted = known.wanted();
        let (liquid, vapour) = (known.of(&saturation.liquid), known.of(&saturation.vapour));
        if (liquid..=vapour).contains(&wanted) {
            return Ok(saturation.mixture((wanted - liquid) / (vapour - liquid)));
        }
        let is_vapour = wanted > vapour;
        let saturated_k = saturation.temperature_c + ZERO_CELSIUS_K;
        let bracket = if is_vapour {
            (saturated_k, HIGHEST_TEMPERATURE_C + ZERO_CELSIUS_K)
        } else {
            (LOWEST_TEMPERATURE_C + ZERO_CELSIUS_K, saturated_k)
        };
        let mut density = None;
        let found = increasing_root(
            bracket,
            saturated_k,
            TEMPERATURE_TOLERANCE,
            |temperature_k| {
                density = Some(self.density(saturation, is_vapour, temperature_k, density)?);
                let (phase, heat_capacity) = self
                    .helmholtz
                    .phase_and_heat_capacity(temperature_k, density?)?;
                let value = known.of(&self.point(phase, None)) - wanted;
                Some((value, known.slope(heat_capacity, temperature_k)))
            },
        );
        match found {
            Some(temperature_k) => self.single_phase(saturation, temperature_k - ZERO_CELSIUS_K),
            None => {
                let coldest = self.beside_at_temperature(saturation, LOWEST_TEMPERATURE_C)?;
                let hottest = self.beside_at_temperature(saturation, HIGHEST_TEMPERATURE_C)?;
                let range = (known.of(&coldest), known.of(&hottest));
                PropertyError::check(self.refrigerant(), known.label(), wanted, range)?;
                let (_, unit) = known.label();
                Err(self.not_converged(
                    "temperature",
                    saturation.pressure_kpa,
                    Some((wanted, unit)),
                ))
            }
        }
    }

    /// Density of liquid or vapour at a temperature on the isobar of a saturation.
    fn density(
        &self,
        saturation: &Saturation,
        vapour: bool,
        temperature_k: f64,
        start: Option<f64>,
    ) -> Option<f64> {
        let (bracket, usual_start) = if vapour {
            let saturated = saturation.vapour.density_kg_per_m3;
            let ideal = saturated * (saturation.temperature_c + ZERO_CELSIUS_K) / temperature_k;
            ((LEAST_VAPOUR_FRACTION * ideal, saturated), ideal)
        } else {
            // Not the liquid of this isobar: an isotherm crosses the dome in loops, and only beyond the
            // saturated liquid of its own temperature is there no second density of the same pressure.
            let saturated = self.saturated_phases(temperature_k).ok()?.0.density;
            ((saturated, self.greatest_liquid_density), saturated)
        };
        increasing_root(
            bracket,
            start.unwrap_or(usual_start),
            DENSITY_TOLERANCE,
            |density| {
                let (pressure, slope) =
                    self.helmholtz.pressure_and_slope(temperature_k, density)?;
                Some((pressure - saturation.pressure_kpa, slope))
            },
        )
    }
}
