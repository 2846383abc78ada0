//! The estimate in one screen of text.

use std::fmt::Write as _;

use comfy_table::{CellAlignment, ContentArrangement, Table, presets};

use crate::answer::{Estimate, SystemAnswer};

/// Columns of systems that fit beside the names of the figures on 80 columns.
const SYSTEMS_ABREAST: usize = 3;

/// Width of a column of figures.
const FIGURE_WIDTH: u16 = 15;

/// The estimate as text for a terminal of 80 columns or more.
pub fn estimate_text(estimate: &Estimate) -> String {
    let mut text = String::new();
    // Writing to a String cannot fail.
    let _ = writeln!(text, "{}", heading(estimate));
    let (today, choices): (Vec<_>, Vec<_>) = estimate.systems.iter().partition(|system| system.today);
    let abreast = SYSTEMS_ABREAST.saturating_sub(today.len()).max(1);
    for group in choices.chunks(abreast) {
        let systems: Vec<_> = today.iter().chain(group).copied().collect();
        let _ = writeln!(text, "{}\n", table(&systems, &estimate.currency));
    }
    let _ = writeln!(text, "What would change it");
    for answers in estimate.break_even.values() {
        for answer in answers {
            let _ = writeln!(text, "  {}", answer.sentence);
        }
    }
    let _ = writeln!(text, "\nWhat was assumed");
    for assumption in &estimate.assumptions {
        let _ = writeln!(text, "  {} = {} ({})", assumption.name, assumption.value, assumption.from);
    }
    let _ = writeln!(text, "\n{LIMITS}");
    text
}

/// What the figures are and are not.
const LIMITS: &str = "Estimates for a decision, not a design. Before anything is ordered: a room-by-room heat-loss
calculation by a competent person, the electricity supply checked with the network
operator and an electrician, refrigerant and gas work by licensed people, local rules
on noise, siting and ground works.";

fn heading(estimate: &Estimate) -> String {
    let home = &estimate.home;
    let weather = &estimate.weather;
    let label = home.label.as_deref().unwrap_or("The home");
    let repaired = if weather.repaired_hours > 0 {
        format!(", {} h repaired", weather.repaired_hours)
    } else {
        String::new()
    };
    let years = if weather.years > 1 { format!(", mean of {} years", weather.years) } else { String::new() };
    format!(
        "{label}: heating and hot water in a year{years}\n\
         Home     {:.0} W/K, {:.1} kW at {:.1} °C outdoors, gains not counted\n\
         Weather  {}: {} h, mean {:.1} °C, lowest {:.1} °C{repaired}\n",
        home.heat_loss_w_per_k,
        home.design_heat_load_kw,
        home.design_outdoor_c,
        weather.file,
        weather.hours,
        weather.mean_c,
        weather.min_c,
    )
}

/// A figure's name and how it is written for a system; nothing where there is no such figure.
type Line = (&'static str, fn(&SystemAnswer) -> Option<String>);

const LINES: &[Line] = &[
    ("Cost", |s| Some(format!("{:.2}", s.cost))),
    ("  energy", |s| Some(format!("{:.2}", s.cost_energy))),
    ("  standing charges", |s| Some(format!("{:.2}", s.cost_standing))),
    ("  tax", |s| Some(format!("{:.2}", s.cost_tax))),
    ("Saving against today", |s| s.saving.map(|saving| format!("{saving:+.2}"))),
    ("Carbon, kg CO2e", |s| Some(format!("{:.0}", s.carbon_kg))),
    ("Heat to rooms, kWh", |s| Some(format!("{:.0}", s.space_heat_kwh))),
    ("Heat to hot water, kWh", |s| Some(format!("{:.0}", s.hot_water_kwh))),
    ("Electricity, kWh", |s| Some(format!("{:.0}", s.electricity_kwh))),
    ("  backup and immersion", |s| s.backup_kwh.map(|kwh| format!("{kwh:.0}"))),
    ("Gas, gross kWh", |s| s.fuel_kwh.map(|kwh| format!("{kwh:.0}"))),
    ("SPF with auxiliaries, H4", |s| s.spf_h4.map(|spf| format!("{spf:.2}"))),
    ("  machine alone, H1", |s| s.spf_h1.map(|spf| format!("{spf:.2}"))),
    ("Efficiency, gross", |s| s.seasonal_efficiency.map(|e| format!("{:.0} %", e * 100.0))),
    ("Balance point", |s| s.balance_point.clone()),
    ("  with hot water", |s| s.balance_point_with_hot_water_c.map(|c| format!("{c:.1} °C"))),
    ("Year of the loop's life shown", |s| s.ground.as_ref().map(|g| g.shown_year.to_string())),
    ("  cost in its year 1", |s| s.ground.as_ref().map(|g| format!("{:.2}", g.first_year_cost))),
    ("  SPF H4 in its year 1", |s| s.ground.as_ref()?.first_year_spf_h4.map(|spf| format!("{spf:.2}"))),
    ("Lowest brine", |s| s.ground.as_ref()?.lowest_brine_c.map(|c| format!("{c:.1} °C"))),
    ("  in year 1", |s| s.ground.as_ref()?.first_year_lowest_brine_c.map(|c| format!("{c:.1} °C"))),
    ("Hours the machine stood", |s| s.ground.as_ref().map(|g| format!("{:.0}", g.hours_stopped))),
    ("Hours with backup", |s| s.backup_kwh.map(|_| format!("{:.0}", s.hours_backup))),
    ("Hours short of heat", |s| Some(format!("{:.0}", s.hours_short))),
    ("Coldest indoors", |s| Some(format!("{:.1} °C", s.min_indoor_c))),
    ("Highest hour, electric kW", |s| Some(format!("{:.1}", s.peak_electric_kw))),
];

fn table(systems: &[&SystemAnswer], currency: &str) -> Table {
    let mut table = Table::new();
    table.load_style(presets::UTF8_HORIZONTAL_ONLY);
    table.set_content_arrangement(ContentArrangement::Dynamic).set_width(80);
    let names = systems.iter().map(|system| {
        if system.today { format!("{} (today)", system.label) } else { system.label.clone() }
    });
    table.set_header(std::iter::once(format!("{currency} a year")).chain(names));
    for (name, figure) in LINES {
        let figures: Vec<_> = systems.iter().map(|system| figure(system)).collect();
        if figures.iter().all(Option::is_none) {
            continue;
        }
        let cells = figures.into_iter().map(|figure| figure.unwrap_or_else(|| "–".to_owned()));
        table.add_row(std::iter::once((*name).to_owned()).chain(cells));
    }
    for column in table.column_iter_mut().skip(1) {
        column.set_cell_alignment(CellAlignment::Right);
        column.set_constraint(comfy_table::ColumnConstraint::LowerBoundary(
            comfy_table::Width::Fixed(FIGURE_WIDTH),
        ));
    }
    table
}
