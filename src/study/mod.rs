//! Cases side by side: what each system costs, its balance point, levers and break-even.

mod balance;
mod break_even;
mod case;
mod lever;
mod outcome;
mod traced;

pub use balance::{BalancePoint, balance_point};
pub use break_even::{BreakEven, Crossing, break_even};
pub use case::{Account, Case, Contender};
pub use lever::Lever;
pub use outcome::{Costs, Outcome, YearOutcome};
pub use traced::{Traced, TracedDuty, Wanted, trace};
