//! The JSON contract as plain structs, and the making of the estimate from what the runs came to.

mod account;
pub mod bills;
mod compose;
pub mod cycle;
mod estimate;
pub mod explain;
pub mod ground;
mod home;
pub mod machine;
pub mod rating;
pub mod tariff;
pub mod weather;

pub use account::{BillAnswer, MeterAnswer, MeterMonthAnswer, RunAnswer, ShiftingAnswer};
pub use compose::{BillsTold, Told, compare_patterns, compose};
pub use estimate::{
    Assumption, Estimate, GroundShown, HomeUsed, LeverAnswer, MonthAnswer, SystemAnswer,
    WeatherUsed, YearAnswer,
};
pub use home::{
    DesignAnswer, MeteredAnswer, PatternComparison, PatternFigures, RoomAnswer, RoomsAnswer,
    StoreAnswer,
};
