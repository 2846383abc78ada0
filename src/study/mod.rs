//! Cases side by side, and what would change the answer.
//!
//! One mechanism: a [`Lever`] is moved and the same run is called. A [`Pair`] holds today's system and one choice and makes
//! again only what the moved levers touch. Break-even, emitters, sizes, two levers at once and swings are each a few values of
//! levers and what is looked at in the answer.

mod act;
mod ageing;
mod balance;
mod break_even;
mod break_even_spf;
mod case;
mod design;
mod emitter_sizes;
mod fuel_carbon;
mod lever;
mod loop_life;
mod machine_sizes;
mod measure;
mod meter_band;
mod month_shares;
pub mod odds;
mod outcome;
mod pair;
mod price;
mod running;
mod shifting;
mod spread;
mod swings;
mod traced;
mod two_levers;
mod weather_years;

pub use ageing::{Aged, SHOWN_YEAR};
pub use balance::{BalancePoint, balance_point, limited_by_flow, output_range_kw};
pub use break_even::{BreakEven, Crossing, break_even};
pub use break_even_spf::{Applies, BreakEvenSpf, Prices, break_even_spf};
pub use case::{Account, Beside, Case, Contender};
pub use design::{DesignLimit, DesignPoint, design_point};
pub use emitter_sizes::{EmitterSize, emitter_sizes};
pub use lever::Lever;
pub use loop_life::{BrineHour, LoopYear, NoShortest, ShortestLoop, loop_life, shortest_loop};
pub use machine_sizes::{MachineSize, MachineSizes, machine_sizes};
pub use measure::Measure;
pub use meter_band::{MeterBand, MeterMonth, meter_band};
pub use outcome::{AccountBill, Costs, Outcome, YearOutcome, bills};
pub use pair::{CHOICE, Compared, Pair, cash_flow};
pub use running::{scale_to_fuel, under_pattern};
pub use shifting::{Run, Shifted, against_unshifted};
pub use spread::{Spread, usual_spread};
pub use swings::{Swing, swings};
pub use traced::{Traced, TracedDuty, Wanted, trace};
pub use two_levers::{TwoLevers, two_levers};
pub use weather_years::{Extent, SystemYear, extent, system_years};
