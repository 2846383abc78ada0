//! The machine in balance with the emitters, and with what lifts the flow behind it.
//!
//! Machine, then backup heater or boiler, stand one behind the other in the flow to the rooms. Alone, the machine gives what the
//! emitters take at a flow that it reaches: the less it can give, the cooler the flow. Where that leaves the rooms below the point
//! at which they are helped, the emitters carry more, at a hotter flow and with a hotter return; the machine warms that return as
//! far as it can, and the rest is lifted behind it.

use super::machine::ROUNDING;
use super::rooms::Rooms;
use super::system::MachineSystem;
use crate::heatpump::{ColdSide, Delivered, Duty};
use crate::home::{Emitters, Supply, WaterTemperatures};

/// Heat asked and heat given agree to this share.
const TOLERANCE: f64 = 1e-4;

/// Substitutions; output falls by a few percent over the kelvins in question, so each gains more than a digit.
const MOST_STEPS: usize = 12;

/// Halvings of the heat that is carried where the help is at its limit: 16 leave less than the tolerance of the whole.
const HALVINGS: usize = 16;

/// What the rooms get in an hour, and how.
pub(super) struct Balanced {
    /// What the machine is asked.
    pub duty: Duty,
    /// What it gives.
    pub delivered: Delivered,
    /// Heat that is to be added behind it, kWh.
    pub lifted_kwh: f64,
    /// Water at the emitters where heat is added; else it is the machine's.
    pub lifted_water: Option<WaterTemperatures>,
    /// By how much valves cool the return below that of the designed water flow, K.
    pub throttled_k: f64,
    /// The emitters need a hotter flow for what is wanted than the machine's highest.
    pub capped: bool,
    /// The control's flow is too cool for what is wanted.
    pub too_cool: bool,
}

/// A machine, its emitters and the hour's rooms.
pub(super) struct WarmSide<'a> {
    pub system: &'a MachineSystem,
    pub emitters: &'a Emitters,
    pub cold: &'a ColdSide,
    pub rooms: &'a Rooms,
    /// Part of the hour that hot water left, h.
    pub hours: f64,
    /// Most heat that can be added behind the machine, kW.
    pub lift_kw: f64,
    /// Flow temperature that is held whatever the rooms need, °C.
    pub held_flow_c: Option<f64>,
}

