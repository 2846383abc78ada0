//! What a machine gives and what is asked of it.

use super::{Drawn, Material, drawn, in_front, not_met, of_the_year, some_of_them, year_rows};
use crate::chart::{self, ChartError};
use crate::source::Memory;
use crate::study::output_range_kw;
use crate::year::Row;

pub(super) fn cop_year(material: &Material<'_>) -> Result<Option<Drawn>, ChartError> {
    let contenders = &material.case.contenders;
    let machines = in_front(material.estimate)
        .into_iter()
        .filter(|&i| contenders[i].system.heating.machine().is_some());
    let systems: Vec<_> = machines
        .map(|i| {
            let answer = &material.estimate.systems[i];
            let rows = material.ledgers[i].rows.iter();
            chart::CopSystem {
                label: answer.label.clone(),
                hours: rows.filter_map(cop_of_hour).collect(),
                year: answer.spf_h2.map(|spf| ("SPF H2".to_owned(), spf)),
            }
        })
        .collect();
    if systems.iter().all(|system| system.hours.is_empty()) {
        return Ok(None);
    }
    let picture = chart::cop_year(&chart::CopYear { systems }, &material.locale.marks)?;
    let caption = "Heat to the rooms for each unit of electricity in every hour: the colder it is outside and the hotter the water \
must be, the less. The figure of the year (SPF H2) also holds hot water and the machine at rest.";
    let caption = format!("{caption}{}", some_of_them(material));
    Ok(Some(drawn("cop-year", caption, picture)))
}

/// Outdoor temperature, and heat over electricity of the machine for the rooms, of an hour in which it heated them. Hot water is
/// another duty at another temperature; both in one cloud would show neither.
fn cop_of_hour(row: &Row) -> Option<(f64, f64)> {
    row.space_cop.map(|cop| (row.outdoor_c, cop))
}

pub(super) fn demand_and_output(
    material: &Material<'_>,
    system: usize,
) -> Result<Option<Drawn>, ChartError> {
    let contender = &material.case.contenders[system];
    let Some(machine) = contender.system.heating.machine() else {
        return Ok(None);
    };
    let rows = year_rows(material, system);
    let hours: Vec<_> = rows
        .iter()
        .map(|row| (row.outdoor_c, row.space_wanted_kwh))
        .collect();
    let coldest = rows
        .iter()
        .map(|row| row.outdoor_c)
        .fold(f64::INFINITY, f64::min);
    let warmest = contender.indoor_c - 1.0;
    if hours.is_empty() || coldest >= warmest {
        return Ok(None);
    }
    let low = (coldest.min(contender.design_outdoor_c) - 2.0).floor() as i32;
    let ground = contender
        .aged
        .map_or_else(Memory::default, |aged| aged.memory);
    // Where the machine stands still there is no output to draw a line through.
    let (mut least, mut greatest) = (Vec::new(), Vec::new());
    for outdoor_c in (low..=warmest as i32).map(f64::from) {
        let (low_kw, high_kw) = output_range_kw(
            &contender.system,
            machine,
            contender.indoor_c,
            outdoor_c,
            &ground,
        );
        if high_kw > 0.0 {
            least.push((outdoor_c, low_kw));
            greatest.push((outdoor_c, high_kw));
        }
    }
    let fabric = &contender.system.home.fabric;
    let design_kw = fabric.design_load_kw(contender.indoor_c, contender.design_outdoor_c);
    let answer = &material.estimate.systems[system];
    let data = chart::DemandAndOutput {
        system: answer.label.clone(),
        hours,
        greatest_output: greatest,
        least_output: least,
        balance_point_c: answer.balance_point_c,
        design: Some((contender.design_outdoor_c, design_kw)),
    };
    let picture = chart::demand_and_output(&data, &material.locale.marks)?;
    let caption = format!(
        "Heat that the rooms ask for in each hour{}, against what the machine can give at the flow temperature that the \
emitters need there. Hot water is not in it.",
        of_the_year(material)
    );
    let name = format!("demand-and-output-{}", system + 1);
    Ok(Some(drawn(name, caption, picture)))
}

pub(super) fn load_duration(
    material: &Material<'_>,
    system: usize,
) -> Result<Option<Drawn>, ChartError> {
    let rows = year_rows(material, system);
    if rows.is_empty() {
        return Ok(None);
    }
    let column = |figure: fn(&Row) -> f64| rows.iter().map(figure).collect();
    let data = chart::LoadDuration {
        system: material.estimate.systems[system].label.clone(),
        machine_kw: column(|row| row.machine_space_kwh + row.machine_water_kwh),
        backup_kw: column(|row| row.backup_kwh + row.immersion_kwh),
        short_kw: column(not_met),
    };
    let picture = chart::load_duration(&data, &material.locale.marks)?;
    let caption = format!(
        "Rooms and hot water{}: every hour by its load, and who carries it.",
        of_the_year(material)
    );
    let name = format!("load-duration-{}", system + 1);
    Ok(Some(drawn(name, caption, picture)))
}
