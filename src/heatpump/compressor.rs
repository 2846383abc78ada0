//! The compressor: how much it moves and what it takes, and how fast the controller lets it turn.

/// Volumetric efficiency of a scroll at a pressure ratio tending to zero and its fall per unit of ratio: 118 tests with
/// R134a (Cuevas and Lebrun, about 2010).
const VOLUMETRIC: (f64, f64) = (1.026, 0.0202);

/// Relative speed (1 = greatest at the reference source temperature) at which an inverter compressor is most
/// efficient: motors and bearings suit the middle of the range; common practice, no source.
const BEST_SPEED: f64 = 0.65;

/// A positive-displacement compressor with its drive.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Compressor {
    /// Volume swept at relative speed 1, m³/s.
    pub swept_m3_per_s: f64,
    /// Greatest isentropic efficiency, motor included: isentropic work over work that reaches the refrigerant, 0..1.
    pub peak_efficiency: f64,
    /// Pressure ratio at which it is reached.
    pub peak_ratio: f64,
    /// How quickly efficiency falls away from that ratio, per squared logarithm.
    pub falloff: f64,
    /// How quickly efficiency falls away from the best speed, per squared relative speed; 0 for one speed.
    pub speed_penalty: f64,
    /// Share of the electricity that reaches the refrigerant; the rest warms the surroundings, 0..1.
    pub drive_efficiency: f64,
}

impl Compressor {
    /// Isentropic efficiency at a pressure ratio (given as its logarithm) and a relative speed.
    ///
    /// `η = ηp (1 − s (n − 0.65)²) / (1 + f ln²(r/rp))`: one peak at the built-in ratio, falling to both sides, the shape
    /// of the published scroll tests (the same: peak 72 % at ratio 2.5 to 2.6).
    pub fn isentropic_efficiency(&self, ratio_logarithm: f64, speed: f64) -> f64 {
        let away = ratio_logarithm - self.peak_ratio.ln();
        let faster = speed - BEST_SPEED;
        // Far outside any real range the parabola would turn negative while a fit is searching.
        let at_speed = (1.0 - self.speed_penalty * faster * faster).max(0.4);
        self.peak_efficiency * at_speed / (1.0 + self.falloff * away * away)
    }

    /// Volumetric efficiency at a pressure ratio: linear, from 1.0 at 1.3 to 0.83 at 9.7.
    pub fn volumetric_efficiency(&self, ratio: f64) -> f64 {
        (VOLUMETRIC.0 - VOLUMETRIC.1 * ratio).max(0.3)
    }
}

/// Source temperatures at which the greatest speed is set, °C; straight lines between, level beyond.
pub const SPEED_KNOTS_C: [f64; 5] = [-15.0, -7.0, 2.0, 7.0, 15.0];
/// Flow temperature at which the greatest speed is set, °C.
pub const SPEED_REFERENCE_FLOW_C: f64 = 35.0;

/// What speeds the controller allows.
///
/// Inverter machines run faster in the cold, and controllers let them speed up to hold the output when the flow is hot: the
/// greatest speed is not one number (common practice, no source).
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum Speeds {
    /// On or off.
    Fixed,
    /// Anything between a least and a greatest speed.
    Variable {
        /// Least relative speed.
        least: f64,
        /// Greatest relative speed at [`SPEED_KNOTS_C`].
        greatest: [f64; 5],
        /// Relative change of the greatest speed for each kelvin of flow above 35 °C, 1/K.
        flow_slope: f64,
    },
}

impl Speeds {
    /// Greatest relative speed at a source and a flow temperature.
    pub fn greatest(&self, source_c: f64, flow_c: f64) -> f64 {
        match self {
            Self::Fixed => 1.0,
            Self::Variable {
                least,
                greatest,
                flow_slope,
            } => {
                let warmth = 1.0 + flow_slope * (flow_c - SPEED_REFERENCE_FLOW_C);
                (between(&SPEED_KNOTS_C, greatest, source_c) * warmth).max(*least)
            }
        }
    }

    /// Least relative speed.
    pub fn least(&self) -> f64 {
        match self {
            Self::Fixed => 1.0,
            Self::Variable { least, .. } => *least,
        }
    }
}

/// Straight lines between knots, level beyond them.
fn between(knots: &[f64; 5], values: &[f64; 5], at: f64) -> f64 {
    if at <= knots[0] {
        return values[0];
    }
    for i in 1..knots.len() {
        if at < knots[i] {
            let share = (at - knots[i - 1]) / (knots[i] - knots[i - 1]);
            return values[i - 1] + share * (values[i] - values[i - 1]);
        }
    }
    values[4]
}

#[cfg(test)]
mod tests {
    use super::*;

    const SCROLL: Compressor = Compressor {
        swept_m3_per_s: 1e-3,
        peak_efficiency: 0.72,
        peak_ratio: 2.55,
        falloff: 0.28,
        speed_penalty: 0.0,
        drive_efficiency: 1.0,
    };

    /// Cuevas and Lebrun, about 2010: scroll with R134a, peak 72 % at ratio 2.5–2.6; volumetric 1.0 at 1.3 and 0.83 at 9.7 \[read\]; overall
    /// 0.60–0.72 at ratio 3–4 and 0.5–0.6 at 6–8 \[from memory\].
    #[test]
    fn the_published_shape_is_met() {
        let at = |ratio: f64| SCROLL.isentropic_efficiency(ratio.ln(), BEST_SPEED);
        assert!((at(2.55) - 0.72).abs() < 1e-12);
        assert!(at(2.0) < at(2.5) && at(3.2) < at(2.6));
        for ratio in [3.0, 3.5, 4.0] {
            assert!((0.60..=0.72).contains(&at(ratio)), "{ratio} {}", at(ratio));
        }
        for ratio in [6.0, 7.0, 8.0] {
            assert!((0.50..=0.63).contains(&at(ratio)), "{ratio} {}", at(ratio));
        }
        // Printed to two figures.
        assert!((SCROLL.volumetric_efficiency(1.3) - 1.0).abs() < 0.005);
        assert!((SCROLL.volumetric_efficiency(9.7) - 0.83).abs() < 0.005);
    }

    #[test]
    fn greatest_speed_is_straight_between_knots_and_level_beyond() {
        let speeds = Speeds::Variable {
            least: 0.3,
            greatest: [1.3, 1.2, 1.1, 1.0, 0.9],
            flow_slope: 0.002,
        };
        assert_eq!(speeds.greatest(-30.0, 35.0), 1.3);
        assert_eq!(speeds.greatest(40.0, 35.0), 0.9);
        assert!((speeds.greatest(-11.0, 35.0) - 1.25).abs() < 1e-12);
        assert!((speeds.greatest(7.0, 55.0) - 1.04).abs() < 1e-12);
        assert_eq!(speeds.least(), 0.3);
        assert_eq!(Speeds::Fixed.greatest(-30.0, 60.0), 1.0);
    }
}
