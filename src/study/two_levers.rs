//! Two levers at once: the saving over a grid.

use super::lever::Lever;
use super::pair::{CHOICE, Pair};
use crate::bounds::Bound;
use crate::problem::{Place, Problem, Problems};

/// The yearly saving over a grid of two levers.
#[derive(Debug, Clone, PartialEq)]
pub struct TwoLevers {
    /// Lever along x and its values, rising.
    pub x: (Lever, Vec<f64>),
    /// Lever along y and its values, rising.
    pub y: (Lever, Vec<f64>),
    /// Where both stand.
    pub now: (f64, f64),
    /// Today's yearly cost less the choice's: one row a value of y.
    pub saving: Vec<Vec<f64>>,
}

/// Moves two different levers over `steps` values each (at least 2) and looks at the yearly saving.
///
/// # Errors
/// A lever that the choice does not have, the same lever twice, a year that cannot be run or billed.
pub fn two_levers(pair: &Pair, x: Lever, y: Lever, steps: usize) -> Result<TwoLevers, Problems> {
    let steps = steps.max(2);
    if x == y {
        return Err(Problem::new(
            Place::field(x.name()),
            "the same lever twice",
            "two different levers",
            "name another lever for one of them",
        )
        .into());
    }
    let (xs, ys) = match (values(pair, x, steps), values(pair, y, steps)) {
        (Ok(xs), Ok(ys)) => (xs, ys),
        (xs, ys) => {
            let mut problems = Problems::new();
            problems.extend(xs.err().unwrap_or_default());
            problems.extend(ys.err().unwrap_or_default());
            return Err(problems);
        }
    };
    let settings: Vec<_> = ys
        .iter()
        .flat_map(|&b| xs.iter().map(move |&a| vec![(x, a), (y, b)]))
        .collect();
    let saving = pair.at_each(&settings, |compared| {
        let [today, choice] = &compared.outcomes;
        today.costs.total - choice.costs.total
    })?;
    let now = |lever: Lever| lever.now(pair.case(), CHOICE).unwrap_or(f64::NAN);
    Ok(TwoLevers {
        now: (now(x), now(y)),
        saving: saving.chunks(xs.len()).map(<[f64]>::to_vec).collect(),
        x: (x, xs),
        y: (y, ys),
    })
}

/// Even steps over what a lever is looked at; prices about where they are likely to be.
fn values(pair: &Pair, lever: Lever, steps: usize) -> Result<Vec<f64>, Problems> {
    /// Prices from half to twice today's: beyond that the household's own point is lost in a corner.
    const PRICES: (f64, f64) = (0.4, 2.0);
    let Some(Bound { low, high, .. }) = lever.range(pair.case(), CHOICE) else {
        // The check says why.
        lever.check(f64::NAN, pair.case(), CHOICE)?;
        return Ok(Vec::new());
    };
    let (low, high) = match lever {
        Lever::ElectricityRate | Lever::FuelRate => PRICES,
        _ => (low, high),
    };
    Ok((0..steps)
        .map(|i| low + (high - low) * i as f64 / (steps - 1) as f64)
        .collect())
}
