//! Leaves that speak of the clock and the calendar: spells of the day, hours, days of the week and of the year.

use chrono::Weekday;
use schemars::{Schema, json_schema};
use toml::Value;

use super::leaves::{refuse, texts};
use crate::document::{LeafValue, Word};
use crate::home::{ClockHours, DaySpan, WarmUp};
use crate::units::{Duration, Temperature, UnitProblem, parse};

/// `"06:00"` as an hour, 0 to 24.
fn whole_hour(text: &str) -> Option<u8> {
    let (hour, minute) = text.trim().split_once(':')?;
    let hour: u8 = hour.parse().ok()?;
    (minute == "00" && hour <= 24).then_some(hour)
}

/// Spells of a day, each with a set point of its own where one is given: `["06:00-09:00", "16:00-22:00 at 21 °C"]`.
#[derive(Debug, Clone, PartialEq)]
pub(super) struct Spells(pub Vec<Spell>);

/// One spell: from its first clock hour to before its last, with a set point in °C where it has its own.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) struct Spell {
    pub from: u8,
    pub to: u8,
    pub set_point_c: Option<f64>,
}

impl Spell {
    /// Its clock hours; a spell may run over midnight.
    pub fn hours(self) -> impl Iterator<Item = u8> {
        let length = if self.to > self.from {
            self.to - self.from
        } else {
            24 + self.to - self.from
        };
        (0..length).map(move |i| (self.from + i) % 24)
    }
}

const SPELLS: &str = "spells of whole clock hours";
const SPELLS_REMEDY: &str =
    "write for example [\"06:00-09:00\", \"16:00-22:00 at 21 °C\"] or \"all day\"";

impl Spells {
    /// The clock hours of all spells.
    pub fn clock_hours(&self) -> ClockHours {
        ClockHours::of(self.0.iter().flat_map(|spell| spell.hours()))
    }

    fn one(text: &str) -> Result<Spell, UnitProblem> {
        let wrong = || refuse(format!("\"{text}\""), SPELLS, SPELLS_REMEDY);
        let (clock, own) = match text.split_once(" at ") {
            Some((clock, own)) => (clock, Some(parse::<Temperature>(own)?.c())),
            None => (text, None),
        };
        if clock.trim() == "all day" {
            return Ok(Spell {
                from: 0,
                to: 24,
                set_point_c: own,
            });
        }
        let (from, to) = clock.split_once(['-', '–']).ok_or_else(wrong)?;
        let (from, to) = (
            whole_hour(from).ok_or_else(wrong)?,
            whole_hour(to).ok_or_else(wrong)?,
        );
        if from == to || from == 24 {
            return Err(wrong());
        }
        Ok(Spell {
            from,
            to,
            set_point_c: own,
        })
    }
}

impl LeafValue for Spells {
    fn read(value: &Value) -> Result<Self, UnitProblem> {
        let texts = texts(value, SPELLS, SPELLS_REMEDY)?;
        texts
            .into_iter()
            .map(Self::one)
            .collect::<Result<_, _>>()
            .map(Self)
    }

    fn schema() -> Schema {
        json_schema!({
            "anyOf": [{ "type": "string" }, { "type": "array", "items": { "type": "string" } }],
            "examples": [["06:00-09:00", "16:00-22:00 at 21 °C"], "all day"]
        })
    }
}

/// Stretches of days of every year: `"1 Oct to 30 Apr"` or a list of such.
#[derive(Debug, Clone, PartialEq, Eq)]
pub(super) struct DaySpans(pub Vec<DaySpan>);

const MONTHS: [&str; 12] = [
    "jan", "feb", "mar", "apr", "may", "jun", "jul", "aug", "sep", "oct", "nov", "dec",
];
const SPANS: &str = "stretches of days with their months";
const SPANS_REMEDY: &str = "write for example \"1 Oct to 30 Apr\"";

fn day(text: &str) -> Option<(u32, u32)> {
    /// A year in which every day exists.
    const LEAP_YEAR: i32 = 2024;
    let (day, month) = text.trim().split_once(' ')?;
    let name = month.trim().to_lowercase();
    let month0 = MONTHS.iter().position(|short| name.starts_with(short))?;
    let (month, day) = (u32::try_from(month0).ok()? + 1, day.parse().ok()?);
    chrono::NaiveDate::from_ymd_opt(LEAP_YEAR, month, day).map(|_| (month, day))
}

impl LeafValue for DaySpans {
    fn read(value: &Value) -> Result<Self, UnitProblem> {
        let one = |text: &str| {
            let span = text.split_once(" to ").and_then(|(from, to)| {
                Some(DaySpan {
                    from: day(from)?,
                    to: day(to)?,
                })
            });
            span.ok_or_else(|| refuse(format!("\"{text}\""), SPANS, SPANS_REMEDY))
        };
        texts(value, SPANS, SPANS_REMEDY)?
            .into_iter()
            .map(one)
            .collect::<Result<_, _>>()
            .map(Self)
    }

