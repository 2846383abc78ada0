//! Independent replicate Latin hypercubes.

use rand_pcg::Pcg32;
use rand_pcg::rand_core::Rng as _;

/// Latin hypercubes in blocks: in each block every quantity is drawn once from each of equally likely slices. Blocks are
/// independent, so their scatter tells the sampling error.
///
/// A point depends on the seed, its block and its place alone, so it is the same whichever thread asks for it.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub struct Hypercube {
    /// Seed.
    pub seed: u64,
    /// Points of a block.
    pub points: usize,
    /// Quantities.
    pub quantities: usize,
}

/// Keeps the streams of orders apart from those of places within a slice.
const ORDERS: u64 = 1 << 40;

impl Hypercube {
    /// The points of a block: a share of one, strictly between 0 and 1, for each quantity.
    pub fn block(&self, block: usize) -> Vec<Vec<f64>> {
        let orders: Vec<Vec<usize>> = (0..self.quantities)
            .map(|quantity| self.order(block, quantity))
            .collect();
        (0..self.points)
            .map(|point| {
                let index = (block * self.points + point) as u64;
                let mut random = Pcg32::new(self.seed, index);
                let within = |order: &Vec<usize>| {
                    (order[point] as f64 + open_share(random.next_u32())) / self.points as f64
                };
                orders.iter().map(within).collect()
            })
            .collect()
    }

    /// In which order the points of a block take the slices of a quantity (Fisher and Yates).
    fn order(&self, block: usize, quantity: usize) -> Vec<usize> {
        let stream = ORDERS + (block * self.quantities + quantity) as u64;
        let mut random = Pcg32::new(self.seed, stream);
        let mut order: Vec<usize> = (0..self.points).collect();
        for i in (1..self.points).rev() {
            // The bias of a multiplied 32-bit number over some hundred slices is below 1e-7.
            let other = ((u64::from(random.next_u32()) * (i as u64 + 1)) >> 32) as usize;
            order.swap(i, other);
        }
        order
    }
}

/// A share of one from 32 bits, never 0 or 1.
fn open_share(bits: u32) -> f64 {
    (f64::from(bits) + 0.5) / (f64::from(u32::MAX) + 1.0)
}

#[cfg(test)]
mod tests {
    use super::*;

    /// What makes a Latin hypercube: every slice of every quantity is met exactly once in a block.
    #[test]
    fn every_slice_is_met_once() {
        let cube = Hypercube {
            seed: 7,
            points: 50,
            quantities: 4,
        };
        for block in 0..3 {
            let points = cube.block(block);
            for quantity in 0..4 {
                let mut slices: Vec<usize> = points
                    .iter()
                    .map(|point| (point[quantity] * 50.0) as usize)
                    .collect();
                slices.sort_unstable();
                assert_eq!(slices, (0..50).collect::<Vec<_>>());
            }
        }
    }

    #[test]
    fn blocks_and_quantities_differ_and_the_seed_decides() {
        let cube = Hypercube {
            seed: 7,
            points: 20,
            quantities: 3,
        };
        assert_eq!(cube.block(4), cube.block(4));
        assert_ne!(cube.block(4), cube.block(5));
        assert_ne!(cube.block(4), Hypercube { seed: 8, ..cube }.block(4));
        let points = cube.block(0);
        assert!(points.iter().any(|point| (point[0] - point[1]).abs() > 0.1));
    }

    /// Quantities are drawn independently: over many points their correlation is near nothing (standard error 1/√4000 = 0.016).
    #[test]
    fn quantities_are_not_correlated() {
        let cube = Hypercube {
            seed: 1,
            points: 40,
            quantities: 2,
        };
        let points: Vec<Vec<f64>> = (0..100).flat_map(|block| cube.block(block)).collect();
        let product: f64 = points
            .iter()
            .map(|point| (point[0] - 0.5) * (point[1] - 0.5))
            .sum();
        let correlation = product / points.len() as f64 * 12.0;
        assert!(correlation.abs() < 0.06, "{correlation}");
    }
}
