//! The machine running steadily by its map, in balance with frost and with what the source offers.

use super::balance::{Balance, Next, usual_draw_kw};
use super::duty::ColdSide;
use super::frost::{FrostLoss, humidity_ratio};
use super::heat_pump::HeatPump;
use super::limits::LEAST_DIFFERENCE_K;
use super::map::{Range, Spot};
use super::sheet::SourceKind;
use crate::extremes::lesser;

/// Change of output below which the frost substitution ends, relative, and the most substitutions; two or three are usual.
const FROST_TOLERANCE: f64 = 1e-6;
const MOST_FROST_STEPS: usize = 12;
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

/// Where a machine stands in the map.
pub(super) struct Place<'a> {
    /// Source temperature entering, °C.
    pub source_c: f64,
    /// The source temperature it is looked up at: a warmer source is as one at the least difference.
    lookup_c: f64,
    spot: Spot<'a>,
    /// Output before frost, as far as the controller allows it.
    pub range: Range,
}

impl Place<'_> {
    /// How the least output changes with flow temperature, kW/K.
    #[inline]
    pub fn least_kw_per_k(&self) -> f64 {
        self.spot.least_kw_per_k()
    }
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

    /// What lies on the straight line from an earlier one through this one, `further` times as far beyond this as it is from there.
    pub fn beyond(&self, earlier: &Self, further: f64) -> Self {
        let on = |before: f64, now: f64| now + further * (now - before);
        Self {
            source_c: on(earlier.source_c, self.source_c),
            gross_kw: on(earlier.gross_kw, self.gross_kw),
            electric_kw: on(earlier.electric_kw, self.electric_kw),
            source_side_kw: on(earlier.source_side_kw, self.source_side_kw),
            extracted_kw: on(earlier.extracted_kw, self.extracted_kw),
            speed_share: on(earlier.speed_share, self.speed_share),
            loss: self.loss,
            held: self.held,
        }
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
        let first = self.begin(cold, flow_c, wanted);
        self.balanced(cold, first, flow_c, wanted, moisture)
    }

    /// Where to begin to look for the balance with what the source offers.
    #[inline]
    pub(super) fn begin(&self, cold: &ColdSide, flow_c: f64, wanted: Wanted) -> Place<'_> {
        let k_per_kw = cold.k_per_kw * self.scale;
        if k_per_kw == 0.0 {
            return self.place(cold.open_c, flow_c);
        }
        let near_kw = match wanted {
            Wanted::Net(net_kw) => net_kw,
            Wanted::Greatest => self.place(cold.open_c, flow_c).range.greatest_kw,
            Wanted::Least => self.place(cold.open_c, flow_c).range.least_kw,
        };
        self.place(cold.open_c - k_per_kw * usual_draw_kw(near_kw), flow_c)
    }

    /// The machine in balance with what the source offers, looked for from a place on.
    pub(super) fn balanced<'a>(
        &'a self,
        cold: &ColdSide,
        mut place: Place<'a>,
        flow_c: f64,
        wanted: Wanted,
        moisture: f64,
    ) -> Steady {
        let mut balance = Balance::new(self, cold);
        loop {
            let steady = self.steady_at(&place, wanted, moisture);
            match balance.next(&steady, flow_c) {
                Next::At(source_c) => place = self.place(source_c, flow_c),
                Next::Found(steady, _) => return steady,
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
        let place = self.place(lowest_c, flow_c);
        let at = |wanted| self.steady_at(&place, wanted, moisture);
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

    /// Where a machine stands in the map at an entering source and a flow temperature.
    #[inline]
    pub(super) fn place(&self, source_c: f64, flow_c: f64) -> Place<'_> {
        let core = &*self.core;
        let lookup_c = lesser(source_c, flow_c - LEAST_DIFFERENCE_K);
        let spot = core.map.spot(lookup_c, flow_c);
        let mut range = spot.range;
        if let Some(cap_kw) = core.limits.greatest_output_kw {
            range.greatest_kw = lesser(range.greatest_kw, cap_kw);
        }
        range.least_kw = lesser(range.least_kw, range.greatest_kw);
        Place {
            source_c,
            lookup_c,
            spot,
            range,
        }
    }

    /// The machine at a place.
    pub(super) fn steady_at(&self, place: &Place<'_>, wanted: Wanted, moisture: f64) -> Steady {
        let Range {
            greatest_kw,
            least_kw,
        } = place.range;
        let hold = |gross_kw: f64| {
            if gross_kw > greatest_kw {
                (greatest_kw, Held::AtGreatest)
            } else if gross_kw < least_kw {
                (least_kw, Held::AtLeast)
            } else {
                (gross_kw, Held::Between)
            }
        };
        let (mut gross_kw, mut held) = match wanted {
            Wanted::Greatest => (greatest_kw, Held::AtGreatest),
            Wanted::Least => (least_kw, Held::AtLeast),
            Wanted::Net(net_kw) => hold(net_kw),
        };
        let mut secant = Secant::default();
        let mut steps = 0;
        loop {
            let mut steady = self.at_output(place, gross_kw, moisture);
            steady.held = held;
            let Wanted::Net(net_kw) = wanted else {
                return steady;
            };
            // Frost takes its share of a greater output: steps to the gross output that leaves what is wanted.
            let (needed_kw, now_held) = hold(net_kw / (1.0 - steady.loss.output));
            steady.held = now_held;
            let missing_kw = needed_kw - gross_kw;
            if missing_kw.abs() < FROST_TOLERANCE * gross_kw || steps == MOST_FROST_STEPS {
                return steady;
            }
            steps += 1;
            held = now_held;
            gross_kw = hold(secant.next(gross_kw, missing_kw)).0;
        }
    }

    /// The machine at a gross output at a place in the map.
    #[inline]
    fn at_output(&self, place: &Place<'_>, gross_kw: f64, moisture: f64) -> Steady {
        let core = &*self.core;
        let machine = &core.machine.machine;
        let whole = place.spot.range;
        let width = whole.greatest_kw - whole.least_kw;
        let fraction = if width > 0.0 {
            (gross_kw - whole.least_kw) / width
        } else {
            1.0
        };
        let input = place.spot.input(fraction);
        let electric_kw = gross_kw * input.electric_per_heat;
        let source_side_kw = machine.source_side_kw(input.speed_share);
        let work_kw = (electric_kw - source_side_kw) * machine.compressor.drive_efficiency;
        let extracted_kw = gross_kw - work_kw;
        let loss = if moisture > 0.0 {
            let evaporating_c = place.lookup_c - machine.evaporator.approach_k(extracted_kw);
            core.frost.loss(place.source_c, evaporating_c, moisture)
        } else {
            FrostLoss::default()
        };
        Steady {
            source_c: place.source_c,
            gross_kw,
            electric_kw,
            source_side_kw,
            extracted_kw,
            speed_share: input.speed_share,
            loss,
            held: Held::Between,
        }
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
