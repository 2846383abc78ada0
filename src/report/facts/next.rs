//! What to find out next.

use serde_json::{Value, json};

use crate::answer::Estimate;

/// A break-even this near to today's price or flow temperature is worth finding out about first. A choice of ours.
const NEAR_PRICE: f64 = 0.15;
const NEAR_FLOW_K: f64 = 12.0;

/// What is worth finding out, the most useful first: where the answer turns near to where things stand, then what is not known.
pub(super) fn next_steps(choices: &[&Value], estimate: &Estimate) -> Value {
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
