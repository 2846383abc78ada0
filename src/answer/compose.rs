//! From cases and outcomes to the estimate.

use super::account::{bill_answers, meter_answers, shifting_answer, signal_gap};
use super::bills::pair;
use super::comfort::leaves_cold;
use super::estimate::{
    Assumption, Estimate, GroundShown, HomeUsed, InputFile, MonthAnswer, SystemAnswer, WeatherUsed,
};
use super::home::{
    DesignAnswer, MeteredAnswer, PatternComparison, PatternFigures, RoomsAnswer, StoreAnswer,
};
use super::lever::break_evens;
use super::lifetime::lifetime;
use super::weather_years::{succession, year_answers, year_spread};
use crate::home::Pattern;
use crate::problem::{Finding, Problems, Severity};
use crate::signature::{DailyWeather, Signature};
use crate::source::Memory;
use crate::study::{
    BalancePoint, Case, Contender, DesignLimit, DesignPoint, Outcome, balance_point, design_point,
    limited_by_flow, under_pattern,
};
use crate::units::{Fuel, as_set};
use crate::year::Heating;

/// What an estimate tells beside the figures of its case.
#[derive(Debug, Clone, Default)]
pub struct Told {
    /// What the home is called.
    pub home_label: Option<String>,
    /// Weather file as the brief names it.
    pub weather_file: String,
    /// What the carbon factors count.
    pub carbon_scope: Option<String>,
    /// What was assumed.
    pub assumptions: Vec<Assumption>,
    /// What was found while reading.
    pub findings: Vec<Finding>,
    /// The machine of each contender, in their order.
    pub machines: Vec<Option<String>>,
    /// The files that were read.
    pub inputs: Vec<InputFile>,
    /// The room table's verdict for each contender, in their order.
    pub rooms: Vec<Option<RoomsAnswer>>,
    /// Transmission and ventilation of the home as it is, W/K, where they are known apart.
    pub parts_w_per_k: Option<(f64, f64)>,
    /// What the meter readings say.
    pub bills: Option<BillsTold>,
}

/// What an estimate tells about meter readings.
#[derive(Debug, Clone, PartialEq)]
pub struct BillsTold {
    /// File of the readings.
    pub file: String,
    /// What they say.
    pub signature: Signature,
    /// What the heat loss of every system was multiplied by to meet them.
    pub scaled_by: Option<f64>,
}

/// Years over which refrigerant that escapes at the end of a machine's life is spread. Common practice, no source.
const LEAKAGE_LIFE_YEARS: f64 = 15.0;

impl Estimate {
    /// The same estimate with the bills of every system.
    ///
    /// # Errors
    /// When a reading cannot be priced.
    pub fn with_bills(mut self, case: &Case, outcomes: &[Outcome]) -> Result<Self, Problems> {
        for ((system, contender), outcome) in
            self.systems.iter_mut().zip(&case.contenders).zip(outcomes)
        {
            system.bills = Some(bill_answers(contender, outcome)?);
        }
        Ok(self)
    }
}

