//! A lever: one named quantity, its range, and how it is applied to a case.

use std::sync::Arc;

use super::case::{Account, Case};
use crate::bounds::Bound;
use crate::problem::Problems;
use crate::units::Fuel;

/// One quantity that can be moved, everything else staying as it is.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Lever {
    /// Every price of a kilowatt-hour of electricity, as a multiple of today's.
    ElectricityRate,
    /// Every price of a kilowatt-hour of fuel, as a multiple of today's.
    FuelRate,
    /// Heat-loss coefficient, as a multiple of today's, the emitters staying as they are.
    HeatLoss,
    /// Design flow temperature of the choice's emitters, °C: other emitters for the same load.
    FlowTemperature,
    /// What the choice's machine keeps of its laboratory performance, as a fraction.
    FieldFactor,
}

impl Lever {
    /// Every lever.
    pub const ALL: &'static [Self] = &[
        Self::ElectricityRate,
        Self::FuelRate,
        Self::HeatLoss,
        Self::FlowTemperature,
        Self::FieldFactor,
    ];

    /// Its name and the range it is moved over.
    pub fn bound(self) -> Bound {
        let (label, low, high, unit) = match self {
            Self::ElectricityRate => ("electricity rate", 0.2, 3.0, "× today's"),
            Self::FuelRate => ("gas rate", 0.2, 3.0, "× today's"),
            Self::HeatLoss => ("heat loss", 0.5, 1.5, "× today's"),
            Self::FlowTemperature => ("design flow temperature", 35.0, 65.0, "°C"),
            Self::FieldFactor => ("share of laboratory performance kept", 0.6, 1.0, ""),
        };
        Bound {
            label,
            low,
            high,
            unit,
        }
    }

    /// Where it stands now for a choice; nothing where the choice has no such quantity.
    pub fn now(self, case: &Case, choice: usize) -> Option<f64> {
        let contender = case.contenders.get(choice)?;
        match (self, &contender.system.heating) {
            (Self::ElectricityRate | Self::FuelRate | Self::HeatLoss, _) => Some(1.0),
            (Self::FlowTemperature, _) => Some(contender.system.home.emitters.design_flow_c()),
            (Self::FieldFactor, heating) => heating
                .machine()
                .map(|system| system.machine.field_factor()),
        }
    }

    /// Whether only money depends on it, so that readings need not be made again.
    pub fn moves_only_prices(self) -> bool {
        matches!(self, Self::ElectricityRate | Self::FuelRate)
    }

    /// Moves the lever of a case. Flow temperature and field factor are the choice's own; the rest is the home's.
    ///
    /// # Errors
    /// When a tariff cannot be metered anew.
    pub fn apply(self, value: f64, case: &mut Case, choice: usize) -> Result<(), Problems> {
        match self {
            Self::ElectricityRate => {
                for contender in &mut case.contenders {
                    contender.electricity = scaled(&contender.electricity, value);
                    for beside in &mut contender.beside {
                        if beside.account.tariff.fuel == Fuel::Electricity {
                            beside.account = scaled(&beside.account, value);
                        }
                    }
                    for price in &mut contender.plan.electricity.price {
                        *price *= value;
                    }
                }
            }
            Self::FuelRate => {
                for contender in &mut case.contenders {
                    contender.fuel = contender.fuel.as_ref().map(|fuel| scaled(fuel, value));
                    for price in contender
                        .plan
                        .fuel
                        .iter_mut()
                        .flat_map(|fuel| &mut fuel.price)
                    {
                        *price *= value;
                    }
                }
            }
            Self::HeatLoss => {
                for contender in &mut case.contenders {
                    let fabric = &mut contender.system.home.fabric;
                    *fabric = fabric.with_heat_loss(fabric.heat_loss_w_per_k() * value);
                    contender.moved();
                }
            }
            Self::FlowTemperature => {
                if let Some(contender) = case.contenders.get_mut(choice) {
                    let emitters = &mut contender.system.home.emitters;
                    *emitters = emitters.with_design_flow(value, contender.indoor_c);
                    contender.moved();
                }
            }
            Self::FieldFactor => {
                if let Some(contender) = case.contenders.get_mut(choice)
                    && let Some(system) = contender.system.heating.machine_mut()
                {
                    system.machine = system.machine.with_field_factor(value);
                }
            }
        }
        Ok(())
    }
}

/// The same account with every price of a kilowatt-hour multiplied.
///
/// Buckets do not depend on rates and hourly sums are kept before scaling, so meter and readings stay.
fn scaled(account: &Account, factor: f64) -> Account {
    Account {
        tariff: Arc::new(account.tariff.with_energy_times(factor)),
        ..account.clone()
    }
}
