//! Swings: each lever from its low to its high, the others as they are.

use super::lever::Lever;
use super::measure::Measure;
use super::pair::{CHOICE, Pair};
use super::spread::{Spread, usual_spread};
use crate::problem::Problems;

/// What one lever moves.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Swing {
    /// The lever.
    pub lever: Lever,
    /// Where it stands.
    pub now: f64,
    /// How far it is moved.
    pub spread: Spread,
    /// How much less than today's system the choice has with the lever low.
    pub at_low: f64,
    /// The same with the lever high.
    pub at_high: f64,
}

impl Swing {
    /// From end to end.
    pub fn length(&self) -> f64 {
        (self.at_high - self.at_low).abs()
    }
}

/// The swings of a measure over the usual spreads, the longest first; levers that do not move it are left out.
///
/// # Errors
/// When a year cannot be run or billed.
pub fn swings(pair: &Pair, measure: Measure) -> Result<Vec<Swing>, Problems> {
    let levers: Vec<(Lever, f64, Spread)> = Lever::ALL
        .iter()
        .filter_map(|&lever| {
            let now = lever.now(pair.case(), CHOICE)?;
            Some((lever, now, usual_spread(lever, pair.case())?))
        })
        .collect();
    let ends = levers
        .iter()
        .flat_map(|(lever, _, spread)| [(*lever, spread.low), (*lever, spread.high)]);
    let settings: Vec<_> = ends.map(|end| vec![end]).collect();
    let more = pair.at_each(&settings, |compared| compared.more(measure))?;
    let mut swings: Vec<Swing> = levers
        .iter()
        .zip(more.chunks(2))
        .filter_map(|(&(lever, now, spread), ends)| {
            Some(Swing {
                lever,
                now,
                spread,
                at_low: -ends[0]?,
                at_high: -ends[1]?,
            })
        })
        .filter(|swing| swing.length() > 0.0)
        .collect();
    swings.sort_by(|a, b| b.length().total_cmp(&a.length()));
    Ok(swings)
}