/// Makes the estimate.
///
/// # Errors
/// When a case cannot be run with a lever moved.
pub fn compose(case: &Case, outcomes: &[Outcome], told: &Told) -> Result<Estimate, Problems> {
    let mut findings = told.findings.clone();
    findings.extend(cool_stores(case));
    findings.extend(hygiene_cycles(case));
    let mut systems = Vec::with_capacity(outcomes.len());
    let break_evens = break_evens(case, outcomes)?;
    for (i, (contender, outcome)) in case.contenders.iter().zip(outcomes).enumerate() {
        let mut system = system(
            contender,
            outcome,
            outcomes,
            told.machines.get(i).cloned().flatten(),
        );
        system.rooms = told.rooms.get(i).cloned().flatten();
        system.by_year = year_answers(case, outcomes, i);
        system.year_spread = year_spread(case, outcomes, i);
        if contender.pattern != case.contenders[0].pattern {
            let as_today = under_pattern(case, contender, &case.contenders[0].pattern)?;
            let heat_kwh = as_today.mean_sums().space_heat_kwh();
            system.pattern_heat_kwh = Some(system.space_heat_kwh - heat_kwh);
            system.pattern_cost = Some(system.cost - as_today.costs.total);
        }
        system.shifting = shifting_answer(case, contender)?;
        findings.extend(signal_gap(contender, outcome)?);
        system.ground = ground_shown(case, contender, outcome)?;
        findings.extend(shortfalls(&system));
        findings.extend(water_beyond_reach(contender, outcome));
        findings.extend(hot_discharge(contender, outcome, &system));
        findings.extend(source_too_cold(&system));
        systems.push(system);
    }
    let site = &case.site;
    let today = &case.contenders[0];
    let metered = told
        .bills
        .as_ref()
        .map(|bills| metered(bills, case, &outcomes[0]));
    if let (Some(metered), Some(bills)) = (&metered, &told.bills) {
        findings.extend(disagreement(metered, &bills.signature));
    }
    let fabric = &today.system.home.fabric;
    Ok(Estimate {
        weather: WeatherUsed {
            file: told.weather_file.clone(),
            hours: site.outdoor_c.len(),
            years: site.years.len(),
            mean_c: site.outdoor_c.iter().sum::<f64>() / site.outdoor_c.len() as f64,
            min_c: site.outdoor_c.iter().copied().fold(f64::INFINITY, f64::min),
            repaired_hours: site.repaired.iter().filter(|&&repaired| repaired).count(),
            part_year_days: None,
        },
        home: HomeUsed {
            label: told.home_label.clone(),
            heat_loss_w_per_k: fabric.heat_loss_w_per_k(),
            design_outdoor_c: today.design_outdoor_c,
            design_heat_load_kw: today.design_load_kw,
            transmission_w_per_k: told.parts_w_per_k.map(|parts| parts.0),
            ventilation_w_per_k: told.parts_w_per_k.map(|parts| parts.1),
            metered,
        },
        systems,
        patterns: Vec::new(),
        what_if: Vec::new(),
        break_even: break_evens,
        odds: None,
        lifetime: lifetime(case, outcomes),
        currency: case.currency.code().to_owned(),
        carbon_scope: told.carbon_scope.clone(),
        assumptions: told
            .assumptions
            .iter()
            .cloned()
            .chain(succession(case))
            .collect(),
        findings,
        inputs: told.inputs.clone(),
    })
}

