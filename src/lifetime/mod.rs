//! Money over the life of a system: what is paid when, what it is worth today, and when a choice has paid for itself.
//!
//! Everything is in real terms: money of today's worth, a discount rate above inflation, price paths relative to inflation.
//! Year 0 is today; what a year costs is counted at its end. [`CashFlow::of`] lays the years out from [`Terms`] (how years
//! are counted), an [`Outlay`] (what a system costs to put in and keep) and a [`Running`] year (what it uses).

mod flow;
mod outlay;
mod path;
mod terms;

pub use flow::{CashFlow, Payback, Running, YearFlow, payback};
pub use outlay::{Outlay, Part};
pub use path::Path;
pub use terms::{LONGEST_YEARS, LOWEST_DISCOUNT_RATE, Terms};
