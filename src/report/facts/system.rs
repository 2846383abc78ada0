//! One system: its answer, and what its parts add.

use serde_json::{Value, json};

use super::{ABOUT_THE_SAME, object};
use crate::answer::{MonthAnswer, SystemAnswer};
use crate::home::EmitterKind;
use crate::locale::MONTHS;
use crate::report::pictures::Material;
use crate::year::Heating;

pub(super) fn system(material: &Material<'_>, i: usize) -> Value {
    let estimate = material.estimate;
    let answer = &estimate.systems[i];
    let contender = &material.case.contenders[i];
    let mut facts = object(answer);
    let home = &contender.system.home;
    let mut put = |name: &str, value: Value| {
        facts.insert(name.to_owned(), value);
    };
    put("number", json!(i + 1));
    put("mark", json!(mark(answer)));
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
        put("hot_water_daily_kwh", json!(water.mean_daily_kwh()));
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
    if let (Some(capital), Some(saving), None) =
        (answer.capital, answer.saving, &answer.leaves_cold)
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
    put("design_limited_by", json!(answer.design.limited_by));
    put(
        "design_carried",
        json!(1.0 + answer.design.margin_percent / 100.0),
    );
    put("water_l_per_min", json!(answer.design.water_l_per_min));
    if let Some(store) = &answer.store {
        put("usable_l", json!(store.usable_l));
        if let Some(hours) = store.reheat_hours {
            put("reheat_hours", json!(hours));
        }
    }
    put("months", months(answer));
    put("bands", bands(answer));
    if let Some(levers) = estimate.break_even.get(&answer.label) {
        let conditions: Vec<_> = levers.iter().flat_map(|lever| &lever.conditions).collect();
        put("conditions", json!(conditions));
        put("levers", json!(levers));
    }
    Value::Object(facts)
}

/// What stands behind a name among others; nothing where rooms and water are kept warm.
pub(super) fn mark(answer: &SystemAnswer) -> String {
    let name = answer.name();
    name.strip_prefix(&answer.label).unwrap_or("").to_owned()
}

/// The meters, by what they count, and what their bands are made of.
fn bands(answer: &SystemAnswer) -> Value {
    let meters = answer.meters.iter();
    json!(
        meters
            .map(|meter| json!({ "fuel": meter.fuel, "basis": meter.basis }))
            .collect::<Vec<_>>()
    )
}

/// The months as they are printed: whole numbers that add up to the year, beside each what every meter may read without surprise.
fn months(answer: &SystemAnswer) -> Value {
    let monthly: &[MonthAnswer] = &answer.monthly;
    let column = |figure: &dyn Fn(&MonthAnswer) -> f64| {
        add_up(&monthly.iter().map(figure).collect::<Vec<_>>())
    };
    let heat = column(&|m| m.heat_kwh);
    let electricity = column(&|m| m.electricity_kwh);
    let fuel = column(&|m| m.fuel_kwh.unwrap_or(0.0));
    let cost = column(&|m| m.cost);
    let rows: Vec<_> = (0..monthly.len())
        .map(|i| {
            let bands: Vec<Option<[f64; 2]>> = answer
                .meters
                .iter()
                .map(|meter| {
                    let month = meter.months.iter().find(|m| m.month == i + 1)?;
                    Some([month.low_kwh, month.high_kwh])
                })
                .collect();
            json!({
                "bands": bands,
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
}
