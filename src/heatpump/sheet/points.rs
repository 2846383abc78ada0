//! One tested point of a sheet.

use super::words::SpeedAt;
use crate::problem::Place;

/// A tested point: steady laboratory output and COP at a source and a flow temperature (EN 14511).
#[derive(Debug, Clone, PartialEq)]
pub struct TestedPoint {
    /// Where it stands.
    pub place: Place,
    /// Entering source temperature, °C.
    pub source_c: f64,
    /// Leaving water temperature, °C.
    pub flow_c: f64,
    /// Entering water temperature, °C.
    pub return_c: f64,
    /// Heat output, kW.
    pub heat_kw: f64,
    /// Output over electric input.
    pub cop: f64,
    /// Speed it was tested at.
    pub at: SpeedAt,
    /// Whether output and input contain defrosting.
    pub defrost_included: bool,
}

impl TestedPoint {
    /// The point as datasheets call it, `A-7/W35`.
    pub fn name(&self, letter: char) -> String {
        format!("{letter}{}/W{}", self.source_c, self.flow_c)
    }

    /// Carnot COP of heating between entering source and flow temperature: no machine between them reaches it.
    pub fn carnot(&self) -> f64 {
        carnot(self.source_c, self.flow_c)
    }
}

/// Carnot COP of heating between two temperatures, °C.
pub fn carnot(source_c: f64, flow_c: f64) -> f64 {
    (flow_c + 273.15) / (flow_c - source_c)
}

/// Flow minus return where a point gives neither, K: 5, 5, 8 and 10 K at 35, 45, 55 and 65 °C flow (standard rating
/// conditions of EN 14511), straight lines between.
pub fn default_spread_k(flow_c: f64) -> f64 {
    match flow_c {
        ..=45.0 => 5.0,
        ..=55.0 => 5.0 + 0.3 * (flow_c - 45.0),
        ..=65.0 => 8.0 + 0.2 * (flow_c - 55.0),
        _ => 10.0,
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    /// EN 14511 standard rating conditions: water 30/35, 40/45, 47/55, 55/65 °C (30/35 and 47/55 also in Regulation (EU) 813/2013).
    #[test]
    fn default_spreads() {
        for (flow, spread) in [
            (25.0, 5.0),
            (35.0, 5.0),
            (45.0, 5.0),
            (55.0, 8.0),
            (65.0, 10.0),
        ] {
            assert!((default_spread_k(flow) - spread).abs() < 1e-12, "{flow}");
        }
    }

    #[test]
    fn carnot_between_7_and_35() {
        assert!((carnot(7.0, 35.0) - 308.15 / 28.0).abs() < 1e-12);
    }
}
