//! Today's home as a model that is run over the days of the meter readings, and the heat loss at which it uses what was metered.

use super::bills::{BillsMade, Over};
use super::boiler::boiler;
use super::defaults;
use super::fabric::{Gains, Storage, fabric_parts};
use super::home::{WeatherFacts, warm_side};
use super::notes::Notes;
use super::raw::{BillsTable, SystemTable};
use super::site::Used;
use crate::bounds;
use crate::document::{Check, Section};
use crate::home::Fabric;
use crate::plan::{Ability, following};
use crate::problem::{Finding, Place, Severity};
use crate::signature::{
    DailyWeather, Doubt, FitProblem, Interval, Signature, Stated, Tried, fit,
    fit_at_published_base, fit_own_home,
};
use crate::source::Memory;
use crate::study::design_point;
use crate::units::{TemperatureDifference, parse};
use crate::weather::Weather;
use crate::year::{Heating, Plan, Row, Signal, Sink, Site, State, System, run};

/// By how much a running pattern that is not quite the brief's changes the heat, with 95 % confidence: the readings of a home warmed up
/// only at the time show that much less through a model that is warmed up in time (`tests/reference/meter_readings.py`).
const PATTERN_WITHIN: f64 = 0.07;

/// More than any home asks for, kW: what stands for a heater whose efficiency is stated.
const AMPLE_KW: f64 = 1000.0;

/// Today's home over the weather of the readings.
struct OwnHomeModel {
    site: Site,
    system: System,
    plan: Plan,
    indoor_c: f64,
    /// The interval that each hour of the axis lies in.
    interval_of: Vec<Option<usize>>,
    intervals: usize,
    /// Whether the gains are what a base temperature leaves, and so follow the heat loss.
    gains_follow_loss: bool,
    /// Whether the storage is a time constant, and so follows the heat loss.
    storage_follows_loss: bool,
}

/// Heat and fuel for the rooms in each interval, kWh.
struct Heated {
    heat_kwh: Vec<f64>,
    fuel_kwh: Vec<f64>,
}

/// Adds the hours of each interval.
struct ByInterval<'a> {
    interval_of: &'a [Option<usize>],
    used: Heated,
}

impl Sink for ByInterval<'_> {
    fn take(&mut self, hour: usize, row: &Row) {
        if let Some(interval) = self.interval_of.get(hour).copied().flatten() {
            self.used.heat_kwh[interval] += row.space_heat_kwh();
            self.used.fuel_kwh[interval] += row.fuel_kwh;
        }
    }
}

impl OwnHomeModel {
    /// Today's home with the heat loss that the readings showed so far; nothing when the brief does not describe a home that can
    /// be run, which is told where its tables are read for themselves.
    fn new(
        over: &Over<'_>,
        weather: &Weather,
        so_far: &BillsMade,
        intervals: &[Interval],
        check: &Check,
    ) -> Option<Self> {
        let (home, today) = (over.home?, over.today?);
        let (mut check, mut notes) = (check.aside(), Notes::default());
        let facts = WeatherFacts {
            has_radiation: over.facts.has_radiation,
            ..*over.facts
        };
        let parts = fabric_parts(home, &facts, &mut check, &mut notes)?;
        let kind = check.value(&today.kind)?.0;
        let warm = warm_side(
            home,
            today,
            Some(kind),
            &facts,
            Some(so_far),
            &mut check,
            &mut notes,
        )?;
        let heating = match kind.burns() {
            Some(fuel) if !over.states_efficiency() => {
                let (boiler, fixed_flow_c) = boiler(today, fuel, &mut check, &mut notes)?;
                Heating::Boiler {
                    boiler,
                    fixed_flow_c,
                }
            }
            _ => Heating::DirectElectric {
                output_kw: AMPLE_KW,
            },
        };
        if !check.problems().is_empty()
            || (warm.home.fabric.solar_aperture_m2() > 0.0 && weather.global_w_per_m2.is_none())
        {
            return None;
        }
        let system = System {
            label: String::new(),
            home: crate::home::Home {
                // Hot water is the load beside heating, which the readings show for themselves.
                hot_water: None,
                ..warm.home
            },
            heating,
        };
        let site = Used {
            weather: weather.clone(),
            findings: Vec::new(),
        }
        .into_site(over.zone);
        let design = design_point(
            &system,
            warm.indoor_c,
            warm.design_outdoor_c,
            warm.design_load_kw,
            Memory::default(),
        );
        let ability = Ability {
            output_kw: design.carried_kw(),
            backup_band_k: parse::<TemperatureDifference>(defaults::BACKUP_BAND.value)
                .ok()?
                .k(),
        };
        let nothing = vec![0.0; site.civil.len()];
        let signal = Signal::bought(nothing.clone(), nothing);
        let plan = following(&warm.pattern, &site.civil, ability, signal, None);
        let interval_of = site
            .civil
            .iter()
            .map(|hour| {
                intervals
                    .iter()
                    .position(|interval| (interval.from..interval.to).contains(&hour.date))
            })
            .collect();
        Some(Self {
            site,
            system,
            plan,
            indoor_c: warm.indoor_c,
            interval_of,
            intervals: intervals.len(),
            gains_follow_loss: matches!(parts.gains, Gains::UpTo { .. }),
            storage_follows_loss: matches!(parts.storage, Storage::TimeConstant(_)),
        })
    }

