//! A case: one home's weather, and the systems that could heat it.

use std::ops::Range;
use std::sync::Arc;

use chrono_tz::Tz;

use super::act::doubt_sheet;
use super::ageing::{Aged, Ageing, settled};
use super::fuel_carbon::{Both, CarbonOfFuel};
use super::lever::Lever;
use super::outcome::{Costs, Outcome, YearOutcome};
use super::price::price;
use crate::bill::Connection;
use crate::carbon::Leakage;
use crate::home::Pattern;
use crate::lifetime::{Outlay, Running, Terms};
use crate::plan::{Ability, ShiftRule};
use crate::problem::Problems;
use crate::source::Memory;
use crate::tariff::{Meter, Reading, Tariff};
use crate::units::Currency;
use crate::year::{Household, Ledger, Metered, Plan, Site, State, System, Totals, run};

/// One home's weather, and the systems that could heat it.
#[derive(Debug, Clone)]
pub struct Case {
    /// Weather and clock, shared by all.
    pub site: Arc<Site>,
    /// The home's clock.
    pub time_zone: Tz,
    /// What everything is paid in.
    pub currency: Currency,
    /// How the years of a system's life are counted.
    pub terms: Terms,
    /// Today's system first, then the choices, as they stand with all levers where they are.
    pub contenders: Vec<Contender>,
    /// The levers that were moved, and the contenders before.
    moved: Option<Moved>,
    /// The only year of the weather that is run, by its place; nothing for all.
    only: Option<usize>,
}

/// Levers that stand elsewhere than the brief put them.
#[derive(Debug, Clone)]
struct Moved {
    before: Arc<[Contender]>,
    /// Lever, choice and value, in the order of [`Lever::ALL`].
    values: Vec<(Lever, usize, f64)>,
}

/// A tariff and the meter that counts under it over the axis.
#[derive(Debug, Clone)]
pub struct Account {
    /// What is charged.
    pub tariff: Arc<Tariff>,
    /// How hours are sorted for it.
    pub meter: Arc<Meter>,
    /// What the price signal of a tariff with steps expects the meter to read in a year, kWh; nothing where there are none.
    pub expected_kwh: Option<f64>,
}

/// An account of the home that its heating does not touch, so that its reading is known beforehand: the household's own meter
/// where the heat pump has another, gas that is kept for a hob.
#[derive(Debug, Clone)]
pub struct Beside {
    /// What is charged.
    pub account: Account,
    /// What its meter reads over all years.
    pub reading: Reading,
}

/// One system with its plan and what it is charged.
#[derive(Debug, Clone)]
pub struct Contender {
    /// Kind of system, as results name it.
    pub kind: &'static str,
    /// Whether it is what heats the home today.
    pub today: bool,
    /// Home and heating.
    pub system: System,
    /// Set points and signals.
    pub plan: Arc<Plan>,
    /// Electricity.
    pub electricity: Account,
    /// The fuel it burns.
    pub fuel: Option<Account>,
    /// What goes on whatever heats the home.
    pub beside: Vec<Beside>,
    /// What the home uses and makes beside its heating.
    pub household: Arc<Household>,
    /// The plan without shifting, where the plan shifts.
    pub unshifted: Option<Arc<Plan>>,
    /// How the hours are chosen, where the plan shifts.
    pub shift_rule: Option<ShiftRule>,
    /// What escapes of its refrigerant, where that is counted.
    pub leakage: Option<Leakage>,
    /// Indoor set point, °C.
    pub indoor_c: f64,
    /// Design outdoor temperature, °C.
    pub design_outdoor_c: f64,
    /// Design heat load, kW; it stays when the heat loss is scaled to meter readings.
    pub design_load_kw: f64,
    /// When the rooms are heated.
    pub pattern: Pattern,
    /// What a warm-up can count on.
    pub ability: Ability,
    /// What it costs to put in, in the case's currency.
    pub capital: Option<f64>,
    /// The same part by part, where it is given so.
    pub capital_parts: Vec<(String, f64)>,
    /// What it costs to put in and to keep, in the case's currency, as far as it is known.
    pub outlay: Option<Outlay>,
    /// Year of a buried loop's life that is shown, from 1.
    pub shown_year: u32,
    /// The ground at the beginning of that year, see [`Case::age_grounds`]; nothing for fresh ground or none.
    pub aged: Option<Aged>,
    /// What it uses in each year of its life from fresh ground, where it draws on ground that remembers and its outlay is known.
    pub life: Option<Arc<[Running]>>,
}

