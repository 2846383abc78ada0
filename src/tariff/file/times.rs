//! When a price holds: clock times, days, season.

use super::parsed;
use crate::document::{Check, Leaf};
use crate::tariff::{Days, Season, When, Window, parse_clock};
use crate::units::UnitProblem;

/// Clock times, days and season of `from`, `to`, `days`, `season`.
pub(super) fn when(
    check: &mut Check,
    [from, to, days, season]: [&Option<Leaf<String>>; 4],
) -> Option<When> {
    let problem = |found: String, allowed: &str, remedy: &str| UnitProblem {
        found,
        allowed: allowed.to_owned(),
        remedy: remedy.to_owned(),
    };
    let clock = |text: &str| {
        parse_clock(text).ok_or_else(|| {
            let allowed = "a clock time from 00:00 to 24:00";
            problem(
                format!("\"{text}\""),
                allowed,
                "write for example \"07:30\"",
            )
        })
    };
    // Every field is looked at before any is given up, so that all problems come at once.
    let mut right = true;
    let mut read = |check: &mut Check, leaf: &Option<Leaf<String>>, missing| {
        let minute = parsed(check, leaf, clock);
        right &= leaf.is_none() || minute.is_some();
        minute.unwrap_or(missing)
    };
    let (from_minute, to_minute) = (read(check, from, 0), read(check, to, 24 * 60));
    let window = Window::new(from_minute, to_minute);
    if let (None, Some(leaf), true) = (window, to.as_ref().or(from.as_ref()), right) {
        check.refuse(
            &leaf.span(),
            "from and to are the same time",
            "two clock times",
            "leave both out for the whole day",
        );
    }
    let held_days = parsed(check, days, |text| {
        Days::parse(text).ok_or_else(|| {
            let allowed = "\"every day\", \"weekdays\", \"weekends\", or names of days";
            problem(
                format!("\"{text}\""),
                allowed,
                "write for example \"Sat, Sun\"",
            )
        })
    });
    let held_season = parsed(check, season, |text| {
        Season::parse(text).ok_or_else(|| {
            let allowed = "a first and a last day, or whole months";
            let remedy = "write for example \"1 Nov to 31 Mar\" or \"Nov to Mar\"";
            problem(format!("\"{text}\""), allowed, remedy)
        })
    });
    right &= days.is_none() || held_days.is_some();
    right &= season.is_none() || held_season.is_some();
    right.then_some(When {
        window: window?,
        days: held_days.unwrap_or(Days::ALL),
        season: held_season.unwrap_or(Season::ALL_YEAR),
    })
}
