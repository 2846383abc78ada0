//! Trenches: long pipes under the surface, each felt by itself, by its neighbours and by their images above the surface.

use std::f64::consts::TAU;

use super::line::infinite_line;
use super::soil::Soil;

/// Parallel pipes at one depth.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Trench {
    /// Length of the trench, m: each of its pipes runs all along it.
    pub length_m: f64,
    /// Depth of the pipes below the surface, m.
    pub depth_m: f64,
    /// Pipes side by side.
    pub pipes: usize,
    /// Distance between them, m; without meaning for one pipe.
    pub spacing_m: f64,
    /// Place of the first pipe across all trenches, m.
    pub across_m: f64,
}

impl Trench {
    /// Length of its pipes, m.
    pub fn pipe_m(&self) -> f64 {
        self.length_m * self.pipes as f64
    }

    fn places_m(&self) -> impl Iterator<Item = f64> + '_ {
        (0..self.pipes).map(|i| self.across_m + self.spacing_m * i as f64)
    }
}

/// Length of all pipes, m.
pub fn total_pipe_m(trenches: &[Trench]) -> f64 {
    trenches.iter().map(Trench::pipe_m).sum()
}

/// How far the mean pipe wall falls for each watt per metre of pipe, m K/W, at times (h).
///
/// Infinite line sources with images that hold the surface at its undisturbed temperature (Ingersoll, Zobel and Ingersoll 1954
/// \[from memory\]); every metre of pipe takes the same heat. After very long a lone pipe comes to ln(2z/r)/(2πk), the steady
/// shape factor of a buried pipe. Trenches lie side by side: what one does to a shorter one counts over the length they share.
/// The mean is weighted by length. Freezing of the soil's water, which would help, is left out.
pub fn wall_response(
    trenches: &[Trench],
    pipe_radius_m: f64,
    soil: &Soil,
    times_h: &[f64],
) -> Vec<f64> {
    let pipes: Vec<_> = trenches
        .iter()
        .flat_map(|trench| {
            trench
                .places_m()
                .map(|across_m| (across_m, trench.depth_m, trench.length_m))
        })
        .collect();
    let unit = total_pipe_m(trenches) * TAU * soil.conductivity_w_per_m_k;
    let mut sums = vec![0.0; times_h.len()];
    for (i, &(x1, z1, length1)) in pipes.iter().enumerate() {
        for (j, &(x2, z2, length2)) in pipes.iter().enumerate() {
            let distance_m = if i == j {
                pipe_radius_m
            } else {
                (x1 - x2).hypot(z1 - z2)
            };
            let image_m = (x1 - x2).hypot(z1 + z2);
            let shared_m = length1.min(length2);
            for (sum, hours) in sums.iter_mut().zip(times_h) {
                let at = |distance_m| {
                    infinite_line(distance_m, soil.diffusivity_m2_per_s, hours * 3600.0)
                };
                *sum += shared_m * (at(distance_m) - at(image_m));
            }
        }
    }
    sums.iter().map(|sum| sum / unit).collect()
}

/// What the response comes to after very long, m K/W: the shape factors of buried pipes.
pub fn steady_response(trenches: &[Trench], pipe_radius_m: f64, soil: &Soil) -> f64 {
    /// Hours after which less than a ten-millionth is missing: a million years.
    const VERY_LONG_H: f64 = 1e6 * 8766.0;
    wall_response(trenches, pipe_radius_m, soil, &[VERY_LONG_H])
        .first()
        .copied()
        .unwrap_or(f64::NAN)
}

#[cfg(test)]
mod tests {
    use super::*;

    const LOAM: Soil = Soil {
        conductivity_w_per_m_k: 1.2,
        diffusivity_m2_per_s: 5e-7,
    };
    const ONE: Trench = Trench {
        length_m: 100.0,
        depth_m: 1.2,
        pipes: 1,
        spacing_m: 0.0,
        across_m: 0.0,
    };

    /// Steady conduction to a pipe of radius r at depth z ≫ r: ln(2z/r)/(2πk), Incropera's table of shape factors \[from
    /// memory\]; for a row of pipes each neighbour at distance d adds ln(√(d² + 4z²)/d)/(2πk).
    #[test]
    fn after_very_long_it_is_the_shape_factor() {
        let unit = TAU * LOAM.conductivity_w_per_m_k;
        let alone = steady_response(&[ONE], 0.016, &LOAM);
        assert!((alone - (2.4f64 / 0.016).ln() / unit).abs() < 1e-6);
        let pair = Trench {
            pipes: 2,
            spacing_m: 0.5,
            ..ONE
        };
        let neighbour = (0.5f64.hypot(2.4) / 0.5).ln() / unit;
        assert!((steady_response(&[pair], 0.016, &LOAM) - alone - neighbour).abs() < 1e-6);
    }

    #[test]
    fn pipes_far_apart_are_alone_and_near_ones_are_not() {
        let times = [24.0, 24.0 * 90.0];
        let alone = wall_response(&[ONE], 0.016, &LOAM, &times);
        let far = wall_response(
            &[
                ONE,
                Trench {
                    across_m: 500.0,
                    ..ONE
                },
            ],
            0.016,
            &LOAM,
            &times,
        );
        let near = wall_response(
            &[
                ONE,
                Trench {
                    across_m: 0.4,
                    ..ONE
                },
            ],
            0.016,
            &LOAM,
            &times,
        );
        assert!((alone[1] - far[1]).abs() < 1e-9);
        // A cold day: the neighbour is hardly felt. A season: it is.
        assert!((near[0] - alone[0]).abs() < 0.05 * alone[0]);
        assert!(near[1] > 1.2 * alone[1]);
    }

    /// Why a steady resistance will not do: after a night the fall is far from steady, after a season nearly so.
    #[test]
    fn a_night_is_not_a_season() {
        let [night, season] = wall_response(&[ONE], 0.016, &LOAM, &[10.0, 24.0 * 120.0])[..] else {
            panic!()
        };
        let steady = steady_response(&[ONE], 0.016, &LOAM);
        assert!(
            night < 0.55 * steady && season > 0.9 * steady,
            "{night} {season} {steady}"
        );
    }
}
