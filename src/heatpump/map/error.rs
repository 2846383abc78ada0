//! How far a map is from its exact machine.

use super::Map;
use crate::heatpump::correction::FittedMachine;
use crate::heatpump::limits::{LEAST_DIFFERENCE_K, LOWEST_FLOW_C, Limits};
use crate::heatpump::machine::SolveError;

/// Largest deviations of a map from its exact machine, relative.
#[derive(Debug, Clone, Copy, PartialEq, Default)]
pub struct MapError {
    /// Of greatest and least output.
    pub output: f64,
    /// Of COP at an output.
    pub cop: f64,
}

impl Map {
    /// Compares the map with the exact machine at a number of places spread evenly over the limits (Halton's sequence), none of
    /// them a node.
    ///
    /// # Errors
    /// [`SolveError`] where the machine cannot run inside its limits.
    pub fn error(
        &self,
        machine: &FittedMachine,
        limits: &Limits,
        places: usize,
    ) -> Result<MapError, SolveError> {
        let mut error = MapError::default();
        let width = limits.highest_source_c - limits.lowest_source_c;
        for i in 1..=places {
            let source_c = limits.lowest_source_c + width * halton(i, 2);
            let low = LOWEST_FLOW_C.max(source_c + LEAST_DIFFERENCE_K);
            let high = limits.highest_flow_at(source_c);
            if high <= low {
                continue;
            }
            let flow_c = low + (high - low) * halton(i, 3);
            let fraction = halton(i, 5);
            let by_map = self.range(source_c, flow_c);
            let greatest_kw = machine.greatest_kw(source_c, flow_c)?;
            let least_kw = machine.least_kw(source_c, flow_c)?;
            let heat_kw = by_map.least_kw + fraction * (by_map.greatest_kw - by_map.least_kw);
            let exact = machine.at_output(source_c, flow_c, heat_kw)?;
            let input = self.input(source_c, flow_c, fraction);
            let off = |found: f64, exact: f64| (found / exact - 1.0).abs();
            error.output = error
                .output
                .max(off(by_map.greatest_kw, greatest_kw))
                .max(off(by_map.least_kw, least_kw));
            error.cop = error
                .cop
                .max(off(1.0 / input.electric_per_heat, exact.cop()));
        }
        Ok(error)
    }
}

/// Element of Halton's sequence: the digits of a number in a base, mirrored behind the point (Halton 1960).
fn halton(mut index: usize, base: usize) -> f64 {
    let (mut value, mut share) = (0.0, 1.0);
    while index > 0 {
        share /= base as f64;
        value += share * (index % base) as f64;
        index /= base;
    }
    value
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn halton_in_base_two_halves_and_halves() {
        let found: Vec<_> = (1..5).map(|i| halton(i, 2)).collect();
        assert_eq!(found, [0.5, 0.25, 0.75, 0.125]);
    }
}
