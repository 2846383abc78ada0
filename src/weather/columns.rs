//! Which column of a file holds what: as the user says, else by the headings.

use super::heading::{self, Heading, Role};
use super::options::{Column, ColumnChoice};

/// Where the time stands; positions count from 0.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(super) enum TimeColumns {
    /// Date and time in one field.
    One(usize),
    /// A date and a time of day.
    Two { date: usize, clock: usize },
    /// Everything apart.
    Parts {
        year: usize,
        month: usize,
        day: usize,
        hour: usize,
        minute: Option<usize>,
    },
}

impl TimeColumns {
    /// The greatest position used.
    pub(super) fn last(self) -> usize {
        match self {
            Self::One(at) => at,
            Self::Two { date, clock } => date.max(clock),
            Self::Parts {
                year,
                month,
                day,
                hour,
                minute,
            } => year.max(month).max(day).max(hour).max(minute.unwrap_or(0)),
        }
    }
}

/// A column of readings and what its heading says of its unit.
#[derive(Debug, Clone, PartialEq, Eq)]
pub(super) struct ValueColumn {
    pub at: usize,
    pub unit: String,
}

/// Where everything stands.
#[derive(Debug, Clone, PartialEq, Eq)]
pub(super) struct Columns {
    /// Ways to read the time, the likeliest first; the readings decide.
    pub time: Vec<TimeColumns>,
    pub temperature: ValueColumn,
    pub humidity: Option<ValueColumn>,
    pub dew_point: Option<ValueColumn>,
    pub radiation: Option<ValueColumn>,
    pub wind: Option<ValueColumn>,
    /// What the time heading says of the date's form, such as `mm/dd/yyyy`.
    pub date_format: String,
    /// Whether the time heading says UTC.
    pub utc: bool,
    /// Whether the time heading says that stamps end (`true`) or begin (`false`) their hour.
    pub ending: Option<bool>,
    /// Optional quantities that several headings mean equally well, the first being taken.
    pub ties: Vec<(&'static str, Vec<String>)>,
}

/// Why the columns of a line cannot be told.
#[derive(Debug, Clone, PartialEq, Eq)]
pub(super) enum Unclear {
    /// No heading means this.
    None(&'static str),
    /// Several headings mean it equally well.
    Several(&'static str, Vec<String>),
    /// The column that the user named is not there.
    NotThere(&'static str, Column),
}

/// Settles the columns from the headings (which may be missing) and the user's choice.
///
/// # Errors
/// Everything that is unclear.
pub(super) fn settle(headings: &[String], choice: &ColumnChoice) -> Result<Columns, Vec<Unclear>> {
    let understood: Vec<Option<Heading>> =
        headings.iter().map(|h| heading::understand(h)).collect();
    let mut settling = Settling {
        headings,
        understood: &understood,
        unclear: Vec::new(),
        ties: Vec::new(),
    };
    let time = settling.time(choice);
    let temperature = settling.value("temperature", &choice.temperature, Role::Temperature);
    if temperature.is_none() && settling.unclear.iter().all(|u| !u.is_about("temperature")) {
        settling.unclear.push(Unclear::None("temperature"));
    }
    let humidity = settling.value("humidity", &choice.humidity, Role::Humidity);
    let dew_point = match (&humidity, &choice.dew_point) {
        // Two columns for one quantity: the humidity is used.
        (Some(_), None) => None,
        _ => settling.value("dew point", &choice.dew_point, Role::DewPoint),
    };
    let radiation = settling.value("radiation", &choice.radiation, Role::Radiation);
    let wind = settling.value("wind", &choice.wind, Role::Wind);
    let about_time = time.first().and_then(|columns| {
        let at = match *columns {
            TimeColumns::One(at) => at,
            TimeColumns::Two { date, .. } => date,
            TimeColumns::Parts { hour, .. } => hour,
        };
        understood.get(at).cloned().flatten()
    });
    let clock_heading = match time.first() {
        Some(TimeColumns::Two { clock, .. }) => understood.get(*clock).cloned().flatten(),
        _ => None,
    };
    match (temperature, settling.unclear.is_empty()) {
        (Some(temperature), true) => Ok(Columns {
            time,
            temperature,
            humidity,
            dew_point,
            radiation,
            wind,
            date_format: about_time
                .as_ref()
                .map(|h| h.unit.clone())
                .unwrap_or_default(),
            utc: [&about_time, &clock_heading]
                .iter()
                .any(|h| h.as_ref().is_some_and(|h| h.utc)),
            ending: about_time
                .and_then(|h| h.ending)
                .or(clock_heading.and_then(|h| h.ending)),
            ties: settling.ties,
        }),
        _ => Err(settling.unclear),
    }
}

impl Unclear {
    pub(super) fn is_about(&self, what: &str) -> bool {
        match self {
            Self::None(name) | Self::Several(name, _) | Self::NotThere(name, _) => *name == what,
        }
    }
}

struct Settling<'a> {
    headings: &'a [String],
    understood: &'a [Option<Heading>],
    unclear: Vec<Unclear>,
    ties: Vec<(&'static str, Vec<String>)>,
}

impl Settling<'_> {
    /// The position of a column that the user chose.
    fn chosen(&mut self, what: &'static str, column: &Column) -> Option<usize> {
        let at = match column {
            // A number needs no headings; that it is beyond the row's end shows when rows are read.
            Column::Numbered(number) => Some(number - 1),
            Column::Named(name) => {
                let name = name.trim();
                let exact = self.headings.iter().position(|h| h.trim() == name);
                exact.or_else(|| {
                    self.headings
                        .iter()
                        .position(|h| h.trim().to_lowercase() == name.to_lowercase())
                })
            }
        };
        if at.is_none() {
            self.unclear.push(Unclear::NotThere(what, column.clone()));
        }
        at
    }

    /// The surest column of a role.
    fn found(&mut self, what: &'static str, role: Role) -> Option<usize> {
        let ranks = || {
            self.understood
                .iter()
                .enumerate()
                .filter_map(|(at, heading)| {
                    let heading = heading.as_ref()?;
                    (heading.role == role).then_some((heading.rank, at))
                })
        };
        let (best, at) = ranks().min()?;
        let tied: Vec<_> = ranks().filter(|&(rank, _)| rank == best).collect();
        if tied.len() > 1 {
            let names = tied
                .iter()
                .map(|&(_, at)| self.headings[at].trim().to_owned())
                .collect();
            if matches!(what, "time" | "temperature") {
                self.unclear.push(Unclear::Several(what, names));
                return None;
            }
            self.ties.push((what, names));
        }
        Some(at)
    }

    fn value(
        &mut self,
        what: &'static str,
        choice: &Option<Column>,
        role: Role,
    ) -> Option<ValueColumn> {
        let at = match choice {
            Some(column) => self.chosen(what, column)?,
            None => self.found(what, role)?,
        };
        let unit = self
            .understood
            .get(at)
            .and_then(|h| h.as_ref())
            .map(|h| h.unit.clone());
        Some(ValueColumn {
            at,
            unit: unit.unwrap_or_default(),
        })
    }

    fn time(&mut self, choice: &ColumnChoice) -> Vec<TimeColumns> {
        if let Some(parts) = &choice.parts {
            let year = self.chosen("year", &parts.year);
            let month = self.chosen("month", &parts.month);
            let day = self.chosen("day", &parts.day);
            let hour = self.chosen("hour", &parts.hour);
            let minute = parts
                .minute
                .as_ref()
                .map(|column| self.chosen("minute", column));
            return match (year, month, day, hour, minute) {
                (Some(year), Some(month), Some(day), Some(hour), None | Some(Some(_))) => {
                    vec![TimeColumns::Parts {
                        year,
                        month,
                        day,
                        hour,
                        minute: minute.flatten(),
                    }]
                }
                _ => Vec::new(),
            };
        }
        if let Some(column) = &choice.time {
            let date = self.chosen("time", column);
            let clock = choice
                .clock
                .as_ref()
                .map(|column| self.chosen("clock", column));
            return match (date, clock) {
                (Some(at), None) => vec![TimeColumns::One(at)],
                (Some(date), Some(Some(clock))) => vec![TimeColumns::Two { date, clock }],
                _ => Vec::new(),
            };
        }
        let before = self.unclear.len();
        let stamp = self.found("time", Role::Stamp);
        let date = self.found("time", Role::Date);
        let time = self.found("time", Role::Time);
        let mut part = |role| self.found("time", role);
        let (year, month, day) = (part(Role::Year), part(Role::Month), part(Role::Day));
        let (hour, minute) = (part(Role::Hour), part(Role::Minute));
        let mut ways = Vec::new();
        if let Some(at) = stamp {
            ways.push(TimeColumns::One(at));
        }
        if let (Some(date), Some(clock)) = (date, time.or(hour)) {
            ways.push(TimeColumns::Two { date, clock });
        }
        if let (Some(year), Some(month), Some(day), Some(hour)) = (year, month, day, hour) {
            ways.push(TimeColumns::Parts {
                year,
                month,
                day,
                hour,
                minute,
            });
        }
        ways.extend(time.map(TimeColumns::One));
        ways.extend(date.map(TimeColumns::One));
        if ways.is_empty() && self.unclear.len() == before {
            self.unclear.push(Unclear::None("time"));
        } else if !ways.is_empty() {
            // A tie between columns that are not needed is no trouble.
            self.unclear.truncate(before);
        }
        ways
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn settle_line(line: &str, choice: &ColumnChoice) -> Result<Columns, Vec<Unclear>> {
        let headings: Vec<_> = line.split(',').map(str::to_owned).collect();
        settle(&headings, choice)
    }

    #[test]
    fn columns_are_found_by_their_headings() {
        let found = settle_line(
            "station,date,time,dew point (C),temp (C),RH",
            &Default::default(),
        )
        .unwrap();
        assert_eq!(found.time[0], TimeColumns::Two { date: 1, clock: 2 });
        assert_eq!(
            (found.temperature.at, found.temperature.unit.as_str()),
            (4, "c")
        );
        assert_eq!(found.humidity.map(|c| c.at), Some(5));
        assert_eq!(found.dew_point, None);
        let found = settle_line("time,temp,dew point (C)", &Default::default()).unwrap();
        assert_eq!(found.dew_point.map(|c| c.at), Some(2));
    }

    #[test]
    fn the_outdoor_column_is_surer_than_a_plain_one() {
        let found =
            settle_line("time,temperature,outdoor temperature", &Default::default()).unwrap();
        assert_eq!(found.temperature.at, 2);
    }

    #[test]
    fn a_tie_names_both_columns_and_a_choice_settles_it() {
        let line = "time,air temperature (C),outside temperature (C)";
        let tie = settle_line(line, &Default::default()).unwrap_err();
        assert!(matches!(&tie[..], [Unclear::Several("temperature", names)] if names.len() == 2));
        let choice = ColumnChoice {
            temperature: Some(Column::Named("Outside temperature (c)".to_owned())),
            ..Default::default()
        };
        assert_eq!(settle_line(line, &choice).unwrap().temperature.at, 2);
    }

    #[test]
    fn a_column_that_is_not_there_is_named() {
        let choice = ColumnChoice {
            temperature: Some(Column::Named("t_out".to_owned())),
            ..Default::default()
        };
        let missing = settle_line("time,temp", &choice).unwrap_err();
        assert_eq!(
            missing,
            [Unclear::NotThere(
                "temperature",
                Column::Named("t_out".to_owned())
            )]
        );
    }

    #[test]
    fn parts_are_found_and_numbers_need_no_headings() {
        let found = settle_line("year,month,day,hour,temp", &Default::default()).unwrap();
        assert!(matches!(
            found.time[0],
            TimeColumns::Parts {
                year: 0,
                hour: 3,
                minute: None,
                ..
            }
        ));
        let choice = ColumnChoice {
            time: Some(Column::Numbered(1)),
            temperature: Some(Column::Numbered(3)),
            ..Default::default()
        };
        let found = settle(&[], &choice).unwrap();
        assert_eq!(
            (found.time[0], found.temperature.at),
            (TimeColumns::One(0), 2)
        );
    }
}
