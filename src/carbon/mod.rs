//! Carbon factors, each with the scope it was counted in; a mixture of scopes is refused.
//!
//! A factor without its scope means nothing: the same gas is 0.183 kg/kWh at the flue and 0.210 with all that went
//! before. Factors therefore come in sets of one scope, and a set is the only thing the year loop takes.

mod leakage;
mod published;
mod scope;

pub use leakage::Leakage;
pub use published::{PUBLISHED, Published};
pub use scope::Scope;

use crate::bounds::CARBON_KG_PER_KWH;
use crate::calendar::CivilHour;
use crate::fault::{self, Fault};
use crate::problem::{Place, Problem, Problems};
use crate::series::Series;
use crate::units::Fuel;

/// How a factor runs over the year, kg CO2e per kilowatt-hour (gross for fuels).
#[derive(Debug, Clone, PartialEq)]
pub enum Course {
    /// The same all year.
    Constant(f64),
    /// By civil month, January first.
    Monthly([f64; 12]),
    /// Hour by hour; `every_year` uses the same day and hour (UTC) for any year.
    Hourly {
        /// The intensity.
        series: Series,
        /// Whether one year serves for any.
        every_year: bool,
    },
}

impl Course {
    /// An hourly intensity, with the kilograms in one unit of the series (0.001 for grams).
    ///
    /// # Errors
    /// When a value lies outside [`CARBON_KG_PER_KWH`]: the first is named by its hour.
    pub fn hourly(
        mut series: Series,
        kg_per_unit: f64,
        every_year: bool,
        place: &Place,
    ) -> Result<Self, Problems> {
        series.scale(kg_per_unit);
        let outside = |value: &f64| !CARBON_KG_PER_KWH.holds(*value);
        let Some(first) = series.values().iter().position(outside) else {
            return Ok(Self::Hourly { series, every_year });
        };
        let count = series
            .values()
            .iter()
            .filter(|value| outside(value))
            .count();
        Err(Problem::new(
            place.clone(),
            format!(
                "{} kg/kWh in hour {} of {}, and {} more",
                series.values()[first],
                first + 1,
                series.covers(),
                count - 1
            ),
            CARBON_KG_PER_KWH.words(),
            "is the series in grams?",
        )
        .into())
    }
}

/// A carbon factor.
#[derive(Debug, Clone, PartialEq)]
pub struct Factor {
    /// Of what.
    pub fuel: Fuel,
    /// How much.
    pub course: Course,
    /// What is counted in it.
    pub scope: Scope,
    /// Where it comes from, for the list of assumptions.
    pub source: String,
    /// Where it was given.
    pub place: Place,
}

/// Factors of one scope, at most one per fuel.
#[derive(Debug, Clone, PartialEq)]
pub struct Factors {
    scope: Scope,
    factors: Vec<Factor>,
}

impl Factors {
    /// A set, when all factors count the same.
    ///
    /// # Errors
    /// A fuel given twice, or scopes that differ: each factor that differs from the first is named.
    pub fn new(factors: Vec<Factor>) -> Result<Self, Problems> {
        let mut problems = Problems::new();
        let scope = factors
            .first()
            .map_or(Scope::default(), |factor| factor.scope);
        for (i, factor) in factors.iter().enumerate() {
            if factor.scope != scope && !fault::on(Fault::ScopesMixed) {
                let first = factors
                    .first()
                    .map_or(Fuel::Electricity, |factor| factor.fuel);
                problems.push(Problem::new(
                    factor.place.clone(),
                    format!(
                        "{} counts {}, but {first} counts {}",
                        factor.fuel,
                        factor.scope.words(),
                        scope.words()
                    ),
                    "carbon factors that all count the same",
                    "take all factors from one published set; a mixture shows a saving that is not there",
                ));
            }
            if factors[..i].iter().any(|other| other.fuel == factor.fuel) {
                problems.push(Problem::new(
                    factor.place.clone(),
                    format!("a second carbon factor of {}", factor.fuel),
                    "one factor per fuel",
                    "keep one of the two",
                ));
            }
        }
        problems.or(Self { scope, factors })
    }

    /// What all of them count.
    pub fn scope(&self) -> Scope {
        self.scope
    }

    /// The factor of a fuel.
    pub fn of(&self, fuel: Fuel) -> Option<&Factor> {
        self.factors.iter().find(|factor| factor.fuel == fuel)
    }

    /// Every factor.
    pub fn iter(&self) -> impl Iterator<Item = &Factor> {
        self.factors.iter()
    }