    fn schema() -> Schema {
        json_schema!({
            "anyOf": [{ "type": "string" }, { "type": "array", "items": { "type": "string" } }],
            "examples": ["1 Oct to 30 Apr", ["24 Dec to 2 Jan"]]
        })
    }
}

/// How the rooms are warmed up again: `"in time"`, `"at the time"`, or so many hours ahead.
impl LeafValue for WarmUp {
    fn read(value: &Value) -> Result<Self, UnitProblem> {
        match value.as_str() {
            Some("in time") => Ok(Self::InTime),
            Some("at the time") => Ok(Self::AtTheTime),
            _ => {
                let hours = Duration::read(value)
                    .map_err(|mut problem| {
                        problem
                            .allowed
                            .push_str(", or \"in time\" or \"at the time\"");
                        problem
                    })?
                    .h();
                if (1.0..=12.0).contains(&hours) && hours.fract() == 0.0 {
                    Ok(Self::Ahead(hours as u8))
                } else {
                    Err(refuse(
                        format!("{hours} h"),
                        "whole hours from 1 to 12",
                        "write for example \"3 h\"",
                    ))
                }
            }
        }
    }

    fn schema() -> Schema {
        json_schema!({ "type": "string", "examples": ["in time", "at the time", "3 h"] })
    }
}

/// A day of the week.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(super) struct WeekDay(pub Weekday);

impl Word for WeekDay {
    const NAME: &'static str = "a day of the week";
    const WORDS: &'static [(&'static str, Self)] = &[
        ("monday", Self(Weekday::Mon)),
        ("tuesday", Self(Weekday::Tue)),
        ("wednesday", Self(Weekday::Wed)),
        ("thursday", Self(Weekday::Thu)),
        ("friday", Self(Weekday::Fri)),
        ("saturday", Self(Weekday::Sat)),
        ("sunday", Self(Weekday::Sun)),
    ];
}

/// A clock hour, `"13:00"`.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(super) struct ClockHour(pub u8);

impl LeafValue for ClockHour {
    fn read(value: &Value) -> Result<Self, UnitProblem> {
        let hour = value
            .as_str()
            .and_then(whole_hour)
            .filter(|&hour| hour < 24);
        hour.map(Self).ok_or_else(|| {
            refuse(
                value.to_string(),
                "a whole clock hour from 00:00 to 23:00",
                "write for example \"13:00\"",
            )
        })
    }

    fn schema() -> Schema {
        json_schema!({ "type": "string", "examples": ["13:00"] })
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::brief::leaves::Line;

    fn text(text: &str) -> Value {
        Value::String(text.to_owned())
    }

    #[test]
    fn spells_are_read_and_may_run_over_midnight() {
        let spells = Spells::read(&text("22:00-02:00 at 18 °C")).unwrap();
        assert_eq!(spells.0[0].hours().collect::<Vec<_>>(), [22, 23, 0, 1]);
        assert_eq!(spells.0[0].set_point_c, Some(18.0));
        assert_eq!(
            Spells::read(&text("all day")).unwrap().clock_hours(),
            ClockHours::ALL
        );
        for bad in [
            "6-9",
            "06:30-09:00",
            "09:00-09:00",
            "24:00-03:00",
            "06:00-25:00",
            "06:00-09:00 at 20",
        ] {
            assert!(Spells::read(&text(bad)).is_err(), "{bad}");
        }
    }

    #[test]
    fn days_lines_and_losses_are_read_or_refused() {
        let spans = DaySpans::read(&text("1 October to 30 Apr")).unwrap();
        assert_eq!(
            spans.0,
            [DaySpan {
                from: (10, 1),
                to: (4, 30)
            }]
        );
        for bad in ["1 Oct", "31 Feb to 1 Mar", "Oct 1 to Apr 30"] {
            assert!(DaySpans::read(&text(bad)).is_err(), "{bad}");
        }
        let line: Value = Value::Array(vec![text("15 °C / 30 °C"), text("-3 °C / 50 °C")]);
        assert_eq!(
            Line::read(&line).unwrap(),
            Line {
                cold: (-3.0, 50.0),
                mild: (15.0, 30.0)
            }
        );
        let rising: Value = Value::Array(vec![text("15 °C / 50 °C"), text("-3 °C / 30 °C")]);
        assert!(Line::read(&rising).is_err());
        assert!(WarmUp::read(&text("90 min")).is_err() && WarmUp::read(&text("3 h")).is_ok());
        assert!(ClockHour::read(&text("13:30")).is_err());
    }
}
