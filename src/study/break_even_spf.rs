//! The seasonal performance factor at which a heat pump's bill equals the boiler's.

use super::pair::{CHOICE, Compared};

/// What a break-even SPF follows from: a year of the boiler, and prices.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Prices {
    /// Electricity, currency units per kWh.
    pub electricity_per_kwh: f64,
    /// Fuel, currency units per gross kWh.
    pub fuel_per_kwh: f64,
    /// Fuel of a year, gross kWh.
    pub fuel_kwh: f64,
    /// Heat the boiler makes of it, per gross kWh.
    pub efficiency: f64,
    /// Standing charge of the fuel in a year.
    pub fuel_standing: f64,
    /// The boiler's own electricity in a year, kWh.
    pub boiler_electricity_kwh: f64,
}

/// Which of the two applies.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Applies {
    /// The fuel goes on being supplied: only rates and the boiler's own electricity are saved.
    FuelStays,
    /// The fuel is disconnected: its standing charge is saved too.
    FuelEnds,
}

/// The SPF at which both cost the same in a year.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct BreakEvenSpf {
    /// From the two unit rates and the boiler's efficiency alone.
    pub unit_rates: f64,
    /// With the fuel's standing charge and the boiler's own electricity, which also go when the fuel is disconnected.
    pub whole_bill: f64,
}

/// Break-even SPF for the same heat: equal bills, by hand.
///
/// Unit rates: `pe η / pf`. Whole bill: `pe H / (F pf + S + Eb pe)` with `H = F η`. Nothing where the boiler costs nothing.
///
/// ```
/// use winterledger::study::{Prices, break_even_spf};
/// // Published household cap of April to June 2026 against an 85 % boiler: 3.65 on unit rates alone.
/// let cap = Prices {
///     electricity_per_kwh: 0.2467,
///     fuel_per_kwh: 0.0574,
///     fuel_kwh: 12_000.0,
///     efficiency: 0.85,
///     fuel_standing: 0.2909 * 365.0,
///     boiler_electricity_kwh: 182.6,
/// };
/// assert!(break_even_spf(&cap).is_some_and(|spf| (spf.unit_rates - 3.65).abs() < 0.005));
/// ```
pub fn break_even_spf(prices: &Prices) -> Option<BreakEvenSpf> {
    let pe = prices.electricity_per_kwh;
    let fuel = prices.fuel_kwh * prices.fuel_per_kwh;
    let whole = fuel + prices.fuel_standing + prices.boiler_electricity_kwh * pe;
    let heat_kwh = prices.fuel_kwh * prices.efficiency;
    (fuel > 0.0).then(|| BreakEvenSpf {
        unit_rates: pe * prices.efficiency / prices.fuel_per_kwh,
        whole_bill: pe * heat_kwh / whole,
    })
}

impl Compared {
    /// The prices behind a break-even SPF, as the two systems pay them on the mean, with tax; nothing unless today's system burns a fuel and
    /// the choice runs on electricity. `efficiency` counts the heat that the choice makes, a store's losses included.
    pub fn break_even_prices(&self) -> Option<(Prices, Applies)> {
        let [today, choice] = &self.outcomes;
        let (boiler, pump) = (today.mean_sums(), choice.mean_sums());
        let heat_kwh = pump.space_heat_kwh() + pump.water_heat_kwh();
        if boiler.fuel_kwh <= 0.0 || pump.fuel_kwh > 0.0 || pump.electricity_kwh() <= 0.0 {
            return None;
        }
        // Tax that is added is shared like the amounts it is taken of.
        let taxed = |total: f64, energy: f64, standing: f64| {
            let before = energy + standing;
            if before > 0.0 {
                total * energy / before
            } else {
                0.0
            }
        };
        let fuel_standing = today.costs.fuel_standing;
        let fuel = taxed(today.costs.fuel, today.costs.fuel_energy, fuel_standing);
        let electricity = taxed(
            choice.costs.electricity,
            choice.costs.electricity_energy,
            choice.costs.electricity_standing,
        );
        let prices = Prices {
            electricity_per_kwh: electricity / pump.electricity_kwh(),
            fuel_per_kwh: fuel / boiler.fuel_kwh,
            fuel_kwh: boiler.fuel_kwh,
            efficiency: heat_kwh / boiler.fuel_kwh,
            fuel_standing: today.costs.fuel - fuel,
            boiler_electricity_kwh: boiler.electricity_kwh(),
        };
        let applies = if self.case.contenders[CHOICE].fuel.is_some() {
            Applies::FuelStays
        } else {
            Applies::FuelEnds
        };
        Some((prices, applies))
    }
}
