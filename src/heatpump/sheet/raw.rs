//! A machine sheet as it is written, before anything is checked.

use schemars::JsonSchema;
use serde::Deserialize;

use super::words::{Drive, SourceKind, SpeedAt};
use crate::document::{Leaf, Section};
use crate::units::{Current, Power, Temperature, TemperatureDifference};

/// A machine sheet.
#[derive(Debug, Deserialize, JsonSchema)]
pub struct RawSheet {
    /// What kind of machine it is.
    pub machine: Option<Section<RawMachine>>,
    /// Points from the datasheet.
    #[serde(default)]
    pub tested: Vec<Section<RawTested>>,
    /// Where the machine may run.
    pub limits: Option<Section<RawLimits>>,
    /// What it takes when it does not heat.
    pub idle_power: Option<Section<RawIdlePower>>,
    /// Declared points of a seasonal rating.
    #[serde(default)]
    pub declared: Vec<Section<RawDeclared>>,
}

/// `[machine]`
#[derive(Debug, Deserialize, JsonSchema)]
pub struct RawMachine {
    /// What to call it.
    pub label: Option<Leaf<String>>,
    /// Where it takes heat: air, brine or water.
    pub source: Option<Leaf<(SourceKind,)>>,
    /// Refrigerant number, such as R290.
    pub refrigerant: Option<Leaf<String>>,
    /// Variable or fixed.
    pub speed: Option<Leaf<(Drive,)>>,
    /// Superheat at the compressor's inlet; 5 K when absent.
    pub superheat: Option<Leaf<TemperatureDifference>>,
    /// Subcooling at the condenser's outlet; 5 K when absent.
    pub subcooling: Option<Leaf<TemperatureDifference>>,
    /// Power of the fan, or of the brine pump's internal share, contained in the tested points.
    pub source_power: Option<Leaf<Power>>,
    /// Whole power of the brine or well pump at home, its loop included; as in the tested points when absent.
    pub source_power_at_home: Option<Leaf<Power>>,
    /// Degradation coefficient Cc of EN 14825; 0.9 when absent.
    pub cycling_coefficient: Option<Leaf<f64>>,
    /// Greatest operating current.
    pub greatest_current: Option<Leaf<Current>>,
}

/// `[[tested]]`
#[derive(Debug, Deserialize, JsonSchema)]
pub struct RawTested {
    /// Entering source temperature.
    pub source: Option<Leaf<Temperature>>,
    /// Leaving water temperature.
    pub flow: Option<Leaf<Temperature>>,
    /// Entering water temperature; instead of a spread.
    #[serde(rename = "return")]
    pub return_: Option<Leaf<Temperature>>,
    /// Flow minus return; 5, 5, 8 or 10 K at 35, 45, 55 or 65 °C flow when absent.
    pub spread: Option<Leaf<TemperatureDifference>>,
    /// Heat output.
    pub output: Option<Leaf<Power>>,
    /// Output over input; instead of the input.
    pub cop: Option<Leaf<f64>>,
    /// Electric input; instead of the COP.
    pub input: Option<Leaf<Power>>,
    /// At what speed: maximum, part, least or unknown; unknown when absent.
    pub at: Option<Leaf<(SpeedAt,)>>,
    /// Whether output and input contain defrosting, as EN 14511 points do; true when absent.
    pub defrost_included: Option<Leaf<bool>>,
}

/// `[limits]`
#[derive(Debug, Deserialize, JsonSchema)]
pub struct RawLimits {
    /// Lowest entering source temperature.
    pub lowest_source: Option<Leaf<Temperature>>,
    /// Highest entering source temperature.
    pub highest_source: Option<Leaf<Temperature>>,
    /// Highest flow temperature by source temperature, straight lines between, level beyond.
    #[serde(default)]
    pub highest_flow: Vec<Section<RawHighestFlow>>,
    /// Greatest output that the controller allows.
    pub greatest_output: Option<Leaf<Power>>,
}

/// One entry of `highest_flow`.
#[derive(Debug, Deserialize, JsonSchema)]
pub struct RawHighestFlow {
    /// Entering source temperature.
    pub source: Option<Leaf<Temperature>>,
    /// Highest flow temperature there.
    pub flow: Option<Leaf<Temperature>>,
}

/// `[idle_power]`: the modes of EN 14825.
#[derive(Debug, Deserialize, JsonSchema)]
pub struct RawIdlePower {
    /// Ready, waiting for a demand.
    pub standby: Option<Leaf<Power>>,
    /// Heating season, room warm enough.
    pub thermostat_off: Option<Leaf<Power>>,
    /// Crankcase heater.
    pub crankcase: Option<Leaf<Power>>,
    /// Switched off.
    pub off: Option<Leaf<Power>>,
}

/// `[[declared]]`: a declared point of a seasonal rating after EN 14825.
#[derive(Debug, Deserialize, JsonSchema)]
pub struct RawDeclared {
    /// Climate: average, colder or warmer.
    pub climate: Option<Leaf<(crate::heatpump::rating::Climate,)>>,
    /// Application: low, intermediate, medium or high.
    pub application: Option<Leaf<(crate::heatpump::rating::Application,)>>,
    /// Outdoor temperature of the point.
    pub outdoor: Option<Leaf<Temperature>>,
    /// Declared capacity.
    pub output: Option<Leaf<Power>>,
    /// Declared COP at that capacity.
    pub cop: Option<Leaf<f64>>,
}