    /// The factor of a fuel hour by hour, kg CO2e per kilowatt-hour.
    ///
    /// # Errors
    /// When the set has no factor of the fuel, or an hourly one misses hours.
    pub fn carbon_column(&self, fuel: Fuel, civil: &[CivilHour]) -> Result<Vec<f64>, Problems> {
        let Some(factor) = self.of(fuel) else {
            return Err(Problem::new(
                Place::field("carbon"),
                format!("no carbon factor of {fuel}"),
                format!("a factor that counts {}", self.scope.words()),
                format!("add {fuel} to the carbon factors"),
            )
            .into());
        };
        factor.column(civil)
    }
}

impl Factor {
    /// The factor hour by hour, kg CO2e per kilowatt-hour.
    ///
    /// # Errors
    /// When an hourly factor misses hours.
    pub fn column(&self, civil: &[CivilHour]) -> Result<Vec<f64>, Problems> {
        match &self.course {
            Course::Constant(factor) => Ok(vec![*factor; civil.len()]),
            Course::Monthly(months) => Ok(civil.iter().map(|hour| months[hour.month0()]).collect()),
            Course::Hourly { series, every_year } => {
                let value = |hour| {
                    if *every_year {
                        series.at_any_year(hour)
                    } else {
                        series.at(hour)
                    }
                };
                let column: Vec<_> = civil.iter().filter_map(value).collect();
                if column.len() == civil.len() {
                    return Ok(column);
                }
                Err(Problem::new(
                    self.place.clone(),
                    format!(
                        "no hourly carbon factor of {} for {} of {} hours",
                        self.fuel,
                        civil.len() - column.len(),
                        civil.len()
                    ),
                    format!(
                        "a factor for every hour; the file covers {}",
                        series.covers()
                    ),
                    "give factors for the same year as the weather, or set every_year = true",
                )
                .into())
            }
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::calendar::HourAxis;

    fn set(name: &str) -> &'static Published {
        Published::of(name).unwrap()
    }

    /// Trap: combustion-only gas (0.183) beside full-assessment electricity (0.136) makes a saving of 12 000 kWh of
    /// gas at 85 % against SPF 3 look 202 kg larger than like for like: it must not be possible to write it.
    #[test]
    fn a_mixture_of_scopes_is_refused_with_the_remedy() {
        let gas = set("uk-2025").factors().of(Fuel::Gas).unwrap().clone();
        let electricity = set("sap-10.2")
            .factors()
            .of(Fuel::Electricity)
            .unwrap()
            .clone();
        let problems = Factors::new(vec![gas, electricity]).unwrap_err();
        assert_eq!(problems.len(), 1);
        let text = problems.to_string();
        assert!(
            text.contains("electricity counts") && text.contains("one published set"),
            "{text}"
        );
    }

    #[test]
    fn the_same_fuel_twice_is_refused() {
        let gas = set("uk-2025").factors().of(Fuel::Gas).unwrap().clone();
        assert!(Factors::new(vec![gas.clone(), gas]).is_err());
    }

    /// SAP 10.2: electricity 0.136 a year, 0.111 in July, 0.163 in the depth of winter; the months between are from
    /// memory, so their plain mean is only asked to come within 3 g of the year's figure.
    #[test]
    fn monthly_factors_follow_the_civil_month() {
        let zone: chrono_tz::Tz = "Europe/London".parse().unwrap();
        let axis = HourAxis::civil_year(2023, zone).unwrap();
        let column = set("sap-10.2")
            .factors()
            .carbon_column(Fuel::Electricity, &axis.civil(zone))
            .unwrap();
        assert_eq!(column.len(), 8760);
        assert!((column[0] - 0.163).abs() < 1e-9);
        let mean = column.iter().sum::<f64>() / 8760.0;
        assert!((mean - 0.136).abs() < 0.003, "{mean}");
    }

    #[test]
    fn a_fuel_without_factor_is_said_not_zero() {
        let set = Factors::new(vec![]).unwrap();
        assert!(set.carbon_column(Fuel::Gas, &[]).is_err());
    }

    #[test]
    fn an_hourly_series_in_grams_is_caught_and_read_when_said() {
        let series = Series::new("2023-01-01T00:00:00Z".parse().unwrap(), vec![180.0, 95.0]);
        let place = Place::file("grid.csv");
        let problems = Course::hourly(series.clone(), 1.0, false, &place).unwrap_err();
        assert!(
            problems.to_string().contains("is the series in grams?"),
            "{problems}"
        );
        let factor = Factor {
            fuel: Fuel::Electricity,
            course: Course::hourly(series, 0.001, false, &place).unwrap(),
            scope: Scope::Burning,
            source: "test".to_owned(),
            place,
        };
        let start = "2023-01-01T00:00:00Z".parse().unwrap();
        let civil = |hours| HourAxis { start, hours }.civil(chrono_tz::Tz::UTC);
        assert_eq!(factor.column(&civil(2)).unwrap(), [0.18, 0.095]);
        let short = factor.column(&civil(3)).unwrap_err();
        assert!(short.to_string().contains("for 1 of 3 hours"), "{short}");
    }
}