    /// Whether today's boiler is part of it; else the heat is all it knows.
    fn burns(&self) -> bool {
        self.system.heating.boiler().is_some()
    }

    /// Whether the sun is part of it.
    fn knows_sun(&self) -> bool {
        self.system.home.fabric.solar_aperture_m2() > 0.0
    }

    /// Whether its rooms are let cool and warmed up again.
    fn is_let_cool(&self) -> bool {
        self.plan.recovery.is_some()
    }

    /// Whether its gains are what a base temperature says.
    fn has_base_temperature(&self) -> bool {
        self.gains_follow_loss
    }

    /// Heat over fuel of the rooms with a heat loss (W/K); nothing where no fuel is burnt.
    fn efficiency(&self, heat_loss_w_per_k: f64) -> Option<f64> {
        let used = self.run(&Tried {
            heat_loss_w_per_k,
            warmer_k: 0.0,
            sun: 1.0,
        });
        let fuel_kwh: f64 = used.fuel_kwh.iter().sum();
        (fuel_kwh > 0.0).then(|| used.heat_kwh.iter().sum::<f64>() / fuel_kwh)
    }

    /// Fuel for heating in each interval, kWh, at the efficiency of today's boiler, else at a stated one.
    fn heating_kwh(&self, tried: &Tried, efficiency: f64) -> Vec<f64> {
        let used = self.run(tried);
        if self.burns() {
            used.fuel_kwh
        } else {
            used.heat_kwh.iter().map(|kwh| kwh / efficiency).collect()
        }
    }

    fn run(&self, tried: &Tried) -> Heated {
        let own = &self.system.home.fabric;
        let loss = tried.heat_loss_w_per_k;
        let multiple = loss / own.heat_loss_w_per_k();
        let follows = |does: bool| if does { multiple } else { 1.0 };
        let mut system = self.system.clone();
        system.home.fabric = Fabric::new(
            loss,
            own.capacity_kwh_per_k() * follows(self.storage_follows_loss),
            // Rooms that are warmer lose more: as if the gains were smaller by that.
            own.internal_gains_kw() * follows(self.gains_follow_loss)
                - loss * tried.warmer_k / 1000.0,
            own.solar_aperture_m2() * tried.sun,
        );
        let mut sink = ByInterval {
            interval_of: &self.interval_of,
            used: Heated {
                heat_kwh: vec![0.0; self.intervals],
                fuel_kwh: vec![0.0; self.intervals],
            },
        };
        let mut state = State::at_rest(&system, self.indoor_c);
        let hours = 0..self.site.civil.len();
        run(
            &self.site, &system, &self.plan, hours, &mut state, &mut sink,
        );
        sink.used
    }
}

/// Readings, their days, and what is known about them.
pub(super) struct Within<'a> {
    pub intervals: &'a [Interval],
    pub days: &'a DailyWeather,
    pub stated: Stated,
    pub doubt: DoubtOf,
}

/// The straight line, and why it is not free where its base temperature had to be that of published homes: readings that look as if
/// it were heated at all temperatures are left to the home's own model.
pub(super) fn line(
    intervals: &[Interval],
    days: &DailyWeather,
    stated: &Stated,
) -> Result<(Signature, Option<FitProblem>), FitProblem> {
    match fit(intervals, days, stated) {
        Err(FitProblem::BaseTemperatureOpen { at_c }) if at_c > PUBLISHED_BELOW_C => {
            let why = FitProblem::BaseTemperatureOpen { at_c };
            fit_at_published_base(intervals, days, stated).map(|line| (line, Some(why)))
        }
        found => found.map(|line| (line, None)),
    }
}

/// A search that ended above this, °C, ended at its upper end.
const PUBLISHED_BELOW_C: f64 = 15.0;

