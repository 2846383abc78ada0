//! Cycles in the pressure–enthalpy diagram.

use crate::common::*;
use winterledger::chart::{PressureEnthalpy, StatePoint, pressure_enthalpy};

/// Saturation line and cycle of R290 (kJ/kg, kPa): PyPI CoolProp 8.0.0, default reference state, −5/45 °C, 5 K
/// superheat, 3 K subcooling, isentropic efficiency 0.7. Only their shape matters here.
const DOME: [(f64, f64); 33] = [
    (105.1, 111.1),
    (125.8, 161.8),
    (147.0, 228.7),
    (168.6, 314.7),
    (190.8, 423.1),
    (213.6, 557.3),
    (237.0, 720.7),
    (261.1, 917.0),
    (286.1, 1149.9),
    (312.0, 1423.4),
    (339.1, 1741.8),
    (367.6, 2109.6),
    (398.0, 2532.2),
    (431.0, 3015.7),
    (469.2, 3568.5),
    (529.6, 4205.1),
    (555.2, 4251.2),
    (583.2, 4205.1),
    (622.0, 3568.5),
    (629.6, 3015.7),
    (630.2, 2532.2),
    (627.3, 2109.6),
    (622.2, 1741.8),
    (615.6, 1423.4),
    (607.9, 1149.9),
    (599.4, 917.0),
    (590.3, 720.7),
    (580.7, 557.3),
    (570.8, 423.1),
    (560.5, 314.7),
    (550.0, 228.7),
    (539.3, 161.8),
    (528.5, 111.1),
];

fn state(point: &str, name: &str, t: f64, p: f64, h: f64) -> StatePoint {
    StatePoint {
        point: point.into(),
        name: name.into(),
        temperature_c: t,
        pressure_kpa: p,
        enthalpy_kj_per_kg: h,
    }
}

fn r290() -> PressureEnthalpy {
    PressureEnthalpy {
        fluid: "R290".into(),
        dome: DOME.to_vec(),
        cycle: vec![
            (577.8, 406.0),
            (669.3, 1534.3),
            (618.1, 1534.3),
            (321.8, 1534.3),
            (312.9, 1534.3),
            (312.9, 406.0),
        ],
        states: vec![
            state("1", "compressor inlet", 0.0, 406.0, 577.8),
            state("2", "compressor outlet", 67.6, 1534.3, 669.3),
            state("3", "condenser outlet", 42.0, 1534.3, 312.9),
            state("4", "evaporator inlet", -5.0, 406.0, 312.9),
        ],
        evaporating_c: -5.0,
        condensing_c: 45.0,
        cop_heating: Some(3.894),
    }
}

#[test]
fn realistic() {
    check(
        "pressure_enthalpy_realistic",
        &pressure_enthalpy(&r290(), &english()).expect("drawn"),
    );
}

#[test]
fn tiny_lift_and_hostile_names() {
    let mut data = r290();
    data.fluid = long_name();
    for (p, name) in data.states.iter_mut().zip(NAMES) {
        p.name = name.into();
        p.point = name.into();
        p.pressure_kpa = if p.pressure_kpa > 500.0 { 430.0 } else { 406.0 };
    }
    data.cycle = data
        .states
        .iter()
        .map(|s| (s.enthalpy_kj_per_kg, s.pressure_kpa))
        .collect();
    check(
        "pressure_enthalpy_hostile",
        &pressure_enthalpy(&data, &english()).expect("drawn"),
    );
}

#[test]
fn eight_states_without_a_dome() {
    let mut data = r290();
    data.dome.clear();
    for i in 0..4 {
        let at = data.states[i].enthalpy_kj_per_kg + 6.0;
        data.states.push(state(
            &format!("{}′", i + 1),
            "near by",
            1.0,
            data.states[i].pressure_kpa * 1.02,
            at,
        ));
    }
    check(
        "pressure_enthalpy_eight",
        &pressure_enthalpy(&data, &english()).expect("drawn"),
    );
}
