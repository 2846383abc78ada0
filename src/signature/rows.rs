//! Headings and lines of a file of readings.

use chrono::NaiveDate;

use super::dates::{example, month};
use crate::problem::{Place, Problem, Problems};
use crate::units::{CalorificValue, FuelUnit};
use crate::weather::{DateForm, date};

/// A line of the file.
pub(super) struct Row {
    pub line: usize,
    pub from: Option<NaiveDate>,
    pub date: NaiveDate,
    pub amount: f64,
    pub meter: Option<String>,
    pub calorific_value: Option<CalorificValue>,
    pub estimated: bool,
}

/// Columns by their place.
pub(super) struct Columns {
    pub date: usize,
    pub from: Option<usize>,
    pub amount: usize,
    pub unit: FuelUnit,
    pub is_register: bool,
    pub meter: Option<usize>,
    pub calorific_value: Option<(usize, String)>,
    pub estimated: Option<usize>,
    /// Whether a month stands in place of dates.
    pub by_month: bool,
    /// What the heading says about the order of its dates.
    pub order: Option<String>,
}

/// How the file writes dates and numbers.
#[derive(Clone, Copy)]
pub(super) struct Written {
    pub order: DateForm,
    pub decimal_comma: bool,
}

pub(super) const HEADING: &str = "columns \"date\" and \"register (m³)\", \"from\", \"to\" and \"consumption (kWh)\", or \"month\" and \"consumption (kWh)\"; beside them \
                       \"meter\", \"calorific value (MJ/m³)\" and \"estimated\"";

/// A whole file, for messages.
pub(super) const EXAMPLE: &str = "write for example\n             from,to,consumption (kWh)\n             2023-01-01,2023-02-01,1905\n             \
                       2023-02-01,2023-03-01,1712\n           or\n             month,consumption (kWh)\n             2023-01,1905\n             \
                       2023-02,1712";

/// A line that the CSV reader cannot take apart.
pub(super) fn unreadable(error: &csv::Error, place: &Place) -> Problem {
    let line = error
        .position()
        .and_then(|at| usize::try_from(at.line()).ok());
    let place = Place {
        line,
        ..place.clone()
    };
    match error.kind() {
        csv::ErrorKind::UnequalLengths {
            expected_len, len, ..
        } => Problem::new(
            place,
            format!("fields: {len}"),
            format!("{expected_len}, as there are headings"),
            "",
        ),
        _ => Problem::new(place, error.to_string(), "text in UTF-8", ""),
    }
}

/// Splits `"register (m³)"`.
fn heading(text: &str) -> (String, Option<String>) {
    match text.split_once('(') {
        Some((name, unit)) => (
            name.trim().to_lowercase(),
            Some(unit.trim_end_matches(')').trim().to_owned()),
        ),
        None => (text.trim().to_lowercase(), None),
    }
}

pub(super) fn columns(headings: &csv::StringRecord, place: &Place) -> Result<Columns, Problems> {
    let mut names: Vec<_> = headings.iter().map(heading).collect();
    // "Month,kWh": a unit alone is an amount that was used.
    for (name, text) in names.iter_mut().zip(headings) {
        if let Some(unit) = FuelUnit::from_symbol(text.trim()) {
            *name = ("consumption".to_owned(), Some(unit.symbol.to_owned()));
        }
    }
    let find = |wanted: &str| names.iter().position(|(name, _)| name == wanted);
    let refuse = |found: String, remedy: &str| -> Problems {
        Problem::new(place.clone(), found, HEADING, remedy).into()
    };
    let known = [
        "date",
        "month",
        "register",
        "from",
        "to",
        "consumption",
        "meter",
        "calorific value",
        "estimated",
        "note",
    ];
    if let Some((unknown, _)) = names
        .iter()
        .find(|(name, _)| !known.contains(&name.as_str()))
    {
        return Err(refuse(
            format!("a column \"{unknown}\""),
            "rename or remove it; remarks go into a column \"note\"",
        ));
    }
    let by_month = find("month").is_some() && find("from").is_none();
    let (date, from, amount, is_register) = match (
        find("date").or(find("month")),
        find("register"),
        find("from"),
        find("to"),
        find("consumption"),
    ) {
        (Some(date), Some(register), None, None, None) if !by_month => (date, None, register, true),
        (Some(date), None, None, None, Some(consumption)) if by_month => {
            (date, None, consumption, false)
        }
        (None, None, Some(from), Some(to), Some(consumption)) => {
            (to, Some(from), consumption, false)
        }
        _ => {
            let found: Vec<_> = names.iter().map(|(name, _)| name.as_str()).collect();
            return Err(refuse(format!("columns {}", found.join(", ")), EXAMPLE));
        }
    };
    let unit = names[amount].1.as_deref();
    let Some(unit) = unit.and_then(FuelUnit::from_symbol) else {
        let found = unit.map_or_else(
            || "no unit in the heading of the amount".to_owned(),
            |unit| format!("the unit \"{unit}\""),
        );
        return Err(refuse(
            found,
            &format!(
                "write the unit in brackets, for example \"register (m³)\"; units: {}",
                FuelUnit::all_symbols()
            ),
        ));
    };
    let calorific_value = find("calorific value").map(|column| {
        (
            column,
            names[column]
                .1
                .clone()
                .unwrap_or_else(|| "MJ/m³".to_owned()),
        )
    });
    let order = names[date].1.clone();
    Ok(Columns {
        by_month,
        order,
        date,
        from,
        amount,
        unit,
        is_register,
        meter: find("meter"),
        calorific_value,
        estimated: find("estimated"),
    })
}

