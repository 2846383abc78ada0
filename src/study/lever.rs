//! A lever: one named quantity, its range, and where it stands.

use super::case::Case;
use crate::bounds::{self, Bound};
use crate::heatpump::SheetDoubts;
use crate::problem::{Place, Problem, Problems};
use crate::source::{Memory, Source};
use crate::year::Heating;

/// One quantity that can be moved, everything else staying as it is.
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord)]
pub enum Lever {
    /// Every price of a kilowatt-hour of electricity, as a multiple of today's.
    ElectricityRate,
    /// Every price of a kilowatt-hour of fuel, as a multiple of today's.
    FuelRate,
    /// Heat-loss coefficient, as a multiple of today's, the emitters staying as they are.
    HeatLoss,
    /// Design flow temperature of the choice's emitters, °C: other emitters for the same load.
    FlowTemperature,
    /// Indoor set point, °C: of the choice, and of today's system by the same difference.
    Indoor,
    /// Hot water drawn in a day, as a multiple of today's.
    HotWater,
    /// Rated output of the choice's machine, kW.
    RatedOutput,
    /// What the choice's machine keeps of its laboratory performance, as a fraction.
    FieldFactor,
    /// Electricity that the choice's machine takes at a high lift, as a multiple of what its sheet says; see [`SheetDoubts`].
    HighLift,
    /// Electricity that it takes at part load, the same way.
    PartLoad,
    /// Greatest output that it gives in the cold, the same way.
    OutputInCold,
    /// How far the choice's loop falls for each kilowatt drawn, as a multiple of its design, where the loop is known by that alone.
    LoopResistance,
    /// Length of the choice's bores or trenches, m, all longer or shorter alike.
    LoopLength,
    /// What the choice costs to put in, before the grant.
    Capital,
    /// What others pay towards the choice.
    Grant,
    /// Carbon of a kilowatt-hour of electricity, as a multiple of today's.
    ElectricityCarbon,
    /// Efficiency of today's boiler, as a multiple of what it is taken to be.
    BoilerEfficiency,
}

/// What has to be done again when a lever is moved.
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord)]
pub(super) enum Again {
    /// The bills, from the readings that are there.
    Bills,
    /// The year of the choice.
    Choice,
    /// The year of every system.
    Everyone,
}

