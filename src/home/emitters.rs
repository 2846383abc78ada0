//! Radiators and floors: the water temperatures that carry a given heat into the room.

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
}

/// Emitters sized once, at their own design point; they do not grow when the heat loss is varied.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Emitters {
    kind: EmitterKind,
    design_load_kw: f64,
    design_flow_c: f64,
    design_spread_k: f64,
    design_excess_k: f64,
    greatest_flow_c: f64,
    greatest_output_kw: f64,
}

/// Water temperatures at a load.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct WaterTemperatures {
    /// Leaving the machine, °C.
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

impl Emitters {
    /// Emitters that give `design_load_kw` (> 0) into a room at `room_c` with water at `flow_c`/`return_c`
    /// (flow > return > room), and whose flow never exceeds `greatest_flow_c`.
    pub fn new(
        kind: EmitterKind,
        design_load_kw: f64,
        flow_c: f64,
        return_c: f64,
        room_c: f64,
        greatest_flow_c: f64,
    ) -> Self {
        let mut emitters = Self {
            kind,
            design_load_kw,
            design_flow_c: flow_c,
            design_spread_k: flow_c - return_c,
            design_excess_k: (flow_c + return_c) / 2.0 - room_c,
            greatest_flow_c: greatest_flow_c.max(flow_c),
            greatest_output_kw: design_load_kw,
        };
        emitters.greatest_output_kw = emitters.output_kw(emitters.greatest_flow_c, room_c);
        emitters
    }

    /// Kind of emitter.
    pub fn kind(&self) -> EmitterKind {
        self.kind
    }

    /// Heat they give at their design point, kW.
    pub fn design_load_kw(&self) -> f64 {
        self.design_load_kw
    }

    /// Flow temperature at the design load, °C.
    pub fn design_flow_c(&self) -> f64 {
        self.design_flow_c
    }

    /// Other emitters of the same kind for the same load, with another design flow temperature (°C) and the same spread as
    /// far as the room (°C) allows; the greatest flow keeps its distance.
    pub fn with_design_flow(&self, flow_c: f64, room_c: f64) -> Self {
        /// Return water stays at least this much above the room, K.
        const LEAST_EXCESS_K: f64 = 1.0;
        let return_c = (flow_c - self.design_spread_k)
            .max(room_c + LEAST_EXCESS_K)
            .min(flow_c);
        let greatest_flow_c = flow_c + (self.greatest_flow_c - self.design_flow_c);
        Self::new(
            self.kind,
            self.design_load_kw,
            flow_c,
            return_c,
            room_c,
            greatest_flow_c,
        )
    }

    /// Flow temperature that is never exceeded, °C.
    pub fn greatest_flow_c(&self) -> f64 {
        self.greatest_flow_c
    }

    /// Water temperatures that carry a heat (kW, ≥ 0) into a room.
    ///
    /// EN 442: output ∝ excess temperature ^ n with the arithmetic mean water temperature; the water flow stays as
    /// designed, so flow minus return is proportional to the heat.
    pub fn at_load(&self, heat_kw: f64, room_c: f64) -> WaterTemperatures {
        let share = heat_kw / self.design_load_kw;
        let mean_c = room_c + self.design_excess_k * share.powf(1.0 / self.kind.exponent());
        let half_spread_k = self.design_spread_k * share / 2.0;
        WaterTemperatures {
            flow_c: mean_c + half_spread_k,
            return_c: mean_c - half_spread_k,
        }
    }

    /// Heat they give at a flow temperature, kW: the inverse of [`Emitters::at_load`].
    pub fn output_kw(&self, flow_c: f64, room_c: f64) -> f64 {
        let excess_k = flow_c - room_c;
        if excess_k <= 0.0 {
            return 0.0;
        }
        // Solve excess = D s^(1/n) + (S/2) s for the share s; with y = s^(1/n) both terms grow with y.
        let n = self.kind.exponent();
        let half_spread_k = self.design_spread_k / 2.0;
        let mut y = excess_k / self.design_excess_k;
        for _ in 0..MAX_ITERATIONS {
            let error_k = self.design_excess_k * y + half_spread_k * y.powf(n) - excess_k;
            if error_k.abs() < TOLERANCE_K {
                break;
            }
            // Newton from above on a convex function stays above the root and cannot leave the domain.
            y -= error_k / (self.design_excess_k + half_spread_k * n * y.powf(n - 1.0));
        }
        self.design_load_kw * y.powf(n)
    }

    /// Greatest heat at the greatest permitted flow temperature into a room at its design temperature, kW.
    pub fn greatest_output_kw(&self) -> f64 {
        self.greatest_output_kw
    }

    /// Mean water minus room temperature at the design load, K.
    pub fn design_excess_k(&self) -> f64 {
        self.design_excess_k
    }

    /// Flow minus return at the design load, K.
    pub fn design_spread_k(&self) -> f64 {
        self.design_spread_k
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;

    /// EN 442 factors against ΔT50 (methods §5, computed): 40 K 0.7482, 35 K 0.6290, 30 K 0.5148, 25 K 0.4061, 20 K 0.3039.
    #[test]
    fn radiator_factors_follow_en_442() {
        // No spread, so that flow = mean: a radiator of 1 kW at ΔT 50.
        let radiator = Emitters::new(EmitterKind::Radiators, 1.0, 70.0, 70.0, 20.0, 80.0);
        for (excess, factor) in [
            (40.0, 0.7482),
            (35.0, 0.6290),
            (30.0, 0.5148),
            (25.0, 0.4061),
            (20.0, 0.3039),
        ] {
            // Printed to four figures.
            assert!((radiator.output_kw(20.0 + excess, 20.0) - factor).abs() < 5e-5);
        }
    }

    /// methods §16: +15 % loss moves a 50 °C flow to about 53.5 °C, −15 % to 46.4 °C, with the emitters unchanged (50/43 at design).
    #[test]
    fn more_heat_through_the_same_radiators_needs_hotter_water() {
        let radiators = Emitters::new(EmitterKind::Radiators, 5.0, 50.0, 43.0, 20.0, 80.0);
        assert!((radiators.at_load(5.0 * 1.15, 20.0).flow_c - 53.5).abs() < 0.1);
        assert!((radiators.at_load(5.0 * 0.85, 20.0).flow_c - 46.4).abs() < 0.1);
        assert!((radiators.at_load(5.0, 20.0).mean_c() - 46.5).abs() < 1e-12);
    }

    proptest! {
        #[test]
        fn output_inverts_load(load in 0.01..20.0, flow in 30.0..70.0, spread in 0.0..10.0f64, room in 15.0..22.0) {
            let emitters = Emitters::new(EmitterKind::Radiators, 6.0, flow, flow - spread.min(flow - room - 2.0), room, 85.0);
            let water = emitters.at_load(load, room);
            prop_assert!((emitters.output_kw(water.flow_c, room) / load - 1.0).abs() < 1e-6);
        }

        #[test]
        fn flow_rises_with_load(load in 0.0..10.0, more in 0.001..5.0) {
            let emitters = Emitters::new(EmitterKind::Underfloor, 6.0, 35.0, 30.0, 20.0, 50.0);
            prop_assert!(emitters.at_load(load + more, 20.0).flow_c > emitters.at_load(load, 20.0).flow_c);
        }
    }
}
