//! What the warm side asks for: fabric, running pattern, emitters, rooms, hot water.
//!
//! [`Pattern`] says which temperature is asked for. [`Fabric`] turns it and the weather into the heat an hour needs, and the
//! heat it got into the room's next temperature. [`Emitters`] turn that heat into the flow temperature the machine must reach;
//! [`worst_room`] says which room sets it. [`HotWater`] is a duty of its own, at its own temperature, answered by a [`Store`].

mod control;
mod draws;
mod emitters;
mod fabric;
mod floor;
mod group;
mod pattern;
mod pipe;
mod power;
mod rooms;
mod store;

pub use control::Control;
pub use draws::{HotWater, TappingProfile, WATER_KWH_PER_L_K};
pub use emitters::{Emitters, MOST_GROUPS, Supply};
pub use fabric::{
    AIR_WH_PER_M3_K, Construction, Fabric, RECOVERY_H, RoomStep, ventilation_w_per_k,
};
pub use floor::{EDGE_FLOOR_C, OCCUPIED_FLOOR_C, floor_output_w_per_m2, floor_surface_c};
pub use group::{EmitterKind, Group, WaterTemperatures};
pub use pattern::{DaySpan, FROST_C, Pattern, WarmUp};
pub use pipe::{QUIET_M_PER_S, smallest_pipe_mm, water_flow_l_per_min};
pub use rooms::{Room, WorstRoom, worst_room};
pub use store::{ClockHours, Hygiene, Store, StoreState, StoreStep, Tapped};

/// One home as the hour loop needs it.
#[derive(Debug, Clone, PartialEq)]
pub struct Home {
    /// Heat loss, storage and gains.
    pub fabric: Fabric,
    /// What carries the heat into the rooms.
    pub emitters: Emitters,
    /// Hot water; absent when something else makes it.
    pub hot_water: Option<HotWater>,
}
