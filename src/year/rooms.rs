//! What the rooms want in an hour.

use super::row::{Flags, Row};
use super::site::Plan;
use super::system::State;
use crate::extremes::{greater, lesser};
use crate::home::Home;

/// What the rooms want in an hour.
#[derive(Clone, Copy)]
pub(super) struct Rooms {
    /// Heat that holds the set point or leads back to it, as far as the emitters can carry it, kW.
    pub wanted_kw: f64,
    /// Heat that keeps them above the point where backup helps, kWh.
    pub least_kwh: f64,
    /// Their temperature at the beginning of the hour, °C.
    pub room_c: f64,
    /// Outdoor air, °C: what a compensation line follows.
    pub outdoor_c: f64,
}

impl Rooms {
    /// What they want by their set point and the warm-up for the next, at the outdoor temperature and set point of the row.
    #[inline]
    pub fn ask(
        hour: usize,
        home: &Home,
        plan: &Plan,
        gains_kw: f64,
        state: &mut State,
        row: &mut Row,
    ) -> Self {
        let fabric = &home.fabric;
        let (room_c, outdoor_c) = (state.room_c, row.outdoor_c);
        let reach = |target_c| fabric.heat_to_reach_kwh(room_c, target_c, outdoor_c, gains_kw);
        let steady = || fabric.heat_wanted_kw(room_c, row.set_point_c, outdoor_c, gains_kw);
        let mut wanted_kw = match &plan.recovery {
            Some(recovery) if recovery.at_the_time => reach(row.set_point_c),
            _ => steady(),
        };
        if let Some(recovery) = &plan.recovery {
            let under_way = &mut state.recovering;
            let warm_up_kw = recovery.heat_kw(hour, fabric, room_c, outdoor_c, gains_kw, under_way);
            row.flags |= Flags::RECOVERY.when(warm_up_kw > 0.0);
            wanted_kw = greater(wanted_kw, warm_up_kw);
        }
        row.space_wanted_kwh = wanted_kw;
        Self {
            wanted_kw: lesser(wanted_kw, home.emitters.greatest_output_kw()),
            least_kwh: reach(plan.backup_below_c[hour]),
            room_c,
            outdoor_c,
        }
    }
}
