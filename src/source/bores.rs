//! Bores: vertical line sources, each felt by itself and by its neighbours.

use std::f64::consts::TAU;

use super::line::{FiniteLine, Vertical};
use super::soil::Soil;

/// One bore.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Bore {
    /// Place, m.
    pub x_m: f64,
    /// Place, m.
    pub y_m: f64,
    /// Length of the part that takes heat, m.
    pub depth_m: f64,
    /// Depth of its upper end below the surface, m.
    pub buried_m: f64,
    /// Radius, m.
    pub radius_m: f64,
}

impl Bore {
    fn line(&self) -> Vertical {
        Vertical {
            top_m: self.buried_m,
            length_m: self.depth_m,
        }
    }

    fn distance_m(&self, other: &Self) -> f64 {
        (self.x_m - other.x_m).hypot(self.y_m - other.y_m)
    }

    /// Depth of its middle, m.
    pub fn middle_m(&self) -> f64 {
        self.buried_m + self.depth_m / 2.0
    }
}

/// Length of all bores, m.
pub fn total_depth_m(bores: &[Bore]) -> f64 {
    bores.iter().map(|bore| bore.depth_m).sum()
}

/// How far the mean wall falls for each watt per metre, m K/W, at rising times (h).
///
/// The rule of sharing: every metre of every bore takes the same heat, all the time. That is the uniform heat-rate condition; the
/// mean wall is weighted by length. Bores whose wall were kept at one temperature would share unevenly and, after decades in a
/// dense field, fall a few per cent less.
pub fn wall_response(bores: &[Bore], soil: &Soil, times_h: &[f64]) -> Vec<f64> {
    let times_s: Vec<_> = times_h.iter().map(|hours| hours * 3600.0).collect();
    let rule = FiniteLine::new();
    let mut sum = vec![0.0; times_h.len()];
    for (i, source) in bores.iter().enumerate() {
        for felt in &bores[i..] {
            let same = std::ptr::eq(source, felt);
            let distance_m = if same {
                source.radius_m
            } else {
                source.distance_m(felt)
            };
            let curve = rule.curve(
                source.line(),
                felt.line(),
                distance_m,
                soil.diffusivity_m2_per_s,
                &times_s,
            );
            // By reciprocity the other direction, times its length, is the same.
            let weight = if same { 1.0 } else { 2.0 } * felt.depth_m;
            for (sum, value) in sum.iter_mut().zip(curve) {
                *sum += weight * value;
            }
        }
    }
    let unit = total_depth_m(bores) * TAU * soil.conductivity_w_per_m_k;
    sum.iter().map(|value| value / unit).collect()
}

#[cfg(test)]
mod tests {
    use super::*;

    const SOIL: Soil = Soil {
        conductivity_w_per_m_k: 2.0,
        diffusivity_m2_per_s: 1e-6,
    };

    fn bore(x_m: f64) -> Bore {
        Bore {
            x_m,
            y_m: 0.0,
            depth_m: 100.0,
            buried_m: 4.0,
            radius_m: 0.075,
        }
    }

    #[test]
    fn bores_far_apart_do_not_feel_each_other() {
        let times = [8760.0, 10.0 * 8760.0];
        let alone = wall_response(&[bore(0.0)], &SOIL, &times);
        let two = wall_response(&[bore(0.0), bore(5000.0)], &SOIL, &times);
        let near = wall_response(&[bore(0.0), bore(6.0)], &SOIL, &times);
        for i in 0..2 {
            assert!((alone[i] - two[i]).abs() < 1e-9);
            assert!(near[i] > alone[i]);
        }
    }

    #[test]
    fn two_halves_of_a_bore_are_not_a_short_bore() {
        // Unequal bores: the mean lies between the two alone and the order does not matter.
        let short = Bore {
            depth_m: 60.0,
            ..bore(6.0)
        };
        let a = wall_response(&[bore(0.0), short], &SOIL, &[8760.0])[0];
        let b = wall_response(&[short, bore(0.0)], &SOIL, &[8760.0])[0];
        assert!((a - b).abs() < 1e-12);
    }
}
