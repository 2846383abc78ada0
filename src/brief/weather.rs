//! From the weather table to the hourly weather.

use super::files::Folder;
use super::notes::Notes;
use super::weather_table::{LapseRate, Offset, Said, WeatherTable};
use crate::bounds::Bound;
use crate::document::{Check, Leaf, Section};
use crate::problem::{Place, Problem, Problems};
use crate::weather::{
    Adjustment, ColumnChoice, ReadOptions, RepairPolicy, STANDARD_LAPSE_K_PER_KM, Weather,
    read_all_bytes,
};

/// Most lines that can be passed over at the beginning of a file.
const MOST_SKIPPED: i64 = 10_000;
/// Gaps that can be filled from the days around them: with longer ones there is nothing left to know. A choice of ours.
const LONGEST_GAP_H: Bound = Bound {
    label: "longest gap that is filled",
    low: 0.0,
    high: 744.0,
    unit: "h",
};
/// Years that a typical year can be placed on.
const NOMINAL_YEARS: std::ops::RangeInclusive<i64> = 1800..=2200;

/// Reads the weather that a brief names, moved to the home's height and by its offsets.
pub(super) fn weather(
    table: Option<&Section<WeatherTable>>,
    folder: &Folder,
    check: &mut Check,
    notes: &mut Notes,
) -> Option<Weather> {
    let Some(table) = table else {
        check.missing_table("[weather]", "file = \"….csv\"");
        return None;
    };
    let before = check.problems().len();
    let options = options(table, check);
    let adjustments = adjustments(table, check);
    let names = check.required(
        &table.file,
        &table.span(),
        "weather.file",
        "\"../weather_samples/morvane_sound.csv\"",
    )?;
    let mut files = Vec::with_capacity(names.0.len());
    for name in &names.0 {
        let bytes = check.take(folder.bytes(name));
        files.extend(bytes.map(|bytes| (folder.name(name), bytes)));
    }
    if check.problems().len() > before {
        // Read with half of what was said, the files would only bring misleading problems.
        return None;
    }
    let stretches = check.take(read_all_bytes(&files, &options))?;
    let mut weather = check.take(one_stretch(stretches))?;
    for adjustment in &adjustments {
        match weather.adjust(adjustment) {
            Ok(done) => notes.add(done.name, done.value, done.from),
            Err(problem) => {
                let span = match adjustment {
                    Adjustment::Height { .. } => table.higher.as_ref().map(Leaf::span),
                    _ => table.offset.as_ref().map(Leaf::span),
                };
                let span = span.unwrap_or_else(|| table.span());
                check.refuse(&span, problem.found, problem.allowed, problem.remedy);
            }
        }
    }
    Some(weather)
}

