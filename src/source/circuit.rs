//! The brine circuit: what flows, what it carries, and what its pump takes.

use super::brine::{Brine, BrineProperties};
use super::pipe::{LAMINAR_BELOW, Pipe, PipeFlow};

/// Temperature at which a brine's properties are taken, °C: that of the standard rating point B0.
pub const BRINE_C: f64 = 0.0;
/// Bends, manifolds and the way to the house, as a share of the fall of pressure in the loop. Common practice, no source.
const FITTINGS: f64 = 0.25;
/// Watts in a kilowatt.
const WATTS: f64 = 1000.0;

/// Brine going round: through equal pipes side by side, then the machine.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Circuit {
    /// What flows.
    pub brine: Brine,
    /// How much of it, kg/s, over all pipes.
    pub flow_kg_per_s: f64,
    /// Flow in one pipe.
    pub in_pipe: PipeFlow,
    /// Fall of pressure outside the machine, kPa; not known where the pump's power was given.
    pub pressure_kpa: Option<f64>,
    /// Electric power of the pump for that, kW.
    pub pump_kw: f64,
}

/// How the pump is known.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum Pump {
    /// By its electric power, kW, beyond what the machine's tested points hold.
    Power(f64),
    /// By its efficiency from the plug to the water, 0 to 1.
    Efficiency(f64),
}

impl Circuit {
    /// A flow (kg/s) through a number of equal ways side by side, each a pipe of a length (m).
    pub fn new(
        brine: Brine,
        flow_kg_per_s: f64,
        pipe: &Pipe,
        ways: usize,
        way_m: f64,
        pump: Pump,
    ) -> Self {
        let properties = brine.at(BRINE_C);
        let in_pipe = pipe.flow(flow_kg_per_s / ways as f64, &properties);
        let pressure_kpa = in_pipe.pascal_per_m * way_m * (1.0 + FITTINGS) / 1000.0;
        let (pump_kw, pressure_kpa) = match pump {
            Pump::Power(kw) => (kw, None),
            Pump::Efficiency(efficiency) => (
                pressure_kpa * flow_kg_per_s / properties.density_kg_per_m3 / efficiency,
                Some(pressure_kpa),
            ),
        };
        Self {
            brine,
            flow_kg_per_s,
            in_pipe,
            pressure_kpa,
            pump_kw,
        }
    }

    /// Properties of the brine at [`BRINE_C`].
    pub fn properties(&self) -> BrineProperties {
        self.brine.at(BRINE_C)
    }

    /// Heat capacity flow, kW/K.
    pub fn capacity_kw_per_k(&self) -> f64 {
        self.flow_kg_per_s * self.properties().heat_capacity_kj_per_kg_k
    }

    /// Heat capacity flow in one of equal ways side by side, W/K.
    pub fn way_w_per_k(&self, ways: usize) -> f64 {
        self.capacity_kw_per_k() * WATTS / ways as f64
    }

    /// Whether the flow in the pipes is laminar, which hinders the heat.
    pub fn is_laminar(&self) -> bool {
        self.in_pipe.reynolds < LAMINAR_BELOW
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::source::Antifreeze;

    #[test]
    fn pump_power_is_pressure_times_flow_over_efficiency() {
        let brine = Brine::new(Antifreeze::Water, 0.0).unwrap();
        let pipe = Pipe {
            outside_m: 0.04,
            wall_m: 0.0037,
            conductivity_w_per_m_k: 0.42,
        };
        let circuit = Circuit::new(brine, 0.4, &pipe, 1, 200.0, Pump::Efficiency(0.25));
        let pressure_kpa = circuit.pressure_kpa.unwrap();
        // 0.4 L/s against that pressure: W = kPa · L/s; a quarter of the plug's power reaches the water. Cold water is within half
        // a per cent of a kilogram a litre.
        let watts = pressure_kpa * 0.4 / 0.25;
        assert!(
            (circuit.pump_kw * 1000.0 / watts - 1.0).abs() < 0.005,
            "{circuit:?} {watts}"
        );
        assert!((circuit.capacity_kw_per_k() - 0.4 * 4.2).abs() < 0.01);
        let given = Circuit::new(brine, 0.4, &pipe, 1, 200.0, Pump::Power(0.07));
        assert_eq!((given.pump_kw, given.pressure_kpa), (0.07, None));
        let split = Circuit::new(brine, 0.4, &pipe, 4, 200.0, Pump::Efficiency(0.25));
        assert!(split.pressure_kpa.unwrap() < pressure_kpa / 8.0);
    }
}
