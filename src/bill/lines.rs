//! From the sums of a reading to the lines of a bill.

use rust_decimal::Decimal;
use rust_decimal::prelude::FromPrimitive;

use super::entries::{Amount, Entry, entries};
use super::month::{MonthCost, share};
use super::{Bill, Connection, Period};
use crate::problem::{Place, Problem, Problems};
use crate::tariff::{Meter, Prices, Reading, Segment, Tariff};

/// What a line charges for.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash, PartialOrd, Ord)]
pub enum Charge {
    /// Kilowatt-hours.
    Energy,
    /// Being connected.
    Standing,
    /// The highest hour.
    Demand,
    /// Energy fed back, a credit.
    Export,
    /// Tax on the lines above.
    Tax,
}

/// One line of a bill.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Line {
    /// The bill it stands on.
    pub period: Period,
    /// What it charges for.
    pub charge: Charge,
    /// What it is called.
    pub what: String,
    /// How much.
    pub quantity: Decimal,
    /// Of what.
    pub unit: String,
    /// Currency units for one; a share for tax.
    pub rate: Decimal,
    /// To pay, rounded.
    pub amount: Decimal,
}

/// Decimals of a quantity: a milliwatt-hour, far below any meter, so that the order of a sum cannot show.
const QUANTITY_DIGITS: u32 = 6;

/// A quantity as decimal; readings were checked to be finite and within [`GREATEST`].
fn quantity(number: f64) -> Decimal {
    Decimal::from_f64(number).map_or(Decimal::ZERO, |number| number.round_dp(QUANTITY_DIGITS))
}

/// Beyond any home, and far inside what a decimal can hold after multiplication by a price.
const GREATEST: f64 = 1e12;

/// Refuses a reading that is not one.
pub(super) fn check(tariff: &Tariff, reading: &Reading) -> Result<(), Problems> {
    let counted = [&reading.import_kwh, &reading.export_kwh, &reading.peak_kw];
    let amounts = counted.into_iter().flatten().map(|kwh| (*kwh, 0.0));
    let costs = reading.hourly_cost.iter().map(|cost| (*cost, -GREATEST));
    for (number, least) in amounts.chain(costs) {
        if !(least..=GREATEST).contains(&number) {
            let place = Place::field(format!("metered {}", tariff.fuel));
            return Err(Problem::new(
                place,
                format!("{number}"),
                format!("energy from 0 to {GREATEST:e} kWh"),
                "check the load that is priced for missing and negative hours",
            )
            .into());
        }
    }
    Ok(())
}

/// A line while its months come in.
struct Growing {
    entry: Entry,
    period: Period,
    /// Quantity and, where it has no rate, cost, by segment.
    parts: Vec<(usize, f64, f64)>,
}

/// The bill of a reading.
pub(super) fn bill(
    tariff: &Tariff,
    meter: &Meter,
    reading: &Reading,
    connection: Connection,
) -> Bill {
    let segments = meter.segments();
    let mut growing: Vec<Growing> = Vec::new();
    for entry in entries(tariff, meter, reading, connection) {
        let Some(segment) = segments.get(entry.segment) else {
            continue;
        };
        let period = Period::of(tariff.billing, segment.year, segment.month0);
        let part = match entry.amount {
            Amount::At(quantity, _) => (entry.segment, quantity, 0.0),
            Amount::Sum(quantity, cost) => (entry.segment, quantity, cost),
        };
        let same = growing.iter_mut().find(|line| line.takes(&entry, period));
        match same {
            Some(line) => line.parts.push(part),
            None => growing.push(Growing {
                entry,
                period,
                parts: vec![part],
            }),
        }
    }
    let mut by_segment = vec![Decimal::ZERO; segments.len()];
    let mut lines = Vec::new();
    let mut taxed: Vec<Taxed> = Vec::new();
    for line in growing {
        let (line, parts) = line.close(tariff);
        for &(segment, amount) in &parts {
            by_segment[segment] += amount;
            let list = segments.get(segment).map(|segment| segment.prices);
            let prices = list.and_then(|list| tariff.prices.get(list));
            if let Some(prices) = prices
                && let Some(rate) = tax_on(prices, line.charge)
            {
                Taxed::add(&mut taxed, line.period, rate, segment, amount);
            }
        }
        lines.push(line);
    }
    for tax in taxed {
        let (line, parts) = tax.close(tariff);
        for (segment, amount) in parts {
            by_segment[segment] += amount;
        }
        lines.push(line);
    }
    lines.sort_by_key(|line| (line.period, line.charge));
    Bill {
        currency: tariff.currency,
        lines,
        months: months(segments, &by_segment),
    }
}

