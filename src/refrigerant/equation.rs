//! The exact properties of one refrigerant.
//!
//! Every state is found on its isobar: the saturation at a pressure brackets both phases beside it, so
//! that neither density nor temperature can be sought in the wrong phase.

use super::helmholtz::{Helmholtz, Phase};
use super::solve::increasing_root;
use super::{PropertyError, Refrigerant};

const ZERO_CELSIUS_K: f64 = 273.15;

/// Reference state of the International Institute of Refrigeration: saturated liquid at 0 °C has
/// 200 kJ/kg and 1 kJ/kgK.
const REFERENCE_TEMPERATURE_C: f64 = 0.0;
const REFERENCE_ENTHALPY_KJ_PER_KG: f64 = 200.0;
const REFERENCE_ENTROPY_KJ_PER_KG_K: f64 = 1.0;

/// Lowest temperature offered, °C. All six equations reach lower; the pseudo-pure one of R410A ends at
/// −73.15 °C, and no heat pump of a home works near here.
const LOWEST_TEMPERATURE_C: f64 = -70.0;

/// Highest temperature of superheated vapour offered, °C. It lies above the last measured temperature
/// of some publications (R1234yf 137 °C, R32 162 °C, R134a 182 °C): the cycle's least efficient corners
/// lead there, and vapour at these densities is governed by its ideal-gas heat capacity, which all six
/// publications extrapolate smoothly.
const HIGHEST_TEMPERATURE_C: f64 = 250.0;

/// Saturation is offered up to this far below the critical temperature, K; closer, the two densities
/// merge and the equilibrium is poorly conditioned.
const CRITICAL_MARGIN_K: f64 = 0.5;

/// Relative step at which the density on an isotherm counts as found.
const DENSITY_TOLERANCE: f64 = 1e-11;
/// Relative step (of the absolute temperature) at which the temperature on an isobar counts as found.
const TEMPERATURE_TOLERANCE: f64 = 1e-9;
/// Within this distance of the saturation temperature, K, a state is taken as saturated.
const SATURATION_WIDTH_K: f64 = 1e-7;
/// Least fraction of the saturated vapour's density × (saturation temperature / temperature) that
/// superheated vapour on the same isobar can have: the ratio of compressibilities, above 0.27 even at
/// the critical point.
const LEAST_VAPOUR_FRACTION: f64 = 0.2;
/// Greatest liquid density, relative to saturated liquid at the lowest temperature: the pressures
/// offered compress it by less than two percent.
const GREATEST_LIQUID_FRACTION: f64 = 1.05;

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
    fn mixture(&self, quality: f64) -> StatePoint {
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
    helmholtz: Helmholtz,
    enthalpy_offset: f64,
    entropy_offset: f64,
    /// Saturated states at the two ends of the range, without offset.
    ends: [Phase; 2],
    greatest_liquid_density: f64,
}

impl Equation {
    /// Reads the coefficients of a refrigerant and sets its reference state.
    ///
    /// # Errors
    ///
    /// [`PropertyError::Coefficients`] if a built-in file is damaged (the tests load every one).
    pub fn new(refrigerant: Refrigerant) -> Result<Equation, PropertyError> {
        let helmholtz = Helmholtz::new(refrigerant)?;
        let (reference, _) = helmholtz.equilibrium(REFERENCE_TEMPERATURE_C + ZERO_CELSIUS_K)?;
        let (coldest, _) = helmholtz.equilibrium(LOWEST_TEMPERATURE_C + ZERO_CELSIUS_K)?;
        let (hottest, _) =
            helmholtz.equilibrium(helmholtz.critical_temperature_k - CRITICAL_MARGIN_K)?;
        Ok(Equation {
            enthalpy_offset: REFERENCE_ENTHALPY_KJ_PER_KG - reference.enthalpy,
            entropy_offset: REFERENCE_ENTROPY_KJ_PER_KG_K - reference.entropy,
            ends: [coldest, hottest],
            greatest_liquid_density: GREATEST_LIQUID_FRACTION * coldest.density,
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
        let (liquid, vapour) = self.helmholtz.equilibrium(temperature_c + ZERO_CELSIUS_K)?;
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
                let (liquid, vapour) = self.helmholtz.equilibrium(temperature_k).ok()?;
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
            let saturated = self.helmholtz.equilibrium(temperature_k).ok()?.0.density;
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

    fn point(&self, phase: Phase, quality: Option<f64>) -> StatePoint {
        StatePoint {
            temperature_c: phase.temperature_k - ZERO_CELSIUS_K,
            pressure_kpa: phase.pressure,
            enthalpy_kj_per_kg: phase.enthalpy + self.enthalpy_offset,
            entropy_kj_per_kg_k: phase.entropy + self.entropy_offset,
            density_kg_per_m3: phase.density,
            quality,
        }
    }

    fn check_temperature(&self, temperature_c: f64) -> Result<f64, PropertyError> {
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

    fn not_converged(
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
