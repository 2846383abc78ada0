//! What physics leaves over at the tested points, carried smoothly to the conditions between them.
//!
//! Three fields of factors: COP, greatest output, least output. Each is the smoothest surface through the residuals (a
//! Gaussian process with a squared-exponential kernel, textbook), fades to nothing away from the points, and never leaves
//! ±10 %: the bounded form is `B tanh(g/B)` with B = 10 % and g through `B artanh(residual/B)`. A residual is tested over physical
//! value less one: of COP at the point's output before frost, whose share of the nominal output is the third axis; of greatest and
//! least output after frost, whose fields do not know a third axis. A single strength shrinks all three until the machine is
//! monotone.

use super::fit::{AtPoint, PhysicalFit, at_point};
use super::machine::{Machine, Operation, SolveError};
use super::sheet::{SpeedAt, TestedPoint};

/// Largest correction, relative.
pub const GREATEST_CORRECTION: f64 = 0.10;
/// Distances over which residuals are alike: source K, flow K, output as a share of the nominal.
const REACH: [f64; 3] = [12.0, 15.0, 0.4];
/// Standard deviation of a residual itself and of the noise in it: the ratio decides how closely points are honoured.
const SIGNAL: f64 = 0.04;
const NOISE: f64 = 0.001;
/// Residuals nearer to the bound than this share of it are cut off, because the bounded form reaches it only at infinity.
const NEAR_BOUND: f64 = 0.98;

/// A bounded smooth surface over source temperature, flow temperature and output.
#[derive(Debug, Clone, Default)]
struct Field {
    places: Vec<[f64; 3]>,
    weights: Vec<f64>,
}

impl Field {
    /// The surface through residuals (relative, any size); what exceeds the bound is cut off.
    fn through(residuals: impl Iterator<Item = ([f64; 3], f64)>) -> Self {
        let (places, residuals): (Vec<_>, Vec<_>) = residuals.unzip();
        let stretched: Vec<f64> = residuals
            .iter()
            .map(|residual| {
                let limit = NEAR_BOUND * GREATEST_CORRECTION;
                GREATEST_CORRECTION * (residual.clamp(-limit, limit) / GREATEST_CORRECTION).atanh()
            })
            .collect();
        let weights = solve_positive_definite(
            |i, j| {
                let noise = if i == j {
                    (NOISE / SIGNAL).powi(2)
                } else {
                    0.0
                };
                likeness(&places[i], &places[j]) + noise
            },
            &stretched,
        );
        Self { places, weights }
    }

    /// The relative correction at a place.
    fn at(&self, place: [f64; 3]) -> f64 {
        let sum: f64 = self
            .places
            .iter()
            .zip(&self.weights)
            .map(|(known, weight)| weight * likeness(known, &place))
            .sum();
        GREATEST_CORRECTION * (sum / GREATEST_CORRECTION).tanh()
    }
}

fn likeness(a: &[f64; 3], b: &[f64; 3]) -> f64 {
    let squares: f64 = (0..3)
        .map(|i| {
            let distance = (a[i] - b[i]) / REACH[i];
            distance * distance
        })
        .sum();
    (-0.5 * squares).exp()
}

/// Solves a symmetric positive definite system by Cholesky's method (textbook). The noise on the diagonal keeps it definite.
fn solve_positive_definite(entry: impl Fn(usize, usize) -> f64, right: &[f64]) -> Vec<f64> {
    let n = right.len();
    let mut lower = vec![0.0; n * n];
    for i in 0..n {
        for j in 0..=i {
            let dot: f64 = (0..j).map(|k| lower[i * n + k] * lower[j * n + k]).sum();
            let left = entry(i, j) - dot;
            lower[i * n + j] = if i == j {
                left.max(f64::MIN_POSITIVE).sqrt()
            } else {
                left / lower[j * n + j]
            };
        }
    }
    let mut x = right.to_vec();
    for i in 0..n {
        let dot: f64 = (0..i).map(|k| lower[i * n + k] * x[k]).sum();
        x[i] = (x[i] - dot) / lower[i * n + i];
    }
    for i in (0..n).rev() {
        let dot: f64 = (i + 1..n).map(|k| lower[k * n + i] * x[k]).sum();
        x[i] = (x[i] - dot) / lower[i * n + i];
    }
    x
}

/// The machine as it is believed: physics with its correction.
#[derive(Debug, Clone)]
pub struct FittedMachine {
    /// The physics.
    pub machine: Machine,
    cop: Field,
    greatest: Field,
    least: Field,
    /// Output that scales the third axis of the fields, kW.
    nominal_kw: f64,
    /// How much of the correction is kept, 0..1.
    strength: f64,
}

