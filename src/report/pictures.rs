//! The pictures of an estimate, filled from outcomes and ledgers.
//!
//! One place knows which column feeds which picture; the chart room only draws.

use chrono::{Datelike as _, Weekday};

use super::hours::{coldest_days_of, coldest_year};
use crate::answer::Estimate;
use crate::chart::{self, ChartError, Picture};
use crate::locale::{DateOrder, Locale, MONTHS};
use crate::source::Memory;
use crate::study::{Case, Contender, Outcome, output_range_kw};
use crate::year::{Flags, Heating, Ledger, Row};

/// A picture with the name of its file and the sentence that stands below it.
#[derive(Debug, Clone)]
pub struct Drawn {
    /// Name without ending; one of a system ends in the system's number, counted from 1.
    pub name: String,
    /// How to read it.
    pub caption: String,
    /// The picture.
    pub picture: Picture,
}

/// What the pictures are filled from. Outcomes and ledgers stand in the order of the case.
#[derive(Debug, Clone, Copy)]
pub struct Material<'a> {
    /// The systems.
    pub case: &'a Case,
    /// What their years came to.
    pub outcomes: &'a [Outcome],
    /// Their hours.
    pub ledgers: &'a [Ledger],
    /// The answer.
    pub estimate: &'a Estimate,
    /// How figures are written.
    pub locale: Locale,
}

/// Draws every picture that the systems have something for.
///
/// # Errors
/// When a figure cannot be drawn.
pub fn pictures(material: &Material<'_>) -> Result<Vec<Drawn>, ChartError> {
    let mut all = vec![
        annual_cost(material)?,
        carbon(material)?,
        monthly(material)?,
    ];
    all.extend(cop_year(material)?);
    for system in 0..material.case.contenders.len() {
        all.extend(energy_flow(material, system)?);
        if material.case.contenders[system]
            .system
            .heating
            .machine()
            .is_some()
        {
            all.extend(demand_and_output(material, system)?);
            all.extend(load_duration(material, system)?);
        }
        if !material.case.contenders[system].today {
            all.extend(coldest_days(material, system)?);
        }
    }
    Ok(all)
}

fn drawn(name: impl Into<String>, caption: impl Into<String>, picture: Picture) -> Drawn {
    Drawn {
        name: name.into(),
        caption: caption.into(),
        picture,
    }
}

fn annual_cost(material: &Material<'_>) -> Result<Drawn, ChartError> {
    let estimate = material.estimate;
    let systems = estimate.systems.iter().map(|s| chart::SystemCost {
        label: s.label.clone(),
        today: s.today,
        energy: s.cost_energy,
        standing: s.cost_standing,
        // Tax that the rates already hold is part of the energy.
        tax: s.cost_tax.unwrap_or(0.0),
    });
    let data = chart::AnnualCost {
        currency: estimate.currency.clone(),
        systems: systems.collect(),
    };
    let picture = chart::annual_cost(&data, &material.locale.marks)?;
    let caption = "What a year of heating and hot water costs to run. What the systems cost to put in is not in it.";
    Ok(drawn("annual-cost", caption, picture))
}

fn carbon(material: &Material<'_>) -> Result<Drawn, ChartError> {
    let sums = material.case.contenders.iter().zip(material.ledgers);
    let years = material.case.site.years.len() as f64;
    let systems = sums
        .zip(&material.estimate.systems)
        .map(|((contender, ledger), s)| {
            let fuel_kg = fuel_carbon_kg(contender, ledger) / years;
            chart::SystemCarbon {
                label: s.label.clone(),
                today: s.today,
                electricity_kg: s.carbon_kg - fuel_kg,
                fuel_kg,
                refrigerant_kg: 0.0,
            }
        });
    let data = chart::CarbonBySystem {
        systems: systems.collect(),
        scope: material.estimate.carbon_scope.clone().unwrap_or_default(),
    };
    let picture = chart::carbon_by_system(&data, &material.locale.marks)?;
    let caption =
        "Greenhouse gas of a year, by where it comes from. Refrigerant that may leak is not in it.";
    Ok(drawn("carbon", caption, picture))
}

