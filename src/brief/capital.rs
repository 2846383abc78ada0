//! What a system costs to put in.

use rust_decimal::prelude::ToPrimitive as _;

use super::energy::Energy;
use super::leaves::Capital;
use super::raw::SystemTable;
use crate::document::Check;
use crate::units::Money;

/// What a system costs to put in.
#[derive(Debug, Default)]
pub(super) struct PutIn {
    /// Everything; nothing when it is not given.
    pub whole: Option<f64>,
    /// Part by part, where it is given so.
    pub parts: Vec<(String, f64)>,
}

/// Money for the whole and for the parts; nothing when it is wrong.
pub(super) fn capital(
    table: &SystemTable,
    energy: Option<&Energy>,
    check: &mut Check,
) -> Option<PutIn> {
    let Some(leaf) = &table.capital else {
        return Some(PutIn::default());
    };
    let currency = energy?.currency;
    let mut amount = |text: &str| -> Option<f64> {
        let money = match Money::parse(text) {
            Ok(money) => money,
            Err(problem) => {
                check.refuse(&leaf.span(), problem.found, problem.allowed, problem.remedy);
                return None;
            }
        };
        if money.currency != currency {
            check.refuse(
                &leaf.span(),
                format!("{money}"),
                format!("an amount in {currency}, as the tariffs are"),
                "convert it",
            );
            return None;
        }
        money.amount.to_f64()
    };
    match leaf.value() {
        Ok(Capital::Whole(text)) => Some(PutIn {
            whole: Some(amount(text)?),
            parts: Vec::new(),
        }),
        Ok(Capital::Parts(parts)) => {
            let read = parts
                .iter()
                .map(|(name, text)| amount(text).map(|money| (name.clone(), money)));
            let parts = read.collect::<Option<Vec<_>>>()?;
            let whole = Some(parts.iter().map(|part| part.1).sum());
            Some(PutIn { whole, parts })
        }
        Err(_) => {
            check.value(&table.capital);
            None
        }
    }
}
