//! What the cold side offers: outdoor air, ground.
//!
//! Every source answers each hour with an [`Offer`]: the temperature it would give with nothing drawn, and how far it
//! falls per kilowatt drawn. The step solves machine and offer together.

mod undisturbed;

pub use undisturbed::{AnnualSwing, TRENCH_DIFFUSIVITY_M2_PER_S, undisturbed_c};

/// What a source gives in an hour.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Offer {
    /// Temperature entering the machine with nothing drawn, °C.
    pub open_c: f64,
    /// How far it falls for each kilowatt of heat drawn, K/kW.
    pub k_per_kw: f64,
}

/// Where the heat comes from.
#[derive(Debug, Clone, PartialEq)]
pub enum Source {
    /// Outdoor air, which nobody can draw down.
    OutdoorAir,
    /// A buried loop behind one steady resistance.
    Ground(GroundLoop),
}

/// A buried loop: undisturbed ground hour by hour behind a steady loop resistance.
#[derive(Debug, Clone, PartialEq)]
pub struct GroundLoop {
    /// Undisturbed ground at loop depth for every hour of the axis, °C.
    pub undisturbed_c: Vec<f64>,
    /// How far the brine entering the machine falls below the ground for each kilowatt drawn, K/kW.
    pub resistance_k_per_kw: f64,
}

impl Source {
    /// The offer of an hour with an outdoor temperature (°C).
    pub fn offer(&self, hour: usize, outdoor_c: f64) -> Offer {
        match self {
            Self::OutdoorAir => Offer {
                open_c: outdoor_c,
                k_per_kw: 0.0,
            },
            Self::Ground(ground) => Offer {
                open_c: ground.undisturbed_c.get(hour).copied().unwrap_or(f64::NAN),
                k_per_kw: ground.resistance_k_per_kw,
            },
        }
    }

    /// The lowest temperature it offers over the hours, °C; for air that of the weather.
    pub fn lowest_c(&self, outdoor_c: &[f64]) -> f64 {
        let column = match self {
            Self::OutdoorAir => outdoor_c,
            Self::Ground(ground) => &ground.undisturbed_c,
        };
        column.iter().copied().fold(f64::INFINITY, f64::min)
    }
}
