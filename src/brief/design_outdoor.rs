//! The design temperature of a brief beside the weather that is run.

use crate::problem::{Finding, Severity};

/// A design temperature this much warmer than the cold of the weather is told, K. A typical year may misjudge that cold by some kelvin
/// either way. A choice of ours.
const WARMER_K: f64 = 5.0;
/// One this much colder is told too: machines sized for it are large. A choice of ours.
const COLDER_K: f64 = 12.0;

/// Says that a design temperature and the weather are far apart; `cold_c` is the temperature that 99.6 % of the hours are warmer than.
pub(super) fn design_beside_weather(design_c: f64, cold_c: f64, lowest_c: f64) -> Option<Finding> {
    let above_k = design_c - cold_c;
    let (severity, side, done) = if above_k > WARMER_K {
        (
            Severity::Caution,
            "warmer",
            "machine, emitters and backup are sized for it and may be too small: is a minus sign missing, or the weather of another place?",
        )
    } else if above_k < -COLDER_K {
        (
            Severity::Warning,
            "colder",
            "machine and emitters are sized for it and may be too large: check it against the nearest station's design table",
        )
    } else {
        return None;
    };
    Some(Finding::new(
        severity,
        format!(
            "design_outdoor {design_c:.1} °C is {:.1} K {side} than the cold of the weather: 99.6 % of its hours are warmer than \
             {cold_c:.1} °C, the coldest is {lowest_c:.1} °C",
            above_k.abs()
        ),
        done,
    ))
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_lost_minus_sign_is_told_and_an_ordinary_difference_is_not() {
        let told = design_beside_weather(10.0, -9.0, -13.4).unwrap();
        assert_eq!(told.severity, Severity::Caution);
        assert!(told.what.contains("19.0 K warmer"), "{told}");
        assert!(design_beside_weather(-3.0, -2.4, -4.9).is_none());
        assert!(design_beside_weather(-10.0, -2.4, -4.9).is_none());
        assert!(
            design_beside_weather(-30.0, -2.4, -4.9)
                .unwrap()
                .what
                .contains("colder")
        );
    }
}
