//! Reading hourly values from a CSV file: one column of times, one of numbers.
//!
//! Times are ISO 8601, `2024-01-31T15:00Z` or `2024-01-31 15:00`. Nothing is filled in: where a price is missing, any
//! other number would be an invention.

use std::path::Path;

use chrono::{DateTime, Duration, Utc};

use super::layout::{Layout, Stamp, WithinHour};
use super::time::{Wrong, instant};
use super::{Series, say};
use crate::limits::check_lines;
use crate::problem::{Place, Problem, Problems};

/// Header of the column of times.
const TIME: &str = "time";
/// Problems told of one file: enough to see the pattern.
const MOST_PROBLEMS: usize = 20;
/// Fewest intervals that show how long they are.
const FEWEST: usize = 2;
/// Seconds in an hour.
const HOUR_S: i64 = 3600;

/// Reads the values of a file.
///
/// # Errors
/// Every line that cannot be used: a time or number that is not one, a time twice, out of order or after a gap; or
/// intervals that do not make up hours.
pub fn read_csv(path: &Path, layout: &Layout) -> Result<Series, Problems> {
    let text = crate::series::open(path)?;
    read_text(&path.display().to_string(), &text, layout)
}

/// Reads the values of a text, with the name of the file it came from.
///
/// # Errors
/// As [`read_csv`].
pub fn read_text(file: &str, text: &str, layout: &Layout) -> Result<Series, Problems> {
    let place = Place::file(file);
    check_lines(text).map_err(|beyond| {
        let place = place.clone().at_line(beyond.line.unwrap_or(0));
        Problem::new(place, beyond.found, beyond.allowed, "")
    })?;
    let mut reader = csv::ReaderBuilder::new()
        .comment(Some(b'#'))
        .trim(csv::Trim::All)
        .flexible(true)
        .from_reader(text.as_bytes());
    let headers = match reader.headers() {
        Ok(headers) => headers.clone(),
        Err(error) => return Err(unreadable(&place, &error)),
    };
    let (time, value) = columns(&headers, layout, &place)?;
    let name = headers.get(value).unwrap_or("").to_owned();
    let mut problems = Problems::new();
    let mut rows: Vec<(usize, DateTime<Utc>, f64)> = Vec::new();
    for record in reader.records() {
        let record = match record {
            Ok(record) => record,
            Err(error) => {
                problems.extend(unreadable(&place, &error));
                break;
            }
        };
        let line = record.position().map_or(0, |position| position.line());
        let line = usize::try_from(line).unwrap_or(0);
        let at = place.clone().at_line(line);
        let before = rows.last().map(|row| row.1);
        let instant = instant(record.get(time).unwrap_or(""), layout.zone, before)
            .map_err(|problem| problem.at(at.clone().in_field(TIME)));
        let number = number(record.get(value).unwrap_or(""))
            .map_err(|problem| problem.at(at.in_field(name.as_str())));
        match (instant, number) {
            (Ok(instant), Ok(number)) => rows.push((line, instant, number)),
            (instant, number) => {
                for problem in [instant.err(), number.err()].into_iter().flatten() {
                    problems.push(problem);
                }
            }
        }
    }
    // A refused line leaves a gap that is no news.
    limited(problems)?;
    hours(&place, rows, layout)
}

fn unreadable(place: &Place, error: &csv::Error) -> Problems {
    let line = error.position().map_or(0, |position| position.line());
    let place = place.clone().at_line(usize::try_from(line).unwrap_or(0));
    Problem::new(place, error.to_string(), "comma-separated values", "").into()
}

/// At most [`MOST_PROBLEMS`], and how many more there were.
fn limited(problems: Problems) -> Result<(), Problems> {
    let count = problems.len();
    if count <= MOST_PROBLEMS {
        return problems.or(());
    }
    let mut first = Problems::new();
    let mut last = Place::default();
    for problem in problems.iter().take(MOST_PROBLEMS) {
        first.push(problem.clone());
        last = problem.place.clone();
    }
    last.field = None;
    last.line = last.line.map(|line| line + 1);
    let more = format!("{} more problems from here on", count - MOST_PROBLEMS);
    first.push(Problem::new(last, more, "", ""));
    first.or(())
}

/// Places of the two columns.
fn columns(
    headers: &csv::StringRecord,
    layout: &Layout,
    place: &Place,
) -> Result<(usize, usize), Problems> {
    let line = headers.position().map_or(1, |position| position.line());
    let line = usize::try_from(line).unwrap_or(1);
    let names: Vec<_> = headers.iter().collect();
    let find = |wanted: &str| names.iter().position(|name| *name == wanted);
    let refuse = |found: String, remedy: &str| {
        let allowed = format!("a column \"{TIME}\" and one of values");
        Problems::from(Problem::new(
            place.clone().at_line(line),
            found,
            allowed,
            remedy,
        ))
    };
    let listed = names.join(", ");
    let Some(time) = find(TIME) else {
        let found = format!("no column \"{TIME}\" among {listed}");
        return Err(refuse(found, "name the columns in the first line"));
    };
    let value = match &layout.column {
        Some(column) => find(column).ok_or_else(|| {
            let found = format!("no column \"{column}\" among {listed}");
            refuse(found, "write column = \"…\" as it stands in the first line")
        })?,
        None => match names.len() {
            2 => 1 - time,
            count => {
                let found = format!("{count} columns: {listed}");
                return Err(refuse(found, "say which one with column = \"…\""));
            }
        },
    };
    Ok((time, value))
}

