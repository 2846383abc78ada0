//! All uncertain levers moved together, every system run, block by block.

use std::ops::Range;

use rayon::prelude::*;

use super::hypercube::Hypercube;
use super::past::Pasts;
use super::range::correlated;
use super::uncertain::{Doubts, Uncertain, possible};
use crate::problem::{Place, Problem, Problems};
use crate::study::ageing::Ageing;
use crate::study::case::Case;
use crate::study::lever::Lever;
use crate::study::outcome::Outcome;

/// Draws samples of a case.
#[derive(Debug, Clone)]
pub struct Sampler {
    case: Case,
    doubts: Doubts,
    cube: Hypercube,
    pasts: Pasts,
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
    /// Share of one drawn for each lever, in their order; with several years of weather one more, which chose the year.
    pub shares: Vec<f64>,
    /// Every contender, today's first.
    pub systems: Vec<Drawn>,
}

impl Sampler {
    /// A sampler of `points` samples a block.
    ///
    /// # Errors
    /// No uncertain lever, a range that is none or that reaches what is impossible, a correlation outside −1 to 1; a bill that cannot
    /// be made.
    pub fn new(mut case: Case, doubts: Doubts, seed: u64, points: usize) -> Result<Self, Problems> {
        let mut problems = Problems::new();
        let refuse = |field: &str, found: String, allowed: &str, remedy: &str| {
            Problem::new(Place::field(field), found, allowed, remedy)
        };
        if doubts.levers.is_empty() {
            problems.push(refuse(
                "odds",
                "no uncertain lever".to_owned(),
                "at least one",
                "give a lever a range",
            ));
        }
        let correlation = doubts.price_correlation;
        if correlation.is_nan() || correlation.abs() > 1.0 {
            problems.push(refuse(
                "price_correlation",
                format!("a correlation of {correlation}"),
                "from -1 to 1",
                "0 means that the two prices go their own ways",
            ));
        }
        for one in &doubts.levers {
            for (contender, range) in one.ranges.iter().enumerate() {
                let Some(range) = range else { continue };
                problems.take(possible(one.lever, *range, &case, contender));
            }
        }
        let cube = Hypercube {
            seed,
            points,
            quantities: doubts.levers.len() + usize::from(case.site.years.len() > 1),
        };
        problems.or(())?;
        // A sample is one year: the years of a life and what they cost are not asked for.
        for contender in &mut case.contenders {
            contender.outlay = None;
            contender.life = None;
        }
        let pasts = Pasts::of(&case)?;
        Ok(Self {
            case,
            doubts,
            cube,
            pasts,
        })
    }

    /// The levers that are moved.
    pub fn uncertain(&self) -> &[Uncertain] {
        &self.doubts.levers
    }

    /// Whether the year of the weather is drawn too, as the last share of a sample.
    pub fn draws_years(&self) -> bool {
        self.cube.quantities > self.doubts.levers.len()
    }

    /// Correlation of the price of electricity with that of fuel.
    pub fn price_correlation(&self) -> f64 {
        self.doubts.price_correlation
    }

    /// Seed the samples follow from.
    pub fn seed(&self) -> u64 {
        self.cube.seed
    }

    /// Samples of a block.
    pub fn points(&self) -> usize {
        self.cube.points
    }

    /// The value a sample gave a lever for a choice; nothing where it was not moved.
    pub fn value(&self, sample: &Sample, place: usize, choice: usize) -> Option<f64> {
        let range = self.doubts.levers.get(place)?.of_choice(choice)?;
        range.at(*sample.shares.get(place)?)
    }

    /// The samples of a block, in their order whatever the number of threads.
    ///
    /// # Errors
    /// When a bill cannot be made.
    pub fn block(&self, block: usize) -> Result<Vec<Sample>, Problems> {
        Ok(self.blocks(block..block + 1)?.concat())
    }

    /// The same of several blocks, all their samples side by side.
    ///
    /// # Errors
    /// When a bill cannot be made.
    pub fn blocks(&self, blocks: Range<usize>) -> Result<Vec<Vec<Sample>>, Problems> {
        let points: Vec<Vec<f64>> = blocks.flat_map(|block| self.cube.block(block)).collect();
        let drawn: Vec<Result<Sample, Problems>> = points
            .into_par_iter()
            .map(|shares| self.sample(shares))
            .collect();
        let drawn = drawn.into_iter().collect::<Result<Vec<_>, _>>()?;
        Ok(drawn
            .chunks(self.cube.points)
            .map(<[Sample]>::to_vec)
            .collect())
    }

    fn sample(&self, mut shares: Vec<f64>) -> Result<Sample, Problems> {
        let levers = &self.doubts.levers;
        let place = |lever| levers.iter().position(|one| one.lever == lever);
        if let (Some(electricity), Some(fuel)) =
            (place(Lever::ElectricityRate), place(Lever::FuelRate))
        {
            let correlation = self.doubts.price_correlation;
            shares[fuel] = correlated(shares[fuel], shares[electricity], correlation);
        }
        let mut case = self.case.clone();
        let mut moves: Vec<(Lever, usize, f64)> = Vec::new();
        for (one, &share) in levers.iter().zip(&shares) {
            let ranges = one.ranges.iter().enumerate();
            moves.extend(ranges.filter_map(|(contender, range)| {
                Some((one.lever, contender, range.as_ref()?.at(share)?))
            }));
        }
        case.apply_each(&moves, Ageing::Settled)?;
        // Every system meets the same year of the weather.
        let years = case.site.years.len();
        let mut year = 0;
        if let (Some(share), true) = (shares.last(), self.draws_years()) {
            year = ((share * years as f64) as usize).min(years - 1);
            case = case.in_year(year);
        }
        let today = self.pasts.run(&case, 0, year, None)?;
        let mut systems = Vec::with_capacity(case.contenders.len());
        systems.push(Drawn::of(&today));
        for place in 1..case.contenders.len() {
            let outcome = self.pasts.run(&case, place, year, Some(&today))?;
            systems.push(Drawn::of(&outcome));
        }
        Ok(Sample { shares, systems })
    }
}

impl Drawn {
    fn of(outcome: &Outcome) -> Self {
        let sums = outcome.mean_sums();
        Self {
            cost: outcome.costs.total,
            carbon_kg: sums.carbon_kg,
            spf_h4: sums.spf_h4(),
            hours_backup: outcome.mean(|year| f64::from(year.hours_backup)),
            min_indoor_c: outcome
                .years
                .iter()
                .map(|year| year.min_indoor_c)
                .fold(f64::INFINITY, f64::min),
        }
    }
}
