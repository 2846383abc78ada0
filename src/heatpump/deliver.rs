//! One hour of the heat pump: what it gives for what is wanted, and what that takes.
//!
//! Limits, frost, cycling and the source's fall meet here, around look-ups in the map. Nothing is allocated and no power is
//! raised; what is computed per hour is a handful of look-ups and, in damp cold, a few exponentials.

use super::balance::{Balance, Next};
use super::duty::{ColdSide, Delivered, Duty, Flags};
use super::frost::LEAST_LEFT;
use super::heat_pump::HeatPump;
use super::part_load::{rise_per_share_k, running_rise_k, start_up_loss_kw, starts_per_hour};
use super::steady::{Held, Place, Steady, Wanted};
use crate::extremes::{greater, lesser};
use crate::fault::{self, Fault};

/// Change of the running flow temperature below which its search ends, K: what a Newton step that short leaves is less than 1e-4 K, 3e-6
/// of the electricity.
const RISE_STEP_K: f64 = 0.01;
/// Change of the share that frost leaves of the output below which the search ends: 1e-4 K of a rise of 10 K.
const LEFT_TOLERANCE: f64 = 1e-5;
/// A Newton step is at most as long as if this share of a change of flow were left by its feedback.
const LEAST_STIFFNESS: f64 = 0.5;
/// Most steps of either.
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
        let flow_c = lesser(duty.flow_c, highest_c);
        let wanted_kw = duty.heat_kw / self.scale;
        let moisture = self.moisture(cold);

        let wanted = if duty.at_full_output {
            Wanted::Greatest
        } else {
            Wanted::Net(wanted_kw)
        };
        let on_and_off = OnAndOff {
            pump: self,
            cold,
            moisture,
            spread_k: duty.spread_k,
            wanted_kw,
            flow_c,
            highest_c,
        };
        let first = self.begin(cold, flow_c, wanted);
        // Far below the least output it goes on and off, whatever frost and the source's fall do.
        let frosty_left = if moisture > 0.0 { LEAST_LEFT } else { 1.0 };
        let surely = !duty.at_full_output && wanted_kw < first.range.least_kw * frosty_left;
        let going_on_and_off = surely.then(|| on_and_off.from(&first, 1.0));
        let (mut steady, flow_c, mut share) = match going_on_and_off {
            Some(found) if found.2 < 1.0 => found,
            _ => {
                let steady = self.balanced(cold, first, flow_c, wanted, moisture);
                match steady.held {
                    Held::Between => (steady, flow_c, 1.0),
                    Held::AtLeast => {
                        let place = self.place(steady.source_c, flow_c);
                        on_and_off.from(&place, 1.0 - steady.loss.output)
                    }
                    Held::AtGreatest => {
                        flags.short = wanted_kw > steady.net_kw() * (1.0 + ENOUGH);
                        (steady, flow_c, lesser(wanted_kw / steady.net_kw(), 1.0))
                    }
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
            share = lesser(wanted_kw / held.net_kw(), 1.0);
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
    #[inline]
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

/// A machine that goes on and off because its least output at a flow temperature is more than is wanted.
struct OnAndOff<'a> {
    pump: &'a HeatPump,
    cold: &'a ColdSide,
    moisture: f64,
    spread_k: f64,
    wanted_kw: f64,
    /// Flow temperature that running all the time would need, °C.
    flow_c: f64,
    highest_c: f64,
}

impl OnAndOff<'_> {
    /// The machine while running, its flow temperature then and the share of the time that it runs, sought from its place when running
    /// all the time and the share that frost leaves of the output.
    ///
    /// Source and frost hardly move with the flow: the map's output alone leads to the flow, then they follow.
    fn from(&self, place: &Place<'_>, mut left: f64) -> (Steady, f64, f64) {
        let mut balance = Balance::new(self.pump, self.cold);
        let mut source_c = place.source_c;
        let mut running_c = self.stepped(place, left, self.flow_c).0;
        let mut steps = 0;
        loop {
            let place = self.settled(source_c, left, &mut running_c);
            let least = self.pump.steady_at(&place, Wanted::Least, self.moisture);
            let next_left = 1.0 - least.loss.output;
            steps += 1;
            match balance.next(&least, running_c) {
                Next::At(next_c) if steps < MOST_RISE_STEPS => source_c = next_c,
                Next::Found(least, running_c)
                    if (next_left - left).abs() < LEFT_TOLERANCE || steps == MOST_RISE_STEPS =>
                {
                    return (least, running_c, self.share(least.net_kw()));
                }
                Next::At(_) => return (least, running_c, self.share(least.net_kw())),
                Next::Found(..) => {}
            }
            left = next_left;
        }
    }

    /// The place at the flow temperature while running, with the source and the share of output that frost leaves as they are, sought
    /// from a guess by Newton's steps.
    #[inline]
    fn settled(&self, source_c: f64, left: f64, running_c: &mut f64) -> Place<'_> {
        let mut place = self.pump.place(source_c, *running_c);
        for _ in 0..MOST_RISE_STEPS {
            let (next_c, enough) = self.stepped(&place, left, *running_c);
            *running_c = next_c;
            place = self.pump.place(source_c, next_c);
            if enough {
                break;
            }
        }
        place
    }

    /// A Newton step from a place towards the flow temperature while running, and whether it was the last that is needed.
    #[inline]
    fn stepped(&self, place: &Place<'_>, left: f64, running_c: f64) -> (f64, bool) {
        let least_kw = place.range.least_kw;
        let share = self.share(least_kw * left);
        let rise_k = running_rise_k(self.spread_k, share);
        // Of a change of flow this share comes back as a change of the rise.
        let feedback =
            -rise_per_share_k(self.spread_k, share) * share * place.least_kw_per_k() / least_kw;
        let step_k = (self.flow_c + rise_k - running_c) / greater(1.0 - feedback, LEAST_STIFFNESS);
        let next_c = greater(lesser(running_c + step_k, self.highest_c), self.flow_c);
        (next_c, (next_c - running_c).abs() < RISE_STEP_K)
    }

    /// Share of the time that it runs.
    fn share(&self, least_kw: f64) -> f64 {
        lesser(self.wanted_kw / least_kw, 1.0)
    }
}
