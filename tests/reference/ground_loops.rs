//! The fields of `tests/reference/ground.py` as loops, for every test that holds them against its values.

use winterledger::source::{
    AnnualSwing, Antifreeze, Bore, Brine, Filling, Layout, LoopDesign, Pipe, Pump, Soil, UTubes,
};

pub const PIPE: Pipe = Pipe {
    outside_m: 0.04,
    wall_m: 0.0037,
    conductivity_w_per_m_k: 0.42,
};

pub fn bore(depth_m: f64, buried_m: f64, radius_m: f64, x_m: f64, y_m: f64) -> Bore {
    Bore {
        x_m,
        y_m,
        depth_m,
        buried_m,
        radius_m,
    }
}

/// The fields of the script.
fn field(name: &str) -> Vec<Bore> {
    match name {
        "one" => vec![bore(100.0, 4.0, 0.075, 0.0, 0.0)],
        "two" => vec![
            bore(80.0, 1.0, 0.065, 0.0, 0.0),
            bore(80.0, 1.0, 0.065, 6.0, 0.0),
        ],
        "four" => [(0.0, 0.0), (0.0, 6.0), (6.0, 0.0), (6.0, 6.0)]
            .map(|(x, y)| bore(100.0, 1.0, 0.065, x, y))
            .to_vec(),
        "unequal" => vec![
            bore(120.0, 1.0, 0.065, 0.0, 0.0),
            bore(70.0, 3.0, 0.065, 5.0, 0.0),
            bore(95.0, 2.0, 0.075, 2.0, 7.0),
        ],
        other => panic!("{other}"),
    }
}

pub fn design(layout: Layout, soil: Soil) -> LoopDesign {
    LoopDesign {
        layout,
        pipe: PIPE,
        soil,
        surface: AnnualSwing {
            mean_c: 10.0,
            amplitude_k: 8.0,
            coldest_hour: 600.0,
        },
        gradient_k_per_m: 0.0,
        brine: Brine::new(Antifreeze::EthyleneGlycol, 0.3).unwrap(),
        flow_kg_per_s: 0.5,
        pump: Pump::Efficiency(0.3),
        recharge_kwh: 0.0,
    }
}

/// Bores whose resistance is given.
pub fn given(bores: Vec<Bore>, soil: Soil) -> LoopDesign {
    let layout = Layout::Bores {
        bores,
        filling: Filling::Resistance(0.1),
        u_tubes: UTubes::One,
    };
    design(layout, soil)
}

/// A field of the script.
pub fn bores(name: &str, soil: Soil) -> LoopDesign {
    given(field(name), soil)
}
