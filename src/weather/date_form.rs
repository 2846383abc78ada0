//! Which form the times of a file have, decided by the readings themselves.

use super::columns::{Columns, TimeColumns};
use super::options::ReadOptions;
use super::row_reader::Fields;
use super::time_stamp::{DateForm, Stamp, stamp, stamp_of_parts, stamp_of_two};

/// Rows that settle every form but the order of day and month.
pub(super) const FIRST_ROWS: usize = 200;
/// Rows looked at for that: 13 days of ten-minute readings hold a day above 12, which settles day-first or month-first.
pub(super) const SAMPLED_ROWS: usize = 5000;

/// Forms tried, the least ambiguous first.
const FORMS: [DateForm; 6] = [
    DateForm::YearFirst,
    DateForm::DayFirst,
    DateForm::MonthFirst,
    DateForm::Compact,
    DateForm::EpochSeconds,
    DateForm::EpochMilliseconds,
];

/// How the time of a row is read.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(super) struct TimeForm {
    pub columns: TimeColumns,
    pub form: DateForm,
}

impl TimeForm {
    /// The time of one row.
    pub(super) fn stamp(&self, row: &impl Fields) -> Option<Stamp> {
        match self.columns {
            TimeColumns::One(at) => stamp(row.field(at)?, self.form),
            TimeColumns::Two { date, clock } => {
                stamp_of_two(row.field(date)?, row.field(clock)?, self.form)
            }
            TimeColumns::Parts {
                year,
                month,
                day,
                hour,
                minute,
            } => {
                let number = |at| whole(row.field(at)?);
                let minute = match minute {
                    Some(at) => number(at)?,
                    None => 0,
                };
                stamp_of_parts(
                    number(year)?,
                    number(month)?,
                    number(day)?,
                    number(hour)?,
                    minute,
                )
            }
        }
    }

    /// The text of a row's time, for messages.
    pub(super) fn text(&self, row: &impl Fields) -> String {
        let field = |at| {
            row.field(at)
                .map(String::from_utf8_lossy)
                .unwrap_or_default()
        };
        match self.columns {
            TimeColumns::One(at) => field(at).into_owned(),
            TimeColumns::Two { date, clock } => format!("{} {}", field(date), field(clock)),
            TimeColumns::Parts {
                year,
                month,
                day,
                hour,
                ..
            } => {
                format!(
                    "{}-{}-{} hour {}",
                    field(year),
                    field(month),
                    field(day),
                    field(hour)
                )
            }
        }
    }

    /// Whether the form has its year last, so that more rows can tell day from month.
    pub(super) fn day_and_month_may_be_swapped(&self) -> bool {
        matches!(self.form, DateForm::DayFirst | DateForm::MonthFirst)
    }

    /// The form in words.
    pub(super) fn words(&self) -> &'static str {
        match self.columns {
            TimeColumns::Parts { .. } => "year, month 1 to 12, day, hour 0 to 24",
            _ => self.form.words(),
        }
    }
}

/// What the sample says.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(super) struct Decision {
    pub form: TimeForm,
    /// Whether day-first was taken although the readings allow month-first as well.
    pub order_guessed: bool,
}

/// Decides the form by which most sampled rows can be read.
pub(super) fn decide(
    rows: &[csv::ByteRecord],
    columns: &Columns,
    options: &ReadOptions,
) -> Option<Decision> {
    let mut best: Option<(usize, Decision)> = None;
    for &time in &columns.time {
        let forms: &[DateForm] = match time {
            TimeColumns::Parts { .. } => &FORMS[..1],
            _ => &FORMS,
        };
        let count = |form| {
            let form = TimeForm {
                columns: time,
                form,
            };
            rows.iter().filter(|row| form.stamp(*row).is_some()).count()
        };
        for &form in forms {
            let read = count(form);
            if read == 0 || best.as_ref().is_some_and(|(most, _)| read <= *most) {
                continue;
            }
            let form = TimeForm {
                columns: time,
                form,
            };
            best = Some((
                read,
                Decision {
                    form,
                    order_guessed: false,
                },
            ));
        }
    }
    let (_, mut decision) = best?;
    if decision.form.day_and_month_may_be_swapped() {
        let with = |form| TimeForm {
            form,
            ..decision.form
        };
        let (day_first, month_first) = (with(DateForm::DayFirst), with(DateForm::MonthFirst));
        let told = options
            .date_order
            .map(|order| order.form())
            .or_else(|| order_in_heading(&columns.date_format));
        let (form, order_guessed) = match told {
            Some(form) => (form, false),
            None => {
                let count =
                    |form: TimeForm| rows.iter().filter(|r| form.stamp(*r).is_some()).count();
                let (a, b) = (count(day_first), count(month_first));
                match a.cmp(&b) {
                    std::cmp::Ordering::Greater => (DateForm::DayFirst, false),
                    std::cmp::Ordering::Less => (DateForm::MonthFirst, false),
                    // Both can be read: the right one leaves the rows close together.
                    std::cmp::Ordering::Equal => {
                        match span(rows, day_first).cmp(&span(rows, month_first)) {
                            std::cmp::Ordering::Less => (DateForm::DayFirst, false),
                            std::cmp::Ordering::Greater => (DateForm::MonthFirst, false),
                            std::cmp::Ordering::Equal => {
                                (DateForm::DayFirst, !named_month(rows, &decision.form))
                            }
                        }
                    }
                }
            }
        };
        decision = Decision {
            form: with(form),
            order_guessed,
        };
    }
    Some(decision)
}

/// Whether a row's field can be read as a time in any form; for telling a reading from a heading.
pub(super) fn is_time(row: &impl Fields, columns: TimeColumns) -> bool {
    FORMS
        .iter()
        .any(|&form| TimeForm { columns, form }.stamp(row).is_some())
}

/// The order that a heading such as `Date (MM/DD/YYYY)` states, given in lower case.
pub fn order_in_heading(format: &str) -> Option<DateForm> {
    let day = format.find('d')?;
    let month = format.find('m')?;
    let year = format.find('y')?;
    if year < day.min(month) {
        return None;
    }
    Some(if day < month {
        DateForm::DayFirst
    } else {
        DateForm::MonthFirst
    })
}

/// How far apart the sampled rows would lie, seconds summed over every step.
fn span(rows: &[csv::ByteRecord], form: TimeForm) -> u64 {
    let mut before = None;
    let mut total = 0;
    for stamp in rows.iter().filter_map(|row| form.stamp(row)) {
        if let Some(before) = before {
            total += stamp.local_s.abs_diff(before);
        }
        before = Some(stamp.local_s);
    }
    total
}

/// Whether months are written by name, so that there is nothing to guess.
fn named_month(rows: &[csv::ByteRecord], form: &TimeForm) -> bool {
    let at = match form.columns {
        TimeColumns::One(at) | TimeColumns::Two { date: at, .. } => at,
        TimeColumns::Parts { .. } => return false,
    };
    rows.first()
        .and_then(|row| row.get(at))
        .is_some_and(|field| field.iter().take(8).any(u8::is_ascii_alphabetic))
}

/// A whole number, `1` or `1.0`.
fn whole(field: &[u8]) -> Option<i64> {
    let text = std::str::from_utf8(field.trim_ascii()).ok()?;
    let text = text.strip_suffix(".0").unwrap_or(text);
    text.parse().ok()
}
