//! Loops in the ground: bores or trenches, their response and memory, and the brine between ground and machine.

use super::Offer;
use super::borehole::UTube;
use super::bores::{self, Bore, total_depth_m};
use super::brine::Brine;
use super::circuit::{Circuit, Pump};
use super::line::EARLY_ERROR;
use super::pipe::Pipe;
use super::response::{Memory, NoResponse, Response};
use super::soil::Soil;
use super::trench::{self, Trench, total_pipe_m};
use super::undisturbed::{AnnualSwing, HOURS_PER_YEAR, undisturbed_c};

/// Heat is put back in summer over this many days about the warmest one of the year's wave.
pub const RECHARGE_DAYS: f64 = 120.0;
/// Watts in a kilowatt.
const WATTS: f64 = 1000.0;

/// What lies in the ground.
#[derive(Debug, Clone, PartialEq)]
pub enum Layout {
    /// Bores, each with one U-tube, side by side in the circuit.
    Bores {
        /// The bores; not empty.
        bores: Vec<Bore>,
        /// What is in them.
        filling: Filling,
    },
    /// Trenches, side by side in the circuit; the pipes of one follow each other.
    Trenches {
        /// The trenches; not empty.
        trenches: Vec<Trench>,
    },
}

/// What is in a bore beside its pipe.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum Filling {
    /// Known by the borehole resistance itself, m K/W.
    Resistance(f64),
    /// Grout of a conductivity (W/(m K)), the legs at a distance (m) or, without one, evenly placed.
    Grout {
        /// Conductivity of the grout, W/(m K).
        w_per_m_k: f64,
        /// Distance of the middles of both legs, m.
        spacing_m: Option<f64>,
    },
}

/// A loop as it is described.
#[derive(Debug, Clone, PartialEq)]
pub struct LoopDesign {
    /// Bores or trenches.
    pub layout: Layout,
    /// The pipe.
    pub pipe: Pipe,
    /// The ground.
    pub soil: Soil,
    /// Temperature of the surface through the year.
    pub surface: AnnualSwing,
    /// Geothermal gradient, K/m.
    pub gradient_k_per_m: f64,
    /// What flows in the loop.
    pub brine: Brine,
    /// How much of it, kg/s.
    pub flow_kg_per_s: f64,
    /// The pump.
    pub pump: Pump,
    /// Heat put back each summer, kWh.
    pub recharge_kwh: f64,
}

/// A loop in the ground.
#[derive(Debug, Clone, PartialEq)]
pub struct BuriedLoop {
    /// What it was made from.
    pub design: LoopDesign,
    /// Brine and pump.
    pub circuit: Circuit,
    /// Undisturbed ground at the loop for every hour of the axis, °C.
    undisturbed_c: Vec<f64>,
    /// Fall of the wall for each watt per metre, m K/W.
    response: Response,
    /// From wall to brine, m K/W.
    resistance_m_k_per_w: f64,
    length_m: f64,
    recharge_kw: f64,
    /// Fall of the brine that enters the machine for each kilowatt of the present hour, K/kW.
    k_per_kw: f64,
}

impl Layout {
    /// Length that takes heat, m: of bores, or of pipe in trenches.
    pub fn length_m(&self) -> f64 {
        match self {
            Self::Bores { bores, .. } => total_depth_m(bores),
            Self::Trenches { trenches } => total_pipe_m(trenches),
        }
    }

    /// The same layout with every bore or trench longer by a factor.
    fn stretched(&self, factor: f64) -> Self {
        match self {
            Self::Bores { bores, filling } => Self::Bores {
                bores: bores
                    .iter()
                    .map(|bore| Bore {
                        depth_m: bore.depth_m * factor,
                        ..*bore
                    })
                    .collect(),
                filling: *filling,
            },
            Self::Trenches { trenches } => Self::Trenches {
                trenches: trenches
                    .iter()
                    .map(|trench| Trench {
                        length_m: trench.length_m * factor,
                        ..*trench
                    })
                    .collect(),
            },
        }
    }

    /// Ways side by side in the circuit, and the longest of them, m.
    fn ways(&self) -> (usize, f64) {
        match self {
            Self::Bores { bores, .. } => (
                bores.len(),
                2.0 * bores.iter().map(|bore| bore.depth_m).fold(0.0, f64::max),
            ),
            Self::Trenches { trenches } => (
                trenches.len(),
                trenches.iter().map(Trench::pipe_m).fold(0.0, f64::max),
            ),
        }
    }
}

impl LoopDesign {
    /// The same loop, longer or shorter by a factor.
    pub fn stretched(&self, factor: f64) -> Self {
        Self {
            layout: self.layout.stretched(factor),
            ..self.clone()
        }
    }