impl Case {
    /// A case with every lever where the brief put it; today's system first.
    pub fn new(
        site: Arc<Site>,
        time_zone: Tz,
        currency: Currency,
        terms: Terms,
        contenders: Vec<Contender>,
    ) -> Self {
        Self {
            site,
            time_zone,
            currency,
            terms,
            contenders,
            moved: None,
            only: None,
        }
    }

    /// The same case run through one year of its weather only, by the year's place from 0; all of it where there is no
    /// such year.
    ///
    /// Everything that was made for the whole weather is shared, so a draw among the years costs no more than a year's run. The
    /// year begins with rooms and store at their set points; a buried loop begins it as all years left it.
    #[must_use]
    pub fn in_year(mut self, place: usize) -> Self {
        self.only = (place < self.site.years.len()).then_some(place);
        self
    }

    /// The years of the weather that are run, each with its hours.
    pub fn years(&self) -> &[(i32, Range<usize>)] {
        match self.only {
            Some(place) => self.site.years.get(place..=place).unwrap_or_default(),
            None => &self.site.years,
        }
    }

    /// Prices readings of the years that are run.
    ///
    /// # Errors
    /// When a reading is not a number or below 0.
    pub(super) fn price(
        &self,
        contender: &Contender,
        electricity: &Reading,
        fuel: Option<&Reading>,
    ) -> Result<Costs, Problems> {
        price(&self.site, self.only, contender, electricity, fuel)
    }

    /// The same case with today's system and one choice only, which becomes choice 1; nothing where there is no such choice.
    pub fn pair(&self, choice: usize) -> Option<Self> {
        let contenders = vec![
            self.contenders.first()?.clone(),
            self.contenders
                .get(choice)
                .filter(|contender| !contender.today)?
                .clone(),
        ];
        Some(Self {
            contenders,
            moved: None,
            ..self.clone()
        })
    }

    /// Where a lever was moved to for a choice; nothing where it stands as the brief put it.
    pub(super) fn moved_to(&self, lever: Lever, choice: usize) -> Option<f64> {
        let values = &self.moved.as_ref()?.values;
        let own = values
            .iter()
            .find(|(moved, of, _)| *moved == lever && *of == choice);
        own.map(|(_, _, value)| *value)
    }

    /// Moves levers of a choice, each of them wherever it stood before.
    ///
    /// The contenders are made anew from those of the brief with every lever that now stands elsewhere, in one fixed
    /// order: the way to a setting does not matter, and a lever moved back leaves the case as it was, bit for bit.
    ///
    /// # Errors
    /// A value that the lever cannot take; the case is then as it was.
    pub fn apply(&mut self, choice: usize, moves: &[(Lever, f64)]) -> Result<(), Problems> {
        let moves: Vec<_> = moves
            .iter()
            .map(|&(lever, value)| (lever, choice, value))
            .collect();
        self.apply_each(&moves, Ageing::YearByYear)
    }

    /// Moves levers, each of the choice beside it, in one go.
    ///
    /// # Errors
    /// As [`Case::apply`].
    pub(super) fn apply_each(
        &mut self,
        moves: &[(Lever, usize, f64)],
        ageing: Ageing,
    ) -> Result<(), Problems> {
        let before = match &self.moved {
            Some(moved) => Arc::clone(&moved.before),
            None => self.contenders.clone().into(),
        };
        let brief = Self {
            contenders: before.to_vec(),
            moved: None,
            ..self.clone()
        };
        let mut values = self
            .moved
            .take()
            .map_or_else(Vec::new, |moved| moved.values);
        let kept = values.clone();
        let mut problems = Problems::new();
        for &(lever, choice, value) in moves {
            problems.take(lever.check(value, &brief, choice));
            values.retain(|(moved, of, _)| (*moved, *of) != (lever, choice));
            if lever.now(&brief, choice) != Some(value) {
                values.push((lever, choice, value));
            }
        }
        if let Err(problems) = problems.or(()) {
            self.moved = (!kept.is_empty()).then_some(Moved {
                before,
                values: kept,
            });
            return Err(problems);
        }
        values.sort_by_key(|(lever, of, _)| (lever.order(), *of));
        let hours = self.site.outdoor_c.len();
        let mut contenders = before.to_vec();
        for &(lever, of, value) in &values {
            if let Err(problems) = lever.act(value, &mut contenders, of, hours) {
                self.moved = (!kept.is_empty()).then_some(Moved {
                    before,
                    values: kept,
                });
                return Err(problems);
            }
        }
        for (of, contender) in contenders.iter_mut().enumerate() {
            let own = values.iter().filter(|(_, choice, _)| *choice == of);
            let own: Vec<_> = own.map(|(lever, _, value)| (*lever, *value)).collect();
            doubt_sheet(&own, contender);
        }
        // Another loop has another past; otherwise the past is scaled when the year is run.
        for (_, of, _) in values
            .iter()
            .filter(|(lever, _, _)| *lever == Lever::LoopLength)
        {
            let contender = &mut contenders[*of];
            let year = contender.shown_year;
            contender.aged = match (ageing, contender.aged) {
                (Ageing::Settled, Some(aged)) => {
                    settled(&brief, contender, year).map(|memory| Aged { memory, ..aged })
                }
                _ => brief.aged(contender, year),
            };
            contender.life = brief.life(contender);
        }
        self.contenders = contenders;
        self.moved = (!values.is_empty()).then_some(Moved { before, values });
        Ok(())
    }

