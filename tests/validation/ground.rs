//! Ground against pygfunction, CoolProp and closed solutions (`tests/reference/ground.py`).

use std::f64::consts::TAU;

use winterledger::source::{
    Antifreeze, Brine, BrineProperties, Layout, LoopDesign, Memory, Pipe, Soil, Trench, UTube,
    UTubes, undisturbed_c,
};

#[path = "../reference/ground_loops.rs"]
mod ground_loops;
use ground_loops::{PIPE, design};

use crate::table::{Row, Worst, number, numbers, reference};

const MULTIPLE: &str = "pygfunction 2.3.1 (MultipleUTube, parallel, tenth order or as said)";
const LIBRARY: &str = "pygfunction 2.3.1, uniform heat rate";

fn bores(name: &str, diffusivity_m2_per_s: f64) -> LoopDesign {
    let soil = Soil {
        conductivity_w_per_m_k: 2.0,
        diffusivity_m2_per_s,
    };
    ground_loops::bores(name, soil)
}

fn g_function(design: &LoopDesign, years: f64) -> f64 {
    design.wall_response(&[years * 8760.0])[0] * TAU * 2.0
}

pub fn rows() -> Vec<Row> {
    let mut rows = Vec::new();
    let mut worst = Worst::relative(2e-6);
    for row in reference("ground_g_functions.csv") {
        worst.see(
            number(&row[2]),
            g_function(&bores(&row[0], 1e-6), number(&row[1])),
        );
    }
    rows.push(worst.row(
        "g-functions of one, two, four and three unequal bores, an hour to decades",
        LIBRARY,
        32,
        "the same superposition of the same solution: quadrature",
    ));
    for (years, expected) in [
        (1.0 / 12.0, 3.46063),
        (1.0, 4.65604),
        (10.0, 5.63726),
        (50.0, 6.10401),
    ] {
        rows.push(Row::new(
            format!("Finite line source after {years:.2} years, H 100 m, D 4 m, r 0.075 m"),
            "Claesson & Javed 2011, scipy quadrature",
            expected,
            g_function(&bores("one", 1e-6), years),
            1e-5,
            "a unit of the last printed digit",
        ));
    }
    rows.push(Row::new(
        "Wall below undisturbed ground after 20 years of 20 W/m, k 2 W/(m K), K",
        "Claesson & Javed 2011",
        9.35,
        20.0 * bores("one", 1e-6).wall_response(&[20.0 * 8760.0])[0],
        0.005,
        "half of the last printed digit",
    ));
    rows.extend(walls());
    rows.push(life());
    rows.extend(loops());
    rows.push(brines());
    rows.extend(trench());
    rows
}

/// Ten years of hourly draw against an exact convolution.
fn walls() -> Vec<Row> {
    let draw: Vec<f64> = numbers("ground_load.csv")
        .iter()
        .map(|row| row[1])
        .collect();
    let expected = reference("ground_walls.csv");
    let mut rows = Vec::new();
    for name in ["one", "four"] {
        let made = bores(name, 0.9e-6).build(1).unwrap();
        let mut memory = Memory::default();
        let falls: Vec<f64> = (0..10 * 8760)
            .map(|hour| {
                made.drawn(hour, draw[hour % 8760], &mut memory);
                made.undisturbed_c(0) - made.wall_c(0, &memory)
            })
            .collect();
        let mean = |falls: &[f64]| falls.iter().sum::<f64>() / falls.len() as f64;
        let mut worst = Worst::absolute(0.01);
        for row in expected.iter().filter(|row| row[0] == name) {
            let found = match row[1].as_str() {
                "mean_year_1" => mean(&falls[..8760]),
                "mean_year_10" => mean(&falls[9 * 8760..]),
                hour => falls[hour.parse::<usize>().unwrap()],
            };
            worst.see(number(&row[2]), found);
        }
        rows.push(worst.row(
            &format!("Fall of the wall through ten years of hourly draw, {name} bore(s), K"),
            "pygfunction 2.3.1 response, convolved hour by hour",
            250,
            "a fifth of the 0.05 K asked for",
        ));
    }
    rows
}

/// The trap "loop judged in its first year".
fn life() -> Row {
    let made = bores("one", 1e-6).build(1).unwrap();
    let mut memory = Memory::default();
    let mut means = Vec::new();
    for _ in 0..25 {
        let mut sum = 0.0;
        for hour in 0..8760 {
            made.drawn(hour, 1.0, &mut memory);
            sum += made.wall_c(0, &memory);
        }
        means.push(sum / 8760.0);
    }
    Row::new(
        "Fall of the yearly mean wall from year 1 to 25 of a single bore, K for 10 W/m",
        "common practice, no source: about 1.5",
        1.5,
        means[0] - means[24],
        0.15,
        "\"about\": depth and radius behind the figure are not stated",
    )
}

/// A row of the script's resistances as a bore.
fn u_tubes(count: UTubes, v: &[f64]) -> UTube {
    UTube {
        bore_radius_m: v[0],
        pipe: Pipe {
            outside_m: 2.0 * v[1],
            wall_m: 0.003,
            conductivity_w_per_m_k: 0.4,
        },
        spacing_m: v[2],
        grout_w_per_m_k: v[4],
        count,
    }
}

