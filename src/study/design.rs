//! The design point: does the heater carry the design heat load at the flow the emitters need?

use super::balance::cold_side;
use crate::home::water_flow_l_per_min;
use crate::source::Memory;
use crate::year::{Heating, MachineSystem, System};

/// A system at its design point.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct DesignPoint {
    /// Outdoor temperature, °C.
    pub outdoor_c: f64,
    /// Design heat load, kW.
    pub load_kw: f64,
    /// Flow to the emitters that carries it, °C.
    pub flow_c: f64,
    /// Flow the heater has to make, °C.
    pub heater_flow_c: f64,
    /// Greatest heat the heater brings the rooms there without backup, kW.
    pub output_kw: f64,
    /// Greatest heat of the emitters at their greatest permitted flow, kW.
    pub emitters_kw: f64,
    /// Highest flow of the machine there, °C; absent where there is no heat pump.
    pub highest_flow_c: Option<f64>,
    /// Backup, kW; absent where there is no heat pump.
    pub backup_kw: Option<f64>,
    /// Water flow of the emitters, L/min.
    pub water_l_per_min: f64,
}

/// What limits the heat at a design point.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum DesignLimit {
    /// The emitters at their greatest permitted flow.
    Emitters,
    /// The heater's highest flow.
    HighestFlow,
    /// The heater's output.
    Output,
}

impl DesignPoint {
    /// What limits the heat that is carried without backup.
    pub fn limit(&self) -> DesignLimit {
        if self.emitters_kw < self.output_kw {
            DesignLimit::Emitters
        } else if self
            .highest_flow_c
            .is_some_and(|highest_c| self.heater_flow_c > highest_c)
        {
            DesignLimit::HighestFlow
        } else {
            DesignLimit::Output
        }
    }

    /// Heat that is carried without backup, kW.
    pub fn carried_kw(&self) -> f64 {
        self.output_kw.min(self.emitters_kw)
    }

    /// Heat that heater and backup carry together, kW.
    pub fn carried_with_backup_kw(&self) -> f64 {
        (self.output_kw + self.backup_kw.unwrap_or(0.0)).min(self.emitters_kw)
    }

    /// Whether heater and backup together carry the load; a watt is rounding.
    pub fn covered(&self) -> bool {
        const ROUNDING_KW: f64 = 1e-3;
        self.carried_with_backup_kw() >= self.load_kw - ROUNDING_KW
    }
}

/// The design point of a system for a load (kW) at an outdoor temperature and a set point (°C), with what the ground remembers.
///
/// A machine whose highest flow is below the one needed gives what the emitters carry at its highest.
pub fn design_point(
    system: &System,
    indoor_c: f64,
    outdoor_c: f64,
    load_kw: f64,
    ground: Memory,
) -> DesignPoint {
    let emitters = &system.home.emitters;
    let water = emitters.at_load(load_kw, indoor_c);
    let heater_flow_c = water.flow_c + emitters.header_k();
    let of_machine = |machine: &MachineSystem| {
        let cold = cold_side(machine, outdoor_c, &ground);
        let highest_c = machine.machine.limits().highest_flow_at(cold.open_c);
        if heater_flow_c <= highest_c {
            machine.machine.greatest_output_kw(&cold, heater_flow_c)
        } else {
            let carried_kw = emitters.output_kw(highest_c - emitters.header_k(), indoor_c);
            machine
                .machine
                .greatest_output_kw(&cold, highest_c)
                .min(carried_kw)
        }
    };
    let (output_kw, backup_kw) = match &system.heating {
        Heating::HeatPump(machine) => (of_machine(machine), Some(machine.backup_kw)),
        // The boiler adds what the machine cannot.
        Heating::Hybrid(hybrid) => (of_machine(&hybrid.machine), Some(hybrid.boiler.output_kw)),
        Heating::Boiler { boiler, .. } => (boiler.output_kw, None),
        Heating::DirectElectric { output_kw } => (*output_kw, None),
    };
    let spread_k = (water.flow_c - water.return_c).max(f64::MIN_POSITIVE);
    DesignPoint {
        outdoor_c,
        load_kw,
        flow_c: water.flow_c,
        heater_flow_c,
        output_kw,
        emitters_kw: emitters.greatest_output_kw(),
        highest_flow_c: system.heating.machine().map(|machine| {
            let cold = cold_side(machine, outdoor_c, &ground);
            machine.machine.limits().highest_flow_at(cold.open_c)
        }),
        backup_kw,
        water_l_per_min: water_flow_l_per_min(load_kw, spread_k),
    }
}
