//! The JSON contract as plain structs.
