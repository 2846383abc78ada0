//! How each lever acts on the contenders of a case.

use crate::fault::{self, Fault};
use std::sync::Arc;

use super::case::{Account, Contender};
use super::lever::{Again, Lever};
use crate::heatpump::SheetDoubts;
use crate::home::Emitters;
use crate::problem::{Place, Problem, Problems};
use crate::source::Source;
use crate::units::Fuel;
use crate::year::{Heating, Plan, Signal};

impl Lever {
    /// Acts on contenders that stand as the brief put them. What belongs to the home or the supply moves for every system, what
    /// belongs to a choice for that choice alone. The value has been checked; `hours` are those of the axis.
    ///
    /// # Errors
    /// A loop of another length whose response cannot be made.
    pub(super) fn act(
        self,
        value: f64,
        contenders: &mut [Contender],
        choice: usize,
        hours: usize,
    ) -> Result<(), Problems> {
        // Bills, carbon and today's boiler draw nothing from the ground.
        if self.again() == Again::Everyone && self != Self::BoilerEfficiency {
            contenders.iter_mut().for_each(Contender::moved);
        }
        match self {
            Self::ElectricityRate => {
                for contender in contenders.iter_mut() {
                    contender.electricity = scaled(&contender.electricity, value);
                    for beside in &mut contender.beside {
                        if beside.account.tariff.fuel == Fuel::Electricity {
                            beside.account = scaled(&beside.account, value);
                        }
                    }
                }
                each_plan(contenders, |plan| times(&mut plan.electricity.price, value));
            }
            Self::FuelRate => {
                for contender in contenders.iter_mut() {
                    contender.fuel = contender.fuel.as_ref().map(|fuel| scaled(fuel, value));
                }
                each_plan(contenders, |plan| {
                    if let Some(Signal { price, .. }) = &mut plan.fuel {
                        times(price, value);
                    }
                });
            }
            Self::ElectricityCarbon => {
                each_plan(contenders, |plan| {
                    times(&mut plan.electricity.carbon_kg, value);
                });
            }
            Self::HeatLoss => {
                for contender in contenders {
                    let fabric = &mut contender.system.home.fabric;
                    *fabric = fabric.with_heat_loss(fabric.heat_loss_w_per_k() * value);
                    if fault::on(Fault::EmittersResized) {
                        let held = contender.system.home.emitters;
                        let load_kw = held.design_load_kw() * value;
                        contender.system.home.emitters = Emitters::of_groups(
                            held.groups(),
                            load_kw,
                            contender.indoor_c,
                            held.greatest_flow_c(),
                        )
                        .unwrap_or(held);
                    }
                }
            }
            Self::BoilerEfficiency => {
                for contender in contenders.iter_mut().filter(|contender| contender.today) {
                    if let Heating::Boiler { boiler, .. } = &mut contender.system.heating {
                        *boiler = boiler.with_efficiency_times(value);
                    }
                }
            }
            Self::HotWater => {
                for contender in contenders {
                    if let Some(water) = &mut contender.system.home.hot_water {
                        times(&mut water.daily_kwh, value);
                    }
                }
            }
            Self::Indoor => {
                let warmer_k = contenders
                    .get(choice)
                    .map_or(0.0, |contender| value - contender.indoor_c);
                for contender in contenders.iter_mut() {
                    contender.indoor_c += warmer_k;
                    let pattern = &mut contender.pattern;
                    for set_point_c in pattern.weekday_c.iter_mut().chain(&mut pattern.weekend_c) {
                        *set_point_c += warmer_k;
                    }
                }
                each_plan(contenders, |plan| {
                    plan.comfort_c += warmer_k;
                    for target_c in plan
                        .recovery
                        .iter_mut()
                        .flat_map(|ahead| ahead.target_c.iter_mut())
                    {
                        *target_c += warmer_k;
                    }
                    let asked_c = plan.asked_c.iter_mut().flat_map(|asked| asked.iter_mut());
                    let below_c = plan.backup_below_c.iter_mut();
                    let set_points_c = plan.set_point_c.iter_mut().chain(below_c);
                    for set_point_c in set_points_c.chain(asked_c) {
                        *set_point_c += warmer_k;
                    }
                });
            }
            Self::FlowTemperature
            | Self::RatedOutput
            | Self::FieldFactor
            | Self::HighLift
            | Self::PartLoad
            | Self::OutputInCold
            | Self::LoopResistance
            | Self::LoopLength
            | Self::Capital
            | Self::Grant => {
                if let Some(contender) = contenders.get_mut(choice) {
                    if self.again() == Again::Choice {
                        contender.moved();
                    }
                    self.act_on(value, contender, hours)?;
                }
            }
        }
        Ok(())
    }

    /// Acts on one choice.
    fn act_on(self, value: f64, contender: &mut Contender, hours: usize) -> Result<(), Problems> {
        match (self, contender.system.heating.machine_mut()) {
            (Self::FlowTemperature, _) => {
                let emitters = &mut contender.system.home.emitters;
                *emitters = emitters.with_design_flow(value, contender.indoor_c);
            }
            (Self::RatedOutput, Some(system)) => {
                system.machine = system.machine.scaled_to(value);
            }
            (Self::FieldFactor, Some(system)) => {
                system.machine = system.machine.with_field_factor(value);
            }
            (Self::LoopResistance, Some(system)) => {
                if let Source::Ground(ground) = &mut system.source {
                    ground.resistance_k_per_kw *= value;
                }
            }
            (Self::LoopLength, Some(system)) => {
                if let Source::Buried(buried) = &mut system.source {
                    let built = buried.design.with_length(value).build(hours);
                    **buried = built.map_err(|error| {
                        let place = Place::field(self.name());
                        Problem::new(
                            place,
                            format!("a loop of {value:.0} m: {}", error.why),
                            "a loop whose response can be made",
                            "give another length",
                        )
                    })?;
                }
            }
            (Self::Capital, _) => {
                contender.outlay = contender
                    .outlay
                    .as_ref()
                    .map(|outlay| outlay.with_capital(value));
            }
            (Self::Grant, _) => {
                if let Some(outlay) = &mut contender.outlay {
                    outlay.grant = value;
                }
            }
            // Doubts about a sheet are met all together by `doubt_sheet`.
            _ => {}
        }
        Ok(())
    }
}

/// Meets what some levers doubt about the sheet of a choice: one map for all of them.
pub(super) fn doubt_sheet(moves: &[(Lever, f64)], contender: &mut Contender) {
    let Some(system) = contender.system.heating.machine_mut() else {
        return;
    };
    let mut doubts = SheetDoubts::default();
    for &(lever, value) in moves {
        if let Some(doubted) = lever.doubted(&mut doubts) {
            *doubted = value;
        }
    }
    system.machine = system.machine.with_doubts(&doubts);
}

/// Changes the plan of every contender; what the first one's shares with it, it shares again.
fn each_plan(contenders: &mut [Contender], change: impl Fn(&mut Plan)) {
    let mut first: Option<Arc<Plan>> = None;
    for contender in contenders {
        let plan = Arc::make_mut(&mut contender.plan);
        change(plan);
        match &first {
            Some(first) => plan.share(first),
            None => first = Some(Arc::clone(&contender.plan)),
        }
    }
}

fn times(column: &mut [f64], factor: f64) {
    column.iter_mut().for_each(|value| *value *= factor);
}

/// The same account with every price of a kilowatt-hour multiplied; meters and readings do not depend on rates.
fn scaled(account: &Account, factor: f64) -> Account {
    Account {
        tariff: Arc::new(account.tariff.with_energy_times(factor)),
        ..account.clone()
    }
}
