//! Numbers and missing markers as files write them, read from bytes.

/// Texts that stand for a missing reading, letter case aside.
const MISSING_TEXTS: [&[u8]; 16] = [
    b"", b"na", b"n/a", b"nan", b"null", b"nil", b"none", b"-", b"--", b"---", b"m", b"missing",
    b"*", b"***", b"?", b"#n/a",
];
/// Characters that a number may have.
const LONGEST_NUMBER: usize = 64;
/// Digits that fit a whole number of `f64` exactly.
const EXACT_DIGITS: usize = 15;
/// Powers of ten that are exact in `f64` and that this many digits can need.
const TENS: [f64; EXACT_DIGITS + 1] = [
    1e0, 1e1, 1e2, 1e3, 1e4, 1e5, 1e6, 1e7, 1e8, 1e9, 1e10, 1e11, 1e12, 1e13, 1e14, 1e15,
];

/// A field of readings.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) enum Reading {
    /// A number; it may still be infinite or absurd.
    Number(f64),
    /// A text that stands for nothing.
    Missing,
    /// Anything else.
    Other,
}

/// Reads one field.
///
/// Up to 15 digits without an exponent are read exactly as `str::parse` would: both parts of the quotient are exact, so
/// one division rounds once. Everything else is left to `str::parse`.
pub(super) fn read(field: &[u8], decimal_comma: bool, missing: &[Vec<u8>]) -> Reading {
    if !missing.is_empty() {
        let field = field.trim_ascii();
        if missing
            .iter()
            .any(|marker| marker.eq_ignore_ascii_case(field))
        {
            return Reading::Missing;
        }
    }
    match plain(field, if decimal_comma { b',' } else { b'.' }) {
        Some(number) => Reading::Number(number),
        None => slow(field.trim_ascii(), decimal_comma),
    }
}

/// Reads nothing but a sign, digits and a point.
fn plain(field: &[u8], point: u8) -> Option<f64> {
    let (negative, digits) = match field {
        [b'-', rest @ ..] => (true, rest),
        _ => (false, field),
    };
    let (whole, before) = run(0, digits);
    let (whole, after) = match digits.get(before) {
        None => (whole, 0),
        Some(&byte) if byte == point => {
            let (whole, after) = run(whole, &digits[before + 1..]);
            if before + 1 + after < digits.len() {
                return None;
            }
            (whole, after)
        }
        Some(_) => return None,
    };
    if !(1..=EXACT_DIGITS).contains(&(before + after)) {
        return None;
    }
    let number = if after == 0 {
        whole as f64
    } else {
        whole as f64 / TENS[after]
    };
    Some(if negative { -number } else { number })
}

/// The digits at the front, appended to a whole number, and how many they are; the number is wrong when they are too many.
fn run(whole: u64, text: &[u8]) -> (u64, usize) {
    let mut whole = whole;
    for (at, byte) in text.iter().enumerate() {
        let digit = byte.wrapping_sub(b'0');
        if digit > 9 {
            return (whole, at);
        }
        whole = whole.wrapping_mul(10).wrapping_add(u64::from(digit));
    }
    (whole, text.len())
}

#[cold]
fn slow(field: &[u8], decimal_comma: bool) -> Reading {
    if MISSING_TEXTS
        .iter()
        .any(|text| text.eq_ignore_ascii_case(field))
    {
        return Reading::Missing;
    }
    // No reading is that long, whatever it says.
    if field.len() > LONGEST_NUMBER {
        return Reading::Other;
    }
    let Ok(text) = std::str::from_utf8(field) else {
        return Reading::Other;
    };
    // The minus sign of typeset text.
    let text = text.replace('−', "-");
    let text = if decimal_comma {
        text.replace(',', ".")
    } else {
        text
    };
    match text.parse::<f64>() {
        Ok(number) if number.is_nan() => Reading::Missing,
        Ok(number) => Reading::Number(number),
        Err(_) => Reading::Other,
    }
}

/// Whether a number is one of those that files write for a missing reading: ±99, ±99.9, ±999, ±999.9, …
///
/// They are taken for missing only where they are impossible as readings.
pub(super) fn is_marker(number: f64) -> bool {
    const MARKERS: [f64; 12] = [
        99.0, 99.9, 999.0, 999.9, 9999.0, 9999.9, 99_999.0, 99_999.9, 999_999.0, 32_767.0,
        32_768.0, 8888.0,
    ];
    MARKERS.contains(&number.abs())
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;

    #[test]
    fn numbers_and_markers_are_told_apart() {
        let read = |text: &str| read(text.as_bytes(), false, &[b"void".to_vec()]);
        assert_eq!(read(" -3.50 "), Reading::Number(-3.5));
        assert_eq!(read("+.5"), Reading::Number(0.5));
        assert_eq!(read("−3"), Reading::Number(-3.0));
        assert_eq!(read("1e3"), Reading::Number(1000.0));
        assert_eq!(read("1e308"), Reading::Number(1e308));
        assert_eq!(read("inf"), Reading::Number(f64::INFINITY));
        for text in ["", "NaN", "N/A", "-", "---", "Void", "null"] {
            assert_eq!(read(text), Reading::Missing, "{text}");
        }
        for text in ["1,5", "12 °C", "abc", "1.2.3", "."] {
            assert_eq!(read(text), Reading::Other, "{text}");
        }
        assert_eq!(super::read(b"-1,5", true, &[]), Reading::Number(-1.5));
    }

    proptest! {
        /// The short way must be the library's own reading to the last bit.
        #[test]
        fn the_fast_way_is_exact(mantissa in -999_999_999_999_999i64..=999_999_999_999_999, decimals in 0usize..=15) {
            let digits = format!("{:0>width$}", mantissa.abs(), width = decimals + 1);
            let (a, b) = digits.split_at(digits.len() - decimals);
            let text = format!("{}{a}.{b}", if mantissa < 0 { "-" } else { "" });
            prop_assert_eq!(read(text.as_bytes(), false, &[]), Reading::Number(text.parse().unwrap()));
        }
    }
}
