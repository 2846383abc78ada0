//! A meter sorts each hour into a bucket, so that a run of any length keeps a handful of sums and no hours.
//!
//! A bucket is a stretch of one month under one price list, and within it the hours that see the same bands. Bills
//! follow exactly from the kilowatt-hours and the highest hour of each bucket; only hourly prices need one more sum,
//! the cost itself, because no two hours cost the same.

use chrono::NaiveDate;

use super::metering::Flows;
use super::sort::sort;
use super::{Prices, Tariff};
use crate::calendar::CivilHour;
use crate::problem::{Problem, Problems};

/// A month, or the part of one that is under one price list.
#[derive(Debug, Clone, PartialEq)]
pub struct Segment {
    /// Civil year.
    pub year: i32,
    /// Month from 0.
    pub month0: usize,
    /// Place of the price list in the tariff.
    pub prices: usize,
    /// Civil days; a day cut by the end of the series counts by its hours.
    pub days: f64,
}

impl Segment {
    /// Days in the whole month.
    pub fn month_days(&self) -> f64 {
        let first = |year, month0| NaiveDate::from_ymd_opt(year, month0 + 1, 1);
        let month0 = u32::try_from(self.month0).unwrap_or(0);
        let (next_year, next) = if month0 == 11 {
            (self.year + 1, 0)
        } else {
            (self.year, month0 + 1)
        };
        match (first(self.year, month0), first(next_year, next)) {
            (Some(first), Some(next)) => (next - first).num_days() as f64,
            _ => 30.0,
        }
    }

    /// Days in the months `months` of its year.
    pub fn days_in(&self, months: std::ops::Range<usize>) -> f64 {
        months
            .map(|month0| {
                Self {
                    month0,
                    ..self.clone()
                }
                .month_days()
            })
            .sum()
    }
}

/// Hours of one segment that are priced alike.
#[derive(Debug, Clone, PartialEq)]
pub struct Bucket {
    /// Place of its segment.
    pub segment: usize,
    /// The bands an hour of it sees and its share in each: two where a band begins within the hour.
    pub mix: Vec<(usize, f64)>,
    /// Whether its hours count for the demand charge.
    pub in_demand: bool,
}

/// Sorts hours into buckets.
#[derive(Debug, Clone, PartialEq)]
pub struct Meter {
    bucket_of_hour: Vec<u16>,
    /// Currency units per gross kilowatt-hour without tax, where prices are hourly, before [`Hourly::times`](super::Hourly).
    hourly: Option<Vec<f64>>,
    segments: Vec<Segment>,
    buckets: Vec<Bucket>,
}

/// Sums of a meter: what a run keeps instead of its hours.
#[derive(Debug, Clone, PartialEq)]
pub struct Reading {
    /// Bought, by bucket, gross kilowatt-hours.
    pub import_kwh: Vec<f64>,
    /// Fed back, by bucket, kilowatt-hours.
    pub export_kwh: Vec<f64>,
    /// Highest hourly mean power, by bucket, kilowatts.
    pub peak_kw: Vec<f64>,
    /// Bought at hourly prices without tax and before [`Hourly::times`](super::Hourly), by bucket, currency units; 0 where no price is
    /// hourly.
    pub hourly_cost: Vec<f64>,
}

impl Meter {
    /// Sorts the hours of a civil clock.
    pub(super) fn new(tariff: &Tariff, civil: &[CivilHour]) -> Result<Self, Problems> {
        let hourly = hourly_prices(tariff, civil)?;
        let sorted = sort(tariff, civil);
        let narrow = |bucket: &usize| u16::try_from(*bucket).ok();
        let Some(bucket_of_hour) = sorted.bucket_of_hour.iter().map(narrow).collect() else {
            return Err(Problem::new(
                tariff.place.clone(),
                format!("{} kinds of hour", sorted.buckets.len()),
                format!("at most {}", u16::MAX),
                "use fewer bands or fewer years",
            )
            .into());
        };
        Ok(Self {
            bucket_of_hour,
            hourly,
            segments: sorted.segments,
            buckets: sorted.buckets,
        })
    }

    /// The parts of months, in order.
    pub fn segments(&self) -> &[Segment] {
        &self.segments
    }

    /// The buckets, in the order in which they first occur.
    pub fn buckets(&self) -> &[Bucket] {
        &self.buckets
    }

    /// How many hours were sorted.
    pub fn hours(&self) -> usize {
        self.bucket_of_hour.len()
    }

    /// The bucket of an hour.
    pub fn bucket(&self, hour: usize) -> Option<usize> {
        self.bucket_of_hour
            .get(hour)
            .map(|&bucket| usize::from(bucket))
    }

    /// The bucket of every hour.
    pub fn bucket_column(&self) -> &[u16] {
        &self.bucket_of_hour
    }

    /// A reading of nothing.
    pub fn zero(&self) -> Reading {
        let zeros = vec![0.0; self.buckets.len()];
        Reading {
            import_kwh: zeros.clone(),
            export_kwh: zeros.clone(),
            peak_kw: zeros.clone(),
            hourly_cost: zeros,
        }
    }

