//! The answer of `study`: what would change the answer of `estimate`.

use serde::Serialize;

use super::comfort::leaves_cold;
use super::compose::Told;
use super::estimate::{Assumption, LeverAnswer};
use super::lever::{lever_answer, price_unit, unit};
use super::lifetime::{LifetimeAnswer, lifetime};
use super::what_if::{EmitterAnswer, SwingAnswer, emitters, moved};
use crate::problem::{Finding, Problems};
use crate::study::{
    Applies, Case, Lever, MachineSize, MachineSizes, Measure, Outcome, Pair, break_even,
    break_even_spf, machine_sizes, two_levers,
};

/// What would change the answer, choice by choice.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct StudyAnswer {
    /// Currency of every amount, ISO 4217.
    pub currency: String,
    /// The choices that were looked at.
    pub choices: Vec<ChoiceStudy>,
    /// Money over the years of every system's life; absent when no choice has its capital.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub lifetime: Option<LifetimeAnswer>,
    /// What was assumed and where it is from.
    pub assumptions: Vec<Assumption>,
    /// What was odd and what was done about it.
    pub findings: Vec<Finding>,
}

/// The studies of one choice.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct ChoiceStudy {
    /// The choice.
    pub label: String,
    /// Yearly cost.
    pub cost: f64,
    /// Today's yearly cost less it.
    pub saving: f64,
    /// Why it is no fair answer however cheap it is; absent where rooms and water are kept warm.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub leaves_cold: Option<String>,
    /// Where each lever makes it equal today's system, by yearly cost, lifetime cost and carbon.
    pub break_even: Vec<LeverAnswer>,
    /// The SPF at which the bills are equal; absent unless a heat pump stands against a boiler.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub break_even_spf: Option<SpfAnswer>,
    /// Cost and SPF over the design flow temperature; absent unless it is a heat pump.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub emitters: Option<Vec<EmitterAnswer>>,
    /// Cost, backup and starts over the rated output; absent unless it is a heat pump.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub sizes: Option<SizesAnswer>,
    /// The saving over two levers.
    pub two_levers: TwoLeversAnswer,
    /// The yearly saving with each lever at its low and its high, the longest swing first.
    pub swings: Vec<SwingAnswer>,
}

/// The SPF at which the bills are equal.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct SpfAnswer {
    /// From the unit rates and the boiler's efficiency alone.
    pub unit_rates: f64,
    /// With the standing charge and the boiler's own electricity.
    pub whole_bill: f64,
    /// Which of the two applies: "whole bill" when the fuel is disconnected, "unit rates" when it stays.
    pub applies: String,
    /// SPF with all auxiliaries that the choice reaches.
    pub spf_h4: Option<f64>,
    /// The same as a sentence.
    pub sentence: String,
}

/// A sweep over sizes.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct SizesAnswer {
    /// Design heat load.
    pub design_load_kw: f64,
    /// Outdoor temperature of a mild day.
    pub mild_day_c: f64,
    /// Its load, internal gains taken off.
    pub mild_load_kw: f64,
    /// The sizes, rising.
    pub sizes: Vec<SizeAnswer>,
    /// From the first to the second of these sizes the cost is the same within a hundredth; absent where no size holds the rooms.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub alike_kw: Option<[f64; 2]>,
    /// Where size stops mattering, in words.
    pub sentence: String,
}

/// One size.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct SizeAnswer {
    /// Rated output.
    pub rated_kw: f64,
    /// Yearly cost.
    pub cost: f64,
    /// Today's yearly cost less it.
    pub saving: f64,
    /// SPF with all auxiliaries.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub spf_h4: Option<f64>,
    /// Share of the heat that backup and immersion heater make.
    pub backup_share: f64,
    /// Greatest output at the design outdoor temperature over the design heat load.
    pub coldest_night_cover: f64,
    /// Starts of the compressor in a year.
    pub starts: f64,
    /// Least output on a mild day over that day's load; above 1 the machine starts and stops.
    pub least_over_mild_load: f64,
    /// Hours short of heat.
    pub hours_short: f64,
    /// Lowest indoor temperature.
    pub min_indoor_c: f64,
}

