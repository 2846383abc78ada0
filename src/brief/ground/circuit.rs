//! What flows in a loop, through which pipe, and its pump.

use super::super::defaults;
use super::super::notes::Notes;
use super::Ground;
use crate::bounds;
use crate::document::{Check, Section};
use crate::problem::{Finding, Severity};
use crate::source::{Antifreeze, BRINE_C, Brine, Pipe, Pump};
use crate::units::{TemperatureDifference, parse};

pub(super) fn pipe(ground: &Ground<'_>, check: &mut Check, notes: &mut Notes) -> Option<Pipe> {
    let table = ground.table.pipe.as_deref();
    let (no_length, no_conductivity) = (None, None);
    let outside = notes.quantity(
        check,
        table.map_or(&no_length, |t| &t.outside),
        &bounds::PIPE_OUTSIDE_M,
        &defaults::PIPE_OUTSIDE,
    );
    let wall = notes.quantity(
        check,
        table.map_or(&no_length, |t| &t.wall),
        &bounds::PIPE_WALL_M,
        &defaults::PIPE_WALL,
    );
    let conductivity = notes.quantity(
        check,
        table.map_or(&no_conductivity, |t| &t.conductivity),
        &bounds::PIPE_W_PER_M_K,
        &defaults::PIPE_CONDUCTIVITY,
    );
    let pipe = Pipe {
        outside_m: outside?.m(),
        wall_m: wall?.m(),
        conductivity_w_per_m_k: conductivity?.w_per_m_k(),
    };
    // A bore of a fifth of the pipe is no pipe any more.
    if pipe.inside_m() < 0.2 * pipe.outside_m {
        let span = ground
            .table
            .pipe
            .as_ref()
            .map_or_else(|| ground.table.span(), Section::span);
        check.refuse(
            &span,
            format!(
                "a wall of {:.1} mm in a pipe of {:.0} mm",
                pipe.wall_m * 1e3,
                pipe.outside_m * 1e3
            ),
            "a wall below two fifths of the diameter",
            "check outside and wall of the pipe",
        );
        return None;
    }
    Some(pipe)
}

pub(super) fn brine(
    ground: &Ground<'_>,
    check: &mut Check,
    notes: &mut Notes,
    findings: &mut Vec<Finding>,
) -> Option<Brine> {
    let table = ground.table.brine.as_deref();
    let (no_word, no_share) = (None, None);
    let (fluid,) = notes.word(
        check,
        table.map_or(&no_word, |t| &t.fluid),
        &defaults::ANTIFREEZE,
    )?;
    let share = if fluid == Antifreeze::Water {
        0.0
    } else {
        notes
            .quantity(
                check,
                table.map_or(&no_share, |t| &t.share),
                &bounds::ANTIFREEZE_SHARE,
                &defaults::ANTIFREEZE_SHARE,
            )?
            .fraction()
    };
    let brine = Brine::new(fluid, share)?;
    let lowest_c = ground.machine?.limits().lowest_source_c;
    let freezing_c = brine.freezing_c();
    if freezing_c > lowest_c {
        let span = ground
            .table
            .brine
            .as_ref()
            .map_or_else(|| ground.table.span(), Section::span);
        check.refuse(
            &span,
            format!("{} freezes at {freezing_c:.1} °C", brine.words()),
            format!("a fluid that flows down to {lowest_c:.1} °C, where the machine still runs"),
            "raise the share of antifreeze, or the machine's lowest_source",
        );
        return None;
    }
    // The brine leaves the machine colder than it entered.
    let spread_k = parse::<TemperatureDifference>(defaults::BRINE_SPREAD.value)
        .ok()?
        .k();
    if freezing_c > lowest_c - spread_k {
        findings.push(Finding::new(
            Severity::Warning,
            format!(
                "{} freezes at {freezing_c:.1} °C, and at the machine's lowest source of {lowest_c:.1} °C it leaves about {spread_k:.0} K colder than that",
                brine.words()
            ),
            "ice could close the machine's exchanger; more antifreeze is needed if the brine gets there",
        ));
    }
    Some(brine)
}

/// Flow that the brief gives, L/s: nothing when it is wrong, nothing inside when it is not given.
#[allow(
    clippy::option_option,
    reason = "outer: could not be read; inner: not given"
)]
pub(super) fn given_flow(ground: &Ground<'_>, check: &mut Check) -> Option<Option<f64>> {
    match ground.table.brine.as_deref() {
        Some(table) if table.flow.is_some() => check
            .within(&table.flow, &bounds::SOURCE_FLOW_L_PER_S)
            .map(|flow| Some(flow.l_per_s())),
        _ => Some(None),
    }
}

/// Flow of the brine, kg/s: as given (L/s), or such that it cools by the spread of the rating point at the machine's rated output.
pub(super) fn flow_kg_per_s(
    brine: &Brine,
    given_l_per_s: Option<f64>,
    ground: &Ground<'_>,
    notes: &mut Notes,
) -> Option<f64> {
    let properties = brine.at(BRINE_C);
    if let Some(flow) = given_l_per_s {
        return Some(flow * properties.density_kg_per_m3 / 1000.0);
    }
    let spread_k = parse::<TemperatureDifference>(defaults::BRINE_SPREAD.value)
        .ok()?
        .k();
    let flow = ground.machine?.rated_draw_kw() / (properties.heat_capacity_kj_per_kg_k * spread_k);
    notes.add(
        defaults::BRINE_SPREAD.field,
        format!("{:.2} L/s", flow / properties.density_kg_per_m3 * 1000.0),
        format!("default: {}", defaults::BRINE_SPREAD.from),
    );
    Some(flow)
}

pub(super) fn pump(ground: &Ground<'_>, check: &mut Check, notes: &mut Notes) -> Option<Pump> {
    let table = ground.table.brine.as_deref();
    if let Some(table) = table
        && let Some(leaf) = &table.pump
    {
        if table.pump_efficiency.is_some() {
            check.refuse(
                &leaf.span(),
                "both pump and pump_efficiency",
                "one of them: the power holds the efficiency",
                "remove pump_efficiency",
            );
            return None;
        }
        return check
            .within(&table.pump, &bounds::AUXILIARY_KW)
            .map(|power| Pump::Power(power.kw()));
    }
    let none = None;
    let efficiency = notes.quantity(
        check,
        table.map_or(&none, |t| &t.pump_efficiency),
        &bounds::PUMP_EFFICIENCY,
        &defaults::PUMP_EFFICIENCY,
    )?;
    Some(Pump::Efficiency(efficiency.fraction()))
}
