//! A power with a fixed exponent by table, for the hour loop: a handful of multiplications instead of a logarithm and an exponential.
//!
//! The cells are those of the floating-point number itself: every octave is cut into 32, so that the leading bits of a number are its place
//! in the table. A cubic (Hermite, through values and slopes) over a cell `[a, a + h]` with `h ≤ a/32` is off by at most `h⁴/384 · max|f⁗|`
//! (textbook): with an exponent p from 0 to 1 that is `32⁻⁴/384 · p(1−p)(2−p)(3−p) xᵖ`, at most 2.5e-9 of the value (the
//! product is 1 at p = 0.38).

/// The table holds numbers from 2⁻²⁰ to 2⁴; what is asked beyond is computed.
const LOW_OCTAVE: i32 = -20;
const HIGH_OCTAVE: i32 = 4;
/// Bits of a mantissa that choose a cell, and all its bits.
const CELL_BITS: u32 = 5;
const MANTISSA_BITS: u32 = f64::MANTISSA_DIGITS - 1;
const CELLS: usize = ((HIGH_OCTAVE - LOW_OCTAVE) as usize) << CELL_BITS;

/// `x` to one power.
pub(super) struct FixedPower {
    exponent: f64,
    /// For every cell the cubic in the share of the way through it.
    cells: Vec<[f64; 4]>,
}

impl FixedPower {
    /// A table for an exponent from 0 to 1.
    pub fn new(exponent: f64) -> Self {
        let cell = |place: usize| {
            let width = f64::from(1_u32 << CELL_BITS).recip();
            let octave = 2.0_f64.powi(LOW_OCTAVE + (place >> CELL_BITS) as i32);
            let within = (place % (1 << CELL_BITS)) as f64 * width;
            let (from, to) = (octave * (1.0 + within), octave * (1.0 + within + width));
            let at = |x: f64| {
                (
                    x.powf(exponent),
                    exponent * x.powf(exponent - 1.0) * (to - from),
                )
            };
            let ((low, low_slope), (high, high_slope)) = (at(from), at(to));
            let rise = high - low;
            [
                low,
                low_slope,
                3.0 * rise - 2.0 * low_slope - high_slope,
                low_slope + high_slope - 2.0 * rise,
            ]
        };
        Self {
            exponent,
            cells: (0..CELLS).map(cell).collect(),
        }
    }

    /// The power of a number.
    #[inline]
    pub fn of(&self, x: f64) -> f64 {
        /// Leading bits of the table's first number: its biased exponent, then those of its cell, which are 0.
        const FIRST: u64 = ((f64::MAX_EXP - 1 + LOW_OCTAVE) as u64) << CELL_BITS;
        let bits = x.to_bits();
        // Numbers below the table, negative ones and NaN wrap or stay beyond its end.
        let place = (bits >> (MANTISSA_BITS - CELL_BITS)).wrapping_sub(FIRST) as usize;
        let Some([a, b, c, d]) = self.cells.get(place) else {
            return x.powf(self.exponent);
        };
        let mantissa = (1_u64 << MANTISSA_BITS) - 1;
        let share = f64::from_bits(1.0_f64.to_bits() | (bits << CELL_BITS) & mantissa) - 1.0;
        a + share * (b + share * (c + share * d))
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;

    proptest! {
        /// Against the C library's power, in the table and beyond it.
        #[test]
        fn the_table_is_the_power(p in 0.0f64..1.0, octave in -24.0f64..6.0) {
            let x = octave.exp2();
            let expected = x.powf(p);
            let found = FixedPower::new(p).of(x);
            prop_assert!((found - expected).abs() <= 2.5e-9 * expected, "{x} {found} {expected}");
        }
    }

    #[test]
    fn what_no_table_holds_is_computed() {
        let root = FixedPower::new(0.5);
        assert_eq!(root.of(0.0), 0.0);
        assert_eq!(root.of(1e4), 100.0);
        assert!(root.of(-1.0).is_nan() && root.of(f64::NAN).is_nan());
        assert_eq!(root.of(f64::INFINITY), f64::INFINITY);
    }
}
