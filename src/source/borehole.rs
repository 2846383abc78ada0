//! From the wall of a bore to the brine: the borehole resistance of grouted U-tubes, one or two in a bore.

use std::f64::consts::{PI, SQRT_2};

use super::pipe::Pipe;

/// A grouted bore with its U-tubes.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct UTube {
    /// Radius of the bore, m.
    pub bore_radius_m: f64,
    /// The pipe, down and up.
    pub pipe: Pipe,
    /// Distance between the middles of the two legs of a U-tube, m: both stand on a circle about the middle of the bore.
    pub spacing_m: f64,
    /// Conductivity of the grout, W/(m K).
    pub grout_w_per_m_k: f64,
    /// How many.
    pub count: UTubes,
}

/// U-tubes in a bore.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum UTubes {
    /// One.
    One,
    /// Two crosswise, side by side in the circuit: the legs of each stand opposite each other.
    Two,
}

impl UTubes {
    /// Their number.
    pub fn number(self) -> usize {
        match self {
            Self::One => 1,
            Self::Two => 2,
        }
    }

    /// Pipes in the bore.
    fn legs(self) -> f64 {
        2.0 * self.number() as f64
    }
}

impl UTube {
    /// Distance of the legs when they stand a third of the free width from each other and from the wall, m.
    pub fn even_spacing_m(bore_radius_m: f64, pipe_outside_m: f64) -> f64 {
        (2.0 * bore_radius_m - 2.0 * pipe_outside_m) / 3.0 + pipe_outside_m
    }

    /// Least and greatest distance of the two legs of a U-tube at which all are inside the bore and beside each other, m.
    pub fn spacing_between_m(&self) -> (f64, f64) {
        let nearest_m = match self.count {
            UTubes::One => self.pipe.outside_m,
            // The next leg on the circle is that of the other U-tube.
            UTubes::Two => SQRT_2 * self.pipe.outside_m,
        };
        (nearest_m, 2.0 * self.bore_radius_m - self.pipe.outside_m)
    }

    /// Whether all legs are inside the bore and beside each other.
    pub fn fits(&self) -> bool {
        let (nearest_m, widest_m) = self.spacing_between_m();
        self.spacing_m >= nearest_m && self.spacing_m <= widest_m
    }

    /// Local borehole resistance Rb, m K/W: from the mean of the fluid in all legs to the mean of the wall.
    ///
    /// First-order multipole solution for N equal pipes evenly on a circle, all of one temperature. With x = (c/rb)², p = rp/c and c half the
    /// spacing, `2πk N Rb = β + ln(rb^N/(N rp c^(N−1))) − σ ln(1 − x^N) − γp²B²/(1 + γp²C)`, where `B = (N−1)/2 − σN x^N/(1−x^N)`,
    /// `C = (N²−1)/12 + σN² x^N/(1−x^N)²` and `γ = (1−β)/(1+β)`. It follows from the multipole method of Claesson and Hellström 2011, doi
    /// 10.1080/10789669.2011.609927 \[from memory\], as only one multipole a pipe, the same in all, is left by the symmetry. N = 2 is the formula of
    /// Hellström 1991; Javed and Spitler 2017, doi 10.1016/j.apenergy.2016.11.079 \[from memory\]. Both are held against pygfunction's multipoles.
    pub fn local_resistance(&self, ground_w_per_m_k: f64, fluid_to_pipe_m_k_per_w: f64) -> f64 {
        let m = self.multipole(ground_w_per_m_k, fluid_to_pipe_m_k_per_w);
        let n = self.count.legs();
        let x_n = m.theta1.powf(2.0 * n);
        // rp/c = 2 θ₃, rb/c = 1/θ₁.
        let line =
            m.beta + (m.theta2 / n).ln() - (n - 1.0) * m.theta1.ln() - m.sigma * (-x_n).ln_1p();
        let across = (n - 1.0) / 2.0 - m.sigma * n * x_n / (1.0 - x_n);
        let around = (n * n - 1.0) / 12.0 + m.sigma * n * n * x_n / (1.0 - x_n).powi(2);
        let wide = (2.0 * m.theta3).powi(2);
        let above = wide * across.powi(2);
        let below = (1.0 + m.beta) / (1.0 - m.beta) + wide * around;
        (line - above / below) / (2.0 * PI * self.grout_w_per_m_k * n)
    }

    /// Internal resistance Ra between the legs that go down and those that go up, m K/W, for the heat of the whole bore.
    ///
    /// One U-tube: first-order multipoles, source as [`UTube::local_resistance`]. Two: line sources in the composite of grout and ground
    /// (the same source, order zero), the legs of each U-tube opposite, so that legs of one direction stand next to each other; within 6 %
    /// of the tenth order, which in a term that adds a few per cent to the resistance is enough.
    pub fn internal_resistance(&self, ground_w_per_m_k: f64, fluid_to_pipe_m_k_per_w: f64) -> f64 {
        let m = self.multipole(ground_w_per_m_k, fluid_to_pipe_m_k_per_w);
        let square = m.theta1.powi(2);
        if self.count == UTubes::Two {
            let line = m.beta - m.theta3.ln() + m.sigma * ((1.0 + square) / (1.0 - square)).ln();
            return line / (2.0 * PI * self.grout_w_per_m_k);
        }
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
    /// Hellström 1991 for the same heat on every metre: Rb + (H/(ṁ c))²/(3 Ra) \[from memory\], with the flow ṁ c of the whole bore.
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
            count: UTubes::One,
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

    /// Four pipes give their heat to the wall better than two of the same size, and less well than two without any resistance of grout.
    #[test]
    fn a_second_u_tube_lowers_the_resistance() {
        let two = UTube {
            count: UTubes::Two,
            ..tube()
        };
        let one = tube().local_resistance(2.0, 0.09);
        let both = two.local_resistance(2.0, 0.09);
        assert!(both < 0.75 * one && both > 0.4 * one, "{one} {both}");
        assert!(two.fits());
        let near = UTube {
            spacing_m: 0.05,
            ..two
        };
        assert!(!near.fits());
    }
}
