//! Break-even: where a lever makes a choice equal today's system.

use argmin::core::{CostFunction, Error, Executor, State as _};
use argmin::solver::brent::BrentRoot;
use rayon::prelude::*;

use super::lever::Lever;
use super::measure::Measure;
use super::pair::{CHOICE, Pair};
use crate::bounds::Bound;
use crate::problem::{Place, Problem, Problems};

/// The range of a lever is looked through in this many steps, so that several crossings are all found.
const STEPS: usize = 8;
/// A crossing is solved to this share of the lever's range.
const TOLERANCE: f64 = 1e-7;
/// Iterations of Brent's method; each at least halves the interval every second step.
const MAX_ITERATIONS: u64 = 100;

/// A value of a lever at which a choice equals today's system.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Crossing {
    /// The value.
    pub value: f64,
    /// Whether the choice is the better one above it.
    pub better_above: bool,
    /// How much more the choice still has there. More than a cent where the year jumps: moving a lever by a hair can move a
    /// block of hot water by an hour or bring the brine to the machine's limit, and then no value gives equality.
    pub left: f64,
}

/// What a lever does to a choice, measured against today's system.
#[derive(Debug, Clone, PartialEq)]
pub struct BreakEven {
    /// The lever.
    pub lever: Lever,
    /// What the two are compared by.
    pub measure: Measure,
    /// Where the lever stands now.
    pub now: f64,
    /// What was looked at.
    pub range: Bound,
    /// How much more the choice has along the range, rising in the lever.
    pub more: Vec<(f64, f64)>,
    /// Every crossing within the range, rising; none when there is no such value.
    pub crossings: Vec<Crossing>,
}

/// How much more the choice has, as a function of the lever.
struct More<'a> {
    pair: &'a Pair,
    lever: Lever,
    measure: Measure,
}

impl CostFunction for &More<'_> {
    type Param = f64;
    type Output = f64;

    fn cost(&self, value: &f64) -> Result<f64, Error> {
        let compared = self.pair.at(&[(self.lever, *value)]).map_err(Error::new)?;
        // Only measures that could be told at the steps are solved for.
        Ok(compared.more(self.measure).unwrap_or(f64::NAN))
    }
}

/// Finds where a lever makes a choice equal today's system, by every measure asked for that can be told; empty when the choice
/// has no such quantity. A measure that does not depend on the lever is left out.
///
/// # Errors
/// When a case cannot be run with the lever moved, or a crossing that was enclosed cannot be solved.
pub fn break_even(
    pair: &Pair,
    lever: Lever,
    measures: &[Measure],
) -> Result<Vec<BreakEven>, Problems> {
    let (Some(now), Some(range)) = (
        lever.now(pair.case(), CHOICE),
        lever.range(pair.case(), CHOICE),
    ) else {
        return Ok(Vec::new());
    };
    let width = range.high - range.low;
    let values: Vec<f64> = (0..=STEPS)
        .map(|i| range.low + width * i as f64 / STEPS as f64)
        .collect();
    let settings: Vec<_> = values.iter().map(|&value| vec![(lever, value)]).collect();
    // One run tells all measures.
    let seen = pair.at_each(&settings, |compared| {
        measures
            .iter()
            .map(|&m| compared.more(m))
            .collect::<Vec<_>>()
    })?;
    let mut found = Vec::new();
    for (i, &measure) in measures.iter().enumerate() {
        let Some(more) = seen.iter().map(|all| all[i]).collect::<Option<Vec<f64>>>() else {
            continue;
        };
        if more.iter().all(|one| *one == more[0]) {
            continue;
        }
        let function = More {
            pair,
            lever,
            measure,
        };
        let enclosed: Vec<usize> = (0..STEPS)
            .filter(|&i| (more[i] > 0.0) != (more[i + 1] > 0.0))
            .collect();
        let crossings: Vec<Result<Crossing, Problems>> = enclosed
            .into_par_iter()
            .map(|i| {
                let (value, left) = solve(
                    &function,
                    (values[i], more[i]),
                    (values[i + 1], more[i + 1]),
                    width,
                )?;
                let better_above = more[i + 1] < more[i];
                Ok(Crossing {
                    value,
                    better_above,
                    left,
                })
            })
            .collect();
        found.push(BreakEven {
            lever,
            measure,
            now,
            range,
            more: values.iter().copied().zip(more.iter().copied()).collect(),
            crossings: crossings.into_iter().collect::<Result<_, _>>()?,
        });
    }
    Ok(found)
}

/// Solves an enclosed crossing; gives the value and what is left there.
fn solve(
    function: &More<'_>,
    low: (f64, f64),
    high: (f64, f64),
    width: f64,
) -> Result<(f64, f64), Problems> {
    // An end that is a root needs no search, and Brent's method wants ends of different sign.
    if let Some(end) = [low, high].iter().find(|end| end.1 == 0.0) {
        return Ok(*end);
    }
    let refuse = |why: String| {
        let field = Place::field(function.lever.name());
        Problems::from(Problem::new(
            field,
            format!(
                "the break-even between {} and {} was not solved: {why}",
                low.0, high.0
            ),
            "",
            "please report this brief as a fault of the program",
        ))
    };
    let solver = BrentRoot::new(low.0, high.0, TOLERANCE * width);
    let solved = Executor::new(function, solver)
        .configure(|state| state.param(low.0).max_iters(MAX_ITERATIONS))
        .run()
        .map_err(|error| refuse(error.to_string()))?;
    let state = solved.state();
    match state.get_best_param() {
        Some(&value) if state.get_iter() < MAX_ITERATIONS => {
            let left = function
                .cost(&value)
                .map_err(|error| refuse(error.to_string()))?;
            Ok((value, left))
        }
        _ => Err(refuse(format!(
            "{MAX_ITERATIONS} iterations were not enough"
        ))),
    }
}
