//! What a carbon factor counts.

/// What is counted in a carbon factor.
#[derive(Debug, Clone, Copy, Default, PartialEq, Eq, Hash)]
pub enum Scope {
    /// Burning alone: fuel in the home, and fuel in power stations per kilowatt-hour that leaves them (location-based).
    Burning,
    /// Burning per kilowatt-hour that reaches the meter: electricity with the losses of the grid. Nothing is lost
    /// between a flue and itself, so a fuel's factor is the same as under `Burning`, but it must be given as this.
    #[default]
    BurningAtTheMeter,
    /// Everything before the meter too: extraction, refining, transport, leakage and losses.
    WithUpstream,
}

impl Scope {
    /// The scopes.
    pub const ALL: [Self; 3] = [Self::Burning, Self::BurningAtTheMeter, Self::WithUpstream];

    /// The name as written in files.
    pub fn name(self) -> &'static str {
        match self {
            Self::Burning => "burning",
            Self::BurningAtTheMeter => "burning-at-the-meter",
            Self::WithUpstream => "with-upstream",
        }
    }

    /// The scope of a name.
    pub fn from_name(name: &str) -> Option<Self> {
        Self::ALL.into_iter().find(|scope| scope.name() == name)
    }

    /// In words, after "counts".
    pub fn words(self) -> &'static str {
        match self {
            Self::Burning => "burning alone, electricity as generated",
            Self::BurningAtTheMeter => "burning alone, electricity with grid losses",
            Self::WithUpstream => "burning and everything before the meter",
        }
    }
}
