//! The hours: one step, one run, the ledger row, sinks.
//!
//! [`run`] takes a [`Site`] (what the weather and the clock give to every system), a [`System`] (home and heating), a
//! [`Plan`] (set points and signals hour by hour) and a [`State`] (what carries over from hour to hour), calls [`step()`] for
//! each hour, and hands each [`Row`] to a [`Sink`]. A run can be stopped and resumed at any hour: two half years with
//! the state carried over are the year.

mod boiler;
mod hybrid;
mod ledger;
mod machine;
mod metered;
mod rooms;
mod row;
mod site;
mod step;
mod system;
mod totals;
mod warm_side;
mod water;

pub use ledger::Ledger;
pub use metered::{Household, Metered};
pub use row::{COLUMNS, Column, Flags, Row, Sums};
pub use site::{OwnGeneration, Plan, Recovery, Signal, Site};
pub use step::{DutyKind, Probe, Unwatched, run, step};
pub use system::{Heating, HybridSystem, MachineSystem, State, System};
pub use totals::Totals;

/// Takes the rows of a run.
pub trait Sink {
    /// Takes the row of an hour of the axis.
    fn take(&mut self, hour: usize, row: &Row);
}

impl<S: Sink> Sink for &mut S {
    fn take(&mut self, hour: usize, row: &Row) {
        (**self).take(hour, row);
    }
}

/// A sink that may not be there.
impl<S: Sink> Sink for Option<S> {
    fn take(&mut self, hour: usize, row: &Row) {
        if let Some(sink) = self {
            sink.take(hour, row);
        }
    }
}

/// Three sinks at once.
impl<A: Sink, B: Sink, C: Sink> Sink for (A, B, C) {
    fn take(&mut self, hour: usize, row: &Row) {
        self.0.take(hour, row);
        self.1.take(hour, row);
        self.2.take(hour, row);
    }
}