/// A number as the file writes it.
fn number(text: &str, decimal_comma: bool) -> Option<f64> {
    if decimal_comma {
        if text.contains('.') {
            return None;
        }
        return text.replace(',', ".").parse().ok();
    }
    text.parse().ok()
}

pub(super) fn row(
    record: &csv::StringRecord,
    columns: &Columns,
    written: Written,
    place: &Place,
) -> Result<Row, Problems> {
    let line = record
        .position()
        .and_then(|at| usize::try_from(at.line()).ok())
        .unwrap_or(0);
    let mut problems = Problems::new();
    let field = |column: usize| record.get(column).unwrap_or("");
    let mut refuse = |column: &str, found: &str, allowed: &str, remedy: &str| {
        problems.push(Problem::new(
            place.clone().at_line(line).in_field(column),
            format!("\"{found}\""),
            allowed,
            remedy,
        ));
    };
    let mut dated = |column: usize, name: &str| {
        let found = date(field(column), written.order);
        if found.is_none() {
            let (order, day) = example(written.order);
            refuse(
                name,
                field(column),
                &format!("a date as {order}"),
                &format!("write for example {day}"),
            );
        }
        found
    };
    let (from, to) = if columns.by_month {
        let found = month(field(columns.date));
        if found.is_none() {
            refuse(
                "month",
                field(columns.date),
                "a month with its year, as year-month",
                EXAMPLE,
            );
        }
        (Some(found.map(|found| found.0)), found.map(|found| found.1))
    } else {
        let name = if columns.is_register { "date" } else { "to" };
        let to = dated(columns.date, name);
        (columns.from.map(|column| dated(column, "from")), to)
    };
    let amount = number(field(columns.amount), written.decimal_comma)
        .filter(|amount| amount.is_finite() && *amount >= 0.0);
    if amount.is_none() {
        let name = if columns.is_register {
            "register"
        } else {
            "consumption"
        };
        refuse(
            name,
            field(columns.amount),
            "a number from 0 up",
            if written.decimal_comma {
                "write it with a decimal comma and without separators"
            } else {
                "write it with a decimal point and without separators"
            },
        );
    }
    let calorific_value = match &columns.calorific_value {
        Some((column, unit)) if !field(*column).is_empty() => {
            let value = number(field(*column), written.decimal_comma);
            let text = match value {
                Some(value) => format!("{value} {unit}"),
                None => format!("{} {unit}", field(*column)),
            };
            match CalorificValue::parse(&text) {
                Ok(value) => Some(value),
                Err(problem) => {
                    refuse("calorific value", &text, &problem.allowed, &problem.remedy);
                    None
                }
            }
        }
        _ => None,
    };
    let estimated = match columns
        .estimated
        .map(field)
        .unwrap_or("")
        .to_lowercase()
        .as_str()
    {
        "" | "no" | "false" | "0" => Some(false),
        "yes" | "true" | "1" | "estimated" => Some(true),
        other => {
            refuse("estimated", other, "yes or no", "");
            None
        }
    };
    let meter = columns
        .meter
        .map(|column| field(column).to_owned())
        .filter(|meter| !meter.is_empty());
    problems.or(())?;
    match (to, from, amount, estimated) {
        (Some(date), Some(Some(from)), Some(amount), Some(estimated)) => Ok(Row {
            line,
            from: Some(from),
            date,
            amount,
            meter,
            calorific_value,
            estimated,
        }),
        (Some(date), None, Some(amount), Some(estimated)) => Ok(Row {
            line,
            from: None,
            date,
            amount,
            meter,
            calorific_value,
            estimated,
        }),
        _ => Err(Problems::new()),
    }
}
