//! The answer in one screen of text.

use crate::answer::weather::{SpellAnswer, WeatherAnswer};
use crate::problem::{Finding, Severity};
use crate::report::plain_table;

/// Findings that are written out when not all are asked for.
const MOST_FINDINGS: usize = 6;
/// Width of a class of temperature, K.
const CLASS_K: i32 = 5;

/// The whole screen.
pub(super) fn screen(answer: &WeatherAnswer, written: &[String], all_findings: bool) -> String {
    let mut parts = vec![
        head(answer),
        cold(answer),
        degree_days(answer),
        classes(answer),
    ];
    if answer.by_year.len() > 1 {
        parts.push(by_year(answer));
    }
    if let Some(chosen) = &answer.typical_year {
        parts.push(format!(
            "Typical year  {}\n  months from January come from {}",
            chosen.procedure,
            years(&chosen.years)
        ));
    }
    if !answer.assumptions.is_empty() {
        let lines: Vec<_> = answer
            .assumptions
            .iter()
            .map(|a| format!("Assumed  {}: {} ({})", a.name, a.value, a.from))
            .collect();
        parts.push(lines.join("\n"));
    }
    parts.push(findings(answer, all_findings));
    if !written.is_empty() {
        parts.push(format!("Written  {}", written.join(", ")));
    }
    parts.join("\n\n")
}

fn head(answer: &WeatherAnswer) -> String {
    let kind = match (answer.kind, &answer.source_years) {
        ("typical", Some(years)) => {
            let (first, last) = (
                years.iter().min().unwrap_or(&0),
                years.iter().max().unwrap_or(&0),
            );
            format!("a typical year made of months from {first} to {last}")
        }
        ("typical", None) => "a typical year".to_owned(),
        _ => format!("{:.2} years", answer.years).replace(".00", ""),
    };
    let kind = if kind == "1 years" {
        "1 year".to_owned()
    } else {
        kind
    };
    let columns = if answer.columns.is_empty() {
        "temperature only".to_owned()
    } else {
        format!("temperature, {}", answer.columns.join(", "))
    };
    let joined = match answer.joined_hours {
        0 => String::new(),
        hours => format!(", {hours} h joined from coarser readings"),
    };
    format!(
        "{}\n\
         Hours    {} from {} to {} on the clock of {}: {kind}\n\
         Columns  {columns}\n\
         Faults   {} h missing, {} h repaired, {} h there twice{joined}",
        answer.file,
        answer.hours,
        answer.from,
        answer.to,
        answer.time_zone,
        answer.missing_hours,
        answer.repaired_hours,
        answer.duplicate_hours,
    )
}

fn cold(answer: &WeatherAnswer) -> String {
    let design = |share: &str| answer.design_c.get(share).copied().unwrap_or(f64::NAN);
    let at = |spell: &SpellAnswer| format!("{:.1} from {}", spell.mean_c, spell.from);
    let mut text = format!(
        "Outdoor temperature, °C\n\
         \u{20} mean {:.1}, lowest {:.1}, highest {:.1}\n\
         \u{20} 99.6 % of hours are at or above {:.1}, 99 % at or above {:.1} (35 and 88 hours a year are colder)\n\
         \u{20} coldest hour {}",
        answer.mean_c,
        answer.min_c,
        answer.max_c,
        design("99.6"),
        design("99"),
        at(&answer.coldest_hour),
    );
    for spell in &answer.coldest_spells {
        let days = match spell.days {
            1 => "day".to_owned(),
            days => format!("{days} days"),
        };
        text += &format!(
            "\n  coldest {days:<7} {:>5.1} from {}",
            spell.mean_c, spell.from
        );
    }
    let shares: Vec<_> = answer
        .percentiles
        .iter()
        .map(|p| format!("{} % {:.1}", p.colder_percent, p.temperature_c))
        .collect();
    text += &format!("\n  colder in {}", shares.join(", "));
    text
}

fn degree_days(answer: &WeatherAnswer) -> String {
    let mut header = vec!["K·d below".to_owned()];
    let mut rows: Vec<Vec<String>> = Vec::new();
    for entry in &answer.degree_days {
        let base = format!("{} °C", entry.base_c);
        if !header.iter().any(|name| name == entry.rule) {
            header.push(entry.rule.to_owned());
        }
        match rows.last_mut() {
            Some(row) if row.first() == Some(&base) => row.push(format!("{:.0}", entry.value)),
            _ => rows.push(vec![base, format!("{:.0}", entry.value)]),
        }
    }
    let whole = answer
        .by_year
        .iter()
        .any(|year| year.hours + 12 >= crate::calendar::HOURS_PER_YEAR);
    let per = if whole { "a year" } else { "of the whole file" };
    format!(
        "Heating degree-days {per}, by rule\n{}",
        plain_table(header, rows)
    )
}

