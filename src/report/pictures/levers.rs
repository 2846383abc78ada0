//! What moves the saving of a choice: emitters, swings, two levers at once.

use super::{Drawn, drawn};
use crate::answer::study::{AxisAnswer, ChoiceStudy, StudyAnswer, TwoLeversAnswer};
use crate::answer::{EmitterAnswer, LeverAnswer, SwingAnswer};
use crate::chart::{
    self, ChartError, Contours, EmitterStep, EmitterStudy, Marks, Swing, Swings, contours,
};
use crate::study::Lever;

/// The pictures of a study: of every choice its emitters, two levers and swings, and what is spent over the years.
///
/// # Errors
/// When a picture cannot be drawn.
pub fn study_pictures(answer: &StudyAnswer, marks: &Marks) -> Result<Vec<Drawn>, ChartError> {
    let currency = &answer.currency;
    let mut all = Vec::new();
    for (i, choice) in answer.choices.iter().enumerate() {
        let number = i + 1;
        if let Some(steps) = &choice.emitters {
            let levers = &choice.break_even;
            let of = (number, choice.label.as_str());
            all.push(emitters(of, steps, levers, currency, marks)?);
        }
        let picture = contours(&two_levers(choice, currency), marks)?;
        let name = format!("two-levers-{number}");
        all.push(drawn(name, "The saving over two levers at once.", picture));
        if !choice.swings.is_empty() {
            let of = (number, choice.label.as_str());
            all.push(swings(of, choice.saving, &choice.swings, currency, marks)?);
        }
    }
    if let Some(lifetime) = &answer.lifetime {
        let systems = lifetime.systems.iter();
        all.push(super::money::spending(systems, lifetime, currency, marks)?);
    }
    Ok(all)
}

/// Saving, SPF and size of the emitters of a choice (its number and name) over the flow temperature.
pub(super) fn emitters(
    (number, label): (usize, &str),
    steps: &[EmitterAnswer],
    break_even: &[LeverAnswer],
    currency: &str,
    marks: &Marks,
) -> Result<Drawn, ChartError> {
    let flow = break_even.iter().find(|lever| {
        lever.lever == Lever::FlowTemperature.name() && lever.measure == "yearly cost"
    });
    let data = EmitterStudy {
        choice: label.to_owned(),
        currency: currency.to_owned(),
        steps: steps
            .iter()
            .map(|step| EmitterStep {
                flow_c: step.flow_c,
                times_today: step.times_today_output,
                saving: step.saving,
                spf_h4: step.spf_h4,
            })
            .collect(),
        now_c: flow.map(|flow| flow.now),
        crossings_c: flow.map_or_else(Vec::new, |flow| flow.values.clone()),
    };
    let caption = "What cooler water is worth in a year, and how much larger than today’s the emitters must be for it.";
    let picture = chart::emitter_study(&data, marks)?;
    Ok(drawn(format!("emitters-{number}"), caption, picture))
}

/// The saving of a choice (its number and name) with one thing after the other at its low and its high.
pub(super) fn swings(
    (number, label): (usize, &str),
    likely: f64,
    swings: &[SwingAnswer],
    currency: &str,
    marks: &Marks,
) -> Result<Drawn, ChartError> {
    let levers = swings.iter().map(|swing| Swing {
        label: sentence_case(&swing.lever),
        low_text: end_text(swing.low, &swing.unit, marks),
        high_text: end_text(swing.high, &swing.unit, marks),
        low: swing.saving_at_low,
        high: swing.saving_at_high,
    });
    let data = Swings {
        outcome: format!("Saving in a year of {label}"),
        currency: currency.to_owned(),
        likely,
        levers: levers.collect(),
    };
    let caption = "The saving with one thing moved to either end of its range; the longest line matters most.";
    let picture = chart::swings(&data, marks)?;
    Ok(drawn(format!("swings-{number}"), caption, picture))
}

/// The end of a swing as it stands in a picture: "× 0.8", "46 °C".
fn end_text(value: f64, unit: &str, marks: &Marks) -> String {
    match unit {
        "× today's" => format!("× {}", marks.number(value, 2)),
        _ if unit.starts_with('×') => format!("{} {unit}", marks.number(value, 2)),
        "" => format!("{} %", marks.number(value * 100.0, 0)),
        _ => format!("{} {unit}", marks.number(value, 0)),
    }
}

fn two_levers(choice: &ChoiceStudy, currency: &str) -> Contours {
    let TwoLeversAnswer { x, y, saving } = &choice.two_levers;
    // Two prices are drawn as prices, so that lines of constant ratio mean something.
    let prices = x
        .price_now
        .zip(y.price_now)
        .filter(|(x, y)| *x > 0.0 && *y > 0.0);
    let scale = |axis: &AxisAnswer, price: Option<f64>| {
        let factor = price.unwrap_or(1.0);
        let values: Vec<f64> = axis.values.iter().map(|value| value * factor).collect();
        let unit = axis
            .price_unit
            .as_ref()
            .filter(|_| price.is_some())
            .unwrap_or(&axis.unit)
            .clone();
        (
            values,
            axis.now * factor,
            (sentence_case(&axis.lever), unit),
        )
    };
    let (x_values, x_now, x_name) = scale(x, prices.map(|prices| prices.0));
    let (y_values, y_now, y_name) = scale(y, prices.map(|prices| prices.1));
    let electricity_along_x = x.lever == Lever::ElectricityRate.name();
    Contours {
        outcome: format!("Saving in a year of {}", choice.label),
        currency: currency.to_owned(),
        x_name,
        y_name,
        x: x_values,
        y: y_values,
        values: saving.clone(),
        now: Some((x_now, y_now)),
        ratios: prices
            .filter(|_| electricity_along_x)
            .map_or_else(Vec::new, |_| vec![2.0, 3.0, 4.0, 5.0]),
    }
}

fn sentence_case(text: &str) -> String {
    let mut letters = text.chars();
    letters.next().map_or_else(String::new, |first| {
        first.to_uppercase().chain(letters).collect()
    })
}
