//! Where a system's energy comes from and goes to.

use super::{Drawn, Material, drawn, heater_name};
use crate::chart::{self, ChartError};

pub(super) fn energy_flow(
    material: &Material<'_>,
    system: usize,
) -> Result<Option<Drawn>, ChartError> {
    use chart::FlowKind::{Backup, Electricity, Fuel, HotWater, Loss, Rooms, Surroundings};
    let contender = &material.case.contenders[system];
    let sums = material.outcomes[system].mean_sums();
    let flow = |kind, label: &str, kwh: f64| chart::Flow {
        kind,
        label: label.to_owned(),
        // Sums of thousands of hours: what lies below nothing by rounding is nothing.
        kwh: kwh.max(0.0),
    };
    let is_machine = contender.system.heating.machine().is_some();
    let source = match contender.kind {
        "air-source" => "outdoor air",
        "ground-source" => "ground",
        _ => "surroundings",
    };
    let from = if is_machine {
        vec![
            flow(Surroundings, source, sums.extracted_kwh),
            flow(
                Electricity,
                "electricity, machine",
                sums.machine_electricity_kwh() + sums.source_side_kwh,
            ),
            flow(
                Electricity,
                "electricity, heating pump",
                sums.circulation_kwh + sums.heater_electricity_kwh,
            ),
            flow(
                Backup,
                "electricity, backup",
                sums.backup_kwh + sums.immersion_kwh,
            ),
            flow(Fuel, "fuel", sums.fuel_kwh),
        ]
    } else {
        vec![
            flow(Fuel, "fuel, gross", sums.fuel_kwh),
            flow(Electricity, "electricity", sums.electricity_kwh()),
        ]
    };
    let energy_in: f64 = from.iter().map(|flow| flow.kwh).sum();
    if energy_in <= 0.0 {
        return Ok(None);
    }
    let store_kwh = (sums.water_heat_kwh() - sums.water_drawn_kwh).max(0.0);
    let useful_kwh = sums.space_heat_kwh() + sums.water_drawn_kwh;
    let to = vec![
        flow(Rooms, "rooms", sums.space_heat_kwh()),
        flow(HotWater, "hot water at the taps", sums.water_drawn_kwh),
        flow(Loss, "hot-water store", store_kwh),
        flow(Loss, "lost on the way", energy_in - useful_kwh - store_kwh),
    ];
    let label = material.estimate.systems[system].label.clone();
    let data = chart::EnergyFlow {
        system: label,
        heater: heater_name(&contender.system.heating).to_owned(),
        from,
        to,
    };
    let picture = chart::energy_flow(&data, &material.locale.marks)?;
    let caption = if is_machine {
        "Lost on the way: the drive, the fan or brine pump, defrosting, the machine at rest, and the allowance from laboratory to home."
    } else {
        "Lost on the way: what leaves through the flue and the casing, and what pump and fan use."
    };
    Ok(Some(drawn(
        format!("energy-flow-{}", system + 1),
        caption,
        picture,
    )))
}
