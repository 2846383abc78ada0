//! What a buried loop remembers in a sample, without running its year twice.

use crate::problem::Problems;
use crate::source::Memory;
use crate::study::case::Case;
use crate::study::outcome::{Outcome, YearOutcome};

/// How far a guessed history may be off, relative to the draw that the year then shows. Earlier years make the brine a few kelvin
/// colder, so that this is a tenth of a kelvin and less than half a percent of electricity.
const NEAR_ENOUGH: f64 = 0.03;

/// What the systems use with every lever where the brief put it, by year of the weather.
///
/// The ground is linear: when a system draws a tenth more in every year, its ground remembers a tenth more. How much more a sample
/// draws is known after its year only; but every system of a home gives nearly the same heat, so today's, which is run first, tells it
/// beforehand. Where the year then shows another draw than the guess, it is run again with the history it showed.
#[derive(Debug, Clone)]
pub(super) struct Pasts(Vec<Past>);

#[derive(Debug, Clone)]
struct Past {
    /// Heat of today's system, kWh.
    heat_kwh: f64,
    /// What each contender draws from its ground, kWh; nothing where its ground remembers nothing.
    drawn_kwh: Vec<Option<f64>>,
}

impl Pasts {
    /// Runs what is needed: nothing where no ground remembers.
    ///
    /// # Errors
    /// When a bill cannot be made.
    pub fn of(case: &Case) -> Result<Self, Problems> {
        let remembers = |place: usize| case.contenders[place].aged.is_some();
        if !(0..case.contenders.len()).any(remembers) {
            return Ok(Self(Vec::new()));
        }
        let outcomes: Vec<Option<Outcome>> = (0..case.contenders.len())
            .map(|place| {
                let wanted = place == 0 || remembers(place);
                wanted
                    .then(|| case.run_one(&case.contenders[place], None))
                    .transpose()
            })
            .collect::<Result<_, _>>()?;
        let past = |year: usize| Past {
            heat_kwh: outcomes[0]
                .as_ref()
                .map_or(0.0, |today| heat_kwh(&today.years[year])),
            drawn_kwh: outcomes
                .iter()
                .enumerate()
                .map(|(place, outcome)| {
                    let outcome = outcome.as_ref().filter(|_| remembers(place))?;
                    Some(drawn_kwh(&outcome.years[year])).filter(|kwh| *kwh > 0.0)
                })
                .collect(),
        };
        Ok(Self((0..case.years().len()).map(past).collect()))
    }

    /// Runs a contender of a moved case through a year of the weather, given what today's system came to in it; nothing for today's.
    ///
    /// # Errors
    /// When a bill cannot be made.
    pub fn run(
        &self,
        case: &Case,
        place: usize,
        year: usize,
        today: Option<&Outcome>,
    ) -> Result<Outcome, Problems> {
        let contender = &case.contenders[place];
        let Some(aged) = contender.aged else {
            return case.run_from(contender, Memory::default(), None);
        };
        let past = self.0.get(year).filter(|_| aged.moved);
        let Some((past, before_kwh)) = past.and_then(|past| Some((past, past.drawn_kwh[place]?)))
        else {
            return case.run_from(contender, aged.memory, None);
        };
        let mut times = match today {
            Some(today) if past.heat_kwh > 0.0 => today.mean(heat_kwh) / past.heat_kwh,
            _ => 1.0,
        };
        let mut outcome = case.run_from(contender, aged.memory.times(times), None)?;
        let shown = outcome.mean(drawn_kwh) / before_kwh;
        if (times / shown - 1.0).abs() > NEAR_ENOUGH {
            times = shown;
            outcome = case.run_from(contender, aged.memory.times(times), None)?;
        }
        Ok(outcome)
    }
}

fn heat_kwh(year: &YearOutcome) -> f64 {
    year.sums.space_heat_kwh() + year.sums.water_drawn_kwh
}

fn drawn_kwh(year: &YearOutcome) -> f64 {
    year.sums.extracted_kwh - year.sums.returned_kwh
}
