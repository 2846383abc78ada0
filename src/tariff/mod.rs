//! Tariffs: what a household is charged, as price columns and rules.
