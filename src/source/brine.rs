//! Glycol and water: freezing point, density, heat capacity, viscosity, conductivity.
//!
//! Melinder 2010, *Properties of Secondary Working Fluids for Indirect Systems*, 2nd ed., International Institute of
//! Refrigeration: each property is a polynomial in concentration and temperature about a base point, with eighteen
//! coefficients \[read in a secondary source that quotes them\]. Water takes the same polynomials at concentration 0, which
//! they cover.

/// What is dissolved in the water of a loop.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Antifreeze {
    /// Nothing.
    Water,
    /// Ethylene glycol: poisonous.
    EthyleneGlycol,
    /// Propylene glycol.
    PropyleneGlycol,
}

/// A heat carrier: water with a share of antifreeze.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Brine {
    antifreeze: Antifreeze,
    mass_share: f64,
}

/// Properties of a brine at one temperature.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct BrineProperties {
    /// Density, kg/m³.
    pub density_kg_per_m3: f64,
    /// Specific heat capacity, kJ/(kg K).
    pub heat_capacity_kj_per_kg_k: f64,
    /// Dynamic viscosity, Pa s.
    pub viscosity_pa_s: f64,
    /// Thermal conductivity, W/(m K).
    pub conductivity_w_per_m_k: f64,
}

/// Greatest mass share of antifreeze that the polynomials cover.
pub const GREATEST_SHARE: f64 = 0.6;

impl Brine {
    /// Water with a mass share of antifreeze, 0 to [`GREATEST_SHARE`]; nothing outside it.
    pub fn new(antifreeze: Antifreeze, mass_share: f64) -> Option<Self> {
        let mass_share = if antifreeze == Antifreeze::Water {
            0.0
        } else {
            mass_share
        };
        (0.0..=GREATEST_SHARE)
            .contains(&mass_share)
            .then_some(Self {
                antifreeze,
                mass_share,
            })
    }

    /// What is dissolved.
    pub fn antifreeze(&self) -> Antifreeze {
        self.antifreeze
    }

    /// Mass share of antifreeze.
    pub fn mass_share(&self) -> f64 {
        self.mass_share
    }

    /// What it is, in words.
    pub fn words(&self) -> String {
        let share = self.mass_share * 100.0;
        match self.antifreeze {
            Antifreeze::Water => "water".to_owned(),
            Antifreeze::EthyleneGlycol => {
                format!("water with {share:.0} % ethylene glycol by mass")
            }
            Antifreeze::PropyleneGlycol => {
                format!("water with {share:.0} % propylene glycol by mass")
            }
        }
    }

    /// Temperature at which ice begins to form, °C.
    pub fn freezing_c(&self) -> f64 {
        if self.mass_share == 0.0 {
            return 0.0;
        }
        let table = self.table();
        let x = self.mass_share * 100.0 - table.base_percent;
        horner(table.freezing, x)
    }

    /// Properties at a temperature (°C), from the freezing point to 60 °C.
    pub fn at(&self, temperature_c: f64) -> BrineProperties {
        let table = self.table();
        let x = self.mass_share * 100.0 - table.base_percent;
        let y = temperature_c - table.base_c;
        BrineProperties {
            density_kg_per_m3: surface(table.density, x, y),
            heat_capacity_kj_per_kg_k: surface(table.heat_capacity, x, y) / 1000.0,
            viscosity_pa_s: surface(table.ln_viscosity, x, y).exp() / 1000.0,
            conductivity_w_per_m_k: surface(table.conductivity, x, y),
        }
    }

    fn table(&self) -> &'static Table {
        match self.antifreeze {
            Antifreeze::Water | Antifreeze::EthyleneGlycol => &ETHYLENE_GLYCOL,
            Antifreeze::PropyleneGlycol => &PROPYLENE_GLYCOL,
        }
    }
}

/// Coefficients by powers of concentration (rows) and of temperature; those that the source does not have are 0.
type Surface = [[f64; 4]; 6];

struct Table {
    /// Base point: mass per cent and °C.
    base_percent: f64,
    base_c: f64,
    /// Freezing point by powers of concentration; its terms in temperature vanish at the base.
    freezing: [f64; 6],
    /// J/(kg K).
    heat_capacity: Surface,
    /// kg/m³.
    density: Surface,
    /// Natural logarithm of mPa s.
    ln_viscosity: Surface,
    /// W/(m K).
    conductivity: Surface,
}

fn horner(
    coefficients: impl IntoIterator<Item = f64, IntoIter: DoubleEndedIterator>,
    x: f64,
) -> f64 {
    coefficients
        .into_iter()
        .rev()
        .fold(0.0, |sum, c| sum * x + c)
}

fn surface(rows: Surface, x: f64, y: f64) -> f64 {
    horner(rows.map(|row| horner(row, y)), x)
}

