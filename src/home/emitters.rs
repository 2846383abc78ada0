//! Radiators and floors: the water temperatures that carry a given heat into the room.

use super::control::Control;
use super::group::{EmitterKind, Group, WaterTemperatures};

/// Least difference of flow and a group's return that is told from none, K.
const LEAST_DIFFERENCE_K: f64 = 1e-9;

/// Most groups of a home.
pub const MOST_GROUPS: usize = 4;

/// Emitters sized once, at their own design point; they do not grow when the heat loss is varied.
///
/// Several groups stand side by side, each with its own mixing valve: the one that needs the hottest water sets the flow.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Emitters {
    /// The leading group first; shares add up to 1.
    groups: [Group; MOST_GROUPS],
    count: usize,
    design_load_kw: f64,
    room_c: f64,
    greatest_flow_c: f64,
    greatest_output_kw: f64,
    control: Control,
    header_k: f64,
}

/// What the control lets the emitters have.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Supply {
    /// Heat they can carry at the flow that is set, at most what was asked, kW.
    pub heat_kw: f64,
    /// Water temperatures at the emitters.
    pub water: WaterTemperatures,
    /// Flow minus return of the emitters at their designed water flow, K: with valves throttling, less than that of `water`.
    pub spread_k: f64,
}

impl Emitters {
    /// Emitters of one kind that give `design_load_kw` (> 0) into a room at `room_c` with water at `flow_c`/`return_c`
    /// (flow > return > room), and whose flow never exceeds `greatest_flow_c`.
    pub fn new(
        kind: EmitterKind,
        design_load_kw: f64,
        flow_c: f64,
        return_c: f64,
        room_c: f64,
        greatest_flow_c: f64,
    ) -> Self {
        let only = Group {
            kind,
            share: 1.0,
            flow_c,
            return_c,
        };
        Self::assemble(
            [only; MOST_GROUPS],
            1,
            design_load_kw,
            room_c,
            greatest_flow_c,
        )
    }

    /// Emitters of one to [`MOST_GROUPS`] groups, whose shares are scaled to add up to 1; nothing for another number.
    pub fn of_groups(
        groups: &[Group],
        design_load_kw: f64,
        room_c: f64,
        greatest_flow_c: f64,
    ) -> Option<Self> {
        let first = *groups.first()?;
        if groups.len() > MOST_GROUPS {
            return None;
        }
        let sum: f64 = groups.iter().map(|group| group.share).sum();
        let mut held = [first; MOST_GROUPS];
        for (place, group) in held.iter_mut().zip(groups) {
            *place = Group {
                share: group.share / sum,
                ..*group
            };
        }
        held[..groups.len()].sort_by(|a, b| b.flow_c.total_cmp(&a.flow_c));
        Some(Self::assemble(
            held,
            groups.len(),
            design_load_kw,
            room_c,
            greatest_flow_c,
        ))
    }

    fn assemble(
        groups: [Group; MOST_GROUPS],
        count: usize,
        design_load_kw: f64,
        room_c: f64,
        greatest_flow_c: f64,
    ) -> Self {
        let mut emitters = Self {
            groups,
            count,
            design_load_kw,
            room_c,
            greatest_flow_c: greatest_flow_c.max(groups[0].flow_c),
            greatest_output_kw: design_load_kw,
            control: Control::FollowingLoad,
            header_k: 0.0,
        };
        emitters.greatest_output_kw = emitters.output_kw(emitters.greatest_flow_c, room_c);
        emitters
    }

    /// The same emitters under another control.
    pub fn with_control(self, control: Control) -> Self {
        Self { control, ..self }
    }

    /// The same emitters behind a buffer or low-loss header that mixes the flow down by a number of kelvins (≥ 0).
    pub fn with_header(self, header_k: f64) -> Self {
        Self { header_k, ..self }
    }

