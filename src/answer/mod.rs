//! The JSON contract as plain structs, and the making of the estimate from what the runs came to.

mod account;
pub mod bills;
mod comfort;
mod compose;
pub mod cycle;
mod estimate;
pub mod explain;
mod findings;
pub mod ground;
mod home;
mod lever;
pub mod lifetime;
pub mod machine;
pub mod odds;
pub mod rating;
pub mod study;
mod system;
pub mod tariff;
pub mod weather;
mod weather_years;
mod what_if;

pub use account::{BillAnswer, MeterAnswer, MeterMonthAnswer, RunAnswer, ShiftingAnswer};
pub use compose::{BillsTold, Told, compare_patterns, compose};
pub use estimate::{
    Assumption, Estimate, GroundShown, HomeUsed, InputFile, LeverAnswer, MonthAnswer, SystemAnswer,
    WeatherUsed,
};
pub use home::{
    DesignAnswer, MeteredAnswer, PatternComparison, PatternFigures, RoomAnswer, RoomsAnswer,
    StoreAnswer,
};
pub use lever::short;
pub use weather_years::{ExtentAnswer, YearAnswer, YearSpread};
pub use what_if::{EmitterAnswer, SwingAnswer, WhatIf, what_if};
