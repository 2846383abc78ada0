//! From the wall of a bore to the brine: the borehole resistance of a grouted single U-tube.

use std::f64::consts::PI;

use super::pipe::Pipe;

/// A grouted bore with one U-tube.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct UTube {
    /// Radius of the bore, m.
    pub bore_radius_m: f64,
    /// The pipe, down and up.
    pub pipe: Pipe,
    /// Distance between the middles of its two legs, m.
    pub spacing_m: f64,
    /// Conductivity of the grout, W/(m K).
    pub grout_w_per_m_k: f64,
}

impl UTube {
    /// Distance of the legs when they stand a third of the free width from each other and from the wall, m.
    pub fn even_spacing_m(bore_radius_m: f64, pipe_outside_m: f64) -> f64 {
        (2.0 * bore_radius_m - 2.0 * pipe_outside_m) / 3.0 + pipe_outside_m
    }

    /// Whether both legs are inside the bore and beside each other.
    pub fn fits(&self) -> bool {
        self.spacing_m >= self.pipe.outside_m
            && self.spacing_m + self.pipe.outside_m <= 2.0 * self.bore_radius_m
    }

    /// Local borehole resistance Rb, m K/W: from the mean of the fluid in both legs to the mean of the wall.
    ///
    /// First-order multipole solution in closed form: Hellström 1991; Javed and Spitler 2017,
    /// doi 10.1016/j.apenergy.2016.11.079 \[from memory; held against pygfunction's multipoles\].
    pub fn local_resistance(&self, ground_w_per_m_k: f64, fluid_to_pipe_m_k_per_w: f64) -> f64 {
        let m = self.multipole(ground_w_per_m_k, fluid_to_pipe_m_k_per_w);
        let line = m.beta + (m.theta2 / (2.0 * m.theta1 * (1.0 - m.theta1_4).powf(m.sigma))).ln();
        let above =
            m.theta3.powi(2) * (1.0 - 4.0 * m.sigma * m.theta1_4 / (1.0 - m.theta1_4)).powi(2);
        let below = (1.0 + m.beta) / (1.0 - m.beta)
            + m.theta3.powi(2) * (1.0 + 16.0 * m.sigma * m.theta1_4 / (1.0 - m.theta1_4).powi(2));
        (line - above / below) / (4.0 * PI * self.grout_w_per_m_k)
    }

    /// Internal resistance Ra between the two legs, m K/W; source as [`UTube::local_resistance`].
    pub fn internal_resistance(&self, ground_w_per_m_k: f64, fluid_to_pipe_m_k_per_w: f64) -> f64 {
        let m = self.multipole(ground_w_per_m_k, fluid_to_pipe_m_k_per_w);
        let square = m.theta1.powi(2);
        let line = m.beta
            + ((1.0 + square).powf(m.sigma) / (m.theta3 * (1.0 - square).powf(m.sigma))).ln();
        let above = m.theta3.powi(2) * (1.0 - m.theta1_4 + 4.0 * m.sigma * square).powi(2);
        let below = (1.0 + m.beta) / (1.0 - m.beta) * (1.0 - m.theta1_4).powi(2)
            - m.theta3.powi(2) * (1.0 - m.theta1_4).powi(2)
            + 8.0 * m.sigma * square * m.theta3.powi(2) * (1.0 + m.theta1_4);
        (line - above / below) / (PI * self.grout_w_per_m_k)
    }

    /// Effective borehole resistance, m K/W: from the mean of the brine entering and leaving the bore, heat passing between the
    /// legs included.
    ///
    /// Hellström 1991 for the same heat on every metre: Rb + (H/(ṁ c))²/(3 Ra) \[from memory\].
    pub fn effective_resistance(
        &self,
        ground_w_per_m_k: f64,
        fluid_to_pipe_m_k_per_w: f64,
        depth_m: f64,
        capacity_w_per_k: f64,
    ) -> f64 {
        self.local_resistance(ground_w_per_m_k, fluid_to_pipe_m_k_per_w)
            + (depth_m / capacity_w_per_k).powi(2)
                / (3.0 * self.internal_resistance(ground_w_per_m_k, fluid_to_pipe_m_k_per_w))
    }

    fn multipole(&self, ground_w_per_m_k: f64, fluid_to_pipe_m_k_per_w: f64) -> Multipole {
        let theta1 = self.spacing_m / (2.0 * self.bore_radius_m);
        Multipole {
            theta1,
            theta1_4: theta1.powi(4),
            theta2: 2.0 * self.bore_radius_m / self.pipe.outside_m,
            theta3: self.pipe.outside_m / (2.0 * self.spacing_m),
            sigma: (self.grout_w_per_m_k - ground_w_per_m_k)
                / (self.grout_w_per_m_k + ground_w_per_m_k),
            beta: 2.0 * PI * self.grout_w_per_m_k * fluid_to_pipe_m_k_per_w,
        }
    }
}

/// The numbers without dimension of the multipole formulas: θ₁ = s/(2 rb), θ₂ = rb/rp, θ₃ = rp/s, σ and β.
struct Multipole {
    theta1: f64,
    theta1_4: f64,
    theta2: f64,
    theta3: f64,
    sigma: f64,
    beta: f64,
}

#[cfg(test)]
mod tests {
    use super::*;

    fn tube() -> UTube {
        let pipe = Pipe {
            outside_m: 0.04,
            wall_m: 0.0037,
            conductivity_w_per_m_k: 0.42,
        };
        UTube {
            bore_radius_m: 0.065,
            pipe,
            spacing_m: UTube::even_spacing_m(0.065, 0.04),
            grout_w_per_m_k: 1.5,
        }
    }

    #[test]
    fn better_grout_and_wider_legs_lower_the_resistance() {
        let usual = tube().local_resistance(2.0, 0.09);
        let grouted = UTube {
            grout_w_per_m_k: 2.0,
            ..tube()
        }
        .local_resistance(2.0, 0.09);
        let wide = UTube {
            spacing_m: 0.085,
            ..tube()
        }
        .local_resistance(2.0, 0.09);
        assert!(grouted < usual && wide < usual);
        // Grouted single U-tubes lie between 0.08 and 0.2 m K/W: common practice, no source.
        assert!((0.08..0.2).contains(&usual), "{usual}");
    }

    #[test]
    fn slow_flow_lets_heat_pass_between_the_legs() {
        let tube = tube();
        let local = tube.local_resistance(2.0, 0.09);
        let fast = tube.effective_resistance(2.0, 0.09, 100.0, 4000.0);
        let slow = tube.effective_resistance(2.0, 0.09, 100.0, 800.0);
        assert!(fast > local && slow > fast);
        assert!((fast / local - 1.0).abs() < 0.05);
    }

    #[test]
    fn legs_must_fit_into_the_bore() {
        assert!(tube().fits());
        assert!(
            !UTube {
                spacing_m: 0.03,
                ..tube()
            }
            .fits()
        );
        assert!(
            !UTube {
                spacing_m: 0.1,
                ..tube()
            }
            .fits()
        );
    }
}
