//! Each year of the weather by itself, and how far the years lie apart.

use super::case::Case;
use super::outcome::{Outcome, YearOutcome};

/// What one system came to in one year of the weather.
#[derive(Debug, Clone, PartialEq)]
pub struct SystemYear {
    /// Year of the weather.
    pub year: i32,
    /// Cost, in the case's currency.
    pub cost: f64,
    /// Today's cost in the same year less this; nothing for today's system.
    pub saving: Option<f64>,
    /// Today's carbon in the same year less this, kg CO2e; nothing for today's system.
    pub carbon_saving_kg: Option<f64>,
    /// Everything else.
    pub outcome: YearOutcome,
}

/// Every year of a contender beside today's system in the same year.
///
/// The years were run one after another, each beginning as the one before it ended; the first begins with rooms and store at
/// their set points. Nothing for a contender that is not there.
pub fn system_years(case: &Case, outcomes: &[Outcome], contender: usize) -> Vec<SystemYear> {
    let (Some(own), Some(outcome), Some(today)) = (
        case.contenders.get(contender),
        outcomes.get(contender),
        outcomes.first(),
    ) else {
        return Vec::new();
    };
    let years = outcome.years.iter().zip(&outcome.costs.by_year);
    let todays = today.years.iter().zip(&today.costs.by_year);
    years
        .zip(todays)
        .map(|((year, &cost), (then, &then_cost))| SystemYear {
            year: year.year,
            cost,
            saving: (!own.today).then_some(then_cost - cost),
            carbon_saving_kg: (!own.today).then_some(then.sums.carbon_kg - year.sums.carbon_kg),
            outcome: year.clone(),
        })
        .collect()
}

/// How far a figure goes from year to year.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Extent {
    /// Mean over the years.
    pub mean: f64,
    /// Standard deviation between years, n − 1 in the denominator.
    pub deviation: f64,
    /// The least, and its year.
    pub least: (i32, f64),
    /// The greatest, and its year.
    pub greatest: (i32, f64),
}

/// How far a figure goes over several years; nothing for fewer than two, or where a year has no such figure.
pub fn extent(years: &[SystemYear], figure: impl Fn(&SystemYear) -> Option<f64>) -> Option<Extent> {
    let figures: Vec<(i32, f64)> = years
        .iter()
        .map(|year| Some((year.year, figure(year)?)))
        .collect::<Option<_>>()?;
    if figures.len() < 2 {
        return None;
    }
    let n = figures.len() as f64;
    let mean = figures.iter().map(|(_, value)| value).sum::<f64>() / n;
    let squares: f64 = figures
        .iter()
        .map(|(_, value)| (value - mean).powi(2))
        .sum();
    let by_value = |a: &&(i32, f64), b: &&(i32, f64)| a.1.total_cmp(&b.1);
    Some(Extent {
        mean,
        deviation: (squares / (n - 1.0)).sqrt(),
        least: *figures.iter().min_by(by_value)?,
        greatest: *figures.iter().max_by(by_value)?,
    })
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::year::Sums;

    fn year(year: i32, cost: f64) -> SystemYear {
        SystemYear {
            year,
            cost,
            saving: None,
            carbon_saving_kg: None,
            outcome: YearOutcome {
                year,
                hours: 8760,
                months: [Sums::default(); 12],
                sums: Sums::default(),
                fuel_carbon_kg: [0.0; 12],
                min_indoor_c: 19.0,
                peak_electric_kw: 0.0,
                hours_backup: 0,
                hours_short: 0,
                hours_water_short: 0,
                hours_stopped: 0,
                hours_turned_down: 0,
                min_source_c: f64::INFINITY,
            },
        }
    }

    /// By hand: 90, 100 and 110 have a mean of 100 and a standard deviation of √((100 + 0 + 100)/2) = 10.
    #[test]
    fn three_years_by_hand() {
        let years = [year(2020, 110.0), year(2021, 90.0), year(2022, 100.0)];
        let cost = extent(&years, |year| Some(year.cost)).unwrap();
        assert_eq!((cost.mean, cost.deviation), (100.0, 10.0));
        assert_eq!((cost.least, cost.greatest), ((2021, 90.0), (2020, 110.0)));
    }

    #[test]
    fn one_year_has_no_spread_and_a_missing_figure_makes_none() {
        let years = [year(2020, 1.0), year(2021, 2.0)];
        assert!(extent(&years[..1], |year| Some(year.cost)).is_none());
        assert!(extent(&years, |year| year.saving).is_none());
    }
}