/// The saving over two levers.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct TwoLeversAnswer {
    /// Along x.
    pub x: AxisAnswer,
    /// Along y.
    pub y: AxisAnswer,
    /// Yearly saving: one row a value of y.
    pub saving: Vec<Vec<f64>>,
}

/// One of two levers.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct AxisAnswer {
    /// The lever.
    pub lever: String,
    /// Its unit.
    pub unit: String,
    /// Where it stands.
    pub now: f64,
    /// Its values, rising.
    pub values: Vec<f64>,
    /// The mean price of a kilowatt-hour where the lever stands, tax included; only for prices.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub price_now: Option<f64>,
    /// The unit of that price.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub price_unit: Option<String>,
}

/// What is to be looked at.
#[derive(Debug, Clone, PartialEq)]
pub struct Wish {
    /// Places of the choices in the case.
    pub choices: Vec<usize>,
    /// Two levers to be moved together.
    pub together: (Lever, Lever),
    /// Values of each.
    pub steps: usize,
}

/// Makes the studies.
///
/// # Errors
/// A lever that a choice does not have, or a year that cannot be run or billed with a lever moved.
pub fn studies(
    case: &Case,
    outcomes: &[Outcome],
    told: &Told,
    wish: &Wish,
) -> Result<StudyAnswer, Problems> {
    let choices = wish
        .choices
        .iter()
        .filter_map(|&choice| Pair::new(case, outcomes, choice))
        .map(|pair| study(&pair, wish))
        .collect::<Result<_, _>>()?;
    Ok(StudyAnswer {
        currency: case.currency.code().to_owned(),
        choices,
        lifetime: lifetime(case, outcomes),
        assumptions: told.assumptions.clone(),
        findings: told.findings.clone(),
    })
}

fn study(pair: &Pair, wish: &Wish) -> Result<ChoiceStudy, Problems> {
    let mut levers = Vec::new();
    for &lever in Lever::ALL {
        let found = break_even(pair, lever, Measure::ALL)?;
        levers.extend(found.iter().map(|found| lever_answer(found, pair)));
    }
    let [today, choice] = pair.outcomes();
    Ok(ChoiceStudy {
        label: pair.choice().system.label.clone(),
        cost: choice.costs.total,
        saving: today.costs.total - choice.costs.total,
        leaves_cold: leaves_cold(pair.choice(), choice),
        break_even: levers,
        break_even_spf: spf(pair),
        emitters: emitters(pair)?,
        sizes: machine_sizes(pair)?.map(|sizes| sizes_answer(pair, &sizes)),
        two_levers: together(pair, wish)?,
        swings: moved(pair)?,
    })
}

fn spf(pair: &Pair) -> Option<SpfAnswer> {
    let (prices, applies) = pair.as_is().break_even_prices()?;
    let spf = break_even_spf(&prices)?;
    let reaches = pair.outcomes()[1].mean_sums().spf_h4();
    let (name, valid, why) = match applies {
        Applies::FuelEnds => (
            "whole bill",
            spf.whole_bill,
            "because its standing charge and the boiler's own electricity go when gas is disconnected",
        ),
        Applies::FuelStays => (
            "unit rates",
            spf.unit_rates,
            "because gas stays connected for something else and its standing charge is paid all the same",
        ),
    };
    let reached = reaches.map_or_else(String::new, |spf| format!("; it reaches {spf:.2}"));
    Some(SpfAnswer {
        unit_rates: spf.unit_rates,
        whole_bill: spf.whole_bill,
        applies: name.to_owned(),
        spf_h4: reaches,
        sentence: format!(
            "From unit rates alone it would need an SPF of {:.2}; counting the whole bill {:.2}. Here {valid:.2} applies, {why}{reached}.",
            spf.unit_rates, spf.whole_bill
        ),
    })
}

