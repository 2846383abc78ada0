//! The machine running steadily by its map, in balance with frost and with what the source offers.

use super::duty::ColdSide;
use super::frost::{FrostLoss, humidity_ratio};
use super::heat_pump::HeatPump;
use super::limits::LEAST_DIFFERENCE_K;
use super::map::Range;
use super::sheet::SourceKind;

/// Change of output below which the frost substitution ends, relative, and the most substitutions; two or three are usual.
const FROST_TOLERANCE: f64 = 1e-6;
const MOST_FROST_STEPS: usize = 12;
/// Error of the source temperature at which the balance with the offer ends, K: 3e-7 of the electricity.
const DRAW_TOLERANCE_K: f64 = 1e-5;
/// Of a kilowatt of heat about this comes from the source (COP 4): where the search for that balance begins, nothing else.
const USUAL_EXTRACTED_SHARE: f64 = 0.75;
/// By about this share a machine at the same speed draws more from a source one kelvin warmer, and a machine at the same output takes
/// less electricity (methods §2): the first step of that search, nothing else.
const USUAL_GROWTH_PER_K: f64 = 0.027;
/// Steps of that balance before every third of them halves the bracket, and the most steps: enough from any bracket in use.
const MOST_QUICK_STEPS: usize = 6;
const MOST_DRAW_STEPS: usize = 100;
/// Halvings of the range of output when the machine is turned down: 1e-9 of it is left.
const TURN_DOWN_HALVINGS: usize = 30;
/// At what output the machine is asked to run.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) enum Wanted {
    Greatest,
    Least,
    /// A net output, kW, held between the two.
    Net(f64),
}

/// The machine running steadily by the map, at the sheet's own size.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) struct Steady {
    /// Source temperature entering, °C.
    pub source_c: f64,
    /// Output before frost, kW.
    pub gross_kw: f64,
    /// Frost-free electricity at that output, kW.
    pub electric_kw: f64,
    /// Fan or pump in it, kW.
    pub source_side_kw: f64,
    /// Heat from the source, kW.
    pub extracted_kw: f64,
    /// Speed as a share of the greatest.
    pub speed_share: f64,
    /// Frost.
    pub loss: FrostLoss,
    /// How the output stands to what was wanted.
    pub held: Held,
}

/// How an output stands to what was wanted.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(super) enum Held {
    /// It is what was wanted.
    Between,
    /// It is the least, which is more.
    AtLeast,
    /// It is the greatest, which is no more.
    AtGreatest,
}

impl Steady {
    /// Output that reaches the house, kW.
    pub fn net_kw(&self) -> f64 {
        self.gross_kw * (1.0 - self.loss.output)
    }
}

impl HeatPump {
    /// Humidity ratio of the outdoor air, or 0 where there is no outdoor coil or none that could freeze.
    pub(super) fn moisture(&self, cold: &ColdSide) -> f64 {
        match self.core.source {
            // Above this no coil is near freezing.
            SourceKind::Air if cold.open_c > self.core.frost_free_c => 0.0,
            SourceKind::Air => humidity_ratio(cold.open_c, cold.relative_humidity),
            SourceKind::Brine | SourceKind::Water => 0.0,
        }
    }

    /// The machine in balance with what the source offers: at the entering temperature that is the open one less what the heat drawn
    /// there costs.
    pub(super) fn steady(
        &self,
        cold: &ColdSide,
        flow_c: f64,
        wanted: Wanted,
        moisture: f64,
    ) -> Steady {
        let mut balance = Balance::new(self, cold);
        let mut source_c = cold.open_c;
        if balance.k_per_kw > 0.0 {
            let near_kw = match wanted {
                Wanted::Net(net_kw) => net_kw,
                Wanted::Greatest => self.range_at(cold.open_c, flow_c).greatest_kw,
                Wanted::Least => self.range_at(cold.open_c, flow_c).least_kw,
            };
            source_c -= balance.k_per_kw * usual_draw_kw(near_kw);
        }
        loop {
            let steady = self.steady_at(source_c, flow_c, wanted, moisture);
            match balance.next(&steady) {
                Some(next_c) => source_c = next_c,
                None => return steady,
            }
        }
    }

