//! Money: ISO 4217 currencies, their sub-units, and prices such as `"24.67 p/kWh"`.
//!
//! Amounts are decimal, never binary: a bill is rounded once per line, half up, at the currency's own digits.

use rust_decimal::prelude::FromPrimitive;
use rust_decimal::{Decimal, RoundingStrategy};

use super::text::{UnitProblem, split_number};

/// Codes in circulation, ISO 4217 as carried by OpenJDK 17.0.15 (`tests/reference/tariff_currencies.java`).
const CODES: &str = "AED AFN ALL AMD AOA ARS AUD AWG AZN BAM BBD BDT BGN BHD BIF BMD BND BOB BRL BSD BTN BWP BYN \
    BZD CAD CDF CHF CLP CNY COP CRC CUP CVE CZK DJF DKK DOP DZD EGP ERN ETB EUR FJD FKP GBP GEL GHS GIP GMD GNF \
    GTQ GYD HKD HNL HTG HUF IDR ILS INR IQD IRR ISK JMD JOD JPY KES KGS KHR KMF KPW KRW KWD KYD KZT LAK LBP LKR \
    LRD LSL LYD MAD MDL MGA MKD MMK MNT MOP MRU MUR MVR MWK MXN MYR MZN NAD NGN NIO NOK NPR NZD OMR PAB PEN PGK \
    PHP PKR PLN PYG QAR RON RSD RUB RWF SAR SBD SCR SDG SEK SGD SHP SLE SOS SRD SSP STN SVC SYP SZL THB TJS TMT \
    TND TOP TRY TTD TWD TZS UAH UGX USD UYU UZS VES VND VUV WST XAF XCD XCG XOF XPF YER ZAR ZMW ZWG";
/// Codes without a minor unit; same source.
const NO_DIGITS: &str = "BIF CLP DJF GNF ISK JPY KMF KRW PYG RWF UGX VND VUV XAF XOF XPF";
/// Codes with thousandths; same source.
const THREE_DIGITS: &str = "BHD IQD JOD KWD LYD OMR TND";

/// Other spellings of the major unit, per currency. Common practice, no source.
const SYMBOLS: &[(&str, &[&str])] = &[
    ("GBP", &["£"]),
    ("EUR", &["€"]),
    ("USD", &["$", "US$"]),
    ("CAD", &["$", "CA$"]),
    ("AUD", &["$", "A$"]),
    ("NZD", &["$", "NZ$"]),
    ("JPY", &["¥"]),
    ("CHF", &["Fr", "SFr"]),
    ("SEK", &["kr"]),
    ("NOK", &["kr"]),
    ("DKK", &["kr"]),
    ("PLN", &["zł"]),
    ("CZK", &["Kč"]),
];
/// Spellings of a hundredth, per currency. Common practice, no source.
const HUNDREDTHS: &[(&str, &[&str])] = &[
    ("GBP", &["p", "pence", "penny"]),
    ("EUR", &["ct", "c", "cent", "cents"]),
    ("USD", &["¢", "c", "cent", "cents"]),
    ("CAD", &["¢", "c", "cent", "cents"]),
    ("AUD", &["¢", "c", "cent", "cents"]),
    ("NZD", &["¢", "c", "cent", "cents"]),
    ("CHF", &["Rp", "ct"]),
    ("SEK", &["öre"]),
    ("NOK", &["øre"]),
    ("DKK", &["øre"]),
    ("PLN", &["gr"]),
    ("CZK", &["h", "hal"]),
];

