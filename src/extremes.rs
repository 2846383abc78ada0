//! The lesser and the greater of two numbers.
//!
//! `f64::min` and `f64::max` take five instructions each because they leave out what is not a number; in the hour loop, which asks thirty
//! times an hour, nothing is not a number, and what would be is for `tests/laws` to find.

/// The lesser; the second where either is not a number.
#[inline]
pub fn lesser(a: f64, b: f64) -> f64 {
    if a < b { a } else { b }
}

/// The greater; the second where either is not a number.
#[inline]
pub fn greater(a: f64, b: f64) -> f64 {
    if a > b { a } else { b }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn of_two_numbers_one_is_lesser() {
        assert_eq!((lesser(1.0, 2.0), lesser(2.0, 1.0)), (1.0, 1.0));
        assert_eq!((greater(1.0, 2.0), greater(2.0, 1.0)), (2.0, 2.0));
        assert_eq!((lesser(f64::NAN, 1.0), greater(f64::NAN, 1.0)), (1.0, 1.0));
        assert!(lesser(1.0, f64::NAN).is_nan());
    }
}