fn system(
    contender: &Contender,
    outcome: &Outcome,
    all: &[Outcome],
    machine: Option<String>,
) -> SystemAnswer {
    let sums = outcome.mean_sums();
    let heating = &contender.system.heating;
    let is_machine = heating.machine().is_some();
    let burns_fuel = heating.boiler().is_some();
    let ground = contender
        .aged
        .map_or_else(Memory::default, |aged| aged.memory);
    let balance = |with_hot_water| {
        let machine = heating.machine()?;
        balance_point(
            &contender.system,
            machine,
            contender.indoor_c,
            with_hot_water,
            ground,
        )
    };
    let balance_points = (balance(false), balance(true));
    let balance_limit = balance_points
        .0
        .zip(heating.machine())
        .map(|(point, machine)| {
            let at_flow = limited_by_flow(
                &contender.system,
                machine,
                contender.indoor_c,
                point,
                ground,
            );
            if at_flow {
                ", limited by its highest flow"
            } else {
                ""
            }
        });
    let today = &all[0];
    let compared = |mine: f64, todays: f64| (!contender.today).then_some(todays - mine);
    let costs = &outcome.costs;
    let years = outcome.years.len() as f64;
    let household = &contender.household;
    let accounted = household.used_kwh.is_some() || household.made_kwh.is_some();
    let beside = contender
        .beside
        .iter()
        .filter(|beside| beside.account.tariff.fuel == Fuel::Electricity);
    let readings =
        std::iter::once(&outcome.electricity).chain(beside.map(|beside| &beside.reading));
    let (bought_kwh, fed_back_kwh) = readings.fold((0.0, 0.0), |(bought, fed), reading| {
        (
            bought + reading.import_kwh.iter().sum::<f64>() / years,
            fed + reading.export_kwh.iter().sum::<f64>() / years,
        )
    });
    let design = design_point(
        &contender.system,
        contender.indoor_c,
        contender.design_outdoor_c,
        contender.design_load_kw,
        ground,
    );
    SystemAnswer {
        label: contender.system.label.clone(),
        kind: contender.kind.to_owned(),
        today: contender.today,
        machine,
        space_heat_kwh: sums.space_heat_kwh(),
        hot_water_kwh: sums.water_heat_kwh(),
        delivered_kwh: sums.space_heat_kwh() + sums.water_drawn_kwh,
        electricity_kwh: sums.electricity_kwh(),
        backup_kwh: is_machine.then_some(sums.backup_kwh + sums.immersion_kwh),
        fuel_kwh: burns_fuel.then_some(sums.fuel_kwh),
        fuel: heating.boiler().map(|boiler| boiler.fuel.name().to_owned()),
        hybrid: match heating {
            Heating::Hybrid(hybrid) => Some(hybrid.rule.word().to_owned()),
            _ => None,
        },
        boiler_heat_kwh: (is_machine && burns_fuel)
            .then_some(sums.heater_space_kwh + sums.heater_water_kwh),
        household_kwh: household
            .used_kwh
            .as_ref()
            .map(|column| column.iter().sum::<f64>() / years),
        bought_kwh: accounted.then_some(bought_kwh),
        fed_back_kwh: household.made_kwh.is_some().then_some(fed_back_kwh),
        spf_h1: sums.spf_h1(),
        spf_h2: sums.spf_h2(),
        spf_h3: sums.spf_h3(),
        spf_h4: sums.spf_h4(),
        seasonal_efficiency: sums.fuel_efficiency(),
        balance_point_c: balance_points.0.and_then(BalancePoint::c),
        balance_point_with_hot_water_c: balance_points.1.and_then(BalancePoint::c),
        balance_point: balance_points
            .0
            .map(|point| balance_words(point) + balance_limit.unwrap_or_default()),
        peak_electric_kw: outcome
            .years
            .iter()
            .map(|year| year.peak_electric_kw)
            .fold(0.0, f64::max),
        hours_backup: outcome.mean(|year| f64::from(year.hours_backup)),
        hours_stopped: is_machine.then(|| outcome.mean(|year| f64::from(year.hours_stopped))),
        hours_short: outcome.mean(|year| f64::from(year.hours_short)),
        hours_water_short: outcome.mean(|year| f64::from(year.hours_water_short)),
        pattern: contender.pattern.words(),
        pattern_heat_kwh: None,
        pattern_cost: None,
        store: store(contender, &design),
        leaves_cold: leaves_cold(contender, outcome),
        design: design_answer(&design),
        rooms: None,
        min_indoor_c: outcome
            .years
            .iter()
            .map(|year| year.min_indoor_c)
            .fold(f64::INFINITY, f64::min),
        starts: is_machine.then_some(sums.starts),
        cost: costs.total,
        cost_energy: costs.energy,
        cost_standing: costs.standing,
        cost_tax: costs.tax,
        carbon_kg: sums.carbon_kg,
        refrigerant_kg: contender
            .leakage
            .map(|leakage| leakage.kg_per_year(LEAKAGE_LIFE_YEARS)),
        saving: compared(costs.total, today.costs.total),
        carbon_saving_kg: compared(sums.carbon_kg, today.mean_sums().carbon_kg),
        capital: contender.capital,
        capital_parts: contender.capital_parts.iter().cloned().collect(),
        ground: None,
        monthly: (0..12)
            .map(|month0| {
                let month = outcome.mean_month(month0);
                MonthAnswer {
                    heat_kwh: month.space_heat_kwh() + month.water_heat_kwh(),
                    electricity_kwh: month.electricity_kwh(),
                    fuel_kwh: burns_fuel.then_some(month.fuel_kwh),
                    cost: costs.months[month0],
                }
            })
            .collect(),
        by_year: Vec::new(),
        year_spread: None,
        shifting: None,
        meters: meter_answers(contender, outcome),
        bills: None,
    }
}