    /// The same loop with a total length, m.
    pub fn with_length(&self, length_m: f64) -> Self {
        self.stretched(length_m / self.layout.length_m())
    }

    /// How far the mean wall falls for each watt per metre, m K/W, at rising times (h).
    pub fn wall_response(&self, times_h: &[f64]) -> Vec<f64> {
        match &self.layout {
            Layout::Bores { bores, .. } => bores::wall_response(bores, &self.soil, times_h),
            Layout::Trenches { trenches } => {
                trench::wall_response(trenches, self.pipe.outside_m / 2.0, &self.soil, times_h)
            }
        }
    }

    /// Undisturbed ground at the loop in an hour of the axis, °C.
    ///
    /// Trenches: the annual wave at their depth. Bores: the mean of the surface and the geothermal gradient down to their middle;
    /// the wave reaches some 10 m of them and is left out. Both are weighted by length.
    pub fn undisturbed_c(&self, hour: f64) -> f64 {
        let weighted = match &self.layout {
            Layout::Bores { bores, .. } => bores
                .iter()
                .map(|bore| {
                    bore.depth_m * (self.surface.mean_c + self.gradient_k_per_m * bore.middle_m())
                })
                .sum::<f64>(),
            Layout::Trenches { trenches } => trenches
                .iter()
                .map(|trench| {
                    let diffusivity = self.soil.diffusivity_m2_per_s;
                    trench.pipe_m()
                        * undisturbed_c(&self.surface, trench.depth_m, diffusivity, hour)
                })
                .sum(),
        };
        weighted / self.layout.length_m()
    }

    /// Makes the loop for an axis of a number of hours.
    ///
    /// # Errors
    /// When its response cannot be written as exponentials.
    pub fn build(&self, hours: usize) -> Result<BuriedLoop, NoResponse> {
        let (ways, way_m) = self.layout.ways();
        let circuit = Circuit::new(
            self.brine,
            self.flow_kg_per_s,
            &self.pipe,
            ways,
            way_m,
            self.pump,
        );
        let response = Response::fit(&self.wall_response(&Response::times_h()))?;
        let resistance_m_k_per_w = self.resistance(&circuit, ways);
        let length_m = self.layout.length_m();
        let wall_to_machine = WATTS / length_m * (response.first_hour() + resistance_m_k_per_w);
        // The mean of the brine lies half its warming below what enters the machine. What comes out of the ground is never
        // warmer than its wall, as a linear profile would have it at very small flow.
        let k_per_kw = (wall_to_machine - 0.5 / circuit.capacity_kw_per_k()).max(0.0);
        Ok(BuriedLoop {
            undisturbed_c: (0..hours)
                .map(|hour| self.undisturbed_c(hour as f64))
                .collect(),
            circuit,
            response,
            resistance_m_k_per_w,
            length_m,
            recharge_kw: self.recharge_kwh / (RECHARGE_DAYS * 24.0),
            k_per_kw,
            design: self.clone(),
        })
    }

    /// From wall to brine, m K/W, the mean over the length.
    fn resistance(&self, circuit: &Circuit, ways: usize) -> f64 {
        let fluid = circuit.in_pipe.resistance_m_k_per_w;
        match &self.layout {
            Layout::Bores {
                filling: Filling::Resistance(resistance),
                ..
            } => *resistance,
            Layout::Bores {
                bores,
                filling: Filling::Grout { .. },
            } => {
                let way_w_per_k = circuit.way_w_per_k(ways);
                let weighted: f64 = bores
                    .iter()
                    .filter_map(|bore| Some((bore, self.u_tube(bore)?)))
                    .map(|(bore, tube)| {
                        let ground = self.soil.conductivity_w_per_m_k;
                        bore.depth_m
                            * tube.effective_resistance(ground, fluid, bore.depth_m, way_w_per_k)
                    })
                    .sum();
                weighted / total_depth_m(bores)
            }
            Layout::Trenches { .. } => fluid,
        }
    }

    /// The U-tube of a bore; nothing where only its resistance is known.
    pub fn u_tube(&self, bore: &Bore) -> Option<UTube> {
        match &self.layout {
            Layout::Bores {
                filling:
                    Filling::Grout {
                        w_per_m_k,
                        spacing_m,
                    },
                ..
            } => Some(UTube {
                bore_radius_m: bore.radius_m,
                pipe: self.pipe,
                spacing_m: spacing_m
                    .unwrap_or_else(|| UTube::even_spacing_m(bore.radius_m, self.pipe.outside_m)),
                grout_w_per_m_k: *w_per_m_k,
            }),
            _ => None,
        }
    }
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
    use crate::source::Antifreeze;

    pub(crate) fn one_bore() -> LoopDesign {
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
