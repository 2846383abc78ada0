//! One hour of the heat pump: what it gives for what is wanted, and what that takes.
//!
//! Limits, frost, cycling and the source's fall meet here, around look-ups in the map. Nothing is allocated and no power is
//! raised; what is computed per hour is a handful of look-ups and, in damp cold, three exponentials.

use super::frost::{FrostLoss, humidity_ratio};
use super::heat_pump::HeatPump;
use super::limits::LEAST_DIFFERENCE_K;
use super::part_load::{running_rise_k, start_up_loss_kw, starts_per_hour};
use super::sheet::SourceKind;

/// Change of output below which the frost substitution ends, relative, and the most substitutions; two or three are usual.
const FROST_TOLERANCE: f64 = 1e-7;
const MOST_FROST_STEPS: usize = 12;
/// Error of the source temperature at which the balance with the offer ends, K.
const DRAW_TOLERANCE_K: f64 = 1e-6;
/// Most steps of that balance: the last half of them halve the bracket, which is enough from any bracket in use.
const MOST_DRAW_STEPS: usize = 80;
/// Change of the running flow temperature below which its substitution ends, K, and the most substitutions.
const RISE_TOLERANCE_K: f64 = 1e-5;
const MOST_RISE_STEPS: usize = 30;
/// Difference of wanted and greatest heat that is no shortfall, relative: rounding.
const ENOUGH: f64 = 1e-9;

/// Outdoor temperature above which no coil freezes, °C: it would take an approach of 25 K.
const FROST_FREE_C: f64 = 15.0;

/// What the cold side offers: the offer of a source.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct ColdSide {
    /// Temperature entering the machine with nothing drawn, °C.
    pub open_c: f64,
    /// How far it falls for each kilowatt drawn, K/kW; 0 for air.
    pub k_per_kw: f64,
    /// Relative humidity of the air, 0..1, where it is known.
    pub relative_humidity: Option<f64>,
}

/// What the warm side wants.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Duty {
    /// Mean heat wanted over the time there is, kW.
    pub heat_kw: f64,
    /// Flow temperature that is needed when running all that time, °C.
    pub flow_c: f64,
    /// Flow minus return at that heat, K.
    pub spread_k: f64,
    /// Part of the hour there is, 0..1.
    pub hours: f64,
    /// Run at greatest output until done, as for a hot-water store, instead of matching the mean.
    pub at_full_output: bool,
}

/// What happened in an hour that is worth counting.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Default)]
pub struct Flags {
    /// The flow needed is above the machine's highest: it gave what it could below that.
    pub capped_flow: bool,
    /// The source is outside the machine's limits: it stood.
    pub stopped: bool,
    /// Less was wanted than its least output: it went on and off.
    pub cycling: bool,
    /// More was wanted than it can give.
    pub short: bool,
    /// Its coil frosted.
    pub frosting: bool,
}

/// What the machine did in the time it had.
#[derive(Debug, Clone, Copy, PartialEq, Default)]
pub struct Delivered {
    /// Heat to the water, kWh.
    pub heat_kwh: f64,
    /// Time it ran, h.
    pub running_hours: f64,
    /// Flow temperature while running, °C; NaN when it stood.
    pub flow_c: f64,
    /// Source temperature entering while running, °C; NaN when it stood.
    pub source_c: f64,
    /// Electricity of the compressor, start-up losses included, kWh.
    pub compressor_kwh: f64,
    /// Electricity of the fan or the brine pump, kWh.
    pub source_side_kwh: f64,
    /// Electricity that frosting and defrosting cost, kWh.
    pub defrost_kwh: f64,
    /// Allowance from bench to home, kWh.
    pub allowance_kwh: f64,
    /// Heat taken from the source, kWh.
    pub extracted_kwh: f64,
    /// Times the compressor started.
    pub starts: f64,
    /// Speed while running, as a share of the greatest there, 0..1.
    pub speed_fraction: f64,
    /// What happened.
    pub flags: Flags,
}

impl Delivered {
    /// All electricity, kWh.
    pub fn electricity_kwh(&self) -> f64 {
        self.compressor_kwh + self.source_side_kwh + self.defrost_kwh + self.allowance_kwh
    }

    fn standing(flags: Flags) -> Self {
        Self {
            flow_c: f64::NAN,
            source_c: f64::NAN,
            flags,
            ..Self::default()
        }
    }
}

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
}

impl Steady {
    /// Output that reaches the house, kW.
    pub fn net_kw(&self) -> f64 {
        self.gross_kw * (1.0 - self.loss.output)
    }
}

impl HeatPump {
    /// What the machine does with an hour.
    ///
    /// Outside its limits it stands, or gives what it can below its highest flow temperature. Between its least and greatest
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
        flags.capped_flow = duty.flow_c > highest_c;
        let lifted = share_below(highest_c, duty);
        if lifted <= 0.0 {
            return Delivered::standing(flags);
        }
        let flow_c = duty.flow_c.min(highest_c);
        let wanted_kw = duty.heat_kw * lifted / self.scale;
        let moisture = self.moisture(cold);