/// The year of a buried loop's life that is shown, beside its first.
fn ground_shown(
    case: &Case,
    contender: &Contender,
    outcome: &Outcome,
) -> Result<Option<GroundShown>, Problems> {
    let Some(aged) = contender.aged else {
        return Ok(None);
    };
    let first = case.run_from(contender, Memory::default(), None)?;
    let lowest = |outcome: &Outcome| {
        let lowest_c = outcome
            .years
            .iter()
            .map(|year| year.min_source_c)
            .fold(f64::INFINITY, f64::min);
        lowest_c.is_finite().then_some(lowest_c)
    };
    Ok(Some(GroundShown {
        shown_year: aged.year,
        lowest_brine_c: lowest(outcome),
        hours_stopped: outcome.mean(|year| f64::from(year.hours_stopped)),
        hours_turned_down: outcome.mean(|year| f64::from(year.hours_turned_down)),
        first_year_cost: first.costs.total,
        first_year_spf_h4: first.mean_sums().spf_h4(),
        first_year_lowest_brine_c: lowest(&first),
    }))
}

fn balance_words(point: BalancePoint) -> String {
    match point {
        BalancePoint::At(c) => format!("{c:.1} °C"),
        BalancePoint::BelowRange(c) => format!("below {c:.0} °C"),
        BalancePoint::AboveRange(c) => {
            format!("above {c:.0} °C: the machine never carries the load")
        }
    }
}

/// What a system leaves cold: rooms, taps, the design day.
fn shortfalls(system: &SystemAnswer) -> Vec<Finding> {
    let label = &system.label;
    let mut found = Vec::new();
    if system.hours_short >= 0.5 {
        found.push(Finding::new(
            Severity::Caution,
            format!(
                "\"{label}\" leaves the rooms more than 1 K below the set point in {:.0} hours a year, down to {:.1} °C",
                system.hours_short, system.min_indoor_c
            ),
            "a larger machine, backup heat or larger emitters would be needed; size from a room-by-room heat-loss calculation by a competent person",
        ));
    }
    if system.hours_water_short >= 0.5 {
        found.push(Finding::new(
            Severity::Warning,
            format!("\"{label}\" gives hot water that is too cool in {:.0} hours a year", system.hours_water_short),
            "a larger store, a higher set point, longer reheat windows or more output would be needed",
        ));
    }
    let stopped = system
        .hours_stopped
        .filter(|&hours| hours >= 0.5 && system.ground.is_none());
    if let Some(hours) = stopped {
        found.push(Finding::new(
            Severity::Caution,
            format!(
                "the machine of \"{label}\" stands in {hours:.0} hours a year because its source is outside its limits; backup and immersion heater use {:.0} kWh",
                system.backup_kwh.unwrap_or(0.0)
            ),
            "a machine made for such weather, or backup for the whole load of those hours, would be needed",
        ));
    }
    if !system.design.covered {
        found.push(Finding::new(
            Severity::Caution,
            format!("\"{label}\": {}", system.design.sentence),
            "size from a room-by-room heat-loss calculation by a competent person",
        ));
    }
    found
}

/// A loop too short for its machine.
fn source_too_cold(system: &SystemAnswer) -> Option<Finding> {
    let ground = system
        .ground
        .as_ref()
        .filter(|ground| ground.hours_stopped + ground.hours_turned_down >= 0.5)?;
    Some(Finding::new(
        Severity::Caution,
        format!(
            "the machine of \"{}\" stands in {:.0} hours and is turned down in {:.0} hours of year {} of its loop because the brine is too cold for it; backup and immersion heater use {:.0} kWh",
            system.label,
            ground.hours_stopped,
            ground.hours_turned_down,
            ground.shown_year,
            system.backup_kwh.unwrap_or(0.0),
        ),
        "the loop is too short for this home and machine: see the command ground for the shortest one that would do",
    ))
}

