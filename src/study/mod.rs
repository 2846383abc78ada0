//! Cases side by side: what each system costs, its balance point, levers and break-even.

mod ageing;
mod balance;
mod break_even;
mod case;
mod lever;
mod loop_life;
mod outcome;
mod traced;

pub use ageing::{Aged, SHOWN_YEAR};
pub use balance::{BalancePoint, balance_point};
pub use break_even::{BreakEven, Crossing, break_even};
pub use case::{Account, Case, Contender};
pub use lever::Lever;
pub use loop_life::{BrineHour, LoopYear, NoShortest, ShortestLoop, loop_life, shortest_loop};
pub use outcome::{Costs, Outcome, YearOutcome};
pub use traced::{Traced, TracedDuty, Wanted, trace};
