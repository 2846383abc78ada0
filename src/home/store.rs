//! The hot-water store: heated in blocks, cooling, drawn from.

use chrono::{Datelike, Weekday};

use super::WATER_KWH_PER_L_K;
use crate::calendar::CivilHour;
use crate::extremes::{greater, lesser};

/// Clock hours, hour `h` as bit `h`.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub struct ClockHours(u32);

impl ClockHours {
    /// Every hour of the day.
    pub const ALL: Self = Self(0x00FF_FFFF);

    /// The hours of a list; an hour beyond 23 is left out.
    pub fn of(hours: impl IntoIterator<Item = u8>) -> Self {
        Self(
            hours
                .into_iter()
                .filter(|&hour| hour < 24)
                .fold(0, |held, hour| held | 1 << hour),
        )
    }

    /// Whether it holds an hour.
    pub fn holds(self, hour: u8) -> bool {
        hour < 24 && self.0 & (1 << hour) != 0
    }

    /// How many hours it holds.
    pub fn count(self) -> u32 {
        self.0.count_ones()
    }
}

/// A weekly heating of the store against legionella.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Hygiene {
    /// Day of the week.
    pub day: Weekday,
    /// Clock hour at which it begins.
    pub hour: u8,
    /// Temperature the whole store is brought to, °C.
    pub target_c: f64,
    /// Whether the immersion heater does what lies above the set point; else the machine as far as it reaches.
    pub by_immersion: bool,
}

/// A hot-water store, heated in blocks to a mixed temperature, drawn from at its top.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Store {
    /// Heat that warms it by a kelvin, kWh/K.
    pub capacity_kwh_per_k: f64,
    /// Temperature at which a block ends, °C.
    pub set_point_c: f64,
    /// A block starts this far below the set point, K.
    pub hysteresis_k: f64,
    /// Standing loss per kelvin above its surroundings, kW/K.
    pub loss_kw_per_k: f64,
    /// Surroundings, °C; 20 where nothing else is known.
    pub surroundings_c: f64,
    /// Flow above store temperature that its coil needs while charging, K; 5 where nothing else is known. Flow minus return of a
    /// block is the same.
    pub coil_k: f64,
    /// Clock hours in which a block may start.
    pub reheat: ClockHours,
    /// Share of its hot content that reaches the taps before they run cool.
    pub usable: f64,
    /// The weekly hygiene cycle.
    pub hygiene: Option<Hygiene>,
}

/// What the store carries from hour to hour.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct StoreState {
    /// Mean temperature, °C.
    pub mean_c: f64,
    /// Whether a block is under way.
    pub charging: bool,
    /// Whether a hygiene cycle is under way.
    pub hygiene: bool,
}

/// What is drawn in an hour.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Tapped {
    /// Heat asked for, kWh.
    pub kwh: f64,
    /// Temperature it is wanted at, °C.
    pub draw_c: f64,
    /// Cold water that replaces it, °C.
    pub cold_c: f64,
}

/// A store after an hour's draw and loss, before it is heated.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct StoreStep {
    /// Its mean temperature before charging, °C.
    pub before_c: f64,
    /// Heat drawn from it, kWh.
    pub drawn_kwh: f64,
    /// Heat lost to its surroundings, kWh.
    pub lost_kwh: f64,
    /// Heat that brings it to its target, kWh; 0 when no block is due.
    pub wanted_kwh: f64,
    /// Where the block ends, °C.
    pub target_c: f64,
    /// Where the machine's part of the block ends, °C.
    pub machine_target_c: f64,
    /// Whether what was drawn came out too cool.
    pub too_cool: bool,
    /// Whether the block belongs to a hygiene cycle.
    pub hygiene: bool,
}

/// Outside a thermostat's own hysteresis, a reheat window does not start for less than this, K. A choice of ours.
const LEAST_REHEAT_K: f64 = 1.0;
/// Usable share of a store's hot content. Common practice, no source: tests of V40 give 0.75 to 0.9.
const USABLE: f64 = 0.8;

impl Store {
    /// A store of a volume (L) with the greatest standing loss that EU label class C allows.
    ///
    /// 16.66 + 8.33·V^0.4 W at 65 °C in 20 °C air (Regulation (EU) No 812/2013), scaled by temperature difference.
    pub fn of_volume(volume_l: f64, set_point_c: f64) -> Self {
        Self {
            capacity_kwh_per_k: volume_l * WATER_KWH_PER_L_K,
            set_point_c,
            hysteresis_k: 5.0,
            loss_kw_per_k: (16.66 + 8.33 * volume_l.powf(0.4)) / 1000.0 / 45.0,
            surroundings_c: 20.0,
            coil_k: 5.0,
            reheat: ClockHours::ALL,
            usable: USABLE,
            hygiene: None,
        }
    }

