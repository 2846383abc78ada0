//! A ground source through its life as text.

use std::fmt::Write as _;

use super::table::plain_table;
use crate::answer::ground::{GROUND_CAUTION, GroundAnswer, GroundYear};

/// The answers as text for a terminal of 80 columns.
pub fn ground_text(first: &GroundAnswer) -> String {
    let mut text = String::new();
    for answer in std::iter::once(first).chain(&first.others) {
        // Writing to a String cannot fail.
        let _ = writeln!(
            text,
            "{}\n{}\n{}",
            heading(answer),
            table(answer),
            below(answer)
        );
    }
    let _ = writeln!(text, "{}", wrapped(GROUND_CAUTION));
    text
}

fn heading(answer: &GroundAnswer) -> String {
    let mean = if answer.kind == "water" {
        "mean"
    } else {
        "undisturbed"
    };
    let mut text = format!(
        "{}: {}, {mean} {:.1} °C",
        answer.label, answer.kind, answer.undisturbed_c
    );
    if let Some(buried) = &answer.buried {
        let loop_words = format!(
            "{:.0} m, wall to brine {:.3} m K/W; {}, {:.2} kg/s, Reynolds {:.0}, freezes at {:.1} °C; pump of the loop {:.0} W",
            buried.length_m,
            buried.resistance_m_k_per_w,
            buried.brine,
            buried.flow_kg_per_s,
            buried.reynolds,
            buried.brine_freezing_c,
            buried.pump_w,
        );
        let _ = write!(text, "\n{}", wrapped(&loop_words));
    }
    text
}

fn table(answer: &GroundAnswer) -> String {
    let c = |value: Option<f64>| value.map_or_else(|| "–".to_owned(), |c| format!("{c:.1}"));
    let two = |value: Option<f64>| value.map_or_else(|| "–".to_owned(), |v| format!("{v:.2}"));
    let row = |name: &str, figure: &dyn Fn(&GroundYear) -> String| -> Vec<String> {
        std::iter::once(name.to_owned())
            .chain(answer.years.iter().map(figure))
            .collect()
    };
    let rows = vec![
        row("Lowest entering the machine, °C", &|y| c(y.lowest_brine_c)),
        row("  mean of the brine then", &|y| c(y.lowest_mean_c)),
        row("  leaving the machine then", &|y| c(y.lowest_leaving_c)),
        row("Average entering, °C", &|y| c(y.average_brine_c)),
        row("Wall, mean of the year, °C", &|y| c(y.bore_wall_c)),
        row("  lowest", &|y| c(y.lowest_wall_c)),
        row("SPF with source pumps, H2", &|y| two(y.spf_h2)),
        row("Heat taken, kWh", &|y| format!("{:.0}", y.taken_kwh)),
        row("Heat put back, kWh", &|y| format!("{:.0}", y.returned_kwh)),
        row("Source pumps, kWh", &|y| {
            format!("{:.0}", y.source_pump_kwh)
        }),
        row("Backup and immersion, kWh", &|y| {
            format!("{:.0}", y.backup_kwh)
        }),
        row("Hours the machine stood", &|y| y.hours_stopped.to_string()),
        row("  was turned down", &|y| y.hours_turned_down.to_string()),
    ];
    // A source without walls has no row for them.
    let rows = rows
        .into_iter()
        .filter(|row| row.iter().skip(1).any(|cell| cell != "–"));
    let years = answer.years.iter().map(|y| y.year.to_string());
    plain_table(
        std::iter::once("Year of its life".to_owned()).chain(years),
        rows,
    )
}

/// What stands below the table: sizing, and how far the method goes.
fn below(answer: &GroundAnswer) -> String {
    let mut text = String::new();
    if let Some(sizing) = &answer.sizing {
        let mut sentence = format!(
            "Shortest loop with brine entering at {:.1} °C or above in year {}: {:.0} m. Then entering {:.1} °C, mean {:.1} °C, leaving {:.1} °C; {:.0} W/m at the machine's rated draw, {:.0} full-load hours.",
            sizing.floor_c,
            sizing.year,
            sizing.length_m,
            sizing.entering_c,
            sizing.mean_c,
            sizing.leaving_c,
            sizing.rated_w_per_m,
            sizing.full_load_hours,
        );
        if let (Some([at_1800, at_2400]), Some([least, most])) =
            (sizing.rule_of_thumb_w_per_m, sizing.rule_of_thumb_m)
        {
            let range = |[low, high]: [f64; 2]| {
                if low == 0.0 {
                    format!("below {high:.0}")
                } else if low == high {
                    format!("{high:.0}")
                } else {
                    format!("{low:.0} to {high:.0}")
                }
            };
            let length = if (most - least).abs() < 0.5 {
                format!("{least:.0} m")
            } else {
                format!("{least:.0} to {most:.0} m")
            };
            let _ = write!(
                sentence,
                " The historical rule of thumb (VDI 4640-2:2001, superseded) for this ground is {} W/m at 1800 h and {} W/m at 2400 h: {length}. It knows neither this home nor its years.",
                range(at_1800),
                range(at_2400),
            );
        }
        let _ = writeln!(text, "{}", wrapped(&sentence));
    }
    if let Some(buried) = &answer.buried {
        let _ = writeln!(
            text,
            "{}",
            wrapped(&format!(
                "In the first {:.1} h after a change of the draw the line source leaves the bore's own radius out: at most {:.1} K of the wall's fall at the greatest draw, less by what grout holds.",
                buried.line_source_valid_from_h, buried.line_source_error_k
            ))
        );
    }
    text
}

/// Breaks a sentence at 80 columns.
fn wrapped(sentence: &str) -> String {
    const WIDTH: usize = 80;
    let mut lines = vec![String::new()];
    for word in sentence.split_whitespace() {
        let length = lines.last().map_or(0, |line| line.chars().count());
        if length > 0 && length + 1 + word.chars().count() > WIDTH {
            lines.push(String::new());
        }
        if let Some(line) = lines.last_mut() {
            if !line.is_empty() {
                line.push(' ');
            }
            line.push_str(word);
        }
    }
    lines.join("\n")
}
