//! A loop in the ground hour by hour: its offer, its memory, its pump.

use super::Offer;
use super::circuit::Circuit;
use super::design::{Layout, LoopDesign};
use super::line::EARLY_ERROR;
use super::response::{Memory, Response};
use super::undisturbed::HOURS_PER_YEAR;
use crate::calendar::HourColumn;

/// Heat is put back in summer over this many days about the warmest one of the year's wave.
pub const RECHARGE_DAYS: f64 = 120.0;
/// Watts in a kilowatt.
pub(super) const WATTS: f64 = 1000.0;

/// A loop in the ground.
#[derive(Debug, Clone, PartialEq)]
pub struct BuriedLoop {
    /// What it was made from.
    pub design: LoopDesign,
    /// Brine and pump.
    pub circuit: Circuit,
    /// Undisturbed ground at the loop for every hour of the axis, °C.
    pub(super) undisturbed_c: HourColumn,
    /// Fall of the wall for each watt per metre, m K/W.
    pub(super) response: Response,
    /// From wall to brine, m K/W.
    pub(super) resistance_m_k_per_w: f64,
    pub(super) length_m: f64,
    pub(super) recharge_kw: f64,
    /// Fall of the brine that enters the machine for each kilowatt of the present hour, K/kW.
    pub(super) k_per_kw: f64,
}

impl BuriedLoop {
    /// What it offers in an hour of the axis after a history.
    pub fn offer(&self, hour: usize, memory: &Memory) -> Offer {
        let put_back = self.response.first_hour() * self.recharging_kw(hour);
        let fall_k = WATTS / self.length_m * (self.response.of_the_past(memory) - put_back);
        Offer {
            open_c: self.undisturbed_c(hour) - fall_k,
            k_per_kw: self.k_per_kw,
        }
    }

    /// Lets the hour pass with what was drawn in it, kWh.
    pub fn drawn(&self, hour: usize, extracted_kwh: f64, memory: &mut Memory) {
        self.response
            .remember(extracted_kwh - self.recharging_kw(hour), memory);
    }

    /// Heat put back in an hour, kW.
    pub fn recharging_kw(&self, hour: usize) -> f64 {
        if self.recharge_kw == 0.0 {
            return 0.0;
        }
        let warmest = self.design.surface.coldest_hour + HOURS_PER_YEAR / 2.0;
        let away = (hour as f64 - warmest + HOURS_PER_YEAR / 2.0).rem_euclid(HOURS_PER_YEAR)
            - HOURS_PER_YEAR / 2.0;
        if away.abs() < RECHARGE_DAYS * 12.0 {
            self.recharge_kw
        } else {
            0.0
        }
    }

    /// Electricity of the loop's pump in an hour, kWh: it runs with the machine and while heat is put back.
    pub fn pump_kwh(&self, hour: usize, running_hours: f64) -> f64 {
        let hours = if self.recharging_kw(hour) > 0.0 {
            1.0
        } else {
            running_hours
        };
        self.circuit.pump_kw * hours
    }

    /// Mean wall of bores or pipes after an hour of the axis and everything before it, °C.
    pub fn wall_c(&self, hour: usize, memory: &Memory) -> f64 {
        self.undisturbed_c(hour) - WATTS / self.length_m * self.response.now(memory)
    }

    /// Undisturbed ground at the loop, °C.
    pub fn undisturbed_c(&self, hour: usize) -> f64 {
        self.undisturbed_c.get(hour).copied().unwrap_or(f64::NAN)
    }

    /// Undisturbed ground at the loop in every hour of the axis, °C.
    pub fn undisturbed(&self) -> &[f64] {
        &self.undisturbed_c
    }

    /// Resistance from the wall to the mean of the brine, m K/W.
    pub fn resistance_m_k_per_w(&self) -> f64 {
        self.resistance_m_k_per_w
    }

    /// Fall of the wall for each watt per metre, m K/W.
    pub fn response(&self) -> &Response {
        &self.response
    }

    /// Length that takes heat, m.
    pub fn length_m(&self) -> f64 {
        self.length_m
    }

