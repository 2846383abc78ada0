//! Cases side by side: what each system costs, its balance point, levers and break-even.

mod ageing;
mod balance;
mod break_even;
mod case;
mod lever;
mod meter_band;
mod outcome;
mod shifting;
mod traced;

pub use ageing::{Aged, SHOWN_YEAR};
pub use balance::{BalancePoint, balance_point};
pub use break_even::{BreakEven, Crossing, break_even};
pub use case::{Account, Beside, Case, Contender};
pub use lever::Lever;
pub use meter_band::{MeterBand, MeterMonth, meter_band};
pub use outcome::{AccountBill, Costs, Outcome, YearOutcome, bills};
pub use shifting::{Run, Shifted, against_unshifted};
pub use traced::{Traced, TracedDuty, Wanted, trace};
