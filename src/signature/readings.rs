//! Meter readings from a CSV: a register read on dates, or what was used from a date to another.

use chrono::NaiveDate;

use super::dates::order;
use super::pieces::{ends_are_last_days, from_consumption, from_register, join_estimated};
use super::rows::{EXAMPLE, HEADING, Written, columns, row, unreadable};
use crate::limits::check_lines;
use crate::problem::{Finding, Place, Problem, Problems, Severity};
use crate::units::{CalorificValue, Fuel};
use crate::weather::DateForm;

/// How metered amounts become gross kilowatt-hours.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Conversion {
    /// What is metered.
    pub fuel: Fuel,
    /// Calorific value, gross, for rows that carry none.
    pub calorific_value: Option<CalorificValue>,
    /// From a metered volume to the conditions of the calorific value.
    pub volume_correction: f64,
}

/// What was used between two dates.
#[derive(Debug, Clone, PartialEq)]
pub struct Interval {
    /// First day.
    pub from: NaiveDate,
    /// Day after the last; a reading is taken as made when its day begins.
    pub to: NaiveDate,
    /// Gross energy, kWh.
    pub kwh: f64,
    /// Line of the file that ends it.
    pub line: usize,
}

/// Readings that can be used.
#[derive(Debug, Clone, PartialEq)]
pub struct Readings {
    /// Intervals in order, apart.
    pub intervals: Vec<Interval>,
    /// What was joined or left out.
    pub findings: Vec<Finding>,
}

impl Readings {
    /// Reads a CSV with a line of headings. Lines that begin with # are passed over.
    ///
    /// Estimated readings are joined to the next one that was read, since they are corrected by it.
    ///
    /// # Errors
    /// Every line that cannot be used: dates out of order or overlapping, a register that runs backwards, an amount that no
    /// home uses, a missing calorific value.
    pub fn read(name: &str, text: &str, conversion: &Conversion) -> Result<Self, Problems> {
        let text = text.strip_prefix('\u{feff}').unwrap_or(text);
        let first = text
            .lines()
            .find(|line| !line.starts_with('#'))
            .unwrap_or("");
        let semicolons = first.matches(';').count() > first.matches(',').count();
        let mut reader = csv::ReaderBuilder::new()
            .comment(Some(b'#'))
            .delimiter(if semicolons { b';' } else { b',' })
            .trim(csv::Trim::All)
            .from_reader(text.as_bytes());
        let mut problems = Problems::new();
        let place = Place::file(name);
        check_lines(text).map_err(|beyond| {
            let place = place.clone().at_line(beyond.line.unwrap_or(0));
            Problem::new(place, beyond.found, beyond.allowed, "")
        })?;
        if first.trim().is_empty() {
            return Err(Problem::new(place, "no line of headings", HEADING, EXAMPLE).into());
        }
        let columns = match reader.headers() {
            Ok(headings) => problems.take(columns(headings, &place)),
            Err(error) => {
                problems.push(unreadable(&error, &place));
                None
            }
        };
        let Some(columns) = columns else {
            return problems.or(()).and(Err(Problems::new()));
        };
        let mut records = Vec::new();
        for record in reader.records() {
            match record {
                Ok(record) => records.push(record),
                Err(error) => problems.push(unreadable(&error, &place)),
            }
        }
        let dates: Vec<&str> = records
            .iter()
            .flat_map(|record| {
                let from = columns.from.and_then(|column| record.get(column));
                from.into_iter().chain(record.get(columns.date))
            })
            .collect();
        let order = if columns.by_month {
            Ok(DateForm::YearFirst)
        } else {
            order(columns.order.as_deref(), &dates, &place)
        };
        let written = Written {
            order: order?,
            decimal_comma: semicolons
                && records.iter().any(|record| {
                    record
                        .get(columns.amount)
                        .is_some_and(|text| text.contains(','))
                }),
        };
        let mut rows = Vec::with_capacity(records.len());
        for record in &records {
            rows.extend(problems.take(row(record, &columns, written, &place)));
        }
        let mut findings = Vec::new();
        let pieces = if columns.is_register {
            from_register(&rows, &place, &mut problems)
        } else {
            if ends_are_last_days(&rows) {
                findings.push(
                    Finding::new(
                        Severity::Note,
                        "each period begins the day after the one before ends",
                        "the ends were taken as last days of their periods, as bills print them",
                    )
                    .at(&place),
                );
                for row in &mut rows {
                    row.date = row.date.succ_opt().unwrap_or(row.date);
                }
            }
            from_consumption(&rows, &place, &mut problems)
        };
        let pieces = join_estimated(pieces, &place, &mut findings);
        let mut intervals = Vec::with_capacity(pieces.len());
        for piece in &pieces {
            intervals.extend(problems.take(piece.interval(columns.unit, conversion, &place)));
        }
        if intervals.is_empty() && problems.is_empty() {
            problems.push(Problem::new(
                place,
                "no interval between two readings",
                "at least two readings of the register, or one line of consumption",
                "",
            ));
        }
        collapsed(problems).or(Self {
            intervals,
            findings,
        })
    }
}

