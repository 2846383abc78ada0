//! A loop as it is described: where bores or trenches lie, what is in them, the ground about them; and the loop made of it.

use super::borehole::{UTube, UTubes};
use super::bores::{self, Bore, total_depth_m};
use super::brine::Brine;
use super::buried::{BuriedLoop, WATTS};
use super::circuit::{Circuit, Pump};
use super::pipe::Pipe;
use super::response::{NoResponse, Response};
use super::soil::Soil;
use super::trench::{self, Trench, total_pipe_m};
use super::undisturbed::{AnnualSwing, undisturbed_c};

/// What lies in the ground.
#[derive(Debug, Clone, PartialEq)]
pub enum Layout {
    /// Bores, side by side in the circuit.
    Bores {
        /// The bores; not empty.
        bores: Vec<Bore>,
        /// What is in them.
        filling: Filling,
        /// U-tubes in each.
        u_tubes: UTubes,
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
            Self::Bores {
                bores,
                filling,
                u_tubes,
            } => Self::Bores {
                bores: bores
                    .iter()
                    .map(|bore| Bore {
                        depth_m: bore.depth_m * factor,
                        ..*bore
                    })
                    .collect(),
                filling: *filling,
                u_tubes: *u_tubes,
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
            Self::Bores { bores, u_tubes, .. } => (
                bores.len() * u_tubes.number(),
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
        let resistance_m_k_per_w = self.resistance(&circuit);
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
            recharge_kw: self.recharge_kwh / (super::buried::RECHARGE_DAYS * 24.0),
            k_per_kw,
            design: self.clone(),
        })
    }

    /// From wall to brine, m K/W, the mean over the length.
    fn resistance(&self, circuit: &Circuit) -> f64 {
        let fluid = circuit.in_pipe.resistance_m_k_per_w;
        match &self.layout {
            Layout::Bores {
                filling: Filling::Resistance(resistance),
                ..
            } => *resistance,
            Layout::Bores {
                bores,
                filling: Filling::Grout { .. },
                ..
            } => {
                let bore_w_per_k = circuit.way_w_per_k(bores.len());
                let weighted: f64 = bores
                    .iter()
                    .filter_map(|bore| Some((bore, self.u_tube(bore)?)))
                    .map(|(bore, tube)| {
                        let ground = self.soil.conductivity_w_per_m_k;
                        bore.depth_m
                            * tube.effective_resistance(ground, fluid, bore.depth_m, bore_w_per_k)
                    })
                    .sum();
                weighted / total_depth_m(bores)
            }
            Layout::Trenches { .. } => fluid,
        }
    }

    /// The U-tubes of a bore; nothing where only its resistance is known.
    pub fn u_tube(&self, bore: &Bore) -> Option<UTube> {
        match &self.layout {
            Layout::Bores {
                filling:
                    Filling::Grout {
                        w_per_m_k,
                        spacing_m,
                    },
                u_tubes,
                ..
            } => Some(UTube {
                count: *u_tubes,
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
