//! The estimate in one screen of text.

use std::fmt::Write as _;

use super::home::home_in_words;
use super::table::plain_table_within;
use super::told::Told;
use super::weather_years::weather_years_text;
use crate::answer::odds::OddsSummary;
use crate::answer::{Estimate, LeverAnswer, SystemAnswer};
use crate::locale::Locale;

/// Width of everything that is printed, characters.
pub(super) const WIDTH: u16 = 80;
/// Systems beside each other, today's among them.
const SYSTEMS_ABREAST: usize = 4;

/// The estimate as text for a terminal of 80 columns or more, in the form of the place; `sources` lists what was assumed, with where
/// each is from.
pub fn estimate_text(estimate: &Estimate, locale: &Locale, sources: bool) -> String {
    let told = Told::new(locale, &estimate.currency);
    let mut text = heading(estimate, &told);
    let part_year = estimate.weather.part_year_days;
    let (today, choices): (Vec<_>, Vec<_>) =
        estimate.systems.iter().partition(|system| system.today);
    for group in choices.chunks(SYSTEMS_ABREAST - 1) {
        let systems: Vec<_> = today.iter().chain(group).copied().collect();
        // Writing to a String cannot fail.
        let _ = writeln!(text, "{}\n", table(&systems, &told));
        if let Some(years) = weather_years_text(&systems, &told) {
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
            wrapped(&in_words(choice, levers, &told), "", "  ")
        );
        if let Some(shifting) = &choice.shifting {
            let _ = writeln!(
                text,
                "{}",
                wrapped(&told.said(&shifting.sentence), "  ", "  ")
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
        let _ = writeln!(text, "{}", wrapped(&told.said(&line), "", "  "));
    }
    if let Some(odds) = &estimate.odds {
        let _ = writeln!(text, "\n{}", odds_in_brief(odds, &told));
    }
    let _ = writeln!(text, "\n{}", assumptions(estimate, &told, sources));
    let _ = write!(text, "\n{}", wrapped(LIMITS, "", ""));
    text
}

/// How sure it is, a sentence a choice; what it depends on, once for all of which the same is said.
fn odds_in_brief(odds: &OddsSummary, told: &Told<'_>) -> String {
    let heading = format!(
        "How sure: every unknown within its range, {} samples (winterledger odds draws more)",
        told.n(odds.samples as f64, 0)
    );
    let mut lines = vec![wrapped(&heading, "", "  ")];
    let mut depends: Vec<(&str, Vec<&str>)> = Vec::new();
    for choice in &odds.choices {
        let said = format!("{} Chance {}\u{a0}%.", choice.sentence, choice.chance_said);
        lines.push(wrapped(&told.said(&said), "", "  "));
        if let Some(words) = &choice.depends_on {
            match depends.iter_mut().find(|(same, _)| same == words) {
                Some((_, labels)) => labels.push(&choice.label),
                None => depends.push((words, vec![&choice.label])),
            }
        }
    }
    let alone = depends.len() == 1;
    for (words, labels) in depends {
        let of = if alone {
            String::new()
        } else {
            format!("{}: ", labels.join("; "))
        };
        let words = match words.strip_prefix("It ") {
            Some(rest) if !alone => format!("it {rest}"),
            _ => words.to_owned(),
        };
        lines.push(wrapped(&format!("{of}{words}"), "", "  "));
    }
    lines.push(wrapped(&odds.not_drawn, "", "  "));
    lines.join("\n")
}

/// What the figures are and are not.
const LIMITS: &str = "Estimates for a decision, not a design. Before anything is ordered: a room-by-room heat-loss \
calculation by a competent person; the electricity supply checked with the network operator and an electrician; \
refrigerant, gas and ground works by licensed people under local rules.";

fn heading(estimate: &Estimate, told: &Told<'_>) -> String {
    let home = &estimate.home;
    let weather = &estimate.weather;
    let label = home.label.as_deref().unwrap_or("The home");
    let repaired = match weather.repaired_hours {
        0 => String::new(),
        hours => format!(", {} h repaired", told.n(hours as f64, 0)),
    };
    let period = match (weather.part_year_days, weather.years) {
        (Some(days), _) => format!("in these {days} days, no year"),
        (None, 0 | 1) => "in a year".to_owned(),
        (None, years) => format!("in a year, mean of {years} years"),
    };
    format!(
        "{label}: heating and hot water {period}\n\
         Home     {} W/K, {} kW at {} °C outdoors without gains\n\
         Weather  {}: {} h, mean {} °C, lowest {} °C{repaired}\n\n",
        told.n(home.heat_loss_w_per_k, 0),
        told.n(home.design_heat_load_kw, 1),
        told.n(home.design_outdoor_c, 1),
        weather.file,
        told.n(weather.hours as f64, 0),
        told.n(weather.mean_c, 1),
        told.n(weather.min_c, 1),
    )
}

/// A figure's name and how it is written for a system; nothing where there is no such figure.
type Line = (&'static str, fn(&SystemAnswer, &Told<'_>) -> Option<String>);

const LINES: &[Line] = &[
    ("Cost of the year", |s, t| Some(t.money(s.cost))),
    ("  energy", |s, t| Some(t.money(s.cost_energy))),
    ("  standing charges", |s, t| Some(t.money(s.cost_standing))),
    ("  tax", |s, t| s.cost_tax.map(|tax| t.money(tax))),
    ("Saving against today", |s, t| {
        s.saving.map(|saving| t.signed_money(saving))
    }),
    ("Carbon, kg CO2e", |s, t| Some(t.n(s.carbon_kg, 0))),
    ("  refrigerant lost", |s, t| {
        s.refrigerant_kg.map(|kg| t.n(kg, 1))
    }),
    ("Heat to rooms, kWh", |s, t| Some(t.n(s.space_heat_kwh, 0))),
    ("  by another pattern", |s, t| {
        s.pattern_heat_kwh.map(|kwh| t.signed(kwh))
    }),
    ("Heat to hot water, kWh", |s, t| {
        Some(t.n(s.hot_water_kwh, 0))
    }),
    ("  by the boiler", |s, t| {
        s.boiler_heat_kwh.map(|kwh| t.n(kwh, 0))
    }),
    ("Fuel, gross kWh", |s, t| s.fuel_kwh.map(|kwh| t.n(kwh, 0))),
    ("  efficiency, gross", |s, t| {
        s.seasonal_efficiency
            .map(|e| format!("{} %", t.n(e * 100.0, 0)))
    }),
    ("Electricity, kWh", |s, t| Some(t.n(s.electricity_kwh, 0))),
    ("  backup, immersion", |s, t| {
        s.backup_kwh.map(|kwh| t.n(kwh, 0))
    }),
    ("  bought by the home", |s, t| {
        s.bought_kwh.map(|kwh| t.n(kwh, 0))
    }),
    ("  fed back", |s, t| s.fed_back_kwh.map(|kwh| t.n(kwh, 0))),
    ("  highest hour, kW", |s, t| {
        Some(t.n(s.peak_electric_kw, 1))
    }),
    ("SPF, machine (H1)", |s, t| s.spf_h1.map(|spf| t.n(spf, 2))),
    ("  all auxiliaries (H4)", |s, t| {
        s.spf_h4.map(|spf| t.n(spf, 2))
    }),
    ("Balance point", |s, t| {
        s.balance_point.as_ref().map(|said| t.said(said))
    }),
    ("  with hot water", |s, t| {
        s.balance_point_with_hot_water_c
            .map(|c| format!("{} °C", t.n(c, 1)))
    }),
    ("Year of the loop shown", |s, _| {
        s.ground.as_ref().map(|g| g.shown_year.to_string())
    }),
    ("  cost in its year 1", |s, t| {
        s.ground.as_ref().map(|g| t.money(g.first_year_cost))
    }),
    ("  SPF H4 in year 1", |s, t| {
        let spf = s.ground.as_ref()?.first_year_spf_h4?;
        Some(t.n(spf, 2))
    }),
    ("  lowest brine", |s, t| {
        let c = s.ground.as_ref()?.lowest_brine_c?;
        Some(format!("{} °C", t.n(c, 1)))
    }),
    ("  lowest in year 1", |s, t| {
        let c = s.ground.as_ref()?.first_year_lowest_brine_c?;
        Some(format!("{} °C", t.n(c, 1)))
    }),
    ("  machine stood, h", |s, t| {
        s.ground.as_ref().map(|g| t.n(g.hours_stopped, 0))
    }),
    ("  turned down, h", |s, t| {
        s.ground.as_ref().map(|g| t.n(g.hours_turned_down, 0))
    }),
    ("Hours with backup", |s, t| {
        s.backup_kwh.map(|_| t.n(s.hours_backup, 0))
    }),
    ("Hours short of heat", |s, t| Some(t.n(s.hours_short, 0))),
    ("Hours of cool taps", |s, t| {
        (s.hours_water_short >= 0.5).then(|| t.n(s.hours_water_short, 0))
    }),
    ("Design load carried", |s, t| {
        Some(format!("{} %", t.n(100.0 + s.design.margin_percent, 0)))
    }),
    ("  limited by", |s, _| Some(s.design.limited_by.clone())),
    ("Coldest indoors", |s, t| {
        Some(format!("{} °C", t.n(s.min_indoor_c, 1)))
    }),
];

fn table(systems: &[&SystemAnswer], told: &Told<'_>) -> String {
    let names = systems.iter().map(|system| {
        if system.today {
            format!("{} (today)", system.name())
        } else {
            system.name()
        }
    });
    let rows = LINES.iter().filter_map(|(name, figure)| {
        let figures: Vec<_> = systems.iter().map(|system| figure(system, told)).collect();
        let known = figures.iter().any(Option::is_some);
        let cells = figures
            .into_iter()
            .map(|figure| figure.unwrap_or_else(|| "–".to_owned()));
        known.then(|| std::iter::once((*name).to_owned()).chain(cells).collect())
    });
    plain_table_within(
        WIDTH,
        std::iter::once(told.currency().to_owned()).chain(names),
        rows,
    )
}

/// A choice's answer as an adviser could say it.
fn in_words(choice: &SystemAnswer, levers: &[LeverAnswer], told: &Told<'_>) -> String {
    let saving = choice.saving.unwrap_or(0.0);
    /// Below this share of today's cost a difference is told as none. A choice of ours.
    const ABOUT_THE_SAME: f64 = 0.02;
    let difference = if saving.abs() < ABOUT_THE_SAME * (choice.cost + saving).abs() {
        "about the same as today".to_owned()
    } else if saving > 0.0 {
        format!("about {} a year less than today", told.money(saving))
    } else {
        format!("about {} a year more than today", told.money(-saving))
    };
    if let Some(cold) = &choice.leaves_cold {
        return format!(
            "{}: no, {}. Left as cold as that it would cost {difference}.",
            choice.label,
            told.said(cold)
        );
    }
    let conditions: Vec<_> = levers
        .iter()
        .flat_map(|lever| lever.conditions.iter().map(|said| told.said(said)))
        .collect();
    let break_even = match conditions.split_last() {
        None => "No price or flow temperature looked at makes it break even.".to_owned(),
        Some((only, [])) => format!("It breaks even with {only}."),
        Some((last, rest)) => format!("It breaks even with {}, or {last}.", rest.join(", ")),
    };
    format!("{}: {difference}. {break_even}", choice.label)
}

fn assumptions(estimate: &Estimate, told: &Told<'_>, sources: bool) -> String {
    if sources {
        let lines: Vec<_> = estimate
            .assumptions
            .iter()
            .map(|a| {
                let line = format!("{}: {} ({})", a.name, told.said(&a.value), a.from);
                wrapped(&line, "  ", "    ")
            })
            .collect();
        return format!("Assumed\n{}", lines.join("\n"));
    }
    let line = format!(
        "Assumed: {} values that the brief leaves open; --assumptions lists them with their sources.",
        estimate.assumptions.len()
    );
    wrapped(&line, "", "  ")
}

pub(super) fn wrapped(text: &str, first: &str, others: &str) -> String {
    // Named, so that the text is the same with and without the PDF's line breaker in the build.
    let options = textwrap::Options::new(usize::from(WIDTH))
        .wrap_algorithm(textwrap::WrapAlgorithm::FirstFit)
        .initial_indent(first)
        .subsequent_indent(others);
    textwrap::fill(text, options)
}
