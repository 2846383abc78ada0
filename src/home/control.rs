//! How the flow temperature is set.

/// How the flow temperature is set.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum Control {
    /// Just as hot as the load of the hour needs.
    FollowingLoad,
    /// A straight line over outdoor temperature through two points (outdoor °C, flow °C), level beyond them.
    Line {
        /// The colder point.
        cold: (f64, f64),
        /// The milder point.
        mild: (f64, f64),
    },
    /// The same at every load, °C.
    Fixed(f64),
}

impl Control {
    /// The flow it sets at an outdoor temperature, °C; nothing when it follows the load.
    pub fn flow_c(&self, outdoor_c: f64) -> Option<f64> {
        match *self {
            Self::FollowingLoad => None,
            Self::Fixed(flow_c) => Some(flow_c),
            Self::Line { cold, mild } => {
                let share = ((outdoor_c - cold.0) / (mild.0 - cold.0)).clamp(0.0, 1.0);
                Some(cold.1 + share * (mild.1 - cold.1))
            }
        }
    }
}
