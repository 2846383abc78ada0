//! Tax: on top of the rates, or within them. One of the two must be said.

use std::ops::Range;

use rust_decimal::Decimal;
use rust_decimal::prelude::FromPrimitive;

use super::DOCUMENT;
use super::fields::TaxFields;
use crate::bounds;
use crate::document::{Check, Leaf, Section};
use crate::tariff::{Covers, Prices, Tax};

/// The tax of a price list; as before where a later one does not say.
pub(super) fn tax(
    rates_include_tax: &Option<Leaf<bool>>,
    fields: &Option<Section<TaxFields>>,
    list: &Range<usize>,
    check: &mut Check,
    before: Option<&Prices>,
) -> Tax {
    let included = check.value(rates_include_tax);
    let Some(fields) = fields else {
        return match (included, before) {
            (Some(true), _) => Tax::INCLUDED,
            (None, Some(before)) => before.tax,
            (Some(false), Some(before)) if before.tax.share.is_some() => Tax {
                included: false,
                ..before.tax
            },
            _ => {
                // A leaf that was refused was already told.
                if rates_include_tax.is_none() || included.is_some() {
                    let span = rates_include_tax.as_ref().map(Leaf::span);
                    check.refuse(
                        &span.unwrap_or(list.clone()),
                        "nothing says what tax there is",
                        "rates_include_tax = true, or a [tax]",
                        "write rates_include_tax = true, or [tax] with share = \"5 %\"; \"0 %\" where there is none",
                    );
                }
                Tax::INCLUDED
            }
        };
    };
    let share = check.required(&fields.share, &fields.span(), "tax.share", "\"5 %\"");
    if let (Some(share), Some(leaf)) = (share, &fields.share)
        && !bounds::SHARE.holds(share.fraction())
    {
        check.refuse(
            &leaf.span(),
            format!("{} %", share.fraction() * 100.0),
            "a tax from 0 to 100 % of the price without it",
            "check the number",
        );
    }
    Tax {
        share: share.and_then(|share| Decimal::from_f64(share.fraction())),
        covers: covers(fields, check),
        included: included.unwrap_or(false),
    }
}

fn covers(fields: &TaxFields, check: &mut Check) -> Covers {
    let Some(names) = check.value(&fields.covers) else {
        return Covers::ALL;
    };
    let mut covers = Covers {
        energy: false,
        standing: false,
        demand: false,
    };
    for name in names {
        match name.as_str() {
            "energy" => covers.energy = true,
            "standing" => covers.standing = true,
            "demand" => covers.demand = true,
            other => {
                let span = fields.covers.as_ref().map_or(DOCUMENT, Leaf::span);
                check.refuse(
                    &span,
                    format!("\"{other}\" is nothing that a tax covers"),
                    "\"energy\", \"standing\", \"demand\"",
                    "leave covers out when the tax is taken of everything",
                );
            }
        }
    }
    covers
}
