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
/// Hastened substitutions of that balance before a bracket is sought; two or three are usual.
const MOST_QUICK_STEPS: usize = 6;
/// Of a kilowatt of heat about this comes from the source (COP 4): where the substitution begins, nothing else.
const USUAL_EXTRACTED_SHARE: f64 = 0.75;
/// Most steps of that balance: the last half of them halve the bracket, which is enough from any bracket in use.
const MOST_DRAW_STEPS: usize = 80;
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

    /// The machine in balance with what the source offers.
    ///
    /// Finds the entering temperature that is the open one less what the heat drawn there costs. The heat drawn is continuous
    /// and bounded, so a bracket always exists; false position (Illinois) with bisection always ends.
    pub(super) fn steady(
        &self,
        cold: &ColdSide,
        flow_c: f64,
        wanted: Wanted,
        moisture: f64,
    ) -> Steady {
        let at = |source_c: f64| self.steady_at(source_c, flow_c, wanted, moisture);
        // An offer is made in kelvin per kilowatt of the real machine.
        let k_per_kw = cold.k_per_kw * self.scale;
        if k_per_kw == 0.0 {
            return at(cold.open_c);
        }
        let excess =
            |steady: &Steady| steady.source_c + k_per_kw * steady.extracted_kw - cold.open_c;
        // What is drawn hardly changes over the fall: a substitution from near the end, hastened, almost always suffices.
        let near_kw = match wanted {
            Wanted::Net(net_kw) => USUAL_EXTRACTED_SHARE * net_kw,
            Wanted::Least | Wanted::Greatest => 0.0,
        };
        let mut secant = Secant::default();
        let mut source_c = cold.open_c - k_per_kw * near_kw;
        for _ in 0..MOST_QUICK_STEPS {
            let steady = at(source_c);
            let off_k = -excess(&steady);
            if off_k.abs() < DRAW_TOLERANCE_K {
                return steady;
            }
            source_c = secant.next(source_c, off_k);
        }
        let open = at(cold.open_c);
        let (mut high, mut high_excess) = (cold.open_c, excess(&open));
        let mut width = high_excess.max(DRAW_TOLERANCE_K);
        let mut low = high - width;
        let mut steady = at(low);
        let mut low_excess = excess(&steady);
        for _ in 0..MOST_DRAW_STEPS {
            if low_excess <= 0.0 {
                break;
            }
            width *= 2.0;
            low = high - width;
            steady = at(low);
            low_excess = excess(&steady);
        }
        // The end that stays twice is weighted down (Illinois), so that both ends move.
        let mut stayed = 0;
        for step in 0..MOST_DRAW_STEPS {
            if excess(&steady).abs() < DRAW_TOLERANCE_K || high - low < DRAW_TOLERANCE_K {
                break;
            }
            let middle = if step > MOST_DRAW_STEPS / 2 {
                0.5 * (low + high)
            } else {
                (low * high_excess - high * low_excess) / (high_excess - low_excess)
            };
            steady = at(middle);
            let found = excess(&steady);
            if found > 0.0 {
                (high, high_excess) = (middle, found);
                if stayed == 1 {
                    low_excess *= 0.5;
                }
                stayed = 1;
            } else {
                (low, low_excess) = (middle, found);
                if stayed == -1 {
                    high_excess *= 0.5;
                }
                stayed = -1;
            }
        }
        steady
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

    /// Least output before frost, kW.
    pub(super) fn least_kw_at(&self, source_c: f64, flow_c: f64) -> f64 {
        let lookup_c = source_c.min(flow_c - LEAST_DIFFERENCE_K);
        self.allowed(self.core.map.range(lookup_c, flow_c)).least_kw
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
    fn steady_at(&self, source_c: f64, flow_c: f64, wanted: Wanted, moisture: f64) -> Steady {
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
