//! The studies as text.

use super::table::plain_table_within;
use super::text::{WIDTH, wrapped};
use crate::answer::lifetime::{LifetimeAnswer, LifetimeYear, SystemLifetime};
use crate::answer::study::{ChoiceStudy, SizesAnswer, StudyAnswer};
use crate::answer::{EmitterAnswer, SwingAnswer};
use crate::answer::{LeverAnswer, short};

/// The studies as text for a terminal of 80 columns or more.
pub fn study_text(answer: &StudyAnswer) -> String {
    let mut blocks: Vec<String> = answer
        .choices
        .iter()
        .map(|choice| choice_text(choice, &answer.currency))
        .collect();
    blocks.extend(
        answer
            .lifetime
            .as_ref()
            .map(|lifetime| lifetime_text(lifetime, &answer.currency)),
    );
    blocks.push(wrapped(LIMITS, "", ""));
    blocks.join("\n\n")
}

/// What the figures are and are not.
const LIMITS: &str = "One quantity is moved at a time and all else stays as it is; the price of a larger machine or larger \
emitters is not in the bill. Flow temperature, emitters, machine and loop are sized by a competent person, room by room, \
under local rules.";

fn choice_text(choice: &ChoiceStudy, currency: &str) -> String {
    let mut blocks = vec![format!(
        "{}: {:.0} {currency} a year, {:+.0} against today",
        choice.label, choice.cost, choice.saving
    )];
    let answered = |measure: &'static str| {
        choice
            .break_even
            .iter()
            .filter(move |lever| lever.measure == measure)
    };
    for (measure, heading) in [
        ("yearly cost", "What would make the bills equal"),
        (
            "lifetime cost",
            "What would make the cost over the years equal",
        ),
        ("carbon", "What would make the carbon equal"),
    ] {
        let levers: Vec<_> = answered(measure).collect();
        if !levers.is_empty() {
            blocks.push(format!("{heading}\n{}", levers_text(&levers)));
        }
    }
    if let Some(spf) = &choice.break_even_spf {
        blocks.push(wrapped(&spf.sentence, "", "  "));
    }
    blocks.extend(
        choice
            .emitters
            .as_ref()
            .map(|emitters| emitters_text(emitters)),
    );
    blocks.extend(choice.sizes.as_ref().map(sizes_text));
    if !choice.swings.is_empty() {
        blocks.push(swings_text(&choice.swings, currency));
    }
    blocks.join("\n\n")
}

/// Those that break even, a line each; the others in one sentence.
fn levers_text(levers: &[&LeverAnswer]) -> String {
    let mut lines = Vec::new();
    let mut stays: Vec<(&str, Vec<&LeverAnswer>)> = Vec::new();
    for lever in levers {
        for (condition, side) in lever.conditions.iter().zip(&lever.sides) {
            lines.push(wrapped(&format!("{condition}: {side}"), "  ", "      "));
        }
        if let Some(how) = &lever.stays {
            match stays.iter_mut().find(|(same, _)| same == how) {
                Some((_, same)) => same.push(lever),
                None => stays.push((how, vec![lever])),
            }
        }
    }
    for (how, levers) in stays {
        let ranges: Vec<_> = levers
            .iter()
            .map(|lever| {
                let [low, high] = lever.between.map(short);
                format!("{} from {low} to {high} {}", lever.lever, lever.unit)
                    .trim_end()
                    .to_owned()
            })
            .collect();
        lines.push(wrapped(
            &format!("It stays {how} with {}.", ranges.join(", ")),
            "  ",
            "    ",
        ));
    }
    lines.join("\n")
}

fn or_dash(value: Option<f64>, digits: usize) -> String {
    value.map_or_else(|| "–".to_owned(), |value| format!("{value:.digits$}"))
}

fn emitters_text(emitters: &[EmitterAnswer]) -> String {
    let rows = emitters.iter().map(|step| {
        vec![
            format!("{:.1} °C", step.flow_c),
            format!("{:.2}", step.times_today_output),
            or_dash(step.cost, 0),
            step.saving
                .map_or_else(|| "–".to_owned(), |saving| format!("{saving:+.0}")),
            or_dash(step.spf_h4, 2),
            or_dash(step.hours_short, 0),
        ]
    });
    let header = [
        "Design flow",
        "Times today's emitter output",
        "Cost of the year",
        "Saving",
        "SPF (H4)",
        "Hours short",
    ];
    let table = plain_table_within(WIDTH, header, rows);
    let beyond = emitters.iter().find(|step| !step.reached);
    let note = beyond.map_or_else(String::new, |step| {
        format!(
            "\n  – the machine does not reach {:.1} °C on the design day",
            step.flow_c
        )
    });
    format!("Cooler water and larger emitters\n{table}{note}")
}

