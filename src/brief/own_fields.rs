//! Fields that belong to one kind of system only.

use super::raw::{SystemKind, SystemTable};
use crate::document::{Check, Leaf, Section};

/// A field's name and its place, where the field is given.
type Given = (&'static str, Option<std::ops::Range<usize>>);

fn given<T>(name: &'static str, leaf: &Option<Leaf<T>>) -> Given {
    (name, leaf.as_ref().map(Leaf::span))
}

/// Refuses fields that belong to another kind of system: they would be ignored without a word.
pub(super) fn only_its_own_fields(table: &SystemTable, kind: SystemKind, check: &mut Check) {
    let is_machine = kind.is_heat_pump();
    let is_boiler = kind.burns().is_some();
    let groups: [(bool, &str, Vec<Given>); 6] = [
        (
            is_machine,
            "a heat pump",
            vec![
                given("machine", &table.machine),
                given("typical_machine", &table.typical_machine),
                given("rated_output", &table.rated_output),
                given("rated_cop", &table.rated_cop),
                given("rated_at", &table.rated_at),
                given("refrigerant", &table.refrigerant),
                given("backup", &table.backup),
                given("immersion", &table.immersion),
                given("circulation_pump", &table.circulation_pump),
                given("refrigerant_charge", &table.refrigerant_charge),
                given("leakage", &table.leakage),
                given("leakage_at_end", &table.leakage_at_end),
                ("boiler", table.boiler.as_ref().map(Section::span)),
            ],
        ),
        (
            !is_boiler,
            "a heat pump or an electric heater",
            vec![("shifting", table.shifting.as_ref().map(Section::span))],
        ),
        (
            is_boiler || table.boiler.is_some(),
            "a boiler",
            vec![given("fuel", &table.fuel)],
        ),
        (
            kind == SystemKind::GroundSource,
            "a ground source",
            vec![
                given("loop_depth", &table.loop_depth),
                given("loop_resistance", &table.loop_resistance),
                given("soil_diffusivity", &table.soil_diffusivity),
                given("shown_year", &table.shown_year),
                ("ground", table.ground.as_ref().map(Section::span)),
                ("brine", table.brine.as_ref().map(Section::span)),
                ("pipe", table.pipe.as_ref().map(Section::span)),
                ("borehole", table.borehole.as_ref().map(Section::span)),
                ("bore", table.bore.first().map(Section::span)),
                ("trench", table.trench.first().map(Section::span)),
                ("well", table.well.as_ref().map(Section::span)),
            ],
        ),
        (
            is_boiler,
            "a boiler",
            vec![
                given("efficiency", &table.efficiency),
                given("fixed_flow", &table.fixed_flow),
            ],
        ),
        (
            !is_machine,
            "a boiler or an electric heater",
            vec![given("output", &table.output)],
        ),
    ];
    for (belongs, owner, fields) in groups {
        for (name, span) in fields {
            if let (false, Some(span)) = (belongs, span) {
                check.refuse(
                    &span,
                    format!("{name} in a table of kind \"{}\"", kind.word()),
                    format!("{name} belongs to {owner}"),
                    "remove it or change kind",
                );
            }
        }
    }
}
