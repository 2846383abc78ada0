//! Summaries of a sample, with their sampling errors.

/// One in ten lies below the first, half below the second, nine in ten below the third.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Quantiles {
    /// 10 %.
    pub p10: f64,
    /// 50 %.
    pub p50: f64,
    /// 90 %.
    pub p90: f64,
}

impl Quantiles {
    /// Of some values, straight between neighbours in rank (Hyndman and Fan 1996, type 7); nothing of none.
    pub fn of(values: &[f64]) -> Option<Self> {
        let mut sorted = values.to_vec();
        sorted.sort_by(f64::total_cmp);
        let last = sorted.len().checked_sub(1)?;
        let at = |share: f64| {
            let rank = share * last as f64;
            let below = rank as usize;
            let above = (below + 1).min(last);
            sorted[below] + (rank - below as f64) * (sorted[above] - sorted[below])
        };
        Some(Self {
            p10: at(0.1),
            p50: at(0.5),
            p90: at(0.9),
        })
    }
}

impl Quantiles {
    /// Standard errors of the quantiles of equal blocks: each block is left out in turn (grouped jackknife, Efron 1982); nothing with
    /// a single block.
    pub fn errors(blocks: &[Vec<f64>]) -> Option<Self> {
        let count = blocks.len() as f64;
        let without = |left: usize| {
            let kept = blocks
                .iter()
                .enumerate()
                .filter(|(place, _)| *place != left);
            Self::of(
                &kept
                    .flat_map(|(_, block)| block.iter().copied())
                    .collect::<Vec<_>>(),
            )
        };
        let each = (0..blocks.len()).map(without).collect::<Option<Vec<_>>>()?;
        let error = |of: fn(&Self) -> f64| {
            let mean = each.iter().map(of).sum::<f64>() / count;
            let scatter: f64 = each.iter().map(|one| (of(one) - mean).powi(2)).sum();
            (scatter * (count - 1.0) / count).sqrt()
        };
        (!each.is_empty()).then(|| Self {
            p10: error(|one| one.p10),
            p50: error(|one| one.p50),
            p90: error(|one| one.p90),
        })
    }
}

/// A chance with its sampling error.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Chance {
    /// Share of the sample, 0 to 1.
    pub chance: f64,
    /// Standard error from the scatter of the blocks; infinite with a single block. It is never below 1 in n + 2, the deviation that
    /// Laplace's rule of succession leaves where all samples agree: blocks that happen to be alike prove nothing finer.
    pub error: f64,
}

impl Chance {
    /// Of a condition on the values of equal blocks; nothing of none.
    pub fn of<'a>(
        blocks: impl Iterator<Item = &'a [f64]>,
        holds: impl Fn(f64) -> bool,
    ) -> Option<Self> {
        let share = |block: &[f64]| {
            let held = block.iter().filter(|value| holds(**value)).count();
            held as f64 / block.len() as f64
        };
        let mut samples = 0;
        let shares: Vec<f64> = blocks
            .inspect(|block| samples += block.len())
            .map(share)
            .collect();
        let count = shares.len() as f64;
        if shares.is_empty() {
            return None;
        }
        let chance = shares.iter().sum::<f64>() / count;
        let variance = shares
            .iter()
            .map(|share| (share - chance).powi(2))
            .sum::<f64>()
            / (count - 1.0);
        Some(Self {
            chance,
            error: if shares.len() > 1 {
                (variance / count).sqrt().max(1.0 / (samples as f64 + 2.0))
            } else {
                f64::INFINITY
            },
        })
    }
}

#[cfg(test)]
mod tests {
    use super::super::hypercube::Hypercube;
    use super::super::range::Range;
    use super::*;

