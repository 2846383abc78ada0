//! The tables `[odds]` and `[choice.odds]`: what is not known for certain, and within what.

use schemars::{JsonSchema, Schema};
use serde::Deserialize;
use toml::Value;

use super::leaves::HeatLossSource;
use super::notes::Notes;
use super::raw;
use crate::document::{Check, Leaf, LeafValue, Section};
use crate::problem::Problems;
use crate::study::odds::{Declared, Range};
use crate::study::{Case, Lever};
use crate::units::{
    HeatLossCoefficient, Length, Measure, Power, Share, Temperature, TemperatureDifference,
    UnitProblem, parse,
};

/// How far home, supply and today's boiler may be off, in place of the usual ranges.
#[derive(Debug, Deserialize, JsonSchema)]
pub(super) struct OddsTable {
    /// Every price of electricity, as a share of the tariff's: { low = "85 %", likely = "100 %", high = "130 %" }.
    pub electricity_rate: Option<Section<RangeTable>>,
    /// Every price of gas, or of what today's boiler burns, as a share of the tariff's.
    pub gas_rate: Option<Section<RangeTable>>,
    /// Heat loss, as a coefficient or as a share of the home's.
    pub heat_loss: Option<Section<RangeTable>>,
    /// Indoor temperature of the first choice; every system is moved by the same difference.
    pub indoor: Option<Section<RangeTable>>,
    /// Hot water, as a share of the home's.
    pub hot_water: Option<Section<RangeTable>>,
    /// Efficiency of today's boiler, as a share of what it is taken to be.
    pub boiler_efficiency: Option<Section<RangeTable>>,
    /// Carbon of electricity, as a share of its factor.
    pub electricity_carbon: Option<Section<RangeTable>>,
    /// Correlation of the price of electricity with that of gas, -100 % to 100 %.
    pub price_correlation: Option<Leaf<Share>>,
    /// Standard error to which every chance is to be known, at which `odds` stops.
    pub precision: Option<Leaf<Share>>,
}

/// How far a choice may be off, in place of the usual ranges.
#[derive(Debug, Deserialize, JsonSchema)]
pub(super) struct ChoiceOddsTable {
    /// Design flow temperature.
    pub flow: Option<Section<RangeTable>>,
    /// Rated output of its machine.
    pub rated_output: Option<Section<RangeTable>>,
    /// What its machine keeps of its laboratory performance.
    pub field_factor: Option<Section<RangeTable>>,
    /// Electricity for a unit of heat at a lift (flow less source) 30 K above the rated one, as a share of the sheet's; in proportion at
    /// other lifts, none at the rated one.
    pub electricity_at_high_lift: Option<Section<RangeTable>>,
    /// Electricity for a unit of heat at the least output, as a share of the sheet's; in proportion up to the greatest, where there is none.
    pub electricity_at_part_load: Option<Section<RangeTable>>,
    /// Greatest output at -7 °C outdoors (5 K below the rated brine or water), as a share of the sheet's; in proportion between, none from
    /// the rated source temperature on.
    pub output_in_cold: Option<Section<RangeTable>>,
    /// Loop resistance, as a share of the choice's.
    pub loop_resistance: Option<Section<RangeTable>>,
    /// Length of its bores or trenches.
    pub loop_length: Option<Section<RangeTable>>,
}

/// A range: low, likely and high; low and high, all alike; mean and deviation, normal; median and deviation, log-normal.
#[derive(Debug, Deserialize, JsonSchema)]
pub(super) struct RangeTable {
    /// Never below.
    pub low: Option<Leaf<Figure>>,
    /// Most likely.
    pub likely: Option<Leaf<Figure>>,
    /// Never above.
    pub high: Option<Leaf<Figure>>,
    /// Mean of a normal range.
    pub mean: Option<Leaf<Figure>>,
    /// Median of a log-normal range.
    pub median: Option<Leaf<Figure>>,
    /// Standard deviation: of a normal range in its own unit, of a log-normal one as a percentage up or down.
    pub deviation: Option<Leaf<Figure>>,
}

