//! One hour solved again without the map, to be looked into.

use super::duty::{ColdSide, Delivered, Duty};
use super::frost::FrostLoss;
use super::heat_pump::HeatPump;
use super::machine::{Operation, SolveError};
use super::part_load::running_spread_k;

/// An hour of [`HeatPump::deliver`] with its machine solved exactly at the same output and temperatures.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Exact {
    /// What the hour loop got from the map.
    pub delivered: Delivered,
    /// The machine while running; nothing when it stood. Powers are those of the machine's real size; frost-free.
    pub operation: Option<Operation>,
    /// Water returning while running, °C.
    pub return_c: f64,
    /// Share of the time that it ran.
    pub running_fraction: f64,
    /// Frost losses.
    pub frost: FrostLoss,
    /// Evaporating temperature that frost was reckoned with, °C: entering source less the approach at the corrected heat taken from the
    /// source, a few hundredths of a kelvin from that of the physical cycle.
    pub frost_evaporating_c: f64,
    /// Humidity ratio of the outdoor air that frost was reckoned with, kg/kg; 0 where there is no outdoor coil.
    pub humidity_ratio: f64,
    /// Evaporator: entering source minus evaporating temperature, K.
    pub evaporator_approach_k: f64,
    /// Condenser: condensing minus flow temperature, K.
    pub condenser_approach_k: f64,
    /// Superheat at the compressor's inlet, K.
    pub superheat_k: f64,
    /// Subcooling at the condenser's outlet, K.
    pub subcooling_k: f64,
    /// Share of the compressor's electricity that reaches the refrigerant.
    pub drive_efficiency: f64,
    /// Corrected over physical COP.
    pub correction: f64,
    /// Frost-free electricity of the map over that of the exact machine, less one, percent.
    pub map_percent: f64,
}

impl HeatPump {
    /// Solves an hour again, exactly.
    ///
    /// # Errors
    /// [`SolveError`] when the machine cannot run at the hour's conditions.
    pub fn explain(&self, cold: &ColdSide, duty: &Duty) -> Result<Exact, SolveError> {
        let delivered = self.deliver(cold, duty);
        let machine = &self.core.machine.machine;
        let mut exact = Exact {
            delivered,
            operation: None,
            return_c: f64::NAN,
            running_fraction: 0.0,
            frost: FrostLoss::default(),
            frost_evaporating_c: f64::NAN,
            humidity_ratio: self.moisture(cold),
            evaporator_approach_k: f64::NAN,
            condenser_approach_k: f64::NAN,
            superheat_k: machine.table.superheat_k(),
            subcooling_k: machine.table.subcooling_k(),
            drive_efficiency: machine.compressor.drive_efficiency,
            correction: 1.0,
            map_percent: 0.0,
        };
        if delivered.running_hours <= 0.0 {
            return Ok(exact);
        }
        let net_kw = delivered.heat_kwh / delivered.running_hours / self.scale;
        let source_c = delivered.source_c;
        let machine_c = source_c.min(delivered.flow_c - super::limits::LEAST_DIFFERENCE_K);
        let coil_c = |operation: &Operation| {
            machine_c - machine.evaporator.approach_k(operation.extracted_kw)
        };
        let frost_at = |operation: &Operation| {
            if exact.humidity_ratio > 0.0 {
                let frost = &self.core.frost;
                frost.loss(source_c, coil_c(operation), exact.humidity_ratio)
            } else {
                FrostLoss::default()
            }
        };
        let fitted = &self.core.machine;
        let mut operation = fitted.at_output(machine_c, delivered.flow_c, net_kw)?;
        let mut loss = frost_at(&operation);
        for _ in 0..MOST_FROST_STEPS {
            let gross_kw = net_kw / (1.0 - loss.output);
            let settled = (gross_kw / operation.heat_kw - 1.0).abs() < FROST_TOLERANCE;
            if settled {
                break;
            }
            operation = fitted.at_output(machine_c, delivered.flow_c, gross_kw)?;
            loss = frost_at(&operation);
        }
        exact.frost = loss;
        exact.frost_evaporating_c = coil_c(&operation);
        exact.correction = fitted.cop_factor(machine_c, delivered.flow_c, operation.heat_kw);
        exact.evaporator_approach_k = machine_c - operation.evaporating_c;
        exact.condenser_approach_k = operation.condensing_c - delivered.flow_c;
        exact.running_fraction = delivered.running_hours / duty.hours;
        exact.return_c = delivered.flow_c - running_spread_k(duty.spread_k, exact.running_fraction);
        let by_map = self.core.map.input(
            machine_c,
            delivered.flow_c,
            self.fraction_of(machine_c, delivered.flow_c, operation.heat_kw),
        );
        let by_exact = operation.electric_kw() / operation.heat_kw;
        exact.map_percent = 100.0 * (by_map.electric_per_heat / by_exact - 1.0);
        exact.operation = Some(scaled(&operation, self.scale));
        Ok(exact)
    }

    fn fraction_of(&self, source_c: f64, flow_c: f64, heat_kw: f64) -> f64 {
        let range = self.core.map.range(source_c, flow_c);
        let width = range.greatest_kw - range.least_kw;
        if width > 0.0 {
            (heat_kw - range.least_kw) / width
        } else {
            1.0
        }
    }
}

/// Changes of output below this end the frost substitution, relative.
const FROST_TOLERANCE: f64 = 1e-9;
/// Most substitutions of it.
const MOST_FROST_STEPS: usize = 20;

/// A machine of another size at the same temperatures and speed.
fn scaled(operation: &Operation, scale: f64) -> Operation {
    Operation {
        mass_flow_kg_per_s: operation.mass_flow_kg_per_s * scale,
        heat_kw: operation.heat_kw * scale,
        extracted_kw: operation.extracted_kw * scale,
        compressor_kw: operation.compressor_kw * scale,
        source_side_kw: operation.source_side_kw * scale,
        ..*operation
    }
}
