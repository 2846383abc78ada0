//! How hot a machine's compressor gets where it runs hardest.

use super::cycle::{Cycle, CycleInputs, HOT_DISCHARGE_C};
use super::heat_pump::HeatPump;
use super::limits::LEAST_DIFFERENCE_K;
use crate::problem::{Finding, Severity};
use crate::refrigerant::Equation;

impl HeatPump {
    /// A caution where the machine at its greatest speed would discharge hotter than oil and windings usually stand, at an entering
    /// source temperature (°C) and a flow temperature (°C, brought down to the highest permitted there); nothing where it stays below.
    pub fn hot_discharge(&self, source_c: f64, flow_c: f64) -> Option<Finding> {
        let limits = self.limits();
        let source_c = source_c.clamp(limits.lowest_source_c, limits.highest_source_c);
        let flow_c = flow_c.min(limits.highest_flow_at(source_c));
        let physical = &self.machine().machine;
        let operation = physical
            .at_greatest(source_c.min(flow_c - LEAST_DIFFERENCE_K), flow_c)
            .ok()?;
        let equation = Equation::new(self.refrigerant()).ok()?;
        let inputs = CycleInputs {
            evaporating_c: operation.evaporating_c,
            condensing_c: operation.condensing_c,
            superheat_k: physical.table.superheat_k(),
            subcooling_k: physical.table.subcooling_k(),
            isentropic_efficiency: operation.isentropic_efficiency,
            mass_flow_kg_per_s: None,
        };
        let discharge = match Cycle::solve(&equation, inputs) {
            Ok(cycle) if cycle.discharge.temperature_c <= HOT_DISCHARGE_C => return None,
            Ok(cycle) => format!("at {:.0} °C", cycle.discharge.temperature_c),
            // The inputs are a machine's own, so that only a discharge beyond the equation is left to be refused.
            Err(_) => format!("hotter than the equation of {} reaches", self.refrigerant()),
        };
        Some(Finding::new(
            Severity::Warning,
            format!(
                "{} ({}) at full speed, source {source_c:.0} °C, flow {flow_c:.0} °C, pressure ratio {:.1}: discharge {discharge}",
                self.label(),
                self.refrigerant(),
                operation.pressure_ratio
            ),
            format!(
                "more than the {HOT_DISCHARGE_C:.0} °C that oil and windings usually stand; a real machine injects liquid or stops there: \
                 ask its maker for the flow it reaches in such cold, and give it under [limits]"
            ),
        ))
    }
}