/// A number of a range as it is written: its lever says in which units.
#[derive(Debug, Clone, PartialEq, Eq)]
pub(super) enum Figure {
    /// In quotes, with its unit.
    Quoted(String),
    /// A bare number, which is refused with what its lever wants.
    Bare(String),
}

impl LeafValue for Figure {
    fn read(value: &Value) -> Result<Self, UnitProblem> {
        match value {
            Value::Integer(_) | Value::Float(_) => Ok(Self::Bare(value.to_string())),
            _ => String::read(value)
                .map(Self::Quoted)
                .map_err(|problem| UnitProblem {
                    allowed: "a number with its unit, in quotes".to_owned(),
                    remedy: "write for example \"90 %\"".to_owned(),
                    ..problem
                }),
        }
    }

    fn schema() -> Schema {
        String::schema()
    }
}

/// What a brief says about its unknowns.
#[derive(Debug, Clone, Default)]
pub(super) struct Said {
    declared: Vec<(Declared, std::ops::Range<usize>)>,
    /// Correlation of the two prices.
    pub price_correlation: Option<f64>,
    /// Where it stands.
    correlation_at: Option<std::ops::Range<usize>>,
    /// Standard error asked for, as a fraction.
    pub precision: Option<f64>,
}

/// Reads one number of a range into the unit of its lever.
type Reader = fn(&str) -> Result<f64, UnitProblem>;

/// A number without a unit up to this is meant as a multiple, beyond it as a quantity or a percentage.
const LARGEST_MULTIPLE: f64 = 5.0;

fn share(text: &str) -> Result<f64, UnitProblem> {
    parse::<Share>(text)
        .map(Share::fraction)
        .map_err(|problem| match text.trim().parse::<f64>() {
            Ok(number) if number.abs() <= LARGEST_MULTIPLE => UnitProblem {
                remedy: format!(
                    "write \"{} %\" if that share of what stands in the brief is meant",
                    crate::answer::short(number * 100.0)
                ),
                ..problem
            },
            _ => problem,
        })
}

/// A heat loss as a coefficient, or as a share of the home's, which is given in W/K where the brief states it.
fn loss(text: &str, home_w_per_k: Option<f64>) -> Result<f64, UnitProblem> {
    match (parse::<HeatLossCoefficient>(text), home_w_per_k) {
        (Ok(loss), Some(home)) => Ok(loss.w_per_k() / home),
        (Ok(_), None) => Err(UnitProblem {
            found: format!("\"{text}\" for a home whose heat loss is not stated in W/K"),
            allowed: "a share in %".to_owned(),
            remedy: "write the range as shares of the home's heat loss, for example \"90 %\""
                .to_owned(),
        }),
        (Err(coefficient), home) => share(text).map_err(|problem| match home {
            Some(_) => UnitProblem {
                allowed: format!("{}, or {}", coefficient.allowed, problem.allowed),
                remedy: match text.trim().parse::<f64>() {
                    Ok(number) if number.abs() > LARGEST_MULTIPLE => coefficient.remedy,
                    _ => problem.remedy,
                },
                ..problem
            },
            None => problem,
        }),
    }
}

fn celsius(text: &str) -> Result<f64, UnitProblem> {
    parse::<Temperature>(text).map(Temperature::c)
}

fn kelvin(text: &str) -> Result<f64, UnitProblem> {
    parse::<TemperatureDifference>(text).map(TemperatureDifference::k)
}

fn kilowatts(text: &str) -> Result<f64, UnitProblem> {
    parse::<Power>(text).map(Measure::canonical)
}

fn metres(text: &str) -> Result<f64, UnitProblem> {
    parse::<Length>(text).map(Measure::canonical)
}

