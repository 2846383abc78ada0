//! What the sentences may speak of: the estimate as its JSON has it, and beside it what case and ledgers add.

use serde::Serialize;
use serde_json::{Map, Value, json};

use super::hours::coldest_hour;
use super::pictures::Material;
use crate::answer::{Estimate, MonthAnswer};
use crate::home::EmitterKind;
use crate::locale::MONTHS;
use crate::study::Contender;
use crate::year::{Flags, Heating, Ledger, Row};

/// Systems beside each other in a table, today's among them.
const ABREAST: usize = 4;
/// Choices told on the first page.
const NEAREST: usize = 3;
/// Below this share of today's cost a difference is told as none. A choice of ours.
pub(super) const ABOUT_THE_SAME: f64 = 0.02;
/// A break-even this near to today's price or flow temperature is worth finding out about first. A choice of ours.
const NEAR_PRICE: f64 = 0.15;
const NEAR_FLOW_K: f64 = 12.0;

/// The context of the sentences.
pub(super) fn facts(material: &Material<'_>) -> Value {
    let estimate = material.estimate;
    let systems: Vec<Value> = (0..estimate.systems.len())
        .map(|i| system(material, i))
        .collect();
    let (today, mut choices): (Vec<&Value>, Vec<&Value>) =
        systems.iter().partition(|s| s["today"] == true);
    let groups = groups(&today, &choices);
    choices.sort_by(|a, b| number(a, "cost").total_cmp(&number(b, "cost")));
    let cheapest = |kind: &str| choices.iter().find(|s| s["kind"] == kind).copied();
    let mut facts = object(estimate);
    let mut put = |name: &str, value: Value| {
        facts.insert(name.to_owned(), value);
    };
    if let Some(today) = today.first() {
        put("today", (*today).clone());
    }
    if let (Some(best), Some(worst)) = (choices.first(), choices.last()) {
        let saving = number(best, "saving");
        put(
            "same",
            json!(saving.abs() < ABOUT_THE_SAME * (number(best, "cost") + saving).abs()),
        );
        put("best", (*best).clone());
        put("worst", (*worst).clone());
    } else {
        put("best", json!({}));
    }
    if let Some(air) = cheapest("air-source") {
        put("best_air", air.clone());
        if let Some(ground) = cheapest("ground-source") {
            put(
                "air_ground_gap",
                json!(number(ground, "cost") - number(air, "cost")),
            );
        }
    }
    if let Some(ground) = cheapest("ground-source") {
        put("best_ground", ground.clone());
    }
    put(
        "nearest",
        json!(choices.iter().take(NEAREST).collect::<Vec<_>>()),
    );
    put("next_steps", next_steps(&choices, estimate));
    put("choices", json!(choices));
    put("groups", json!(groups));
    put("several_years", json!(estimate.weather.years > 1));
    let peaks = estimate.systems.iter().map(|s| s.peak_electric_kw);
    put("peak_kw", json!(peaks.fold(0.0, f64::max)));
    if let Some((hour, in_the_hour)) = coldest(material) {
        let (todays, others): (Vec<&Value>, Vec<&Value>) =
            in_the_hour.iter().partition(|s| s["today"] == true);
        put("hour_groups", json!(self::groups(&todays, &others)));
        put("coldest", hour);
    }
    let (flammable, cautions) = refrigerants(material);
    if !flammable.is_empty() {
        put("flammable", json!(flammable.join(" and ")));
    }
    put("refrigerant_cautions", json!(cautions));
    put("assumptions", assumptions(estimate));
    put("systems", json!(systems));
    put("version", json!(env!("CARGO_PKG_VERSION")));
    Value::Object(facts)
}

/// Anything as a JSON object; what is no object is an empty one.
fn object(value: &impl Serialize) -> Map<String, Value> {
    match serde_json::to_value(value) {
        Ok(Value::Object(map)) => map,
        _ => Map::new(),
    }
}

fn number(system: &Value, field: &str) -> f64 {
    system[field].as_f64().unwrap_or(f64::NAN)
}

/// Today's system with up to three choices beside it, again and again.
fn groups(today: &[&Value], choices: &[&Value]) -> Vec<Vec<Value>> {
    let beside = |group: &[&Value]| today.iter().chain(group).map(|s| (*s).clone()).collect();
    if choices.is_empty() {
        return vec![beside(&[])];
    }
    choices.chunks(ABREAST - 1).map(beside).collect()
}

