//! What an estimate says of each year of the weather, and of how far the years lie apart.

use serde::Serialize;

use super::estimate::Assumption;
use crate::study::{Case, Extent, Outcome, SystemYear, extent, system_years};

/// One year of the weather.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct YearAnswer {
    /// Year.
    pub year: i32,
    /// Its hours.
    pub hours: u32,
    /// Mean outdoor temperature.
    pub mean_outdoor_c: f64,
    /// Lowest outdoor temperature.
    pub min_outdoor_c: f64,
    /// Cost.
    pub cost: f64,
    /// Today's cost in the same year less this; absent for today's system.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub saving: Option<f64>,
    /// Greenhouse gas, CO2 equivalent.
    pub carbon_kg: f64,
    /// Today's carbon in the same year less this; absent for today's system.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub carbon_saving_kg: Option<f64>,
    /// Heat to the rooms.
    pub space_heat_kwh: f64,
    /// Electricity of the heating.
    pub electricity_kwh: f64,
    /// Fuel on gross calorific value.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub fuel_kwh: Option<f64>,
    /// Electricity of backup and immersion heater.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub backup_kwh: Option<f64>,
    /// Seasonal performance factor with all auxiliaries.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub spf_h4: Option<f64>,
    /// Hours with backup or immersion heater.
    pub hours_backup: u32,
    /// Hours that ended more than 1 K below the set point.
    pub hours_short: u32,
    /// Lowest indoor temperature.
    pub min_indoor_c: f64,
}

/// How far the figures of a system go from one year of the weather to another.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct YearSpread {
    /// Cost.
    pub cost: ExtentAnswer,
    /// Today's cost in the same year less this; absent for today's system.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub saving: Option<ExtentAnswer>,
    /// Greenhouse gas, CO2 equivalent.
    pub carbon_kg: ExtentAnswer,
    /// Today's carbon in the same year less this; absent for today's system.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub carbon_saving_kg: Option<ExtentAnswer>,
    /// Seasonal performance factor with all auxiliaries.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub spf_h4: Option<ExtentAnswer>,
    /// Electricity of backup and immersion heater.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub backup_kwh: Option<ExtentAnswer>,
    /// Lowest indoor temperature.
    pub min_indoor_c: ExtentAnswer,
}

/// A figure over several years.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct ExtentAnswer {
    /// Mean over the years.
    pub mean: f64,
    /// Standard deviation between years.
    pub deviation: f64,
    /// The least.
    pub least: f64,
    /// Year of the least.
    pub least_in: i32,
    /// The greatest.
    pub greatest: f64,
    /// Year of the greatest.
    pub greatest_in: i32,
}

impl From<Extent> for ExtentAnswer {
    fn from(extent: Extent) -> Self {
        Self {
            mean: extent.mean,
            deviation: extent.deviation,
            least: extent.least.1,
            least_in: extent.least.0,
            greatest: extent.greatest.1,
            greatest_in: extent.greatest.0,
        }
    }
}

/// Every year of a contender.
pub(super) fn year_answers(case: &Case, outcomes: &[Outcome], contender: usize) -> Vec<YearAnswer> {
    let years = system_years(case, outcomes, contender);
    let (machine, fuel) = parts(case, contender);
    let hours = case.years().iter().map(|(_, hours)| hours.clone());
    years
        .iter()
        .zip(hours)
        .map(|(year, hours)| {
            let outdoor_c = &case.site.outdoor_c[hours];
            let own = &year.outcome;
            YearAnswer {
                year: year.year,
                hours: own.hours,
                mean_outdoor_c: outdoor_c.iter().sum::<f64>() / outdoor_c.len() as f64,
                min_outdoor_c: outdoor_c.iter().copied().fold(f64::INFINITY, f64::min),
                cost: year.cost,
                saving: year.saving,
                carbon_kg: own.sums.carbon_kg,
                carbon_saving_kg: year.carbon_saving_kg,
                space_heat_kwh: own.sums.space_heat_kwh(),
                electricity_kwh: own.sums.electricity_kwh(),
                fuel_kwh: fuel.then_some(own.sums.fuel_kwh),
                backup_kwh: machine.then(|| backup_kwh(year)),
                spf_h4: own.sums.spf_h4(),
                hours_backup: own.hours_backup,
                hours_short: own.hours_short,
                min_indoor_c: own.min_indoor_c,
            }
        })
        .collect()
}

/// How far a contender's figures go over the years; nothing for one year.
pub(super) fn year_spread(
    case: &Case,
    outcomes: &[Outcome],
    contender: usize,
) -> Option<YearSpread> {
    let years = system_years(case, outcomes, contender);
    let (machine, _) = parts(case, contender);
    let of = |figure: fn(&SystemYear) -> Option<f64>| extent(&years, figure).map(Into::into);
    Some(YearSpread {
        cost: of(|year| Some(year.cost))?,
        saving: of(|year| year.saving),
        carbon_kg: of(|year| Some(year.outcome.sums.carbon_kg))?,
        carbon_saving_kg: of(|year| year.carbon_saving_kg),
        spf_h4: of(|year| year.outcome.sums.spf_h4()),
        backup_kwh: of(|year| Some(backup_kwh(year))).filter(|_| machine),
        min_indoor_c: of(|year| Some(year.outcome.min_indoor_c))?,
    })
}

/// How several years follow each other, to be listed among the assumptions; nothing for one.
pub(super) fn succession(case: &Case) -> Option<Assumption> {
    let years = case.years();
    let ((first, _), (last, _)) = (years.first()?, years.last()?);
    (years.len() > 1).then(|| Assumption {
        name: "years of the weather".to_owned(),
        value: format!(
            "{} ({first} to {last}), one after another, each beginning as the one before it ended; the first begins with rooms \
             and store at their set points",
            years.len()
        ),
        from: "the weather files; yearly figures are means, the years stand beside them".to_owned(),
    })
}

fn backup_kwh(year: &SystemYear) -> f64 {
    year.outcome.sums.backup_kwh + year.outcome.sums.immersion_kwh
}

/// Whether a contender has a machine, and whether it burns something.
fn parts(case: &Case, contender: usize) -> (bool, bool) {
    let heating = case
        .contenders
        .get(contender)
        .map(|own| &own.system.heating);
    heating.map_or((false, false), |heating| {
        (heating.machine().is_some(), heating.boiler().is_some())
    })
}