fn sizes_answer(pair: &Pair, sizes: &MachineSizes) -> SizesAnswer {
    SizesAnswer {
        design_load_kw: sizes.design_load_kw,
        mild_day_c: sizes.mild.0,
        mild_load_kw: sizes.mild.1,
        sizes: sizes.sizes.iter().map(size_answer).collect(),
        alike_kw: sizes.alike_kw.map(|(first, last)| [first, last]),
        sentence: sizes_in_words(pair, sizes),
    }
}

fn size_answer(size: &MachineSize) -> SizeAnswer {
    SizeAnswer {
        rated_kw: size.rated_kw,
        cost: size.cost,
        saving: size.saving,
        spf_h4: size.spf_h4,
        backup_share: size.backup_share,
        coldest_night_cover: size.coldest_night_cover,
        starts: size.starts,
        least_over_mild_load: size.least_over_mild_load,
        hours_short: size.hours_short,
        min_indoor_c: size.min_indoor_c,
    }
}

fn sizes_in_words(pair: &Pair, sizes: &MachineSizes) -> String {
    let Some((first, last)) = sizes.alike_kw else {
        return "No size looked at holds the rooms.".to_owned();
    };
    let code = pair.case().currency.code();
    let at = |kw: f64| sizes.sizes.iter().find(|size| size.rated_kw == kw);
    let largest = sizes.sizes.last().map(|size| size.rated_kw);
    let mut words = if largest == Some(last) {
        format!("From {first:.1} kW up the size hardly matters for the bill")
    } else {
        format!("From {first:.1} to {last:.1} kW the size hardly matters for the bill")
    };
    let smaller = sizes.sizes.iter().rev().find(|size| size.rated_kw < first);
    let larger = sizes.sizes.iter().find(|size| size.rated_kw > last);
    if let (Some(smaller), Some(first)) = (smaller, at(first)) {
        let what = if smaller.hours_short > first.hours_short + 0.5 {
            format!("leaves {:.0} hours short of heat", smaller.hours_short)
        } else {
            format!("costs {:.0} {code} more a year", smaller.cost - first.cost)
        };
        words += &format!("; {:.1} kW {what}", smaller.rated_kw);
    }
    if let (Some(larger), Some(last)) = (larger, at(last)) {
        words += &format!(
            "; {:.1} kW costs {:.0} {code} more a year and starts {:.0} times",
            larger.rated_kw,
            larger.cost - last.cost,
            larger.starts
        );
    }
    let cycles = sizes
        .sizes
        .iter()
        .find(|size| size.least_over_mild_load > 1.0);
    words += &cycles.map_or_else(
        || format!("; none is too large for a mild day of {:.0} °C", sizes.mild.0),
        |size| {
            format!(
                "; from {:.1} kW it starts and stops on a mild day of {:.0} °C, whose load is {:.1} kW",
                size.rated_kw, sizes.mild.0, sizes.mild.1
            )
        },
    );
    words + "."
}

fn together(pair: &Pair, wish: &Wish) -> Result<TwoLeversAnswer, Problems> {
    let grid = two_levers(pair, wish.together.0, wish.together.1, wish.steps)?;
    let (times, price_unit) = price_unit(pair.case().currency);
    let axis = |(lever, values): (Lever, Vec<f64>), now| {
        let price_now = price_now(lever, pair).map(|price| price * times);
        AxisAnswer {
            lever: lever.name().to_owned(),
            unit: unit(lever, pair),
            now,
            values,
            price_unit: price_now.map(|_| price_unit.clone()),
            price_now,
        }
    };
    Ok(TwoLeversAnswer {
        x: axis(grid.x, grid.now.0),
        y: axis(grid.y, grid.now.1),
        saving: grid.saving,
    })
}

/// What a kilowatt-hour costs on the mean: electricity to the choice, fuel to today's system.
fn price_now(lever: Lever, pair: &Pair) -> Option<f64> {
    let (prices, _) = pair.as_is().break_even_prices()?;
    match lever {
        Lever::ElectricityRate => Some(prices.electricity_per_kwh),
        Lever::FuelRate => Some(prices.fuel_per_kwh),
        _ => None,
    }
}
