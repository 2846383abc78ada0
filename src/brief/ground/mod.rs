//! From the tables of a ground source to a source.

mod buried;
mod circuit;
mod layout;
mod tables;
mod well;

pub(super) use tables::{
    BoreTable, BoreholeTable, BrineTable, GroundTable, PipeTable, TrenchTable, WellTable,
};

use super::defaults;
use super::notes::Notes;
use super::raw::SystemTable;
use super::system::Surroundings;
use crate::bounds::{self, Bound};
use crate::document::{Check, Leaf, Section};
use crate::heatpump::HeatPump;
use crate::problem::Finding;
use crate::source::{AnnualSwing, GroundLoop, Source, undisturbed_c};

/// What is known when a source is made.
pub(super) struct Ground<'a> {
    pub table: &'a Section<SystemTable>,
    pub around: &'a Surroundings<'a>,
    /// The machine, where it could be made.
    pub machine: Option<&'a HeatPump>,
}

/// Makes the source of a ground-source table: the quick loop, bores, trenches or a well, whichever it describes.
pub(super) fn ground(
    ground: &Ground<'_>,
    check: &mut Check,
    notes: &mut Notes,
    findings: &mut Vec<Finding>,
) -> Option<Source> {
    let table = ground.table;
    let ways = [
        ("loop_resistance", table.loop_resistance.is_some()),
        ("[[choice.bore]]", !table.bore.is_empty()),
        ("[[choice.trench]]", !table.trench.is_empty()),
        ("[choice.well]", table.well.is_some()),
    ];
    let given: Vec<_> = ways
        .iter()
        .filter(|(_, given)| *given)
        .map(|(name, _)| *name)
        .collect();
    if given.len() != 1 {
        let found = if given.is_empty() {
            "no loop".to_owned()
        } else {
            given.join(" and ")
        };
        check.refuse(
            &table.span(),
            format!("{found} in a ground source"),
            "exactly one of loop_resistance, [[choice.bore]], [[choice.trench]] and [choice.well]",
            "describe the loop in one of these ways; loop_resistance = \"1.6 K/kW\" is the quick one",
        );
        return None;
    }
    only_where_they_count(table, check);
    if table.loop_resistance.is_some() {
        quick(ground, check, notes).map(Source::Ground)
    } else if let Some(well) = &table.well {
        well::well(well, ground, check, notes, findings).map(Source::Water)
    } else {
        buried::buried(ground, check, notes, findings).map(|made| Source::Buried(Box::new(made)))
    }
}

/// Refuses tables that the described loop would ignore without a word.
fn only_where_they_count(table: &SystemTable, check: &mut Check) {
    let buried = !table.bore.is_empty() || !table.trench.is_empty();
    let quick = table.loop_resistance.is_some();
    let tables = [
        (
            "ground",
            table.ground.as_ref().map(Section::span),
            buried,
            "bores or trenches",
        ),
        (
            "brine",
            table.brine.as_ref().map(Section::span),
            buried,
            "bores or trenches",
        ),
        (
            "pipe",
            table.pipe.as_ref().map(Section::span),
            buried,
            "bores or trenches",
        ),
        (
            "shown_year",
            table.shown_year.as_ref().map(Leaf::span),
            buried,
            "bores or trenches",
        ),
        (
            "borehole",
            table.borehole.as_ref().map(Section::span),
            !table.bore.is_empty(),
            "bores",
        ),
        (
            "loop_depth",
            table.loop_depth.as_ref().map(Leaf::span),
            quick,
            "loop_resistance",
        ),
        (
            "soil_diffusivity",
            table.soil_diffusivity.as_ref().map(Leaf::span),
            quick,
            "loop_resistance",
        ),
    ];
    for (name, span, counts, owner) in tables {
        if let (Some(span), false) = (span, counts) {
            check.refuse(
                &span,
                format!("{name} in a ground source without {owner}"),
                format!("{name} belongs to {owner}"),
                "remove it or describe the loop that it belongs to",
            );
        }
    }
}

/// The annual wave of the weather; refuses weather that is shorter than a year.
fn wave(ground: &Ground<'_>, check: &mut Check) -> Option<AnnualSwing> {
    let outdoor_c = &ground.around.site?.outdoor_c;
    let wave = AnnualSwing::fit(outdoor_c);
    if wave.is_none() {
        check.refuse(
            &ground.table.span(),
            format!("{} hours of weather for a ground source", outdoor_c.len()),
            "a whole year, from which the ground's temperature follows",
            "give a weather file of at least 8760 hours",
        );
    }
    wave
}

/// A loop behind one steady resistance.
fn quick(ground: &Ground<'_>, check: &mut Check, notes: &mut Notes) -> Option<GroundLoop> {
    let table = ground.table;
    let depth = notes.quantity(
        check,
        &table.loop_depth,
        &bounds::TRENCH_DEPTH_M,
        &defaults::LOOP_DEPTH,
    );
    let diffusivity = notes.quantity(
        check,
        &table.soil_diffusivity,
        &bounds::DIFFUSIVITY_M2_PER_S,
        &defaults::SOIL_DIFFUSIVITY,
    );
    let resistance = check.within(&table.loop_resistance, &bounds::LOOP_K_PER_KW);
    let wave = wave(ground, check)?;
    let hours = ground.around.site?.outdoor_c.len();
    let (depth_m, diffusivity) = (depth?.m(), diffusivity?.m2_per_s());
    let undisturbed_c = (0..hours)
        .map(|hour| undisturbed_c(&wave, depth_m, diffusivity, hour as f64))
        .collect();
    notes.add(
        "undisturbed ground",
        format!(
            "mean {:.1} °C, swing {:.1} K at the surface",
            wave.mean_c, wave.amplitude_k
        ),
        "annual wave of the weather file carried down by Kusuda and Achenbach 1965",
    );
    notes.add(
        "loop",
        "one steady resistance",
        "the quick option: it over-chills cold nights, under-chills the season and does not age; describe bores or trenches for that",
    );
    Some(GroundLoop {
        undisturbed_c,
        resistance_k_per_kw: resistance?.k_per_kw(),
    })
}

/// A whole number within a bound, when it is there and right.
pub(super) fn whole_within(
    check: &mut Check,
    leaf: &Option<Leaf<i64>>,
    bound: &Bound,
) -> Option<f64> {
    let value = check.value(leaf)? as f64;
    if let (false, Some(leaf)) = (bound.holds(value), leaf) {
        check.refuse(
            &leaf.span(),
            format!("{value}"),
            bound.words(),
            "check the number",
        );
        return None;
    }
    Some(value)
}
