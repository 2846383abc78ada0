//! One hour of the heat pump: what it gives for what is wanted, and what that takes.
//!
//! Limits, frost, cycling and the source's fall meet here, around look-ups in the map. Nothing is allocated and no power is
//! raised; what is computed per hour is a handful of look-ups and, in damp cold, a few exponentials.

use super::duty::{ColdSide, Delivered, Duty, Flags};
use super::heat_pump::HeatPump;
use super::part_load::{running_rise_k, start_up_loss_kw, starts_per_hour};
use super::steady::{Held, Secant, Steady, Wanted};
use crate::fault::{self, Fault};

/// Change of the running flow temperature below which its substitution ends, K (3e-6 of the electricity), and the most substitutions.
const RISE_TOLERANCE_K: f64 = 1e-4;
const MOST_RISE_STEPS: usize = 30;
/// A flow asked this much above the highest is the highest, K: rounding.
const ROUNDING_K: f64 = 1e-6;
/// Difference of wanted and greatest heat that is no shortfall, relative: rounding.
const ENOUGH: f64 = 1e-9;

impl HeatPump {
    /// What the machine does with an hour.
    ///
    /// Outside its limits it stands, and where a flow above its highest is asked. Where what it draws would bring the
    /// source below its lowest, it turns down to what the source bears, and stands when that is less than its least. Between its least and greatest
    /// output it runs all the time at the heat wanted; below it goes on and off at a hotter flow; a block at full output runs
    /// until it is done. Frost (outdoor air only) follows coil temperature and humidity; without humidity the air is that of the
    /// standard rating conditions.
    pub fn deliver(&self, cold: &ColdSide, duty: &Duty) -> Delivered {
        let core = &*self.core;
        let mut flags = Flags::default();
        if !(duty.heat_kw > 0.0 && duty.hours > 0.0) {
            return Delivered::standing(flags);
        }
        if !core.limits.allows_source(cold.open_c) {
            flags.stopped = true;
            return Delivered::standing(flags);
        }
        let highest_c = core.limits.highest_flow_at(cold.open_c);
        if duty.flow_c > highest_c + ROUNDING_K {
            flags.too_hot = true;
            return Delivered::standing(flags);
        }
        let flow_c = duty.flow_c.min(highest_c);
        let wanted_kw = duty.heat_kw / self.scale;
        let moisture = self.moisture(cold);

        let wanted = if duty.at_full_output {
            Wanted::Greatest
        } else {
            Wanted::Net(wanted_kw)
        };
        let on_and_off = OnAndOff {
            pump: self,
            spread_k: duty.spread_k,
            wanted_kw,
            flow_c,
            highest_c,
        };
        // Where neither frost nor a falling source comes into it, the map's least output alone tells that it goes on and off.
        let plain = moisture == 0.0 && cold.k_per_kw == 0.0 && !duty.at_full_output;
        let (mut steady, flow_c, mut share) =
            if plain && wanted_kw < self.least_kw_at(cold.open_c, flow_c) {
                on_and_off.on_the_map(cold)
            } else {
                let steady = self.steady(cold, flow_c, wanted, moisture);
                match steady.held {
                    Held::Between => (steady, flow_c, 1.0),
                    Held::AtLeast => on_and_off.from(steady, cold, moisture),
                    Held::AtGreatest => {
                        flags.short = wanted_kw > steady.net_kw() * (1.0 + ENOUGH);
                        (steady, flow_c, (wanted_kw / steady.net_kw()).min(1.0))
                    }
                }
            };
        if steady.source_c < core.limits.lowest_source_c {
            let Some(held) = self.turned_down(cold, flow_c, moisture) else {
                flags.stopped = true;
                return Delivered::standing(flags);
            };
            flags.turned_down = true;
            flags.short = wanted_kw > held.net_kw() * (1.0 + ENOUGH);
            share = (wanted_kw / held.net_kw()).min(1.0);
            steady = held;
        }
        flags.cycling = share < 1.0 && !duty.at_full_output;
        flags.frosting = steady.loss.cop > 0.0;
        self.account(duty, &steady, flow_c, share, flags)
    }

    /// Greatest heat that reaches the house at a flow temperature, kW, frost deducted and the source's fall met; 0 outside the
    /// limits.
    pub fn greatest_output_kw(&self, cold: &ColdSide, flow_c: f64) -> f64 {
        let limits = &self.core.limits;
        if !limits.allows_source(cold.open_c) || flow_c > limits.highest_flow_at(cold.open_c) {
            return 0.0;
        }
        let steady = self.steady(cold, flow_c, Wanted::Greatest, self.moisture(cold));
        if steady.source_c >= limits.lowest_source_c {
            return steady.net_kw() * self.scale;
        }
        self.turned_down(cold, flow_c, self.moisture(cold))
            .map_or(0.0, |held| held.net_kw() * self.scale)
    }