    /// The groups, the one with the hottest design flow first.
    pub fn groups(&self) -> &[Group] {
        &self.groups[..self.count]
    }

    /// How the flow temperature is set.
    pub fn control(&self) -> Control {
        self.control
    }

    /// By how much the machine's flow is above that of the emitters, K.
    pub fn header_k(&self) -> f64 {
        self.header_k
    }

    /// Kind of the leading group.
    pub fn kind(&self) -> EmitterKind {
        self.groups[0].kind
    }

    /// Heat they give at their design point, kW.
    pub fn design_load_kw(&self) -> f64 {
        self.design_load_kw
    }

    /// Flow temperature at the design load, °C.
    pub fn design_flow_c(&self) -> f64 {
        self.groups[0].flow_c
    }

    /// Other emitters of the same kind for the same load, with another design flow temperature (°C) and the same spread as
    /// far as the room (°C) allows; other groups and the greatest flow keep their distance, and a flow that is set, fixed or by a
    /// line, keeps its share of the excess above the room.
    pub fn with_design_flow(&self, flow_c: f64, room_c: f64) -> Self {
        /// Return water stays at least this much above the room, K.
        const LEAST_EXCESS_K: f64 = 1.0;
        let rise_k = flow_c - self.design_flow_c();
        let mut groups = self.groups;
        for group in &mut groups {
            let flow_c = (group.flow_c + rise_k).max(room_c + 2.0 * LEAST_EXCESS_K);
            let return_c = (flow_c - group.spread_k())
                .max(room_c + LEAST_EXCESS_K)
                .min(flow_c);
            *group = Group {
                flow_c,
                return_c,
                ..*group
            };
        }
        let greatest_flow_c = self.greatest_flow_c + rise_k;
        Self::assemble(
            groups,
            self.count,
            self.design_load_kw,
            room_c,
            greatest_flow_c,
        )
        .with_control(
            self.control
                .scaled(self.design_flow_c(), groups[0].flow_c, room_c),
        )
        .with_header(self.header_k)
    }

    /// Flow temperature that is never exceeded, °C.
    pub fn greatest_flow_c(&self) -> f64 {
        self.greatest_flow_c
    }

    /// Water temperatures at the emitters that carry a heat (kW, ≥ 0) into rooms at a temperature (°C).
    ///
    /// EN 442: output ∝ excess temperature ^ n with the arithmetic mean water temperature; the water flow stays as
    /// designed, so flow minus return is proportional to the heat. One power a group.
    #[inline]
    pub fn at_load(&self, heat_kw: f64, room_c: f64) -> WaterTemperatures {
        let share = heat_kw / self.design_load_kw;
        let leading = self.groups[0].at_share(share, self.room_c, room_c);
        if self.count == 1 {
            return leading;
        }
        let mut each = [leading; MOST_GROUPS];
        let mut flow_c = leading.flow_c;
        for (water, group) in each.iter_mut().zip(self.groups()).skip(1) {
            *water = group.at_share(share, self.room_c, room_c);
            flow_c = flow_c.max(water.flow_c);
        }
        // Each group draws from the common flow what carries its heat down to its own return.
        let (mut water_flow, mut mixed) = (0.0, 0.0);
        for (water, group) in each.iter().zip(self.groups()) {
            let drawn = group.share / (flow_c - water.return_c).max(LEAST_DIFFERENCE_K);
            water_flow += drawn;
            mixed += drawn * water.return_c;
        }
        WaterTemperatures {
            flow_c,
            return_c: mixed / water_flow,
        }
    }

    /// Heat they give at a flow temperature, kW: the inverse of [`Emitters::at_load`].
    pub fn output_kw(&self, flow_c: f64, room_c: f64) -> f64 {
        let share = self
            .groups()
            .iter()
            .map(|group| group.share_at(flow_c - room_c, self.room_c))
            .fold(f64::INFINITY, f64::min);
        self.design_load_kw * share
    }