    /// Price signal of every hour; see [`Tariff::price_column`].
    pub fn price_column(&self, tariff: &Tariff, expected_kwh_per_year: Option<f64>) -> Vec<f64> {
        let signals = self.signals(tariff, expected_kwh_per_year);
        self.bucket_of_hour
            .iter()
            .enumerate()
            .map(|(hour, &bucket)| {
                let (signal, times) = signals
                    .get(usize::from(bucket))
                    .copied()
                    .unwrap_or_default();
                let hourly = self.hourly.as_ref().and_then(|prices| prices.get(hour));
                signal + hourly.unwrap_or(&0.0) * times
            })
            .collect()
    }

    /// What the reading would have cost at the price signal: compare with the bill's energy and its tax.
    pub fn signal_cost(
        &self,
        tariff: &Tariff,
        reading: &Reading,
        expected_kwh_per_year: Option<f64>,
    ) -> f64 {
        self.signals(tariff, expected_kwh_per_year)
            .iter()
            .zip(&reading.import_kwh)
            .zip(&reading.hourly_cost)
            .map(|(((signal, times), kwh), hourly)| signal * kwh + hourly * times)
            .sum()
    }

    /// For every bucket its price signal without hourly prices, and what those are multiplied by, tax included.
    fn signals(&self, tariff: &Tariff, expected_kwh_per_year: Option<f64>) -> Vec<(f64, f64)> {
        let signal = |bucket: &Bucket| {
            let segment = self.segments.get(bucket.segment)?;
            let prices = tariff.prices.get(segment.prices)?;
            let tax = prices.tax.energy_factor();
            let step = prices.steps.as_ref().and_then(|steps| {
                let kwh = expected_kwh_per_year.unwrap_or(0.0) / steps.every.per_year();
                steps.reached(kwh)
            });
            let step = step.map_or(0.0, |step| step.rate.per_gross_kwh());
            let times = prices.hourly.as_ref().map_or(1.0, |hourly| hourly.times);
            Some(((by_clock(prices, bucket) + step) * tax, times * tax))
        };
        let signals = self.buckets.iter().map(signal);
        signals.map(Option::unwrap_or_default).collect()
    }
}

/// Price by the clock in a bucket.
fn by_clock(prices: &Prices, bucket: &Bucket) -> f64 {
    let rate = |&(band, share): &(usize, f64)| {
        let band = prices.bands.get(band)?;
        Some(band.rate.per_gross_kwh() * share)
    };
    bucket.mix.iter().filter_map(rate).sum()
}

impl Reading {
    /// Adds what passed the meter in one hour.
    pub fn record(&mut self, meter: &Meter, hour: usize, flows: Flows) {
        let Some(bucket) = meter.bucket(hour) else {
            return;
        };
        self.import_kwh[bucket] += flows.import_kwh;
        self.export_kwh[bucket] += flows.export_kwh;
        // One hour: its kilowatt-hours are its mean kilowatts.
        self.peak_kw[bucket] = self.peak_kw[bucket].max(flows.import_kwh);
        if let Some(prices) = &meter.hourly {
            self.hourly_cost[bucket] += flows.import_kwh * prices[hour];
        }
    }
}

/// The hourly price of every hour, where any price list has them; 0 under a list that has none.
fn hourly_prices(tariff: &Tariff, civil: &[CivilHour]) -> Result<Option<Vec<f64>>, Problems> {
    if tariff.prices.iter().all(|prices| prices.hourly.is_none()) {
        return Ok(None);
    }
    let mut missing: Vec<&CivilHour> = Vec::new();
    let mut column = Vec::with_capacity(civil.len());
    for hour in civil {
        let list = &tariff.prices[tariff.in_force(hour.date)];
        let price = list.hourly.as_ref().map(|hourly| {
            if hourly.every_year {
                hourly.per_kwh.at_any_year(hour)
            } else {
                hourly.per_kwh.at(hour)
            }
        });
        match price {
            None => column.push(0.0),
            Some(Some(price)) => column.push(price),
            Some(None) => missing.push(hour),
        }
    }
    let (Some(first), Some(last)) = (missing.first(), missing.last()) else {
        return Ok(Some(column));
    };
    let say = |hour: &CivilHour| format!("{} {:02}:{:02}", hour.date, hour.hour, hour.minute);
    let covered: Vec<_> = tariff
        .prices
        .iter()
        .filter_map(|prices| prices.hourly.as_ref())
        .map(|hourly| hourly.per_kwh.covers())
        .collect();
    Err(Problem::new(
        tariff.place.clone().in_field("hourly"),
        format!(
            "no hourly price for {} of {} hours, from {} to {}",
            missing.len(),
            civil.len(),
            say(first),
            say(last)
        ),
        format!("a price for every hour; the file covers {}", covered.join(", ")),
        "give prices for the same year as the weather, or set every_year = true to use one year's prices for any",
    )
    .into())
}
