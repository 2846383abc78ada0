//! The studies as text.

use super::table::plain_table_within;
use super::text::{WIDTH, wrapped};
use super::told::Told;
use crate::answer::lifetime::{LifetimeAnswer, LifetimeYear, SystemLifetime};
use crate::answer::study::{ChoiceStudy, SizesAnswer, StudyAnswer};
use crate::answer::{EmitterAnswer, LeverAnswer, SwingAnswer, short};
use crate::locale::Locale;

/// The studies as text for a terminal of 80 columns or more, in the form of the place.
pub fn study_text(answer: &StudyAnswer, locale: &Locale) -> String {
    let told = &Told::new(locale, &answer.currency);
    let mut blocks: Vec<String> = answer
        .choices
        .iter()
        .map(|choice| choice_text(choice, told))
        .collect();
    blocks.extend(
        answer
            .lifetime
            .as_ref()
            .map(|lifetime| lifetime_text(lifetime, told)),
    );
    blocks.push(wrapped(LIMITS, "", ""));
    blocks.join("\n\n")
}

/// What the figures are and are not.
const LIMITS: &str = "One quantity is moved at a time and all else stays as it is; the price of a larger machine or larger \
emitters is not in the bill. Flow temperature, emitters, machine and loop are sized by a competent person, room by room, \
under local rules.";

fn choice_text(choice: &ChoiceStudy, told: &Told<'_>) -> String {
    let mut blocks = vec![format!(
        "{}: {} a year, {} against today",
        choice.label,
        told.money(choice.cost),
        told.signed_money(choice.saving)
    )];
    if let Some(cold) = &choice.leaves_cold {
        let line = format!("No, {cold}: cheaper is of no use here. More heat comes first.");
        blocks.push(wrapped(&line, "", "  "));
    }
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
            blocks.push(format!("{heading}\n{}", levers_text(&levers, told)));
        }
    }
    if let Some(spf) = &choice.break_even_spf {
        blocks.push(wrapped(&told.said(&spf.sentence), "", "  "));
    }
    blocks.extend(
        choice
            .emitters
            .as_ref()
            .map(|emitters| emitters_text(emitters, told)),
    );
    blocks.extend(choice.sizes.as_ref().map(|sizes| sizes_text(sizes, told)));
    if !choice.swings.is_empty() {
        blocks.push(swings_text(&choice.swings, told));
    }
    blocks.join("\n\n")
}

/// Those that break even, a line each; the others in one sentence.
fn levers_text(levers: &[&LeverAnswer], told: &Told<'_>) -> String {
    let mut lines = Vec::new();
    let mut stays: Vec<(&str, Vec<&LeverAnswer>)> = Vec::new();
    for lever in levers {
        for (condition, side) in lever.conditions.iter().zip(&lever.sides) {
            let line = told.said(&format!("{condition}: {side}"));
            lines.push(wrapped(&line, "  ", "      "));
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
            &told.said(&format!("It stays {how} with {}.", ranges.join(", "))),
            "  ",
            "    ",
        ));
    }
    lines.join("\n")
}

fn or_dash(value: Option<f64>, write: impl Fn(f64) -> String) -> String {
    value.map_or_else(|| "–".to_owned(), write)
}

fn emitters_text(emitters: &[EmitterAnswer], told: &Told<'_>) -> String {
    let rows = emitters.iter().map(|step| {
        vec![
            format!("{} °C", told.n(step.flow_c, 1)),
            told.n(step.times_today_output, 2),
            or_dash(step.cost, |v| told.money(v)),
            or_dash(step.saving, |v| told.signed_money(v)),
            or_dash(step.spf_h4, |v| told.n(v, 2)),
            or_dash(step.hours_short, |v| told.n(v, 0)),
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
            "\n  – the machine does not reach {} °C on the design day",
            told.n(step.flow_c, 1)
        )
    });
    format!("Cooler water and larger emitters\n{table}{note}")
}

fn sizes_text(sizes: &SizesAnswer, told: &Told<'_>) -> String {
    let rows = sizes.sizes.iter().map(|size| {
        vec![
            format!("{} kW", told.n(size.rated_kw, 1)),
            told.money(size.cost),
            or_dash(size.spf_h4, |v| told.n(v, 2)),
            format!("{} %", told.n(size.backup_share * 100.0, 1)),
            format!("{} %", told.n(size.coldest_night_cover * 100.0, 0)),
            told.n(size.starts, 0),
            told.n(size.least_over_mild_load, 2),
            told.n(size.hours_short, 0),
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
        "Size of the machine, design heat load {} kW\n{table}\n{}",
        told.n(sizes.design_load_kw, 1),
        wrapped(&told.said(&sizes.sentence), "  ", "  ")
    )
}

fn swings_text(swings: &[SwingAnswer], told: &Told<'_>) -> String {
    let lines = swings.iter().map(|swing| {
        let line = format!(
            "{} to {}: {} to {}",
            told.signed_money(swing.saving_at_low),
            told.signed_money(swing.saving_at_high),
            told.said(&swing.low_words),
            told.said(&swing.high_words)
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
fn own_years(system: &SystemLifetime, told: &Told<'_>) -> Option<String> {
    let bill = |year: &LifetimeYear| year.electricity + year.fuel;
    let (first, last) = (system.by_year.get(1)?, system.by_year.last()?);
    let sentence = format!(
        "{} costs each year its own, as its ground cools: {} to run in year 1, {} in year {}.",
        system.label,
        told.money(bill(first)),
        told.money(bill(last)),
        last.year,
    );
    Some(format!("\n{}", wrapped(&sentence, "", "  ")))
}

fn lifetime_text(lifetime: &LifetimeAnswer, told: &Told<'_>) -> String {
    let names = lifetime.systems.iter().map(|system| {
        if system.today {
            format!("{} (today)", system.name())
        } else {
            system.name()
        }
    });
    let row = |name: &str, cells: Vec<String>| {
        let mut row = vec![name.to_owned()];
        row.extend(cells);
        row
    };
    let systems = &lifetime.systems;
    let all = |figure: &dyn Fn(&SystemLifetime) -> String| systems.iter().map(figure).collect();
    let rows = vec![
        row("Paid at the beginning", all(&|s| told.money(s.capital))),
        row("  grant", all(&|s| told.money(s.grant))),
        row(
            "Parts bought later",
            all(&|s| told.money(s.by_year.iter().skip(1).map(|year| year.capital).sum())),
        ),
        row("Present cost", all(&|s| told.money(s.present_cost))),
        row(
            "  against today",
            all(&|s| or_dash(s.net_present_saving, |v| told.signed_money(v))),
        ),
        row(
            "Paid for itself",
            all(&|s| {
                s.payback
                    .as_ref()
                    .map_or("–".to_owned(), |said| told.said(said))
            }),
        ),
        row(
            "Cost of a kWh of heat",
            all(&|s| or_dash(s.cost_per_kwh_heat, |v| told.money_to(v, 3))),
        ),
        row("Carbon, t CO2e", all(&|s| told.n(s.carbon_kg / 1000.0, 1))),
    ];
    let table = plain_table_within(
        WIDTH,
        std::iter::once(told.currency().to_owned()).chain(names),
        rows,
    );
    let cooling = systems.iter().filter(|system| system.each_year_its_own);
    let cooling: String = cooling.filter_map(|s| own_years(s, told)).collect();
    format!(
        "{}\n{table}{cooling}\n{}",
        wrapped(
            &told.said(&format!("Over the years: {}", lifetime.terms)),
            "",
            "  "
        ),
        wrapped(&told.said(&lifetime.todays_next), "", "  ")
    )
}