/// A machine that the coldest hour of its source and the hottest flow asked of it would overheat.
fn hot_discharge(
    contender: &Contender,
    outcome: &Outcome,
    system: &SystemAnswer,
) -> Option<Finding> {
    let machine = &contender.system.heating.machine()?.machine;
    let coldest_c = outcome
        .years
        .iter()
        .map(|year| year.min_source_c)
        .fold(f64::INFINITY, f64::min);
    let water = contender.system.home.hot_water.as_ref();
    let store_c = water
        .and_then(|water| water.store)
        .map_or(0.0, |store| store.set_point_c + store.coil_k);
    let flow_c = system.design.heater_flow_c.max(store_c);
    coldest_c
        .is_finite()
        .then(|| machine.hot_discharge(coldest_c, flow_c))?
}

/// A set point of the store that the machine cannot reach: the immersion heater lifts the rest, day after day.
fn water_beyond_reach(contender: &Contender, outcome: &Outcome) -> Option<Finding> {
    let machine = contender.system.heating.machine()?;
    let store = contender.system.home.hot_water.as_ref()?.store?;
    let highest_c = machine.machine.limits().highest_flow_anywhere();
    let reach_c = highest_c - store.coil_k;
    let immersion_kwh = outcome.mean_sums().immersion_kwh;
    if store.set_point_c <= reach_c || immersion_kwh < 0.5 {
        return None;
    }
    let price = &contender.plan.electricity.price;
    let mean_price = price.iter().sum::<f64>() / price.len() as f64;
    let instead = match store.hygiene {
        None => {
            "a lower set point with a weekly cycle, hygiene = \"immersion\", would cost less; local rules on legionella decide"
        }
        Some(_) => "a lower set point would cost less; local rules on legionella decide",
    };
    Some(Finding::new(
        Severity::Warning,
        format!(
            "the machine of \"{}\" reaches {} °C in this store (highest flow {} °C less {} K of the coil), which is to be at {} °C; the \
             immersion heater lifts the rest: {immersion_kwh:.0} kWh, about {:.0} {} a year",
            contender.system.label,
            as_set(reach_c),
            as_set(highest_c),
            as_set(store.coil_k),
            as_set(store.set_point_c),
            immersion_kwh * mean_price,
            contender.electricity.tariff.currency,
        ),
        instead,
    ))
}

/// Stored hot water below the temperature of UK HSE guidance: 60 °C in the store, at the taps no less than 50 °C within a minute.
fn cool_stores(case: &Case) -> Option<Finding> {
    const HYGIENE_C: f64 = 60.0;
    let cool: Vec<_> = case
        .contenders
        .iter()
        .filter(|contender| {
            let store = contender
                .system
                .home
                .hot_water
                .as_ref()
                .and_then(|water| water.store);
            store.is_some_and(|store| {
                let cycle_c = store.hygiene.map_or(0.0, |cycle| cycle.target_c);
                store.set_point_c < HYGIENE_C && cycle_c < HYGIENE_C
            })
        })
        .map(|contender| format!("\"{}\"", contender.system.label))
        .collect();
    (!cool.is_empty()).then(|| {
        Finding::new(
            Severity::Caution,
            format!("hot water is stored below {HYGIENE_C:.0} °C by {}", cool.join(", ")),
            "legionella can grow there, so a weekly hygiene cycle is usual (hygiene = \"immersion\" or \"machine\" under hot_water in the brief), and water above 50 °C scalds; follow local rules and a licensed installer",
        )
    })
}

