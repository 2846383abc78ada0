//! Break-evens as an adviser says them.

use std::collections::BTreeMap;

use rayon::prelude::*;
use rust_decimal::Decimal;
use rust_decimal::prelude::FromPrimitive;

use super::estimate::LeverAnswer;
use crate::problem::Problems;
use crate::source::Source;
use crate::study::{Account, BreakEven, Case, Crossing, Lever, Measure, Outcome, Pair, break_even};
use crate::units::{Currency, as_set};

/// Where each lever makes each choice equal today's system, by the label of the choice; all of them side by side.
pub(super) fn break_evens(
    case: &Case,
    outcomes: &[Outcome],
) -> Result<BTreeMap<String, Vec<LeverAnswer>>, Problems> {
    const LEVERS: [Lever; 3] = [
        Lever::ElectricityRate,
        Lever::FuelRate,
        Lever::FlowTemperature,
    ];
    let pairs: Vec<Pair> = (1..outcomes.len())
        .filter_map(|choice| Pair::new(case, outcomes, choice))
        .collect();
    let asked: Vec<_> = pairs
        .iter()
        .flat_map(|pair| LEVERS.map(|lever| (pair, lever)))
        .collect();
    let found: Vec<Result<Vec<LeverAnswer>, Problems>> = asked
        .par_iter()
        .map(|(pair, lever)| {
            let found = break_even(pair, *lever, &[Measure::YearlyCost])?;
            Ok(found
                .iter()
                .map(|found| lever_answer(found, pair))
                .collect())
        })
        .collect();
    let mut answers = BTreeMap::new();
    for ((pair, _), found) in asked.iter().zip(found) {
        let of_choice: &mut Vec<_> = answers
            .entry(pair.choice().system.label.clone())
            .or_default();
        of_choice.extend(found?);
    }
    Ok(answers)
}

/// One lever of one choice by one measure.
pub(super) fn lever_answer(found: &BreakEven, pair: &Pair) -> LeverAnswer {
    let label = &pair.choice().system.label;
    let unit = unit(found.lever, pair);
    let words = Words::of(found.measure);
    let values: Vec<f64> = found
        .crossings
        .iter()
        .map(|crossing| crossing.value)
        .collect();
    let conditions: Vec<_> = values
        .iter()
        .map(|&value| condition(found.lever, found.now, value, pair))
        .collect();
    let side = |crossing: &Crossing| {
        let side = if crossing.better_above {
            "above"
        } else {
            "below"
        };
        format!("{} {side} that", words.better)
    };
    let sides: Vec<String> = found.crossings.iter().map(side).collect();
    let better = found.more.iter().all(|(_, more)| *more <= 0.0);
    let stays = if better { words.better } else { words.worse };
    let range = &found.range;
    let sentence = if values.is_empty() {
        let between = format!(
            "{} from {} to {} {unit}",
            range.label,
            short(range.low),
            short(range.high)
        );
        format!(
            "No {} makes \"{label}\" {}: it stays {stays}.",
            between.trim_end(),
            words.equals
        )
    } else {
        let each: Vec<_> = conditions
            .iter()
            .zip(&sides)
            .map(|(value, side)| format!("{value}; it is {side}"))
            .collect();
        format!(
            "\"{label}\" {} with {}.",
            words.even,
            each.join(", and again with ")
        )
    };
    LeverAnswer {
        lever: found.lever.name().to_owned(),
        unit,
        measure: found.measure.name().to_owned(),
        now: found.now,
        stays: values.is_empty().then(|| stays.to_owned()),
        values,
        between: [range.low, range.high],
        conditions,
        sides,
        sentence,
    }
}

/// How a measure is said.
struct Words {
    equals: &'static str,
    even: &'static str,
    better: &'static str,
    worse: &'static str,
}

impl Words {
    fn of(measure: Measure) -> Self {
        match measure {
            Measure::YearlyCost => Self {
                equals: "cost as much a year as today's system",
                even: "breaks even",
                better: "cheaper",
                worse: "dearer",
            },
            Measure::LifetimeCost => Self {
                equals: "cost as much over the years as today's system",
                even: "breaks even over the years",
                better: "cheaper",
                worse: "dearer",
            },
            Measure::Carbon => Self {
                equals: "emit as much as today's system",
                even: "emits as much as today's system",
                better: "lower in carbon",
                worse: "higher in carbon",
            },
        }
    }
}

/// The unit of a lever; money in the currency of the case.
pub(super) fn unit(lever: Lever, pair: &Pair) -> String {
    if lever.is_money() {
        pair.case().currency.code().to_owned()
    } else {
        lever.unit().to_owned()
    }
}

/// How prices of a kilowatt-hour are said in a currency: multiples of its unit, and the words for it; 100 and "p/kWh".
pub(super) fn price_unit(currency: Currency) -> (f64, String) {
    let tenth = currency.price_words(Decimal::new(1, 1), "kWh");
    match tenth.split_once(' ') {
        Some((number, unit)) if number.starts_with("10.") => (100.0, unit.to_owned()),
        _ => (1.0, format!("{}/kWh", currency.code())),
    }
}