fn fuel_carbon_kg(contender: &Contender, ledger: &Ledger) -> f64 {
    let Some(fuel) = &contender.plan.fuel else {
        return 0.0;
    };
    let factors = fuel.carbon_kg.iter().skip(ledger.first_hour);
    ledger
        .rows
        .iter()
        .zip(factors)
        .map(|(row, factor)| row.fuel_kwh * factor)
        .sum()
}

fn monthly(material: &Material<'_>) -> Result<Drawn, ChartError> {
    let systems = material
        .estimate
        .systems
        .iter()
        .map(|s| chart::MonthlySystem {
            label: s.label.clone(),
            today: s.today,
            cost: s.monthly.iter().map(|m| m.cost).collect(),
            electricity_kwh: s.monthly.iter().map(|m| m.electricity_kwh).collect(),
            // A column of no height draws nothing.
            fuel_kwh: s
                .monthly
                .iter()
                .map(|m| m.fuel_kwh.unwrap_or(0.0))
                .collect(),
        });
    let data = chart::Monthly {
        currency: material.estimate.currency.clone(),
        months: MONTHS.iter().map(|month| month[..3].to_owned()).collect(),
        systems: systems.collect(),
    };
    let picture = chart::monthly(&data, &material.locale.marks)?;
    let caption = "Cost and energy bought, month by month.";
    Ok(drawn("monthly", caption, picture))
}

fn cop_year(material: &Material<'_>) -> Result<Option<Drawn>, ChartError> {
    let machines = material
        .case
        .contenders
        .iter()
        .zip(material.ledgers)
        .zip(&material.estimate.systems)
        .filter(|((contender, _), _)| contender.system.heating.machine().is_some());
    let systems: Vec<_> = machines
        .map(|((_, ledger), answer)| chart::CopSystem {
            label: answer.label.clone(),
            hours: ledger.rows.iter().filter_map(cop_of_hour).collect(),
            year: answer.spf_h2.map(|spf| ("SPF H2".to_owned(), spf)),
        })
        .collect();
    if systems.iter().all(|system| system.hours.is_empty()) {
        return Ok(None);
    }
    let picture = chart::cop_year(&chart::CopYear { systems }, &material.locale.marks)?;
    let caption = "Heat to the rooms for each unit of electricity in every hour: the colder it is outside and the hotter the water \
must be, the less. The figure of the year (SPF H2) also holds hot water and the machine at rest.";
    Ok(Some(drawn("cop-year", caption, picture)))
}

/// Outdoor temperature, and heat over electricity of the machine for the rooms, of an hour in which it heated them. Hot water is
/// another duty at another temperature; both in one cloud would show neither.
fn cop_of_hour(row: &Row) -> Option<(f64, f64)> {
    row.space_cop.map(|cop| (row.outdoor_c, cop))
}

fn demand_and_output(material: &Material<'_>, system: usize) -> Result<Option<Drawn>, ChartError> {
    let contender = &material.case.contenders[system];
    let Some(machine) = contender.system.heating.machine() else {
        return Ok(None);
    };
    let rows = year_rows(material, system);
    let hours: Vec<_> = rows
        .iter()
        .map(|row| (row.outdoor_c, row.space_wanted_kwh))
        .collect();
    let coldest = rows
        .iter()
        .map(|row| row.outdoor_c)
        .fold(f64::INFINITY, f64::min);
    let warmest = contender.indoor_c - 1.0;
    if hours.is_empty() || coldest >= warmest {
        return Ok(None);
    }
    let low = (coldest.min(contender.design_outdoor_c) - 2.0).floor() as i32;
    let ground = contender
        .aged
        .map_or_else(Memory::default, |aged| aged.memory);
    // Where the machine stands still there is no output to draw a line through.
    let (mut least, mut greatest) = (Vec::new(), Vec::new());
    for outdoor_c in (low..=warmest as i32).map(f64::from) {
        let (low_kw, high_kw) = output_range_kw(
            &contender.system,
            machine,
            contender.indoor_c,
            outdoor_c,
            &ground,
        );
        if high_kw > 0.0 {
            least.push((outdoor_c, low_kw));
            greatest.push((outdoor_c, high_kw));
        }
    }
    let fabric = &contender.system.home.fabric;
    let design_kw = fabric.design_load_kw(contender.indoor_c, contender.design_outdoor_c);
    let answer = &material.estimate.systems[system];
    let data = chart::DemandAndOutput {
        system: answer.label.clone(),
        hours,
        greatest_output: greatest,
        least_output: least,
        balance_point_c: answer.balance_point_c,
        design: Some((contender.design_outdoor_c, design_kw)),
    };
    let picture = chart::demand_and_output(&data, &material.locale.marks)?;
    let caption = format!(
        "Heat that the rooms ask for in each hour{}, against what the machine can give at the flow temperature that the \
emitters need there. Hot water is not in it.",
        of_the_year(material)
    );
    let name = format!("demand-and-output-{}", system + 1);
    Ok(Some(drawn(name, caption, picture)))
}

