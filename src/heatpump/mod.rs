//! The heat pump: a datasheet in, a machine out that answers every hour.
//!
//! A [`Sheet`] of tested points is fitted ([`fit()`]) to an exact [`Machine`] (refrigerant cycle, compressor, two exchangers), what is
//! left over is carried by a bounded smooth correction, and the whole is tabulated once as a [`Map`]. The [`HeatPump`] made of them
//! answers each hour ([`HeatPump::deliver`]): limits, frost, part load and cycling, the source's fall, the allowance from bench to
//! home. [`HeatPump::explain`] solves an hour again without the map. [`rating`] makes seasonal figures by the bin method.

mod balance;
mod compressor;
mod correction;
pub mod cycle;
mod deliver;
mod discharge;
mod doubted;
mod duty;
mod exact;
mod exchanger;
mod fit;
mod fitted;
pub mod frost;
mod heat_pump;
mod idle;
mod limits;
mod machine;
mod map;
mod part_load;
mod priors;
pub mod rating;
mod sheet;
mod steady;
mod typical;

pub use compressor::{Compressor, SPEED_KNOTS_C, SPEED_REFERENCE_FLOW_C, Speeds};
pub use correction::{FittedMachine, GREATEST_CORRECTION};
pub use duty::{ColdSide, Delivered, Duty, Flags};
pub use exact::Exact;
pub use exchanger::Exchanger;
pub use fitted::{FitReport, Fitted, PointReport, fit, leave_one_out, rms};
pub use frost::{Frost, FrostLoss, FrostSteps, humidity_ratio, standard_humidity_ratio};
pub use heat_pump::{HeatPump, USUAL_FIELD_FACTOR};
pub use idle::IdlePower;
pub use limits::{LEAST_DIFFERENCE_K, LOWEST_FLOW_C, Limits};
pub use machine::{Machine, Operation, SolveError};
pub use map::{COLD_AIR_K, COLD_GROUND_K, HIGH_LIFT_K, Input, Map, MapError, Range, SheetDoubts};
pub use part_load::{running_rise_k, running_spread_k, start_up_loss_kw, starts_per_hour};
pub use priors::Prior;
pub use sheet::{
    Assumed, Drive, Sheet, SourceKind, SpeedAt, TestedPoint, carnot, default_spread_k,
};
pub use typical::{typical_files, typical_names};
