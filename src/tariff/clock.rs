//! When a price holds: clock times, days of the week and a season, all in civil time.
//!
//! Every part is judged on the calendar day: `22:00` to `06:00` on weekdays covers 00:00–06:00 and 22:00–24:00 of
//! each weekday. A public holiday counts as a Sunday.

use std::fmt;

use chrono::Weekday;

use super::days::{Days, Season, YearDay};

/// Minutes in a day.
pub const MINUTES: u16 = 1440;

/// A clock time in words; the end of the day is 24:00.
pub fn clock(minute: u16) -> String {
    format!("{:02}:{:02}", minute / 60, minute % 60)
}

/// Reads `"07:30"`, from `"00:00"` to `"24:00"`, as minutes after midnight.
pub fn parse_clock(text: &str) -> Option<u16> {
    let (hour, minute) = text.trim().split_once(':')?;
    let digits = |part: &str| {
        (part.len() <= 2)
            .then(|| part.parse::<u16>().ok())
            .flatten()
    };
    let (hour, minute) = (digits(hour)?, digits(minute)?);
    (minute < 60 && hour * 60 + minute <= MINUTES).then_some(hour * 60 + minute)
}

/// A span of the clock; past midnight when it ends before it starts.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash)]
pub struct Window {
    from: u16,
    to: u16,
}

impl Window {
    /// The whole day.
    pub const ALL_DAY: Self = Self {
        from: 0,
        to: MINUTES,
    };

    /// From one minute after midnight to another; nothing when they are the same time.
    pub fn new(from: u16, to: u16) -> Option<Self> {
        let from = from % MINUTES;
        let to = if to == 0 { MINUTES } else { to };
        (from != to).then_some(Self { from, to })
    }

    /// Whether a minute of the day lies inside.
    pub fn holds(self, minute: u16) -> bool {
        if self.from < self.to {
            (self.from..self.to).contains(&minute)
        } else {
            minute >= self.from || minute < self.to
        }
    }
}

impl fmt::Display for Window {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        write!(f, "{}–{}", clock(self.from), clock(self.to))
    }
}

/// The times at which something holds.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash)]
pub struct When {
    /// Clock times.
    pub window: Window,
    /// Days of the week.
    pub days: Days,
    /// Part of the year.
    pub season: Season,
}

impl When {
    /// Always.
    pub const ALWAYS: Self = Self {
        window: Window::ALL_DAY,
        days: Days::ALL,
        season: Season::ALL_YEAR,
    };

    /// Whether it holds at some time of a day.
    pub fn on(&self, day: YearDay, weekday: Weekday) -> bool {
        self.days.holds(weekday) && self.season.holds(day)
    }

    /// In words; empty when always.
    pub fn words(&self) -> String {
        let mut parts = Vec::new();
        if self.window != Window::ALL_DAY {
            parts.push(self.window.to_string());
        }
        if self.days != Days::ALL {
            parts.push(self.days.to_string());
        }
        if self.season != Season::ALL_YEAR {
            parts.push(self.season.to_string());
        }
        parts.join(", ")
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn clock_times_run_from_midnight_to_midnight() {
        assert_eq!(parse_clock("00:30"), Some(30));
        assert_eq!(parse_clock("24:00"), Some(1440));
        assert_eq!(clock(1440), "24:00");
        for bad in [
            "24:01", "7", "07:60", "-1:00", "007:00", "", "ab:cd", "+7:00:00",
        ] {
            assert_eq!(parse_clock(bad), None, "{bad}");
        }
    }

    #[test]
    fn windows_wrap_past_midnight() {
        let night = Window::new(23 * 60, 7 * 60).unwrap();
        assert!(night.holds(23 * 60) && night.holds(0) && night.holds(419));
        assert!(!night.holds(420) && !night.holds(23 * 60 - 1));
        assert_eq!(Window::new(0, 1440), Some(Window::ALL_DAY));
        assert_eq!(Window::new(60, 60), None);
        assert_eq!(night.to_string(), "23:00–07:00");
    }
}
