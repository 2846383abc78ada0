//! From the air's moisture to what frost costs.

use crate::air::{MoistAir, SEA_LEVEL_PA, saturation_pressure_over_water_pa};
use crate::answer::explain::{Lines, n};
use crate::heatpump::frost::{
    AIR_KJ_PER_KG_K, FULL_GROWTH_C, OUTPUT_OVER_COP, SUBLIMATION_KJ_PER_KG, SURFACE_SHARE,
};
use crate::study::TracedDuty;
use crate::year::MachineSystem;

/// From the air's moisture to what frost costs; nothing where there is no frost.
pub(super) fn frost(part: &mut Lines, system: &MachineSystem, duty: &TracedDuty) {
    let exact = &duty.exact;
    if exact.frost.cop <= 0.0 {
        return;
    }
    let source_c = exact.delivered.source_c;
    let outdoors = exact.humidity_ratio;
    let frost = system.machine.frost();
    let steps = frost.steps(source_c, exact.frost_evaporating_c, outdoors);
    let moist = duty
        .cold
        .relative_humidity
        .and_then(|share| MoistAir::at_station(source_c, share, SEA_LEVEL_PA).ok());
    let vapour_pa = moist.map(|air| air.vapour_pressure_pa());
    if let (Some(share), Some(vapour_pa), Ok(saturated_pa)) = (
        duty.cold.relative_humidity,
        vapour_pa,
        saturation_pressure_over_water_pa(source_c),
    ) {
        part.add(
            "vapour pressure outdoors",
            vapour_pa,
            "Pa",
            format!(
                "humidity × saturation over water at the air's temperature = {} × {}",
                n(share),
                n(saturated_pa)
            ),
        );
    }
    part.add(
        "humidity ratio outdoors",
        outdoors * 1000.0,
        "g/kg",
        vapour_pa.map_or_else(
            || "the standard rating air, wet bulb 1 K below dry bulb".to_owned(),
            |vapour_pa| {
                format!(
                    "621.945 × p / (101325 − p) = 621.945 × {} / (101325 − {})",
                    n(vapour_pa),
                    n(vapour_pa)
                )
            },
        ),
    );
    part.add(
        "surface of the coil",
        steps.surface_c,
        "°C",
        format!(
            "outdoor − {SURFACE_SHARE} × (outdoor − evaporating, correction included) = {} − {SURFACE_SHARE} × ({} − {})",
            n(source_c),
            n(source_c),
            n(exact.frost_evaporating_c)
        ),
    );
    part.add(
        "humidity ratio at the coil",
        steps.surface_humidity_ratio * 1000.0,
        "g/kg",
        "psychrometric table: saturated over ice at the surface",
    );
    part.add(
        "latent share",
        steps.latent_share,
        "",
        format!(
            "r Δw / (cp ΔT + r Δw) = {sublimation} × ({w} − {coil}) / ({AIR_KJ_PER_KG_K} × ({outdoor} − {surface}) + {sublimation} × ({w} − {coil}))",
            sublimation = SUBLIMATION_KJ_PER_KG / 1000.0,
            w = n(outdoors * 1000.0),
            coil = n(steps.surface_humidity_ratio * 1000.0),
            outdoor = n(source_c),
            surface = n(steps.surface_c),
        ),
    );
    let ramp = (steps.surface_c / FULL_GROWTH_C).clamp(0.0, 1.0);
    part.add(
        "share of the coil that frosts",
        steps.frosted_share,
        "",
        format!(
            "x² (3 − 2x), x = surface / {FULL_GROWTH_C} °C, at most 1 = {}^2 × (3 − 2 × {})",
            n(ramp),
            n(ramp)
        ),
    );
    part.add(
        "COP lost to frost",
        exact.frost.cop * 100.0,
        "%",
        format!(
            "fitted strength × frosting × latent share = 100 × {} × {} × {}",
            n(frost.strength),
            n(steps.frosted_share),
            n(steps.latent_share)
        ),
    );
    part.add(
        "output lost to frost",
        exact.frost.output * 100.0,
        "%",
        format!(
            "COP lost × 0.100 / 0.086 = {} × {}",
            n(exact.frost.cop * 100.0),
            n(OUTPUT_OVER_COP)
        ),
    );
}