    /// Least heat that it gives without going on and off, kW, frost deducted.
    pub fn least_output_kw(&self, cold: &ColdSide, flow_c: f64) -> f64 {
        let steady = self.steady(cold, flow_c, Wanted::Least, self.moisture(cold));
        steady.net_kw() * self.scale
    }

    /// Adds an hour up from its steady machine.
    fn account(
        &self,
        duty: &Duty,
        steady: &Steady,
        flow_c: f64,
        share: f64,
        flags: Flags,
    ) -> Delivered {
        let core = &*self.core;
        let running_hours = duty.hours * share;
        let heat = steady.net_kw() * running_hours;
        // Electricity that this heat would take without frost; frost is charged beside it.
        let plain = heat * steady.electric_kw / steady.gross_kw;
        let tested_side = heat * steady.source_side_kw / steady.gross_kw;
        let defrost = plain * (1.0 / (1.0 - steady.loss.cop) - 1.0);
        let (start_up, starts) = if flags.cycling {
            let loss = start_up_loss_kw(steady.electric_kw, share, core.cycling_coefficient);
            (loss * duty.hours, starts_per_hour(share) * duty.hours)
        } else {
            (0.0, if duty.at_full_output { 1.0 } else { 0.0 })
        };
        let held_side = if fault::on(Fault::PumpTwice) {
            0.0
        } else {
            tested_side
        };
        let compressor = plain - held_side + start_up;
        let source_side = tested_side * self.source_side_factor;
        let laboratory = compressor + source_side + defrost;
        let size = self.scale;
        Delivered {
            heat_kwh: heat * size,
            running_hours,
            flow_c,
            source_c: steady.source_c,
            compressor_kwh: compressor * size,
            source_side_kwh: source_side * size,
            defrost_kwh: defrost * size,
            allowance_kwh: laboratory * (1.0 / self.field_factor - 1.0) * size,
            extracted_kwh: steady.extracted_kw * running_hours * size,
            starts,
            speed_fraction: steady.speed_share,
            flags,
        }
    }
}

/// A machine that goes on and off because its least output at a flow temperature is more than is wanted. Its ways give the machine
/// while running, its flow temperature then and the share of the time that it runs.
struct OnAndOff<'a> {
    pump: &'a HeatPump,
    spread_k: f64,
    wanted_kw: f64,
    /// Flow temperature that running all the time would need, °C.
    flow_c: f64,
    highest_c: f64,
}

impl OnAndOff<'_> {
    /// Without frost and with a source that does not fall.
    fn on_the_map(&self, cold: &ColdSide) -> (Steady, f64, f64) {
        let running_c = self.running_c(cold.open_c, 1.0, self.flow_c);
        let least = self.pump.steady(cold, running_c, Wanted::Least, 0.0);
        (least, running_c, self.share(least.net_kw()))
    }

    /// From the machine at its least output at the flow temperature that running all the time would need.
    fn from(&self, mut least: Steady, cold: &ColdSide, moisture: f64) -> (Steady, f64, f64) {
        let mut running_c = self.flow_c;
        for _ in 0..MOST_RISE_STEPS {
            // Frost and the source's fall hardly move with the flow: first to where the map's output alone leads, then they.
            let next_c = self.running_c(least.source_c, 1.0 - least.loss.output, running_c);
            if (next_c - running_c).abs() < RISE_TOLERANCE_K {
                break;
            }
            running_c = next_c;
            least = self.pump.steady(cold, running_c, Wanted::Least, moisture);
        }
        (least, running_c, self.share(least.net_kw()))
    }

    /// Flow temperature while running with the source and the share of output that frost leaves as they are, °C, sought from a guess.
    fn running_c(&self, source_c: f64, left: f64, guess_c: f64) -> f64 {
        let mut secant = Secant::default();
        let mut running_c = guess_c;
        for _ in 0..MOST_RISE_STEPS {
            let least_kw = self.pump.least_kw_at(source_c, running_c) * left;
            let hotter_c = self.flow_c + running_rise_k(self.spread_k, self.share(least_kw));
            let change_k = hotter_c.min(self.highest_c) - running_c;
            if change_k.abs() < RISE_TOLERANCE_K {
                break;
            }
            running_c = secant
                .next(running_c, change_k)
                .clamp(self.flow_c, self.highest_c);
        }
        running_c
    }

    /// Share of the time that it runs.
    fn share(&self, least_kw: f64) -> f64 {
        (self.wanted_kw / least_kw).min(1.0)
    }
}
