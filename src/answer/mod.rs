//! The JSON contract as plain structs.

pub mod cycle;
