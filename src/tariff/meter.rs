//! A meter sorts each hour into a bucket, so that a run of any length keeps a handful of sums and no hours.
//!
//! A bucket is a stretch of one month under one price list, and within it the hours that see the same bands. Bills
//! follow exactly from the kilowatt-hours and the highest hour of each bucket; only hourly prices need one more sum,
//! the cost itself, because no two hours cost the same.

use std::collections::HashMap;

use chrono::{Datelike, NaiveDate};

use super::clock::{MINUTES, YearDay};
use super::metering::Flows;
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
    /// Currency units per gross kilowatt-hour without tax, where prices are hourly.
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
    /// Bought at hourly prices without tax, by bucket, currency units; 0 where no price is hourly.
    pub hourly_cost: Vec<f64>,
}

impl Meter {
    /// Sorts the hours of a civil clock.
    pub(super) fn new(tariff: &Tariff, civil: &[CivilHour]) -> Result<Self, Problems> {
        let hourly = hourly_prices(tariff, civil)?;
        let mut sorter = Sorter {
            tariff,
            kinds: Vec::new(),
            kind_of_day: HashMap::new(),
            segments: Vec::new(),
            buckets: Vec::new(),
            known: HashMap::new(),
        };
        let dates = billing_dates(civil);
        let days = day_shares(civil);
        let bucket_of_hour = civil
            .iter()
            .zip(&dates)
            .zip(&days)
            .map(|((hour, &date), &days)| sorter.sort(hour, date, days))
            .collect();
        if sorter.buckets.len() > usize::from(u16::MAX) {
            return Err(Problem::new(
                tariff.place.clone(),
                format!("{} kinds of hour", sorter.buckets.len()),
                format!("at most {}", u16::MAX),
                "use fewer bands or fewer years",
            )
            .into());
        }
        Ok(Self {
            bucket_of_hour,
            hourly,
            segments: sorter.segments,
            buckets: sorter.buckets,
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
                let (signal, tax) = signals
                    .get(usize::from(bucket))
                    .copied()
                    .unwrap_or_default();
                let hourly = self.hourly.as_ref().and_then(|prices| prices.get(hour));
                signal + hourly.unwrap_or(&0.0) * tax
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
            .map(|(((signal, tax), kwh), hourly)| signal * kwh + hourly * tax)
            .sum()
    }

    /// For every bucket its price signal without hourly prices, and what those are multiplied by for tax.
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
            Some(((by_clock(prices, bucket) + step) * tax, tax))
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

/// Days alike for one price list: which of its bands hold on them, and whether they count for demand.
#[derive(Debug, PartialEq)]
struct DayKind {
    prices: usize,
    bands: Vec<usize>,
    in_demand: bool,
}

/// Everything a bucket depends on: segment, kind of day, kind of the next day where the hour runs into it, minute.
type Key = (usize, usize, Option<usize>, u16);

/// Makes segments, buckets and kinds of day as hours come by.
struct Sorter<'a> {
    tariff: &'a Tariff,
    kinds: Vec<DayKind>,
    kind_of_day: HashMap<(usize, NaiveDate), usize>,
    segments: Vec<Segment>,
    buckets: Vec<Bucket>,
    known: HashMap<Key, u16>,
}

impl Sorter<'_> {
    /// The bucket of an hour that is billed with `date` and makes up `days` of a day.
    fn sort(&mut self, hour: &CivilHour, date: NaiveDate, days: f64) -> u16 {
        let prices = self.tariff.in_force(date);
        let (year, month0) = (date.year(), date.month0() as usize);
        match self.segments.last_mut() {
            Some(last) if (last.year, last.month0, last.prices) == (year, month0, prices) => {
                last.days += days;
            }
            _ => self.segments.push(Segment {
                year,
                month0,
                prices,
                days,
            }),
        }
        let segment = self.segments.len() - 1;
        let start = u16::from(hour.hour) * 60 + u16::from(hour.minute);
        let today = self.kind(prices, hour.date);
        let tomorrow = (start + 60 > MINUTES)
            .then(|| hour.date.succ_opt())
            .flatten()
            .map(|next| self.kind(prices, next));
        let key = (segment, today, tomorrow, start);
        if let Some(&bucket) = self.known.get(&key) {
            return bucket;
        }
        let bucket = self.bucket(key);
        let same = self.buckets.iter().position(|known| *known == bucket);
        let index = same.unwrap_or_else(|| {
            self.buckets.push(bucket);
            self.buckets.len() - 1
        });
        // Held by the check at the end of `Meter::new`.
        let index = u16::try_from(index).unwrap_or(u16::MAX);
        self.known.insert(key, index);
        index
    }

    /// The kind of a day under a price list.
    fn kind(&mut self, prices: usize, date: NaiveDate) -> usize {
        if let Some(&kind) = self.kind_of_day.get(&(prices, date)) {
            return kind;
        }
        let (day, weekday) = (YearDay::of(date), self.tariff.holidays.weekday(date));
        let list = &self.tariff.prices[prices];
        let bands = list.bands.iter().enumerate();
        let kind = DayKind {
            prices,
            bands: bands
                .filter(|(_, band)| band.when.on(day, weekday))
                .map(|(i, _)| i)
                .collect(),
            in_demand: list
                .demand
                .as_ref()
                .is_some_and(|demand| demand.when.on(day, weekday)),
        };
        let same = self.kinds.iter().position(|known| *known == kind);
        let index = same.unwrap_or_else(|| {
            self.kinds.push(kind);
            self.kinds.len() - 1
        });
        self.kind_of_day.insert((prices, date), index);
        index
    }

    /// The bucket of a key: the bands of each of the hour's sixty minutes.
    fn bucket(&self, (segment, today, tomorrow, start): Key) -> Bucket {
        let kind = &self.kinds[today];
        let list = &self.tariff.prices[kind.prices];
        let mut mix: Vec<(usize, f64)> = Vec::new();
        for minute in start..start + 60 {
            let day = match tomorrow {
                Some(next) if minute >= MINUTES => &self.kinds[next],
                _ => kind,
            };
            let holds = |band: &usize| list.bands[*band].when.window.holds(minute % MINUTES);
            let Some(&band) = day.bands.iter().find(|band| holds(band)) else {
                continue;
            };
            match mix.iter_mut().find(|(known, _)| *known == band) {
                Some((_, minutes)) => *minutes += 1.0,
                None => mix.push((band, 1.0)),
            }
        }
        for (_, share) in &mut mix {
            *share /= 60.0;
        }
        let demand = list.demand.as_ref();
        Bucket {
            segment,
            mix,
            in_demand: kind.in_demand
                && demand.is_some_and(|demand| demand.when.window.holds(start)),
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

/// The date that each hour is billed with: its own, except that less than a day at either end of the series which
/// would open a month of its own goes with the month beside it (a UTC year seen by a clock that is not UTC's).
fn billing_dates(civil: &[CivilHour]) -> Vec<NaiveDate> {
    let mut dates: Vec<_> = civil.iter().map(|hour| hour.date).collect();
    let month = |date: &NaiveDate| (date.year(), date.month());
    let (Some(&first), Some(&last)) = (dates.first(), dates.last()) else {
        return dates;
    };
    let head = dates
        .iter()
        .take_while(|date| month(date) == month(&first))
        .count();
    if head < 24
        && let Some(&next) = dates.get(head)
    {
        dates[..head].fill(next);
    }
    let same = |date: &&NaiveDate| month(date) == month(&last);
    let tail = dates.len() - dates.iter().rev().take_while(same).count();
    if dates.len() - tail < 24
        && let Some(&before) = tail.checked_sub(1).and_then(|i| dates.get(i))
    {
        dates[tail..].fill(before);
    }
    dates
}

/// What each hour makes up of a civil day: whole days add to 1 also when the clock changes; the first and last day
/// count 24ths when the series cuts them.
fn day_shares(civil: &[CivilHour]) -> Vec<f64> {
    let days: Vec<_> = civil.chunk_by(|a, b| a.date == b.date).collect();
    let last = days.len().saturating_sub(1);
    let share = |(i, day): (usize, &&[CivilHour])| {
        let begins = i > 0 || day.first().is_some_and(|hour| hour.hour == 0);
        let ends = i < last || day.last().is_some_and(|hour| hour.hour == 23);
        let hours = if begins && ends { day.len() } else { 24 };
        std::iter::repeat_n(1.0 / hours as f64, day.len())
    };
    days.iter().enumerate().flat_map(share).collect()
}
