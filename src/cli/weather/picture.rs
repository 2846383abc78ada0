//! The pictures of `weather`: the coldest year as a carpet, and the duration curve beside it.

use std::ops::Range;
use std::path::{Path, PathBuf};

use crate::chart::{Carpet, DurationCurve, Marks, Spell, carpet, duration_curve};
use crate::cli::{Failure, NewFile, picture_file};
use crate::weather::{Description, Weather};

/// Draws both pictures; the duration curve goes to NAME-duration.EXTENSION beside the carpet.
pub(super) fn draw(
    series: &[Weather],
    described: &Description,
    bases: &[f64],
    out: &Path,
) -> Result<[NewFile; 2], Failure> {
    let marks = Marks::default();
    let carpet = carpet(&carpet_data(series, described, &marks), &marks);
    let name = series.first().map_or("", |weather| weather.file.as_str());
    let name = Path::new(name)
        .file_name()
        .and_then(|name| name.to_str())
        .unwrap_or(name);
    let mut levels: Vec<_> = bases
        .iter()
        .map(|base| ("base temperature".to_owned(), *base))
        .collect();
    levels.push(("99.6 % design".to_owned(), described.design_99_6_c));
    let curve = duration_curve(
        &DurationCurve {
            place: name.to_owned(),
            outdoor_c: series
                .iter()
                .flat_map(|weather| &weather.outdoor_c)
                .copied()
                .collect(),
            levels,
        },
        &marks,
    );
    Ok([
        picture_file("--chart", out, carpet)?,
        picture_file("--chart", &beside(out), curve)?,
    ])
}

fn beside(out: &Path) -> PathBuf {
    let stem = out
        .file_stem()
        .and_then(|stem| stem.to_str())
        .unwrap_or("weather");
    let extension = out
        .extension()
        .and_then(|extension| extension.to_str())
        .unwrap_or("svg");
    out.with_file_name(format!("{stem}-duration.{extension}"))
}

/// The weather year that holds the coldest three days, each of its days 24 hours long: a doubled hour is drawn once, a
/// skipped one left white.
fn carpet_data(series: &[Weather], described: &Description, marks: &Marks) -> Carpet {
    let cold = described
        .coldest_three_days
        .as_ref()
        .or(described.coldest_day.as_ref());
    let (at, cold_hours) = match cold {
        Some(spell) => (spell.series, spell.hours.clone()),
        None => (0, 0..0),
    };
    let empty = (0, 0..0);
    let Some(weather) = series.get(at) else {
        return blank();
    };
    let years = weather.years();
    let (year, hours) = years
        .iter()
        .find(|(_, hours)| hours.contains(&cold_hours.start))
        .or(years.first())
        .unwrap_or(&empty);
    let mut cells = Vec::new();
    let mut months: Vec<(f64, String)> = Vec::new();
    let mut spell: Option<(usize, usize)> = None;
    let overlap = |a: &Range<usize>, b: &Range<usize>| a.start < b.end && b.start < a.end;
    for (date, day) in weather.days() {
        if !overlap(&day, hours) {
            continue;
        }
        let number = cells.len() / 24;
        let mut column = [None; 24];
        for hour in day.clone() {
            let local = weather.zone.local(weather.axis.at(hour));
            if let Some(cell) = column.get_mut(chrono::Timelike::hour(&local) as usize)
                && hours.contains(&hour)
            {
                cell.get_or_insert(weather.outdoor_c[hour]);
            }
        }
        cells.extend(column);
        let month = date.format("%b").to_string();
        if months.last().is_none_or(|(_, last)| *last != month) {
            months.push((number as f64, month));
        }
        if overlap(&day, &cold_hours) {
            let (first, days) = spell.unwrap_or((number, 0));
            spell = Some((first, days + 1));
        }
    }
    let mean = cold.map_or(f64::NAN, |cold| cold.mean_c);
    Carpet {
        title: title(weather, *year, series),
        quantity: "Outdoor temperature".to_owned(),
        unit: "°C".to_owned(),
        hours: cells,
        months,
        spell: spell.map(|(first_day, days)| Spell {
            first_day,
            days,
            label: format!(
                "coldest {days} days, {} °C on average",
                marks.number(mean, 1)
            ),
        }),
    }
}

fn title(weather: &Weather, year: i32, series: &[Weather]) -> String {
    let several = series.len() > 1 || weather.years().len() > 1;
    match (&weather.kind, several) {
        (crate::weather::Kind::Typical { .. }, _) => "A typical year, hour by hour".to_owned(),
        (_, true) => format!("{year}, the year with the coldest days, hour by hour"),
        (_, false) => format!("{year}, hour by hour"),
    }
}

fn blank() -> Carpet {
    Carpet {
        title: String::new(),
        quantity: String::new(),
        unit: String::new(),
        hours: Vec::new(),
        months: Vec::new(),
        spell: None,
    }
}