impl WarmSide<'_> {
    /// The hour's balance.
    pub fn balance(&self) -> Balanced {
        let alone = self.alone();
        let lacking = self.rooms.least_kwh > alone.delivered.heat_kwh;
        if lacking && self.lift_kw > 0.0 {
            self.lifted(alone)
        } else {
            alone
        }
    }

    /// What the control lets the emitters have of a heat, kW.
    fn supply(&self, heat_kw: f64) -> Supply {
        let rooms = self.rooms;
        self.emitters.supply(heat_kw, rooms.room_c, rooms.outdoor_c)
    }

    /// Highest flow of the machine, °C, seen from the emitters.
    fn highest_c(&self) -> f64 {
        let limits = self.system.machine.limits();
        limits.highest_flow_at(self.cold.open_c) - self.emitters.header_k()
    }

    /// The machine alone.
    fn alone(&self) -> Balanced {
        let highest_c = self.highest_c();
        let reached = |heat_kw: f64, warm: Supply| {
            if warm.water.flow_c <= highest_c {
                warm
            } else {
                self.emitters
                    .supply_at(heat_kw, self.rooms.room_c, highest_c)
            }
        };
        let ask = |heat_kw: f64| reached(heat_kw, self.supply(heat_kw));
        let first = self.supply(self.rooms.wanted_kw);
        let mut warm = reached(self.rooms.wanted_kw, first);
        let mut duty = self.duty(&warm);
        let mut delivered = self.system.machine.deliver(self.cold, &duty);
        for _ in 0..MOST_STEPS {
            let given_kw = delivered.heat_kwh / duty.hours;
            let short = delivered.flags.short && given_kw > 0.0;
            if !short || given_kw >= duty.heat_kw * (1.0 - TOLERANCE) {
                break;
            }
            // Asked for what it gave at a hotter flow, it could give more: its greatest output at this flow is the next guess.
            let cooler = self.duty(&ask(given_kw));
            let greatest_kw = self
                .system
                .machine
                .greatest_output_kw(self.cold, cooler.flow_c);
            warm = ask(greatest_kw.clamp(given_kw, self.rooms.wanted_kw));
            duty = self.duty(&warm);
            delivered = self.system.machine.deliver(self.cold, &duty);
        }
        Balanced {
            duty,
            delivered,
            lifted_kwh: 0.0,
            lifted_water: None,
            throttled_k: throttled_k(&warm),
            capped: first.water.flow_c > highest_c,
            too_cool: first.heat_kw < self.rooms.wanted_kw * (1.0 - ROUNDING),
        }
    }

    /// The machine with help behind it, from what it gives alone.
    fn lifted(&self, alone: Balanced) -> Balanced {
        let least_kw = self.supply(self.rooms.least_kwh).heat_kw;
        let total_kw = least_kw.min(self.emitters.greatest_output_kw());
        if total_kw <= alone.delivered.heat_kwh {
            return alone;
        }
        let guess_kw = alone.delivered.heat_kwh / self.hours;
        let enough = |total_kw: f64| {
            let machine_kw = if guess_kw > 0.0 {
                self.beside(total_kw, guess_kw).heat_kw
            } else {
                0.0
            };
            machine_kw * self.hours + self.lift_kw >= total_kw
        };
        let mut carried_kw = total_kw;
        if !enough(total_kw) {
            let mut low_kw = alone.delivered.heat_kwh;
            let mut high_kw = total_kw;
            for _ in 0..HALVINGS {
                let middle_kw = 0.5 * (low_kw + high_kw);
                if enough(middle_kw) {
                    low_kw = middle_kw;
                } else {
                    high_kw = middle_kw;
                }
            }
            carried_kw = low_kw;
        }
        let warm = self.supply(carried_kw);
        // A machine that stands keeps its reason for it.
        let (mut duty, mut delivered) = (alone.duty, alone.delivered);
        if guess_kw > 0.0 {
            duty = self.beside(carried_kw, guess_kw);
            delivered = self.system.machine.deliver(self.cold, &duty);
            // It gives just what it can, which is no reason to say that it could do more.
            delivered.flags.short |= alone.delivered.flags.short;
            delivered.flags.turned_down |= alone.delivered.flags.turned_down;
        }
        Balanced {
            duty,
            delivered,
            lifted_kwh: (carried_kw - delivered.heat_kwh).clamp(0.0, self.lift_kw),
            lifted_water: Some(warm.water),
            throttled_k: throttled_k(&warm),
            ..alone
        }
    }

    /// What the machine can be asked where the emitters carry more than it gives, sought from a guess, kW: it warms their return to a
    /// flow that it reaches and at which it can give as much.
    fn beside(&self, total_kw: f64, guess_kw: f64) -> Duty {
        let warm = self.supply(total_kw);
        let spread_k = warm.spread_k;
        let above_k = (warm.water.flow_c - self.highest_c()).max(0.0);
        let most_kw = if above_k < spread_k {
            total_kw * (1.0 - above_k / spread_k)
        } else {
            0.0
        };
        let duty = |heat_kw: f64| {
            let share = heat_kw / total_kw;
            let full = self.duty(&warm);
            Duty {
                heat_kw,
                flow_c: full.flow_c - spread_k * (1.0 - share),
                spread_k: spread_k * share,
                ..full
            }
        };
        let mut heat_kw = guess_kw.min(most_kw);
        for _ in 0..MOST_STEPS {
            let flow_c = duty(heat_kw).flow_c;
            let greatest_kw = self.system.machine.greatest_output_kw(self.cold, flow_c);
            let next_kw = greatest_kw.min(most_kw);
            let settled = (next_kw - heat_kw).abs() <= TOLERANCE * total_kw;
            heat_kw = next_kw;
            if settled {
                break;
            }
        }
        duty(heat_kw)
    }

    fn duty(&self, warm: &Supply) -> Duty {
        let needed_c = warm.water.flow_c + self.emitters.header_k();
        Duty {
            heat_kw: warm.heat_kw,
            flow_c: self.held_flow_c.unwrap_or(needed_c),
            spread_k: warm.spread_k,
            hours: self.hours,
            at_full_output: false,
        }
    }
}

fn throttled_k(warm: &Supply) -> f64 {
    warm.water.flow_c - warm.water.return_c - warm.spread_k
}
