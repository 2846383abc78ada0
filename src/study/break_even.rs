//! Break-even: where a lever makes a choice cost what today's system costs.

use argmin::core::{CostFunction, Error, Executor, State as _};
use argmin::solver::brent::BrentRoot;

use super::case::{Case, Contender};
use super::lever::Lever;
use super::outcome::{Outcome, price};
use crate::problem::Problems;

/// The range of a lever is looked through in this many steps, so that several crossings are all found.
const STEPS: usize = 8;
/// A crossing is solved to this share of the lever's range.
const TOLERANCE: f64 = 1e-7;
/// Iterations of Brent's method.
const MAX_ITERATIONS: u64 = 100;

/// A value of a lever at which a choice costs what today's system costs.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Crossing {
    /// The value.
    pub value: f64,
    /// Whether the choice is the cheaper one above it.
    pub cheaper_above: bool,
}

/// What a lever does to the yearly saving of a choice.
#[derive(Debug, Clone, PartialEq)]
pub struct BreakEven {
    /// The lever.
    pub lever: Lever,
    /// Where it stands now.
    pub now: f64,
    /// Every crossing within its range, rising; none when there is no such value.
    pub crossings: Vec<Crossing>,
}

/// Yearly cost of a choice less that of today's system, as a function of a lever.
struct Dearer<'a> {
    case: &'a Case,
    outcomes: &'a [Outcome],
    lever: Lever,
    choice: usize,
}

impl Dearer<'_> {
    fn at(&self, value: f64) -> Result<f64, Problems> {
        // Only the two systems that are compared are moved and run.
        let mut pair = Case {
            contenders: vec![
                self.case.contenders[0].clone(),
                self.case.contenders[self.choice].clone(),
            ],
            ..self.case.clone()
        };
        self.lever.apply(value, &mut pair, 1)?;
        let by_price = |contender: &Contender| contender.system.heating.follows_prices();
        if self.lever.moves_only_prices() && !pair.contenders.iter().any(by_price) {
            let cost = |contender: usize, outcome: &Outcome| {
                let fuel = outcome.fuel.as_ref();
                let years = &pair.site.years;
                price(
                    &pair.contenders[contender],
                    years,
                    &outcome.electricity,
                    fuel,
                )
            };
            Ok(cost(1, &self.outcomes[self.choice])?.total - cost(0, &self.outcomes[0])?.total)
        } else {
            let outcomes = pair.run()?;
            Ok(outcomes[1].costs.total - outcomes[0].costs.total)
        }
    }
}

impl CostFunction for &Dearer<'_> {
    type Param = f64;
    type Output = f64;

    fn cost(&self, value: &f64) -> Result<f64, Error> {
        self.at(*value).map_err(Error::new)
    }
}

/// Finds where a lever makes a choice cost what today's system costs; nothing when the choice has no such quantity.
///
/// `outcomes` are those of `case`; `choice` is the place of a contender after the first.
///
/// # Errors
/// When a case cannot be run with the lever moved.
pub fn break_even(
    case: &Case,
    outcomes: &[Outcome],
    choice: usize,
    lever: Lever,
) -> Result<Option<BreakEven>, Problems> {
    let Some(now) = lever.now(case, choice) else {
        return Ok(None);
    };
    let bound = lever.bound();
    let width = bound.high - bound.low;
    let dearer = Dearer {
        case,
        outcomes,
        lever,
        choice,
    };
    let values: Vec<f64> = (0..=STEPS)
        .map(|i| bound.low + width * i as f64 / STEPS as f64)
        .collect();
    let costs = values
        .iter()
        .map(|&value| dearer.at(value))
        .collect::<Result<Vec<_>, _>>()?;
    let mut crossings = Vec::new();
    for i in 0..STEPS {
        let (low, high) = (costs[i], costs[i + 1]);
        if (low > 0.0) == (high > 0.0) {
            continue;
        }
        let solver = BrentRoot::new(values[i], values[i + 1], TOLERANCE * width);
        let solved = Executor::new(&dearer, solver)
            .configure(|state| state.param(values[i]).max_iters(MAX_ITERATIONS))
            .run();
        if let Ok(solved) = solved
            && let Some(&value) = solved.state().get_best_param()
        {
            crossings.push(Crossing {
                value,
                cheaper_above: high < low,
            });
        }
    }
    Ok(Some(BreakEven {
        lever,
        now,
        crossings,
    }))
}
