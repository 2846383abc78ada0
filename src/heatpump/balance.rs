//! The balance of a machine with what its source offers: what it draws cools what enters it.

use super::duty::ColdSide;
use super::heat_pump::HeatPump;
use super::steady::{Held, Steady};

/// Error of the source temperature at which the balance with the offer ends, K: 3e-7 of the electricity.
const DRAW_TOLERANCE_K: f64 = 1e-5;
/// Of a kilowatt of heat about this comes from the source (COP 4): where the search for that balance begins, nothing else.
const USUAL_EXTRACTED_SHARE: f64 = 0.75;
/// By about this share a machine at the same speed draws more from a source one kelvin warmer, and a machine at the same output takes
/// less electricity (Staffell et al. 2012, doi 10.1039/c2ee22653g): the first step of that search, nothing else.
const USUAL_GROWTH_PER_K: f64 = 0.027;
/// Off by less than this, a source's temperature is found on the straight line through the last two machines, K: from 0.1 K away its
/// curve over 0.01 K more (1e-3 of the draw for each square kelvin) leaves 1e-6 K.
const LAST_STEP_K: f64 = 0.01;
/// How far beyond its last two machines that line may lead, as a share of their distance.
const FURTHEST: f64 = 0.25;
/// Steps of that balance before every third of them halves the bracket, and the most steps: enough from any bracket in use.
const MOST_QUICK_STEPS: usize = 6;
const MOST_DRAW_STEPS: usize = 100;
/// Heat that a machine usually draws for an output, kW: where a search begins.
pub(super) fn usual_draw_kw(heat_kw: f64) -> f64 {
    USUAL_EXTRACTED_SHARE * heat_kw
}

/// The search for the entering temperature at which a source gives what is drawn from it.
///
/// Too cold and too warm a temperature enclose it as soon as both are known, because the heat drawn is continuous and bounded; secant steps
/// lead to it, and halving ends what they do not.
pub(super) struct Balance {
    open_c: f64,
    /// Fall for each kilowatt of the machine at its sheet's size, K/kW.
    pub k_per_kw: f64,
    too_cold_c: f64,
    too_warm_c: f64,
    last: Option<Tried>,
    steps: usize,
}

/// A machine that was tried, its flow temperature, and by how much its source would be warmer than it was taken, K.
struct Tried {
    steady: Steady,
    flow_c: f64,
    off_k: f64,
}

/// What a search says of the machine it is shown.
pub(super) enum Next {
    /// Try another entering temperature, °C.
    At(f64),
    /// This is the machine in balance, with its flow temperature.
    Found(Steady, f64),
}

impl Balance {
    /// A search with an offer, which is made in kelvin per kilowatt of the real machine.
    #[inline]
    pub fn new(pump: &HeatPump, cold: &ColdSide) -> Self {
        Self {
            open_c: cold.open_c,
            k_per_kw: cold.k_per_kw * pump.scale,
            too_cold_c: f64::NEG_INFINITY,
            too_warm_c: f64::INFINITY,
            last: None,
            steps: 0,
        }
    }

    /// Where to go on from a machine at the last entering temperature and at a flow temperature.
    #[inline]
    pub fn next(&mut self, steady: &Steady, flow_c: f64) -> Next {
        if self.k_per_kw == 0.0 {
            return Next::Found(*steady, flow_c);
        }
        self.nearer(steady, flow_c)
    }

    fn nearer(&mut self, steady: &Steady, flow_c: f64) -> Next {
        let at_c = steady.source_c;
        let off_k = self.open_c - self.k_per_kw * steady.extracted_kw - at_c;
        if off_k.abs() < DRAW_TOLERANCE_K || self.steps == MOST_DRAW_STEPS {
            return Next::Found(*steady, flow_c);
        }
        self.steps += 1;
        let slope = match &self.last {
            Some(last) => (last.off_k - off_k) / (at_c - last.steady.source_c),
            None => {
                let growing_kw = match steady.held {
                    Held::Between => steady.electric_kw,
                    Held::AtLeast | Held::AtGreatest => steady.extracted_kw,
                };
                1.0 + self.k_per_kw * USUAL_GROWTH_PER_K * growing_kw
            }
        };
        let step_k = off_k / slope;
        if let Some(last) = &self.last {
            let further = step_k / (at_c - last.steady.source_c);
            let alike = last.steady.held == steady.held;
            if alike && off_k.abs() < LAST_STEP_K && further.abs() < FURTHEST {
                let found = steady.beyond(&last.steady, further);
                return Next::Found(found, flow_c + further * (flow_c - last.flow_c));
            }
        }
        self.last = Some(Tried {
            steady: *steady,
            flow_c,
            off_k,
        });
        Next::At(self.enclosed(at_c, off_k, at_c + step_k))
    }

    /// A temperature to try between what is known to be too cold and too warm.
    fn enclosed(&mut self, at_c: f64, off_k: f64, wish_c: f64) -> f64 {
        if self.too_warm_c - self.too_cold_c < DRAW_TOLERANCE_K {
            // What encloses nothing was found with another flow temperature.
            (self.too_cold_c, self.too_warm_c) = (f64::NEG_INFINITY, f64::INFINITY);
        }
        if off_k > 0.0 {
            self.too_cold_c = at_c;
        } else {
            self.too_warm_c = at_c;
        }
        let middle_c = 0.5 * (self.too_cold_c + self.too_warm_c);
        let halve = self.steps > MOST_QUICK_STEPS && self.steps.is_multiple_of(3);
        if self.too_cold_c < wish_c && wish_c < self.too_warm_c && !(halve && middle_c.is_finite())
        {
            wish_c
        } else if middle_c.is_finite() {
            middle_c
        } else {
            at_c + off_k
        }
    }
}