fn load_duration(material: &Material<'_>, system: usize) -> Result<Option<Drawn>, ChartError> {
    let rows = year_rows(material, system);
    if rows.is_empty() {
        return Ok(None);
    }
    let column = |figure: fn(&Row) -> f64| rows.iter().map(figure).collect();
    let data = chart::LoadDuration {
        system: material.estimate.systems[system].label.clone(),
        machine_kw: column(|row| row.machine_space_kwh + row.machine_water_kwh),
        backup_kw: column(|row| row.backup_kwh + row.immersion_kwh),
        short_kw: column(not_met),
    };
    let picture = chart::load_duration(&data, &material.locale.marks)?;
    let caption = format!(
        "Rooms and hot water{}: every hour by its load, and who carries it.",
        of_the_year(material)
    );
    let name = format!("load-duration-{}", system + 1);
    Ok(Some(drawn(name, caption, picture)))
}

/// Heat that the rooms missed, kWh. An hour that a block of hot water took is bridged by the warmth of the building and made up
/// later; only rooms that grew cold were short.
fn not_met(row: &Row) -> f64 {
    if row.flags.has(Flags::SHORT) {
        (row.space_wanted_kwh - row.space_heat_kwh()).max(0.0)
    } else {
        0.0
    }
}

fn coldest_days(material: &Material<'_>, system: usize) -> Result<Option<Drawn>, ChartError> {
    let case = material.case;
    let contender = &case.contenders[system];
    let Some(hours) = coldest_days_of(&case.site) else {
        return Ok(None);
    };
    let ledger = &material.ledgers[system];
    let Some(rows) = hours
        .start
        .checked_sub(ledger.first_hour)
        .and_then(|first| ledger.rows.get(first..first + hours.len()))
    else {
        return Ok(None);
    };
    let civil = &case.site.civil[hours.clone()];
    let mut dates: Vec<_> = civil.iter().map(|hour| hour.date).collect();
    dates.dedup();
    let is_machine = contender.system.heating.machine().is_some();
    let answer = &material.estimate.systems[system];
    let data = chart::ColdestDays {
        system: answer.label.clone(),
        main_heater: heater_name(&contender.system.heating).to_owned(),
        first_hour: usize::from(civil[0].hour),
        days: dates
            .iter()
            .map(|date| {
                let (day, month) = (date.day(), &MONTHS[date.month0() as usize][..3]);
                let weekday = weekday(date.weekday());
                match material.locale.dates {
                    DateOrder::DayFirst => format!("{weekday} {day} {month}"),
                    DateOrder::MonthFirst => format!("{weekday} {month} {day}"),
                    DateOrder::YearFirst => format!("{weekday} {}", date.format("%m-%d")),
                }
            })
            .collect(),
        hours: rows
            .iter()
            .map(|row| {
                let backup_kw = if is_machine {
                    row.backup_kwh + row.immersion_kwh
                } else {
                    0.0
                };
                let given_kw = row.space_heat_kwh() + row.water_heat_kwh();
                chart::ColdHour {
                    outdoor_c: row.outdoor_c,
                    demand_kw: given_kw + not_met(row),
                    main_kw: given_kw - backup_kw,
                    backup_kw,
                    electricity_kw: row.electricity_kwh(),
                    indoor_c: Some(row.indoor_c),
                }
            })
            .collect(),
        set_point_c: Some(contender.indoor_c),
    };
    let picture = chart::coldest_days(&data, &material.locale.marks)?;
    let caption = match (dates.first(), dates.last()) {
        (Some(first), Some(last)) => format!(
            "The coldest three days of the weather, {} to {}.",
            material.locale.dates.write(*first),
            material.locale.dates.write(*last)
        ),
        _ => String::new(),
    };
    let name = format!("coldest-days-{}", system + 1);
    Ok(Some(drawn(name, caption, picture)))
}

