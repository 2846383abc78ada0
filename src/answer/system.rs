//! From one system's outcome to its answer.

use super::account::meter_answers;
use super::comfort::leaves_cold;
use super::estimate::{GroundShown, MonthAnswer, SystemAnswer};
use super::home::{DesignAnswer, StoreAnswer};
use crate::problem::Problems;
use crate::source::Memory;
use crate::study::{
    BalancePoint, Case, Contender, DesignLimit, DesignPoint, Outcome, balance_point, design_point,
    limited_by_flow,
};
use crate::units::Fuel;
use crate::year::Heating;

/// Years over which refrigerant that escapes at the end of a machine's life is spread. Common practice, no source.
const LEAKAGE_LIFE_YEARS: f64 = 15.0;

pub(super) fn system(
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
pub(super) fn ground_shown(
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