    /// What the control lets them carry of a heat (kW) at an outdoor temperature, into rooms at a temperature (°C).
    ///
    /// A flow hotter than needed is throttled by the room valves: the same mean water, a cooler return. A cooler flow carries
    /// less heat.
    #[inline]
    pub fn supply(&self, heat_kw: f64, room_c: f64, outdoor_c: f64) -> Supply {
        match self.control.flow_c(outdoor_c) {
            None => {
                let water = self.at_load(heat_kw, room_c);
                Supply {
                    heat_kw,
                    water,
                    spread_k: water.flow_c - water.return_c,
                }
            }
            Some(flow_c) => self.supply_at(heat_kw, room_c, flow_c),
        }
    }

    /// What they carry of a heat (kW) at a flow temperature, into rooms at a temperature (°C).
    pub fn supply_at(&self, heat_kw: f64, room_c: f64, flow_c: f64) -> Supply {
        let needed = self.at_load(heat_kw, room_c);
        if flow_c >= needed.flow_c {
            let return_c = (2.0 * needed.mean_c() - flow_c).max(room_c.min(needed.return_c));
            return Supply {
                heat_kw,
                water: WaterTemperatures { flow_c, return_c },
                spread_k: needed.flow_c - needed.return_c,
            };
        }
        let heat_kw = self.output_kw(flow_c, room_c);
        let water = self.at_load(heat_kw, room_c);
        Supply {
            heat_kw,
            water,
            spread_k: water.flow_c - water.return_c,
        }
    }

    /// Greatest heat at the greatest permitted flow temperature into a room at its design temperature, kW.
    pub fn greatest_output_kw(&self) -> f64 {
        self.greatest_output_kw
    }

    /// Mean water minus room temperature of the leading group at the design load, K.
    pub fn design_excess_k(&self) -> f64 {
        self.groups[0].excess_k(self.room_c)
    }

