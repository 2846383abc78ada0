//! What one would have to change: emitters as a table of all heat pumps, swings of the cheapest choice and in a line of the others.

use serde_json::{Value, json};

use crate::answer::{Estimate, WhatIf};

/// The table prints the flows that are whole multiples of this; `result.json` and the picture have those between.
const STEP_K: f64 = 5.0;

/// The facts by name; `choices` stand the cheapest first.
pub(super) fn facts(estimate: &Estimate, choices: &[&Value]) -> Vec<(&'static str, Value)> {
    let looked_at: Vec<&WhatIf> = choices
        .iter()
        .filter_map(|choice| estimate.what_if.iter().find(|w| choice["label"] == w.label))
        .collect();
    let mut facts = Vec::new();
    let machines: Vec<_> = looked_at
        .iter()
        .filter_map(|w| Some((&w.label, w.emitters.as_ref()?)))
        .collect();
    if let Some((_, first)) = machines.first() {
        // All are run at the same flows; a choice that lacks one shows nothing there.
        let printed = first.iter().filter(|step| step.flow_c % STEP_K == 0.0);
        let rows = printed.map(|step| {
            let savings = machines.iter().map(|(_, steps)| {
                let same = steps.iter().find(|other| other.flow_c == step.flow_c);
                json!(same.and_then(|same| same.saving))
            });
            json!({
                "flow_c": step.flow_c,
                "times": step.times_today_output,
                "savings": savings.collect::<Vec<_>>(),
            })
        });
        facts.push(("emitter_rows", json!(rows.collect::<Vec<_>>())));
        let labels = machines.iter().map(|(label, _)| json!({ "label": label }));
        facts.push(("emitter_choices", json!(labels.collect::<Vec<_>>())));
    }
    if let Some((first, others)) = looked_at.split_first()
        && !first.swings.is_empty()
    {
        let from = first.swings.iter().flat_map(|swing| swing.from.split("; "));
        let mut sources: Vec<&str> = from.collect();
        sources.sort_unstable();
        sources.dedup();
        let mut moved = json!(first);
        moved["sources"] = json!(sources.join("; "));
        facts.push(("moved", moved));
        let others = others.iter().filter_map(|other| {
            let mut most = json!(other.swings.first()?);
            most["label"] = json!(other.label);
            Some(most)
        });
        facts.push(("moved_others", json!(others.collect::<Vec<_>>())));
    }
    facts
}
