//! What to find out next: how much less often one would choose wrong if a quantity were known.

/// Classes that a known quantity is told apart by: coarse, so that each holds enough samples to choose in.
const CLASSES: usize = 6;

/// How often the system that is cheapest on the mean is not the cheapest, when nothing more is known.
/// `costs` holds one row a sample with the cost of every system; nothing of none.
pub fn chance_wrong(costs: &[Vec<f64>]) -> Option<f64> {
    let rows: Vec<usize> = (0..costs.len()).collect();
    wrong(&rows, costs).map(|count| count as f64 / costs.len() as f64)
}

/// The same when a quantity is known (`known`, one value a sample), and the choice follows what it turns out to be. Where it would
/// not pay to choose by it, it is as if it were not known.
pub fn chance_wrong_knowing(known: &[f64], costs: &[Vec<f64>]) -> Option<f64> {
    let unknown = chance_wrong(costs)?;
    let mut order: Vec<usize> = (0..costs.len()).collect();
    order.sort_by(|&a, &b| known[a].total_cmp(&known[b]));
    let mut count = 0;
    for class in 0..CLASSES {
        let (first, end) = (
            class * order.len() / CLASSES,
            (class + 1) * order.len() / CLASSES,
        );
        count += wrong(&order[first..end], costs).unwrap_or(0);
    }
    Some((count as f64 / costs.len() as f64).min(unknown))
}

/// In how many of some samples the system that is cheapest on their mean is not the cheapest.
fn wrong(rows: &[usize], costs: &[Vec<f64>]) -> Option<usize> {
    let systems = costs.get(*rows.first()?)?.len();
    let mean = |system: usize| rows.iter().map(|&row| costs[row][system]).sum::<f64>();
    let chosen = (0..systems).min_by(|&a, &b| mean(a).total_cmp(&mean(b)))?;
    let beaten = |row: &&usize| costs[**row].iter().any(|cost| *cost < costs[**row][chosen]);
    Some(rows.iter().filter(beaten).count())
}

#[cfg(test)]
mod tests {
    use super::*;

    /// One system costs 1, the other u, even from 0 to 3: the second is dearer on the mean (1.5) and cheaper one time in three.
    /// Knowing u to a sixth (0.5 each) one is never wrong; knowing something else helps nothing.
    #[test]
    fn knowing_what_decides_leaves_nothing_to_get_wrong() {
        let u: Vec<f64> = (0..600).map(|i| (f64::from(i) + 0.5) / 200.0).collect();
        let costs: Vec<Vec<f64>> = u.iter().map(|u| vec![1.0, *u]).collect();
        assert!((chance_wrong(&costs).unwrap() - 1.0 / 3.0).abs() < 1e-12);
        assert_eq!(chance_wrong_knowing(&u, &costs), Some(0.0));
        // 7 is prime to 600, so this column says nothing about u.
        let other: Vec<f64> = (0..600).map(|i| f64::from(i * 7 % 600)).collect();
        assert!(chance_wrong_knowing(&other, &costs).unwrap() > 0.3);
        assert_eq!(chance_wrong(&[]), None);
    }
}
