//! Seeded faults: the traps that give plausible wrong numbers, each to be switched on at will in a test build.
//!
//! A check that never fails proves nothing. With the feature `seeded-faults` one trap at a time is put into the program, in the one
//! line where it would be made by mistake, and `tests/validation/seeded.rs` asks that a row of the validation table goes red. Without
//! the feature [`on`] is a constant `false`, and the lines vanish.

/// A mistake that gives plausible wrong numbers.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Fault {
    /// Rooms and hot water share the hotter flow of the hour, and so its COP.
    OneFlowForBothDuties,
    /// Hot water is heated evenly over the day instead of in blocks.
    HotWaterAllDay,
    /// A machine that goes on and off is taken at the hour's mean flow temperature.
    CyclingAtMeanFlow,
    /// The design heat load is counted from the base temperature of degree-days.
    BaseForPeak,
    /// Radiators grow with the heat loss.
    EmittersResized,
    /// Emitters give by their flow temperature instead of their mean water temperature.
    FlowForMean,
    /// Points that hold defrost are fitted as if they did not, and defrost is charged again.
    DefrostTwice,
    /// The source's fan or pump, held in the tested points, is charged again.
    PumpTwice,
    /// SPF counts heat at the taps over electricity at the machine.
    MixedBoundary,
    /// An efficiency on net calorific value is taken for one on gross.
    NetForGross,
    /// Tax is added to rates that hold it.
    TaxTwice,
    /// Carbon factors of different scopes go together.
    ScopesMixed,
    /// Stamps that mark the end of their hour are read as its beginning.
    HourEndingStamps,
    /// A buried loop is shown in its first year.
    FirstYearLoop,
    /// A heat pump is run on a boiler's hours.
    RunLikeBoiler,
    /// A heat loss from meter readings sizes the machine.
    BillsForSizing,
    /// A boiler keeps its ideal efficiency beside a heat pump as found in homes.
    IdealBoiler,
    /// A heat pump keeps its laboratory figures beside a boiler as found in homes.
    LaboratoryMachine,
    /// An hour's mean power stands for a check of the supply.
    MeanForSupply,
}

impl Fault {
    /// Every trap.
    pub const ALL: [Self; 19] = [
        Self::OneFlowForBothDuties,
        Self::HotWaterAllDay,
        Self::CyclingAtMeanFlow,
        Self::BaseForPeak,
        Self::EmittersResized,
        Self::FlowForMean,
        Self::DefrostTwice,
        Self::PumpTwice,
        Self::MixedBoundary,
        Self::NetForGross,
        Self::TaxTwice,
        Self::ScopesMixed,
        Self::HourEndingStamps,
        Self::FirstYearLoop,
        Self::RunLikeBoiler,
        Self::BillsForSizing,
        Self::IdealBoiler,
        Self::LaboratoryMachine,
        Self::MeanForSupply,
    ];
}

/// Whether a fault is switched on; never without the feature `seeded-faults`.
#[cfg(not(feature = "seeded-faults"))]
#[inline(always)]
pub const fn on(_: Fault) -> bool {
    false
}

#[cfg(feature = "seeded-faults")]
pub use seeded::{on, seed};

#[cfg(feature = "seeded-faults")]
mod seeded {
    use std::sync::atomic::{AtomicUsize, Ordering};

    use super::Fault;

    /// The fault by its place in [`Fault`], from 1; 0 for none. One for all threads, because studies use many.
    static SEEDED: AtomicUsize = AtomicUsize::new(0);

    /// Whether a fault is switched on.
    pub fn on(fault: Fault) -> bool {
        SEEDED.load(Ordering::Relaxed) == fault as usize + 1
    }

    /// Switches one fault on, every other off.
    pub fn seed(fault: Option<Fault>) {
        SEEDED.store(
            fault.map_or(0, |fault| fault as usize + 1),
            Ordering::Relaxed,
        );
    }
}