impl Lever {
    /// Every lever.
    pub const ALL: &'static [Self] = &[
        Self::ElectricityRate,
        Self::FuelRate,
        Self::HeatLoss,
        Self::FlowTemperature,
        Self::Indoor,
        Self::HotWater,
        Self::RatedOutput,
        Self::FieldFactor,
        Self::HighLift,
        Self::PartLoad,
        Self::OutputInCold,
        Self::LoopResistance,
        Self::LoopLength,
        Self::Capital,
        Self::Grant,
        Self::ElectricityCarbon,
        Self::BoilerEfficiency,
    ];

    /// Its name.
    pub fn name(self) -> &'static str {
        match self {
            Self::ElectricityRate => "electricity rate",
            Self::FuelRate => "gas rate",
            Self::HeatLoss => "heat loss",
            Self::FlowTemperature => "design flow temperature",
            Self::Indoor => "indoor temperature",
            Self::HotWater => "hot water",
            Self::RatedOutput => "rated output",
            Self::FieldFactor => "share of laboratory performance kept",
            Self::HighLift => "electricity at a high lift",
            Self::PartLoad => "electricity at part load",
            Self::OutputInCold => "output in the cold",
            Self::LoopResistance => "loop resistance",
            Self::LoopLength => "loop length",
            Self::Capital => "capital",
            Self::Grant => "grant",
            Self::ElectricityCarbon => "carbon of electricity",
            Self::BoilerEfficiency => "efficiency of today's boiler",
        }
    }

    /// The lever of a name; upper and lower case are alike.
    pub fn named(name: &str) -> Option<Self> {
        let name = name.trim().to_lowercase();
        Self::ALL.iter().copied().find(|lever| lever.name() == name)
    }

    /// Its unit; money is in the currency of the case.
    pub fn unit(self) -> &'static str {
        match self {
            Self::FlowTemperature | Self::Indoor => "°C",
            Self::RatedOutput => "kW",
            Self::LoopLength => "m",
            Self::FieldFactor | Self::Capital | Self::Grant => "",
            Self::HighLift | Self::PartLoad | Self::OutputInCold => "× the sheet's",
            _ => "× today's",
        }
    }

    /// Whether it is an amount of money.
    pub fn is_money(self) -> bool {
        matches!(self, Self::Capital | Self::Grant)
    }

    /// Whether it belongs to the home or the supply, so that it moves for every system alike.
    pub(super) fn is_shared(self) -> bool {
        self.again() != Again::Choice && !self.is_money()
    }

    /// Its place in the order in which levers act.
    pub(super) fn order(self) -> usize {
        Self::ALL
            .iter()
            .position(|lever| *lever == self)
            .unwrap_or(usize::MAX)
    }

    /// The range it is looked at over for a choice; nothing where the choice has no such quantity.
    pub fn range(self, case: &Case, choice: usize) -> Option<Bound> {
        /// Sizes looked at, as multiples of the design heat load. A choice of ours.
        const SIZES: (f64, f64) = (0.4, 2.5);
        /// Capital looked at, as a multiple of what it is. A choice of ours.
        const CAPITAL: f64 = 2.0;
        let now = self.now(case, choice)?;
        let contender = case.contenders.get(choice)?;
        let (low, high) = match self {
            Self::ElectricityRate | Self::FuelRate => (0.2, 3.0),
            Self::HeatLoss => (0.5, 1.5),
            Self::FlowTemperature => (
                35.0,
                self.highest_flow_c(case, choice).unwrap_or(65.0).min(65.0),
            ),
            Self::Indoor => (15.0, 25.0),
            Self::HotWater => (0.0, 3.0),
            Self::RatedOutput => {
                let load_kw = contender.design_load_kw;
                ((SIZES.0 * load_kw).min(now), (SIZES.1 * load_kw).max(now))
            }
            Self::FieldFactor => (0.6, 1.0),
            Self::HighLift | Self::PartLoad | Self::OutputInCold => (0.8, 1.25),
            Self::LoopResistance => (0.25, 4.0),
            Self::LoopLength => (0.5 * now, 2.0 * now),
            Self::Capital => (0.0, CAPITAL * now),
            Self::Grant => (0.0, contender.outlay.as_ref()?.capital().max(now)),
            Self::ElectricityCarbon => (0.0, 3.0),
            Self::BoilerEfficiency => (0.8, 1.15),
        };
        (low < high).then_some(Bound {
            label: self.name(),
            low,
            high,
            unit: self.unit(),
        })
    }

    /// What it can be at all, wider than what is looked at.
    fn possible(self) -> Bound {
        let named = |bound: Bound| Bound {
            label: self.name(),
            unit: self.unit(),
            ..bound
        };
        let from_to = |low, high| Bound {
            label: self.name(),
            low,
            high,
            unit: self.unit(),
        };
        match self {
            Self::FlowTemperature => named(bounds::FLOW_C),
            Self::Indoor => named(bounds::INDOOR_C),
            Self::RatedOutput => named(bounds::OUTPUT_KW),
            Self::FieldFactor => named(bounds::FIELD_FACTOR),
            Self::HeatLoss | Self::LoopResistance => from_to(0.01, 100.0),
            Self::BoilerEfficiency => from_to(0.5, 1.5),
            // At the greatest lift a doubt counts nearly twice: no electricity becomes negative.
            Self::HighLift | Self::PartLoad | Self::OutputInCold => from_to(0.6, 1.4),
            Self::LoopLength => from_to(1.0, 10_000.0),
            Self::ElectricityRate | Self::FuelRate | Self::HotWater | Self::ElectricityCarbon => {
                from_to(0.0, 100.0)
            }
            Self::Capital | Self::Grant => from_to(0.0, 1e9),
        }
    }

    /// Highest design flow that the machine of a choice reaches on the design day, °C; nothing for other heating.
    fn highest_flow_c(self, case: &Case, choice: usize) -> Option<f64> {
        let contender = case.contenders.get(choice)?;
        let system = contender.system.heating.machine()?;
        let limits = system.machine.limits();
        let ground = contender
            .aged
            .map_or_else(Memory::default, |aged| aged.memory);
        let coldest = system
            .source
            .cold_offer(contender.design_outdoor_c, &ground);
        Some(limits.highest_flow_at(coldest.open_c))
    }

    /// Checks that a choice can have a value of it.
    ///
    /// # Errors
    /// A value outside what is possible, a flow that the machine does not reach, a quantity that the choice does not have.
    pub fn check(self, value: f64, case: &Case, choice: usize) -> Result<(), Problems> {
        let refuse = |found: String, allowed: String, remedy: &str| {
            Err(Problems::from(Problem::new(
                Place::field(self.name()),
                found,
                allowed,
                remedy,
            )))
        };
        if self.now(case, choice).is_none() {
            let label = case
                .contenders
                .get(choice)
                .map_or("", |contender| &contender.system.label);
            let has: Vec<_> = Self::ALL
                .iter()
                .filter(|lever| lever.now(case, choice).is_some())
                .map(|lever| format!("\"{}\"", lever.name()))
                .collect();
            return refuse(
                format!("\"{label}\" has no {}", self.name()),
                has.join(", "),
                if self.is_money() {
                    "give the choice its capital, or move another lever"
                } else {
                    "move a lever that this choice has"
                },
            );
        }
        let bound = self.possible();
        if !bound.holds(value) {
            return refuse(
                format!("{value} {}", self.unit()).trim_end().to_owned(),
                bound.words(),
                "beyond this the home or the machine would be impossible",
            );
        }
        if self == Self::FlowTemperature
            && let Some(highest_c) = self.highest_flow_c(case, choice)
            && value > highest_c
        {
            return refuse(
                format!(
                    "a design flow of {value:.1} °C, which the machine does not reach on the design day"
                ),
                format!("at most {highest_c:.1} °C"),
                "choose larger emitters or a machine that reaches more",
            );
        }
        Ok(())
    }

    /// Where it stands for a choice; nothing where the choice has no such quantity.
    pub fn now(self, case: &Case, choice: usize) -> Option<f64> {
        let contender = case.contenders.get(choice)?;
        let stands = match (self, contender.system.heating.machine()) {
            (Self::FuelRate, _) => case
                .contenders
                .iter()
                .any(|contender| contender.fuel.is_some())
                .then_some(1.0),
            (Self::ElectricityRate | Self::HeatLoss | Self::ElectricityCarbon, _) => Some(1.0),
            (Self::BoilerEfficiency, _) => case
                .contenders
                .first()
                .filter(|today| matches!(today.system.heating, Heating::Boiler { .. }))
                .map(|_| 1.0),
            (Self::HotWater, _) => contender.system.home.hot_water.as_ref().map(|_| 1.0),
            (Self::FlowTemperature, _) => Some(contender.system.home.emitters.design_flow_c()),
            (Self::Indoor, _) => Some(contender.indoor_c),
            (Self::RatedOutput, Some(system)) => Some(system.machine.rated_output_kw()),
            (Self::FieldFactor, Some(system)) => Some(system.machine.field_factor()),
            (Self::HighLift | Self::OutputInCold, Some(_)) => Some(1.0),
            (Self::PartLoad, Some(system)) => system.machine.turns_down().then_some(1.0),
            (Self::LoopResistance, Some(system)) => {
                matches!(system.source, Source::Ground(_)).then_some(1.0)
            }
            (Self::LoopLength, Some(system)) => match &system.source {
                Source::Buried(buried) => Some(buried.length_m()),
                _ => None,
            },
            (
                Self::RatedOutput
                | Self::FieldFactor
                | Self::HighLift
                | Self::PartLoad
                | Self::OutputInCold
                | Self::LoopResistance
                | Self::LoopLength,
                _,
            ) => None,
            (Self::Capital, _) => contender
                .outlay
                .as_ref()
                .map(|outlay| outlay.capital())
                .filter(|capital| *capital > 0.0),
            (Self::Grant, _) => contender.outlay.as_ref().map(|outlay| outlay.grant),
        };
        stands.map(|stands| case.moved_to(self, choice).unwrap_or(stands))
    }

    /// Moves it for a choice of a case; see [`Case::apply`].
    ///
    /// # Errors
    /// A value that it cannot take.
    pub fn apply(self, value: f64, case: &mut Case, choice: usize) -> Result<(), Problems> {
        case.apply(choice, &[(self, value)])
    }

    /// What has to be done again when it is moved.
    pub(super) fn again(self) -> Again {
        match self {
            Self::ElectricityRate
            | Self::FuelRate
            | Self::Capital
            | Self::Grant
            | Self::ElectricityCarbon => Again::Bills,
            Self::FlowTemperature
            | Self::RatedOutput
            | Self::FieldFactor
            | Self::HighLift
            | Self::PartLoad
            | Self::OutputInCold
            | Self::LoopResistance
            | Self::LoopLength => Again::Choice,
            Self::HeatLoss | Self::Indoor | Self::HotWater | Self::BoilerEfficiency => {
                Again::Everyone
            }
        }
    }

    /// What it doubts about a sheet; nothing for a lever that doubts no sheet.
    pub(super) fn doubted(self, doubts: &mut SheetDoubts) -> Option<&mut f64> {
        match self {
            Self::HighLift => Some(&mut doubts.electricity_at_high_lift),
            Self::PartLoad => Some(&mut doubts.electricity_at_part_load),
            Self::OutputInCold => Some(&mut doubts.output_in_cold),
            _ => None,
        }
    }
}
