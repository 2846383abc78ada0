//! Flow in a pipe: friction and heat transfer to its wall.

use std::f64::consts::PI;

use super::brine::BrineProperties;

/// Below this Reynolds number flow is laminar.
pub const LAMINAR_BELOW: f64 = 2300.0;
/// From this Reynolds number on flow is taken to be turbulent (Gnielinski 2013).
const TURBULENT_FROM: f64 = 4000.0;
/// Nusselt number of laminar flow between a wall of constant temperature.
const LAMINAR_NUSSELT: f64 = 3.66;
/// Roughness of drawn plastic pipe, m. Common practice, no source.
const ROUGHNESS_M: f64 = 1.5e-6;
/// Change of the friction factor at which its substitution ends, relative, and the most substitutions; ten are usual.
const FRICTION_TOLERANCE: f64 = 1e-9;
const MOST_FRICTION_STEPS: usize = 100;

/// A pipe.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Pipe {
    /// Outer diameter, m.
    pub outside_m: f64,
    /// Thickness of the wall, m.
    pub wall_m: f64,
    /// Conductivity of the wall, W/(m K).
    pub conductivity_w_per_m_k: f64,
}

/// Flow in one pipe.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct PipeFlow {
    /// Reynolds number.
    pub reynolds: f64,
    /// Mean velocity, m/s.
    pub velocity_m_per_s: f64,
    /// Fall of pressure, Pa for each metre.
    pub pascal_per_m: f64,
    /// Thermal resistance from the fluid to the outside of the pipe, m K/W.
    pub resistance_m_k_per_w: f64,
}

impl Pipe {
    /// Inner diameter, m.
    pub fn inside_m(&self) -> f64 {
        self.outside_m - 2.0 * self.wall_m
    }

    /// A mass flow (kg/s, above 0) of a brine through the pipe.
    ///
    /// Darcy and Weisbach with 64/Re or Colebrook and White; heat transfer by Gnielinski 1975 (doi 10.1007/BF02559682), joined
    /// linearly to laminar flow between Reynolds numbers 2300 and 4000 (Gnielinski 2013).
    pub fn flow(&self, kg_per_s: f64, brine: &BrineProperties) -> PipeFlow {
        let diameter_m = self.inside_m();
        let velocity_m_per_s = kg_per_s / (brine.density_kg_per_m3 * PI * diameter_m.powi(2) / 4.0);
        let reynolds =
            brine.density_kg_per_m3 * velocity_m_per_s * diameter_m / brine.viscosity_pa_s;
        let friction = friction_factor(reynolds, diameter_m);
        let prandtl = 1000.0 * brine.heat_capacity_kj_per_kg_k * brine.viscosity_pa_s
            / brine.conductivity_w_per_m_k;
        let film_w_per_m_k =
            nusselt(reynolds, prandtl, friction, diameter_m) * brine.conductivity_w_per_m_k;
        let wall = (self.outside_m / diameter_m).ln() / (2.0 * PI * self.conductivity_w_per_m_k);
        PipeFlow {
            reynolds,
            velocity_m_per_s,
            pascal_per_m: friction * brine.density_kg_per_m3 * velocity_m_per_s.powi(2)
                / (2.0 * diameter_m),
            // Film coefficient h = Nu k/d on the inner surface π d: 1/(π d h) = 1/(π Nu k).
            resistance_m_k_per_w: wall + 1.0 / (PI * film_w_per_m_k),
        }
    }
}

/// Darcy's friction factor.
fn friction_factor(reynolds: f64, diameter_m: f64) -> f64 {
    if reynolds < LAMINAR_BELOW {
        return 64.0 / reynolds;
    }
    let mut factor = 0.02;
    for _ in 0..MOST_FRICTION_STEPS {
        let root =
            -2.0 * (ROUGHNESS_M / diameter_m / 3.7 + 2.51 / (reynolds * f64::sqrt(factor))).log10();
        let next = root.powi(-2);
        let change = (next / factor - 1.0).abs();
        factor = next;
        // The substitution contracts: each step gains a digit.
        if change < FRICTION_TOLERANCE {
            break;
        }
    }
    factor
}

fn nusselt(reynolds: f64, prandtl: f64, friction: f64, diameter_m: f64) -> f64 {
    let gnielinski = |reynolds: f64, friction: f64| {
        let eighth = friction / 8.0;
        eighth * (reynolds - 1000.0) * prandtl
            / (1.0 + 12.7 * eighth.sqrt() * (prandtl.powf(2.0 / 3.0) - 1.0))
    };
    if reynolds <= LAMINAR_BELOW {
        LAMINAR_NUSSELT
    } else if reynolds < TURBULENT_FROM {
        let turbulent = gnielinski(TURBULENT_FROM, friction_factor(TURBULENT_FROM, diameter_m));
        let share = (reynolds - LAMINAR_BELOW) / (TURBULENT_FROM - LAMINAR_BELOW);
        LAMINAR_NUSSELT + share * (turbulent - LAMINAR_NUSSELT)
    } else {
        gnielinski(reynolds, friction)
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::source::{Antifreeze, Brine};

    /// Moody's chart: f = 0.0308 for a smooth pipe at Re 10⁴, 0.0180 at 10⁵ \[from memory\].
    #[test]
    fn friction_follows_the_moody_chart() {
        assert!((friction_factor(1e4, 10.0) - 0.0308).abs() < 2e-4);
        assert!((friction_factor(1e5, 10.0) - 0.0180).abs() < 2e-4);
        assert!((friction_factor(1000.0, 0.03) - 0.064).abs() < 1e-12);
    }

    #[test]
    fn heat_transfer_is_continuous_and_laminar_flow_is_poor() {
        let pipe = Pipe {
            outside_m: 0.04,
            wall_m: 0.0037,
            conductivity_w_per_m_k: 0.42,
        };
        let brine = Brine::new(Antifreeze::EthyleneGlycol, 0.25)
            .unwrap()
            .at(0.0);
        let flows: Vec<_> = (25..1000)
            .map(|i| pipe.flow(f64::from(i) * 0.001, &brine))
            .collect();
        for pair in flows.windows(2) {
            assert!(pair[1].resistance_m_k_per_w <= pair[0].resistance_m_k_per_w + 1e-12);
            assert!((pair[0].resistance_m_k_per_w - pair[1].resistance_m_k_per_w).abs() < 0.02);
        }
        assert!(flows[0].reynolds < LAMINAR_BELOW && flows[974].reynolds > TURBULENT_FROM);
        assert!(flows[0].resistance_m_k_per_w > 2.0 * flows[974].resistance_m_k_per_w);
    }
}