/// Reads the tables; ranges of a choice belong to its place among the systems, ranges of the home to the first choice.
pub(super) fn said(raw: &raw::Brief, check: &mut Check) -> Said {
    let mut said = Said::default();
    if let Some(odds) = &raw.odds {
        said.price_correlation = check.value(&odds.price_correlation).map(Share::fraction);
        said.correlation_at = odds.price_correlation.as_ref().map(Leaf::span);
        if let (Some(correlation), Some(leaf)) = (said.price_correlation, &odds.price_correlation)
            && correlation.abs() > 1.0
        {
            check.refuse(
                &leaf.span(),
                leaf.written(),
                "from -100 % to 100 %",
                "0 % lets the two prices go their own ways",
            );
        }
        said.precision = check.value(&odds.precision).map(Share::fraction);
        if let (Some(precision), Some(leaf)) = (said.precision, &odds.precision)
            && !(0.0005..=0.5).contains(&precision)
        {
            check.refuse(
                &leaf.span(),
                leaf.written(),
                "from 0.05 % to 50 %",
                "a finer chance would need more than a million samples",
            );
        }
        let per_home =
            raw.home
                .as_ref()
                .and_then(|home| match home.heat_loss.as_ref()?.value().ok()? {
                    HeatLossSource::Stated(loss) => Some(loss.w_per_k()),
                    HeatLossSource::Bills(_) => None,
                });
        let ranges: [(Lever, &Option<Section<RangeTable>>, Reader, Reader); 7] = [
            (Lever::ElectricityRate, &odds.electricity_rate, share, share),
            (Lever::FuelRate, &odds.gas_rate, share, share),
            (Lever::HeatLoss, &odds.heat_loss, share, share),
            (Lever::Indoor, &odds.indoor, celsius, kelvin),
            (Lever::HotWater, &odds.hot_water, share, share),
            (
                Lever::BoilerEfficiency,
                &odds.boiler_efficiency,
                share,
                share,
            ),
            (
                Lever::ElectricityCarbon,
                &odds.electricity_carbon,
                share,
                share,
            ),
        ];
        for (lever, table, value, deviation) in ranges {
            let read = |text: &str| match lever {
                Lever::HeatLoss => loss(text, per_home),
                _ => value(text),
            };
            said.add(lever, 1, table, (&read, &deviation), check);
        }
    }
    for (place, choice) in raw.choice.iter().enumerate() {
        let Some(odds) = &choice.odds else { continue };
        let ranges: [(Lever, &Option<Section<RangeTable>>, Reader, Reader); 8] = [
            (Lever::FlowTemperature, &odds.flow, celsius, kelvin),
            (Lever::RatedOutput, &odds.rated_output, kilowatts, kilowatts),
            (Lever::FieldFactor, &odds.field_factor, share, share),
            (
                Lever::HighLift,
                &odds.electricity_at_high_lift,
                share,
                share,
            ),
            (
                Lever::PartLoad,
                &odds.electricity_at_part_load,
                share,
                share,
            ),
            (Lever::OutputInCold, &odds.output_in_cold, share, share),
            (Lever::LoopResistance, &odds.loop_resistance, share, share),
            (Lever::LoopLength, &odds.loop_length, metres, metres),
        ];
        for (lever, table, value, deviation) in ranges {
            said.add(lever, place + 1, table, (&value, &deviation), check);
        }
    }
    if let Some(odds) = raw.today.as_ref().and_then(|today| today.odds.as_ref()) {
        check.refuse(
            &odds.span(),
            "[today.odds]",
            "[odds] for the home, its supplies and today's boiler, [choice.odds] for a choice",
            "move its lines to [odds]",
        );
    }
    said
}

/// How the text of a range's field is read.
type Reading<'a> = &'a dyn Fn(&str) -> Result<f64, UnitProblem>;