    /// Until when after a change of the draw the line source is not yet valid at the wall, h: 5 r²/α; and how much it may leave
    /// out of the wall's fall before that at a draw (kW), K. See [`EARLY_ERROR`].
    pub fn early(&self, draw_kw: f64) -> (f64, f64) {
        let radius_m = match &self.design.layout {
            Layout::Bores { bores, .. } => {
                bores.iter().map(|bore| bore.radius_m).fold(0.0, f64::max)
            }
            Layout::Trenches { .. } => self.design.pipe.outside_m / 2.0,
        };
        let soil = &self.design.soil;
        let per_metre = WATTS * draw_kw / self.length_m;
        (
            5.0 * radius_m.powi(2) / soil.diffusivity_m2_per_s / 3600.0,
            EARLY_ERROR * per_metre / (std::f64::consts::TAU * soil.conductivity_w_per_m_k),
        )
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::source::{AnnualSwing, Antifreeze, Bore, Brine, Filling, Pipe, Pump, Soil, UTubes};

    fn one_bore() -> LoopDesign {
        LoopDesign {
            layout: Layout::Bores {
                bores: vec![Bore {
                    x_m: 0.0,
                    y_m: 0.0,
                    depth_m: 100.0,
                    buried_m: 1.0,
                    radius_m: 0.065,
                }],
                filling: Filling::Grout {
                    w_per_m_k: 1.5,
                    spacing_m: None,
                },
                u_tubes: UTubes::One,
            },
            pipe: Pipe {
                outside_m: 0.04,
                wall_m: 0.0037,
                conductivity_w_per_m_k: 0.42,
            },
            soil: Soil {
                conductivity_w_per_m_k: 2.0,
                diffusivity_m2_per_s: 0.9e-6,
            },
            surface: AnnualSwing {
                mean_c: 10.0,
                amplitude_k: 8.0,
                coldest_hour: 600.0,
            },
            gradient_k_per_m: 0.03,
            brine: Brine::new(Antifreeze::EthyleneGlycol, 0.25).unwrap(),
            flow_kg_per_s: 0.35,
            pump: Pump::Efficiency(0.25),
            recharge_kwh: 0.0,
        }
    }

    /// 10 °C at the surface and 30 K/km: 11.53 °C at the middle of a bore from 1 to 101 m.
    #[test]
    fn a_bore_lies_in_the_warmth_of_its_middle() {
        let made = one_bore().build(8760).unwrap();
        assert!((made.undisturbed_c(0) - 11.53).abs() < 1e-12);
        assert_eq!(made.undisturbed_c(0), made.undisturbed_c(4000));
    }

    /// The offer and what it turns out to be agree: open temperature less the draw's fall is the wall less the borehole's fall
    /// plus half the brine's warming.
    #[test]
    fn an_offer_is_kept() {
        let made = one_bore().build(8760).unwrap();
        let mut memory = Memory::default();
        for hour in 0..500 {
            let kw = if hour % 3 == 0 { 5.0 } else { 0.7 };
            let offer = made.offer(hour, &memory);
            let entering_c = offer.open_c - offer.k_per_kw * kw;
            made.drawn(hour, kw, &mut memory);
            let mean_c =
                made.wall_c(hour, &memory) - 1000.0 * kw / 100.0 * made.resistance_m_k_per_w();
            let expected_c = mean_c + kw / made.circuit.capacity_kw_per_k() / 2.0;
            assert!((entering_c - expected_c).abs() < 1e-9, "{hour}");
        }
    }

    #[test]
    fn heat_put_back_is_what_was_asked_for_and_warms_the_ground() {
        let design = LoopDesign {
            recharge_kwh: 900.0,
            ..one_bore()
        };
        let made = design.build(8760).unwrap();
        let total: f64 = (0..8760).map(|hour| made.recharging_kw(hour)).sum();
        assert!((total - 900.0).abs() < 1.0, "{total}");
        let mut memory = Memory::default();
        for hour in 0..8760 {
            made.drawn(hour, 0.0, &mut memory);
        }
        assert!(made.wall_c(8759, &memory) > made.undisturbed_c(8759));
        assert!(made.pump_kwh(600 + 4383, 0.0) > 0.0 && made.pump_kwh(600, 0.0) == 0.0);
    }

    #[test]
    fn a_longer_loop_falls_less() {
        let short = one_bore().build(1).unwrap();
        let long = one_bore().with_length(150.0).build(1).unwrap();
        assert!((long.length_m() - 150.0).abs() < 1e-9);
        assert!(
            long.offer(0, &Memory::default()).k_per_kw
                < short.offer(0, &Memory::default()).k_per_kw
        );
    }
}
