//! A system: a home and what heats it; and what carries over from hour to hour.

use crate::heater::{Boiler, HybridRule};
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
    /// A heat pump with a boiler beside it.
    Hybrid(Box<HybridSystem>),
    /// Resistance heating.
    DirectElectric {
        /// Greatest output, kW.
        output_kw: f64,
    },
}

impl Heating {
    /// Its machine, where it has one.
    pub fn machine(&self) -> Option<&MachineSystem> {
        match self {
            Self::HeatPump(machine) => Some(machine),
            Self::Hybrid(hybrid) => Some(&hybrid.machine),
            Self::Boiler { .. } | Self::DirectElectric { .. } => None,
        }
    }

    /// The same, to be changed.
    pub fn machine_mut(&mut self) -> Option<&mut MachineSystem> {
        match self {
            Self::HeatPump(machine) => Some(machine),
            Self::Hybrid(hybrid) => Some(&mut hybrid.machine),
            Self::Boiler { .. } | Self::DirectElectric { .. } => None,
        }
    }

    /// Its boiler, where it has one.
    pub fn boiler(&self) -> Option<&Boiler> {
        match self {
            Self::Boiler { boiler, .. } => Some(boiler),
            Self::Hybrid(hybrid) => Some(&hybrid.boiler),
            Self::HeatPump(_) | Self::DirectElectric { .. } => None,
        }
    }

    /// Whether prices or carbon decide what runs, so that another price makes another year.
    pub fn follows_signals(&self) -> bool {
        matches!(self, Self::Hybrid(hybrid) if hybrid.rule.follows_signals())
    }
}

/// A heat pump with a boiler beside it, one of which serves each hour.
#[derive(Debug, Clone)]
pub struct HybridSystem {
    /// The heat pump.
    pub machine: MachineSystem,
    /// The boiler.
    pub boiler: Boiler,
    /// Flow temperature the boiler is set to, °C; it follows the load where there is none.
    pub fixed_flow_c: Option<f64>,
    /// Which of them serves an hour.
    pub rule: HybridRule,
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
    /// Puts rooms and store to other temperatures (°C), no block of hot water under way; what else lasts stays.
    pub fn place(&mut self, room_c: f64, store_c: f64) {
        self.room_c = room_c;
        self.store.mean_c = store_c;
        self.store.charging = false;
    }

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