/// Stores that are made hot against legionella: the water scalds then.
fn hygiene_cycles(case: &Case) -> Option<Finding> {
    let hot: Vec<_> = case
        .contenders
        .iter()
        .filter_map(|contender| {
            let cycle = contender.system.home.hot_water.as_ref()?.store?.hygiene?;
            Some(format!(
                "\"{}\" to {} °C",
                contender.system.label,
                as_set(cycle.target_c)
            ))
        })
        .collect();
    (!hot.is_empty()).then(|| {
        Finding::new(
            Severity::Caution,
            format!("the hot-water store is heated once a week by {}", hot.join(", ")),
            "water above 50 °C scalds: mixing valves at the taps; how often and how hot is for local rules and a licensed installer to say",
        )
    })
}

fn design_answer(design: &DesignPoint) -> DesignAnswer {
    let margin = design.carried_kw() / design.load_kw - 1.0;
    let margin_percent = margin * 100.0;
    let by_emitters = design.limit() == DesignLimit::Emitters;
    let mut sentence = format!(
        "at {:.1} °C the load of {:.1} kW needs a flow of {:.0} °C{}; there it gives {:.1} kW",
        design.outdoor_c,
        design.load_kw,
        design.heater_flow_c,
        match design.highest_flow_c {
            Some(highest_c) if design.limit() == DesignLimit::HighestFlow =>
                format!(", its highest is {highest_c:.0} °C"),
            _ => String::new(),
        },
        design.output_kw
    );
    if by_emitters {
        sentence += &format!(
            ", the emitters at their greatest flow {:.1} kW",
            design.emitters_kw
        );
    }
    if margin >= 0.0 && by_emitters {
        sentence += &format!(", {margin_percent:.0} % more than the load");
    } else if margin >= 0.0 {
        sentence += &format!(", {margin_percent:.0} % more");
    } else {
        sentence += &format!(", {:.1} kW short", design.load_kw - design.carried_kw());
        match design.backup_kw {
            Some(backup_kw) if design.covered() => {
                sentence += &format!(", which backup of {backup_kw:.0} kW adds");
            }
            Some(backup_kw) if backup_kw > 0.0 => {
                sentence += &format!(", and backup of {backup_kw:.0} kW is not enough");
            }
            _ => sentence += ", and nothing adds it",
        }
    }
    DesignAnswer {
        outdoor_c: design.outdoor_c,
        load_kw: design.load_kw,
        flow_c: design.flow_c,
        heater_flow_c: design.heater_flow_c,
        output_kw: design.output_kw,
        emitters_kw: design.emitters_kw,
        backup_kw: design.backup_kw,
        margin_percent,
        limited_by: match design.limit() {
            DesignLimit::Emitters => "emitters",
            DesignLimit::HighestFlow => "highest flow",
            DesignLimit::Output => "output",
        }
        .to_owned(),
        covered: design.covered(),
        water_l_per_min: design.water_l_per_min,
        sentence,
    }
}

fn store(contender: &Contender, design: &DesignPoint) -> Option<StoreAnswer> {
    let water = contender.system.home.hot_water.as_ref()?;
    let store = water.store?;
    let cold_c = water.mean_cold_c();
    let above_k = store.set_point_c - store.surroundings_c;
    Some(StoreAnswer {
        volume_l: store.volume_l(),
        usable_l: store.usable_l(water.draw_c, cold_c),
        drawn_at_c: water.draw_c,
        reheat_hours: (design.output_kw > 0.0).then(|| store.reheat_h(design.output_kw, cold_c)),
        standing_loss_kwh_per_day: store.loss_kw_per_k * above_k * 24.0,
    })
}