/// Hours by classes of five kelvin, a bar beside each.
fn classes(answer: &WeatherAnswer) -> String {
    const WIDEST: usize = 40;
    let mut classes: Vec<(i32, usize)> = Vec::new();
    for degree in &answer.hours_per_degree {
        let from = degree.from_c.div_euclid(CLASS_K) * CLASS_K;
        match classes.last_mut() {
            Some((last, hours)) if *last == from => *hours += degree.hours,
            _ => classes.push((from, degree.hours)),
        }
    }
    let most = classes
        .iter()
        .map(|&(_, hours)| hours)
        .max()
        .unwrap_or(1)
        .max(1);
    let years = if answer.years >= 1.0 {
        answer.years
    } else {
        1.0
    };
    let lines: Vec<_> = classes
        .iter()
        .map(|&(from, hours)| {
            let bar = "▪".repeat((hours * WIDEST).div_ceil(most));
            format!(
                "  {from:>3} to {:>3}  {:>5.0}  {bar}",
                from + CLASS_K,
                hours as f64 / years
            )
        })
        .collect();
    let per = if answer.years >= 1.0 { " a year" } else { "" };
    format!(
        "Hours{per} by outdoor temperature, °C\n{}",
        lines.join("\n")
    )
}

fn by_year(answer: &WeatherAnswer) -> String {
    let first = answer.degree_days.first();
    let header = vec![
        "year".to_owned(),
        "hours".to_owned(),
        "mean °C".to_owned(),
        "lowest".to_owned(),
        "highest".to_owned(),
        first.map_or_else(String::new, |entry| {
            format!("K·d below {} °C, {}", entry.base_c, entry.rule)
        }),
        "h repaired".to_owned(),
    ];
    let value = |year: &crate::answer::weather::WeatherYearAnswer| {
        year.degree_days.first().map_or(0.0, |d| d.value)
    };
    let mut rows: Vec<Vec<String>> = answer
        .by_year
        .iter()
        .map(|year| {
            vec![
                year.year.to_string(),
                year.hours.to_string(),
                format!("{:.2}", year.mean_c),
                format!("{:.1}", year.min_c),
                format!("{:.1}", year.max_c),
                format!("{:.0}", value(year)),
                year.repaired_hours.to_string(),
            ]
        })
        .collect();
    let whole: Vec<_> = answer
        .by_year
        .iter()
        .filter(|year| year.hours + 12 >= crate::calendar::HOURS_PER_YEAR)
        .collect();
    if whole.len() > 1 {
        let spread = |of: &dyn Fn(&crate::answer::weather::WeatherYearAnswer) -> f64,
                      decimals: usize| {
            let values: Vec<f64> = whole.iter().map(|year| of(year)).collect();
            let low = values.iter().copied().fold(f64::INFINITY, f64::min);
            let high = values.iter().copied().fold(f64::NEG_INFINITY, f64::max);
            format!("{low:.decimals$} to {high:.decimals$}")
        };
        rows.push(vec![
            "from, to".to_owned(),
            String::new(),
            spread(&|year| year.mean_c, 2),
            spread(&|year| year.min_c, 1),
            spread(&|year| year.max_c, 1),
            spread(&value, 0),
            String::new(),
        ]);
    }
    format!("By year\n{}", plain_table(header, rows))
}

fn findings(answer: &WeatherAnswer, all: bool) -> String {
    let count = |severity| {
        answer
            .findings
            .iter()
            .filter(|finding| finding.severity == severity)
            .count()
    };
    let total = answer.findings.len();
    if total == 0 {
        return "Findings  none".to_owned();
    }
    let plural = |n: usize, what: &str| format!("{n} {what}{}", if n == 1 { "" } else { "s" });
    let counts: Vec<_> = [
        (count(Severity::Caution), "caution"),
        (count(Severity::Warning), "warning"),
        (count(Severity::Note), "note"),
    ]
    .into_iter()
    .filter(|(n, _)| *n > 0)
    .map(|(n, what)| plural(n, what))
    .collect();
    let shown = if all { total } else { total.min(MOST_FINDINGS) };
    let mut lines = vec![format!("Findings  {}", counts.join(", "))];
    lines.extend(
        answer
            .findings
            .iter()
            .take(shown)
            .map(|finding| format!("  {}", briefly(finding, answer))),
    );
    if shown < total {
        lines.push(format!(
            "  and {} more: --all-findings shows them",
            total - shown
        ));
    }
    lines.join("\n")
}

/// A finding without its file where there is only one.
fn briefly(finding: &Finding, answer: &WeatherAnswer) -> String {
    if finding.file.as_deref() != Some(answer.file.as_str()) {
        return finding.to_string();
    }
    let alone = Finding {
        file: None,
        line: None,
        ..finding.clone()
    }
    .to_string();
    match (finding.line, alone.split_once(": ")) {
        (Some(line), Some((severity, rest))) => format!("{severity}: line {line}: {rest}"),
        _ => alone,
    }
}

/// Years separated by spaces.
pub(super) fn years(years: &[i32]) -> String {
    let years: Vec<_> = years.iter().map(ToString::to_string).collect();
    years.join(" ")
}