    /// 0 to 100: numpy.quantile gives 10, 50, 90; of [1, 2] 1.1, 1.5, 1.9.
    #[test]
    fn quantiles_are_those_of_type_seven() {
        let values: Vec<f64> = (0..=100).rev().map(f64::from).collect();
        let found = Quantiles::of(&values).unwrap();
        assert_eq!((found.p10, found.p50, found.p90), (10.0, 50.0, 90.0));
        let two = Quantiles::of(&[2.0, 1.0]).unwrap();
        assert!((two.p10 - 1.1).abs() < 1e-12 && (two.p90 - 1.9).abs() < 1e-12);
        assert_eq!(Quantiles::of(&[]), None);
    }

    /// A linear normal model: y = 3 a + 4 b is normal with deviation 5; P(y > 2) = 1 − Φ(0.4) = 0.344578; P90 = 5 · 1.281552.
    /// Over repeated seeds about 95 in 100 intervals of two errors hold the chance; with 12 blocks Student's t gives 0.93.
    #[test]
    fn chance_and_error_of_a_linear_normal_model() {
        let normal = Range::Normal {
            mean: 0.0,
            deviation: 1.0,
        };
        let (mut held, seeds) = (0, 200);
        let mut p90 = 0.0;
        for seed in 0..seeds {
            let cube = Hypercube {
                seed,
                points: 50,
                quantities: 2,
            };
            let blocks: Vec<Vec<f64>> = (0..12)
                .map(|block| {
                    let y = |point: &Vec<f64>| {
                        3.0 * normal.at(point[0]).unwrap() + 4.0 * normal.at(point[1]).unwrap()
                    };
                    cube.block(block).iter().map(y).collect()
                })
                .collect();
            let chance = Chance::of(blocks.iter().map(Vec::as_slice), |y| y > 2.0).unwrap();
            held += u32::from((chance.chance - 0.344_578).abs() < 2.0 * chance.error);
            p90 += Quantiles::of(&blocks.concat()).unwrap().p90 / seeds as f64;
        }
        // 0.93 of 200 with a standard error of 0.018: three of those.
        assert!(
            (0.876..=0.985).contains(&(f64::from(held) / seeds as f64)),
            "{held}"
        );
        // The mean of 200 sample quantiles of 600 points; a single one has an error of about 0.25.
        assert!((p90 - 5.0 * 1.281_552).abs() < 0.06, "{p90}");
    }

    /// The errors of quantiles over repeated seeds, on the same linear normal model, whose quantiles are 5 z: about 93 in 100 intervals
    /// of two errors should hold them with 12 blocks (Student's t with 11 degrees of freedom). Leaving out blocks makes the errors of
    /// quantiles less smooth than those of means, so a few more may miss; too many or none would show an error that is none.
    #[test]
    fn errors_of_quantiles_hold_over_repeated_seeds() {
        let normal = Range::Normal {
            mean: 0.0,
            deviation: 1.0,
        };
        let seeds = 200;
        let mut held = [0_u32; 3];
        for seed in 0..seeds {
            let cube = Hypercube {
                seed: 1000 + seed,
                points: 50,
                quantities: 2,
            };
            let y = |point: &Vec<f64>| {
                3.0 * normal.at(point[0]).unwrap() + 4.0 * normal.at(point[1]).unwrap()
            };
            let blocks: Vec<Vec<f64>> = (0..12)
                .map(|block| cube.block(block).iter().map(y).collect())
                .collect();
            let found = Quantiles::of(&blocks.concat()).unwrap();
            let error = Quantiles::errors(&blocks).unwrap();
            let each = [
                (found.p10, -5.0 * 1.281_552, error.p10),
                (found.p50, 0.0, error.p50),
                (found.p90, 5.0 * 1.281_552, error.p90),
            ];
            for (held, (found, exact, error)) in held.iter_mut().zip(each) {
                *held += u32::from((found - exact).abs() < 2.0 * error);
            }
        }
        println!("held of {seeds}: {held:?}");
        for held in held {
            let share = f64::from(held) / seeds as f64;
            assert!((0.84..=0.985).contains(&share), "{share}");
        }
    }

    /// With a single block nothing tells how far it is off.
    #[test]
    fn one_block_has_no_error() {
        assert_eq!(Quantiles::errors(&[vec![1.0, 2.0, 3.0]]), None);
    }
}
