//! A system: a home and what heats it; and what carries over from hour to hour.

use crate::heater::Boiler;
use crate::heatpump::HeatPump;
use crate::home::{Home, StoreState};
use crate::source::{Memory, Source};

/// A home and what heats it.
#[derive(Debug, Clone)]
pub struct System {
    /// What it is called in every output.
    pub label: String,
    /// The warm side.
    pub home: Home,
    /// What makes the heat.
    pub heating: Heating,
}

/// What makes the heat.
#[derive(Debug, Clone)]
pub enum Heating {
    /// A heat pump with its backup.
    HeatPump(Box<MachineSystem>),
    /// A boiler, its flow temperature fixed or following the load.
    Boiler {
        /// The boiler.
        boiler: Boiler,
        /// Flow temperature it is set to, °C; it follows the load where there is none.
        fixed_flow_c: Option<f64>,
    },
    /// Resistance heating.
    DirectElectric {
        /// Greatest output, kW.
        output_kw: f64,
    },
}

/// A heat pump with its source, backup, immersion heater and circuit pump.
#[derive(Debug, Clone)]
pub struct MachineSystem {
    /// The machine.
    pub machine: HeatPump,
    /// Where its heat comes from.
    pub source: Source,
    /// Backup heater in the flow to the rooms, kW; 0 when there is none.
    pub backup_kw: f64,
    /// Immersion heater in the store, kW; 0 when there is none.
    pub immersion_kw: f64,
    /// Pump of the heating circuit beyond what the machine's test already holds, kW.
    pub circulation_kw: f64,
}

/// What carries over from hour to hour.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct State {
    /// Rooms, °C.
    pub room_c: f64,
    /// Whether the rooms are being warmed up for a higher set point.
    pub recovering: bool,
    /// Hot-water store; full, and of no meaning where there is none.
    pub store: StoreState,
    /// What the ground remembers of past draws.
    pub ground: Memory,
}

impl State {
    /// Rooms and store at their set points.
    pub fn at_rest(system: &System, set_point_c: f64) -> Self {
        let store = system.home.hot_water.as_ref().and_then(|water| water.store);
        let none = StoreState {
            mean_c: set_point_c,
            charging: false,
            hygiene: false,
        };
        Self {
            room_c: set_point_c,
            recovering: false,
            store: store.map_or(none, |store| store.full()),
            ground: Memory::default(),
        }
    }
}
