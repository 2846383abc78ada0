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
    /// The same control over emitters whose design flow has moved from one temperature to another (°C): what it sets above the room
    /// (°C) changes in proportion.
    pub fn scaled(&self, from_c: f64, to_c: f64, room_c: f64) -> Self {
        let scale = (to_c - room_c) / (from_c - room_c);
        let moved = |flow_c: f64| room_c + (flow_c - room_c) * scale;
        match *self {
            Self::FollowingLoad => Self::FollowingLoad,
            Self::Fixed(flow_c) => Self::Fixed(moved(flow_c)),
            Self::Line { cold, mild } => Self::Line {
                cold: (cold.0, moved(cold.1)),
                mild: (mild.0, moved(mild.1)),
            },
        }
    }

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
