//! The hours: one step, one run, the ledger row, sinks.
