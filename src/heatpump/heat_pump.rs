//! The heat pump that the hours use: fitted machine, map, limits, frost, idle powers and the allowance from bench to home.

use crate::fault::{self, Fault};
use std::sync::Arc;

use super::correction::FittedMachine;
use super::duty::{ColdSide, Duty};
use super::frost::{Frost, frost_free_above_c};
use super::idle::IdlePower;
use super::limits::Limits;
use super::map::Map;
use super::sheet::{Sheet, SourceKind};
use crate::bounds::FIELD_FACTOR;
use crate::problem::{Finding, Severity};
use crate::refrigerant::Refrigerant;

/// Allowance from laboratory to home: the field-correction factor of Ruhnau et al. 2019, doi 10.1038/s41597-019-0199-y.
/// Electricity is divided by it, as a component of its own.
pub const USUAL_FIELD_FACTOR: f64 = 0.85;

/// A heat pump, immutable and shared between threads.
///
/// Made by [`fit`](super::fit()); [`HeatPump::deliver`] answers an hour.
#[derive(Debug, Clone)]
pub struct HeatPump {
    pub(super) core: Arc<Core>,
    /// Size, relative to the sheet.
    pub(super) scale: f64,
    pub(super) field_factor: f64,
    /// Pump power over that in the tested points, ≥ 1 at home.
    pub(super) source_side_factor: f64,
}

/// What does not change with size or allowance.
#[derive(Debug, Clone)]
pub(super) struct Core {
    pub label: String,
    pub typical: bool,
    pub source: SourceKind,
    pub machine: FittedMachine,
    pub frost: Frost,
    pub limits: Limits,
    pub map: Map,
    pub idle: IdlePower,
    pub cycling_coefficient: f64,
    pub greatest_current_a: Option<f64>,
    pub rated_condition: (f64, f64),
    pub rated_output_kw: f64,
    /// Air warmer than this cannot frost the coil, °C.
    pub frost_free_c: f64,
}

impl HeatPump {
    pub(super) fn new(
        sheet: &Sheet,
        limits: Limits,
        machine: FittedMachine,
        frost: Frost,
        map: Map,
    ) -> Self {
        let tested_kw = machine.machine.source_power_kw;
        let rated_condition = sheet.rated_condition();
        let (source_c, flow_c) = rated_condition;
        let largest_approach_k = machine
            .machine
            .evaporator
            .approach_k(map.greatest_output_kw());
        let core = Core {
            frost_free_c: frost_free_above_c(largest_approach_k),
            label: sheet.label.clone(),
            typical: sheet.typical,
            source: sheet.source,
            machine,
            frost,
            rated_output_kw: map.range(source_c, flow_c).greatest_kw,
            limits,
            map,
            idle: sheet.idle,
            cycling_coefficient: sheet.cycling_coefficient,
            greatest_current_a: sheet.greatest_current_a,
            rated_condition,
        };
        Self {
            core: Arc::new(core),
            scale: 1.0,
            field_factor: if fault::on(Fault::LaboratoryMachine) {
                1.0
            } else {
                USUAL_FIELD_FACTOR
            },
            source_side_factor: sheet
                .source_power_at_home_kw
                .map_or(1.0, |home| (home / tested_kw).max(1.0)),
        }
    }

    /// Electricity of the source's side at home over that of the tested points, at least 1.
    pub fn source_side_factor(&self) -> f64 {
        self.source_side_factor
    }

    /// The same machine at another size: its greatest output at A7/W35, B0/W35 or W10/W35 becomes `rated_output_kw`. Everything
    /// per kilowatt stays, so temperatures and COP at the same share of output stay too.
    pub fn scaled_to(&self, rated_output_kw: f64) -> Self {
        Self {
            scale: rated_output_kw / self.core.rated_output_kw,
            ..self.clone()
        }
    }

    /// The same machine with another allowance from bench to home: 1 for laboratory figures. Held between 0.5 and 1.
    pub fn with_field_factor(&self, field_factor: f64) -> Self {
        Self {
            field_factor: field_factor.clamp(FIELD_FACTOR.low, FIELD_FACTOR.high),
            ..self.clone()
        }
    }

