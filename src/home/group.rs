//! One kind of emitter at its own design temperatures: heat against water temperature.

use std::sync::LazyLock;

use super::power::FixedPower;
use crate::fault::{self, Fault};

/// What carries the heat into the rooms, with the exponent of its output.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum EmitterKind {
    /// Panel radiators: output ∝ ΔT^1.3 (EN 442).
    Radiators,
    /// Floor heating: heat from floor to room ∝ (θF − θi)^1.1 (EN 1264); the same exponent is used from water to room.
    Underfloor,
    /// Fan convectors: output ∝ ΔT^1.05 (common practice: exponent 1.0 to 1.1).
    FanConvectors,
}

impl EmitterKind {
    /// Exponent of output against excess temperature.
    pub fn exponent(self) -> f64 {
        match self {
            Self::Radiators => 1.3,
            Self::Underfloor => 1.1,
            Self::FanConvectors => 1.05,
        }
    }

    /// Share of the design excess temperature that carries a share of the design output: its power of one over the exponent.
    #[inline]
    fn excess_share(self, output_share: f64) -> f64 {
        static TABLES: LazyLock<[FixedPower; 3]> = LazyLock::new(|| {
            [
                EmitterKind::Radiators,
                EmitterKind::Underfloor,
                EmitterKind::FanConvectors,
            ]
            .map(|kind| FixedPower::new(1.0 / kind.exponent()))
        });
        TABLES[self as usize].of(output_share)
    }
}

/// Part of a home's emitters: one kind at its own design temperatures.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Group {
    /// Kind of emitter.
    pub kind: EmitterKind,
    /// Share of the design heat load, 0 to 1.
    pub share: f64,
    /// Flow at the design heat load, °C.
    pub flow_c: f64,
    /// Return at the design heat load, °C.
    pub return_c: f64,
}

/// Water temperatures at a load.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct WaterTemperatures {
    /// To the emitters, °C.
    pub flow_c: f64,
    /// Coming back, °C.
    pub return_c: f64,
}

impl WaterTemperatures {
    /// Mean of flow and return, °C: what the emitter's output follows.
    pub fn mean_c(&self) -> f64 {
        (self.flow_c + self.return_c) / 2.0
    }
}

/// Iterations of the inverse emitter curve; convergence is quadratic.
const MAX_ITERATIONS: usize = 50;
/// Flow temperature is solved to this many kelvins.
const TOLERANCE_K: f64 = 1e-9;

impl Group {
    pub(super) fn spread_k(&self) -> f64 {
        self.flow_c - self.return_c
    }

    pub(super) fn excess_k(&self, room_c: f64) -> f64 {
        if fault::on(Fault::FlowForMean) {
            return self.flow_c - room_c;
        }
        (self.flow_c + self.return_c) / 2.0 - room_c
    }

    /// Water temperatures at a share of its design output, into rooms at `now_c`, designed for rooms at `room_c`.
    #[inline]
    pub(super) fn at_share(&self, share: f64, room_c: f64, now_c: f64) -> WaterTemperatures {
        let mean_c = now_c + self.excess_k(room_c) * self.kind.excess_share(share);
        let half_spread_k = self.spread_k() * share / 2.0;
        WaterTemperatures {
            flow_c: mean_c + half_spread_k,
            return_c: mean_c - half_spread_k,
        }
    }

    /// Share of its design output at a flow this much above the room, K: the inverse of [`Group::at_share`].
    pub(super) fn share_at(&self, above_room_k: f64, room_c: f64) -> f64 {
        if above_room_k <= 0.0 {
            return 0.0;
        }
        // Solve excess = D s^(1/n) + (S/2) s for the share s; with y = s^(1/n) both terms grow with y.
        let n = self.kind.exponent();
        let design_excess_k = self.excess_k(room_c);
        let half_spread_k = self.spread_k() / 2.0;
        let mut y = above_room_k / design_excess_k;
        for _ in 0..MAX_ITERATIONS {
            let error_k = design_excess_k * y + half_spread_k * y.powf(n) - above_room_k;
            if error_k.abs() < TOLERANCE_K {
                break;
            }
            // Newton from above on a convex function stays above the root and cannot leave the domain.
            y -= error_k / (design_excess_k + half_spread_k * n * y.powf(n - 1.0));
        }
        y.powf(n)
    }
}
