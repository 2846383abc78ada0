//! From the text of a price to a rate per unit of fuel.

use rust_decimal::Decimal;

use super::fields::TariffFields;
use super::{DOCUMENT, parsed};
use crate::bounds::Bound;
use crate::document::{Check, Leaf};
use crate::problem::{Finding, Severity};
use crate::tariff::{Rate, Standing, StandingSpan};
use crate::units::{
    CalorificBasis, CalorificValue, Currency, Fuel, FuelUnit, UnitProblem, parse_price,
    split_number,
};

/// What metered gas is multiplied by: 1 for the metric reference state, 1.02264 in Britain, less in the mountains.
const VOLUME_CORRECTION: Bound = Bound {
    label: "volume correction",
    low: 0.7,
    high: 1.3,
    unit: "",
};

/// Currencies in which a kilowatt-hour above [`HIGH`] is likely a slip of the unit, such as GBP for p.
const LARGE_UNIT: [&str; 7] = ["GBP", "EUR", "USD", "CHF", "CAD", "AUD", "NZD"];
/// Currency units per kilowatt-hour; common practice, no source.
const HIGH: f64 = 2.0;

/// What to do about a negative price of energy.
const HOURLY_ONLY: &str =
    "if it is meant, give it in an [hourly] series, the only place where prices may be negative";
/// What to do about a negative charge.
const CHECK_SIGN: &str = "check the sign; what is paid to the household is written as export";

/// How the prices of a tariff are to be understood.
pub(super) struct Pricing {
    currency: Option<Currency>,
    fuel: Option<Fuel>,
    basis: CalorificBasis,
    calorific_value: Option<CalorificValue>,
    volume_correction: f64,
    /// What was odd.
    pub(super) findings: Vec<Finding>,
}

impl Pricing {
    pub(super) fn read(
        fields: &TariffFields,
        check: &mut Check,
        currency: Option<Currency>,
        fuel: Option<Fuel>,
    ) -> Self {
        let calorific_value = parsed(check, &fields.calorific_value, CalorificValue::parse);
        let basis = check.value(&fields.calorific_basis).map(|(basis,)| basis);
        if fields.calorific_basis.is_none() && fuel.is_some_and(Fuel::is_burnt) {
            check.missing(&DOCUMENT, "calorific_basis", "\"gross\"  # or \"net\"");
        }
        let correction = check.plain_within(&fields.volume_correction, &VOLUME_CORRECTION);
        Self {
            currency,
            fuel,
            basis: basis.unwrap_or(CalorificBasis::Gross),
            calorific_value,
            volume_correction: correction.unwrap_or(1.0),
            findings: Vec::new(),
        }
    }

    /// A price of fuel.
    pub(super) fn rate(&mut self, check: &mut Check, leaf: &Option<Leaf<String>>) -> Option<Rate> {
        let rate = parsed(check, leaf, |text| {
            let Some(currency) = self.currency else {
                return Ok(None);
            };
            let price = parse_price(text, currency, "kWh")?;
            let unit = self.unit(text, &price.per)?;
            Ok(unit.map(|(unit, kwh_per_unit)| Rate {
                amount: price.amount,
                unit,
                kwh_per_unit,
            }))
        })??;
        let large = self
            .currency
            .is_some_and(|c| LARGE_UNIT.contains(&c.code()));
        if let Some(leaf) = leaf
            .as_ref()
            .filter(|_| large && rate.per_gross_kwh() > HIGH)
        {
            let place = check.place(&leaf.span());
            let code = self.currency.map_or("", Currency::code);
            let found = format!(
                "{} {code} for a kilowatt-hour is a lot",
                rate.per_gross_kwh()
            );
            let done = "it is used as written; is the unit right?";
            self.findings
                .push(Finding::new(Severity::Warning, found, done).at(&place));
        }
        Some(rate)
    }

    /// A price of fuel that cannot be negative.
    pub(super) fn positive_rate(
        &mut self,
        check: &mut Check,
        leaf: &Option<Leaf<String>>,
    ) -> Option<Rate> {
        let rate = self.rate(check, leaf)?;
        not_negative(check, leaf, rate.amount, HOURLY_ONLY).then_some(rate)
    }

    /// The rate of a unit such as `EUR/MWh`, for a price of one.
    pub(super) fn unit_rate(&self, check: &mut Check, leaf: &Option<Leaf<String>>) -> Option<f64> {
        let one = parsed(check, leaf, |text| {
            let Some(currency) = self.currency else {
                return Ok(None);
            };
            let price = parse_price(&format!("1 {text}"), currency, "MWh").map_err(|problem| {
                UnitProblem {
                    found: format!("\"{text}\" is not the unit of a price in {currency}"),
                    remedy: format!("write for example \"{currency}/MWh\""),
                    ..problem
                }
            })?;
            let unit = self.unit(text, &price.per)?;
            Ok(unit.map(|(unit, kwh_per_unit)| Rate {
                amount: price.amount,
                unit,
                kwh_per_unit,
            }))
        });
        one?.map(|rate| rate.per_gross_kwh())
    }

