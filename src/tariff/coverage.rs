//! Do the bands give every minute of every day one price, and only one?

use std::collections::BTreeMap;

use chrono::Weekday;

use super::clock::{MINUTES, When, clock};
use super::days::{Days, YearDay};

/// Something wrong with a set of bands.
#[derive(Debug, Clone, PartialEq, Eq)]
pub enum Flaw {
    /// Minutes without a price, with the days they are missing on.
    Hole {
        /// Clock times, such as `07:00–07:30`.
        clock: String,
        /// Days in words.
        days: String,
    },
    /// Two bands for one minute: their places in the list.
    Overlap {
        /// The earlier band.
        first: usize,
        /// The later one.
        second: usize,
        /// Clock times.
        clock: String,
        /// Days in words.
        days: String,
    },
}

/// Days of the year, each with the weekdays that it may fall on.
type DaySet = Vec<(YearDay, Weekday)>;

/// Every flaw of a list of bands, each once, with all the days it occurs on.
pub fn flaws(bands: &[When]) -> Vec<Flaw> {
    // The same flaw on several kinds of day is one flaw.
    let mut found: BTreeMap<(u8, usize, usize, String), DaySet> = BTreeMap::new();
    for (active, days) in kinds(bands) {
        for (from, to, cover) in runs(bands, &active) {
            let clock = format!("{}–{}", clock(from), clock(to));
            let key = match cover {
                (None, _) => (0, 0, 0, clock),
                (Some(first), Some(second)) => (1, first, second, clock),
                (Some(_), None) => continue,
            };
            found.entry(key).or_default().extend(&days);
        }
    }
    found
        .into_iter()
        .map(|((kind, first, second, clock), days)| {
            let days = say_days(&days);
            if kind == 0 {
                Flaw::Hole { clock, days }
            } else {
                Flaw::Overlap {
                    first,
                    second,
                    clock,
                    days,
                }
            }
        })
        .collect()
}

/// The days of the week, Monday first.
const WEEK: [Weekday; 7] = [
    Weekday::Mon,
    Weekday::Tue,
    Weekday::Wed,
    Weekday::Thu,
    Weekday::Fri,
    Weekday::Sat,
    Weekday::Sun,
];

/// Which bands hold at a minute: the first, and a second if there is one.
type Cover = (Option<usize>, Option<usize>);

/// Days on which the same bands hold are one kind of day: the bands, and the days.
fn kinds(bands: &[When]) -> BTreeMap<Vec<usize>, DaySet> {
    let mut kinds: BTreeMap<Vec<usize>, DaySet> = BTreeMap::new();
    for day in YearDay::all() {
        for weekday in WEEK {
            let active = (0..bands.len())
                .filter(|&i| bands.get(i).is_some_and(|band| band.on(day, weekday)))
                .collect();
            kinds.entry(active).or_default().push((day, weekday));
        }
    }
    kinds
}

/// Stretches of a day with the same cover, of the bands that hold on it.
fn runs(bands: &[When], active: &[usize]) -> Vec<(u16, u16, Cover)> {
    let mut runs: Vec<(u16, u16, Cover)> = Vec::new();
    for minute in 0..MINUTES {
        let mut holding = active
            .iter()
            .copied()
            .filter(|&i| bands.get(i).is_some_and(|band| band.window.holds(minute)));
        let cover = (holding.next(), holding.next());
        match runs.last_mut() {
            Some((_, to, last)) if *last == cover => *to = minute + 1,
            _ => runs.push((minute, minute + 1, cover)),
        }
    }
    runs
}

/// A kind of day in words, and the band of each stretch of it: from, to, place in the list.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct ClockDay {
    /// Which days, such as `Monday to Friday, 1 November to 31 March`.
    pub days: String,
    /// Minutes after midnight from and to, and the band.
    pub stretches: Vec<(u16, u16, usize)>,
}

/// Every kind of day of a list of bands, in the order in which the year meets them.
pub fn clock_days(bands: &[When]) -> Vec<ClockDay> {
    let mut kinds: Vec<_> = kinds(bands).into_iter().collect();
    kinds.sort_by_key(|(_, days)| {
        let first = days.first();
        first.map(|&(day, weekday)| (day, weekday.num_days_from_monday()))
    });
    let stretches = |active: &[usize]| {
        let runs = runs(bands, active).into_iter();
        runs.filter_map(|(from, to, (band, _))| Some((from, to, band?)))
            .collect()
    };
    kinds
        .iter()
        .map(|(active, days)| ClockDay {
            days: say_days(days),
            stretches: stretches(active),
        })
        .collect()
}

