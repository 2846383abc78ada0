//! All uncertain levers moved together, every system run, block by block.

use rayon::prelude::*;

use super::hypercube::Hypercube;
use super::range::{Range, correlated};
use crate::problem::{Place, Problem, Problems};
use crate::study::case::Case;
use crate::study::lever::{Again, Lever};

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

/// Draws samples of a case.
#[derive(Debug, Clone)]
pub struct Sampler {
    case: Case,
    uncertain: Vec<Uncertain>,
    /// Correlation of the price of electricity with that of fuel.
    correlation: f64,
    cube: Hypercube,
}

/// What one system came to in one sample.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Drawn {
    /// Yearly cost.
    pub cost: f64,
    /// Carbon, kg CO2e.
    pub carbon_kg: f64,
    /// SPF with all auxiliaries.
    pub spf_h4: Option<f64>,
    /// Hours with backup or immersion heater.
    pub hours_backup: f64,
    /// Lowest indoor temperature, °C.
    pub min_indoor_c: f64,
}

/// One sample.
#[derive(Debug, Clone, PartialEq)]
pub struct Sample {
    /// Share of one drawn for each lever, in their order.
    pub shares: Vec<f64>,
    /// Every contender, today's first.
    pub systems: Vec<Drawn>,
}

impl Sampler {
    /// A sampler of `points` samples a block.
    ///
    /// # Errors
    /// No uncertain lever, a range that is none or that reaches what is impossible, a correlation outside −1 to 1.
    pub fn new(
        case: Case,
        uncertain: Vec<Uncertain>,
        correlation: f64,
        seed: u64,
        points: usize,
    ) -> Result<Self, Problems> {
        let mut problems = Problems::new();
        let refuse = |field: &str, found: String, allowed: &str, remedy: &str| {
            Problem::new(Place::field(field), found, allowed, remedy)
        };
        if uncertain.is_empty() {
            problems.push(refuse(
                "odds",
                "no uncertain lever".to_owned(),
                "at least one",
                "give a lever a range",
            ));
        }
        if correlation.is_nan() || correlation.abs() > 1.0 {
            problems.push(refuse(
                "price_correlation",
                format!("a correlation of {correlation}"),
                "from -1 to 1",
                "0 means that the two prices go their own ways",
            ));
        }
        for one in &uncertain {
            for (contender, range) in one.ranges.iter().enumerate() {
                let Some(range) = range else { continue };
                problems.take(range.check(one.lever.name()));
                // One in a thousand beyond is drawn now and then: it must be possible too.
                for end in [range.at(0.0005), range.at(0.9995)].into_iter().flatten() {
                    problems.take(one.lever.check(end, &case, contender));
                }
            }
        }
        let cube = Hypercube {
            seed,
            points,
            quantities: uncertain.len(),
        };
        problems.or(Self {
            case,
            uncertain,
            correlation,
            cube,
        })
    }

    /// The levers that are moved.
    pub fn uncertain(&self) -> &[Uncertain] {
        &self.uncertain
    }

    /// The samples of a block, in their order whatever the number of threads.
    ///
    /// # Errors
    /// When a bill cannot be made.
    pub fn block(&self, block: usize) -> Result<Vec<Sample>, Problems> {
        let points = self.cube.block(block);
        let drawn: Vec<Result<Sample, Problems>> = points
            .into_par_iter()
            .map(|shares| self.sample(shares))
            .collect();
        drawn.into_iter().collect()
    }

    fn sample(&self, mut shares: Vec<f64>) -> Result<Sample, Problems> {
        let place = |lever| self.uncertain.iter().position(|one| one.lever == lever);
        if let (Some(electricity), Some(fuel)) =
            (place(Lever::ElectricityRate), place(Lever::FuelRate))
        {
            shares[fuel] = correlated(shares[fuel], shares[electricity], self.correlation);
        }
        let mut case = self.case.clone();
        for contender in 0..case.contenders.len() {
            let moves: Vec<(Lever, f64)> = self
                .uncertain
                .iter()
                .zip(&shares)
                .filter_map(|(one, &share)| {
                    Some((one.lever, one.ranges.get(contender)?.as_ref()?.at(share)?))
                })
                .collect();
            if !moves.is_empty() {
                case.apply(contender, &moves)?;
            }
        }
        let systems = case.contenders.iter().map(|contender| {
            let outcome = case.run_one(contender, None)?;
            let sums = outcome.mean_sums();
            Ok(Drawn {
                cost: outcome.costs.total,
                carbon_kg: sums.carbon_kg,
                spf_h4: sums.spf_h4(),
                hours_backup: outcome.mean(|year| f64::from(year.hours_backup)),
                min_indoor_c: outcome
                    .years
                    .iter()
                    .map(|year| year.min_indoor_c)
                    .fold(f64::INFINITY, f64::min),
            })
        });
        let systems = systems.collect::<Result<_, Problems>>()?;
        Ok(Sample { shares, systems })
    }
}

impl Uncertain {
    /// The usual spreads of every lever of a case that is uncertain for money, as triangles about where each stands. The shares drawn
    /// are the same for every choice: what makes one machine fall short in this home makes another fall short too.
    pub fn usual(case: &Case) -> Vec<Self> {
        let each = Lever::ALL.iter().filter(|lever| {
            lever.again() != Again::Bills
                || matches!(lever, Lever::ElectricityRate | Lever::FuelRate)
        });
        each.filter_map(|&lever| {
            let mut from = None;
            let ranges: Vec<Option<Range>> = (0..case.contenders.len())
                .map(|contender| {
                    let shared = matches!(lever.again(), Again::Everyone | Again::Bills);
                    if contender == 0 || (shared && contender > 1) {
                        return None;
                    }
                    let spread = super::super::spread::spread_of(lever, case, contender)?;
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
