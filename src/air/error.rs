//! What moist-air functions refuse.

use std::fmt;

/// Why a moist-air property cannot be given.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum AirError {
    /// A temperature, °C, outside −100 to 200.
    Temperature(f64),
    /// A relative humidity outside 0 to 1.
    RelativeHumidity(f64),
    /// A pressure, Pa, that the vapour alone would exceed or that is not positive.
    Pressure(f64),
    /// A vapour pressure, Pa, that no dew point belongs to: air without any moisture.
    VapourPressure(f64),
    /// An iteration that did not settle; carries the temperature it was started with, °C.
    NotConverged(f64),
}

impl fmt::Display for AirError {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match self {
            Self::Temperature(c) => write!(
                f,
                "{c} °C is outside -100 to 200 °C, where moist air is described"
            ),
            Self::RelativeHumidity(share) => {
                write!(f, "a relative humidity of {share} is outside 0 to 1")
            }
            Self::Pressure(pa) => write!(f, "{pa} Pa is not above the pressure of the vapour"),
            Self::VapourPressure(pa) => write!(f, "a vapour pressure of {pa} Pa has no dew point"),
            Self::NotConverged(c) => write!(f, "the iteration from {c} °C did not settle"),
        }
    }
}

impl std::error::Error for AirError {}
