//! From text to a quantity: a number, a space, a unit.

use std::fmt;

/// One way to write a unit: `canonical = number × factor + offset`.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Unit {
    /// The unit as written.
    pub symbol: &'static str,
    /// Canonical units in one of this unit.
    pub factor: f64,
    /// Added after scaling; only temperatures have one.
    pub offset: f64,
}

/// A kind of quantity: what it is called, how it is written, and its canonical number.
pub trait Measure: Copy {
    /// What the quantity is, for messages.
    const NAME: &'static str;
    /// How to write one.
    const EXAMPLE: &'static str;
    /// Every accepted unit, the canonical one first.
    const UNITS: &'static [Unit];

    /// The quantity from its number in the canonical unit.
    fn from_canonical(number: f64) -> Self;

    /// The number in the canonical unit.
    fn canonical(self) -> f64;
}

/// Why a text is not a quantity.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct UnitProblem {
    /// What was found.
    pub found: String,
    /// What is accepted.
    pub allowed: String,
    /// What to write.
    pub remedy: String,
}

impl fmt::Display for UnitProblem {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        write!(
            f,
            "{}; allowed: {}; {}",
            self.found, self.allowed, self.remedy
        )
    }
}

impl std::error::Error for UnitProblem {}

/// Splits `"12 000.5 kWh"` into its number and its unit; a space or an apostrophe may group the thousands.
///
/// Returns nothing when the text does not begin with a finite number.
pub fn split_number(text: &str) -> Option<(f64, &str)> {
    let text = text.trim();
    let mut digits = String::with_capacity(text.len());
    let mut end = 0;
    let mut characters = text.char_indices().peekable();
    while let Some((at, character)) = characters.next() {
        let next = characters.peek().map(|&(_, c)| c);
        match character {
            '0'..='9' | '.' => digits.push(character),
            '+' | '-' | '−' if digits.is_empty() => {
                digits.push(if character == '+' { '+' } else { '-' })
            }
            '+' | '-' if digits.ends_with(['e', 'E']) => digits.push(character),
            // An exponent only when digits follow: "5 e" is not one and "3 EUR" must keep its unit.
            'e' | 'E'
                if digits.ends_with(|c: char| c.is_ascii_digit())
                    && next.is_some_and(|c| c.is_ascii_digit() || c == '-' || c == '+') =>
            {
                digits.push(character);
            }
            ' ' | '\u{a0}' | '\u{202f}' | '\''
                if digits.ends_with(|c: char| c.is_ascii_digit())
                    && is_group(&text[at + character.len_utf8()..]) => {}
            _ => break,
        }
        end = at + character.len_utf8();
    }
    let number: f64 = digits.parse().ok()?;
    number.is_finite().then(|| (number, text[end..].trim()))
}

/// Whether a text begins with a group of exactly three digits: "0.5 1/h" is half of a unit, not 0.51.
fn is_group(text: &str) -> bool {
    text.chars().take_while(char::is_ascii_digit).count() == 3
}

/// Reads a quantity of a kind.
///
/// # Errors
/// A [`UnitProblem`] when the text does not begin with a finite number, has no unit, or has a unit of another kind.
///
/// ```
/// use winterledger::units::{HeatLossCoefficient, parse};
/// let loss: HeatLossCoefficient = parse("0.212 kW/K")?;
/// assert!((loss.w_per_k() - 212.0).abs() < 1e-9);
/// assert!(parse::<HeatLossCoefficient>("212").is_err());
/// # Ok::<(), winterledger::units::UnitProblem>(())
/// ```
pub fn parse<M: Measure>(text: &str) -> Result<M, UnitProblem> {
    let problem = |found: String, remedy: String| UnitProblem {
        found,
        allowed: format!("{} in {}", M::NAME, symbols::<M>()),
        remedy,
    };
    let write = format!("write for example \"{}\"", M::EXAMPLE);
    let Some((number, symbol)) = split_number(text) else {
        return Err(problem(
            format!("\"{text}\" does not begin with a number"),
            write,
        ));
    };
    let canonical = M::UNITS.first().map_or("", |unit| unit.symbol);
    if symbol.is_empty() && !canonical.is_empty() {
        let remedy = format!("write \"{}\" if that is what is meant", meant::<M>(number));
        return Err(problem(format!("\"{text}\" has no unit"), remedy));
    }
    if let Some(comma) = with_point(text) {
        let remedy = format!("write a point before the decimals: {comma}");
        return Err(problem(
            format!("\"{text}\" has a comma in its number"),
            remedy,
        ));
    }
    let wanted = fold(symbol);
    match M::UNITS.iter().find(|unit| fold(unit.symbol) == wanted) {
        Some(unit) => Ok(M::from_canonical(number * unit.factor + unit.offset)),
        None => Err(problem(
            format!("\"{text}\" has the unit \"{symbol}\""),
            write,
        )),
    }
}

