//! Which of boiler and machine serves an hour, where a home keeps both.

/// The rule by which a hybrid decides an hour.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum HybridRule {
    /// The boiler below an outdoor temperature, °C.
    ByOutdoor {
        /// Outdoor temperature.
        below_c: f64,
    },
    /// Whichever meets the hour at the lower cost.
    ByCost,
    /// Whichever meets the hour with the lower carbon.
    ByCarbon,
}

/// What serves an hour.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Side {
    /// The machine, the boiler adding what it cannot.
    Machine,
    /// The boiler alone.
    Boiler,
}

/// What a kilowatt-hour of heat would take in an hour, one way or the other.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Effort {
    /// Its cost.
    pub cost: f64,
    /// Its carbon, kg.
    pub carbon_kg: f64,
}

impl HybridRule {
    /// The word in briefs and results.
    pub fn word(self) -> &'static str {
        match self {
            Self::ByOutdoor { .. } => "by-outdoor",
            Self::ByCost => "by-cost",
            Self::ByCarbon => "by-carbon",
        }
    }

    /// Whether it looks at prices or carbon, so that other ones make another year.
    pub fn follows_signals(self) -> bool {
        matches!(self, Self::ByCost | Self::ByCarbon)
    }

    /// Decides an hour. The machine serves when both are alike.
    pub fn decide(self, outdoor_c: f64, machine: Effort, boiler: Effort) -> Side {
        let boiler = match self {
            Self::ByOutdoor { below_c } => outdoor_c < below_c,
            Self::ByCost => boiler.cost < machine.cost,
            Self::ByCarbon => boiler.carbon_kg < machine.carbon_kg,
        };
        if boiler { Side::Boiler } else { Side::Machine }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn each_rule_looks_at_its_own_signal() {
        let machine = Effort {
            cost: 0.30,
            carbon_kg: 0.2,
        };
        let boiler = Effort {
            cost: 0.25,
            carbon_kg: 0.9,
        };
        assert_eq!(
            HybridRule::ByCost.decide(5.0, machine, boiler),
            Side::Boiler
        );
        assert_eq!(
            HybridRule::ByCarbon.decide(5.0, machine, boiler),
            Side::Machine
        );
        let cold = HybridRule::ByOutdoor { below_c: 2.0 };
        assert_eq!(cold.decide(1.9, machine, boiler), Side::Boiler);
        assert_eq!(cold.decide(2.0, machine, boiler), Side::Machine);
        assert_eq!(
            HybridRule::ByCost.decide(0.0, machine, machine),
            Side::Machine
        );
    }
}
