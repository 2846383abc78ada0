//! Bores and trenches of a brief.

use super::super::defaults;
use super::super::notes::Notes;
use super::circuit::{brine, flow_kg_per_s, given_flow, pipe, pump};
use super::layout::{bores, filling, legs_fit, trenches, u_tubes};
use super::{Ground, wave, whole_within};
use crate::bounds;
use crate::document::Check;
use crate::problem::{Finding, Severity};
use crate::source::{
    AnnualSwing, BuriedLoop, Filling, HOURS_PER_YEAR, Layout, LoopDesign, SOILS, Soil, SoilClass,
    total_depth_m, total_pipe_m,
};

/// Makes bores or trenches.
pub(super) fn buried(
    ground: &Ground<'_>,
    check: &mut Check,
    notes: &mut Notes,
    findings: &mut Vec<Finding>,
) -> Option<BuriedLoop> {
    let table = ground.table;
    let soil = soil(ground, check, notes);
    let surface = surface(ground, check, notes);
    let pipe = pipe(ground, check, notes);
    let layout = if table.bore.is_empty() {
        trenches(&table.trench, check, notes).map(|trenches| Layout::Trenches { trenches })
    } else {
        let filling = filling(ground, check, notes);
        let u_tubes = u_tubes(ground, check);
        let bores = bores(&table.bore, check, notes);
        bores
            .zip(filling)
            .zip(u_tubes)
            .map(|((bores, filling), u_tubes)| Layout::Bores {
                bores,
                filling,
                u_tubes,
            })
    };
    let ground_table = table.ground.as_deref();
    let none = None;
    let gradient_k_per_m = if table.bore.is_empty() {
        Some(0.0)
    } else {
        let leaf = ground_table.map_or(&none, |table| &table.gradient);
        notes
            .quantity(check, leaf, &bounds::GRADIENT_K_PER_M, &defaults::GRADIENT)
            .map(|g| g.k_per_m())
    };
    let recharge_kwh = match ground_table {
        Some(table) if table.recharge.is_some() => check
            .within(&table.recharge, &bounds::RECHARGE_KWH)
            .map(|energy| energy.kwh()),
        _ => Some(0.0),
    };
    let brine = brine(ground, check, notes, findings);
    let flow = given_flow(ground, check);
    let flow_kg_per_s = brine
        .zip(flow)
        .and_then(|(brine, flow)| flow_kg_per_s(&brine, flow, ground, notes));
    let pump = pump(ground, check, notes);
    let design = LoopDesign {
        layout: layout?,
        pipe: pipe?,
        soil: soil?,
        surface: surface?,
        gradient_k_per_m: gradient_k_per_m?,
        brine: brine?,
        flow_kg_per_s: flow_kg_per_s?,
        pump: pump?,
        recharge_kwh: recharge_kwh?,
    };
    legs_fit(&design, ground, check)?;
    let made = match design.build(ground.around.site?.outdoor_c.len()) {
        Ok(made) => made,
        Err(error) => {
            check.refuse(
                &table.span(),
                error.why,
                "a loop whose response can be computed",
                "check depths, distances and soil",
            );
            return None;
        }
    };
    tell(&made, ground, notes, findings);
    Some(made)
}

fn soil(ground: &Ground<'_>, check: &mut Check, notes: &mut Notes) -> Option<Soil> {
    let span = ground.table.span();
    let names = || {
        SOILS
            .iter()
            .map(|class| format!("\"{}\"", class.name))
            .collect::<Vec<_>>()
            .join(", ")
    };
    let Some(table) = &ground.table.ground else {
        check.missing(
            &span,
            "ground",
            &format!("a table [choice.ground] with soil = one of {}", names()),
        );
        return None;
    };
    if let Some(leaf) = &table.soil {
        if table.conductivity.is_some() || table.diffusivity.is_some() {
            check.refuse(
                &leaf.span(),
                "both soil and own conductivity or diffusivity",
                "one of them",
                "remove soil, or remove conductivity and diffusivity",
            );
            return None;
        }
        let name = check.value(&table.soil)?;
        let Some(class) = SoilClass::named(&name) else {
            check.refuse(
                &leaf.span(),
                format!("\"{name}\" is not in the table of soils"),
                names(),
                "write one of them, or give conductivity and diffusivity of your own",
            );
            return None;
        };
        let soil = class.soil();
        notes.add(
            format!("soil \"{}\"", class.name),
            format!(
                "{} W/m/K, {:.2e} m²/s",
                soil.conductivity_w_per_m_k, soil.diffusivity_m2_per_s
            ),
            class.from,
        );
        return Some(soil);
    }
    let conductivity = check.required(
        &table.conductivity,
        &table.span(),
        "ground.conductivity",
        "\"2 W/m/K\", or soil with a name of the table",
    );
    let diffusivity = check.required(
        &table.diffusivity,
        &table.span(),
        "ground.diffusivity",
        "\"9e-7 m²/s\"",
    );
    let conductivity =
        conductivity.and_then(|_| check.within(&table.conductivity, &bounds::GROUND_W_PER_M_K));
    let diffusivity =
        diffusivity.and_then(|_| check.within(&table.diffusivity, &bounds::DIFFUSIVITY_M2_PER_S));
    Some(Soil {
        conductivity_w_per_m_k: conductivity?.w_per_m_k(),
        diffusivity_m2_per_s: diffusivity?.m2_per_s(),
    })
}