/// What is said about how to read the files.
fn options(table: &WeatherTable, check: &mut Check) -> ReadOptions {
    for (leaf, field) in [
        (&table.clock_column, "clock_column"),
        (&table.time_column, "time_column"),
    ] {
        if let (Some(leaf), true) = (leaf, table.part_columns.is_some()) {
            let found = format!("both {field} and part_columns");
            check.refuse(&leaf.span(), found, "one of them", "leave one out");
        }
    }
    if let (Some(clock), None, None) =
        (&table.clock_column, &table.time_column, &table.part_columns)
    {
        check.refuse(
            &clock.span(),
            "a clock_column without a time_column",
            "the column of the date as time_column beside it",
            "add time_column",
        );
    }
    let skip_lines = whole(&table.skip_lines, 0..=MOST_SKIPPED, "lines", check);
    let nominal_year = whole(&table.nominal_year, NOMINAL_YEARS, "as a year", check);
    let usual = RepairPolicy::default();
    ReadOptions {
        zone: said(&table.time_zone, check),
        stamp_marks: said(&table.stamps, check),
        date_order: said(&table.date_order, check),
        columns: ColumnChoice {
            time: said(&table.time_column, check),
            clock: said(&table.clock_column, check),
            parts: check.value(&table.part_columns).map(|parts| parts.0),
            temperature: said(&table.temperature_column, check),
            humidity: said(&table.humidity_column, check),
            dew_point: said(&table.dew_point_column, check),
            radiation: said(&table.radiation_column, check),
            wind: said(&table.wind_column, check),
        },
        temperature_unit: said(&table.temperature_unit, check),
        skip_lines: skip_lines.and_then(|lines| usize::try_from(lines).ok()),
        delimiter: said(&table.delimiter, check).map(|delimiter| delimiter.0),
        decimal_comma: check.value(&table.decimal_comma),
        encoding: said(&table.encoding, check).map(|encoding| encoding.0),
        missing: check
            .value(&table.missing)
            .map_or_else(Vec::new, |markers| markers.0),
        repair: RepairPolicy {
            neighbour_hours: check
                .within(&table.longest_gap, &LONGEST_GAP_H)
                // Within the bound, so it fits; part of an hour is no hour.
                .map_or(usual.neighbour_hours, |gap| gap.h() as usize),
            fill_longer: check.value(&table.fill_longer_gaps).unwrap_or(false),
            ..usual
        },
        nominal_year: nominal_year.and_then(|year| i32::try_from(year).ok()),
        max_expanded_bytes: None,
    }
}

/// Height first, then offsets.
fn adjustments(table: &WeatherTable, check: &mut Check) -> Vec<Adjustment> {
    let mut adjustments = Vec::new();
    let lapse_k_per_km = check
        .value(&table.lapse_rate)
        .map_or(STANDARD_LAPSE_K_PER_KM, |LapseRate(rate)| rate);
    if let (Some(lapse), None) = (&table.lapse_rate, &table.higher) {
        check.refuse(
            &lapse.span(),
            "a lapse_rate without a height",
            "higher beside it",
            "add higher = \"120 m\", or leave lapse_rate out",
        );
    }
    if let Some(higher) = check.value(&table.higher) {
        adjustments.push(Adjustment::Height {
            higher_m: higher.m(),
            lapse_k_per_km,
        });
    }
    match check.value(&table.offset) {
        Some(Offset::Even(k)) => adjustments.push(Adjustment::Offset(k)),
        Some(Offset::Monthly(by_month)) => adjustments.push(Adjustment::Monthly(by_month)),
        None => {}
    }
    adjustments
}

/// The one stretch that the files make: a run goes through its hours without a break.
fn one_stretch(mut stretches: Vec<Weather>) -> Result<Weather, Problems> {
    if let [first, second, ..] = stretches.as_slice() {
        let place = Place::file(second.file.as_str());
        let last = first.axis.hours.saturating_sub(1);
        return Err(Problem::new(
            place,
            format!(
                "begins at {} on the clock of {}; the hours before it end at {} ({})",
                second.local_text(0),
                second.zone,
                first.local_text(last),
                first.file
            ),
            "files of one clock that follow each other without a longer gap than may be filled",
            "name the files of years in a row, or run each file by itself",
        )
        .into());
    }
    stretches.pop().ok_or_else(|| {
        Problem::new(
            Place::field("weather.file"),
            "no hours",
            "hourly weather",
            "",
        )
        .into()
    })
}

fn said<T: Clone>(leaf: &Option<Leaf<Said<T>>>, check: &mut Check) -> Option<T> {
    check.value(leaf).map(|said| said.0)
}

fn whole(
    leaf: &Option<Leaf<i64>>,
    allowed: std::ops::RangeInclusive<i64>,
    what: &str,
    check: &mut Check,
) -> Option<i64> {
    let number = check.value(leaf)?;
    if allowed.contains(&number) {
        return Some(number);
    }
    let span = leaf.as_ref().map(Leaf::span).unwrap_or_default();
    let bounds = format!("{} to {}", allowed.start(), allowed.end());
    check.refuse(&span, format!("{number} {what}"), bounds, "");
    None
}