/// Segments added up to months.
fn months(segments: &[Segment], amounts: &[Decimal]) -> Vec<MonthCost> {
    let mut months: Vec<MonthCost> = Vec::new();
    for (segment, &amount) in segments.iter().zip(amounts) {
        match months.last_mut() {
            Some(last) if (last.year, last.month0) == (segment.year, segment.month0) => {
                last.amount += amount;
            }
            _ => months.push(MonthCost {
                year: segment.year,
                month0: segment.month0,
                amount,
            }),
        }
    }
    months
}

/// The rate of tax that is added to a charge.
fn tax_on(prices: &Prices, charge: Charge) -> Option<Decimal> {
    let covers = prices.tax.covers;
    let covered = match charge {
        Charge::Energy => covers.energy,
        Charge::Standing => covers.standing,
        Charge::Demand => covers.demand,
        Charge::Export | Charge::Tax => false,
    };
    prices.tax.added().filter(|_| covered)
}

impl Growing {
    /// Whether an entry belongs on this line.
    fn takes(&self, entry: &Entry, period: Period) -> bool {
        let rate = |amount| match amount {
            Amount::At(_, rate) => Some(rate),
            Amount::Sum(..) => None,
        };
        self.period == period
            && self.entry.charge == entry.charge
            && self.entry.what == entry.what
            && self.entry.unit == entry.unit
            && rate(self.entry.amount) == rate(entry.amount)
    }

    /// The line, and what each segment adds to it.
    fn close(self, tariff: &Tariff) -> (Line, Vec<(usize, Decimal)>) {
        let currency = tariff.currency;
        let total = quantity(self.parts.iter().map(|part| part.1).sum());
        let (rate, exact): (_, Vec<_>) = match self.entry.amount {
            Amount::At(_, rate) => {
                let parts = self.parts.iter().map(|part| quantity(part.1) * rate);
                (Some(rate), parts.collect())
            }
            Amount::Sum(..) => {
                let parts = self.parts.iter().map(|part| quantity(part.2));
                (None, parts.collect())
            }
        };
        let amount = match rate {
            Some(rate) => currency.round(total * rate),
            None => currency.round(exact.iter().sum()),
        };
        let parts = share(currency, amount, &exact);
        let mean = || amount.checked_div(total).unwrap_or_default().round_dp(6);
        let line = Line {
            period: self.period,
            charge: self.entry.charge,
            what: self.entry.what,
            quantity: total.normalize(),
            unit: self.entry.unit.to_owned(),
            rate: rate.unwrap_or_else(mean).normalize(),
            amount,
        };
        let segments = self.parts.iter().map(|part| part.0);
        (line, segments.zip(parts).collect())
    }
}

/// What one rate of tax is taken of on one bill.
struct Taxed {
    period: Period,
    rate: Decimal,
    parts: Vec<(usize, Decimal)>,
}

impl Taxed {
    fn add(all: &mut Vec<Self>, period: Period, rate: Decimal, segment: usize, amount: Decimal) {
        let same = all
            .iter_mut()
            .find(|tax| tax.period == period && tax.rate == rate);
        let tax = match same {
            Some(tax) => tax,
            None => {
                all.push(Self {
                    period,
                    rate,
                    parts: Vec::new(),
                });
                let Some(tax) = all.last_mut() else { return };
                tax
            }
        };
        match tax.parts.iter_mut().find(|part| part.0 == segment) {
            Some(part) => part.1 += amount,
            None => tax.parts.push((segment, amount)),
        }
    }

    fn close(mut self, tariff: &Tariff) -> (Line, Vec<(usize, Decimal)>) {
        self.parts.sort_by_key(|part| part.0);
        let total: Decimal = self.parts.iter().map(|part| part.1).sum();
        let amount = tariff.currency.round(total * self.rate);
        let exact: Vec<_> = self.parts.iter().map(|part| part.1 * self.rate).collect();
        let parts = share(tariff.currency, amount, &exact);
        let line = Line {
            period: self.period,
            charge: Charge::Tax,
            what: "tax".to_owned(),
            quantity: total,
            unit: tariff.currency.code().to_owned(),
            rate: self.rate.normalize(),
            amount,
        };
        let segments = self.parts.iter().map(|part| part.0);
        (line, segments.zip(parts).collect())
    }
}