fn sizes_text(sizes: &SizesAnswer) -> String {
    let rows = sizes.sizes.iter().map(|size| {
        vec![
            format!("{:.1} kW", size.rated_kw),
            format!("{:.0}", size.cost),
            or_dash(size.spf_h4, 2),
            format!("{:.1} %", size.backup_share * 100.0),
            format!("{:.0} %", size.coldest_night_cover * 100.0),
            format!("{:.0}", size.starts),
            format!("{:.2}", size.least_over_mild_load),
            format!("{:.0}", size.hours_short),
        ]
    });
    let header = [
        "Rated output",
        "Cost",
        "SPF",
        "Backup share",
        "Covers of design",
        "Starts",
        "Least of mild load",
        "Hours short",
    ];
    let table = plain_table_within(WIDTH, header, rows);
    format!(
        "Size of the machine, design heat load {:.1} kW\n{table}\n{}",
        sizes.design_load_kw,
        wrapped(&sizes.sentence, "  ", "  ")
    )
}

fn swings_text(swings: &[SwingAnswer], currency: &str) -> String {
    let lines = swings.iter().map(|swing| {
        let line = format!(
            "{:+.0} to {:+.0} {currency}: {} to {}",
            swing.saving_at_low, swing.saving_at_high, swing.low_words, swing.high_words
        );
        wrapped(&line, "  ", "      ")
    });
    let lines: Vec<_> = lines.collect();
    format!(
        "Yearly saving with one quantity at its low and its high\n{}",
        lines.join("\n")
    )
}

/// What the first and the last year of a loop that cools its ground cost to run.
fn own_years(system: &SystemLifetime) -> Option<String> {
    let bill = |year: &LifetimeYear| year.electricity + year.fuel;
    let (first, last) = (system.by_year.get(1)?, system.by_year.last()?);
    let sentence = format!(
        "{} costs each year its own, as its ground cools: {:.0} to run in year 1, {:.0} in year {}.",
        system.label,
        bill(first),
        bill(last),
        last.year,
    );
    Some(format!("\n{}", wrapped(&sentence, "", "  ")))
}

fn lifetime_text(lifetime: &LifetimeAnswer, currency: &str) -> String {
    let names = lifetime.systems.iter().map(|system| {
        if system.today {
            format!("{} (today)", system.label)
        } else {
            system.label.clone()
        }
    });
    let row = |name: &str, cells: Vec<String>| {
        let mut row = vec![name.to_owned()];
        row.extend(cells);
        row
    };
    let systems = &lifetime.systems;
    let all = |figure: fn(&SystemLifetime) -> String| systems.iter().map(figure).collect();
    let rows = vec![
        row(
            "Paid at the beginning",
            all(|s| format!("{:.0}", s.capital)),
        ),
        row("  grant", all(|s| format!("{:.0}", s.grant))),
        row(
            "Parts bought later",
            all(|s| {
                format!(
                    "{:.0}",
                    s.by_year
                        .iter()
                        .skip(1)
                        .map(|year| year.capital)
                        .sum::<f64>()
                )
            }),
        ),
        row("Present cost", all(|s| format!("{:.0}", s.present_cost))),
        row(
            "  against today",
            all(|s| {
                s.net_present_saving
                    .map_or_else(|| "–".to_owned(), |saving| format!("{saving:+.0}"))
            }),
        ),
        row(
            "Paid for itself",
            all(|s| s.payback.clone().unwrap_or_else(|| "–".to_owned())),
        ),
        row(
            "Cost of a kWh of heat",
            all(|s| or_dash(s.cost_per_kwh_heat, 3)),
        ),
        row(
            "Carbon, t CO2e",
            all(|s| format!("{:.1}", s.carbon_kg / 1000.0)),
        ),
    ];
    let table = plain_table_within(
        WIDTH,
        std::iter::once(currency.to_owned()).chain(names),
        rows,
    );
    let cooling = systems.iter().filter(|system| system.each_year_its_own);
    let cooling: String = cooling.filter_map(own_years).collect();
    format!(
        "{}\n{table}{cooling}",
        wrapped(&format!("Over the years: {}", lifetime.terms), "", "  ")
    )
}