/// What a number without its unit is likely to mean: a share below one a percentage, anything else in the first unit or another prefix of
/// it, whichever brings it nearest to what is usual.
pub fn meant<M: Measure>(number: f64) -> String {
    let Some(first) = M::UNITS.first() else {
        return format!("{number}");
    };
    if first.symbol == "%" && number.abs() <= 1.0 {
        // Tenths of a per mille are rounding.
        return format!("{} %", as_set(number * 100.0));
    }
    let usual = split_number(M::EXAMPLE).and_then(|(usual, symbol)| {
        let unit = M::UNITS
            .iter()
            .find(|unit| fold(unit.symbol) == fold(symbol))?;
        Some(usual * unit.factor)
    });
    let far = |factor: f64| usual.map_or(0.0, |usual| (number.abs() * factor / usual).ln().abs());
    // Units that differ by their prefix alone: W and kW.
    let akin = |symbol: &str| first.symbol.ends_with(symbol) || symbol.ends_with(first.symbol);
    let of = M::UNITS.iter().filter(|unit| akin(unit.symbol));
    let nearest = of.min_by(|a, b| far(a.factor).total_cmp(&far(b.factor)));
    format!("{number} {}", nearest.unwrap_or(first).symbol)
}

/// A number with a comma in it as it would be written with a point, and without a mark where the comma may group thousands.
fn with_point(text: &str) -> Option<String> {
    let (before, after) = text.split_once(',')?;
    let decimals = after.chars().take_while(char::is_ascii_digit).count();
    let whole = before.trim().trim_start_matches(['-', '−', '+']);
    if decimals == 0 || whole.is_empty() || !whole.chars().all(|c| c.is_ascii_digit()) {
        return None;
    }
    let pointed = format!("\"{}.{}\"", before.trim(), after.trim());
    Some(if decimals == 3 {
        format!(
            "{pointed}, or \"{}{}\" where the comma groups thousands",
            before.trim(),
            after.trim()
        )
    } else {
        pointed
    })
}

/// The accepted units in words.
fn symbols<M: Measure>() -> String {
    let mut symbols: Vec<_> = M::UNITS.iter().map(|unit| unit.symbol).collect();
    symbols.retain(|symbol| !symbol.is_empty());
    match symbols.split_last() {
        None => "a plain number".to_owned(),
        Some((only, [])) => (*only).to_owned(),
        Some((last, rest)) => format!("{} or {last}", rest.join(", ")),
    }
}

/// Folds spellings of one unit together: m² and m2, · and space, degree sign or none.
fn fold(symbol: &str) -> String {
    symbol
        .chars()
        .filter(|c| !matches!(c, ' ' | '·' | '*' | '(' | ')' | '°' | 'º'))
        .map(|c| match c {
            '²' => '2',
            '³' => '3',
            'ℓ' => 'L',
            'μ' => 'µ',
            c => c,
        })
        .collect()
}

/// A figure that somebody set, with the decimals it was given: "20", "20.5"; a conversion leaves two at most.
pub fn as_set(value: f64) -> String {
    /// Hundredths tell every figure that people set.
    const HUNDREDTHS: f64 = 100.0;
    // Adding nothing makes −0 a plain 0.
    format!("{}", (value * HUNDREDTHS).round() / HUNDREDTHS + 0.0)
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;

    #[test]
    fn a_missing_unit_or_a_comma_is_answered_with_what_is_meant() {
        use crate::units::{HeatLossCoefficient, Power, Share, Temperature};
        assert_eq!(meant::<Share>(0.19), "19 %");
        assert_eq!(meant::<Share>(85.0), "85 %");
        assert_eq!(meant::<Power>(540.0), "540 W");
        assert_eq!(meant::<Power>(6.0), "6 kW");
        assert_eq!(meant::<HeatLossCoefficient>(190.0), "190 W/K");
        assert_eq!(meant::<Temperature>(55.0), "55 °C");
        let comma = parse::<HeatLossCoefficient>("190,5 W/K").unwrap_err();
        assert!(comma.remedy.contains("\"190.5 W/K\""), "{comma:?}");
        let thousands = parse::<Power>("13,500 W").unwrap_err();
        assert!(thousands.remedy.contains("\"13500 W\""), "{thousands:?}");
    }

    #[test]
    fn numbers_are_split_from_their_units() {
        for (text, number, unit) in [
            ("212 W/K", 212.0, "W/K"),
            ("12 000 kWh", 12000.0, "kWh"),
            ("12'000.5kWh", 12000.5, "kWh"),
            ("-3 °C", -3.0, "°C"),
            ("−3 °C", -3.0, "°C"),
            ("3 EUR", 3.0, "EUR"),
            ("5e-7 m²/s", 5e-7, "m²/s"),
            ("85%", 85.0, "%"),
            ("0.5 1/h", 0.5, "1/h"),
            ("1 234 567 kWh", 1_234_567.0, "kWh"),
        ] {
            assert_eq!(split_number(text), Some((number, unit)), "{text}");
        }
        for text in ["", "kWh", "-", "1e999 kW", "..", "NaN W", "inf W"] {
            assert_eq!(split_number(text), None, "{text}");
        }
    }

    /// 69 °F are 20.5556 °C.
    #[test]
    fn what_was_set_keeps_its_decimals() {
        let written = [20.0, 20.5, 0.1 + 0.2, (69.0 - 32.0) / 1.8, -0.001].map(as_set);
        assert_eq!(written, ["20", "20.5", "0.3", "20.56", "0"]);
    }

    proptest! {
        #[test]
        fn any_text_splits_or_does_not_but_never_panics(text in ".*") {
            if let Some((number, _)) = split_number(&text) {
                prop_assert!(number.is_finite());
            }
        }
    }
}