impl Said {
    fn add(
        &mut self,
        lever: Lever,
        choice: usize,
        table: &Option<Section<RangeTable>>,
        (value, deviation): (Reading<'_>, Reading<'_>),
        check: &mut Check,
    ) {
        let Some(table) = table else { return };
        let before = check.problems().len();
        let [low, likely, high, mean, median] = [
            &table.low,
            &table.likely,
            &table.high,
            &table.mean,
            &table.median,
        ]
        .map(|leaf| number(leaf, value, check));
        let log_normal = table.median.is_some();
        let deviation = if log_normal { &share } else { deviation };
        let deviation = number(&table.deviation, deviation, check);
        if check.problems().len() > before {
            return;
        }
        let range = match (low, likely, high, mean, median, deviation) {
            (Some(low), Some(likely), Some(high), None, None, None) => {
                Range::Triangle { low, likely, high }
            }
            (Some(low), None, Some(high), None, None, None) => Range::Even { low, high },
            (None, None, None, Some(mean), None, Some(deviation)) => {
                Range::Normal { mean, deviation }
            }
            (None, None, None, None, Some(median), Some(deviation)) => Range::LogNormal {
                median,
                deviation: deviation.ln_1p(),
            },
            _ => {
                check.refuse(
                    &table.span(),
                    format!("a range of {} that is neither of these", lever.name()),
                    "low, likely and high; low and high; mean and deviation; median and deviation",
                    "write for example { low = \"…\", likely = \"…\", high = \"…\" }",
                );
                return;
            }
        };
        let span = table.span();
        if placed(range.check(lever.name()), &span, check) {
            let declared = Declared {
                lever,
                choice,
                range,
            };
            self.declared.push((declared, span));
        }
    }

    /// Checks every range against the case and notes it among what was assumed.
    pub fn checked(self, case: &Case, check: &mut Check, notes: &mut Notes) -> Vec<Declared> {
        if let Some(span) = &self.correlation_at
            && Lever::FuelRate.now(case, 1).is_none()
        {
            check.refuse(
                span,
                "a correlation with the price of gas, and no system that burns any",
                "only where today's system or a choice burns a fuel",
                "leave the line out",
            );
        }
        let mut kept = Vec::new();
        for (declared, span) in self.declared {
            if placed(declared.check(case), &span, check) {
                let ends = [0.1, 0.5, 0.9].map(|share| {
                    let value = declared.range.at(share).unwrap_or(f64::NAN);
                    crate::answer::short(value)
                });
                let unit = declared.lever.unit();
                let [low, middle, high] = ends;
                let value = format!("{middle} {unit}; {low} to {high} in eight cases of ten");
                notes.add(
                    format!("range of {}", declared.lever.name()),
                    value.replace(" ;", ";"),
                    "declared",
                );
                kept.push(declared);
            }
        }
        kept
    }
}

/// Puts problems of a range where the range stands; whether there were none.
fn placed(result: Result<(), Problems>, span: &std::ops::Range<usize>, check: &mut Check) -> bool {
    let Err(problems) = result else { return true };
    for problem in problems.iter() {
        let field = problem.place.field.as_deref().unwrap_or("range");
        let found = format!("{field}: {}", problem.found);
        check.refuse(span, found, problem.allowed.clone(), problem.remedy.clone());
    }
    false
}

fn number(
    leaf: &Option<Leaf<Figure>>,
    read: &dyn Fn(&str) -> Result<f64, UnitProblem>,
    check: &mut Check,
) -> Option<f64> {
    let refused = match check.value(leaf)? {
        Figure::Quoted(text) => read(&text),
        Figure::Bare(number) => match read(&number) {
            // A number in quotes may stand without a unit, one without quotes may not.
            Ok(_) => Err(UnitProblem {
                found: String::new(),
                allowed: "a number with its unit, in quotes".to_owned(),
                remedy: format!("write \"{number}\""),
            }),
            Err(problem) => Err(problem),
        }
        .map_err(|problem| UnitProblem {
            found: format!("the bare number {number}"),
            ..problem
        }),
    };
    match refused {
        Ok(number) => Some(number),
        Err(problem) => {
            let span = leaf.as_ref()?.span();
            check.refuse(&span, problem.found, problem.allowed, problem.remedy);
            None
        }
    }
}
