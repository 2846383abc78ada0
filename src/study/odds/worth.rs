//! What to find out next: how much less often one would choose wrong if a quantity were known.

use super::line::{Line, score};

/// Parts of the sample: what is chosen by the others is judged in each. Samples that were chosen by would make their own choice look
/// right.
const PARTS: usize = 5;
/// Lines that stand for the cost of a system over a known quantity: one in its lower half, one in its upper, so that a cost may turn.
const LINES: usize = 2;

/// How often the system that is cheapest on the mean is not the cheapest, when nothing more is known.
/// `costs` holds one row a sample with the cost of every system; nothing of none.
pub fn chance_wrong(costs: &[Vec<f64>]) -> Option<f64> {
    let systems = costs.first()?.len();
    let mean = |system: usize| costs.iter().map(|row| row[system]).sum::<f64>();
    let means: Vec<f64> = (0..systems).map(mean).collect();
    let wrong = costs.iter().filter(|row| is_wrong(row, &means)).count();
    Some(wrong as f64 / costs.len() as f64)
}

/// The same when a quantity is known (`known`, the share of one that was drawn for it in each sample), and the choice follows what it
/// turns out to be: the system whose cost is expected to be least there. Where it would not pay to choose by it, it is as if it were not
/// known; so it is with samples too few to choose by.
pub fn chance_wrong_knowing(known: &[f64], costs: &[Vec<f64>]) -> Option<f64> {
    let unknown = chance_wrong(costs)?;
    let systems = costs.first()?.len();
    let scores: Vec<f64> = known.iter().map(|share| score(*share)).collect();
    let mut wrong = 0;
    for part in 0..PARTS {
        let mut others: Vec<usize> = (0..costs.len()).filter(|row| row % PARTS != part).collect();
        others.sort_by(|&a, &b| scores[a].total_cmp(&scores[b]));
        let (lower, upper) = others.split_at(others.len() / LINES);
        let Some(&first_of_upper) = upper.first() else {
            return Some(unknown);
        };
        let expected = |rows: &[usize], system: usize| {
            let points = rows.iter().map(|&row| (scores[row], costs[row][system]));
            Line::through(&points.collect::<Vec<_>>())
        };
        let lines = [lower, upper].map(|rows| -> Vec<Line> {
            (0..systems).map(|system| expected(rows, system)).collect()
        });
        for row in (part..costs.len()).step_by(PARTS) {
            let lines = &lines[usize::from(scores[row] >= scores[first_of_upper])];
            let expected: Vec<f64> = lines.iter().map(|line| line.at(scores[row])).collect();
            wrong += usize::from(is_wrong(&costs[row], &expected));
        }
    }
    Some((wrong as f64 / costs.len() as f64).min(unknown))
}

/// Whether the system that was expected to be cheapest is not.
fn is_wrong(costs: &[f64], expected: &[f64]) -> bool {
    let chosen = (0..expected.len()).min_by(|&a, &b| expected[a].total_cmp(&expected[b]));
    chosen.is_some_and(|chosen| costs.iter().any(|cost| *cost < costs[chosen]))
}

#[cfg(test)]
mod tests {
    use super::super::hypercube::Hypercube;
    use super::*;

    /// One system costs 1, the other u, even from 0 to 3: the second is dearer on the mean (1.5) and cheaper one time in three.
    /// Knowing u one is hardly ever wrong; knowing something else helps nothing.
    #[test]
    fn knowing_what_decides_leaves_little_to_get_wrong() {
        // 271 is prime to 600: an order that no part of the sample follows.
        let u: Vec<f64> = (0..600)
            .map(|i| (f64::from(i * 271 % 600) + 0.5) / 600.0)
            .collect();
        let costs: Vec<Vec<f64>> = u.iter().map(|u| vec![1.0, 3.0 * u]).collect();
        assert!((chance_wrong(&costs).unwrap() - 1.0 / 3.0).abs() < 1e-12);
        // A line in the score is not quite one in u.
        assert!(chance_wrong_knowing(&u, &costs).unwrap() < 0.03);
        let other: Vec<f64> = (0..600)
            .map(|i| (f64::from(i * 7 % 600) + 0.5) / 600.0)
            .collect();
        assert!(chance_wrong_knowing(&other, &costs).unwrap() > 0.3);
        assert_eq!(chance_wrong(&[]), None);
    }

    /// A linear normal model of two systems, one dearer by d = a + Σ b z: knowing z1 one chooses by a + b1 z1 and is wrong with the chance
    /// that the rest outweighs it. With a = 0 that is arccos(b1/σ)/π (the two signs of a bivariate normal, Sheppard 1899).
    ///
    /// b = 8, 6, 4, 2, 1, 0.3, so σ = 11.01 and the chances are 0.241, 0.317, 0.382, 0.442, 0.471 and 0.491, without knowledge 0.5. In the
    /// mean of 100 seeds of 400 samples the old way (six classes, chosen and judged by the same samples) is off by 0, 0, −0.003, −0.010, −0.016
    /// and −0.027, always in its own favour; this one by −0.002, 0.005, 0.005, 0.009, 0.005 and −0.005.
    #[test]
    fn what_is_judged_was_not_chosen_by() {
        let b = [8.0, 6.0, 4.0, 2.0, 1.0, 0.3];
        let sigma = b.iter().map(|b: &f64| b * b).sum::<f64>().sqrt();
        let seeds = 100_u32;
        let mut found = [0.0; 6];
        for seed in 0..seeds {
            let cube = Hypercube {
                seed: u64::from(seed),
                points: 20,
                quantities: b.len(),
            };
            let points: Vec<Vec<f64>> = (0..20).flat_map(|block| cube.block(block)).collect();
            let costs: Vec<Vec<f64>> = points
                .iter()
                .map(|point| vec![0.0, point.iter().zip(b).map(|(u, b)| b * score(*u)).sum()])
                .collect();
            for (place, found) in found.iter_mut().enumerate() {
                let known: Vec<f64> = points.iter().map(|point| point[place]).collect();
                *found += chance_wrong_knowing(&known, &costs).unwrap() / f64::from(seeds);
            }
        }
        let off: Vec<f64> = found
            .iter()
            .zip(b)
            .map(|(found, b)| found - (b / sigma).acos() / std::f64::consts::PI)
            .collect();
        println!("off by {off:.3?}");
        // A single answer scatters by 0.02 to 0.03, a mean of 100 by 0.003; what is hardly known is taken as not known where that is better.
        assert!(off.iter().all(|off| off.abs() < 0.02), "{off:?}");
        assert!(off.iter().take(3).all(|off| off.abs() < 0.012), "{off:?}");
    }
}
