//! Sharing a line among its months so that rounded months add up to the rounded line.

use rust_decimal::Decimal;

use crate::units::Currency;

/// What one month costs, tax and standing charge included.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub struct MonthCost {
    /// Civil year.
    pub year: i32,
    /// Month from 0.
    pub month0: usize,
    /// Currency units.
    pub amount: Decimal,
}

/// Rounded parts of a rounded whole: each is the rounded running sum less the one before, the last takes the rest.
pub fn share(currency: Currency, whole: Decimal, exact: &[Decimal]) -> Vec<Decimal> {
    let mut running = Decimal::ZERO;
    let mut given = Decimal::ZERO;
    let last = exact.len().saturating_sub(1);
    let part = |(i, exact): (usize, &Decimal)| {
        running += exact;
        let upto = if i == last {
            whole
        } else {
            currency.round(running)
        };
        let part = upto - given;
        given = upto;
        part
    };
    exact.iter().enumerate().map(part).collect()
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;

    proptest! {
        #[test]
        fn parts_add_up_and_stay_within_a_cent(mills in prop::collection::vec(0i64..10_000_000, 1..24)) {
            let currency = Currency::parse("EUR").unwrap();
            let exact: Vec<_> = mills.iter().map(|&m| Decimal::new(m, 5)).collect();
            let whole = currency.round(exact.iter().sum());
            let parts = share(currency, whole, &exact);
            prop_assert_eq!(parts.iter().sum::<Decimal>(), whole);
            for (part, exact) in parts.iter().zip(&exact) {
                prop_assert!((part - exact).abs() <= Decimal::new(1, 2), "{} {}", part, exact);
            }
        }
    }
}