/// A currency in circulation, by its ISO 4217 code.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash, PartialOrd, Ord)]
pub struct Currency(&'static str);

impl Currency {
    /// The currency of a code.
    ///
    /// # Errors
    /// A [`UnitProblem`] when the code is not one of ISO 4217 in circulation.
    ///
    /// ```
    /// use winterledger::units::Currency;
    /// assert_eq!(Currency::parse("GBP")?.minor_digits(), 2);
    /// assert!(Currency::parse("pounds").is_err());
    /// # Ok::<(), winterledger::units::UnitProblem>(())
    /// ```
    pub fn parse(code: &str) -> Result<Self, UnitProblem> {
        CODES
            .split_ascii_whitespace()
            .find(|known| *known == code.trim())
            .map(Self)
            .ok_or_else(|| UnitProblem {
                found: format!("\"{code}\" is not a currency in circulation"),
                allowed: "the three letters of ISO 4217".to_owned(),
                remedy: "write for example \"GBP\", \"EUR\" or \"USD\"".to_owned(),
            })
    }

    /// The three letters.
    pub fn code(self) -> &'static str {
        self.0
    }

    /// Digits behind the decimal point on a bill.
    pub fn minor_digits(self) -> u32 {
        let listed = |list: &str| list.split_ascii_whitespace().any(|code| code == self.0);
        if listed(NO_DIGITS) {
            0
        } else if listed(THREE_DIGITS) {
            3
        } else {
            2
        }
    }

    /// An amount as it stands on a bill: half up at the currency's digits, away from zero for credits.
    pub fn round(self, amount: Decimal) -> Decimal {
        let digits = self.minor_digits();
        let mut rounded =
            amount.round_dp_with_strategy(digits, RoundingStrategy::MidpointAwayFromZero);
        rounded.rescale(digits);
        rounded
    }

    /// A price in words, in the sub-unit where one is usual and the price is below 1: `24.67 p/kWh`, `1.31 EUR/m³`.
    pub fn price_words(self, amount: Decimal, per: &str) -> String {
        let (number, name) = if amount.abs() < Decimal::ONE && self.small() != self.0 {
            (amount * Decimal::ONE_HUNDRED, self.small())
        } else {
            (amount, self.0)
        };
        let mut number = number.round_dp(4).normalize();
        if number.scale() < 2 {
            number.rescale(2);
        }
        format!("{number} {name}/{per}")
    }

    /// Major units in one of a spelling, when the spelling belongs to this currency.
    fn factor(self, spelling: &str) -> Option<Decimal> {
        let spelled = |table: &[(&str, &[&str])]| {
            table
                .iter()
                .any(|(code, list)| *code == self.0 && list.contains(&spelling))
        };
        if spelling == self.0 || spelled(SYMBOLS) {
            Some(Decimal::ONE)
        } else if spelled(HUNDREDTHS) {
            Some(Decimal::new(1, 2))
        } else {
            None
        }
    }

    /// Every spelling of this currency, for messages: `GBP, £ or p`.
    fn spellings(self) -> String {
        let first = |table: &[(&str, &[&'static str])]| {
            let own = table.iter().find(|(code, _)| *code == self.0);
            own.and_then(|(_, list)| list.first().copied())
        };
        let all: Vec<_> = [Some(self.0), first(SYMBOLS), first(HUNDREDTHS)]
            .into_iter()
            .flatten()
            .collect();
        match all.split_last() {
            Some((last, rest)) if !rest.is_empty() => format!("{} or {last}", rest.join(", ")),
            _ => self.0.to_owned(),
        }
    }

    /// The handiest spelling for a small price: the sub-unit where there is one.
    fn small(self) -> &'static str {
        let own = HUNDREDTHS.iter().find(|(code, _)| *code == self.0);
        own.and_then(|(_, list)| list.first().copied())
            .unwrap_or(self.0)
    }
}

impl std::fmt::Display for Currency {
    fn fmt(&self, f: &mut std::fmt::Formatter<'_>) -> std::fmt::Result {
        f.write_str(self.0)
    }
}

/// An amount of money.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub struct Money {
    /// Major units.
    pub amount: Decimal,
    /// Of what.
    pub currency: Currency,
}

impl Money {
    /// Reads `"11 400 GBP"`: a number and a code of ISO 4217.
    ///
    /// # Errors
    /// A [`UnitProblem`] when there is no number, no code, or a code that is not in circulation.
    pub fn parse(text: &str) -> Result<Self, UnitProblem> {
        let refuse = |found: String| UnitProblem {
            found,
            allowed: "an amount and the three letters of its currency".to_owned(),
            remedy: "write for example \"11 400 GBP\"".to_owned(),
        };
        let Some((number, code)) = split_number(text) else {
            return Err(refuse(format!("\"{text}\" does not begin with a number")));
        };
        let currency = Currency::parse(code)
            .map_err(|_| refuse(format!("\"{text}\" has the unit \"{code}\"")))?;
        let amount = amount(number).ok_or_else(|| refuse(format!("\"{text}\" is too large")))?;
        Ok(Self { amount, currency })
    }
}

impl std::fmt::Display for Money {
    fn fmt(&self, f: &mut std::fmt::Formatter<'_>) -> std::fmt::Result {
        write!(f, "{} {}", self.currency.round(self.amount), self.currency)
    }
}

/// A number as decimal, to 15 digits and below a thousand million: sums of amounts stay far inside the type.
fn amount(number: f64) -> Option<Decimal> {
    Decimal::from_f64(number).filter(|amount| amount.abs() < Decimal::from(1_000_000_000))
}

/// The currencies that a spelling belongs to.
fn owners(spelling: &str) -> Vec<&'static str> {
    let code = CODES
        .split_ascii_whitespace()
        .filter(|code| *code == spelling);
    let tables = SYMBOLS.iter().chain(HUNDREDTHS);
    let symbols = tables.filter(|(_, list)| list.contains(&spelling));
    code.chain(symbols.map(|(code, _)| *code)).collect()
}

/// A price as written: an amount in major units of a currency, and what it buys.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Price {
    /// Major units: `"24.67 p/kWh"` is 0.2467.
    pub amount: Decimal,
    /// What stands behind the stroke: `kWh`, `day`, `kW`.
    pub per: String,
}

