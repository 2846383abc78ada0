//! Numbers in pictures: steps of 1, 2 and 5, units of money, lists.

pub use crate::locale::Marks;
use crate::locale::symbol;

/// The unit of money as it stands in an axis title.
pub(crate) fn money_unit(currency: &str) -> String {
    match symbol(currency).trim_end() {
        "" => "currency not given".into(),
        unit => unit.into(),
    }
}

/// Ticks of a linear axis: multiples of 1, 2 or 5 × a power of ten.
#[derive(Debug, Clone, PartialEq)]
pub(crate) struct Ticks {
    /// Values, rising.
    pub values: Vec<f64>,
    /// Decimals needed to tell neighbours apart.
    pub decimals: usize,
    /// Distance between neighbours.
    pub step: f64,
}

/// About `wanted` ticks that enclose `low` to `high`; equal or swapped ends are spread first.
pub(crate) fn ticks(low: f64, high: f64, wanted: usize) -> Ticks {
    let (low, high) = spread(low, high);
    let raw = (high - low) / wanted.max(1) as f64;
    let power = 10_f64.powi(raw.log10().floor() as i32);
    let step = [1.0, 2.0, 5.0, 10.0]
        .into_iter()
        .map(|m| m * power)
        .find(|s| *s >= raw * 0.999)
        .unwrap_or(10.0 * power);
    // A hair of slack, or an end that lies on a tick but for rounding would add a whole empty step.
    let first = (low / step + 1e-9).floor() as i64;
    let last = (high / step - 1e-9).ceil() as i64;
    let decimals = (-step.log10().floor()).max(0.0) as usize;
    Ticks {
        values: (first..=last).map(|i| i as f64 * step).collect(),
        decimals,
        step,
    }
}

/// Ends that are finite, ordered and apart.
fn spread(low: f64, high: f64) -> (f64, f64) {
    let (low, high) = match (low.is_finite(), high.is_finite()) {
        (true, true) => (low.min(high), low.max(high)),
        (true, false) => (low, low),
        (false, true) => (high, high),
        (false, false) => (0.0, 0.0),
    };
    let least = 1e-9 * low.abs().max(high.abs()).max(1e-3);
    if high - low > least {
        (low, high)
    } else {
        let by = (low.abs() * 0.1).max(0.5);
        (low - by, high + by)
    }
}

/// Ticks of a logarithmic axis: the powers of ten with 2 and 5 between them, from the one at or below `low` to the
/// one at or above `high`.
pub(crate) fn log_ticks(low: f64, high: f64) -> Vec<f64> {
    let (low, high) = (low.max(1e-12), high.max(1e-12));
    let ladder: Vec<f64> = ((low.log10().floor() as i32)..=(high.log10().ceil() as i32))
        .flat_map(|p| [1.0, 2.0, 5.0].map(|m| m * 10_f64.powi(p)))
        .collect();
    let first = ladder.iter().rposition(|t| *t <= low * 1.0001).unwrap_or(0);
    let last = ladder
        .iter()
        .position(|t| *t >= high * 0.9999)
        .unwrap_or(ladder.len() - 1);
    ladder[first..=last.max(first)].to_vec()
}

/// Joins names as a sentence does.
pub(crate) fn list(parts: &[String]) -> String {
    match parts {
        [] => String::new(),
        [one] => one.clone(),
        [rest @ .., last] => format!("{} and {last}", rest.join(", ")),
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;

    #[test]
    fn ticks_of_common_ranges() {
        assert_eq!(ticks(0.0, 1480.0, 4).values, [0.0, 500.0, 1000.0, 1500.0]);
        assert_eq!(
            ticks(-8.0, 21.0, 6).values,
            [-10.0, -5.0, 0.0, 5.0, 10.0, 15.0, 20.0, 25.0]
        );
        assert_eq!(ticks(0.0, 0.0, 4).values, [-0.5, 0.0, 0.5]);
        assert_eq!(ticks(0.0, 1.0, 5).decimals, 1);
    }

    #[test]
    fn logarithmic_ticks_enclose_their_range() {
        assert_eq!(log_ticks(310.0, 1800.0), [200.0, 500.0, 1000.0, 2000.0]);
        assert_eq!(log_ticks(100.0, 100.0), [100.0]);
    }

    proptest! {
        #[test]
        fn ticks_are_few_even_and_enclose(low in -1e6..1e6f64, span in 1e-3..1e6f64, wanted in 2usize..9) {
            let t = ticks(low, low + span, wanted);
            // A step a thousandth too small is taken, and both ends may begin a step of their own.
            prop_assert!(t.values.len() >= 2 && t.values.len() <= wanted + 3);
            prop_assert!(t.values[0] <= low + t.step * 1e-6);
            prop_assert!(t.values[t.values.len() - 1] >= low + span - t.step * 1e-6);
            let mantissa = t.step / 10_f64.powf(t.step.log10().floor());
            prop_assert!([1.0, 2.0, 5.0, 10.0].iter().any(|m| (mantissa - m).abs() < 1e-6));
        }

        #[test]
        fn neighbouring_ticks_never_read_the_same(low in -1e4..1e4f64, span in 1e-2..1e4f64) {
            let t = ticks(low, low + span, 5);
            let texts: Vec<_> = t.values.iter().map(|v| Marks::default().number(*v, t.decimals)).collect();
            prop_assert!(texts.windows(2).all(|p| p[0] != p[1]));
        }
    }
}
