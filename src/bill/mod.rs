//! Bills: what a meter counted, priced line by line as the household would see it.
//!
//! Every line is a quantity, a rate and an amount, rounded once, half up. Months are shares of the lines, so twelve
//! months add up to the year to the cent.

mod entries;
mod lines;
mod month;

pub use lines::{Charge, Line};
pub use month::MonthCost;

use rust_decimal::Decimal;
use serde::Serialize;

use crate::calendar::CivilHour;
use crate::problem::{Place, Problem, Problems};
use crate::tariff::{Flows, Meter, Reading, Span, Tariff};
use crate::units::Currency;

/// Whether the home is still connected to what the tariff sells.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Connection {
    /// Something still uses it: standing and demand charges run on, also when nothing is used.
    Kept,
    /// Nothing uses it any more: what was used is charged, standing and demand charges are not.
    Ended,
}

/// One bill: a calendar month, quarter or year, or the part of it that the hours cover.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash, PartialOrd, Ord, Serialize)]
pub struct Period {
    /// Civil year.
    pub year: i32,
    /// First month of the period from 0.
    pub month0: usize,
    /// Its length.
    #[serde(serialize_with = "span_name")]
    pub span: Span,
}

fn span_name<S: serde::Serializer>(span: &Span, serializer: S) -> Result<S::Ok, S::Error> {
    serializer.serialize_str(span.name())
}

impl Period {
    /// The period that holds a month.
    pub fn of(span: Span, year: i32, month0: usize) -> Self {
        Self {
            year,
            month0: span.months(month0).start,
            span,
        }
    }
}

impl std::fmt::Display for Period {
    fn fmt(&self, f: &mut std::fmt::Formatter<'_>) -> std::fmt::Result {
        match self.span {
            Span::Year => write!(f, "{}", self.year),
            Span::Quarter => write!(f, "{} quarter {}", self.year, self.month0 / 3 + 1),
            Span::Month => write!(f, "{}-{:02}", self.year, self.month0 + 1),
        }
    }
}

/// What a tariff charges for a reading.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Bill {
    /// What it is paid in.
    pub currency: Currency,
    /// Every line, by period.
    pub lines: Vec<Line>,
    /// What each month costs; they add up to the total.
    pub months: Vec<MonthCost>,
}

impl Bill {
    /// Sum of the lines of some kinds.
    pub fn sum(&self, holds: impl Fn(Charge) -> bool) -> Decimal {
        let lines = self.lines.iter().filter(|line| holds(line.charge));
        self.currency.round(lines.map(|line| line.amount).sum())
    }

    /// Everything to pay.
    pub fn total(&self) -> Decimal {
        self.sum(|_| true)
    }

    /// Energy, before tax that is added.
    pub fn energy(&self) -> Decimal {
        self.sum(|charge| charge == Charge::Energy)
    }

    /// Standing charge, before tax that is added.
    pub fn standing(&self) -> Decimal {
        self.sum(|charge| charge == Charge::Standing)
    }

    /// Demand charge, before tax that is added.
    pub fn demand(&self) -> Decimal {
        self.sum(|charge| charge == Charge::Demand)
    }

    /// Tax that is added; nothing when the rates hold it.
    pub fn tax(&self) -> Option<Decimal> {
        let any = self.lines.iter().any(|line| line.charge == Charge::Tax);
        any.then(|| self.sum(|charge| charge == Charge::Tax))
    }

    /// What is paid for energy fed back, as a negative amount; nothing when none was.
    pub fn export(&self) -> Option<Decimal> {
        let any = self.lines.iter().any(|line| line.charge == Charge::Export);
        any.then(|| self.sum(|charge| charge == Charge::Export))
    }

    /// What one civil year costs.
    pub fn year(&self, year: i32) -> Decimal {
        let months = self.months.iter().filter(|month| month.year == year);
        self.currency.round(months.map(|month| month.amount).sum())
    }
}

/// Prices every hour of a load, gross kilowatt-hours bought by hour.
///
/// # Errors
/// When an hourly price is missing for an hour, or the load is not a number or below 0.
pub fn price(
    tariff: &Tariff,
    civil: &[CivilHour],
    kwh_by_hour: &[f64],
    connection: Connection,
) -> Result<Bill, Problems> {
    if kwh_by_hour.len() != civil.len() {
        return Err(Problem::new(
            Place::field("load"),
            format!("{} hours", kwh_by_hour.len()),
            format!("the {} hours that are priced", civil.len()),
            "give a load for every hour",
        )
        .into());
    }
    let meter = tariff.meter(civil)?;
    let mut reading = meter.zero();
    for (hour, (&import_kwh, clock)) in kwh_by_hour.iter().zip(civil).enumerate() {
        // A negative hour would vanish in its bucket's sum.
        if !import_kwh.is_finite() || import_kwh < 0.0 {
            return Err(Problem::new(
                Place::field("load"),
                format!(
                    "{import_kwh} kWh at {} {:02}:{:02}",
                    clock.date, clock.hour, clock.minute
                ),
                "energy bought in an hour, from 0",
                "what is fed back is not part of a load",
            )
            .into());
        }
        let flows = Flows {
            import_kwh,
            export_kwh: 0.0,
        };
        reading.record(&meter, hour, flows);
    }
    price_reading(tariff, &meter, &reading, connection)
}

/// Prices the sums that a run kept, the same bill to the cent as from its hours.
///
/// # Errors
/// When a sum is not a number or below 0.
pub fn price_reading(
    tariff: &Tariff,
    meter: &Meter,
    reading: &Reading,
    connection: Connection,
) -> Result<Bill, Problems> {
    lines::check(tariff, reading)?;
    Ok(lines::bill(tariff, meter, reading, connection))
}