        let full = self.steady(cold, flow_c, Wanted::Greatest, moisture);
        let (steady, flow_c, share) = if duty.at_full_output || wanted_kw >= full.net_kw() {
            flags.short = wanted_kw > full.net_kw() * (1.0 + ENOUGH);
            (full, flow_c, (wanted_kw / full.net_kw()).min(1.0))
        } else {
            self.below_greatest(cold, duty, wanted_kw, flow_c, highest_c, moisture)
        };
        if steady.source_c < core.limits.lowest_source_c {
            flags.stopped = true;
            return Delivered::standing(flags);
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
        if steady.source_c < limits.lowest_source_c {
            return 0.0;
        }
        steady.net_kw() * self.scale
    }

    /// Least heat that it gives without going on and off, kW, frost deducted.
    pub fn least_output_kw(&self, cold: &ColdSide, flow_c: f64) -> f64 {
        let steady = self.steady(cold, flow_c, Wanted::Least, self.moisture(cold));
        steady.net_kw() * self.scale
    }

    /// Runs at the heat wanted, or on and off when that is below the least: the machine, its flow temperature and the share of the
    /// time that it runs.
    fn below_greatest(
        &self,
        cold: &ColdSide,
        duty: &Duty,
        wanted_kw: f64,
        flow_c: f64,
        highest_c: f64,
        moisture: f64,
    ) -> (Steady, f64, f64) {
        let mut least = self.steady(cold, flow_c, Wanted::Least, moisture);
        if wanted_kw >= least.net_kw() {
            let steady = self.steady(cold, flow_c, Wanted::Net(wanted_kw), moisture);
            return (steady, flow_c, 1.0);
        }
        let mut running_c = flow_c;
        for _ in 0..MOST_RISE_STEPS {
            let share = (wanted_kw / least.net_kw()).min(1.0);
            let next = (flow_c + running_rise_k(duty.spread_k, share)).min(highest_c);
            let change = (next - running_c).abs();
            if change < RISE_TOLERANCE_K {
                break;
            }
            running_c = next;
            least = self.steady(cold, running_c, Wanted::Least, moisture);
        }
        (least, running_c, (wanted_kw / least.net_kw()).min(1.0))
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
        let compressor = plain - tested_side + start_up;
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

    /// Humidity ratio of the outdoor air, or 0 where there is no outdoor coil.
    pub(super) fn moisture(&self, cold: &ColdSide) -> f64 {
        match self.core.source {
            // Above this no coil is near freezing.
            SourceKind::Air if cold.open_c > FROST_FREE_C => 0.0,
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
        let open = at(cold.open_c);
        // An offer is made in kelvin per kilowatt of the real machine.
        let k_per_kw = cold.k_per_kw * self.scale;
        if k_per_kw == 0.0 {
            return open;
        }
        let excess =
            |steady: &Steady| steady.source_c + k_per_kw * steady.extracted_kw - cold.open_c;
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

    /// The machine at an entering source temperature, by the map.
    fn steady_at(&self, source_c: f64, flow_c: f64, wanted: Wanted, moisture: f64) -> Steady {
        let core = &*self.core;
        let machine = &core.machine.machine;
        let lookup_c = source_c.min(flow_c - LEAST_DIFFERENCE_K);
        let range = core.map.range(lookup_c, flow_c);
        let greatest_kw = core
            .limits
            .greatest_output_kw
            .map_or(range.greatest_kw, |cap| range.greatest_kw.min(cap));
        let least_kw = range.least_kw.min(greatest_kw);
        let width = range.greatest_kw - range.least_kw;
        let at_output = |gross_kw: f64| {
            let fraction = if width > 0.0 {
                (gross_kw - range.least_kw) / width
            } else {
                1.0
            };
            let input = core.map.input(lookup_c, flow_c, fraction);
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
            }
        };
        match wanted {
            Wanted::Greatest => at_output(greatest_kw),
            Wanted::Least => at_output(least_kw),
            Wanted::Net(net_kw) => {
                let mut steady = at_output(net_kw.clamp(least_kw, greatest_kw));
                for _ in 0..MOST_FROST_STEPS {
                    let gross_kw =
                        (net_kw / (1.0 - steady.loss.output)).clamp(least_kw, greatest_kw);
                    let change = (gross_kw / steady.gross_kw - 1.0).abs();
                    if change < FROST_TOLERANCE {
                        break;
                    }
                    steady = at_output(gross_kw);
                }
                steady
            }
        }
    }
}

/// Share of the heat wanted that lies below a highest flow temperature: the machine warms the return up to there, and backup lifts
/// the rest.
fn share_below(highest_c: f64, duty: &Duty) -> f64 {
    if duty.flow_c <= highest_c {
        return 1.0;
    }
    if duty.spread_k <= 0.0 {
        return 0.0;
    }
    (1.0 - (duty.flow_c - highest_c) / duty.spread_k).max(0.0)
}
