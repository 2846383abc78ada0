//! The exact properties of one refrigerant: its ranges, reference state and saturation.
//!
//! Every other state is found on its isobar, see `isobar.rs`.

use super::dome::Dome;
use super::helmholtz::{Helmholtz, Phase};
use super::solve::increasing_root;
use super::{PropertyError, Refrigerant, Saturation, StatePoint};

pub(super) const ZERO_CELSIUS_K: f64 = 273.15;

/// Reference state of the International Institute of Refrigeration: saturated liquid at 0 °C has
/// 200 kJ/kg and 1 kJ/kgK.
const REFERENCE_TEMPERATURE_C: f64 = 0.0;
const REFERENCE_ENTHALPY_KJ_PER_KG: f64 = 200.0;
const REFERENCE_ENTROPY_KJ_PER_KG_K: f64 = 1.0;

/// Lowest temperature offered, °C. All six equations reach lower; the pseudo-pure one of R410A ends at
/// −73.15 °C, and no heat pump of a home works near here.
pub(super) const LOWEST_TEMPERATURE_C: f64 = -70.0;

/// Highest temperature of superheated vapour offered, °C. Some publications end lower (R1234yf 137 °C, R32
/// 162 °C, R134a 182 °C); beyond, the formula extrapolates, as thin vapour is governed by its ideal-gas heat
/// capacity. Only hopeless cycles lead there, and the cycle warns of a hot discharge long before.
pub(super) const HIGHEST_TEMPERATURE_C: f64 = 250.0;

/// Saturation is offered up to this far below the critical temperature, K; closer, the two densities
/// merge and the equilibrium is poorly conditioned.
const CRITICAL_MARGIN_K: f64 = 0.5;

/// The dome of a diagram reaches up to this far below the critical temperature, K.
const DOME_MARGIN_K: f64 = 0.1;
/// Saturation is followed this much beyond both ends of what is offered, K, so that rounding at an end does
/// not leave the line.
const BEYOND_THE_ENDS_K: f64 = 1e-3;
/// More points than any picture needs.
const MOST_DOME_POINTS: f64 = 1000.0;

/// Relative step (of the absolute temperature) at which the temperature on an isobar counts as found.
pub(super) const TEMPERATURE_TOLERANCE: f64 = 1e-9;
/// Greatest liquid density, relative to saturated liquid at the lowest temperature: the pressures
/// offered compress it by less than two percent.
const GREATEST_LIQUID_FRACTION: f64 = 1.05;

/// The reference equation of one refrigerant, exact and slow (tens of microseconds a state).
///
/// Covers saturated, superheated and subcooled states from −70 °C to 0.5 K below the critical
/// temperature and the pressures that belong to it; vapour up to 250 °C. Supercritical pressures are
/// refused: no machine held here works there.
///
/// ```
/// use winterledger::refrigerant::{Equation, Refrigerant};
/// let propane = Equation::new(Refrigerant::R290)?;
/// let freezing = propane.saturation(0.0)?;
/// assert!((freezing.liquid.enthalpy_kj_per_kg - 200.0).abs() < 1e-9); // by definition
/// assert!(propane.saturation(97.0).is_err()); // critical at 96.74 °C
/// # Ok::<(), winterledger::refrigerant::PropertyError>(())
/// ```
pub struct Equation {
    pub(super) helmholtz: Helmholtz,
    dome: Dome,
    enthalpy_offset: f64,
    entropy_offset: f64,
    /// Saturated states at the two ends of the range, without offset.
    ends: [Phase; 2],
    pub(super) greatest_liquid_density: f64,
}

impl Equation {
    /// Reads the coefficients of a refrigerant and sets its reference state.
    ///
    /// # Errors
    ///
    /// [`PropertyError::Coefficients`] if a built-in file is damaged (the tests load every one).
    pub fn new(refrigerant: Refrigerant) -> Result<Equation, PropertyError> {
        let helmholtz = Helmholtz::new(refrigerant)?;
        let lowest_k = LOWEST_TEMPERATURE_C + ZERO_CELSIUS_K;
        let critical_k = helmholtz.critical_temperature_k;
        let dome = Dome::follow(
            &helmholtz,
            lowest_k - BEYOND_THE_ENDS_K,
            critical_k - DOME_MARGIN_K + BEYOND_THE_ENDS_K,
        )?;
        let at = |temperature_k: f64| dome.equilibrium(&helmholtz, temperature_k);
        let (reference, _) = at(REFERENCE_TEMPERATURE_C + ZERO_CELSIUS_K)?;
        let (coldest, _) = at(lowest_k)?;
        let (hottest, _) = at(critical_k - CRITICAL_MARGIN_K)?;
        Ok(Equation {
            enthalpy_offset: REFERENCE_ENTHALPY_KJ_PER_KG - reference.enthalpy,
            entropy_offset: REFERENCE_ENTROPY_KJ_PER_KG_K - reference.entropy,
            ends: [coldest, hottest],
            greatest_liquid_density: GREATEST_LIQUID_FRACTION * coldest.density,
            dome,
            helmholtz,
        })
    }

