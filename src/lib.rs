//! Winterledger: what a heat pump would cost to run in one home, hour by hour, beside the gas boiler.
//!
//! Rooms are listed in rank order. A room imports only rooms of a lower rank; `tests/ranks.rs` holds it.

// rank 0: words, places and plain physics
pub mod air;
pub mod bounds;
pub mod calendar;
pub mod extremes;
pub mod fault;
pub mod limits;
pub mod locale;
pub mod problem;
pub mod units;
// rank 1: outside data
pub mod document;
pub mod refrigerant;
pub mod series;
pub mod weather;
// rank 2: the parts of a system
pub mod carbon;
pub mod heater;
pub mod heatpump;
pub mod home;
pub mod source;
pub mod tariff;
// rank 3: the hours
pub mod year;
// rank 4: what the hours add up to
pub mod bill;
pub mod lifetime;
pub mod plan;
pub mod signature;
// rank 5: cases side by side
pub mod study;
// rank 6: the contract
pub mod answer;
// rank 7: how it is drawn
pub mod chart;
// rank 8: what comes in, what goes out
pub mod brief;
pub mod report;
// rank 9: commands
pub mod cli;