fn system(material: &Material<'_>, i: usize) -> Value {
    let estimate = material.estimate;
    let answer = &estimate.systems[i];
    let contender = &material.case.contenders[i];
    let mut facts = object(answer);
    let home = &contender.system.home;
    let mut put = |name: &str, value: Value| {
        facts.insert(name.to_owned(), value);
    };
    put("number", json!(i + 1));
    put("indoor_c", json!(contender.indoor_c));
    put(
        "emitters",
        json!(match home.emitters.kind() {
            EmitterKind::Radiators => "radiators",
            EmitterKind::Underfloor => "underfloor heating",
            EmitterKind::FanConvectors => "fan convectors",
        }),
    );
    put("flow_c", json!(home.emitters.design_flow_c()));
    put(
        "return_c",
        json!(home.emitters.design_flow_c() - home.emitters.design_spread_k()),
    );
    if let Some(water) = &home.hot_water {
        put("hot_water_daily_kwh", json!(water.daily_kwh));
        if let Some(store) = &water.store {
            put("store_c", json!(store.set_point_c));
        }
    }
    put("kind_words", json!(answer.kind.replace('-', " ")));
    put("is_machine", json!(false));
    if let Some(made) = contender.system.heating.machine() {
        let machine = &made.machine;
        let refrigerant = machine.refrigerant();
        put("is_machine", json!(true));
        put(
            "kind_words",
            json!(format!("{} heat pump", answer.kind.replace('-', " "))),
        );
        put("typical", json!(machine.is_typical()));
        put("rated_output_kw", json!(machine.rated_output_kw()));
        put("rated_source_c", json!(machine.rated_condition().0));
        put("rated_flow_c", json!(machine.rated_condition().1));
        put("refrigerant", json!(refrigerant.name()));
        put(
            "safety_class",
            json!(refrigerant.facts().safety_class.to_string()),
        );
        put("field_factor", json!(machine.field_factor()));
        put("backup_kw", json!(made.backup_kw));
        put("hours_backup_machine", json!(answer.hours_backup));
        let coldest = material.ledgers[i]
            .rows
            .iter()
            .filter_map(|row| row.source_c);
        let coldest = coldest.fold(f64::INFINITY, f64::min);
        if coldest.is_finite() {
            put("coldest_source_c", json!(coldest));
        }
    }
    if let Heating::Boiler {
        fixed_flow_c: Some(flow_c),
        ..
    } = &contender.system.heating
    {
        put("fixed_flow_c", json!(flow_c));
    }
    if let (Some(capital), Some(saving)) = (answer.capital, answer.saving)
        && saving > ABOUT_THE_SAME * (answer.cost + saving).abs()
    {
        put("years_of_saving", json!(capital / saving));
    }
    put(
        "heat_kwh",
        json!(answer.space_heat_kwh + answer.hot_water_kwh),
    );
    put("design_flow_c", json!(answer.design.heater_flow_c));
    put("design_output_kw", json!(answer.design.output_kw));
    put("water_l_per_min", json!(answer.design.water_l_per_min));
    if let Some(store) = &answer.store {
        put("usable_l", json!(store.usable_l));
        if let Some(hours) = store.reheat_hours {
            put("reheat_hours", json!(hours));
        }
    }
    put("months", months(&answer.monthly));
    if let Some(levers) = estimate.break_even.get(&answer.label) {
        let conditions: Vec<_> = levers.iter().flat_map(|lever| &lever.conditions).collect();
        put("conditions", json!(conditions));
        put("levers", json!(levers));
    }
    Value::Object(facts)
}

/// The months as they are printed: whole numbers that add up to the year.
fn months(monthly: &[MonthAnswer]) -> Value {
    let column = |figure: &dyn Fn(&MonthAnswer) -> f64| {
        add_up(&monthly.iter().map(figure).collect::<Vec<_>>())
    };
    let heat = column(&|m| m.heat_kwh);
    let electricity = column(&|m| m.electricity_kwh);
    let fuel = column(&|m| m.fuel_kwh.unwrap_or(0.0));
    let cost = column(&|m| m.cost);
    let rows: Vec<_> = (0..monthly.len())
        .map(|i| {
            json!({
                "name": MONTHS.get(i).copied().unwrap_or(""),
                "heat_kwh": heat[i],
                "electricity_kwh": electricity[i],
                "fuel_kwh": fuel[i],
                "cost": cost[i],
            })
        })
        .collect();
    json!(rows)
}

/// Rounds to whole numbers whose sum is the rounded sum: everything down, then those with the largest remainders up.
pub(super) fn add_up(values: &[f64]) -> Vec<f64> {
    let mut whole: Vec<f64> = values.iter().map(|v| v.floor()).collect();
    let missing = values.iter().sum::<f64>().round() - whole.iter().sum::<f64>();
    let mut order: Vec<usize> = (0..values.len()).collect();
    order.sort_by(|&a, &b| (values[b] - whole[b]).total_cmp(&(values[a] - whole[a])));
    for &i in order.iter().take(missing.max(0.0) as usize) {
        whole[i] += 1.0;
    }
    whole
}

