//! The refrigerant's cycle: from the temperatures of source and water to pressures, states and the compressor's power.

use crate::answer::explain::{Lines, n};
use crate::heatpump::Operation;
use crate::heatpump::cycle::Cycle;
use crate::study::TracedDuty;
use crate::year::MachineSystem;

/// Source, evaporating and condensing temperature.
pub(super) fn temperatures(
    part: &mut Lines,
    system: &MachineSystem,
    duty: &TracedDuty,
    operation: &Operation,
    cycle: &Cycle,
) {
    let got = &duty.exact.delivered;
    let scale = system.machine.scale();
    let physical = &system.machine.machine().machine;
    if duty.cold.k_per_kw > 0.0 {
        part.add(
            "source with nothing drawn",
            duty.cold.open_c,
            "°C",
            "what the source offers after its history",
        );
        part.add(
            "source entering",
            got.source_c,
            "°C",
            if got.flags.turned_down {
                "the lowest the machine allows: it is turned down to what the source bears"
                    .to_owned()
            } else {
                format!(
                    "nothing drawn − K/kW of this hour × kW drawn = {} − {} × {}",
                    n(duty.cold.open_c),
                    n(duty.cold.k_per_kw),
                    n(got.extracted_kwh / got.running_hours)
                )
            },
        );
    } else {
        part.add(
            "source entering",
            got.source_c,
            "°C",
            "outdoor air, or water that its draw does not cool",
        );
    }
    part.add(
        "speed",
        operation.speed,
        "",
        "what gives that output; 1 = greatest at 7 °C source and 35 °C flow",
    );
    part.add(
        "evaporating",
        operation.evaporating_c,
        "°C",
        format!(
            "source − (superheat + K/kW × heat of the evaporator) = {} − ({} + {} × {})",
            n(operation.source_c),
            n(physical.evaporator.floor_k),
            n(physical.evaporator.k_per_kw / scale),
            n(cycle.evaporator_kw().unwrap_or(f64::NAN)),
        ),
    );
    part.add(
        "condensing",
        operation.condensing_c,
        "°C",
        format!(
            "flow + K/kW × heat of the condenser = {} + {} × {}",
            n(operation.flow_c),
            n(physical.condenser.k_per_kw / scale),
            n(cycle.condenser_kw().unwrap_or(f64::NAN)),
        ),
    );
}

/// From pressures to the compressor's power.
pub(super) fn compression(
    part: &mut Lines,
    system: &MachineSystem,
    duty: &TracedDuty,
    operation: &Operation,
    cycle: &Cycle,
) {
    let exact = &duty.exact;
    let fitted = system.machine.machine();
    let compressor = &fitted.machine.compressor;
    let scale = system.machine.scale();
    let [suction, discharge, liquid, _] = cycle.points().map(|(_, state)| *state);
    part.add(
        "pressure ratio",
        cycle.pressure_ratio(),
        "",
        format!(
            "condensing over evaporating pressure = {} / {}",
            n(discharge.pressure_kpa),
            n(suction.pressure_kpa)
        ),
    );
    part.add(
        "isentropic efficiency",
        operation.isentropic_efficiency,
        "",
        format!(
            "fitted peak × (1 − penalty × (speed − 0.65)²) / (1 + fall × ln²(ratio / best ratio)) = {} × (1 − {} × ({} − 0.65)^2) / (1 + {} × ln({} / {})^2)",
            n(compressor.peak_efficiency),
            n(compressor.speed_penalty),
            n(operation.speed),
            n(compressor.falloff),
            n(operation.pressure_ratio),
            n(compressor.peak_ratio),
        ),
    );
    part.add(
        "isentropic enthalpy",
        cycle.isentropic_discharge.enthalpy_kj_per_kg,
        "kJ/kg",
        format!(
            "property table at {:.1} kPa and {:.4} kJ/kgK, the entropy of suction",
            discharge.pressure_kpa, suction.entropy_kj_per_kg_k
        ),
    );
    part.add(
        "enthalpy of discharge",
        discharge.enthalpy_kj_per_kg,
        "kJ/kg",
        format!(
            "h suction + (h isentropic − h suction) / efficiency = {} + ({} − {}) / {}",
            n(suction.enthalpy_kj_per_kg),
            n(cycle.isentropic_discharge.enthalpy_kj_per_kg),
            n(suction.enthalpy_kj_per_kg),
            n(operation.isentropic_efficiency),
        ),
    );
    part.add(
        "volumetric efficiency",
        operation.volumetric_efficiency,
        "",
        format!(
            "1.026 − 0.0202 × pressure ratio = 1.026 − 0.0202 × {}",
            n(operation.pressure_ratio)
        ),
    );
    part.add(
        "refrigerant flow",
        operation.mass_flow_kg_per_s,
        "kg/s",
        format!(
            "swept m³/s × speed × suction density × volumetric efficiency = {} × {} × {} × {}",
            n(compressor.swept_m3_per_s * scale),
            n(operation.speed),
            n(suction.density_kg_per_m3),
            n(operation.volumetric_efficiency),
        ),
    );
    let flow = operation.mass_flow_kg_per_s;
    part.add(
        "heat of the evaporator",
        cycle.evaporator_kw().unwrap_or(f64::NAN),
        "kW",
        format!(
            "flow × (h suction − h liquid) = {} × ({} − {})",
            n(flow),
            n(suction.enthalpy_kj_per_kg),
            n(liquid.enthalpy_kj_per_kg)
        ),
    );
    part.add(
        "heat of the condenser",
        cycle.condenser_kw().unwrap_or(f64::NAN),
        "kW",
        format!(
            "flow × (h discharge − h liquid) = {} × ({} − {})",
            n(flow),
            n(discharge.enthalpy_kj_per_kg),
            n(liquid.enthalpy_kj_per_kg)
        ),
    );
    let work = cycle.work_kw().unwrap_or(f64::NAN);
    part.add(
        "work on the refrigerant",
        work,
        "kW",
        format!(
            "flow × (h discharge − h suction) = {} × ({} − {})",
            n(flow),
            n(discharge.enthalpy_kj_per_kg),
            n(suction.enthalpy_kj_per_kg)
        ),
    );
    let physical = work / exact.drive_efficiency;
    part.add(
        "compressor by physics",
        physical,
        "kW",
        format!(
            "work over drive efficiency = {} / {}",
            n(work),
            n(exact.drive_efficiency)
        ),
    );
    let side = operation.source_side_kw;
    part.add(
        "fan or brine pump, tested",
        side,
        "kW",
        "as in the tested points, by speed",
    );
    part.add(
        "compressor, frost-free",
        operation.compressor_kw,
        "kW",
        format!(
            "(physics + fan or pump) / correction from the sheet's points − fan or pump = ({} + {}) / {} − {}",
            n(physical),
            n(side),
            n(exact.correction),
            n(side)
        ),
    );
    part.add(
        "COP, frost-free, laboratory",
        operation.cop(),
        "",
        format!(
            "heat over compressor and fan or pump = {} / ({} + {})",
            n(operation.heat_kw),
            n(operation.compressor_kw),
            n(side)
        ),
    );
    part.add(
        "Carnot limit",
        cycle.cop_carnot(),
        "",
        format!(
            "condensing over condensing − evaporating, in kelvin = ({} + 273.15) / ({} − {})",
            n(operation.condensing_c),
            n(operation.condensing_c),
            n(operation.evaporating_c)
        ),
    );
}
