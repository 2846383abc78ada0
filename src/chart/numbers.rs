//! How figures are written in pictures: decimal and thousands marks, money, minus signs, steps of 1, 2 and 5.

/// The marks of a place.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub struct Marks {
    /// Between whole and fraction.
    pub decimal: char,
    /// Between thousands; none for none.
    pub thousands: Option<char>,
}

impl Default for Marks {
    /// A point and a comma, as in English.
    fn default() -> Self {
        Self {
            decimal: '.',
            thousands: Some(','),
        }
    }
}

impl Marks {
    /// `value` with so many decimals, a true minus sign, and no minus before a zero.
    pub fn number(&self, value: f64, decimals: usize) -> String {
        if !value.is_finite() {
            return "–".into();
        }
        let text = format!("{:.decimals$}", value.abs());
        let (whole, fraction) = text.split_once('.').unwrap_or((&text, ""));
        let mut out = String::new();
        if value < 0.0 && text.bytes().any(|b| b.is_ascii_digit() && b != b'0') {
            out.push('−');
        }
        for (i, digit) in whole.chars().enumerate() {
            if let Some(mark) = self.thousands
                && i > 0
                && (whole.len() - i).is_multiple_of(3)
            {
                out.push(mark);
            }
            out.push(digit);
        }
        if !fraction.is_empty() {
            out.push(self.decimal);
            out.push_str(fraction);
        }
        out
    }

    /// A count with its noun: `1 hour`, `8,760 hours`.
    pub(crate) fn count(&self, n: usize, noun: &str) -> String {
        let plural = if n == 1 { "" } else { "s" };
        format!("{} {noun}{plural}", self.number(n as f64, 0))
    }

    /// An amount of money in whole units, the sign before the symbol: `−£1,234`, `1.234 kr`-like codes as `CHF 1,234`.
    pub fn money(&self, currency: &str, amount: f64) -> String {
        self.money_to(currency, amount, 0)
    }

    /// An amount of money with so many decimals.
    pub fn money_to(&self, currency: &str, amount: f64, decimals: usize) -> String {
        let number = self.number(amount, decimals);
        let (sign, digits) = match number.strip_prefix('−') {
            Some(rest) => ("−", rest),
            None => ("", number.as_str()),
        };
        format!("{sign}{}{digits}", symbol(currency))
    }
}

/// The sign written before an amount: the symbol of the three commonest codes (ISO 4217), else the code itself and a
/// space that does not break.
pub(crate) fn symbol(currency: &str) -> String {
    match currency {
        "GBP" => "£".into(),
        "EUR" => "€".into(),
        "USD" => "$".into(),
        other => {
            let code: String = super::font::clean(other)
                .chars()
                .take(LONGEST_CODE)
                .collect();
            if code.trim().is_empty() {
                String::new()
            } else {
                format!("{code}\u{a0}")
            }
        }
    }
}

/// Letters kept of a currency code; a real one has three.
const LONGEST_CODE: usize = 5;

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
    fn numbers_are_written_as_people_write_them() {
        let en = Marks::default();
        assert_eq!(en.number(1234567.891, 2), "1,234,567.89");
        assert_eq!(en.number(-0.4, 0), "0");
        assert_eq!(en.number(-12.5, 1), "−12.5");
        assert_eq!(en.number(f64::NAN, 1), "–");
        let de = Marks {
            decimal: ',',
            thousands: Some('.'),
        };
        assert_eq!(de.number(12345.6, 1), "12.345,6");
        assert_eq!(
            Marks {
                decimal: '.',
                thousands: None
            }
            .number(12345.6, 0),
            "12346"
        );
    }

    #[test]
    fn money_has_its_sign_first() {
        let en = Marks::default();
        assert_eq!(en.money("GBP", -1234.4), "−£1,234");
        assert_eq!(en.money("EUR", 0.0), "€0");
        assert_eq!(en.money("CHF", 12.0), "CHF\u{a0}12");
        assert_eq!(en.money_to("USD", 3.5, 2), "$3.50");
    }

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
            prop_assert!(t.values.len() >= 2 && t.values.len() <= wanted + 2);
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
