//! Today's system and one choice: the one mechanism of every study. Move levers, make again what they touch, compare.

use rayon::prelude::*;

use super::case::{Case, Contender};
use super::lever::{Again, Lever};
use super::measure::Measure;
use super::outcome::Outcome;
use crate::lifetime::CashFlow;
use crate::problem::Problems;

/// Today's system and one choice, run once with every lever where it stands.
#[derive(Debug, Clone)]
pub struct Pair {
    case: Case,
    outcomes: [Outcome; 2],
}

/// The place of the choice in a pair's case.
pub const CHOICE: usize = 1;

/// A pair with some levers moved.
#[derive(Debug, Clone)]
pub struct Compared {
    /// Today's system and the choice as they stand.
    pub case: Case,
    /// What their years came to, in the same order.
    pub outcomes: [Outcome; 2],
}

impl Pair {
    /// The pair of today's system and a choice of a case that has been run; nothing where there is no such choice.
    pub fn new(case: &Case, outcomes: &[Outcome], choice: usize) -> Option<Self> {
        Some(Self {
            case: case.pair(choice)?,
            outcomes: [outcomes.first()?.clone(), outcomes.get(choice)?.clone()],
        })
    }

    /// The two systems as the brief has them; the choice is [`CHOICE`].
    pub fn case(&self) -> &Case {
        &self.case
    }

    /// Today's system.
    pub fn today(&self) -> &Contender {
        &self.case.contenders[0]
    }

    /// The choice.
    pub fn choice(&self) -> &Contender {
        &self.case.contenders[CHOICE]
    }

    /// What their years came to.
    pub fn outcomes(&self) -> &[Outcome; 2] {
        &self.outcomes
    }

    /// The pair with no lever moved.
    pub fn as_is(&self) -> Compared {
        Compared {
            case: self.case.clone(),
            outcomes: self.outcomes.clone(),
        }
    }

    /// The pair with levers moved. Only what they touch is made again: prices, capital and carbon are counted anew from the
    /// readings that are there, a lever of the choice runs the choice, a lever of the home runs both.
    ///
    /// # Errors
    /// A value that a lever cannot take, or bills that cannot be made.
    pub fn at(&self, moves: &[(Lever, f64)]) -> Result<Compared, Problems> {
        let mut case = self.case.clone();
        case.apply(CHOICE, moves)?;
        let again = moves.iter().map(|(lever, _)| lever.again()).max();
        let outcome = |contender: usize| match again {
            None => Ok(self.outcomes[contender].clone()),
            Some(Again::Everyone) => case.run_one(&case.contenders[contender], None),
            // Another price or carbon is another year where they decide what runs.
            Some(_) if case.contenders[contender].system.heating.follows_signals() => {
                case.run_one(&case.contenders[contender], None)
            }
            Some(Again::Choice) if contender == CHOICE => {
                case.run_one(&case.contenders[contender], None)
            }
            Some(Again::Choice | Again::Bills) => self.counted_again(&case, contender),
        };
        let outcomes = [outcome(0)?, outcome(CHOICE)?];
        Ok(Compared { case, outcomes })
    }

    /// The same readings with other prices and another carbon factor.
    fn counted_again(&self, case: &Case, contender: usize) -> Result<Outcome, Problems> {
        let was = &self.outcomes[contender];
        let costs = case.price(
            &case.contenders[contender],
            &was.electricity,
            was.fuel.as_ref(),
        )?;
        let carbon_times = case
            .moved_to(Lever::ElectricityCarbon, CHOICE)
            .unwrap_or(1.0);
        Ok(Outcome {
            costs,
            ..was.clone()
        }
        .with_electricity_carbon_times(carbon_times))
    }

    /// The pair at each of several settings, on all cores; results stand in the order of the settings whatever the number of
    /// threads, and so does the first error.
    ///
    /// # Errors
    /// As [`Pair::at`].
    pub fn at_each<T: Send>(
        &self,
        settings: &[Vec<(Lever, f64)>],
        look: impl Fn(Compared) -> T + Sync,
    ) -> Result<Vec<T>, Problems> {
        let seen: Vec<Result<T, Problems>> = settings
            .par_iter()
            .map(|moves| self.at(moves).map(&look))
            .collect();
        seen.into_iter().collect()
    }
}

impl Compared {
    /// The years of a contender's life; nothing where what the choice costs to put in is not known.
    pub fn cash_flow(&self, contender: usize) -> Option<CashFlow> {
        cash_flow(&self.case, contender, &self.outcomes[contender])
    }

    /// How much more the choice has of something than today's system; nothing where it cannot be told.
    pub fn more(&self, measure: Measure) -> Option<f64> {
        Some(self.figure(measure, CHOICE)? - self.figure(measure, 0)?)
    }

    /// A figure of one of the two.
    pub fn figure(&self, measure: Measure, contender: usize) -> Option<f64> {
        let outcome = &self.outcomes[contender];
        match measure {
            Measure::YearlyCost => Some(outcome.costs.total),
            Measure::LifetimeCost => self.cash_flow(contender).map(|flow| flow.present_cost()),
            Measure::Carbon => Some(outcome.carbon_kg()),
        }
    }
}

/// The years of a contender's life. Today's system is there already, so it needs no outlay; a choice without one has no
/// lifetime cost.
///
/// A buried loop has figures of its own in each year. They were counted for the system as the brief has it; where a lever moved it,
/// every year moves in proportion to the one that is shown.
pub fn cash_flow(case: &Case, contender: usize, outcome: &Outcome) -> Option<CashFlow> {
    let own = case.contenders.get(contender)?;
    let outlay = match &own.outlay {
        Some(outlay) if own.today || !outlay.parts.is_empty() => outlay.clone(),
        None if own.today => crate::lifetime::Outlay::default(),
        _ => return None,
    };
    let shown = outcome.running();
    let Some(life) = own.life.as_deref().filter(|life| !life.is_empty()) else {
        return Some(CashFlow::of(&case.terms, &outlay, &shown));
    };
    let year_of_life = |year: usize| &life[year.clamp(1, life.len()) - 1];
    let as_shown = year_of_life(own.shown_year as usize);
    Some(CashFlow::by_year(&case.terms, &outlay, |year| {
        shown.as_in(year_of_life(year), as_shown)
    }))
}