fn loops() -> Vec<Row> {
    let (mut first, mut tenth) = (Worst::relative(1e-7), Worst::relative(0.01));
    for v in numbers("ground_resistances.csv") {
        let tube = u_tubes(UTubes::One, &v);
        let local = tube.local_resistance(v[3], v[5]);
        let internal = tube.internal_resistance(v[3], v[5]);
        first.see(v[6], local);
        first.see(v[7], internal);
        tenth.see(v[8], local);
        tenth.see(v[9], internal);
    }
    let (mut two, mut two_tenth, mut internal) = (
        Worst::relative(1e-6),
        Worst::relative(0.01),
        Worst::relative(0.06),
    );
    for v in numbers("ground_double_tubes.csv") {
        let tubes = u_tubes(UTubes::Two, &v);
        let local = tubes.local_resistance(v[3], v[5]);
        two.see(v[8], local);
        two_tenth.see(v[10], local);
        internal.see(v[11], tubes.internal_resistance(v[3], v[5]));
    }
    let brine = BrineProperties {
        density_kg_per_m3: 1043.0,
        heat_capacity_kj_per_kg_k: 3.7,
        viscosity_pa_s: 0.0045,
        conductivity_w_per_m_k: 0.45,
    };
    let (mut friction, mut film) = (Worst::relative(1e-5), Worst::relative(0.0));
    for v in numbers("ground_pipes.csv") {
        let flow = PIPE.flow(v[0], &brine);
        friction.see(v[1], flow.pascal_per_m);
        let between = (2300.0..4000.0).contains(&flow.reynolds);
        film.see_within(
            v[2],
            flow.resistance_m_k_per_w,
            v[2] * if between { 0.025 } else { 1e-5 },
        );
    }
    let library = "pygfunction 2.3.1";
    vec![
        first.row("Borehole resistances, first-order multipole, m K/W", library, 10, "the library iterates to about 1e-8"),
        tenth.row("The same against the tenth order", library, 10, "orders differ by less than 1 %"),
        two.row("Resistances of bores with two U-tubes, first-order multipole, m K/W", MULTIPLE, 6, "the library iterates until its multipoles change by 1e-5"),
        two_tenth.row("The same against the tenth order", MULTIPLE, 6, "orders differ by less than 1 %"),
        internal.row(
            "Resistance between the legs of two U-tubes, m K/W",
            MULTIPLE,
            6,
            "ours is of order zero: its term adds a few per cent to the resistance of a bore",
        ),
        friction.row("Friction of brine in pipes, Pa/m", library, 6, "both iterate Colebrook's equation to 1e-6 or better"),
        film.row(
            "Film resistance of brine in pipes, m K/W",
            "pygfunction 2.3.1 (Gnielinski)",
            6,
            "rounding; 2.5 % between laminar and turbulent, where Gnielinski 2013 takes the friction at Reynolds number 4000",
        ),
    ]
}

fn brines() -> Row {
    let mut worst = Worst::relative(0.0);
    for row in reference("ground_brines.csv") {
        let antifreeze = if row[0] == "ethylene glycol" {
            Antifreeze::EthyleneGlycol
        } else {
            Antifreeze::PropyleneGlycol
        };
        let brine = Brine::new(antifreeze, number(&row[1])).unwrap();
        let at = brine.at(number(&row[3]));
        let shares = if row[2].ends_with('2') {
            [0.004, 0.035, 0.08, 0.02]
        } else {
            [2e-4, 2e-4, 2e-3, 2e-3]
        };
        let found = [
            at.density_kg_per_m3,
            at.heat_capacity_kj_per_kg_k * 1000.0,
            at.viscosity_pa_s,
            at.conductivity_w_per_m_k,
        ];
        for ((got, share), text) in found.into_iter().zip(shares).zip(&row[5..]) {
            let expected = number(text);
            worst.see_within(expected, got, share * expected.abs());
        }
    }
    worst.row(
        "Density, heat capacity, viscosity and conductivity of glycols",
        "CoolProp 8.0.0: Melinder's collection and a second one",
        200,
        "printed digits of the coefficients; up to 8 % beside the second, whose products are no pure glycol",
    )
}

/// With nothing drawn the wave of Kusuda and Achenbach; with a steady draw the shape factor.
fn trench() -> Vec<Row> {
    let soil = Soil {
        conductivity_w_per_m_k: 1.2,
        diffusivity_m2_per_s: 5e-7,
    };
    let trench = Trench {
        length_m: 100.0,
        depth_m: 1.2,
        pipes: 1,
        spacing_m: 0.0,
        across_m: 0.0,
    };
    let plan = design(
        Layout::Trenches {
            trenches: vec![trench],
        },
        soil,
    );
    let made = plan.build(8760).unwrap();
    let mut memory = Memory::default();
    for hour in 0..60 * 8760 {
        made.drawn(hour, 1.0, &mut memory);
    }
    let mut rows = vec![Row::new(
        "Trench after 60 years of 10 W/m, K",
        "shape factor ln(2z/r)/(2πk), Incropera [M]",
        10.0 * (2.4f64 / 0.02).ln() / (TAU * 1.2),
        made.undisturbed_c(0) - made.wall_c(0, &memory),
        0.03,
        "not quite steady after 60 years",
    )];
    for (depth_m, left) in [(1.0, 0.640), (2.0, 0.410), (5.0, 0.107)] {
        let hours =
            (0..8760).map(|hour| undisturbed_c(&plan.surface, depth_m, 5e-7, f64::from(hour)));
        let (low, high) = hours.fold((f64::INFINITY, f64::NEG_INFINITY), |(low, high), c| {
            (low.min(c), high.max(c))
        });
        rows.push(Row::new(
            format!("Yearly swing left at {depth_m} m, of that at the surface"),
            "Kusuda & Achenbach 1965 [M], computed",
            left,
            (high - low) / 2.0 / plan.surface.amplitude_k,
            0.0005,
            "half of the last printed digit",
        ));
    }
    rows
}