    /// Flow minus return at the design load, K.
    pub fn design_spread_k(&self) -> f64 {
        let water = self.at_load(self.design_load_kw, self.room_c);
        water.flow_c - water.return_c
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;

    /// EN 442 factors against ΔT50, (ΔT/50)^1.3: 40 K 0.7482, 35 K 0.6290, 30 K 0.5148, 25 K 0.4061, 20 K 0.3039.
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

    /// EN 442 by hand: +15 % loss moves a 50 °C flow to about 53.5 °C, −15 % to 46.4 °C, with the emitters unchanged (50/43 at design).
    #[test]
    fn more_heat_through_the_same_radiators_needs_hotter_water() {
        let radiators = Emitters::new(EmitterKind::Radiators, 5.0, 50.0, 43.0, 20.0, 80.0);
        assert!((radiators.at_load(5.0 * 1.15, 20.0).flow_c - 53.5).abs() < 0.1);
        assert!((radiators.at_load(5.0 * 0.85, 20.0).flow_c - 46.4).abs() < 0.1);
        assert!((radiators.at_load(5.0, 20.0).mean_c() - 46.5).abs() < 1e-12);
    }

    /// Two groups of the same kind and temperatures are one; the mixed return lies between those of the groups and closes the
    /// heat balance: flow shares × (flow − return) add up to the load.
    #[test]
    fn equal_groups_are_one_and_unequal_ones_close() {
        let half = Group {
            kind: EmitterKind::Radiators,
            share: 3.0,
            flow_c: 50.0,
            return_c: 43.0,
        };
        let two = Emitters::of_groups(&[half, half], 5.0, 20.0, 60.0).unwrap();
        let one = Emitters::new(EmitterKind::Radiators, 5.0, 50.0, 43.0, 20.0, 60.0);
        let (a, b) = (two.at_load(3.0, 19.0), one.at_load(3.0, 19.0));
        assert!((a.flow_c - b.flow_c).abs() < 1e-12 && (a.return_c - b.return_c).abs() < 1e-9);
        let floor = Group {
            kind: EmitterKind::Underfloor,
            share: 3.0,
            flow_c: 35.0,
            return_c: 30.0,
        };
        let mixed = Emitters::of_groups(&[half, floor], 5.0, 20.0, 60.0)
            .unwrap()
            .at_load(5.0, 20.0);
        // 1/(50−43) and 1/(50−30) parts of water bring back 1/2 + 1/2 of the heat.
        let (radiator, floor) = (1.0 / 7.0, 1.0 / 20.0);
        let expected = (radiator * 43.0 + floor * 30.0) / (radiator + floor);
        assert!((mixed.return_c - expected).abs() < 1e-9 && (mixed.flow_c - 50.0).abs() < 1e-12);
        assert_eq!(Emitters::of_groups(&[], 5.0, 20.0, 60.0), None);
    }

    /// A fixed flow carries the same heat at the same mean water with a cooler return; a flow that is too cool carries less.
    #[test]
    fn control_throttles_or_falls_short() {
        let radiators = Emitters::new(EmitterKind::Radiators, 5.0, 50.0, 43.0, 20.0, 60.0);
        let needed = radiators.at_load(2.0, 20.0);
        let fixed = radiators
            .with_control(Control::Fixed(45.0))
            .supply(2.0, 20.0, 8.0);
        assert_eq!((fixed.heat_kw, fixed.water.flow_c), (2.0, 45.0));
        assert!((fixed.water.mean_c() - needed.mean_c()).abs() < 1e-9);
        let line = Control::Line {
            cold: (-3.0, 50.0),
            mild: (15.0, 30.0),
        };
        assert_eq!(line.flow_c(6.0), Some(40.0));
        assert_eq!(
            (line.flow_c(-20.0), line.flow_c(30.0)),
            (Some(50.0), Some(30.0))
        );
        let short = radiators.with_control(line).supply(5.0, 20.0, 6.0);
        assert!(short.heat_kw < 5.0 && (short.water.flow_c - 40.0).abs() < 1e-6);
        let follows = radiators.supply(2.0, 20.0, 8.0);
        assert_eq!(follows.water, needed);
    }

    proptest! {
        #[test]
        fn output_inverts_load(load in 0.01..20.0, flow in 30.0..70.0, spread in 0.0..10.0f64, room in 15.0..22.0) {
            let emitters = Emitters::new(EmitterKind::Radiators, 6.0, flow, flow - spread.min(flow - room - 2.0), room, 85.0);
            let water = emitters.at_load(load, room);
            prop_assert!((emitters.output_kw(water.flow_c, room) / load - 1.0).abs() < 1e-6);
        }

        /// Groups: the whole carries what its parts carry, at a flow no cooler than any of them needs.
        #[test]
        fn groups_invert_too(load in 0.05..9.0, room in 15.0..22.0) {
            let groups = [
                Group { kind: EmitterKind::Underfloor, share: 0.4, flow_c: 38.0, return_c: 33.0 },
                Group { kind: EmitterKind::Radiators, share: 0.6, flow_c: 48.0, return_c: 41.0 },
            ];
            let emitters = Emitters::of_groups(&groups, 6.0, 20.0, 60.0).unwrap();
            let water = emitters.at_load(load, room);
            prop_assert!((emitters.output_kw(water.flow_c, room) / load - 1.0).abs() < 1e-6);
            prop_assert!(water.return_c < water.flow_c && water.return_c > room);
            prop_assert_eq!(emitters.kind(), EmitterKind::Radiators);
        }

        #[test]
        fn flow_rises_with_load(load in 0.0..10.0, more in 0.001..5.0) {
            let emitters = Emitters::new(EmitterKind::Underfloor, 6.0, 35.0, 30.0, 20.0, 50.0);
            prop_assert!(emitters.at_load(load + more, 20.0).flow_c > emitters.at_load(load, 20.0).flow_c);
        }
    }
}
