//! Shifting: room and store made warmer in cheap hours, so that less is bought in dear ones.
//!
//! A shifted plan is a plan like any other: set points and store temperatures hour by hour, run by the same `year::step`.

mod best_day;
mod timer;

pub use best_day::best_day;
pub use timer::timer;

/// How far a temperature may be moved from what the household asked for, K.
#[derive(Debug, Clone, Copy, Default, PartialEq)]
pub struct Latitude {
    /// Above it.
    pub above_k: f64,
    /// Below it.
    pub below_k: f64,
}

/// What may be shifted.
#[derive(Debug, Clone, Copy, Default, PartialEq)]
pub struct Shifting {
    /// The rooms: the comfort band.
    pub rooms: Latitude,
    /// The hot-water store.
    pub store: Latitude,
}

/// How the hours are chosen.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum ShiftRule {
    /// A clock: warmer in the cheap hours of each day.
    Timer,
    /// The cheapest way through each day, its weather, draws and prices known beforehand: no controller does better than this
    /// within the same latitude, but for the fineness of the search.
    BestDay,
}

impl ShiftRule {
    /// Whether it knows what no controller knows.
    pub fn knows_the_day_ahead(self) -> bool {
        self == Self::BestDay
    }

    /// The word in briefs and results.
    pub fn word(self) -> &'static str {
        match self {
            Self::Timer => "timer",
            Self::BestDay => "best-day",
        }
    }
}
