//! The estimate in one screen of text.

use std::fmt::Write as _;

use super::home::home_in_words;
use super::table::plain_table_within;
use super::weather_years::weather_years_text;
use crate::answer::odds::OddsSummary;
use crate::answer::{Estimate, LeverAnswer, SystemAnswer};
use crate::locale::Marks;

/// Width of everything that is printed, characters.
pub(super) const WIDTH: u16 = 80;
/// Systems beside each other, today's among them.
const SYSTEMS_ABREAST: usize = 4;

/// The estimate as text for a terminal of 80 columns or more, with the decimal mark of the place; `sources` says where each
/// assumption is from.
pub fn estimate_text(estimate: &Estimate, marks: &Marks, sources: bool) -> String {
    let mut text = heading(estimate, marks);
    let part_year = estimate.weather.part_year_days;
    let (today, choices): (Vec<_>, Vec<_>) =
        estimate.systems.iter().partition(|system| system.today);
    for group in choices.chunks(SYSTEMS_ABREAST - 1) {
        let systems: Vec<_> = today.iter().chain(group).copied().collect();
        // Writing to a String cannot fail.
        let _ = writeln!(text, "{}\n", table(&systems, &estimate.currency, marks));
        if let Some(years) = weather_years_text(&systems, &estimate.currency, marks) {
            let _ = writeln!(text, "{years}\n");
        }
    }
    for choice in &choices {
        let levers = estimate
            .break_even
            .get(&choice.label)
            .map_or(&[][..], Vec::as_slice);
        if part_year.is_some() {
            continue;
        }
        let _ = writeln!(
            text,
            "{}",
            wrapped(
                &in_words(choice, levers, &estimate.currency, marks),
                "",
                "  "
            )
        );
        if let Some(shifting) = &choice.shifting {
            let _ = writeln!(
                text,
                "{}",
                wrapped(&marks.localized(&shifting.sentence), "  ", "  ")
            );
        }
    }
    if let Some(days) = part_year {
        let said = format!(
            "{days} days are no year: no saving of a year, no payback and no chance can be told from them, and standing charges are those of these days."
        );
        let _ = writeln!(text, "{}", wrapped(&said, "", "  "));
    }
    for line in home_in_words(estimate) {
        let _ = writeln!(text, "{}", wrapped(&marks.localized(&line), "", "  "));
    }
    if let Some(odds) = &estimate.odds {
        let _ = writeln!(text, "\n{}", marks.localized(&odds_in_brief(odds)));
    }
    let _ = writeln!(text, "\n{}", assumptions(estimate, marks, sources));
    let _ = write!(text, "\n{}", wrapped(LIMITS, "", ""));
    text
}

/// How sure it is, a paragraph a choice.
fn odds_in_brief(odds: &OddsSummary) -> String {
    let heading = format!(
        "How sure: every unknown within its range, {} samples (winterledger odds draws more)",
        odds.samples
    );
    let mut lines = vec![wrapped(&heading, "", "  ")];
    for choice in &odds.choices {
        let said = format!(
            "{} Chance {} %. {}",
            choice.sentence,
            choice.chance_said,
            choice.depends_on.as_deref().unwrap_or_default()
        );
        lines.push(wrapped(said.trim_end(), "", "  "));
    }
    lines.push(wrapped(&odds.not_drawn, "", "  "));
    lines.join("\n")
}

/// What the figures are and are not.
const LIMITS: &str = "Estimates for a decision, not a design. Before anything is ordered: a room-by-room heat-loss \
calculation by a competent person; the electricity supply checked with the network operator and an electrician; \
refrigerant, gas and ground works by licensed people under local rules.";

fn heading(estimate: &Estimate, marks: &Marks) -> String {
    let home = &estimate.home;
    let weather = &estimate.weather;
    let label = home.label.as_deref().unwrap_or("The home");
    let repaired = match weather.repaired_hours {
        0 => String::new(),
        hours => format!(", {hours} h repaired"),
    };
    let period = match (weather.part_year_days, weather.years) {
        (Some(days), _) => format!("in these {days} days, no year"),
        (None, 0 | 1) => "in a year".to_owned(),
        (None, years) => format!("in a year, mean of {years} years"),
    };
    let loss = format!(
        "{:.0} W/K, {:.1} kW at {:.1} °C outdoors without gains",
        home.heat_loss_w_per_k, home.design_heat_load_kw, home.design_outdoor_c,
    );
    let hours = format!(
        "{} h, mean {:.1} °C, lowest {:.1} °C{repaired}",
        weather.hours, weather.mean_c, weather.min_c,
    );
    format!(
        "{label}: heating and hot water {period}\n\
         Home     {}\n\
         Weather  {}: {}\n\n",
        marks.localized(&loss),
        weather.file,
        marks.localized(&hours),
    )
}