fn surface(ground: &Ground<'_>, check: &mut Check, notes: &mut Notes) -> Option<AnnualSwing> {
    let wave = wave(ground, check);
    let table = ground.table.ground.as_deref();
    let given = |there: bool, value: Option<f64>, fitted: fn(&AnnualSwing) -> f64| {
        if there {
            value
        } else {
            wave.as_ref().map(fitted)
        }
    };
    let (mut mean, mut swing, mut day) = (None, None, None);
    if let Some(table) = table {
        mean = check
            .within(&table.surface_mean, &bounds::GROUND_C)
            .map(|t| t.c());
        swing = check
            .within(&table.surface_swing, &bounds::SURFACE_SWING_K)
            .map(|t| t.k());
        day = whole_within(check, &table.coldest_day, &bounds::DAY_OF_YEAR);
    }
    let has = |field: fn(&super::GroundTable) -> bool| table.is_some_and(field);
    let surface = AnnualSwing {
        mean_c: given(has(|t| t.surface_mean.is_some()), mean, |wave| wave.mean_c)?,
        amplitude_k: given(has(|t| t.surface_swing.is_some()), swing, |wave| {
            wave.amplitude_k
        })?,
        coldest_hour: given(
            has(|t| t.coldest_day.is_some()),
            day.map(|day| ((day - 1.0) * 24.0 + 12.0) % HOURS_PER_YEAR),
            |wave| wave.coldest_hour,
        )?,
    };
    if !has(|t| t.surface_mean.is_some()) {
        notes.add(
            "surface of the ground",
            format!("mean {:.1} °C", surface.mean_c),
            "mean of the weather file; under grass and snow ground is often 1 K warmer (common practice, no source)",
        );
    }
    Some(surface)
}

/// Notes what was computed and tells what is odd about the loop.
fn tell(made: &BuriedLoop, ground: &Ground<'_>, notes: &mut Notes, findings: &mut Vec<Finding>) {
    let label = ground
        .table
        .label
        .as_ref()
        .and_then(|leaf| leaf.value().ok())
        .map_or("", String::as_str);
    let design = &made.design;
    let (name, method) = match &design.layout {
        Layout::Bores {
            filling: Filling::Grout { .. },
            bores,
            ..
        } => (
            format!("{} bore(s), {:.0} m", bores.len(), total_depth_m(bores)),
            "first-order multipoles, legs exchanging heat",
        ),
        Layout::Bores { bores, .. } => (
            format!("{} bore(s), {:.0} m", bores.len(), total_depth_m(bores)),
            "as given",
        ),
        Layout::Trenches { trenches } => (
            format!(
                "{} trench(es), {:.0} m of pipe",
                trenches.len(),
                total_pipe_m(trenches)
            ),
            "pipe wall and film",
        ),
    };
    notes.add(
        format!("\"{label}\": {name}: resistance from wall to brine"),
        format!("{:.3} m K/W", made.resistance_m_k_per_w()),
        method,
    );
    let circuit = &made.circuit;
    if let Some(pressure_kpa) = circuit.pressure_kpa {
        notes.add(
            format!("\"{label}\": pump of the loop"),
            format!("{:.0} W against {pressure_kpa:.0} kPa, beyond the machine's own exchanger", circuit.pump_kw * 1e3),
            "Darcy and Weisbach, a quarter added for bends and manifolds; the machine's tested points hold the rest",
        );
    }
    if circuit.is_laminar() {
        findings.push(Finding::new(
            Severity::Warning,
            format!("the brine of \"{label}\" flows at a Reynolds number of {:.0}: laminar", circuit.in_pipe.reynolds),
            "laminar flow passes heat poorly, which is counted; a larger flow, fewer ways side by side or less antifreeze would help",
        ));
    }
}
