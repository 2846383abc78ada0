//! Sorting hours: which segment and bucket each belongs to.

use std::collections::HashMap;

use chrono::{Datelike, NaiveDate};

use super::Tariff;
use super::clock::MINUTES;
use super::days::YearDay;
use super::meter::{Bucket, Segment};
use crate::calendar::CivilHour;

/// Hours sorted.
pub(super) struct Sorted {
    pub(super) segments: Vec<Segment>,
    pub(super) buckets: Vec<Bucket>,
    /// The bucket of each hour.
    pub(super) bucket_of_hour: Vec<usize>,
}

/// Sorts hours.
pub(super) fn sort(tariff: &Tariff, civil: &[CivilHour]) -> Sorted {
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
    let hours = civil.iter().zip(&dates).zip(&days);
    let bucket_of_hour = hours
        .map(|((hour, &date), &days)| sorter.sort(hour, date, days))
        .collect();
    Sorted {
        segments: sorter.segments,
        buckets: sorter.buckets,
        bucket_of_hour,
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
    known: HashMap<Key, usize>,
}

impl Sorter<'_> {
    /// The bucket of an hour that is billed with `date` and makes up `days` of a day.
    fn sort(&mut self, hour: &CivilHour, date: NaiveDate, days: f64) -> usize {
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
