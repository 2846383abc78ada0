//! Cases side by side: what each system costs, its balance point, levers and break-even.

mod ageing;
mod balance;
mod break_even;
mod case;
mod design;
mod lever;
mod loop_life;
mod outcome;
mod running;
mod traced;

pub use ageing::{Aged, SHOWN_YEAR};
pub use balance::{BalancePoint, balance_point, output_range_kw};
pub use break_even::{BreakEven, Crossing, break_even};
pub use case::{Account, Case, Contender};
pub use design::{DesignPoint, design_point};
pub use lever::Lever;
pub use loop_life::{BrineHour, LoopYear, NoShortest, ShortestLoop, loop_life, shortest_loop};
pub use outcome::{Costs, Outcome, YearOutcome};
pub use running::{scale_to_fuel, under_pattern};
pub use traced::{Traced, TracedDuty, Wanted, trace};
