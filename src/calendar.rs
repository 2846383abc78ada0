//! The hour axis in UTC and the civil clock over it.