    /// The fluid.
    pub fn refrigerant(&self) -> Refrigerant {
        self.helmholtz.refrigerant()
    }

    /// Critical temperature, °C.
    pub fn critical_temperature_c(&self) -> f64 {
        self.helmholtz.critical_temperature_k - ZERO_CELSIUS_K
    }

    /// Critical pressure, kPa.
    pub fn critical_pressure_kpa(&self) -> f64 {
        self.helmholtz.critical_pressure_kpa
    }

    /// The critical state, at the critical temperature and density of the publication.
    ///
    /// # Errors
    ///
    /// [`PropertyError::NotConverged`] if the equation cannot be evaluated there.
    pub fn critical_point(&self) -> Result<StatePoint, PropertyError> {
        let helmholtz = &self.helmholtz;
        helmholtz
            .phase(helmholtz.critical_temperature_k, helmholtz.critical_density)
            .map(|phase| self.point(phase, None))
            .ok_or_else(|| self.not_converged("critical state", self.critical_pressure_kpa(), None))
    }

    /// Lowest and highest temperature of saturation offered, °C.
    pub fn saturation_range_c(&self) -> (f64, f64) {
        (
            LOWEST_TEMPERATURE_C,
            self.critical_temperature_c() - CRITICAL_MARGIN_K,
        )
    }

    /// Lowest and highest pressure offered, kPa.
    pub fn pressure_range_kpa(&self) -> (f64, f64) {
        (self.ends[0].pressure, self.ends[1].pressure)
    }

    /// Lowest and highest temperature offered in a single phase, °C.
    pub fn temperature_range_c(&self) -> (f64, f64) {
        (LOWEST_TEMPERATURE_C, HIGHEST_TEMPERATURE_C)
    }

    /// Liquid and vapour in equilibrium at a temperature in °C. A blend that is treated as
    /// pseudo-pure (R410A) has one pressure here; its bubble and dew points differ by about 0.1 K.
    ///
    /// # Errors
    ///
    /// [`PropertyError::OutsideRange`] outside [`Equation::saturation_range_c`],
    /// [`PropertyError::NotConverged`] if no equilibrium is found.
    pub fn saturation(&self, temperature_c: f64) -> Result<Saturation, PropertyError> {
        let temperature_c = PropertyError::check(
            self.refrigerant(),
            ("saturation temperature", "°C"),
            temperature_c,
            self.saturation_range_c(),
        )?;
        self.equilibrium(temperature_c)
    }

    /// Saturations from a temperature in °C to just below the critical point, closer together towards
    /// it: the dome of a pressure–enthalpy diagram.
    ///
    /// # Errors
    ///
    /// As [`Equation::saturation`]; also when fewer than two are asked for.
    pub fn dome(&self, from_c: f64, count: usize) -> Result<Vec<Saturation>, PropertyError> {
        let first = self.saturation(from_c)?.temperature_c;
        let what = ("number of points on the dome", "");
        let count_range = (2.0, MOST_DOME_POINTS);
        let last = PropertyError::check(self.refrigerant(), what, count as f64, count_range)? - 1.0;
        let top = self.critical_temperature_c() - DOME_MARGIN_K;
        (0..count)
            // towards its top the dome is as flat as the cube of the distance from its middle
            .map(|index| top - (top - first) * (1.0 - index as f64 / last).powi(3))
            .map(|temperature_c| self.equilibrium(temperature_c))
            .collect()
    }

    fn equilibrium(&self, temperature_c: f64) -> Result<Saturation, PropertyError> {
        let (liquid, vapour) = self.saturated_phases(temperature_c + ZERO_CELSIUS_K)?;
        Ok(Saturation {
            temperature_c,
            pressure_kpa: vapour.pressure,
            liquid: StatePoint {
                // both phases share one pressure; the vapour's has the smaller rounding error
                pressure_kpa: vapour.pressure,
                temperature_c,
                ..self.point(liquid, Some(0.0))
            },
            vapour: StatePoint {
                temperature_c,
                ..self.point(vapour, Some(1.0))
            },
        })
    }

