//! Undisturbed ground from the weather above it.

use std::f64::consts::{PI, TAU};

/// Hours in the year of the annual wave.
pub const HOURS_PER_YEAR: f64 = 8766.0;

/// Diffusivity of moist loam, the usual soil over a trench: 0.5e-6 m²/s (common practice, no source).
pub const TRENCH_DIFFUSIVITY_M2_PER_S: f64 = 0.5e-6;

/// The year's wave of a temperature: mean, swing and when it is coldest.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct AnnualSwing {
    /// Mean, °C.
    pub mean_c: f64,
    /// Half the difference of the warmest and coldest of the wave, K, ≥ 0.
    pub amplitude_k: f64,
    /// Hour of the axis at which the wave is coldest, 0 to 8766.
    pub coldest_hour: f64,
}

impl AnnualSwing {
    /// Fits the wave to hourly temperatures of one or more whole years by the first Fourier coefficient.
    ///
    /// Returns nothing when there is less than a year, for which the coefficient is not defined.
    pub fn fit(hourly_c: &[f64]) -> Option<Self> {
        let years = hourly_c.len() / 8760;
        if years == 0 {
            return None;
        }
        let hours = ((years as f64 * HOURS_PER_YEAR) as usize).min(hourly_c.len());
        let sample = &hourly_c[..hours];
        let count = hours as f64;
        // A common year is a quarter of a day short of the wave: its own length is the period then.
        let period = count / years as f64;
        let (mut sum, mut cosine, mut sine) = (0.0, 0.0, 0.0);
        for (i, &t) in sample.iter().enumerate() {
            let (s, c) = (TAU * i as f64 / period).sin_cos();
            sum += t;
            cosine += t * c;
            sine += t * s;
        }
        let (cosine, sine) = (2.0 * cosine / count, 2.0 * sine / count);
        // T = mean − A cos(2π (t − t0) / P)  ⇒  A cos(2π t0/P) = −cosine, A sin(2π t0/P) = −sine.
        let phase = (-sine).atan2(-cosine).rem_euclid(TAU);
        Some(Self {
            mean_c: sum / count,
            amplitude_k: cosine.hypot(sine),
            coldest_hour: phase / TAU * period,
        })
    }
}

/// Temperature of undisturbed ground at a depth (m, ≥ 0), °C, in an hour of the axis.
///
/// Kusuda and Achenbach 1965 \[from memory\]:
/// `T = Tm − A exp(−z √(π/(365 α))) cos(2π/365 (t − t0 − z/2 √(365/(π α))))` with α in m²/day and t in days, here written in
/// hours. The diffusivity is in m²/s.
pub fn undisturbed_c(air: &AnnualSwing, depth_m: f64, diffusivity_m2_per_s: f64, hour: f64) -> f64 {
    let alpha_m2_per_h = diffusivity_m2_per_s * 3600.0;
    let damping = depth_m * (PI / (HOURS_PER_YEAR * alpha_m2_per_h)).sqrt();
    let lag_h = depth_m / 2.0 * (HOURS_PER_YEAR / (PI * alpha_m2_per_h)).sqrt();
    let angle = TAU / HOURS_PER_YEAR * (hour - air.coldest_hour - lag_h);
    air.mean_c - air.amplitude_k * (-damping).exp() * angle.cos()
}

#[cfg(test)]
mod tests {
    use super::*;

    const AIR: AnnualSwing = AnnualSwing {
        mean_c: 10.0,
        amplitude_k: 8.0,
        coldest_hour: 480.0,
    };

    /// exp(−z √(π/(365 α))) by hand: amplitude left at 1/2/5 m for α = 0.5e-6 m²/s: 0.640/0.410/0.107.
    #[test]
    fn the_wave_is_damped_with_depth() {
        for (depth, left) in [(1.0, 0.640), (2.0, 0.410), (5.0, 0.107)] {
            let column: Vec<_> = (0..8766)
                .map(|h| undisturbed_c(&AIR, depth, 0.5e-6, f64::from(h)))
                .collect();
            let high = column.iter().copied().fold(f64::MIN, f64::max);
            let low = column.iter().copied().fold(f64::MAX, f64::min);
            // Printed to three figures.
            assert!(
                ((high - low) / 16.0 - left).abs() < 5e-4,
                "{depth} {}",
                (high - low) / 16.0
            );
        }
    }

    #[test]
    fn at_the_surface_the_ground_is_the_wave_of_the_air() {
        let coldest = undisturbed_c(&AIR, 0.0, 0.5e-6, AIR.coldest_hour);
        assert!((coldest - 2.0).abs() < 1e-12);
    }

    #[test]
    fn the_fit_finds_the_wave_that_made_the_column() {
        for hours in [8760, 8784, 8766 * 3] {
            let column: Vec<_> = (0..hours)
                .map(|h| undisturbed_c(&AIR, 0.0, 0.5e-6, f64::from(h)))
                .collect();
            let fit = AnnualSwing::fit(&column).unwrap();
            // A calendar year differs from the wave's period by up to 18 h: 0.2 % of it.
            assert!((fit.mean_c - 10.0).abs() < 0.03, "{fit:?}");
            assert!((fit.amplitude_k - 8.0).abs() < 0.03, "{fit:?}");
            assert!((fit.coldest_hour - 480.0).abs() < 20.0, "{fit:?}");
        }
        assert_eq!(AnnualSwing::fit(&[1.0; 8759]), None);
    }
}
