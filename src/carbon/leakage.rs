//! Refrigerant that escapes, as carbon dioxide equivalent.

/// What escapes from a machine, an optional line beside the carbon of its energy.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Leakage {
    /// Refrigerant in the machine, kg.
    pub charge_kg: f64,
    /// Global warming potential over 100 years, from a named report.
    pub gwp100: f64,
    /// Share of the charge that escapes in a year, 0 to 1.
    pub per_year: f64,
    /// Share of the charge that escapes when the machine is taken out, 0 to 1.
    pub at_end: f64,
}

impl Leakage {
    /// Carbon dioxide equivalent a year over a life in years, kg: the yearly loss, made good by topping up, and the
    /// loss at the end spread over the life.
    pub fn kg_per_year(&self, life_years: f64) -> f64 {
        self.charge_kg * self.gwp100 * (self.per_year + self.at_end / life_years)
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    /// By hand with R32's 675 of IPCC AR4, the value in Annex I of Regulation (EU) 517/2014 \[from memory\]:
    /// 1.2 kg × 675 × (0.02 + 0.15 / 15) = 24.3 kg.
    #[test]
    fn yearly_loss_and_the_end_add_up() {
        let leakage = Leakage {
            charge_kg: 1.2,
            gwp100: 675.0,
            per_year: 0.02,
            at_end: 0.15,
        };
        assert!((leakage.kg_per_year(15.0) - 24.3).abs() < 1e-9);
    }
}
