//! The answer of the `machine` command: a fitted machine, its points, and how it runs at a condition.

use serde::Serialize;

use crate::heatpump::{Exact, Fitted, Sheet, SpeedAt, rms};
use crate::problem::Finding;

/// A machine fitted to its sheet.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct MachineAnswer {
    /// What it is called.
    pub label: String,
    /// Whether it is an invented sheet that stands for a usual machine.
    pub typical: bool,
    /// What runs in its circuit.
    pub refrigerant: String,
    /// Greatest output at its rated condition, kW.
    pub rated_output_kw: f64,
    /// Every parameter.
    pub parameters: Vec<ParameterAnswer>,
    /// Every tested point.
    pub points: Vec<PointAnswer>,
    /// Root-mean-square error of COP by physics alone, percent.
    pub physics_rms_percent: f64,
    /// The same of points left out; absent for a sheet of one point.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub left_out_rms_percent: Option<f64>,
    /// Largest error of COP or output with correction, percent.
    pub largest_percent: f64,
    /// Share of the correction that was kept, 0 to 1.
    pub correction_kept: f64,
    /// Largest error of the map against the exact machine, percent of COP or output.
    pub map_error_percent: f64,
    /// Allowance from bench to home by which electricity in a home is divided.
    pub field_factor: f64,
    /// Greatest operating current, A; absent when the sheet does not state it.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub greatest_current_a: Option<f64>,
    /// What the sheet did not say and was assumed.
    pub assumptions: Vec<AssumedAnswer>,
    /// How it runs at a condition, when one was asked for.
    #[serde(flatten, skip_serializing_if = "Option::is_none")]
    pub at: Option<OperatingAnswer>,
    /// What was odd.
    pub findings: Vec<Finding>,
}

/// One parameter of the machine.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct ParameterAnswer {
    /// What it is.
    pub name: &'static str,
    /// Fitted value.
    pub value: f64,
    /// Its unit; empty for a plain number.
    pub unit: &'static str,
    /// What was believed before.
    pub prior: f64,
    /// Standard deviation of that belief, relative for a factor; absent for a value that was not fitted.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub prior_width: Option<f64>,
    /// Where the belief comes from.
    pub from: &'static str,
}

/// One tested point.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct PointAnswer {
    /// Entering source temperature.
    pub source_c: f64,
    /// Leaving water temperature.
    pub flow_c: f64,
    /// Speed it was tested at.
    pub at: &'static str,
    /// Tested output.
    pub heat_kw: f64,
    /// Tested COP.
    pub cop: f64,
    /// Output with correction.
    pub model_heat_kw: f64,
    /// COP with correction.
    pub model_cop: f64,
    /// Error of COP by physics alone.
    pub physics_percent: f64,
    /// Error of output by physics alone; absent where the speed is not known and the output therefore free.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub physics_heat_percent: Option<f64>,
    /// Error of COP predicted from the other points; absent for a single point.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub left_out_percent: Option<f64>,
}

/// Something the sheet did not say.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct AssumedAnswer {
    /// The field.
    pub name: &'static str,
    /// What was taken.
    pub value: String,
    /// Where that comes from.
    pub from: &'static str,
}

/// The machine at a condition, as on a laboratory's bench, solved exactly.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct OperatingAnswer {
    /// Entering source temperature.
    pub source_c: f64,
    /// Flow temperature while running.
    pub flow_c: f64,
    /// Mean heat, defrosting deducted.
    pub heat_kw: f64,
    /// Mean electricity, defrosting and starting up included.
    pub electric_kw: f64,
    /// Heat over electricity.
    pub cop: f64,
    /// The same in a home, with the allowance.
    pub cop_at_home: f64,
    /// Relative speed, 1 = greatest at the reference condition.
    pub speed: f64,
    /// Share of the time that it runs.
    pub running_fraction: f64,
    /// Evaporating temperature.
    pub evaporating_c: f64,
    /// Condensing temperature.
    pub condensing_c: f64,
    /// Condensing over evaporating pressure.
    pub pressure_ratio: f64,
    /// Isentropic work over work.
    pub isentropic_efficiency: f64,
    /// Share of output lost to frost.
    pub frost_output_share: f64,
    /// Share of COP lost to frost.
    pub frost_cop_share: f64,
}

impl MachineAnswer {
    /// Puts the answer together; `left_out` is empty or has one figure a point.
    pub fn new(
        sheet: &Sheet,
        fitted: &Fitted,
        left_out: &[f64],
        map_error_percent: f64,
        at: Option<OperatingAnswer>,
        findings: Vec<Finding>,
    ) -> Self {
        let machine = &fitted.heat_pump;
        let report = &fitted.report;
        Self {
            label: machine.label().to_owned(),
            typical: machine.is_typical(),
            refrigerant: machine.refrigerant().to_string(),
            rated_output_kw: machine.rated_output_kw(),
            parameters: report
                .parameters
                .iter()
                .map(|(prior, value)| ParameterAnswer {
                    name: prior.name,
                    value: *value,
                    unit: prior.unit,
                    prior: prior.centre,
                    prior_width: (prior.width > 0.0).then_some(prior.width),
                    from: prior.from,
                })
                .collect(),
            points: report
                .points
                .iter()
                .enumerate()
                .map(|(i, p)| PointAnswer {
                    source_c: p.point.source_c,
                    flow_c: p.point.flow_c,
                    at: p.point.at.word(),
                    heat_kw: p.point.heat_kw,
                    cop: p.point.cop,
                    model_heat_kw: p.model_heat_kw,
                    model_cop: p.model_cop,
                    physics_percent: p.physics_percent,
                    physics_heat_percent: matches!(p.point.at, SpeedAt::Maximum | SpeedAt::Least)
                        .then_some(p.physics_heat_percent),
                    left_out_percent: left_out.get(i).copied(),
                })
                .collect(),
            physics_rms_percent: report.physics_rms_percent,
            left_out_rms_percent: (!left_out.is_empty()).then(|| rms(left_out.iter().copied())),
            largest_percent: report.largest_percent,
            correction_kept: report.strength,
            map_error_percent,
            field_factor: machine.field_factor(),
            greatest_current_a: machine.greatest_current_a(),
            assumptions: sheet
                .assumed
                .iter()
                .map(|assumed| AssumedAnswer {
                    name: assumed.name,
                    value: assumed.value.clone(),
                    from: assumed.from,
                })
                .collect(),
            at,
            findings,
        }
    }
}

impl OperatingAnswer {
    /// From an hour solved exactly; nothing when the machine stood. `field_factor` is the allowance at home.
    pub fn new(exact: &Exact, field_factor: f64) -> Option<Self> {
        let operation = exact.operation?;
        let delivered = &exact.delivered;
        // The hour's components stand on the map; the exact machine replaces the electricity while running.
        let electric_kw = delivered.electricity_kwh() / (1.0 + exact.map_percent / 100.0);
        let cop = delivered.heat_kwh / electric_kw;
        Some(Self {
            source_c: delivered.source_c,
            flow_c: delivered.flow_c,
            heat_kw: delivered.heat_kwh,
            electric_kw,
            cop,
            cop_at_home: cop * field_factor,
            speed: operation.speed,
            running_fraction: exact.running_fraction,
            evaporating_c: operation.evaporating_c,
            condensing_c: operation.condensing_c,
            pressure_ratio: operation.pressure_ratio,
            isentropic_efficiency: operation.isentropic_efficiency,
            frost_output_share: exact.frost.output,
            frost_cop_share: exact.frost.cop,
        })
    }
}