/// Reads a price of a currency, `"24.67 p/kWh"` or `"0.2467 GBP per kWh"`.
///
/// # Errors
/// A [`UnitProblem`] when there is no number, no currency, the currency is another one, or nothing is bought.
pub fn parse_price(text: &str, currency: Currency, per: &str) -> Result<Price, UnitProblem> {
    let example = format!("write for example \"12.5 {}/{per}\"", currency.small());
    let allowed = format!("a price in {} per {per}", currency.spellings());
    let refuse = |found: String, remedy: String| UnitProblem {
        found,
        allowed: allowed.clone(),
        remedy,
    };
    let Some((number, unit)) = split_number(text) else {
        let found = format!("\"{text}\" does not begin with a number");
        return Err(refuse(found, example));
    };
    let Some(number) = amount(number) else {
        return Err(refuse(format!("\"{text}\" is not an amount"), example));
    };
    if unit.is_empty() {
        return Err(refuse(format!("\"{text}\" has no unit"), example));
    }
    let (money, bought) = unit
        .split_once('/')
        .or_else(|| unit.split_once(" per "))
        .unwrap_or((unit, ""));
    let (money, bought) = (money.trim(), bought.trim());
    let Some(factor) = currency.factor(money) else {
        let others = owners(money);
        let found = if others.is_empty() {
            format!("\"{text}\" has the unit \"{unit}\"")
        } else {
            let others = others.join(" or ");
            format!("\"{text}\" is in {others}, but the currency is {currency}")
        };
        return Err(refuse(found, example));
    };
    if bought.is_empty() {
        let found = format!("\"{text}\" does not say what it is per");
        return Err(refuse(found, example));
    }
    Ok(Price {
        amount: number * factor,
        per: bought.to_owned(),
    })
}

#[cfg(test)]
mod tests {
    use super::*;

    fn currency(code: &str) -> Currency {
        Currency::parse(code).unwrap()
    }

    fn price(text: &str, code: &str) -> Result<Price, UnitProblem> {
        parse_price(text, currency(code), "kWh")
    }

    #[test]
    fn prices_come_out_in_major_units() {
        let amount = |text, code| price(text, code).unwrap().amount.to_string();
        assert_eq!(amount("24.67 p/kWh", "GBP"), "0.2467");
        assert_eq!(amount("0.2467 GBP/kWh", "GBP"), "0.2467");
        assert_eq!(amount("0.2467 £ per kWh", "GBP"), "0.2467");
        assert_eq!(amount("31.9 ct/kWh", "EUR"), "0.319");
        assert_eq!(amount("13.2 ¢/kWh", "USD"), "0.132");
        assert_eq!(price("57.21 p/day", "GBP").unwrap().per, "day");
    }

    #[test]
    fn other_currencies_and_bare_numbers_are_refused() {
        let mixed = price("24 ct/kWh", "GBP").unwrap_err();
        assert!(
            mixed
                .found
                .contains("is in EUR or CHF, but the currency is GBP"),
            "{mixed}"
        );
        let bare = price("24", "GBP").unwrap_err();
        assert!(bare.remedy.contains("12.5 p/kWh"), "{bare}");
        assert!(price("24 p", "GBP").is_err());
        assert!(price("p/kWh", "GBP").is_err());
        assert!(price("24 kWh", "GBP").is_err());
    }

    #[test]
    fn prices_are_said_in_the_handiest_unit() {
        let say = |text: &str, code| currency(code).price_words(text.parse().unwrap(), "kWh");
        assert_eq!(say("0.2467", "GBP"), "24.67 p/kWh");
        assert_eq!(say("0.094", "GBP"), "9.40 p/kWh");
        assert_eq!(say("1.31", "EUR"), "1.31 EUR/kWh");
        assert_eq!(say("31", "JPY"), "31.00 JPY/kWh");
        assert_eq!(say("0.123456", "EUR"), "12.3456 ct/kWh");
    }

    #[test]
    fn amounts_carry_their_code() {
        let money = Money::parse("11 400.5 GBP").unwrap();
        assert_eq!(money.to_string(), "11400.50 GBP");
        for bad in ["11400", "11400 £", "GBP", "1e12 GBP", ""] {
            assert!(Money::parse(bad).is_err(), "{bad}");
        }
    }

    /// "Half up" is how a half is rounded in commerce: 208.8165 → 208.82 but also 2.345 → 2.35, not to even.
    #[test]
    fn halves_round_up_at_the_currency_s_own_digits() {
        let round = |text: &str, code| currency(code).round(text.parse().unwrap()).to_string();
        assert_eq!(round("2.345", "GBP"), "2.35");
        assert_eq!(round("2.3449999", "GBP"), "2.34");
        assert_eq!(round("-2.345", "GBP"), "-2.35");
        assert_eq!(round("2", "EUR"), "2.00");
        assert_eq!(round("2.5", "JPY"), "3");
        assert_eq!(round("2.3455", "KWD"), "2.346");
    }
}