    /// Runs every system through every year of the weather.
    ///
    /// # Errors
    /// When a bill cannot be made, such as a missing hourly price.
    pub fn run(&self) -> Result<Vec<Outcome>, Problems> {
        self.contenders
            .iter()
            .map(|contender| self.run_one(contender, None))
            .collect()
    }

    /// Runs one system through every year, keeping its rows in a ledger where one is given.
    ///
    /// A buried loop begins as earlier years left it. When the system was changed after those were run, their history is
    /// scaled to what the changed system draws.
    ///
    /// # Errors
    /// When a bill cannot be made.
    pub fn run_one(
        &self,
        contender: &Contender,
        ledger: Option<&mut Ledger>,
    ) -> Result<Outcome, Problems> {
        let run = |ground, ledger| self.run_from(contender, ground, ledger);
        let Some(aged) = contender.aged else {
            return run(Memory::default(), ledger);
        };
        if !aged.moved {
            return run(aged.memory, ledger);
        }
        let trial = run(aged.memory, None)?;
        let drawn_kwh = trial.mean(|year| year.sums.extracted_kwh - year.sums.returned_kwh);
        run(aged.for_draw(drawn_kwh), ledger)
    }

    /// Runs one system through every year from what its ground remembers.
    ///
    /// # Errors
    /// When a bill cannot be made.
    pub fn run_from(
        &self,
        contender: &Contender,
        ground: Memory,
        ledger: Option<&mut Ledger>,
    ) -> Result<Outcome, Problems> {
        Ok(self.run_through(contender, ground, ledger)?.0)
    }

    /// What a system uses in each year of its life from fresh ground, the weather's years in their order again and again: a buried loop
    /// takes more year after year, everything else repeats itself. Several years of weather stand for their mean.
    ///
    /// # Errors
    /// When a bill cannot be made.
    pub fn yearly_running(
        &self,
        contender: &Contender,
        years: usize,
    ) -> Result<Vec<Running>, Problems> {
        let alike = match contender.remembering() {
            Some(_) => self.years().len().max(1),
            None => years,
        };
        let mut all = Vec::with_capacity(years + alike);
        let mut ground = Memory::default();
        while all.len() < years {
            let (outcome, after) = self.run_through(contender, ground, None)?;
            all.extend(std::iter::repeat_n(outcome.running(), alike));
            ground = after;
        }
        all.truncate(years);
        Ok(all)
    }

    /// Runs one system through the years that are run; gives what the ground remembers at the end beside the outcome.
    fn run_through(
        &self,
        contender: &Contender,
        ground: Memory,
        mut ledger: Option<&mut Ledger>,
    ) -> Result<(Outcome, Memory), Problems> {
        let site = &*self.site;
        let (system, plan) = (&contender.system, &contender.plan);
        let mut state = State {
            ground,
            ..State::at_rest(system, contender.indoor_c)
        };
        let mut metered = Metered::new(
            contender.electricity.tariff.metering,
            &contender.household,
            &contender.electricity.meter,
            contender.fuel.as_ref().map(|fuel| &*fuel.meter),
        );
        let mut years = Vec::with_capacity(self.years().len());
        for (year, hours) in self.years() {
            let mut totals = Totals::new(&site.month0);
            let mut fuel_carbon = CarbonOfFuel::new(&site.month0, plan.fuel.as_ref());
            let mut meters = Both(&mut metered, &mut fuel_carbon);
            let mut sink = (&mut totals, &mut meters, ledger.as_deref_mut());
            run(site, system, plan, hours.clone(), &mut state, &mut sink);
            years.push(YearOutcome::new(*year, &totals, fuel_carbon.months));
        }
        let Metered {
            electricity, fuel, ..
        } = metered;
        let costs = self.price(contender, &electricity, fuel.as_ref())?;
        let outcome = Outcome {
            years,
            electricity,
            fuel,
            costs,
        };
        Ok((outcome, state.ground))
    }
}

impl Contender {
    /// Whether the fuel's standing charge goes on.
    pub fn connection(&self) -> Connection {
        // An account is only held while something uses what it sells.
        Connection::Kept
    }
}
