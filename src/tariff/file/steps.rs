//! Prices by the amount used.

use super::fields::StepFields;
use super::pricing::Pricing;
use crate::document::{Check, Section};
use crate::tariff::{Band, Span, Step, Steps};

/// The steps of a price list, when it has any.
pub(super) fn steps(
    given: &[Section<StepFields>],
    check: &mut Check,
    pricing: &mut Pricing,
) -> Option<Steps> {
    let (first, rest) = given.split_first()?;
    let every = check.value(&first.per).map(|(span,)| span);
    for fields in rest {
        let own = check.value(&fields.per).map(|(span,)| span);
        if let (Some(leaf), true) = (&fields.per, own.is_some_and(|own| Some(own) != every)) {
            let expected = every.unwrap_or(Span::Month).name();
            check.refuse(
                &leaf.span(),
                "steps counted over different periods".to_owned(),
                format!("the same period in all steps, here \"{expected}\""),
                "write per = in the first step only",
            );
        }
    }
    let mut steps = Vec::new();
    let mut reached = Some(0.0);
    for (i, fields) in given.iter().enumerate() {
        let up_to_kwh = pricing.amount(check, &fields.up_to);
        let last = i + 1 == given.len();
        match (&fields.up_to, last) {
            (Some(leaf), true) => {
                let text = leaf.value().map_or("", String::as_str);
                check.refuse(
                    &leaf.span(),
                    format!("no price above {text}"),
                    "a last step without up_to",
                    "remove up_to here, or add a [[step]] for what is above",
                );
            }
            (None, false) => check.missing(&fields.span(), "step.up_to", "\"600 kWh\""),
            _ => {}
        }
        if let (Some(leaf), Some(up_to), Some(before)) = (&fields.up_to, up_to_kwh, reached)
            && up_to <= before
        {
            let text = leaf.value().map_or("", String::as_str);
            check.refuse(
                &leaf.span(),
                format!("{text} is not above the step before it"),
                "steps in rising order",
                "sort the steps by up_to",
            );
        }
        reached = up_to_kwh.or(reached);
        if fields.rate.is_none() {
            check.missing(&fields.span(), "step.rate", "\"13.2 p/kWh\"");
        }
        let rate = pricing.rate(check, &fields.rate);
        let label = check.value(&fields.label);
        if let Some(rate) = rate {
            let label = label.unwrap_or_else(|| step_label(given, i));
            steps.push(Step {
                label,
                up_to_kwh: up_to_kwh.filter(|_| !last),
                rate,
            });
        }
    }
    Some(Steps {
        every: every.unwrap_or(Span::Month),
        steps,
    })
}

/// A step may lower a band's price, but not below nothing.
pub(super) fn never_negative(
    given: &[Section<StepFields>],
    check: &mut Check,
    bands: &[Band],
    steps: Option<&Steps>,
    hourly: bool,
) {
    let Some(steps) = steps.filter(|_| !hourly) else {
        return;
    };
    let rates = bands.iter().map(|band| band.rate.per_gross_kwh());
    let lowest = rates.reduce(f64::min).unwrap_or(0.0);
    for (fields, step) in given.iter().zip(&steps.steps) {
        let sum = lowest + step.rate.per_gross_kwh();
        // A hair below 0 from binary fractions is 0.
        if let (Some(leaf), true) = (&fields.rate, sum < -1e-9) {
            check.refuse(
                &leaf.span(),
                format!("with the lowest band this step comes to {sum:.4} for a kWh"),
                "prices from 0",
                "check the sign; only an [hourly] series may make a price negative",
            );
        }
    }
}

/// What the bill calls a step that has no label.
fn step_label(steps: &[Section<StepFields>], i: usize) -> String {
    let up_to = |i: usize| {
        let leaf = steps.get(i)?.up_to.as_ref()?;
        leaf.value().ok().map(String::as_str)
    };
    match (i.checked_sub(1).and_then(up_to), up_to(i)) {
        (None, Some(text)) => format!("first {text}"),
        (Some(_), Some(text)) => format!("up to {text}"),
        (Some(text), None) => format!("above {text}"),
        (None, None) => "unit rate".to_owned(),
    }
}