    /// Volume, L.
    pub fn volume_l(&self) -> f64 {
        self.capacity_kwh_per_k / WATER_KWH_PER_L_K
    }

    /// Water at a drawn temperature that it gives when full, with cold water at a temperature (°C), L.
    ///
    /// Water at 40 °C from a store at 50 °C and cold at 10 °C: usable share × volume × (50 − 10)/(40 − 10).
    pub fn usable_l(&self, draw_c: f64, cold_c: f64) -> f64 {
        self.usable * self.volume_l() * (self.set_point_c - cold_c) / (draw_c - cold_c)
    }

    /// Time that a heat output (kW) takes from cold water at a temperature (°C) to the set point, h.
    pub fn reheat_h(&self, output_kw: f64, cold_c: f64) -> f64 {
        self.capacity_kwh_per_k * (self.set_point_c - cold_c) / output_kw
    }

    /// The same store with its set point moved by some kelvins; whether a block is due moves with it.
    pub fn shifted(&self, by_k: f64) -> Self {
        Self {
            set_point_c: self.set_point_c + by_k,
            ..*self
        }
    }

    /// The state of a store that is full.
    pub fn full(&self) -> StoreState {
        StoreState {
            mean_c: self.set_point_c,
            charging: false,
            hygiene: false,
        }
    }

    /// Draws and loses an hour's heat, then says what a block must bring.
    ///
    /// Never more is drawn than it holds above the cold water. A draw comes out too cool when the store is cooler than the
    /// drawn temperature and its usable share is gone.
    #[inline]
    pub fn step(&self, state: &StoreState, tapped: &Tapped, clock: &CivilHour) -> StoreStep {
        let lost_kwh = self.loss_kw_per_k * (state.mean_c - self.surroundings_c);
        let held_kwh = self.capacity_kwh_per_k * (state.mean_c - tapped.cold_c) - lost_kwh;
        let drawn_kwh = lesser(tapped.kwh, greater(held_kwh, 0.0));
        let before_c = state.mean_c - (drawn_kwh + lost_kwh) / self.capacity_kwh_per_k;
        let spent_c = tapped.cold_c + (1.0 - self.usable) * (self.set_point_c - tapped.cold_c);
        let too_cool = tapped.kwh > 0.0
            && (before_c < tapped.draw_c && before_c < spent_c || drawn_kwh < tapped.kwh);
        let hygiene = self.hygiene.filter(|cycle| {
            let due = clock.hour == cycle.hour && clock.date.weekday() == cycle.day;
            state.hygiene || due
        });
        let target_c = hygiene.map_or(self.set_point_c, |cycle| {
            cycle.target_c.max(self.set_point_c)
        });
        let machine_target_c = if hygiene.is_some_and(|cycle| cycle.by_immersion) {
            self.set_point_c
        } else {
            target_c
        };
        let windows = self.reheat != ClockHours::ALL;
        let start_k = if windows {
            LEAST_REHEAT_K
        } else {
            self.hysteresis_k
        };
        let may_start = self.reheat.holds(clock.hour);
        let due = hygiene.is_some()
            || state.charging && may_start
            || may_start && before_c < self.set_point_c - start_k;
        let wanted_kwh = if due {
            greater(target_c - before_c, 0.0) * self.capacity_kwh_per_k
        } else {
            0.0
        };
        StoreStep {
            before_c,
            drawn_kwh,
            lost_kwh,
            wanted_kwh,
            target_c,
            machine_target_c,
            too_cool,
            hygiene: hygiene.is_some(),
        }
    }

