//! The heat pump: cycle, machine, fit, map, part load, frost, seasonal rating.

pub mod cycle;
