//! The ground: a response made, its memory through a life, the whole system through a life; and how exact the memory is.
//!
//! Run: `cargo bench --bench ground`

use std::path::Path;

use divan::{Bencher, black_box};
use winterledger::brief::Brief;
use winterledger::source::{
    AnnualSwing, Antifreeze, Bore, Brine, BuriedLoop, Filling, Layout, LoopDesign, Memory, Pipe,
    Pump, Soil, UTubes,
};
use winterledger::study::{loop_life, shortest_loop};

/// Hours of the life.
const LIFE: usize = 25 * 8760;

fn main() {
    match accuracy_k() {
        Some(worst) => println!(
            "memory against exact convolution, 25 years of four bores: {worst:.5} K at most"
        ),
        None => eprintln!("the loop cannot be made"),
    }
    divan::main();
}

fn four_bores() -> LoopDesign {
    let places = [(0.0, 0.0), (0.0, 6.0), (6.0, 0.0), (6.0, 6.0)];
    let bores = places
        .map(|(x_m, y_m)| Bore {
            x_m,
            y_m,
            depth_m: 100.0,
            buried_m: 1.0,
            radius_m: 0.065,
        })
        .to_vec();
    LoopDesign {
        layout: Layout::Bores {
            bores,
            filling: Filling::Resistance(0.1),
            u_tubes: UTubes::One,
        },
        pipe: Pipe {
            outside_m: 0.04,
            wall_m: 0.0037,
            conductivity_w_per_m_k: 0.42,
        },
        soil: Soil {
            conductivity_w_per_m_k: 2.0,
            diffusivity_m2_per_s: 0.9e-6,
        },
        surface: AnnualSwing {
            mean_c: 10.0,
            amplitude_k: 8.0,
            coldest_hour: 600.0,
        },
        gradient_k_per_m: 0.03,
        brine: Brine::new(Antifreeze::EthyleneGlycol, 0.3).unwrap_or_else(unreachable_brine),
        flow_kg_per_s: 1.6,
        pump: Pump::Efficiency(0.3),
        recharge_kwh: 0.0,
    }
}

/// Water always is a brine.
fn unreachable_brine() -> Brine {
    Brine::new(Antifreeze::Water, 0.0).unwrap_or_else(unreachable_brine)
}

/// An invented draw of four bores, kW.
fn draw_kw(hour: usize) -> f64 {
    let season = (std::f64::consts::TAU * (hour % 8760) as f64 / 8760.0).cos();
    let water = if hour % 12 == 6 { 8.0 } else { 0.0 };
    (9.0 * season + 2.0).max(0.0) + water
}

/// Greatest difference between memory and exact convolution at 200 hours over the life, K.
fn accuracy_k() -> Option<f64> {
    const POINTS: u32 = 4000;
    let design = four_bores();
    let made = design.build(1).ok()?;
    let step = (LIFE as f64).ln() / f64::from(POINTS - 1);
    let times: Vec<_> = (0..POINTS).map(|i| (step * f64::from(i)).exp()).collect();
    let values = design.wall_response(&times);
    let at = |hour: usize| {
        let place = ((hour as f64).ln() / step).min(f64::from(POINTS - 2));
        let i = place as usize;
        values[i] + (place - i as f64) * (values[i + 1] - values[i])
    };
    let table: Vec<_> = std::iter::once(0.0).chain((1..=LIFE).map(at)).collect();
    let mut memory = Memory::default();
    let mut worst = 0.0f64;
    for hour in 0..LIFE {
        made.drawn(hour, draw_kw(hour), &mut memory);
        if hour % 1097 == 0 {
            let exact: f64 = (0..=hour)
                .map(|past| draw_kw(past) * (table[hour - past + 1] - table[hour - past]))
                .sum();
            let fall = made.undisturbed_c(0) - made.wall_c(0, &memory);
            worst = worst.max((fall - exact * 1000.0 / made.length_m()).abs());
        }
    }
    Some(worst)
}

#[divan::bench]
fn make_four_bores(bencher: Bencher) {
    let design = four_bores();
    bencher.bench(|| black_box(&design).build(8760));
}

/// Offer and memory alone: what the ground adds to a run.
#[divan::bench]
fn ground_alone_25_years(bencher: Bencher) {
    let Ok(made) = four_bores().build(8760) else {
        return;
    };
    bencher.bench(|| {
        let mut memory = Memory::default();
        let mut sum = 0.0;
        for hour in 0..LIFE {
            sum += walk(&made, hour, &mut memory);
        }
        sum
    });
}

fn walk(made: &BuriedLoop, hour: usize, memory: &mut Memory) -> f64 {
    let offer = made.offer(hour % 8760, memory);
    made.drawn(hour, draw_kw(hour), memory);
    offer.open_c
}

fn brief() -> Option<Brief> {
    Brief::read(&Path::new(env!("CARGO_MANIFEST_DIR")).join("briefs/ground.toml"))
        .map_err(|problems| eprintln!("{problems}"))
        .ok()
}

/// Home, machine and one bore, every hour of 25 years.
#[divan::bench(sample_count = 5)]
fn one_bore_with_home_and_machine_25_years(bencher: Bencher) {
    let Some(brief) = brief() else { return };
    bencher.bench(|| loop_life(&brief.case, &brief.case.contenders[2], 25, |_, _, _| {}));
}

/// The search for the shortest loop, its 25 years included.
#[divan::bench(sample_count = 5)]
fn shortest_bore(bencher: Bencher) {
    let Some(brief) = brief() else { return };
    bencher.bench(|| shortest_loop(&brief.case, &brief.case.contenders[2], 0.0, 25));
}
