//! What two systems are compared by.

/// What two systems are compared by; less is better.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Measure {
    /// The bills of a mean year.
    YearlyCost,
    /// Everything paid over the years that are counted, in today's worth.
    LifetimeCost,
    /// Greenhouse gas of a mean year, kg CO2e.
    Carbon,
}

impl Measure {
    /// Every measure.
    pub const ALL: &'static [Self] = &[Self::YearlyCost, Self::LifetimeCost, Self::Carbon];

    /// Its name.
    pub fn name(self) -> &'static str {
        match self {
            Self::YearlyCost => "yearly cost",
            Self::LifetimeCost => "lifetime cost",
            Self::Carbon => "carbon",
        }
    }
}
