//! The exact equation at the edges of its range: near the critical point, in the cold, and for input that
//! is no number. An error value is an answer; a panic or a number that is not finite is not.
#![cfg(test)]

use proptest::prelude::*;
use std::sync::LazyLock;
use winterledger::refrigerant::{Equation, PropertyError, Refrigerant, StatePoint};

static EQUATIONS: LazyLock<Vec<Equation>> = LazyLock::new(|| {
    Refrigerant::ALL
        .into_iter()
        .filter_map(|held| Equation::new(held).ok())
        .collect()
});

fn finite(point: Result<StatePoint, PropertyError>) -> bool {
    point.is_ok_and(|point| {
        [
            point.temperature_c,
            point.pressure_kpa,
            point.enthalpy_kj_per_kg,
            point.entropy_kj_per_kg_k,
            point.density_kg_per_m3,
        ]
        .iter()
        .all(|value| value.is_finite())
            && point.density_kg_per_m3 > 0.0
    })
}

#[test]
fn every_fluid_is_held() {
    assert_eq!(EQUATIONS.len(), Refrigerant::ALL.len());
}

proptest! {
    /// Whatever lies in the ranges that are offered is found.
    #[test]
    fn inside_its_ranges_the_equation_always_answers(
        which in 0..6_usize,
        place in 0.0..=1.0_f64,
        other in 0.0..=1.0_f64,
    ) {
        let equation = &EQUATIONS[which];
        let between = |(low, high): (f64, f64), place: f64| (low + place * (high - low)).min(high);
        let saturated_c = between(equation.saturation_range_c(), place);
        let pressure_kpa = between(equation.pressure_range_kpa(), place.powi(4));
        let temperature_c = between(equation.temperature_range_c(), other);
        let saturation = equation.saturation(saturated_c).unwrap();
        prop_assert!(saturation.liquid.density_kg_per_m3 > saturation.vapour.density_kg_per_m3);
        // equal pressure and equal Gibbs energy h − T·s: what equilibrium is
        let gibbs = |point: &StatePoint| {
            point.enthalpy_kj_per_kg - (saturated_c + 273.15) * point.entropy_kj_per_kg_k
        };
        let difference = gibbs(&saturation.liquid) - gibbs(&saturation.vapour);
        // 1e-6 kJ/kg: 1e-8 of the terms, which near the critical point is the solver's own tolerance
        prop_assert!(difference.abs() < 1e-6, "Gibbs energies differ by {difference}");
        prop_assert!(finite(equation.at_temperature_quality(saturated_c, other)));
        let point = equation.at_temperature_pressure(temperature_c, pressure_kpa);
        prop_assert!(finite(point.clone()), "{temperature_c} °C {pressure_kpa} kPa: {point:?}");
        let point = point.unwrap();
        for back in [
            equation.at_pressure_enthalpy(pressure_kpa, point.enthalpy_kj_per_kg),
            equation.at_pressure_entropy(pressure_kpa, point.entropy_kj_per_kg_k),
        ] {
            let back = back.unwrap();
            prop_assert!((back.temperature_c - temperature_c).abs() < 1e-5, "{point:?} {back:?}");
        }
    }

    /// Saturation by pressure is the inverse of saturation by temperature.
    #[test]
    fn saturation_by_pressure_and_by_temperature_agree(which in 0..6_usize, place in 0.0..=1.0_f64) {
        let equation = &EQUATIONS[which];
        let (low, high) = equation.saturation_range_c();
        let temperature_c = (low + place * (high - low)).min(high);
        let (least, greatest) = equation.pressure_range_kpa();
        let pressure_kpa =
            equation.saturation(temperature_c).unwrap().pressure_kpa.clamp(least, greatest);
        let back = equation.saturation_at_pressure(pressure_kpa).unwrap();
        prop_assert!((back.temperature_c - temperature_c).abs() < 1e-6);
    }

    /// No input at all brings a panic, and no answer holds a number that is not finite.
    #[test]
    fn no_input_panics(
        which in 0..6_usize,
        one in proptest::num::f64::ANY,
        two in proptest::num::f64::ANY,
        plausible in -100.0..500.0_f64,
        pressure_kpa in 0.0..7000.0_f64,
    ) {
        let equation = &EQUATIONS[which];
        let saturation = equation.saturation(0.0).unwrap();
        let foreign = EQUATIONS[(which + 1) % 6].saturation(30.0).unwrap();
        let points = [
            equation.saturation(one).map(|found| found.vapour),
            equation.saturation(plausible).map(|found| found.liquid),
            equation.saturation_at_pressure(one).map(|found| found.vapour),
            equation.at_temperature_quality(plausible, two),
            equation.at_temperature_pressure(one, two),
            equation.at_temperature_pressure(plausible, pressure_kpa),
            equation.at_pressure_entropy(pressure_kpa, two),
            equation.at_pressure_entropy(pressure_kpa, plausible / 100.0),
            equation.at_pressure_enthalpy(pressure_kpa, two),
            equation.at_pressure_enthalpy(pressure_kpa, plausible),
            equation.beside_at_temperature(&saturation, one),
            equation.beside_at_entropy(&saturation, one),
            equation.beside_at_enthalpy(&saturation, plausible),
            // a saturation of another fluid makes no sense, and still no panic
            equation.beside_at_enthalpy(&foreign, plausible),
            equation.beside_at_temperature(&foreign, plausible),
        ];
        for point in points {
            prop_assert!(point.is_err() || finite(point.clone()), "{point:?}");
        }
    }
}
