//! How hot a machine's compressor gets where its limits let it run hardest.

use super::correction::FittedMachine;
use super::cycle::{Cycle, CycleInputs, HOT_DISCHARGE_C};
use super::limits::{LEAST_DIFFERENCE_K, Limits};
use super::sheet::Sheet;
use crate::problem::{Finding, Place, Severity};
use crate::refrigerant::Equation;

/// A caution where a machine at the coldest source of its limits, at the highest flow permitted there and at its greatest speed, would
/// discharge hotter than oil and windings usually stand; nothing where it stays below, or where no cycle can be solved, which the fit
/// tells by itself.
pub(super) fn hot_discharge(
    sheet: &Sheet,
    machine: &FittedMachine,
    limits: &Limits,
) -> Option<Finding> {
    let source_c = limits.lowest_source_c;
    let flow_c = limits.highest_flow_at(source_c);
    let physical = &machine.machine;
    let operation = physical
        .at_greatest(source_c.min(flow_c - LEAST_DIFFERENCE_K), flow_c)
        .ok()?;
    let equation = Equation::new(sheet.refrigerant).ok()?;
    let inputs = CycleInputs {
        evaporating_c: operation.evaporating_c,
        condensing_c: operation.condensing_c,
        superheat_k: physical.table.superheat_k(),
        subcooling_k: physical.table.subcooling_k(),
        isentropic_efficiency: operation.isentropic_efficiency,
        mass_flow_kg_per_s: None,
    };
    let discharge_c = Cycle::solve(&equation, inputs)
        .ok()?
        .discharge
        .temperature_c;
    (discharge_c > HOT_DISCHARGE_C).then(|| {
        Finding::new(
            Severity::Warning,
            format!(
                "{} with {} at its coldest source of {source_c:.0} °C and a flow of {flow_c:.0} °C, pressure ratio {:.1}: discharge at \
                 {discharge_c:.0} °C",
                sheet.label, sheet.refrigerant, operation.pressure_ratio
            ),
            "more than oil and windings usually stand; a real machine injects liquid or stops there: ask its maker for the flow it reaches in \
             such cold, and give it under [limits]",
        )
        .at(&Place::file(sheet.file.clone()))
    })
}
