//! The coldest three days.

use chrono::{Datelike as _, Weekday};

use super::{Drawn, Material, drawn, heater_name, not_met};
use crate::chart::{self, ChartError};
use crate::locale::{DateOrder, MONTHS};
use crate::report::hours::coldest_days_of;

pub(super) fn coldest_days(
    material: &Material<'_>,
    system: usize,
) -> Result<Option<Drawn>, ChartError> {
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
