//! What the warm side asks for: fabric, emitters, hot water.
//!
//! [`Fabric`] turns a set point and the weather into the heat an hour needs, and the heat it got into the room's next
//! temperature. [`Emitters`] turn that heat into the flow temperature the machine must reach. [`HotWater`] is a duty of
//! its own, at its own temperature.

mod emitters;
mod fabric;
mod hot_water;

pub use emitters::{EmitterKind, Emitters, WaterTemperatures};
pub use fabric::{Construction, Fabric, RECOVERY_H, RoomStep};
pub use hot_water::{DRAW_SHARES, HotWater, Store, StoreStep, WATER_KWH_PER_L_K};

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