fn weekday(day: Weekday) -> &'static str {
    ["Mon", "Tue", "Wed", "Thu", "Fri", "Sat", "Sun"][day.num_days_from_monday() as usize]
}

/// What makes the heat before backup does.
pub(super) fn heater_name(heating: &Heating) -> &'static str {
    match heating {
        Heating::HeatPump(_) => "heat pump",
        Heating::Hybrid(_) => "heat pump and boiler",
        Heating::Boiler { .. } => "boiler",
        Heating::DirectElectric { .. } => "electric heater",
    }
}

fn energy_flow(material: &Material<'_>, system: usize) -> Result<Option<Drawn>, ChartError> {
    use chart::FlowKind::{Backup, Electricity, Fuel, HotWater, Loss, Rooms, Surroundings};
    let contender = &material.case.contenders[system];
    let sums = material.outcomes[system].mean_sums();
    let flow = |kind, label: &str, kwh: f64| chart::Flow {
        kind,
        label: label.to_owned(),
        // Sums of thousands of hours: what lies below nothing by rounding is nothing.
        kwh: kwh.max(0.0),
    };
    let is_machine = contender.system.heating.machine().is_some();
    let source = match contender.kind {
        "air-source" => "outdoor air",
        "ground-source" => "ground",
        _ => "surroundings",
    };
    let from = if is_machine {
        vec![
            flow(Surroundings, source, sums.extracted_kwh),
            flow(
                Electricity,
                "electricity, machine",
                sums.machine_electricity_kwh() + sums.source_side_kwh,
            ),
            flow(
                Electricity,
                "electricity, heating pump",
                sums.circulation_kwh + sums.heater_electricity_kwh,
            ),
            flow(
                Backup,
                "electricity, backup",
                sums.backup_kwh + sums.immersion_kwh,
            ),
            flow(Fuel, "fuel", sums.fuel_kwh),
        ]
    } else {
        vec![
            flow(Fuel, "fuel, gross", sums.fuel_kwh),
            flow(Electricity, "electricity", sums.electricity_kwh()),
        ]
    };
    let energy_in: f64 = from.iter().map(|flow| flow.kwh).sum();
    if energy_in <= 0.0 {
        return Ok(None);
    }
    let store_kwh = (sums.water_heat_kwh() - sums.water_drawn_kwh).max(0.0);
    let useful_kwh = sums.space_heat_kwh() + sums.water_drawn_kwh;
    let to = vec![
        flow(Rooms, "rooms", sums.space_heat_kwh()),
        flow(HotWater, "hot water at the taps", sums.water_drawn_kwh),
        flow(Loss, "hot-water store", store_kwh),
        flow(Loss, "lost on the way", energy_in - useful_kwh - store_kwh),
    ];
    let label = material.estimate.systems[system].label.clone();
    let data = chart::EnergyFlow {
        system: label,
        heater: heater_name(&contender.system.heating).to_owned(),
        from,
        to,
    };
    let picture = chart::energy_flow(&data, &material.locale.marks)?;
    let caption = if is_machine {
        "Lost on the way: the drive, the fan or brine pump, defrosting, the machine at rest, and the allowance from laboratory to home."
    } else {
        "Lost on the way: what leaves through the flue and the casing, and what pump and fan use."
    };
    Ok(Some(drawn(
        format!("energy-flow-{}", system + 1),
        caption,
        picture,
    )))
}

/// The rows of the year that pictures of hours show: the coldest of the weather.
fn year_rows<'a>(material: &Material<'a>, system: usize) -> &'a [Row] {
    let ledger = &material.ledgers[system];
    coldest_year(&material.case.site)
        .and_then(|(_, hours)| {
            let first = hours.start.checked_sub(ledger.first_hour)?;
            ledger.rows.get(first..first + hours.len())
        })
        .unwrap_or(&[])
}

/// Which year that is, when there are several.
fn of_the_year(material: &Material<'_>) -> String {
    let site = &material.case.site;
    match coldest_year(site) {
        Some((year, _)) if site.years.len() > 1 => {
            format!(" of {year}, the coldest of {} years", site.years.len())
        }
        _ => " of the year".to_owned(),
    }
}