/// Runs the home's own model over the readings, where the brief describes it.
///
/// Emitters are sized by the heat loss, and the heat loss is found with the boiler that heats them: twice is enough.
pub(super) fn through_own_home(
    made: &mut BillsMade,
    over: &Over<'_>,
    weather: &Weather,
    within: &Within<'_>,
    check: &Check,
    notes: &mut Notes,
) -> Result<(), FitProblem> {
    const ROUNDS: usize = 2;
    let rounds = if made.survey_w_per_k.is_some() {
        1
    } else {
        ROUNDS
    };
    let mut stated = within.stated;
    for round in 1..=rounds {
        let Some(model) = OwnHomeModel::new(over, weather, made, within.intervals, check) else {
            if !over.states_efficiency() {
                notes.used(&defaults::BILLS_EFFICIENCY);
            }
            return Ok(());
        };
        let found = made.signature.heat_loss().value;
        if let Some(efficiency) = model.efficiency(made.survey_w_per_k.unwrap_or(found)) {
            stated.efficiency = efficiency;
            made.signature = line(within.intervals, within.days, &stated)?.0;
        }
        let doubt = Doubt {
            warmer_k: if model.has_base_temperature() {
                within.doubt.base_k
            } else {
                within.doubt.warmer_k
            },
            sun: model.knows_sun().then_some(within.doubt.sun),
        };
        // What a pattern leaves open acts as another efficiency would.
        let open = if model.is_let_cool() {
            PATTERN_WITHIN
        } else {
            0.0
        };
        let with_pattern = Stated {
            efficiency_within: stated.efficiency_within.hypot(open * stated.efficiency),
            ..stated
        };
        let own = match fit_own_home(
            within.intervals,
            within.days,
            &with_pattern,
            &doubt,
            found,
            &|tried| model.heating_kwh(tried, stated.efficiency),
        ) {
            Ok(own) => own,
            Err(FitProblem::NotConverged) => {
                made.findings.push(Finding::new(
                    Severity::Warning,
                    "the home's own model did not settle on a heat loss",
                    "what is shown is the effective coefficient of a straight line, which holds how the sun goes with the cold",
                ).at(&Place::file(made.file.as_str())));
                return Ok(());
            }
            Err(why) => return Err(why),
        };
        made.signature.own_home = Some(own);
        if round == rounds {
            if model.burns() {
                notes.add(
                    "home.bills.efficiency",
                    format!("{:.1} % gross", stated.efficiency * 100.0),
                    "today's boiler as the estimate runs it, over the days of the readings",
                );
            } else if !over.states_efficiency() {
                notes.used(&defaults::BILLS_EFFICIENCY);
            }
            notes.add(
                "home.bills.indoor_within",
                format!("{} K", doubt.warmer_k),
                "set point and internal gains together, which readings do not tell apart",
            );
            if model.is_let_cool() {
                notes.add(
                    "heat that the running pattern takes is within",
                    format!("{:.0} %", PATTERN_WITHIN * 100.0),
                    "measured: a home warmed up only at the time reads that much lower through a model that is warmed up in time",
                );
            }
            if let Some(sun) = doubt.sun {
                notes.add(
                    "home.bills.sun_within",
                    format!("{:.0} %", sun * 100.0),
                    "windows, their side and shade",
                );
            }
        }
    }
    Ok(())
}

/// What the home's model may be off by.
#[derive(Clone, Copy)]
pub(super) struct DoubtOf {
    warmer_k: f64,
    /// The same where gains are what a base temperature says.
    base_k: f64,
    sun: f64,
}

pub(super) fn doubt(table: Option<&Section<BillsTable>>, check: &mut Check) -> Option<DoubtOf> {
    // What is used of these is noted once it is known which of them the home has.
    let mut aside = Notes::default();
    let (no_k, no_share) = (None, None);
    let indoor = table.map_or(&no_k, |table| &table.indoor_within);
    let sun = table.map_or(&no_share, |table| &table.sun_within);
    let warmer = aside.quantity(
        check,
        indoor,
        &bounds::INDOOR_WITHIN_K,
        &defaults::INDOOR_WITHIN,
    )?;
    let base = aside.quantity(
        check,
        indoor,
        &bounds::INDOOR_WITHIN_K,
        &defaults::BASE_WITHIN,
    )?;
    let sun = aside.quantity(check, sun, &bounds::SHARE, &defaults::SUN_WITHIN)?;
    Some(DoubtOf {
        warmer_k: warmer.k(),
        base_k: base.k(),
        sun: sun.fraction(),
    })
}

/// Today's table where a brief has one.
pub(super) type Today<'a> = Option<&'a Section<SystemTable>>;