/// A number without decimals that say nothing.
pub fn short(value: f64) -> String {
    let digits = if value.abs() >= 100.0 {
        0
    } else if value.abs() >= 10.0 {
        1
    } else {
        2
    };
    let text = format!("{value:.digits$}");
    if text.contains('.') {
        text.trim_end_matches('0').trim_end_matches('.').to_owned()
    } else {
        text
    }
}

/// A value of a lever as it is said aloud.
pub(super) fn condition(lever: Lever, now: f64, value: f64, pair: &Pair) -> String {
    let choice = pair.choice();
    let code = pair.case().currency.code();
    let times = |what: &str, more: &str, less: &str, absolute: Option<String>| {
        let percent = (value - 1.0) * 100.0;
        let side = if percent >= 0.0 { more } else { less };
        let percent = percent.abs();
        let percent = if percent < 9.5 {
            format!("{percent:.1}")
        } else {
            format!("{percent:.0}")
        };
        let absolute = absolute.map_or_else(String::new, |absolute| format!(" ({absolute})"));
        format!(
            "{what} {} % {side}{absolute}",
            percent.trim_end_matches(".0")
        )
    };
    match lever {
        Lever::ElectricityRate => times(
            "electricity",
            "dearer",
            "cheaper",
            rates(&choice.electricity, value),
        ),
        Lever::FuelRate => {
            let account = pair.today().fuel.as_ref().or(choice.fuel.as_ref());
            let what = account.map_or_else(
                || "fuel".to_owned(),
                |account| account.tariff.fuel.name().replace('-', " "),
            );
            times(
                &what,
                "dearer",
                "cheaper",
                account.and_then(|account| rates(account, value)),
            )
        }
        Lever::HeatLoss => {
            let w_per_k = choice.system.home.fabric.heat_loss_w_per_k() * value;
            times(
                "a heat loss",
                "larger",
                "smaller",
                Some(format!("{w_per_k:.0} W/K")),
            )
        }
        Lever::FlowTemperature => {
            // Close to where it stands a whole kelvin would say nothing.
            let digits = usize::from((value - now).abs() < 2.0);
            format!(
                "a design flow of {value:.digits$} °C (now {} °C)",
                as_set(now)
            )
        }
        Lever::Indoor => format!("rooms at {value:.1} °C (now {} °C)", as_set(now)),
        Lever::HotWater => times("hot water", "more", "less", None),
        Lever::RatedOutput => format!("a machine of {value:.1} kW (now {now:.1} kW)"),
        Lever::FieldFactor => format!(
            "{:.0} % of laboratory performance (now {:.0} %)",
            value * 100.0,
            now * 100.0
        ),
        Lever::HighLift => times("electricity at a high lift", "more", "less", None),
        Lever::PartLoad => times("electricity at part load", "more", "less", None),
        Lever::OutputInCold => times("an output in the cold", "larger", "smaller", None),
        Lever::LoopResistance => {
            let absolute = match choice.system.heating.machine() {
                Some(system) => match &system.source {
                    Source::Ground(ground) => {
                        Some(format!("{:.2} K/kW", ground.resistance_k_per_kw * value))
                    }
                    _ => None,
                },
                _ => None,
            };
            times("a loop resistance", "larger", "smaller", absolute)
        }
        Lever::LoopLength => format!("a loop of {value:.0} m (now {now:.0} m)"),
        Lever::Capital => format!("a capital of {value:.0} {code} (now {now:.0} {code})"),
        Lever::Grant => format!("a grant of {value:.0} {code} (now {now:.0} {code})"),
        Lever::BoilerEfficiency => times("a boiler efficiency", "higher", "lower", None),
        Lever::ElectricityCarbon => times("the carbon of electricity", "higher", "lower", None),
    }
}

/// The rates of a tariff's bands times a factor, as long as there are few enough to be said: "night 11.90 p/kWh, day 28.10 p/kWh".
fn rates(account: &Account, factor: f64) -> Option<String> {
    /// More bands than this nobody says aloud.
    const SAID: usize = 3;
    let tariff = &account.tariff;
    let prices = tariff.prices.last()?;
    let bands = &prices.bands;
    let factor = Decimal::from_f64(factor)?;
    let one = bands.len() == 1;
    let said: Option<Vec<String>> = bands
        .iter()
        .map(|band| {
            let amount = band.rate.amount.checked_mul(factor)?.round_dp(4);
            let words = tariff.currency.price_words(amount, band.rate.unit.symbol);
            Some(if one {
                words
            } else {
                format!("{} {words}", band.label)
            })
        })
        .collect();
    let tax = if prices.tax.energy_factor() > 1.0 {
        " before tax"
    } else {
        ""
    };
    said.filter(|said| !said.is_empty() && said.len() <= SAID)
        .map(|said| said.join(", ") + tax)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn numbers_are_said_without_idle_decimals() {
        assert_eq!(short(3.0), "3");
        assert_eq!(short(0.2), "0.2");
        assert_eq!(short(12.34), "12.3");
        assert_eq!(short(11_400.0), "11400");
        assert_eq!(short(100.0), "100");
    }

    #[test]
    fn prices_are_in_the_sub_unit_where_one_is_usual() {
        let unit = |code: &str| price_unit(Currency::parse(code).unwrap());
        assert_eq!(unit("GBP"), (100.0, "p/kWh".to_owned()));
        assert_eq!(unit("JPY"), (1.0, "JPY/kWh".to_owned()));
    }
}