fn number(text: &str) -> Result<f64, Wrong> {
    let wrong = |found: String| Wrong {
        found,
        allowed: "a number with a decimal point",
        remedy: "no value is filled in: put the right one",
    };
    if text.is_empty() {
        return Err(wrong("blank".to_owned()));
    }
    let number = text.parse().ok().filter(|number: &f64| number.is_finite());
    number.ok_or_else(|| wrong(format!("\"{text}\" is not a number")))
}

/// Rows in order, without gaps, as hours.
fn hours(
    place: &Place,
    rows: Vec<(usize, DateTime<Utc>, f64)>,
    layout: &Layout,
) -> Result<Series, Problems> {
    let refuse = |line: Option<usize>, found: String, allowed: &str, remedy: &str| {
        let mut place = place.clone().in_field(TIME);
        place.line = line;
        Problem::new(place, found, allowed, remedy)
    };
    let gaps = rows
        .windows(2)
        .map(|pair| (pair[1].1 - pair[0].1).num_seconds());
    let step = gaps.filter(|&gap| gap > 0).min().unwrap_or(0);
    if rows.len() < FEWEST || step == 0 || HOUR_S % step != 0 {
        let found = if rows.len() < FEWEST || step == 0 {
            format!("{} usable lines", rows.len())
        } else {
            format!("values {} minutes apart", step as f64 / 60.0)
        };
        let allowed = "values every hour, or evenly within the hour";
        return Err(refuse(None, found, allowed, "give hourly values").into());
    }
    let mut problems = Problems::new();
    for pair in rows.windows(2) {
        let [(_, before, _), (line, here, _)] = pair else {
            continue;
        };
        let gap = (*here - *before).num_seconds();
        let expected = *before + Duration::seconds(step);
        if gap == 0 {
            let found = format!("{} a second time", say(*here));
            problems.push(refuse(
                Some(*line),
                found,
                "each time once",
                "remove one of the two",
            ));
        } else if gap < 0 {
            let found = format!("{} after {}", say(*here), say(*before));
            problems.push(refuse(
                Some(*line),
                found,
                "times in order",
                "sort the lines by time",
            ));
        } else if gap != step {
            let found = format!("nothing from {} to {}", say(expected), say(*here));
            let remedy = "no value is filled in: add the missing lines";
            problems.push(refuse(Some(*line), found, "no gaps", remedy));
        }
    }
    limited(problems)?;
    let back = match layout.stamp {
        Stamp::Beginning => 0,
        Stamp::Ending => step,
    };
    let Some(&(line, first, _)) = rows.first() else {
        return Ok(Series::new(DateTime::<Utc>::default(), Vec::new()));
    };
    let start = first - Duration::seconds(back);
    let per_hour = usize::try_from(HOUR_S / step).unwrap_or(1);
    if start.timestamp().rem_euclid(HOUR_S) != 0 || !rows.len().is_multiple_of(per_hour) {
        let found = format!(
            "{} values from {}, {per_hour} an hour",
            rows.len(),
            say(start)
        );
        let remedy = "begin and end on the hour; do the times mark the beginning or the end of the interval?";
        return Err(refuse(Some(line), found, "whole hours", remedy).into());
    }
    let hour = |rows: &[(usize, DateTime<Utc>, f64)]| {
        let sum: f64 = rows.iter().map(|row| row.2).sum();
        match layout.within_hour {
            WithinHour::Mean => sum / rows.len() as f64,
            WithinHour::Sum => sum,
        }
    };
    Ok(Series::new(
        start,
        rows.chunks(per_hour).map(hour).collect(),
    ))
}

#[cfg(test)]
mod tests {
    use super::*;

    fn layout(zone: &str, stamp: Stamp) -> Layout {
        Layout {
            column: None,
            stamp,
            zone: zone.parse().unwrap(),
            within_hour: WithinHour::Mean,
        }
    }

    fn utc(text: &str) -> Result<Series, Problems> {
        read_text("p.csv", text, &layout("UTC", Stamp::Beginning))
    }