    /// The state after an hour in which a block brought a heat (kWh).
    #[inline]
    pub fn after(&self, step: &StoreStep, heat_kwh: f64) -> StoreState {
        /// Less than this share of a block that is missing is rounding.
        const ROUNDING: f64 = 1e-9;
        let unfinished = step.wanted_kwh > 0.0 && heat_kwh < step.wanted_kwh * (1.0 - ROUNDING);
        StoreState {
            mean_c: step.before_c + heat_kwh / self.capacity_kwh_per_k,
            charging: unfinished,
            hygiene: unfinished && step.hygiene,
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use chrono::NaiveDate;

    /// Monday 2 January 2023.
    fn clock(hour: u8) -> CivilHour {
        let date = NaiveDate::from_ymd_opt(2023, 1, 2).unwrap();
        CivilHour {
            date,
            hour,
            minute: 0,
            offset_s: 0,
        }
    }

    fn tapped(kwh: f64) -> Tapped {
        Tapped {
            kwh,
            draw_c: 40.0,
            cold_c: 10.0,
        }
    }

    fn at(mean_c: f64, charging: bool) -> StoreState {
        StoreState {
            mean_c,
            charging,
            hygiene: false,
        }
    }

    /// Regulation (EU) 812/2013, upper limit of class C, 16.66 + 8.33 V^0.4 W (secondary source): 200/250/300 L lose
    /// 86/92/98 W at 65 °C; 57 W for 200 L at 50 °C in 20 °C air.
    #[test]
    fn standing_loss_follows_the_label_class() {
        for (volume, watts) in [(200.0, 86.0), (250.0, 92.0), (300.0, 98.0)] {
            let store = Store::of_volume(volume, 65.0);
            assert!((store.loss_kw_per_k * 45.0 * 1000.0 - watts).abs() < 0.5);
        }
        let store = Store::of_volume(200.0, 50.0);
        let lost = store.step(&store.full(), &tapped(0.0), &clock(3)).lost_kwh;
        assert!((lost * 1000.0 - 57.0).abs() < 0.5);
    }

    #[test]
    fn a_block_starts_below_the_hysteresis_and_ends_at_the_set_point() {
        let store = Store::of_volume(200.0, 50.0);
        let step = |state| store.step(&state, &tapped(0.0), &clock(3));
        assert_eq!(step(at(47.0, false)).wanted_kwh, 0.0);
        let due = step(at(44.0, false));
        let after = store.after(&due, due.wanted_kwh);
        assert!((after.mean_c - 50.0).abs() < 1e-12 && !after.charging);
        assert!(store.after(&due, due.wanted_kwh / 2.0).charging);
        assert!(step(at(47.0, true)).wanted_kwh > 0.0);
    }

    #[test]
    fn a_window_holds_the_block_back_and_tops_up() {
        let mut store = Store::of_volume(200.0, 50.0);
        store.reheat = ClockHours::of([2, 3, 4, 14]);
        let step = |hour| {
            store
                .step(&at(44.0, true), &tapped(0.0), &clock(hour))
                .wanted_kwh
        };
        assert_eq!(step(8), 0.0);
        assert!(step(3) > 0.0);
        // In its window it tops up what the hysteresis would have left for later.
        assert!(
            store
                .step(&at(48.0, false), &tapped(0.0), &clock(14))
                .wanted_kwh
                > 0.0
        );
        assert_eq!(store.reheat.count(), 4);
    }

    #[test]
    fn the_hygiene_cycle_goes_on_until_it_is_done() {
        let mut store = Store::of_volume(200.0, 50.0);
        store.hygiene = Some(Hygiene {
            day: Weekday::Mon,
            hour: 13,
            target_c: 60.0,
            by_immersion: true,
        });
        assert_eq!(
            store
                .step(&at(50.0, false), &tapped(0.0), &clock(12))
                .wanted_kwh,
            0.0
        );
        let begun = store.step(&at(50.0, false), &tapped(0.0), &clock(13));
        assert!((begun.target_c, begun.machine_target_c) == (60.0, 50.0) && begun.hygiene);
        let half = store.after(&begun, begun.wanted_kwh / 2.0);
        let next = store.step(&half, &tapped(0.0), &clock(14));
        let done = store.after(&next, next.wanted_kwh);
        assert!((done.mean_c - 60.0).abs() < 1e-9 && !done.hygiene);
    }

    /// 200 L at 50 °C, cold 10 °C: 267 L at 40 °C by heat balance, of which the usable share comes out hot enough.
    #[test]
    fn draws_come_out_too_cool_when_the_usable_share_is_gone() {
        let store = Store::of_volume(200.0, 50.0);
        assert!((store.usable_l(40.0, 10.0) - 0.8 * 200.0 * 40.0 / 30.0).abs() < 1e-9);
        let full_kwh = store.capacity_kwh_per_k * 40.0;
        let drawn = |share: f64| store.step(&store.full(), &tapped(share * full_kwh), &clock(7));
        assert!(!drawn(0.75).too_cool && drawn(0.85).too_cool);
        let all = drawn(1.2);
        assert!(all.too_cool && (all.before_c - 10.0).abs() < 1e-9 && all.drawn_kwh < full_kwh);
        // 200 L from 10 to 50 °C are 9.3 kWh: 2 h at 4.65 kW.
        assert!((store.reheat_h(4.65, 10.0) - 2.0).abs() < 0.005);
    }
}