impl FittedMachine {
    /// Physics with the correction that its residuals at some points ask for.
    ///
    /// # Errors
    /// [`SolveError`] when the machine cannot run at a point.
    pub(super) fn new(fit: &PhysicalFit, points: &[&TestedPoint]) -> Result<Self, SolveError> {
        let at: Vec<(&TestedPoint, AtPoint)> = points
            .iter()
            .map(|point| Ok((*point, at_point(&fit.machine, &fit.frost, point)?)))
            .collect::<Result<_, SolveError>>()?;
        let place = |point: &TestedPoint, heat_kw: f64| {
            [point.source_c, point.flow_c, heat_kw / fit.nominal_kw]
        };
        let output_field = |speed: SpeedAt, of_model: fn(&AtPoint) -> f64| {
            Field::through(
                at.iter()
                    .filter(|(point, _)| point.at == speed)
                    .map(|(p, m)| (place(p, 0.0), p.heat_kw / of_model(m) - 1.0)),
            )
        };
        Ok(Self {
            machine: fit.machine.clone(),
            cop: Field::through(
                at.iter()
                    .map(|(p, m)| (place(p, m.operation.heat_kw), p.cop / m.cop - 1.0)),
            ),
            greatest: output_field(SpeedAt::Maximum, |m| m.greatest_kw),
            least: output_field(SpeedAt::Least, |m| m.least_kw),
            nominal_kw: fit.nominal_kw,
            strength: 1.0,
        })
    }

    /// The same machine with a share of its correction.
    pub fn with_strength(mut self, strength: f64) -> Self {
        self.strength = strength.clamp(0.0, 1.0);
        self
    }

    /// How much of the correction is kept, 0..1.
    pub fn strength(&self) -> f64 {
        self.strength
    }

    /// Frost-free operation at an output, kW, corrected: the correction of COP is charged to the compressor, and
    /// the heat taken from the source follows, so that heat still equals source plus work.
    ///
    /// # Errors
    /// [`SolveError`] when the machine cannot run there.
    pub fn at_output(
        &self,
        source_c: f64,
        flow_c: f64,
        heat_kw: f64,
    ) -> Result<Operation, SolveError> {
        let mut operation = self.machine.at_output(source_c, flow_c, heat_kw)?;
        let factor = self.cop_factor(source_c, flow_c, heat_kw);
        operation.compressor_kw = operation.electric_kw() / factor - operation.source_side_kw;
        let work_kw = operation.compressor_kw * self.machine.compressor.drive_efficiency;
        operation.extracted_kw = operation.heat_kw - work_kw;
        Ok(operation)
    }

    /// Corrected over physical COP.
    pub fn cop_factor(&self, source_c: f64, flow_c: f64, heat_kw: f64) -> f64 {
        1.0 + self.strength * self.cop.at([source_c, flow_c, heat_kw / self.nominal_kw])
    }

    /// Greatest frost-free output, kW.
    ///
    /// # Errors
    /// [`SolveError`] when the machine cannot run there.
    pub fn greatest_kw(&self, source_c: f64, flow_c: f64) -> Result<f64, SolveError> {
        let physical = self.machine.at_greatest(source_c, flow_c)?.heat_kw;
        Ok(physical * (1.0 + self.strength * self.greatest.at([source_c, flow_c, 0.0])))
    }

    /// Least frost-free output, kW; that of a fixed-speed machine is its greatest.
    ///
    /// # Errors
    /// [`SolveError`] when the machine cannot run there.
    pub fn least_kw(&self, source_c: f64, flow_c: f64) -> Result<f64, SolveError> {
        let greatest = self.greatest_kw(source_c, flow_c)?;
        if self.machine.speeds == super::compressor::Speeds::Fixed {
            return Ok(greatest);
        }
        let physical = self.machine.at_least(source_c, flow_c)?.heat_kw;
        let least = physical * (1.0 + self.strength * self.least.at([source_c, flow_c, 0.0]));
        Ok(least.min(LARGEST_LEAST_SHARE * greatest))
    }
}

/// A variable-speed machine keeps at least some range, whatever the fields say: least over greatest output at most.
const LARGEST_LEAST_SHARE: f64 = 0.95;

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;

    #[test]
    fn a_field_goes_through_its_residuals_and_fades_away_from_them() {
        let places = [[7.0, 35.0, 1.0], [-7.0, 35.0, 0.9], [7.0, 55.0, 0.95]];
        let residuals = [0.05, -0.03, 0.01];
        let field = Field::through(places.iter().copied().zip(residuals));
        for (place, residual) in places.iter().zip(residuals) {
            assert!(
                (field.at(*place) - residual).abs() < 1e-3,
                "{}",
                field.at(*place)
            );
        }
        assert!(field.at([70.0, 35.0, 1.0]).abs() < 1e-4);
        assert_eq!(Field::default().at([0.0; 3]), 0.0);
    }

    #[test]
    fn cholesky_solves_a_known_system() {
        // [4 2; 2 3] x = [2; 5] has x = [-0.5; 2].
        let matrix = [[4.0, 2.0], [2.0, 3.0]];
        let x = solve_positive_definite(|i, j| matrix[i][j], &[2.0, 5.0]);
        assert!((x[0] + 0.5).abs() < 1e-12 && (x[1] - 2.0).abs() < 1e-12);
    }

    proptest! {
        #[test]
        fn a_field_never_leaves_its_bound(
            residuals in proptest::collection::vec(-2.0..2.0_f64, 1..8),
            at in (-30.0..40.0_f64, 20.0..80.0_f64, 0.0..2.0_f64),
        ) {
            let places = (0..residuals.len())
                .map(|i| [i as f64 * 5.0 - 15.0, 35.0 + i as f64 * 3.0, 1.0]);
            let field = Field::through(places.zip(residuals.iter().copied()));
            prop_assert!(field.at([at.0, at.1, at.2]).abs() <= GREATEST_CORRECTION);
        }
    }
}
