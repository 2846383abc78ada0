//! The mathematics of odds against closed answers.

use statrs::distribution::{ContinuousCDF, Normal};
use winterledger::study::odds::{
    Chance, Hypercube, Quantiles, Range, chance_wrong, chance_wrong_knowing, shares,
};

use crate::table::Row;

pub fn rows() -> Vec<Row> {
    let closed = "closed formula";
    let mut rows = Vec::new();
    for (what, range, share, expected) in [
        (
            "Normal, mean 10, deviation 2, at 97.5 %",
            Range::Normal {
                mean: 10.0,
                deviation: 2.0,
            },
            0.975,
            10.0 + 2.0 * 1.959_963_985,
        ),
        (
            "Log-normal, median 3, deviation 0.5, at 84.134 %",
            Range::LogNormal {
                median: 3.0,
                deviation: 0.5,
            },
            0.841_344_746_068_543,
            3.0 * 0.5f64.exp(),
        ),
        (
            "Triangle 1, 2, 5 at 25 %",
            Range::Triangle {
                low: 1.0,
                likely: 2.0,
                high: 5.0,
            },
            0.25,
            2.0,
        ),
        (
            "Triangle 1, 2, 5 at 90 %",
            Range::Triangle {
                low: 1.0,
                likely: 2.0,
                high: 5.0,
            },
            0.9,
            5.0 - (0.1f64 * 4.0 * 3.0).sqrt(),
        ),
        (
            "Even from 4 to 8 at 30 %",
            Range::Even {
                low: 4.0,
                high: 8.0,
            },
            0.3,
            5.2,
        ),
    ] {
        rows.push(Row::new(
            what,
            "tables of the normal distribution; closed formulas",
            expected,
            range.at(share).unwrap(),
            1e-6,
            "printed digits",
        ));
    }
    // Ishigami's function with a = 7, b = 0.1 (Ishigami and Homma 1990): first-order shares 0.3139, 0.4424 and 0.
    let cube = Hypercube {
        seed: 7,
        points: 2048,
        quantities: 3,
    };
    let mut x = Vec::new();
    let mut y = Vec::new();
    for block in 0..8 {
        for point in cube.block(block) {
            let at: Vec<f64> = point
                .iter()
                .map(|u| std::f64::consts::PI * (2.0 * u - 1.0))
                .collect();
            y.push(at[0].sin() + 7.0 * at[1].sin().powi(2) + 0.1 * at[2].powi(4) * at[0].sin());
            x.push(point);
        }
    }
    let found = shares(&x, &y).unwrap();
    for (i, expected) in [0.3139, 0.4424, 0.0].into_iter().enumerate() {
        rows.push(Row::new(
            format!(
                "Share of the spread of quantity {} of Ishigami's function",
                i + 1
            ),
            "Ishigami & Homma 1990: first-order indices",
            expected,
            found[i].share,
            0.02,
            "16 384 samples: three times the scatter of such an estimate",
        ));
    }
    // Two quantities that go together by 0.6 in their normal scores, y their sum: Var(E[y|a]) = (1 + r)², Var(y) = 2 + 2 r.
    let normal = Normal::standard();
    let two = Hypercube {
        seed: 7,
        points: 20,
        quantities: 2,
    };
    let (mut x, mut y) = (Vec::new(), Vec::new());
    for mut point in (0..400).flat_map(|block| two.block(block)) {
        let [one, other] = [point[0], point[1]].map(|share| normal.inverse_cdf(share));
        let other = 0.6 * one + 0.8 * other;
        point[1] = normal.cdf(other);
        y.push(one + other);
        x.push(point);
    }
    rows.push(Row::new(
        "Share of the spread of one of two that go together by 0.6",
        closed,
        0.8,
        shares(&x, &y).unwrap()[0].share,
        0.02,
        "8000 samples: three times the scatter of such an estimate",
    ));
    // One system dearer than another by 8 a + 6 b of normal scores: knowing a leaves the sign of the rest, arccos(0.8)/π (Sheppard 1899).
    let costs: Vec<Vec<f64>> = (0..400)
        .flat_map(|block| two.block(block))
        .map(|point| {
            let [one, other] = [point[0], point[1]].map(|share| normal.inverse_cdf(share));
            vec![0.0, 8.0 * one + 6.0 * other]
        })
        .collect();
    let known: Vec<f64> = (0..400)
        .flat_map(|block| two.block(block))
        .map(|point| point[0])
        .collect();
    rows.push(Row::new(
        "Chance to choose wrong knowing the greater of two unknowns",
        "bivariate normal, chance of two signs (Sheppard 1899)",
        0.8f64.acos() / std::f64::consts::PI,
        chance_wrong_knowing(&known, &costs).unwrap(),
        0.015,
        "8000 samples: three times √(p (1 − p)/n)",
    ));
    // A mean of one block of a hypercube misses far less than one of independent draws, and every slice is met once.
    let block = cube.block(0);
    let mut met: Vec<usize> = block
        .iter()
        .map(|point| (point[1] * 2048.0) as usize)
        .collect();
    met.sort_unstable();
    met.dedup();
    rows.push(Row::new(
        "Slices of a Latin hypercube that are met",
        "its definition (McKay and others 1979)",
        2048.0,
        met.len() as f64,
        0.0,
        "a count",
    ));
    let even: Vec<f64> = (0..=100).map(f64::from).collect();
    let quantiles = Quantiles::of(&even).unwrap();
    rows.push(Row::new(
        "Nine in ten of 0 to 100 lie below",
        "Hyndman & Fan 1996, type 7",
        90.0,
        quantiles.p90,
        1e-9,
        "rounding",
    ));
    let u: Vec<f64> = (0..600).map(|i| (f64::from(i) + 0.5) / 200.0).collect();
    let costs: Vec<Vec<f64>> = u.iter().map(|u| vec![1.0, *u]).collect();
    rows.push(Row::new(
        "Chance to choose wrong between 1 and even from 0 to 3",
        closed,
        1.0 / 3.0,
        chance_wrong(&costs).unwrap(),
        1e-9,
        "600 even values",
    ));
    // Sampling error of a share: √(p (1 − p)/n) for independent draws, here in 40 blocks of 50.
    let mut random = 12345u64;
    let draws: Vec<f64> = (0..2000)
        .map(|_| {
            // Knuth's MMIX generator.
            random = random
                .wrapping_mul(6_364_136_223_846_793_005)
                .wrapping_add(1_442_695_040_888_963_407);
            (random >> 11) as f64 / (1u64 << 53) as f64
        })
        .collect();
    let chance = Chance::of(draws.chunks(50), |value| value < 0.3).unwrap();
    let error = (0.3f64 * 0.7 / 2000.0).sqrt();
    rows.push(Row::new(
        "Share below 0.3 of 2000 even draws",
        closed,
        0.3,
        chance.chance,
        3.0 * error,
        "three standard errors",
    ));
    rows.push(Row::new(
        "Its standard error from 40 blocks",
        "binomial",
        error,
        chance.error.unwrap(),
        0.35 * error,
        "three times √(1/(2 · 39)) of itself",
    ));
    rows
}
