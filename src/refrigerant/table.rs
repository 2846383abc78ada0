//! Fast.
/// x
pub struct CycleTable;
