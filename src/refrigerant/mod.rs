//! Refrigerant properties: reference equations of state and fast tables made from them.
//!
//! [`Equation`] is exact: the published multiparameter equation of a fluid, solved for any state a
//! vapour-compression cycle can meet, in tens of microseconds. [`CycleTable`] is fast: what the hour
//! loop needs of a cycle with given superheat and subcooling, in tens of nanoseconds. The crate that
//! evaluates the equations (feos) is seen by `helmholtz.rs` alone and never leaves this room.

mod chebyshev;
mod dome;
mod equation;
mod error;
mod facts;
mod helmholtz;
mod isobar;
mod solve;
mod state;
mod table;

pub use equation::Equation;
pub use error::PropertyError;
pub use facts::{Facts, SafetyClass};
pub use state::{Saturation, StatePoint};
pub use table::CycleTable;

use serde::{Deserialize, Serialize};
use std::fmt;
use std::str::FromStr;

/// A refrigerant whose reference equation is held.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash, PartialOrd, Ord, Serialize, Deserialize)]
#[serde(try_from = "String", into = "String")]
pub enum Refrigerant {
    /// Propane.
    R290,
    /// Difluoromethane.
    R32,
    /// R32 and R125, half and half by mass; treated as one pseudo-pure fluid.
    R410A,
    /// 1,1,1,2-tetrafluoroethane.
    R134a,
    /// 2,3,3,3-tetrafluoropropene.
    R1234yf,
    /// Isobutane.
    R600a,
}

impl Refrigerant {
    /// Every refrigerant held, in the order in which they are listed to the reader.
    pub const ALL: [Refrigerant; 6] = [
        Refrigerant::R290,
        Refrigerant::R32,
        Refrigerant::R410A,
        Refrigerant::R134a,
        Refrigerant::R1234yf,
        Refrigerant::R600a,
    ];

    /// The refrigerant number of ISO 817, as it is written in the trade.
    pub fn name(self) -> &'static str {
        match self {
            Refrigerant::R290 => "R290",
            Refrigerant::R32 => "R32",
            Refrigerant::R410A => "R410A",
            Refrigerant::R134a => "R134a",
            Refrigerant::R1234yf => "R1234yf",
            Refrigerant::R600a => "R600a",
        }
    }

    /// Molar mass, critical point, safety class, global warming potential and cautions.
    pub fn facts(self) -> &'static Facts {
        facts::of(self)
    }

    /// The names of all refrigerants held, for messages and help.
    pub fn names() -> String {
        Refrigerant::ALL.map(Refrigerant::name).join(", ")
    }
}

impl fmt::Display for Refrigerant {
    fn fmt(&self, formatter: &mut fmt::Formatter<'_>) -> fmt::Result {
        formatter.pad(self.name())
    }
}

impl From<Refrigerant> for String {
    fn from(refrigerant: Refrigerant) -> String {
        refrigerant.name().to_owned()
    }
}

impl TryFrom<String> for Refrigerant {
    type Error = UnknownRefrigerant;

    fn try_from(text: String) -> Result<Self, Self::Error> {
        text.parse()
    }
}

impl FromStr for Refrigerant {
    type Err = UnknownRefrigerant;

    /// Reads a refrigerant number in any case, with or without a hyphen: `R290`, `r-32`, `R1234YF`.
    ///
    /// # Errors
    ///
    /// [`UnknownRefrigerant`] names those held and the one that is meant, where it is a slip.
    ///
    /// ```
    /// use winterledger::refrigerant::Refrigerant;
    /// assert_eq!("r-1234YF".parse(), Ok(Refrigerant::R1234yf));
    /// let refused = "R410".parse::<Refrigerant>().unwrap_err();
    /// assert!(refused.to_string().contains("did you mean R410A?"));
    /// ```
    fn from_str(text: &str) -> Result<Self, Self::Err> {
        let plain = |name: &str| name.trim().replace(['-', ' '], "").to_ascii_lowercase();
        let wanted = plain(text);
        Refrigerant::ALL
            .into_iter()
            .find(|held| plain(held.name()) == wanted)
            .ok_or_else(|| UnknownRefrigerant {
                found: text.to_owned(),
                nearest: Refrigerant::ALL
                    .into_iter()
                    .find(|held| is_slip(&plain(held.name()), &wanted)),
            })
    }
}

/// Whether a number is another with one sign too many or too few: numbers that differ in a sign are other refrigerants.
fn is_slip(held: &str, found: &str) -> bool {
    held.len() != found.len() && strsim::levenshtein(held, found) == 1
}

/// The text names no refrigerant that is held.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct UnknownRefrigerant {
    /// What was written.
    pub found: String,
    /// The held refrigerant that is meant, where a sign is missing or too many.
    pub nearest: Option<Refrigerant>,
}

impl fmt::Display for UnknownRefrigerant {
    fn fmt(&self, formatter: &mut fmt::Formatter<'_>) -> fmt::Result {
        let held = Refrigerant::names();
        write!(
            formatter,
            "refrigerant {:?} is not held; held are {held}",
            self.found
        )?;
        match self.nearest {
            Some(nearest) => write!(formatter, "; did you mean {nearest}?"),
            None => Ok(()),
        }
    }
}

impl std::error::Error for UnknownRefrigerant {}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn every_name_reads_back_in_any_case() {
        for refrigerant in Refrigerant::ALL {
            let name = refrigerant.name();
            for spelling in [name.to_owned(), name.to_lowercase(), name.to_uppercase()] {
                assert_eq!(spelling.parse(), Ok(refrigerant));
            }
            let json = serde_json::to_string(&refrigerant).unwrap();
            assert_eq!(json, format!("\"{name}\""));
            assert_eq!(
                serde_json::from_str::<Refrigerant>(&json).unwrap(),
                refrigerant
            );
        }
    }

    #[test]
    fn an_unknown_name_is_answered_with_those_held_and_the_nearest() {
        let refused = "R123yf".parse::<Refrigerant>().unwrap_err();
        assert_eq!(refused.nearest, Some(Refrigerant::R1234yf));
        let text = refused.to_string();
        for held in Refrigerant::ALL {
            assert!(text.contains(held.name()), "{text}");
        }
        // Other refrigerants, not slips.
        for other in ["R454B", "R22", "R744", "R404A", "water"] {
            let refused = other.parse::<Refrigerant>().unwrap_err();
            assert_eq!(refused.nearest, None, "{other}");
        }
    }
}