    /// Liquid and vapour in equilibrium at a pressure in kPa.
    ///
    /// # Errors
    ///
    /// As [`Equation::saturation`], the bounds being [`Equation::pressure_range_kpa`].
    pub fn saturation_at_pressure(&self, pressure_kpa: f64) -> Result<Saturation, PropertyError> {
        let pressure_kpa = self.check_pressure(pressure_kpa)?;
        // ln p is nearly straight in 1/T; Newton on it with the slope of Clausius and Clapeyron
        let [cold, hot] = self
            .ends
            .map(|end| (end.pressure.ln(), 1.0 / end.temperature_k));
        let wanted = pressure_kpa.ln();
        let start = 1.0 / (cold.1 + (hot.1 - cold.1) * (wanted - cold.0) / (hot.0 - cold.0));
        let bracket = (self.ends[0].temperature_k, self.ends[1].temperature_k);
        let temperature_k =
            increasing_root(bracket, start, TEMPERATURE_TOLERANCE, |temperature_k| {
                let (liquid, vapour) = self.saturated_phases(temperature_k).ok()?;
                let slope = (vapour.enthalpy - liquid.enthalpy)
                    / (temperature_k * (1.0 / vapour.density - 1.0 / liquid.density));
                Some((vapour.pressure.ln() - wanted, slope / vapour.pressure))
            })
            .ok_or_else(|| self.not_converged("saturation temperature", pressure_kpa, None))?;
        let (low, high) = self.saturation_range_c();
        self.saturation((temperature_k - ZERO_CELSIUS_K).clamp(low, high))
    }

    /// The saturated mixture at a temperature in °C with the mass fraction `quality` of vapour.
    ///
    /// # Errors
    ///
    /// As [`Equation::saturation`]; also when the quality is not in 0 to 1.
    pub fn at_temperature_quality(
        &self,
        temperature_c: f64,
        quality: f64,
    ) -> Result<StatePoint, PropertyError> {
        let quality =
            PropertyError::check(self.refrigerant(), ("quality", ""), quality, (0.0, 1.0))?;
        Ok(self.saturation(temperature_c)?.mixture(quality))
    }

    /// The liquid or vapour at a temperature in °C and a pressure in kPa. At the saturation
    /// temperature itself, where the two do not fix a state, the saturated vapour is meant.
    ///
    /// # Errors
    ///
    /// [`PropertyError`] outside [`Equation::temperature_range_c`] or [`Equation::pressure_range_kpa`].
    pub fn at_temperature_pressure(
        &self,
        temperature_c: f64,
        pressure_kpa: f64,
    ) -> Result<StatePoint, PropertyError> {
        self.check_temperature(temperature_c)?;
        self.beside_at_temperature(&self.saturation_at_pressure(pressure_kpa)?, temperature_c)
    }

    /// The state of a pressure in kPa and an entropy in kJ/kgK.
    ///
    /// # Errors
    ///
    /// [`PropertyError`] when pressure or resulting temperature lie outside the range.
    pub fn at_pressure_entropy(
        &self,
        pressure_kpa: f64,
        entropy_kj_per_kg_k: f64,
    ) -> Result<StatePoint, PropertyError> {
        self.beside_at_entropy(
            &self.saturation_at_pressure(pressure_kpa)?,
            entropy_kj_per_kg_k,
        )
    }

    /// The state of a pressure in kPa and an enthalpy in kJ/kg.
    ///
    /// # Errors
    ///
    /// [`PropertyError`] when pressure or resulting temperature lie outside the range.
    pub fn at_pressure_enthalpy(
        &self,
        pressure_kpa: f64,
        enthalpy_kj_per_kg: f64,
    ) -> Result<StatePoint, PropertyError> {
        self.beside_at_enthalpy(
            &self.saturation_at_pressure(pressure_kpa)?,
            enthalpy_kj_per_kg,
        )
    }

    /// Saturated liquid and vapour at a temperature in K.
    pub(super) fn saturated_phases(
        &self,
        temperature_k: f64,
    ) -> Result<(Phase, Phase), PropertyError> {
        self.dome.equilibrium(&self.helmholtz, temperature_k)
    }

    pub(super) fn point(&self, phase: Phase, quality: Option<f64>) -> StatePoint {
        StatePoint {
            temperature_c: phase.temperature_k - ZERO_CELSIUS_K,
            pressure_kpa: phase.pressure,
            enthalpy_kj_per_kg: phase.enthalpy + self.enthalpy_offset,
            entropy_kj_per_kg_k: phase.entropy + self.entropy_offset,
            density_kg_per_m3: phase.density,
            quality,
        }
    }

    pub(super) fn check_temperature(&self, temperature_c: f64) -> Result<f64, PropertyError> {
        PropertyError::check(
            self.refrigerant(),
            ("temperature", "°C"),
            temperature_c,
            self.temperature_range_c(),
        )
    }

    fn check_pressure(&self, pressure_kpa: f64) -> Result<f64, PropertyError> {
        PropertyError::check(
            self.refrigerant(),
            ("pressure", "kPa"),
            pressure_kpa,
            self.pressure_range_kpa(),
        )
    }

    pub(super) fn not_converged(
        &self,
        solving: &'static str,
        pressure_kpa: f64,
        second: Option<(f64, &str)>,
    ) -> PropertyError {
        let second = second.map(|(value, unit)| format!(" and {value:.6} {unit}"));
        PropertyError::NotConverged {
            refrigerant: self.refrigerant(),
            solving,
            at: format!("{pressure_kpa:.3} kPa{}", second.unwrap_or_default()),
        }
    }
}
