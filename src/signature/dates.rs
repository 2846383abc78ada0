//! The dates of a file of readings: in which order they are written, and months in place of dates.

use chrono::{Months, NaiveDate};

use crate::problem::{Place, Problem};
use crate::weather::{DateForm, date, order_in_heading};

/// Orders that a date may have, the least ambiguous first.
const FORMS: [DateForm; 4] = [
    DateForm::YearFirst,
    DateForm::DayFirst,
    DateForm::MonthFirst,
    DateForm::Compact,
];

/// The order in which a file writes its dates: what its heading states, else the one that reads every date and keeps them rising.
///
/// # Errors
/// When two orders read all of them as well.
pub(super) fn order(
    heading: Option<&str>,
    texts: &[&str],
    place: &Place,
) -> Result<DateForm, Problem> {
    if let Some(stated) = heading.and_then(|heading| order_in_heading(&heading.to_lowercase())) {
        return Ok(stated);
    }
    let read = |form: DateForm| texts.iter().filter_map(|text| date(text, form)).count();
    let most = FORMS.iter().map(|form| read(*form)).max().unwrap_or(0);
    let (day, month) = (DateForm::DayFirst, DateForm::MonthFirst);
    let best = FORMS
        .into_iter()
        .find(|form| read(*form) == most)
        .unwrap_or(DateForm::YearFirst);
    if best != day || read(month) < most || texts.iter().any(|text| text.contains('.')) {
        // Dates with dots are written day first.
        return Ok(best);
    }
    let falls = |form: DateForm| {
        let dates: Vec<_> = texts.iter().filter_map(|text| date(text, form)).collect();
        dates.windows(2).filter(|pair| pair[1] < pair[0]).count()
    };
    match falls(day).cmp(&falls(month)) {
        std::cmp::Ordering::Less => Ok(day),
        std::cmp::Ordering::Greater => Ok(month),
        std::cmp::Ordering::Equal
            if texts
                .iter()
                .all(|text| date(text, day) == date(text, month)) =>
        {
            Ok(day)
        }
        std::cmp::Ordering::Equal => Err(Problem::new(
            place.clone(),
            format!(
                "dates such as \"{}\" that may be read day first or month first",
                texts.first().unwrap_or(&"")
            ),
            "dates whose order is known",
            "say it in the heading, for example \"date (DD/MM/YYYY)\", or write 2023-01-31",
        )),
    }
}

/// An order as messages write it, with the last of January 2023 in it.
pub(super) fn example(form: DateForm) -> (&'static str, &'static str) {
    match form {
        DateForm::DayFirst => ("day/month/year", "31/01/2023"),
        DateForm::MonthFirst => ("month/day/year", "01/31/2023"),
        _ => ("year-month-day", "2023-01-31"),
    }
}

/// First day of a month and of the next: "2023-01", "2023/1", "01/2023", "January 2023", "Jan 23".
pub(super) fn month(text: &str) -> Option<(NaiveDate, NaiveDate)> {
    let parts: Vec<&str> = text
        .split(|c: char| !c.is_alphanumeric())
        .filter(|part| !part.is_empty())
        .collect();
    let [one, two] = parts[..] else { return None };
    let (year, month) = if one.len() == 4 && one.parse::<i32>().is_ok() {
        (one, two)
    } else {
        (two, one)
    };
    let number = month.parse::<u32>().ok();
    let number = number.or_else(|| {
        month
            .parse::<chrono::Month>()
            .ok()
            .map(|m| m.number_from_month())
    });
    let year: i32 = year.parse().ok()?;
    let year = if year < 100 { 2000 + year } else { year };
    let first = NaiveDate::from_ymd_opt(year, number?, 1)?;
    Some((first, first.checked_add_months(Months::new(1))?))
}

#[cfg(test)]
mod tests {
    use super::*;

    fn found(heading: Option<&str>, texts: &[&str]) -> Result<DateForm, Problem> {
        order(heading, texts, &Place::file("readings.csv"))
    }

    #[test]
    fn the_order_is_stated_seen_or_asked_for() {
        assert_eq!(
            found(None, &["2023-01-31", "2023-02-28"]),
            Ok(DateForm::YearFirst)
        );
        assert_eq!(
            found(None, &["31.01.2023", "01.02.2023"]),
            Ok(DateForm::DayFirst)
        );
        assert_eq!(
            found(None, &["01/02/2023", "02/28/2023"]),
            Ok(DateForm::MonthFirst)
        );
        // First days of months rise either way.
        let firsts = ["01/01/2023", "01/02/2023", "01/03/2023"];
        assert!(found(None, &firsts).is_err());
        assert_eq!(found(Some("DD/MM/YYYY"), &firsts), Ok(DateForm::DayFirst));
        // Other days may rise in one order alone.
        assert_eq!(
            found(None, &["05/01/2023", "03/02/2023"]),
            Ok(DateForm::DayFirst)
        );
    }

    #[test]
    fn months_are_read_by_number_and_name() {
        let january = |text: &str| month(text).map(|(from, to)| (from.to_string(), to.to_string()));
        let expected = Some(("2023-01-01".to_owned(), "2023-02-01".to_owned()));
        for text in [
            "2023-01",
            "2023/1",
            "01/2023",
            "January 2023",
            "Jan 2023",
            "jan-23",
        ] {
            assert_eq!(january(text), expected, "{text}");
        }
        assert_eq!(month("January"), None);
        assert_eq!(month("2023-13"), None);
    }
}