/// A figure's name and how it is written for a system; nothing where there is no such figure.
type Line = (&'static str, fn(&SystemAnswer) -> Option<String>);

const LINES: &[Line] = &[
    ("Cost of the year", |s| Some(format!("{:.0}", s.cost))),
    ("  energy", |s| Some(format!("{:.0}", s.cost_energy))),
    ("  standing charges", |s| {
        Some(format!("{:.0}", s.cost_standing))
    }),
    ("  tax", |s| s.cost_tax.map(|tax| format!("{tax:.0}"))),
    ("Saving against today", |s| {
        s.saving.map(|saving| format!("{saving:+.0}"))
    }),
    ("Carbon, kg CO2e", |s| Some(format!("{:.0}", s.carbon_kg))),
    ("  refrigerant lost", |s| {
        s.refrigerant_kg.map(|kg| format!("{kg:.1}"))
    }),
    ("Heat to rooms, kWh", |s| {
        Some(format!("{:.0}", s.space_heat_kwh))
    }),
    ("  by another pattern", |s| {
        s.pattern_heat_kwh.map(|kwh| format!("{kwh:+.0}"))
    }),
    ("Heat to hot water, kWh", |s| {
        Some(format!("{:.0}", s.hot_water_kwh))
    }),
    ("  by the boiler", |s| {
        s.boiler_heat_kwh.map(|kwh| format!("{kwh:.0}"))
    }),
    ("Fuel, gross kWh", |s| {
        s.fuel_kwh.map(|kwh| format!("{kwh:.0}"))
    }),
    ("  efficiency, gross", |s| {
        s.seasonal_efficiency.map(|e| format!("{:.0} %", e * 100.0))
    }),
    ("Electricity, kWh", |s| {
        Some(format!("{:.0}", s.electricity_kwh))
    }),
    ("  backup, immersion", |s| {
        s.backup_kwh.map(|kwh| format!("{kwh:.0}"))
    }),
    ("  bought by the home", |s| {
        s.bought_kwh.map(|kwh| format!("{kwh:.0}"))
    }),
    ("  fed back", |s| {
        s.fed_back_kwh.map(|kwh| format!("{kwh:.0}"))
    }),
    ("  highest hour, kW", |s| {
        Some(format!("{:.1}", s.peak_electric_kw))
    }),
    ("SPF, machine (H1)", |s| {
        s.spf_h1.map(|spf| format!("{spf:.2}"))
    }),
    ("  all auxiliaries (H4)", |s| {
        s.spf_h4.map(|spf| format!("{spf:.2}"))
    }),
    ("Balance point", |s| s.balance_point.clone()),
    ("  with hot water", |s| {
        s.balance_point_with_hot_water_c
            .map(|c| format!("{c:.1} °C"))
    }),
    ("Year of the loop shown", |s| {
        s.ground.as_ref().map(|g| g.shown_year.to_string())
    }),
    ("  cost in its year 1", |s| {
        s.ground
            .as_ref()
            .map(|g| format!("{:.0}", g.first_year_cost))
    }),
    ("  SPF H4 in year 1", |s| {
        let spf = s.ground.as_ref()?.first_year_spf_h4?;
        Some(format!("{spf:.2}"))
    }),
    ("  lowest brine", |s| {
        let c = s.ground.as_ref()?.lowest_brine_c?;
        Some(format!("{c:.1} °C"))
    }),
    ("  lowest in year 1", |s| {
        let c = s.ground.as_ref()?.first_year_lowest_brine_c?;
        Some(format!("{c:.1} °C"))
    }),
    ("  machine stood, h", |s| {
        s.ground.as_ref().map(|g| format!("{:.0}", g.hours_stopped))
    }),
    ("  turned down, h", |s| {
        s.ground
            .as_ref()
            .map(|g| format!("{:.0}", g.hours_turned_down))
    }),
    ("Hours with backup", |s| {
        s.backup_kwh.map(|_| format!("{:.0}", s.hours_backup))
    }),
    ("Hours short of heat", |s| {
        Some(format!("{:.0}", s.hours_short))
    }),
    ("Hours of cool taps", |s| {
        (s.hours_water_short >= 0.5).then(|| format!("{:.0}", s.hours_water_short))
    }),
    ("Design load carried", |s| {
        Some(format!("{:.0} %", 100.0 + s.design.margin_percent))
    }),
    ("  limited by", |s| Some(s.design.limited_by.clone())),
    ("Coldest indoors", |s| {
        Some(format!("{:.1} °C", s.min_indoor_c))
    }),
];

fn table(systems: &[&SystemAnswer], currency: &str, marks: &Marks) -> String {
    let names = systems.iter().map(|system| {
        if system.today {
            format!("{} (today)", system.name())
        } else {
            system.name()
        }
    });
    let rows = LINES.iter().filter_map(|(name, figure)| {
        let figures: Vec<_> = systems.iter().map(|system| figure(system)).collect();
        let known = figures.iter().any(Option::is_some);
        let cells = figures
            .into_iter()
            .map(|figure| figure.map_or_else(|| "–".to_owned(), |f| marks.localized(&f)));
        known.then(|| std::iter::once((*name).to_owned()).chain(cells).collect())
    });
    plain_table_within(
        WIDTH,
        std::iter::once(currency.to_owned()).chain(names),
        rows,
    )
}

/// A choice's answer as an adviser could say it.
fn in_words(
    choice: &SystemAnswer,
    levers: &[LeverAnswer],
    currency: &str,
    marks: &Marks,
) -> String {
    let saving = choice.saving.unwrap_or(0.0);
    /// Below this share of today's cost a difference is told as none. A choice of ours.
    const ABOUT_THE_SAME: f64 = 0.02;
    let difference = if saving.abs() < ABOUT_THE_SAME * (choice.cost + saving).abs() {
        "about the same as today".to_owned()
    } else if saving > 0.0 {
        format!("about {saving:.0} {currency} a year less than today")
    } else {
        format!("about {:.0} {currency} a year more than today", -saving)
    };
    if let Some(cold) = &choice.leaves_cold {
        return format!(
            "{}: no, {}. Left as cold as that it would cost {difference}.",
            choice.label,
            marks.localized(cold)
        );
    }
    let conditions: Vec<_> = levers
        .iter()
        .flat_map(|lever| lever.conditions.iter().map(|said| marks.localized(said)))
        .collect();
    let break_even = match conditions.split_last() {
        None => "No price or flow temperature looked at makes it break even.".to_owned(),
        Some((only, [])) => format!("It breaks even with {only}."),
        Some((last, rest)) => format!("It breaks even with {}, or {last}.", rest.join(", ")),
    };
    format!("{}: {difference}. {break_even}", choice.label)
}

fn assumptions(estimate: &Estimate, marks: &Marks, sources: bool) -> String {
    if sources {
        let lines: Vec<_> = estimate
            .assumptions
            .iter()
            .map(|a| {
                wrapped(
                    &format!("{}: {} ({})", a.name, marks.localized(&a.value), a.from),
                    "  ",
                    "    ",
                )
            })
            .collect();
        return format!("Assumed\n{}", lines.join("\n"));
    }
    let parts: Vec<_> = estimate
        .assumptions
        .iter()
        .map(|a| format!("{} {}", a.name, marks.localized(&a.value)))
        .collect();
    let text = format!(
        "Assumed (sources with --assumptions): {}.",
        parts.join("; ")
    );
    wrapped(&text, "", "  ")
}

pub(super) fn wrapped(text: &str, first: &str, others: &str) -> String {
    // Named, so that the text is the same with and without the PDF's line breaker in the build.
    let options = textwrap::Options::new(usize::from(WIDTH))
        .wrap_algorithm(textwrap::WrapAlgorithm::FirstFit)
        .initial_indent(first)
        .subsequent_indent(others);
    textwrap::fill(text, options)
}
