//! The JSON contract as plain structs, and the making of the estimate from what the runs came to.

mod account;
mod compose;
pub mod cycle;
mod estimate;
pub mod explain;
pub mod machine;
pub mod rating;
pub mod tariff;

pub use account::{BillAnswer, MeterAnswer, MeterMonthAnswer, RunAnswer, ShiftingAnswer};
pub use compose::{Told, compose};
pub use estimate::{
    Assumption, Estimate, HomeUsed, LeverAnswer, MonthAnswer, SystemAnswer, WeatherUsed, YearAnswer,
};