    /// The same machine on a laboratory's bench: no allowance, and a pump that overcomes the machine alone.
    pub fn at_bench(&self) -> Self {
        Self {
            field_factor: 1.0,
            source_side_factor: 1.0,
            ..self.clone()
        }
    }

    /// The same machine with a source pump that overcomes the machine alone, as in its tested points: for a loop whose own pump
    /// is accounted for elsewhere.
    pub fn without_outside_pump(&self) -> Self {
        Self {
            source_side_factor: 1.0,
            ..self.clone()
        }
    }

    /// What it is called.
    pub fn label(&self) -> &str {
        &self.core.label
    }

    /// Whether it stands for a usual machine rather than being one: to be said in every output.
    pub fn is_typical(&self) -> bool {
        self.core.typical
    }

    /// Where it takes heat.
    pub fn source(&self) -> SourceKind {
        self.core.source
    }

    /// What runs in its circuit.
    pub fn refrigerant(&self) -> Refrigerant {
        self.core.machine.machine.table.refrigerant()
    }

    /// Greatest output at its rated condition, kW.
    pub fn rated_output_kw(&self) -> f64 {
        self.core.rated_output_kw * self.scale
    }

    /// Source and flow temperature of the rated output, °C.
    pub fn rated_condition(&self) -> (f64, f64) {
        self.core.rated_condition
    }

    /// Heat drawn from the source at its rated output and condition, kW.
    pub fn rated_draw_kw(&self) -> f64 {
        /// Flow minus return of the standard rating, EN 14511, K.
        const SPREAD_K: f64 = 5.0;
        let (open_c, flow_c) = self.core.rated_condition;
        let cold = ColdSide {
            open_c,
            k_per_kw: 0.0,
            relative_humidity: None,
        };
        let heat_kw = self.rated_output_kw();
        let duty = Duty {
            heat_kw,
            flow_c,
            spread_k: SPREAD_K,
            hours: 1.0,
            at_full_output: true,
        };
        self.deliver(&cold, &duty).extracted_kwh
    }

    /// Size relative to the sheet.
    pub fn scale(&self) -> f64 {
        self.scale
    }

    /// Allowance from bench to home.
    pub fn field_factor(&self) -> f64 {
        self.field_factor
    }

    /// Where it may run; a greatest output in it is that of the sheet's own size.
    pub fn limits(&self) -> &Limits {
        &self.core.limits
    }

    /// What it takes when it does not heat.
    pub fn idle(&self) -> IdlePower {
        self.core.idle.scaled(self.scale)
    }

    /// Degradation coefficient Cc of EN 14825.
    pub fn cycling_coefficient(&self) -> f64 {
        self.core.cycling_coefficient
    }

    /// Greatest operating current, A, where the sheet states it; scaled with the machine.
    pub fn greatest_current_a(&self) -> Option<f64> {
        self.core.greatest_current_a.map(|a| a * self.scale)
    }

    /// What people should know before they have such a machine put in.
    pub fn cautions(&self) -> Vec<Finding> {
        let refrigerant = self.refrigerant();
        let facts = refrigerant.facts();
        let known_a = self
            .greatest_current_a()
            .filter(|_| !fault::on(Fault::MeanForSupply));
        let supply = match known_a {
            Some(current_a) => format!("it draws up to {current_a:.0} A"),
            None => "its greatest current is not on the sheet".to_owned(),
        };
        vec![
            Finding::new(
                Severity::Caution,
                format!("{refrigerant} is {}", facts.substance),
                facts.caution,
            ),
            Finding::new(
                Severity::Caution,
                supply,
                "the supply, with backup and immersion heaters added, is for an electrician and the network operator to check",
            ),
        ]
    }

    /// The map at the sheet's own size.
    pub fn map(&self) -> &Map {
        &self.core.map
    }

    /// The exact machine at the sheet's own size.
    pub fn machine(&self) -> &FittedMachine {
        &self.core.machine
    }

    /// Frost losses.
    pub fn frost(&self) -> &Frost {
        &self.core.frost
    }
}
