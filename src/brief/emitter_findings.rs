//! What there is to tell about emitters: warm floors, cold rooms, small pipes.

use super::envelope::Envelope;
use super::raw::EmitterTable;
use crate::bounds;
use crate::document::{Check, Leaf};
use crate::home::{
    EmitterKind, Emitters, Group, OCCUPIED_FLOOR_C, floor_surface_c, smallest_pipe_mm,
    water_flow_l_per_min,
};
use crate::problem::{Finding, Severity};
use crate::units::{Area, as_set};

/// A floor that would become too warm to stand on.
pub(super) fn floor_surface(
    groups: &[Group],
    table: &EmitterTable,
    floor_area: &Option<Leaf<Area>>,
    envelope: &Envelope,
    check: &mut Check,
) -> Option<Finding> {
    let share: f64 = groups
        .iter()
        .filter(|group| group.kind == EmitterKind::Underfloor)
        .map(|group| group.share)
        .sum();
    if share <= 0.0 {
        return None;
    }
    let leaf = if table.floor.is_some() {
        &table.floor
    } else {
        floor_area
    };
    let area_m2 = check.within(leaf, &bounds::FLOOR_AREA_M2)?.m2();
    let output = share * envelope.design_load_kw() * 1000.0 / area_m2;
    let surface_c = floor_surface_c(output, envelope.indoor_c);
    (surface_c > OCCUPIED_FLOOR_C).then(|| {
        Finding::new(
            Severity::Warning,
            format!(
                "the heated floor of {area_m2:.0} m² would have to give {output:.0} W/m² at the design point, with a surface of \
                 {surface_c:.1} °C"
            ),
            format!(
                "EN 1264 allows {OCCUPIED_FLOOR_C:.0} °C where people stay: add radiators or wall heating, or lower the heat loss"
            ),
        )
    })
}

/// Emitters of another load than the home's: told, since they set the flow.
pub(super) fn short_of_load(emitters: &Emitters, own: &Envelope) -> Option<Finding> {
    let (can_kw, load_kw) = (emitters.greatest_output_kw(), own.design_load_kw());
    (can_kw < load_kw * 0.999).then(|| {
        Finding::new(
            Severity::Caution,
            format!(
                "the emitters give {can_kw:.1} kW at their greatest permitted flow of {} °C, {:.1} kW less than the design \
                 heat load",
                as_set(emitters.greatest_flow_c()),
                load_kw - can_kw
            ),
            "rooms stay cold on the coldest days: larger emitters, a higher greatest_flow or less heat loss is needed",
        )
    })
}

/// The water flow a design asks for, and the smallest pipe that carries it.
pub(super) fn pipe(emitters: &Emitters) -> Option<Finding> {
    /// Pipes up to this are what most homes have behind a boiler, mm. Common practice, no source.
    const USUAL_MM: f64 = 22.0;
    let spread_k = emitters.design_spread_k();
    let flow = water_flow_l_per_min(emitters.design_load_kw(), spread_k);
    let needs = match smallest_pipe_mm(flow) {
        Some((outside_mm, _)) if outside_mm <= USUAL_MM => return None,
        Some((outside_mm, _)) => format!("a main pipe of {outside_mm:.0} mm copper"),
        None => "pipes larger than 35 mm copper".to_owned(),
    };
    Some(Finding::new(
        Severity::Caution,
        format!(
            "the emitters need {flow:.1} L of water a minute for {:.1} kW at a spread of {spread_k:.0} K: {needs} to stay quiet",
            emitters.design_load_kw()
        ),
        "smaller pipes starve the machine of water; have the pipes checked, or choose a larger spread",
    ))
}