    #[test]
    fn hours_and_parts_of_hours_are_read() {
        let series = utc("time,price\n2024-01-01T00:00Z,1\n2024-01-01T01:00Z,-2.5\n").unwrap();
        assert_eq!(series.values(), [1.0, -2.5]);
        assert_eq!(series.start().to_string(), "2024-01-01 00:00:00 UTC");
        let halves = "time,price\n2024-01-01 00:00,1\n2024-01-01 00:30,2\n2024-01-01 01:00,3\n2024-01-01 01:30,5\n";
        assert_eq!(utc(halves).unwrap().values(), [1.5, 4.0]);
        let sum = Layout {
            within_hour: WithinHour::Sum,
            ..layout("UTC", Stamp::Beginning)
        };
        let summed = read_text("p", halves, &sum).unwrap();
        assert_eq!(summed.values(), [3.0, 8.0]);
    }

    /// Stamps at the end of the hour name the hour before them; read as beginnings all prices move by an hour.
    #[test]
    fn ending_stamps_are_brought_to_the_beginning() {
        let text = "time,price\n2024-01-01 23:00,1\n2024-01-01 24:00,2\n";
        let ending = read_text("p", text, &layout("UTC", Stamp::Ending)).unwrap();
        let beginning = utc(text).unwrap();
        assert_eq!(ending.start().to_string(), "2024-01-01 22:00:00 UTC");
        assert_eq!(beginning.start() - ending.start(), Duration::hours(1));
    }

    /// Clock changes of 2023, Directive 2000/84/EC: 26 March 01:00 UTC and 29 October 01:00 UTC.
    #[test]
    fn wall_clock_times_follow_both_clock_changes() {
        let berlin = layout("Europe/Berlin", Stamp::Beginning);
        let autumn = "time,p\n2023-10-29 01:00,1\n2023-10-29 02:00,2\n2023-10-29 02:00,3\n2023-10-29 03:00,4\n";
        assert_eq!(
            read_text("p", autumn, &berlin).unwrap().values(),
            [1.0, 2.0, 3.0, 4.0]
        );
        let spring = "time,p\n2023-03-26 01:00,1\n2023-03-26 03:00,2\n2023-03-26 04:00,3\n";
        assert_eq!(
            read_text("p", spring, &berlin).unwrap().values(),
            [1.0, 2.0, 3.0]
        );
        let skipped = "time,p\n2023-03-26 01:00,1\n2023-03-26 02:00,2\n2023-03-26 04:00,3\n";
        let problems = read_text("p", skipped, &berlin).unwrap_err();
        assert!(
            problems
                .to_string()
                .contains("does not exist in Europe/Berlin"),
            "{problems}"
        );
    }

    #[test]
    fn every_bad_line_is_told_at_once() {
        let text = "time,price\n2024-01-01 00:00,1\nyesterday,2\n2024-01-01 02:00,\n2024-01-01 03:00,1;5\n";
        let problems = utc(text).unwrap_err();
        let lines: Vec<_> = problems.iter().map(|p| p.place.line.unwrap()).collect();
        assert_eq!(lines, [3, 4, 5]);
    }

    #[test]
    fn gaps_repeats_and_disorder_have_their_line() {
        let head = "time,price\n2024-01-01 00:00,1\n2024-01-01 01:00,1\n";
        for (tail, said) in [
            (
                "2024-01-01 04:00,1\n",
                "nothing from 2024-01-01 02:00 UTC to 2024-01-01 04:00 UTC",
            ),
            ("2024-01-01 01:00,1\n", "a second time"),
            ("2023-12-31 00:00,1\n", "2023-12-31 00:00 UTC after"),
        ] {
            let problems = utc(&format!("{head}{tail}")).unwrap_err();
            let first = problems.iter().next().unwrap();
            assert_eq!(first.place.line, Some(4));
            assert!(problems.to_string().contains(said), "{problems}");
        }
    }

    #[test]
    fn intervals_must_make_hours_and_columns_must_be_named() {
        let day = "time,p\n2024-01-01 00:00,1\n2024-01-02 00:00,1\n";
        assert!(
            utc(day)
                .unwrap_err()
                .to_string()
                .contains("1440 minutes apart")
        );
        let half = "time,p\n2024-01-01 00:30,1\n2024-01-01 01:00,1\n";
        assert!(utc(half).unwrap_err().to_string().contains("whole hours"));
        assert!(
            utc("when,p\n")
                .unwrap_err()
                .to_string()
                .contains("no column \"time\"")
        );
        assert!(
            utc("time,a,b\n")
                .unwrap_err()
                .to_string()
                .contains("3 columns")
        );
        assert!(utc("").is_err() && utc("time,p\n").is_err());
        let many: String = (0..99).map(|i| format!("x{i},1\n")).collect();
        assert_eq!(
            utc(&format!("time,p\n{many}")).unwrap_err().len(),
            MOST_PROBLEMS + 1
        );
    }

    proptest::proptest! {
        #[test]
        fn any_text_is_read_or_refused(text in "(time|,|\n|2024-0[1-3]-[0-3][0-9] [0-2][0-9]:[0-5]0|[0-9.\"-])*") {
            if let Err(problems) = utc(&text) {
                proptest::prop_assert!(!problems.is_empty());
            }
        }
    }
}