    /// The machine turned down until what it draws lets the source enter at its lowest; nothing where even its least output
    /// draws more than that, or where nothing it draws cools the source.
    pub(super) fn turned_down(
        &self,
        cold: &ColdSide,
        flow_c: f64,
        moisture: f64,
    ) -> Option<Steady> {
        let lowest_c = self.core.limits.lowest_source_c;
        let k_per_kw = cold.k_per_kw * self.scale;
        if k_per_kw <= 0.0 {
            return None;
        }
        let bearable_kw = (cold.open_c - lowest_c) / k_per_kw;
        let at = |wanted| self.steady_at(lowest_c, flow_c, wanted, moisture);
        let (least, greatest) = (at(Wanted::Least), at(Wanted::Greatest));
        if greatest.extracted_kw <= bearable_kw {
            return Some(greatest);
        }
        let mut held = least;
        let (mut low_kw, mut high_kw) = (least.net_kw(), greatest.net_kw());
        for _ in 0..TURN_DOWN_HALVINGS {
            let middle = at(Wanted::Net(0.5 * (low_kw + high_kw)));
            if middle.extracted_kw <= bearable_kw {
                (low_kw, held) = (middle.net_kw(), middle);
            } else {
                high_kw = middle.net_kw();
            }
        }
        (held.extracted_kw <= bearable_kw).then_some(held)
    }

    /// Least output before frost (kW) and how it changes with flow temperature (kW/K).
    #[inline]
    pub(super) fn least_at(&self, source_c: f64, flow_c: f64) -> (f64, f64) {
        let spot = self
            .core
            .map
            .spot(source_c.min(flow_c - LEAST_DIFFERENCE_K), flow_c);
        (self.allowed(spot.range).least_kw, spot.least_kw_per_k())
    }

    fn range_at(&self, source_c: f64, flow_c: f64) -> Range {
        let lookup_c = source_c.min(flow_c - LEAST_DIFFERENCE_K);
        self.allowed(self.core.map.range(lookup_c, flow_c))
    }

    /// A range of the map as far as the controller allows it.
    fn allowed(&self, range: Range) -> Range {
        let cap_kw = self.core.limits.greatest_output_kw;
        let greatest_kw = cap_kw.map_or(range.greatest_kw, |cap| range.greatest_kw.min(cap));
        Range {
            greatest_kw,
            least_kw: range.least_kw.min(greatest_kw),
        }
    }

