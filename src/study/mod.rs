//! Cases side by side: what each system costs, its balance point, levers and break-even.

mod ageing;
mod balance;
mod break_even;
mod case;
mod design;
mod lever;
mod loop_life;
mod meter_band;
mod outcome;
mod running;
mod shifting;
mod traced;

pub use ageing::{Aged, SHOWN_YEAR};
pub use balance::{BalancePoint, balance_point};
pub use break_even::{BreakEven, Crossing, break_even};
pub use case::{Account, Beside, Case, Contender};
pub use design::{DesignPoint, design_point};
pub use lever::Lever;
pub use loop_life::{BrineHour, LoopYear, NoShortest, ShortestLoop, loop_life, shortest_loop};
pub use meter_band::{MeterBand, MeterMonth, meter_band};
pub use outcome::{AccountBill, Costs, Outcome, YearOutcome, bills};
pub use running::{scale_to_fuel, under_pattern};
pub use shifting::{Run, Shifted, against_unshifted};
pub use traced::{Traced, TracedDuty, Wanted, trace};
