//! Which levers are not known for certain, and within what: the usual spreads, and what a brief declares in their place.

use super::range::Range;
use crate::problem::Problems;
use crate::study::case::Case;
use crate::study::lever::Lever;
use crate::study::spread::spread_of;

/// A lever that is not known for certain.
#[derive(Debug, Clone, PartialEq)]
pub struct Uncertain {
    /// The lever.
    pub lever: Lever,
    /// What it may be for each contender of the case; nothing where a contender has no such quantity. What belongs to the home or
    /// the supply stands at the first choice alone and moves for all.
    pub ranges: Vec<Option<Range>>,
    /// Where the ranges are from.
    pub from: String,
}

/// A range that somebody gave for a lever.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Declared {
    /// The lever.
    pub lever: Lever,
    /// The choice it belongs to; the first choice for what belongs to the home or the supply.
    pub choice: usize,
    /// What it may be.
    pub range: Range,
}

/// Everything about a case that is not known for certain.
#[derive(Debug, Clone, PartialEq)]
pub struct Doubts {
    /// The levers.
    pub levers: Vec<Uncertain>,
    /// Correlation of the price of electricity with that of fuel.
    pub price_correlation: f64,
}

/// Correlation of the prices of electricity and gas where nobody has said better: gas stations set the price of electricity in many
/// hours. Common practice, no source.
pub const PRICE_CORRELATION: f64 = 0.6;

/// Where a range of a brief is from.
const DECLARED: &str = "declared";

impl Doubts {
    /// The usual spreads, with what is declared in their place.
    pub fn of(case: &Case, declared: &[Declared], price_correlation: Option<f64>) -> Self {
        let mut levers = Uncertain::usual(case);
        for one in declared {
            let place = levers.iter().position(|other| other.lever == one.lever);
            let place = place.unwrap_or_else(|| {
                levers.push(Uncertain {
                    lever: one.lever,
                    ranges: vec![None; case.contenders.len()],
                    from: DECLARED.to_owned(),
                });
                levers.len() - 1
            });
            if let Some(range) = levers[place].ranges.get_mut(one.choice) {
                *range = Some(one.range);
                levers[place].from = DECLARED.to_owned();
            }
        }
        Self {
            levers,
            price_correlation: price_correlation.unwrap_or(PRICE_CORRELATION),
        }
    }
}

impl Declared {
    /// Checks that the range is one and that nothing it reaches is impossible for the case.
    ///
    /// # Errors
    /// What is wrong, in words.
    pub fn check(&self, case: &Case) -> Result<(), Problems> {
        possible(self.lever, self.range, case, self.choice)
    }
}

/// Checks a range, and its ends: one in a thousand beyond is drawn now and then, so it must be possible too.
pub(super) fn possible(
    lever: Lever,
    range: Range,
    case: &Case,
    choice: usize,
) -> Result<(), Problems> {
    range.check(lever.name())?;
    let mut problems = Problems::new();
    for end in [range.at(0.0005), range.at(0.9995)].into_iter().flatten() {
        // Three decimals are told.
        let end = (end * 1000.0).round() / 1000.0;
        problems.take(lever.check(end, case, choice));
    }
    problems.or(())
}

impl Uncertain {
    /// Whether the lever belongs to the home or the supply.
    pub fn is_shared(&self) -> bool {
        self.lever.is_shared()
    }

    /// The range of a choice, that of the first choice where it belongs to the home or the supply.
    pub fn of_choice(&self, choice: usize) -> Option<Range> {
        let place = if self.lever.is_shared() { 1 } else { choice };
        *self.ranges.get(place)?
    }

    /// The usual spreads of every lever of a case that is uncertain and moves a year, as triangles about where each stands. The shares
    /// drawn are the same for every choice: what makes one machine fall short in this home makes another fall short too.
    pub fn usual(case: &Case) -> Vec<Self> {
        let each = Lever::ALL.iter().filter(|lever| !lever.is_money());
        each.filter_map(|&lever| {
            let mut from = None;
            let ranges: Vec<Option<Range>> = (0..case.contenders.len())
                .map(|contender| {
                    if contender == 0 || (lever.is_shared() && contender > 1) {
                        return None;
                    }
                    let spread = spread_of(lever, case, contender)?;
                    from = Some(spread.from.to_owned());
                    let likely = lever.now(case, contender)?.clamp(spread.low, spread.high);
                    Some(Range::Triangle {
                        low: spread.low,
                        likely,
                        high: spread.high,
                    })
                })
                .collect();
            Some(Self {
                lever,
                ranges,
                from: from?,
            })
        })
        .collect()
    }
}
