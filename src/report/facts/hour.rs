//! The coldest hour.

use serde_json::{Map, Value, json};

use crate::report::hours::coldest_hour;
use crate::report::pictures::Material;
use crate::study::Contender;
use crate::year::{Flags, Ledger, Row};

/// The coldest hour: its date and temperature, and each system's row of it.
pub(super) fn coldest(material: &Material<'_>) -> Option<(Value, Vec<Value>)> {
    let site = &material.case.site;
    let hour = coldest_hour(site)?;
    let civil = site.civil.get(hour)?;
    let when = json!({
        "outdoor_c": site.outdoor_c.get(hour)?,
        "date": material.locale.dates.write(civil.date),
        "time": format!("{:02}:{:02}", civil.hour, civil.minute),
    });
    let systems = material.case.contenders.iter().zip(material.ledgers);
    let rows = systems.map(|(contender, ledger)| in_the_hour(contender, ledger, hour));
    Some((when, rows.collect::<Option<_>>()?))
}

/// A system's row; what is nothing there is left out.
fn in_the_hour(contender: &Contender, ledger: &Ledger, hour: usize) -> Option<Value> {
    let row: &Row = ledger.rows.get(hour.checked_sub(ledger.first_hour)?)?;
    let mut facts = Map::new();
    facts.insert("label".into(), json!(contender.system.label));
    facts.insert("today".into(), json!(contender.today));
    let is_machine = contender.system.heating.machine().is_some();
    let always = [
        ("fabric_loss_kwh", row.fabric_loss_kwh),
        ("gains_kwh", row.gains_kwh),
        ("space_wanted_kwh", row.space_wanted_kwh),
        ("electricity_kwh", row.electricity_kwh()),
        ("energy_cost", row.energy_cost),
        ("indoor_c", row.indoor_c),
    ];
    let where_used = [
        ("machine_space_kwh", row.machine_space_kwh),
        ("heater_space_kwh", row.heater_space_kwh),
        ("backup_kwh", row.backup_kwh + row.immersion_kwh),
        ("water_kwh", row.water_heat_kwh()),
        ("compressor_kwh", row.compressor_kwh),
        ("source_side_kwh", row.source_side_kwh),
        ("defrost_kwh", row.defrost_kwh),
        ("allowance_kwh", row.allowance_kwh),
        (
            "other_electricity_kwh",
            row.circulation_kwh + row.idle_kwh + row.heater_electricity_kwh,
        ),
        ("fuel_kwh", row.fuel_kwh),
    ];
    let known = [
        ("source_c", row.source_c.filter(|_| is_machine)),
        ("space_flow_c", row.space_flow_c),
        ("space_return_c", row.space_return_c),
        ("space_cop", row.space_cop),
    ];
    let flags = (row.flags != Flags::NONE).then(|| row.flags.words());
    let figures = always
        .into_iter()
        .chain(where_used.into_iter().filter(|(_, kwh)| *kwh != 0.0))
        .chain(
            known
                .into_iter()
                .filter_map(|(name, v)| v.map(|v| (name, v))),
        );
    facts.extend(figures.map(|(name, value)| (name.to_owned(), json!(value))));
    facts.extend(flags.map(|words| ("flags".to_owned(), json!(words))));
    Some(Value::Object(facts))
}
