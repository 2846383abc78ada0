//! Where liquid and vapour meet: guesses of both densities, good enough to start from at any temperature.
//!
//! The line of saturation is followed once from the cold, where the equilibrium is found without a guess,
//! up to the critical point, each step starting from the two before it. Curves through the densities
//! found then start every later solution, which therefore can end only on the same line.

use super::PropertyError;
use super::chebyshev::Curve;
use super::helmholtz::{Helmholtz, Phase};

/// Steps along the line. With as many, straight prediction from the two before misses a density by less
/// than [`STEP_NEARNESS`].
const STEPS: usize = 48;
/// How far a step may land from its prediction, relatively. Densities that are no phases are further.
const STEP_NEARNESS: f64 = 0.1;
/// How far a solution may lie from its guess, relatively; the curves themselves are good to 4e-6.
const NEARNESS: f64 = 1e-3;
/// Coefficients of ln(density) below this are dropped.
const NEGLIGIBLE: f64 = 1e-6;

/// Guesses of the saturated densities of one fluid.
pub(super) struct Dome {
    critical_temperature_k: f64,
    /// ln(kg/m³) of saturated liquid against [`Dome::place`].
    liquid: Curve,
    /// The same of saturated vapour.
    vapour: Curve,
}

impl Dome {
    /// Follows the line of saturation between two temperatures in K, both below the critical one.
    pub fn follow(helmholtz: &Helmholtz, low_k: f64, high_k: f64) -> Result<Dome, PropertyError> {
        let critical_temperature_k = helmholtz.critical_temperature_k;
        let place = |temperature_k| Dome::place(critical_temperature_k, temperature_k);
        let range = (place(high_k), place(low_k));
        let mut liquid: Vec<f64> = Vec::with_capacity(STEPS);
        let mut vapour: Vec<f64> = Vec::with_capacity(STEPS);
        let places: Vec<f64> = Curve::nodes(range, STEPS).collect();
        for (step, &at) in places.iter().enumerate() {
            let temperature_k = critical_temperature_k * (1.0 - at.powi(3));
            let found = if step < 2 {
                helmholtz.cold_equilibrium(temperature_k)
            } else {
                let ahead = (at - places[step - 1]) / (places[step - 1] - places[step - 2]);
                let predict = |line: &[f64]| {
                    (line[step - 1] + ahead * (line[step - 1] - line[step - 2])).exp()
                };
                let guess = (predict(&liquid), predict(&vapour));
                helmholtz.equilibrium(temperature_k, guess, STEP_NEARNESS)
            };
            let (found_liquid, found_vapour) =
                found.ok_or_else(|| not_found(helmholtz, temperature_k))?;
            liquid.push(found_liquid.density.ln());
            vapour.push(found_vapour.density.ln());
        }
        Ok(Dome {
            critical_temperature_k,
            liquid: Curve::through(range, &liquid, NEGLIGIBLE),
            vapour: Curve::through(range, &vapour, NEGLIGIBLE),
        })
    }

    /// Saturated liquid and vapour at a temperature in K.
    pub fn equilibrium(
        &self,
        helmholtz: &Helmholtz,
        temperature_k: f64,
    ) -> Result<(Phase, Phase), PropertyError> {
        let at = Dome::place(self.critical_temperature_k, temperature_k);
        let guess = (self.liquid.value(at).exp(), self.vapour.value(at).exp());
        helmholtz
            .equilibrium(temperature_k, guess, NEARNESS)
            .ok_or_else(|| not_found(helmholtz, temperature_k))
    }

    /// Densities leave the critical one with about the cube root of the distance in temperature, so that
    /// against this place they are smooth.
    fn place(critical_temperature_k: f64, temperature_k: f64) -> f64 {
        (1.0 - temperature_k / critical_temperature_k).cbrt()
    }
}

fn not_found(helmholtz: &Helmholtz, temperature_k: f64) -> PropertyError {
    PropertyError::NotConverged {
        refrigerant: helmholtz.refrigerant(),
        solving: "equilibrium of liquid and vapour",
        at: format!("{:.3} °C", temperature_k - 273.15),
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::refrigerant::Refrigerant;

    /// Along the line, pressure and vapour density rise and liquid density falls, everywhere. Densities that
    /// meet the conditions of equilibrium without being phases break this; without guesses, a few of
    /// 100 000 temperatures did, all of them in the second range.
    #[test]
    fn no_solution_lies_off_the_line() {
        for refrigerant in Refrigerant::ALL {
            let helmholtz = Helmholtz::new(refrigerant).unwrap();
            let (low, high) = (203.15, helmholtz.critical_temperature_k - 0.1);
            let dome = Dome::follow(&helmholtz, low, high).unwrap();
            for (from, to) in [
                (low, high),
                (353.25_f64.min(high - 0.2), 353.45_f64.min(high)),
            ] {
                let mut before: Option<(Phase, Phase)> = None;
                for step in 0..=10_000 {
                    let temperature_k = (from + (to - from) * f64::from(step) / 1e4).min(to);
                    let (liquid, vapour) = dome.equilibrium(&helmholtz, temperature_k).unwrap();
                    if let Some((liquid_before, vapour_before)) = before {
                        assert!(
                            vapour.pressure > vapour_before.pressure,
                            "{temperature_k} K"
                        );
                        assert!(vapour.density > vapour_before.density, "{temperature_k} K");
                        assert!(liquid.density < liquid_before.density, "{temperature_k} K");
                    }
                    before = Some((liquid, vapour));
                }
            }
        }
    }
}