/// The coldest hour: its date and temperature, and each system's row of it.
fn coldest(material: &Material<'_>) -> Option<(Value, Vec<Value>)> {
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

/// Names of the flammable refrigerants, and the cautions of all of them.
fn refrigerants(material: &Material<'_>) -> (Vec<&'static str>, Vec<String>) {
    let (mut flammable, mut cautions) = (Vec::new(), Vec::new());
    for contender in &material.case.contenders {
        let Some(made) = contender.system.heating.machine() else {
            continue;
        };
        let refrigerant = made.machine.refrigerant();
        let facts = refrigerant.facts();
        if facts.safety_class.flammable() && !flammable.contains(&refrigerant.name()) {
            flammable.push(refrigerant.name());
        }
        let caution = format!(
            "{}: {}.",
            refrigerant.name(),
            facts.caution.trim_end_matches('.')
        );
        if !cautions.contains(&caution) {
            cautions.push(caution);
        }
    }
    (flammable, cautions)
}

/// The assumptions, each with the kind of source it has.
fn assumptions(estimate: &Estimate) -> Value {
    let rows: Vec<_> = estimate
        .assumptions
        .iter()
        .map(|a| {
            json!({
                "name": a.name,
                "value": a.value,
                "kind": source_kind(&a.from),
                "from": a.from.strip_prefix("default: ").unwrap_or(&a.from),
            })
        })
        .collect();
    json!(rows)
}

/// Measured, declared, computed, standard or assumed. Only a source that names a publication makes a standard.
fn source_kind(from: &str) -> &'static str {
    const PUBLICATIONS: &[&str] = &[
        "EN ",
        "ISO ",
        "IEC ",
        "BS ",
        "ASHRAE",
        "CIBSE",
        "VDI ",
        "SAP ",
        "IPCC",
        "Regulation",
        "Directive",
        "doi",
        "convention",
        "conversion factors",
        "Green Book",
        "published",
        "handbook",
    ];
    let says = |words: &[&str]| words.iter().any(|word| from.contains(word));
    if says(&["meter reading", "bills"]) {
        "measured"
    } else if says(&["no source"]) {
        "assumed"
    } else if says(&["brief", "sheet"]) {
        "declared"
    } else if says(&["weather file"]) {
        "computed"
    } else if says(PUBLICATIONS) {
        "standard"
    } else {
        "assumed"
    }
}

/// What is worth finding out, the most useful first: where the answer turns near to where things stand, then what is not known.
fn next_steps(choices: &[&Value], estimate: &Estimate) -> Value {
    let mut steps: Vec<Value> = Vec::new();
    let mut say = |what: &str, why: String| steps.push(json!({ "what": what, "why": why }));
    let crossings = |lever: &str, near: &dyn Fn(f64, f64) -> bool| {
        choices.iter().find_map(|choice| {
            let found = choice["levers"]
                .as_array()?
                .iter()
                .find(|l| l["lever"] == lever)?;
            let now = found["now"].as_f64()?;
            let at = found["values"].as_array()?.iter().filter_map(Value::as_f64);
            at.into_iter()
                .find(|at| near(now, *at))
                .map(|_| choice["label"].as_str().unwrap_or("").to_owned())
        })
    };
    if let Some(label) = crossings("design flow temperature", &|now, at| {
        (now - at).abs() < NEAR_FLOW_K
    }) {
        say(
            "The flow temperature that the radiators need.",
            format!(
                "For {label} the answer turns within {NEAR_FLOW_K:.0} K of it. On a cold day turn the boiler’s flow down step by step until a room no longer gets warm."
            ),
        );
    }
    if let Some(label) = crossings("electricity rate", &|now, at| {
        (at / now - 1.0).abs() < NEAR_PRICE
    }) {
        say(
            "The electricity price this home could really have.",
            format!(
                "For {label} the answer turns within {:.0} % of it. Ask for tariffs made for heat pumps or with cheap hours.",
                NEAR_PRICE * 100.0
            ),
        );
    }
    if choices.iter().any(|choice| choice["typical"] == true) {
        say(
            "The data sheet of the machine that would be fitted.",
            "A typical machine stands in for it here.".to_owned(),
        );
    }
    say(
        "What the home really uses.",
        format!(
            "A year of meter readings beside the {:.0} W/K in the brief shows whether the heat loss is right.",
            estimate.home.heat_loss_w_per_k
        ),
    );
    json!(steps)
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;

    proptest! {
        /// Each figure moves by less than one, and the sum is the rounded sum.
        #[test]
        fn rounded_months_add_up(values in proptest::collection::vec(-500.0..5000.0f64, 1..20)) {
            let whole = add_up(&values);
            let sum: f64 = whole.iter().sum();
            prop_assert_eq!(sum, values.iter().sum::<f64>().round());
            prop_assert!(whole.iter().zip(&values).all(|(w, v)| (w - v).abs() < 1.0 + 1e-9));
        }
    }

    #[test]
    fn sources_are_told_by_their_kind() {
        assert_eq!(
            source_kind("default: common practice, no source"),
            "assumed"
        );
        assert_eq!(source_kind("EN 14825 default"), "standard");
        assert_eq!(
            source_kind("UK government conversion factors 2025"),
            "standard"
        );
        for no_publication in [
            "no pattern is given",
            "no forecast: prices stay as they are above inflation",
            "the quick option: it over-chills cold nights",
        ] {
            assert_eq!(source_kind(no_publication), "assumed", "{no_publication}");
        }
        assert_eq!(source_kind("brief"), "declared");
        assert_eq!(
            source_kind("annual wave of the weather file carried down"),
            "computed"
        );
    }
}
