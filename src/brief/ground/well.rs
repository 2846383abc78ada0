//! A well or surface water of a brief.

use chrono_tz::Tz;

use super::super::defaults;
use super::super::notes::Notes;
use super::{Ground, WellTable, whole_within};
use crate::bounds;
use crate::document::{Check, Section};
use crate::problem::{Finding, Severity};
use crate::series::{Layout, Series, Stamp, WithinHour, read_text};
use crate::source::{AnnualSwing, HOURS_PER_YEAR, WaterSource, undisturbed_c};

/// Water that leaves the machine below this can freeze in its exchanger, °C. Common practice, no source.
const LEAST_LEAVING_C: f64 = 2.0;

/// Makes a well.
pub(super) fn well(
    table: &Section<WellTable>,
    ground: &Ground<'_>,
    check: &mut Check,
    notes: &mut Notes,
    findings: &mut Vec<Finding>,
) -> Option<WaterSource> {
    let water_c = water(table, ground, check);
    let approach = notes.quantity(
        check,
        &table.approach,
        &bounds::APPROACH_K,
        &defaults::APPROACH,
    );
    check.required(&table.flow, &table.span(), "well.flow", "\"0.5 L/s\"");
    let flow = check.within(&table.flow, &bounds::SOURCE_FLOW_L_PER_S);
    let pump_kw = flow.and_then(|flow| pump_kw(table, flow.l_per_s(), check, notes));
    let made = WaterSource {
        water_c: water_c?.into(),
        approach_k: approach?.k(),
        flow_l_per_s: flow?.l_per_s(),
        pump_kw: pump_kw?,
    };
    let draw_kw = ground.machine?.rated_draw_kw();
    let coldest =
        (0..made.water_c.len()).min_by(|a, b| made.water_c[*a].total_cmp(&made.water_c[*b]))?;
    let leaving_c = made.leaving_c(coldest, draw_kw);
    if leaving_c < LEAST_LEAVING_C {
        findings.push(Finding::new(
            Severity::Caution,
            format!("the water leaves at {leaving_c:.1} °C when it is coldest and the machine draws its rated {draw_kw:.1} kW"),
            format!("below {LEAST_LEAVING_C} °C it can freeze and burst the exchanger; a larger flow or a brine circuit between is needed"),
        ));
    }
    Some(made)
}

/// The water hour by hour: constant, a yearly wave, or from a file.
fn water(table: &Section<WellTable>, ground: &Ground<'_>, check: &mut Check) -> Option<Vec<f64>> {
    if let Some(leaf) = &table.file {
        if table.temperature.is_some() || table.swing.is_some() {
            check.refuse(
                &leaf.span(),
                "both file and temperature or swing",
                "one of them",
                "remove file, or the others",
            );
            return None;
        }
        return from_file(table, ground, check);
    }
    check.required(
        &table.temperature,
        &table.span(),
        "well.temperature",
        "\"10 °C\", or file with hourly temperatures",
    );
    let mean = check.within(&table.temperature, &bounds::SOURCE_WATER_C);
    let swing_k = match &table.swing {
        None => Some(0.0),
        Some(_) => check
            .within(&table.swing, &bounds::SURFACE_SWING_K)
            .map(|swing| swing.k()),
    };
    let day = if table.swing.is_some() {
        check.required(&table.coldest_day, &table.span(), "well.coldest_day", "45");
        whole_within(check, &table.coldest_day, &bounds::DAY_OF_YEAR)
    } else {
        Some(1.0)
    };
    let hours = ground.around.site?.outdoor_c.len();
    let wave = AnnualSwing {
        mean_c: mean?.c(),
        amplitude_k: swing_k?,
        coldest_hour: ((day? - 1.0) * 24.0 + 12.0) % HOURS_PER_YEAR,
    };
    if let (Some(leaf), true) = (&table.swing, wave.mean_c - wave.amplitude_k < 0.0) {
        check.refuse(
            &leaf.span(),
            format!("water down to {:.1} °C", wave.mean_c - wave.amplitude_k),
            "water that does not freeze",
            "a smaller swing, or hourly temperatures in a file",
        );
        return None;
    }
    // A wave at depth 0 is the wave itself, whatever the diffusivity.
    Some(
        (0..hours)
            .map(|hour| undisturbed_c(&wave, 0.0, 1e-6, hour as f64))
            .collect(),
    )
}

fn from_file(table: &WellTable, ground: &Ground<'_>, check: &mut Check) -> Option<Vec<f64>> {
    let path = check.value(&table.file)?;
    let folder = ground.around.folder;
    let layout = Layout {
        column: check.value(&table.column),
        stamp: Stamp::Beginning,
        zone: Tz::UTC,
        within_hour: WithinHour::Mean,
    };
    let text = check.take(folder.text(&path))?;
    let series = check.take(read_text(&folder.name(&path), &text, &layout))?;
    let any_year = check.value(&table.every_year).unwrap_or(false);
    let site = ground.around.site?;
    let at = |series: &Series, civil| {
        if any_year {
            series.at_any_year(civil)
        } else {
            series.at(civil)
        }
    };
    let column: Vec<_> = site.civil.iter().map(|civil| at(&series, civil)).collect();
    let missing = column.iter().filter(|value| value.is_none()).count();
    let span = table
        .file
        .as_ref()
        .map(crate::document::Leaf::span)
        .unwrap_or_default();
    if missing > 0 {
        check.refuse(
            &span,
            format!(
                "no water temperature for {missing} of {} hours",
                column.len()
            ),
            format!(
                "a temperature for every hour of the weather; the file covers {}",
                series.covers()
            ),
            "give the same year as the weather, or set every_year = true to use one year for any",
        );
        return None;
    }
    let column: Vec<f64> = column.into_iter().flatten().collect();
    if let Some(wrong) = column
        .iter()
        .find(|value| !bounds::SOURCE_WATER_C.holds(**value))
    {
        check.refuse(
            &span,
            format!("{wrong} °C in {path}"),
            bounds::SOURCE_WATER_C.words(),
            "check the column and its unit",
        );
        return None;
    }
    Some(column)
}

fn pump_kw(
    table: &Section<WellTable>,
    flow_l_per_s: f64,
    check: &mut Check,
    notes: &mut Notes,
) -> Option<f64> {
    if let Some(leaf) = &table.pump {
        if table.head.is_some() || table.pump_efficiency.is_some() {
            check.refuse(
                &leaf.span(),
                "both pump and head or pump_efficiency",
                "one of them",
                "remove pump, or the others",
            );
            return None;
        }
        return check
            .within(&table.pump, &bounds::AUXILIARY_KW)
            .map(|power| power.kw());
    }
    check.required(
        &table.head,
        &table.span(),
        "well.head",
        "\"15 m\", friction included; or pump with its power",
    );
    let head = check.within(&table.head, &bounds::HEAD_M)?;
    let efficiency = notes.quantity(
        check,
        &table.pump_efficiency,
        &bounds::PUMP_EFFICIENCY,
        &defaults::WELL_PUMP_EFFICIENCY,
    )?;
    let pump_kw = WaterSource::pump_kw(flow_l_per_s, head.m(), efficiency.fraction());
    notes.add(
        "well pump",
        format!("{:.0} W while the machine runs", pump_kw * 1e3),
        "weight of the water times the head over the efficiency",
    );
    Some(pump_kw)
}
