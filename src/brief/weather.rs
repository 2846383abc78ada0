//! From the weather table to the hourly weather.

use std::str::FromStr;

use super::files::Folder;
use super::raw;
use crate::document::{Check, Leaf, Section};
use crate::weather::{ColumnChoice, ReadOptions, RepairPolicy, Weather, read_bytes};

/// Most lines that can be passed over at the beginning of a file.
const MOST_SKIPPED: i64 = 10_000;

/// Reads the weather that a brief names.
pub(super) fn weather(
    table: Option<&Section<raw::Weather>>,
    folder: &Folder,
    check: &mut Check,
) -> Option<Weather> {
    let Some(table) = table else {
        check.missing_table("[weather]", "file = \"….csv\"");
        return None;
    };
    let before = check.problems().len();
    let options = ReadOptions {
        zone: parsed(&table.time_zone, check),
        stamp_marks: parsed(&table.stamps, check),
        date_order: parsed(&table.date_order, check),
        columns: ColumnChoice {
            time: parsed(&table.time_column, check),
            clock: parsed(&table.clock_column, check),
            temperature: parsed(&table.temperature_column, check),
            humidity: parsed(&table.humidity_column, check),
            radiation: parsed(&table.radiation_column, check),
            ..ColumnChoice::default()
        },
        temperature_unit: parsed(&table.temperature_unit, check),
        skip_lines: skipped(&table.skip_lines, check),
        repair: RepairPolicy {
            fill_longer: check.value(&table.fill_longer_gaps).unwrap_or(false),
            ..RepairPolicy::default()
        },
        ..ReadOptions::default()
    };
    let path = check.required(
        &table.file,
        &table.span(),
        "weather.file",
        "\"../weather_samples/morvane_sound.csv\"",
    )?;
    let bytes = check.take(folder.bytes(&path))?;
    if check.problems().len() > before {
        // Read with half of what was said, the file would only bring misleading problems.
        return None;
    }
    check.take(read_bytes(&folder.name(&path), &bytes, &options))
}

fn parsed<T: FromStr<Err = String>>(leaf: &Option<Leaf<String>>, check: &mut Check) -> Option<T> {
    let text = check.value(leaf)?;
    match text.parse() {
        Ok(value) => Some(value),
        Err(allowed) => {
            let span = leaf.as_ref().map(Leaf::span).unwrap_or_default();
            let allowed = allowed
                .strip_prefix("allowed: ")
                .unwrap_or(&allowed)
                .to_owned();
            check.refuse(&span, format!("\"{text}\""), allowed, "");
            None
        }
    }
}

fn skipped(leaf: &Option<Leaf<i64>>, check: &mut Check) -> Option<usize> {
    let lines = check.value(leaf)?;
    if !(0..=MOST_SKIPPED).contains(&lines) {
        let span = leaf.as_ref().map(Leaf::span).unwrap_or_default();
        check.refuse(
            &span,
            format!("{lines} lines"),
            format!("0 to {MOST_SKIPPED}"),
            "count the lines before the heading",
        );
        return None;
    }
    usize::try_from(lines).ok()
}