/// So many lines may each have their own message of the same kind.
const MOST_ALIKE: usize = 3;

/// The same thing wrong with many lines is said once.
fn collapsed(problems: Problems) -> Problems {
    let all: Vec<_> = problems.iter().cloned().collect();
    let alike = |a: &Problem, b: &Problem| {
        a.place.field == b.place.field && a.allowed == b.allowed && a.remedy == b.remedy
    };
    let mut shown = Problems::new();
    for (i, problem) in all.iter().enumerate() {
        let number = all.iter().filter(|other| alike(problem, other)).count();
        if number <= MOST_ALIKE {
            shown.push(problem.clone());
        } else if !all[..i].iter().any(|other| alike(problem, other)) {
            let line = problem.place.line.unwrap_or(0);
            shown.push(Problem {
                found: format!(
                    "{} (the first of {number} lines, line {line})",
                    problem.found
                ),
                ..problem.clone()
            });
        }
    }
    shown
}

#[cfg(test)]
mod tests {
    use super::*;

    fn conversion() -> Conversion {
        Conversion {
            fuel: Fuel::Gas,
            calorific_value: None,
            volume_correction: 1.02264,
        }
    }

    fn read(text: &str) -> Result<Readings, Problems> {
        Readings::read("readings.csv", text, &conversion())
    }

    /// British gas bills, m³ × 1.02264 × 39.3 / 3.6: 100 m³ at 39.3 MJ/m³ are 1116.382 kWh.
    #[test]
    fn a_register_becomes_gross_energy() {
        let text = "# invented\ndate,register (m³),calorific value (MJ/m³)\n2023-01-01,1000,39.3\n2023-02-01,1100,39.3\n2023-02-15,1150,39.3\n";
        let readings = read(text).unwrap();
        assert_eq!(readings.intervals.len(), 2);
        assert!((readings.intervals[0].kwh - 1116.382).abs() < 1e-3);
        assert_eq!(
            (readings.intervals[1].to - readings.intervals[1].from).num_days(),
            14
        );
    }

    #[test]
    fn an_endless_line_is_refused() {
        let text = format!("date,register (kWh)\n2023-01-01,{}\n", "1".repeat(70_000));
        let problem = read(&text).unwrap_err();
        assert!(problem.to_string().contains("at most 64 KiB"), "{problem}");
    }

    #[test]
    fn estimates_are_joined_and_a_changed_meter_starts_anew() {
        let text = "date,register (kWh),estimated,meter\n2023-01-01,0,,a\n2023-02-01,900,yes,a\n2023-03-01,1500,no,a\n2023-03-01,7,,b\n2023-04-01,407,,b\n2023-05-01,500,yes,b\n";
        let readings = read(text).unwrap();
        let kwh: Vec<_> = readings
            .intervals
            .iter()
            .map(|interval| interval.kwh)
            .collect();
        assert_eq!(kwh, [1500.0, 400.0]);
        assert_eq!(readings.findings.len(), 2);
        assert!(
            readings.findings[1]
                .what
                .contains("2023-04-01 to 2023-05-01"),
            "{:?}",
            readings.findings
        );
    }

    #[test]
    fn consumption_may_have_holes() {
        let text =
            "from;to;consumption (kWh)\n2023-01-01;2023-02-01;900\n2023-03-01;2023-04-01;500\n";
        assert_eq!(read(text).unwrap().intervals.len(), 2);
    }

    #[test]
    fn paper_bills_are_read_as_they_are_printed() {
        let text =
            "from;to;consumption (kWh)\n01.01.2023;31.01.2023;900,5\n01.02.2023;28.02.2023;800\n";
        let found = read(text).unwrap();
        assert_eq!(found.intervals[0].kwh, 900.5);
        let to = found.intervals.iter().map(|one| one.to.to_string());
        assert_eq!(to.collect::<Vec<_>>(), ["2023-02-01", "2023-03-01"]);
        assert!(found.findings[0].what.contains("day after"));
        let table = read("Month,kWh\n2023-01,900\nFeb 2023,800\n").unwrap();
        assert_eq!(table.intervals[1].to.to_string(), "2023-03-01");
        assert!(table.findings.is_empty());
    }

    #[test]
    fn what_is_wrong_with_many_lines_is_said_once() {
        let lines: String = (1..=12).map(|i| format!("Month {i},900\n")).collect();
        let problems = read(&format!("Month,kWh\n{lines}")).unwrap_err();
        assert_eq!(problems.len(), 1);
        let told = problems.to_string();
        assert!(
            told.contains("first of 12 lines, line 2") && told.contains("2023-01,1905"),
            "{told}"
        );
    }

    proptest::proptest! {
        #[test]
        fn any_text_is_read_or_refused(text in "(date|register|from|to|consumption|\\(kWh\\)|2023-0[1-9]-0[1-9]|[0-9.]{1,4}|,|\n|;|\"|#)*") {
            if let Err(problems) = read(&text) {
                proptest::prop_assert!(!problems.is_empty(), "{text}");
            }
        }
    }
}
