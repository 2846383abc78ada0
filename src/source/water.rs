//! Well and surface water: what it gives, and what lifting it takes.

use super::Offer;
use crate::calendar::HourColumn;

/// Heat capacity of a litre of cold water, kJ/(L K): that of the polynomials in [`super::brine`] at 10 °C within 0.2 %.
const WATER_KJ_PER_L_K: f64 = 4.19;
/// Weight of a litre of water lifted by a metre, kJ.
const KJ_PER_L_M: f64 = 9.806_65e-3;

/// Water from a well, a river or a lake.
#[derive(Debug, Clone, PartialEq)]
pub struct WaterSource {
    /// The water for every hour of the axis, °C.
    pub water_c: HourColumn,
    /// What is lost in an exchanger between water and machine, K; 0 when the water goes through the machine.
    pub approach_k: f64,
    /// Flow while the machine runs, L/s.
    pub flow_l_per_s: f64,
    /// Electric power of the pump, kW.
    pub pump_kw: f64,
}

impl WaterSource {
    /// Electric power that lifts a flow (L/s) against a head (m, friction included) with an efficiency from the plug to the
    /// water (0 to 1), kW.
    pub fn pump_kw(flow_l_per_s: f64, head_m: f64, efficiency: f64) -> f64 {
        KJ_PER_L_M * flow_l_per_s * head_m / efficiency
    }

    /// What it offers in an hour: the machine's draw does not lower what enters it, only what leaves.
    pub fn offer(&self, hour: usize) -> Offer {
        let water_c = self.water_c.get(hour).copied().unwrap_or(f64::NAN);
        Offer {
            open_c: water_c - self.approach_k,
            k_per_kw: 0.0,
        }
    }

    /// How far the water is cooled at a draw (kW), K.
    pub fn cooling_k(&self, draw_kw: f64) -> f64 {
        draw_kw / (self.flow_l_per_s * WATER_KJ_PER_L_K)
    }

    /// Temperature at which the water leaves at a draw (kW), °C.
    pub fn leaving_c(&self, hour: usize, draw_kw: f64) -> f64 {
        self.water_c.get(hour).copied().unwrap_or(f64::NAN) - self.cooling_k(draw_kw)
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    /// One litre a second lifted by 10 m at 100 % is 98.07 W.
    #[test]
    fn lifting_water_takes_its_weight_times_the_height() {
        assert!((WaterSource::pump_kw(1.0, 10.0, 1.0) - 0.098_066_5).abs() < 1e-12);
        assert!((WaterSource::pump_kw(0.5, 20.0, 0.4) - 0.245_166).abs() < 1e-6);
    }

    #[test]
    fn a_draw_cools_what_leaves_and_not_what_enters() {
        let well = WaterSource {
            water_c: vec![10.0].into(),
            approach_k: 2.0,
            flow_l_per_s: 0.5,
            pump_kw: 0.2,
        };
        assert_eq!(
            well.offer(0),
            Offer {
                open_c: 8.0,
                k_per_kw: 0.0
            }
        );
        assert!((well.leaving_c(0, 6.285) - 7.0).abs() < 1e-12);
    }
}