/// A set of days in words: its days of the week and its parts of the year.
fn say_days(days: &[(YearDay, Weekday)]) -> String {
    let week = days
        .iter()
        .fold(Days::none(), |week, &(_, weekday)| week.with(weekday));
    let all: Vec<_> = YearDay::all().collect();
    let inside: Vec<bool> = all
        .iter()
        .map(|day| days.iter().any(|(held, _)| held == day))
        .collect();
    if inside.iter().all(|&held| held) {
        return week.to_string();
    }
    let n = all.len();
    // Spans begin where the day before is outside; the year is a ring, so one span may cross New Year.
    let spans: Vec<_> = (0..n)
        .filter(|&i| inside[i] && !inside[(i + n - 1) % n])
        .map(|start| {
            let length = (1..n).find(|k| !inside[(start + k) % n]).unwrap_or(n);
            let (first, last) = (all[start], all[(start + length - 1) % n]);
            if first == last {
                first.to_string()
            } else {
                format!("{first} to {last}")
            }
        })
        .collect();
    format!("{week}, {}", spans.join(" and "))
}

#[cfg(test)]
mod tests {
    use super::super::clock::{Window, parse_clock};
    use super::super::days::Season;
    use super::*;

    fn when(from: &str, to: &str, days: &str, season: Option<&str>) -> When {
        When {
            window: Window::new(parse_clock(from).unwrap(), parse_clock(to).unwrap()).unwrap(),
            days: Days::parse(days).unwrap(),
            season: season.map_or(Season::ALL_YEAR, |s| Season::parse(s).unwrap()),
        }
    }

    #[test]
    fn a_full_set_has_no_flaw() {
        assert_eq!(flaws(&[When::ALWAYS]), []);
        let night_and_day = [
            when("23:30", "05:30", "every day", None),
            when("05:30", "23:30", "every day", None),
        ];
        assert_eq!(flaws(&night_and_day), []);
        let seasonal = [
            when("07:00", "19:00", "weekdays", Some("Oct to Mar")),
            when("19:00", "07:00", "weekdays", Some("Oct to Mar")),
            when("00:00", "24:00", "weekends", Some("Oct to Mar")),
            when("00:00", "24:00", "every day", Some("Apr to Sep")),
        ];
        assert_eq!(flaws(&seasonal), []);
    }

    #[test]
    fn a_hole_is_named_by_its_clock_time_and_days() {
        let bands = [
            when("00:00", "07:00", "every day", None),
            when("07:30", "24:00", "weekdays", None),
            when("07:00", "24:00", "weekends", Some("Apr to Oct")),
        ];
        let hole = |clock: &str, days: &str| Flaw::Hole {
            clock: clock.to_owned(),
            days: days.to_owned(),
        };
        assert_eq!(
            flaws(&bands),
            [
                hole("07:00–07:30", "Monday to Friday"),
                hole("07:00–24:00", "Saturday and Sunday, 1 November to 31 March"),
            ]
        );
    }

    #[test]
    fn an_overlap_names_both_bands() {
        let bands = [
            when("00:00", "08:00", "every day", None),
            when("07:00", "24:00", "every day", None),
        ];
        assert_eq!(
            flaws(&bands),
            [Flaw::Overlap {
                first: 0,
                second: 1,
                clock: "07:00–08:00".to_owned(),
                days: "every day".to_owned(),
            }]
        );
    }

    #[test]
    fn a_clock_day_lists_its_bands_in_order() {
        let bands = [
            when("23:00", "07:00", "every day", None),
            when("07:00", "23:00", "weekdays", None),
            when("07:00", "23:00", "weekends", None),
        ];
        let day = |days: &str, band| ClockDay {
            days: days.to_owned(),
            stretches: vec![(0, 420, 0), (420, 1380, band), (1380, 1440, 0)],
        };
        assert_eq!(
            clock_days(&bands),
            [day("Monday to Friday", 1), day("Saturday and Sunday", 2)]
        );
    }

    #[test]
    fn the_29th_of_february_must_have_a_price() {
        let bands = [
            when("00:00", "24:00", "every day", Some("1 Mar to 31 Dec")),
            when("00:00", "24:00", "every day", Some("1 Jan to 28 Feb")),
        ];
        assert_eq!(
            flaws(&bands),
            [Flaw::Hole {
                clock: "00:00–24:00".to_owned(),
                days: "every day, 29 February".to_owned(),
            }]
        );
    }
}
