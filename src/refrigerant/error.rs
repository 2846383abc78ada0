//! Why a property could not be given.

use super::Refrigerant;
use std::fmt;

/// A property outside what the equation or table covers, or a solution that was not reached.
#[derive(Clone, Debug, PartialEq)]
pub enum PropertyError {
    /// A value lies outside the range in which the equation or table is used (or is not a number).
    OutsideRange {
        /// The fluid.
        refrigerant: Refrigerant,
        /// What the value is, in words.
        quantity: &'static str,
        /// Its unit.
        unit: &'static str,
        /// The value that was asked for.
        value: f64,
        /// The least value allowed.
        low: f64,
        /// The greatest value allowed.
        high: f64,
    },
    /// An iteration did not reach its tolerance within its cap.
    NotConverged {
        /// The fluid.
        refrigerant: Refrigerant,
        /// What was being solved for, in words.
        solving: &'static str,
        /// The condition at which it was tried, with units.
        at: String,
    },
    /// A coefficient file of this program is damaged. The tests load every one.
    Coefficients {
        /// The fluid.
        refrigerant: Refrigerant,
        /// What the reader said.
        detail: String,
    },
}

impl PropertyError {
    /// `value` when it lies in `low..=high`, otherwise the error that names value and bound.
    pub(super) fn check(
        refrigerant: Refrigerant,
        (quantity, unit): (&'static str, &'static str),
        value: f64,
        (low, high): (f64, f64),
    ) -> Result<f64, PropertyError> {
        // written so that NaN is refused
        if value >= low && value <= high {
            Ok(value)
        } else {
            Err(PropertyError::OutsideRange {
                refrigerant,
                quantity,
                unit,
                value,
                low,
                high,
            })
        }
    }
}

impl fmt::Display for PropertyError {
    fn fmt(&self, formatter: &mut fmt::Formatter<'_>) -> fmt::Result {
        match self {
            PropertyError::OutsideRange {
                refrigerant,
                quantity,
                unit,
                value,
                low,
                high,
            } => write!(
                formatter,
                "{refrigerant}: {quantity} {value:.2} {unit} is outside the {low:.2} to {high:.2} {unit} that is covered"
            ),
            PropertyError::NotConverged {
                refrigerant,
                solving,
                at,
            } => {
                write!(
                    formatter,
                    "{refrigerant}: no solution found for the {solving} at {at}"
                )
            }
            PropertyError::Coefficients {
                refrigerant,
                detail,
            } => {
                write!(
                    formatter,
                    "{refrigerant}: the built-in coefficient file cannot be read: {detail}"
                )
            }
        }
    }
}

impl std::error::Error for PropertyError {}