    /// The machine at an entering source temperature, by the map.
    pub(super) fn steady_at(
        &self,
        source_c: f64,
        flow_c: f64,
        wanted: Wanted,
        moisture: f64,
    ) -> Steady {
        let core = &*self.core;
        let machine = &core.machine.machine;
        let lookup_c = source_c.min(flow_c - LEAST_DIFFERENCE_K);
        let spot = core.map.spot(lookup_c, flow_c);
        let range = spot.range;
        let Range {
            greatest_kw,
            least_kw,
        } = self.allowed(range);
        let width = range.greatest_kw - range.least_kw;
        let at_output = |gross_kw: f64, held: Held| {
            let fraction = if width > 0.0 {
                (gross_kw - range.least_kw) / width
            } else {
                1.0
            };
            let input = spot.input(fraction);
            let electric_kw = gross_kw * input.electric_per_heat;
            let source_side_kw = machine.source_side_kw(input.speed_share);
            let work_kw = (electric_kw - source_side_kw) * machine.compressor.drive_efficiency;
            let extracted_kw = gross_kw - work_kw;
            let loss = if moisture > 0.0 {
                let evaporating_c = lookup_c - machine.evaporator.approach_k(extracted_kw);
                core.frost.loss(source_c, evaporating_c, moisture)
            } else {
                FrostLoss::default()
            };
            Steady {
                source_c,
                gross_kw,
                electric_kw,
                source_side_kw,
                extracted_kw,
                speed_share: input.speed_share,
                loss,
                held,
            }
        };
        let net_kw = match wanted {
            Wanted::Greatest => return at_output(greatest_kw, Held::AtGreatest),
            Wanted::Least => return at_output(least_kw, Held::AtLeast),
            Wanted::Net(net_kw) => net_kw,
        };
        // Frost takes its share of a greater output: steps to the gross output that leaves what is wanted.
        let mut steady = at_output(net_kw.clamp(least_kw, greatest_kw), Held::Between);
        let mut secant = Secant::default();
        for _ in 0..MOST_FROST_STEPS {
            let gross_kw = net_kw / (1.0 - steady.loss.output);
            steady.held = if gross_kw > greatest_kw {
                Held::AtGreatest
            } else if gross_kw < least_kw {
                Held::AtLeast
            } else {
                Held::Between
            };
            let missing_kw = gross_kw.clamp(least_kw, greatest_kw) - steady.gross_kw;
            if missing_kw.abs() < FROST_TOLERANCE * steady.gross_kw {
                break;
            }
            let next_kw = secant.next(steady.gross_kw, missing_kw);
            steady = at_output(next_kw.clamp(least_kw, greatest_kw), steady.held);
        }
        steady
    }
}

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
    k_per_kw: f64,
    too_cold_c: f64,
    too_warm_c: f64,
    /// The last temperature and by how much the source would be warmer, K.
    last: Option<(f64, f64)>,
    steps: usize,
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

    /// The entering temperature to try next, from the machine at the last one; nothing when it is in balance.
    #[inline]
    pub fn next(&mut self, steady: &Steady) -> Option<f64> {
        if self.k_per_kw == 0.0 {
            return None;
        }
        self.nearer(steady)
    }

    fn nearer(&mut self, steady: &Steady) -> Option<f64> {
        let at_c = steady.source_c;
        let off_k = self.open_c - self.k_per_kw * steady.extracted_kw - at_c;
        if off_k.abs() < DRAW_TOLERANCE_K || self.steps >= MOST_DRAW_STEPS {
            return None;
        }
        self.steps += 1;
        if self.too_warm_c - self.too_cold_c < DRAW_TOLERANCE_K {
            // What encloses nothing was found with another flow temperature.
            (self.too_cold_c, self.too_warm_c) = (f64::NEG_INFINITY, f64::INFINITY);
        }
        if off_k > 0.0 {
            self.too_cold_c = at_c;
        } else {
            self.too_warm_c = at_c;
        }
        let usual = || {
            let growing_kw = match steady.held {
                Held::Between => steady.electric_kw,
                Held::AtLeast | Held::AtGreatest => steady.extracted_kw,
            };
            1.0 + self.k_per_kw * USUAL_GROWTH_PER_K * growing_kw
        };
        let slope = match self.last {
            Some((before_c, off_before_k)) => (off_before_k - off_k) / (at_c - before_c),
            None => usual(),
        };
        self.last = Some((at_c, off_k));
        let by_secant_c = at_c + off_k / slope;
        let middle_c = 0.5 * (self.too_cold_c + self.too_warm_c);
        let halve = self.steps > MOST_QUICK_STEPS && self.steps.is_multiple_of(3);
        let inside = self.too_cold_c < by_secant_c && by_secant_c < self.too_warm_c;
        Some(if inside && !(halve && middle_c.is_finite()) {
            by_secant_c
        } else if middle_c.is_finite() {
            middle_c
        } else {
            at_c + off_k
        })
    }
}

/// A substitution `x ← x + f(x)`, hastened by the secant through its last two places.
#[derive(Debug, Default)]
pub(super) struct Secant {
    last: Option<(f64, f64)>,
}

impl Secant {
    /// The next place, from a place and what the substitution would add to it.
    pub fn next(&mut self, at: f64, off: f64) -> f64 {
        let step = match self.last {
            Some((before, off_before)) if off_before != off => {
                off * (at - before) / (off_before - off)
            }
            _ => off,
        };
        self.last = Some((at, off));
        at + step
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    /// x = cos x at 0.739 085 133 (the fixed point of the cosine, textbook): seven steps where plain substitution takes fifty.
    #[test]
    fn the_secant_hastens_a_substitution() {
        let mut secant = Secant::default();
        let mut at = 1.0_f64;
        for _ in 0..7 {
            at = secant.next(at, at.cos() - at);
        }
        assert!((at - 0.739_085_133_215).abs() < 1e-9, "{at}");
    }
}