/// What the readings say beside the model.
fn metered(bills: &BillsTold, case: &Case, today: &Outcome) -> MeteredAnswer {
    let signature = &bills.signature;
    let days = DailyWeather::of_hours(&case.site.civil, &case.site.outdoor_c);
    let years = case.site.years.len() as f64;
    let fuel = signature.fuel_kwh(days.all());
    let metered_kwh = fuel.value / years;
    let modelled_kwh = today.mean_sums().fuel_kwh;
    let difference_percent = (modelled_kwh / metered_kwh - 1.0) * 100.0;
    let loss = signature.heat_loss();
    let mut sentence = format!(
        "{}: {:.0} W/K ({:.0} to {:.0}); today's fuel in this weather {metered_kwh:.0} kWh by the meter, {modelled_kwh:.0} kWh \
         modelled ({difference_percent:+.0} %)",
        bills.file, loss.value, loss.low, loss.high
    );
    if let Some(factor) = bills.scaled_by {
        sentence += &format!(", after every heat loss was multiplied by {factor:.2}");
    }
    MeteredAnswer {
        file: bills.file.clone(),
        heat_loss_w_per_k: loss.value,
        heat_loss_95: pair(loss),
        base_temperature_c: signature.base_temperature_c.value,
        metered_kwh,
        metered_95: pair(fuel).map(|kwh| kwh / years),
        modelled_kwh,
        difference_percent,
        scaled_by: bills.scaled_by,
        sentence,
    }
}

/// A meter and a model that are further apart than the limits of both explain.
fn disagreement(metered: &MeteredAnswer, signature: &Signature) -> Option<Finding> {
    let half_meter = (metered.metered_95[1] - metered.metered_95[0]) / 2.0;
    let loss = signature.heat_loss();
    // Fuel rises with the heat loss no faster than in proportion.
    let half_model = metered.modelled_kwh * loss.half() / loss.value;
    let apart = (metered.modelled_kwh - metered.metered_kwh).abs();
    if metered.scaled_by.is_some() || apart <= half_meter.hypot(half_model) {
        return None;
    }
    let warmer = signature.own_home.as_ref().map_or_else(String::new, |own| {
        format!(
            "; the readings fit rooms {:+.1} K against the brief and {:.1} kWh a day beside heating",
            own.warmer_k.value, own.base_load_kwh_per_day.value
        )
    });
    Some(Finding::new(
        Severity::Caution,
        format!(
            "today's fuel is {:.0} kWh by the meter and {:.0} kWh modelled ({:+.0} %), more apart than the limits explain{warmer}",
            metered.metered_kwh, metered.modelled_kwh, metered.difference_percent
        ),
        "bills and savings are those of the modelled fuel: write scale = true under [home.bills] to follow the meter, or look at \
         efficiency, set points, gains and hot water",
    ))
}

/// Every system all day at its set point beside a set-back: its own, else today's, else `usual`.
///
/// # Errors
/// When a bill cannot be made.
pub fn compare_patterns(case: &Case, usual: &Pattern) -> Result<Vec<PatternComparison>, Problems> {
    let today = &case.contenders[0].pattern;
    case.contenders
        .iter()
        .map(|contender| {
            let patterns = [&contender.pattern, today, usual];
            let set_back = patterns
                .into_iter()
                .find(|pattern| !pattern.is_continuous())
                .unwrap_or(usual);
            let continuous = Pattern::continuous(set_back.comfort_c());
            let figures = |pattern: &Pattern| -> Result<PatternFigures, Problems> {
                let outcome = under_pattern(case, contender, pattern)?;
                let sums = outcome.mean_sums();
                let burns = contender.system.heating.boiler().is_some();
                Ok(PatternFigures {
                    pattern: pattern.words(),
                    space_heat_kwh: sums.space_heat_kwh(),
                    electricity_kwh: sums.electricity_kwh(),
                    fuel_kwh: burns.then_some(sums.fuel_kwh),
                    cost: outcome.costs.total,
                    hours_backup: outcome.mean(|year| f64::from(year.hours_backup)),
                    min_indoor_c: outcome
                        .years
                        .iter()
                        .map(|year| year.min_indoor_c)
                        .fold(f64::INFINITY, f64::min),
                })
            };
            let (continuous, set_back) = (figures(&continuous)?, figures(set_back)?);
            Ok(PatternComparison {
                label: contender.system.label.clone(),
                more_heat_percent: (continuous.space_heat_kwh / set_back.space_heat_kwh - 1.0)
                    * 100.0,
                continuous,
                set_back,
            })
        })
        .collect()
}
