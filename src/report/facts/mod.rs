//! What the sentences may speak of: the estimate as its JSON has it, and beside it what case and ledgers add.

mod hour;
mod levers;
mod names;
mod next;
mod sources;
mod system;

use serde::Serialize;
use serde_json::{Map, Value, json};

use super::pictures::{Material, in_front};
use crate::answer::lifetime::SystemLifetime;
use hour::coldest;
use next::next_steps;
use sources::{assumptions, refrigerants};
use system::{mark, system};

/// Systems beside each other in a table, today's among them.
const ABREAST: usize = 4;

/// Choices told on the first page.
const NEAREST: usize = 3;

/// Below this share of today's cost a difference is told as none. A choice of ours.
pub(super) const ABOUT_THE_SAME: f64 = 0.02;

/// The context of the sentences.
pub(super) fn facts(material: &Material<'_>) -> Value {
    let estimate = material.estimate;
    let mut facts = object(estimate);
    let odds = facts.get("odds").cloned().unwrap_or_default();
    let front = in_front(estimate);
    let systems: Vec<Value> = (0..estimate.systems.len())
        .map(|i| {
            let mut facts = with_odds(system(material, i), &odds);
            facts["in_front"] = json!(front.contains(&i));
            facts
        })
        .collect();
    let (today, mut choices): (Vec<&Value>, Vec<&Value>) =
        systems.iter().partition(|s| s["today"] == true);
    let groups = groups(&today, &choices);
    // What leaves the home cold stands behind all others, however cheap it is.
    let cold = |system: &Value| system["leaves_cold"].is_string();
    choices.sort_by(|a, b| {
        let by_cost = number(a, "cost").total_cmp(&number(b, "cost"));
        cold(a).cmp(&cold(b)).then(by_cost)
    });
    let cheapest = |kind: &str| choices.iter().find(|s| s["kind"] == kind).copied();
    let mut put = |name: &str, value: Value| {
        facts.insert(name.to_owned(), value);
    };
    if let Some(today) = today.first() {
        put("today", (*today).clone());
    }
    let mut warm = choices.iter().filter(|choice| !cold(choice));
    if let (Some(best), Some(worst)) = (choices.first(), warm.next_back().or(choices.last())) {
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
    for (name, value) in levers::facts(estimate, &choices) {
        put(name, value);
    }
    put("next_steps", next_steps(&choices, estimate));
    let behind: Vec<String> = systems
        .iter()
        .filter(|s| s["in_front"] == false)
        .map(|s| format!("{}. {}", s["number"], s["label"].as_str().unwrap_or("")))
        .collect();
    put("behind", json!(behind.join(", ")));
    put("odds_depend", odds_depend(&choices));
    put("choices", json!(choices));
    put("groups", json!(groups));
    put("several_years", json!(estimate.weather.years > 1));
    let peaks = estimate.systems.iter().map(|s| s.peak_electric_kw);
    put("peak_kw", json!(peaks.fold(0.0, f64::max)));
    if let Some((hour, in_the_hour)) = coldest(material) {
        let all = in_the_hour.iter().enumerate();
        let shown = all.filter(|(i, _)| front.contains(i)).map(|(_, s)| s);
        let (todays, others): (Vec<&Value>, Vec<&Value>) = shown.partition(|s| s["today"] == true);
        put("hour_groups", json!(self::groups(&todays, &others)));
        put("coldest", hour);
    }
    if let Some(lifetime) = &estimate.lifetime {
        let marked = |of: &SystemLifetime| {
            let mut facts = object(of);
            let system = estimate.systems.iter().find(|s| s.label == of.label);
            facts.insert("mark".to_owned(), json!(system.map(mark)));
            Value::Object(facts)
        };
        let systems: Vec<Value> = lifetime.systems.iter().map(marked).collect();
        let (today, others): (Vec<&Value>, Vec<&Value>) =
            systems.iter().partition(|s| s["today"] == true);
        put("lifetime_groups", json!(self::groups(&today, &others)));
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

/// A system with the odds of its label, where they were drawn.
fn with_odds(mut system: Value, odds: &Value) -> Value {
    let of_it = odds["choices"]
        .as_array()
        .and_then(|choices| choices.iter().find(|one| one["label"] == system["label"]))
        .cloned();
    if let (Some(found), Some(facts)) = (of_it, system.as_object_mut()) {
        facts.insert("odds".to_owned(), found);
    }
    system
}

/// What the odds depend on, the choices of which the same is said together.
fn odds_depend(choices: &[&Value]) -> Value {
    let mut groups: Vec<(&str, Vec<&str>)> = Vec::new();
    for choice in choices {
        let (Some(words), Some(label)) = (
            choice["odds"]["depends_on"].as_str(),
            choice["label"].as_str(),
        ) else {
            continue;
        };
        match groups.iter_mut().find(|(said, _)| *said == words) {
            Some((_, labels)) => labels.push(label),
            None => groups.push((words, vec![label])),
        }
    }
    let groups = groups.iter().map(|(words, labels)| {
        let rest = words.strip_prefix("It ");
        let words = rest.map_or_else(|| (*words).to_owned(), |rest| format!("it {rest}"));
        json!({ "words": words, "labels": labels.join("; ") })
    });
    json!(groups.collect::<Vec<_>>())
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