const ETHYLENE_GLYCOL: Table = Table {
    base_percent: 30.8462,
    base_c: 31.728,
    freezing: [-15.25, -0.808, -0.01334, -7.293e-5, 1.006e-6, 1.14e-9],
    heat_capacity: [
        [3737.0, 2.93, -4.675e-3, -1.389e-5],
        [-17.99, 0.1046, -4.147e-4, 1.847e-7],
        [-0.09933, 3.516e-4, 5.109e-6, -7.138e-8],
        [2.61e-3, -1.189e-6, -1.643e-7, 0.0],
        [1.537e-5, -4.272e-7, 0.0, 0.0],
        [-1.618e-6, 0.0, 0.0, 0.0],
    ],
    density: [
        [1034.0, -0.4781, -2.692e-3, 4.725e-6],
        [1.311, -6.876e-3, 4.805e-5, 1.69e-8],
        [7.49e-5, 7.855e-5, -3.995e-7, 4.982e-9],
        [-1.062e-4, 1.229e-6, -1.153e-8, 0.0],
        [-9.623e-7, -7.211e-8, 0.0, 0.0],
        [4.891e-8, 0.0, 0.0, 0.0],
    ],
    ln_viscosity: [
        [0.4705, -2.55e-2, 1.782e-4, -7.669e-7],
        [2.471e-2, -1.171e-4, 1.052e-6, -1.634e-8],
        [3.328e-6, 1.086e-6, 1.051e-8, -6.475e-10],
        [1.659e-6, 3.157e-9, 4.063e-10, 0.0],
        [3.089e-8, 1.831e-10, 0.0, 0.0],
        [-1.865e-9, 0.0, 0.0, 0.0],
    ],
    conductivity: [
        [0.472, 8.903e-4, -1.058e-6, -2.789e-9],
        [-4.286e-3, -1.473e-5, 1.059e-7, -1.142e-10],
        [1.747e-5, 6.814e-8, -3.612e-9, 2.365e-12],
        [3.017e-8, -2.412e-9, 4.004e-11, 0.0],
        [-1.322e-9, 2.555e-11, 0.0, 0.0],
        [2.678e-11, 0.0, 0.0, 0.0],
    ],
};

const PROPYLENE_GLYCOL: Table = Table {
    base_percent: 30.7031,
    base_c: 32.7083,
    freezing: [-13.25, -0.6631, -0.01094, -2.283e-4, -3.409e-6, 1.465e-8],
    heat_capacity: [
        [3882.0, 2.699, -1.659e-3, -1.032e-5],
        [-13.04, 5.07e-2, -4.752e-5, 1.522e-6],
        [-0.1598, 9.534e-5, 1.167e-5, -4.87e-8],
        [3.539e-4, 3.102e-5, -2.95e-7, 0.0],
        [5e-5, -7.135e-7, 0.0, 0.0],
        [-4.959e-7, 0.0, 0.0, 0.0],
    ],
    density: [
        [1018.0, -0.5406, -2.666e-3, 1.347e-5],
        [0.7604, -9.45e-3, 5.541e-5, -1.343e-7],
        [-2.498e-3, 2.7e-5, -4.018e-7, 3.376e-9],
        [-1.55e-4, 2.829e-6, -7.175e-9, 0.0],
        [-1.131e-6, -2.221e-8, 0.0, 0.0],
        [2.342e-8, 0.0, 0.0, 0.0],
    ],
    ln_viscosity: [
        [0.6837, -3.045e-2, 2.525e-4, -1.399e-6],
        [3.328e-2, -3.984e-4, 4.332e-6, -1.86e-8],
        [5.453e-5, -8.6e-8, -1.593e-8, -4.465e-11],
        [-3.9e-6, 1.054e-7, -1.589e-9, 0.0],
        [-1.587e-8, 4.475e-10, 0.0, 0.0],
        [3.564e-9, 0.0, 0.0, 0.0],
    ],
    conductivity: [
        [0.4513, 7.955e-4, 3.482e-8, -5.966e-9],
        [-4.795e-3, -1.678e-5, 8.941e-8, 1.493e-10],
        [2.076e-5, 1.563e-7, -4.615e-9, 9.897e-12],
        [-9.083e-8, -2.518e-9, 6.543e-11, 0.0],
        [-5.952e-10, -3.605e-11, 0.0, 0.0],
        [2.104e-11, 0.0, 0.0, 0.0],
    ],
};

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_share_outside_the_polynomials_is_no_brine() {
        assert!(Brine::new(Antifreeze::EthyleneGlycol, 0.61).is_none());
        assert!(Brine::new(Antifreeze::PropyleneGlycol, -0.1).is_none());
        assert_eq!(
            Brine::new(Antifreeze::Water, 0.3).unwrap().mass_share(),
            0.0
        );
    }

    #[test]
    fn more_antifreeze_freezes_later_and_flows_worse() {
        for antifreeze in [Antifreeze::EthyleneGlycol, Antifreeze::PropyleneGlycol] {
            let all: Vec<_> = (1..=11)
                .map(|i| Brine::new(antifreeze, f64::from(i) * 0.05).unwrap())
                .collect();
            for pair in all.windows(2) {
                assert!(pair[1].freezing_c() < pair[0].freezing_c(), "{pair:?}");
                assert!(
                    pair[1].at(5.0).viscosity_pa_s > pair[0].at(5.0).viscosity_pa_s,
                    "{pair:?}"
                );
            }
        }
    }
}