    /// An amount of fuel such as `600 kWh`, in gross kilowatt-hours.
    pub(super) fn amount(&self, check: &mut Check, leaf: &Option<Leaf<String>>) -> Option<f64> {
        parsed(check, leaf, |text| {
            let refuse = |found: String| UnitProblem {
                found,
                allowed: "an amount of fuel above 0".to_owned(),
                remedy: "write for example \"600 kWh\"".to_owned(),
            };
            let Some((number, symbol)) = split_number(text) else {
                return Err(refuse(format!("\"{text}\" does not begin with a number")));
            };
            if symbol.is_empty() {
                return Err(refuse(format!("\"{text}\" has no unit")));
            }
            if number <= 0.0 {
                return Err(refuse(format!("\"{text}\" is not above 0")));
            }
            let unit = self.unit(text, symbol)?;
            Ok(unit.map(|(_, kwh_per_unit)| number * kwh_per_unit))
        })?
    }

    /// A standing charge.
    pub(super) fn standing(
        &self,
        check: &mut Check,
        leaf: &Option<Leaf<String>>,
    ) -> Option<Standing> {
        let standing = parsed(check, leaf, |text| {
            let Some(currency) = self.currency else {
                return Ok(None);
            };
            let price = parse_price(text, currency, "day")?;
            let per = match price.per.as_str() {
                "day" | "d" => StandingSpan::Day,
                "month" => StandingSpan::Month,
                "year" | "a" => StandingSpan::Year,
                other => {
                    return Err(UnitProblem {
                        found: format!("\"{text}\" is per {other}"),
                        allowed: "a standing charge per day, month or year".to_owned(),
                        remedy: format!("write for example \"0.50 {currency}/day\""),
                    });
                }
            };
            Ok(Some(Standing {
                amount: price.amount,
                per,
            }))
        })??;
        not_negative(check, leaf, standing.amount, CHECK_SIGN).then_some(standing)
    }

    /// A charge per kilowatt and month.
    pub(super) fn demand(&self, check: &mut Check, leaf: &Option<Leaf<String>>) -> Option<Decimal> {
        let amount = parsed(check, leaf, |text| {
            let Some(currency) = self.currency else {
                return Ok(None);
            };
            let price = parse_price(text, currency, "kW")?;
            match price.per.as_str() {
                "kW" | "kW/month" | "kW month" => Ok(Some(price.amount)),
                other => Err(UnitProblem {
                    found: format!("\"{text}\" is per {other}"),
                    allowed: "a charge per kW of the highest hour of each month".to_owned(),
                    remedy: format!("write for example \"9.20 {currency}/kW\""),
                }),
            }
        })??;
        not_negative(check, leaf, amount, CHECK_SIGN).then_some(amount)
    }

    /// A unit of fuel and the gross kilowatt-hours in it; nothing when the fuel is not known.
    fn unit(&self, text: &str, symbol: &str) -> Result<Option<(FuelUnit, f64)>, UnitProblem> {
        let Some(unit) = FuelUnit::from_symbol(symbol) else {
            return Err(UnitProblem {
                found: format!("\"{text}\" is per {symbol}"),
                allowed: format!("a unit that fuel is sold in: {}", FuelUnit::all_symbols()),
                remedy: "write for example per kWh".to_owned(),
            });
        };
        let Some(fuel) = self.fuel else {
            return Ok(None);
        };
        if !fuel.is_burnt() && !unit.is_energy() {
            return Err(UnitProblem {
                found: format!("\"{text}\" is per {symbol}"),
                allowed: "a unit of energy, as electricity has no volume or mass".to_owned(),
                remedy: "write it per kWh".to_owned(),
            });
        }
        let kwh = unit.gross_kwh(
            fuel,
            self.basis,
            self.calorific_value,
            self.volume_correction,
        );
        kwh.map(|kwh| Some((unit, kwh))).ok_or_else(|| UnitProblem {
            found: format!(
                "\"{text}\" is per {symbol}, and no calorific value says what that holds"
            ),
            allowed: if unit.is_volume() {
                "calorific_value as energy per volume".to_owned()
            } else {
                "calorific_value as energy per mass".to_owned()
            },
            remedy: if unit.is_volume() {
                "write for example calorific_value = \"39.3 MJ/m³\"".to_owned()
            } else {
                "write for example calorific_value = \"4800 kWh/t\"".to_owned()
            },
        })
    }
}

/// Refuses a negative price outside an hourly series.
fn not_negative(
    check: &mut Check,
    leaf: &Option<Leaf<String>>,
    amount: Decimal,
    remedy: &str,
) -> bool {
    let negative = amount.is_sign_negative() && !amount.is_zero();
    if let Some(leaf) = leaf.as_ref().filter(|_| negative) {
        let text = leaf.value().map_or("", String::as_str);
        let found = format!("\"{text}\" is negative");
        check.refuse(&leaf.span(), found, "prices from 0", remedy);
    }
    !negative
}
