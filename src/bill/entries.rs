//! What each part of a month is charged for, before lines are made of it.

use rust_decimal::Decimal;

use super::Connection;
use super::lines::Charge;
use crate::tariff::{Meter, Prices, Rate, Reading, Segment, StandingSpan, Tariff};

/// What one month adds to a line.
pub(super) struct Entry {
    pub(super) segment: usize,
    pub(super) charge: Charge,
    pub(super) what: String,
    pub(super) unit: &'static str,
    pub(super) amount: Amount,
}

/// How an entry is charged.
#[derive(Clone, Copy, PartialEq)]
pub(super) enum Amount {
    /// Quantity at a rate.
    At(f64, Decimal),
    /// Quantity and its cost; the rate is their quotient.
    Sum(f64, f64),
}

/// Everything that is charged before tax, segment by segment.
pub(super) fn entries(
    tariff: &Tariff,
    meter: &Meter,
    reading: &Reading,
    connection: Connection,
) -> Vec<Entry> {
    let mut entries = Vec::new();
    let in_step = step_kwh(tariff, meter, reading);
    for (index, segment) in meter.segments().iter().enumerate() {
        let Some(prices) = tariff.prices.get(segment.prices) else {
            continue;
        };
        let mut add = |charge, what: &str, unit, amount| {
            entries.push(Entry {
                segment: index,
                charge,
                what: what.to_owned(),
                unit,
                amount,
            });
        };
        let at = |rate: &Rate, kwh: f64| Amount::At(kwh / rate.kwh_per_unit, rate.amount);
        let sums = SegmentSums::of(index, prices, meter, reading);
        for (band, &kwh) in prices.bands.iter().zip(&sums.band_kwh) {
            if kwh != 0.0 {
                add(
                    Charge::Energy,
                    &band.label,
                    band.rate.unit.symbol,
                    at(&band.rate, kwh),
                );
            }
        }
        let steps = prices.steps.iter().flat_map(|steps| &steps.steps);
        for (step, &kwh) in steps.zip(&in_step[index]) {
            if kwh != 0.0 {
                add(
                    Charge::Energy,
                    &step.label,
                    step.rate.unit.symbol,
                    at(&step.rate, kwh),
                );
            }
        }
        if let (Some(hourly), true) = (&prices.hourly, sums.import_kwh != 0.0) {
            let amount = Amount::Sum(sums.import_kwh, sums.hourly_cost * hourly.times);
            add(Charge::Energy, "hourly price, mean", "kWh", amount);
        }
        if let (Some(standing), Connection::Kept) = (prices.standing, connection) {
            let (count, unit) = match standing.per {
                StandingSpan::Day => (segment.days, "days"),
                StandingSpan::Month => (segment.days / segment.month_days(), "months"),
                StandingSpan::Year => (segment.days / segment.days_in(0..12), "years"),
            };
            let amount = Amount::At(count, standing.amount);
            add(Charge::Standing, "standing charge", unit, amount);
        }
        if let (Some(demand), Connection::Kept) = (&prices.demand, connection) {
            // A month cut short pays for its share of the month.
            let share = (segment.days / segment.month_days()).min(1.0);
            let amount = Amount::At(sums.peak_kw * share, demand.amount);
            add(Charge::Demand, "highest hour of each month", "kW", amount);
        }
        if let (Some(export), true) = (&prices.export, sums.export_kwh != 0.0) {
            let amount = Amount::At(sums.export_kwh / export.kwh_per_unit, -export.amount);
            add(Charge::Export, "fed back", export.unit.symbol, amount);
        }
    }
    entries
}

/// Sums of one segment over its buckets.
struct SegmentSums {
    band_kwh: Vec<f64>,
    import_kwh: f64,
    export_kwh: f64,
    peak_kw: f64,
    hourly_cost: f64,
}

impl SegmentSums {
    fn of(segment: usize, prices: &Prices, meter: &Meter, reading: &Reading) -> Self {
        let mut sums = Self {
            band_kwh: vec![0.0; prices.bands.len()],
            import_kwh: 0.0,
            export_kwh: 0.0,
            peak_kw: 0.0,
            hourly_cost: 0.0,
        };
        for (i, bucket) in meter.buckets().iter().enumerate() {
            if bucket.segment != segment {
                continue;
            }
            for &(band, share) in &bucket.mix {
                sums.band_kwh[band] += reading.import_kwh[i] * share;
            }
            sums.import_kwh += reading.import_kwh[i];
            sums.export_kwh += reading.export_kwh[i];
            sums.hourly_cost += reading.hourly_cost[i];
            if bucket.in_demand {
                sums.peak_kw = sums.peak_kw.max(reading.peak_kw[i]);
            }
        }
        sums
    }
}

/// For every segment the kilowatt-hours that fall in each step, filled month after month within a period.
///
/// Where a price list or the series covers only part of a period, the steps are shortened by its share of days
/// (common practice, no source).
fn step_kwh(tariff: &Tariff, meter: &Meter, reading: &Reading) -> Vec<Vec<f64>> {
    let segments = meter.segments();
    let mut used = vec![0.0; segments.len()];
    for (bucket, kwh) in meter.buckets().iter().zip(&reading.import_kwh) {
        used[bucket.segment] += kwh;
    }
    let mut out = vec![Vec::new(); segments.len()];
    for (index, segment) in segments.iter().enumerate() {
        let prices = tariff.prices.get(segment.prices);
        let Some(steps) = prices.and_then(|prices| prices.steps.as_ref()) else {
            continue;
        };
        let months = steps.every.months(segment.month0);
        let same_period = |other: &Segment| {
            other.year == segment.year
                && other.prices == segment.prices
                && months.contains(&other.month0)
        };
        let days: f64 = segments
            .iter()
            .filter(|s| same_period(s))
            .map(|s| s.days)
            .sum();
        let share = (days / segment.days_in(months.clone())).min(1.0);
        let before = segments[..index].iter().zip(&used);
        let start: f64 = before
            .filter(|(s, _)| same_period(s))
            .map(|(_, kwh)| kwh)
            .sum();
        let end = start + used[index];
        let mut from = 0.0;
        for step in &steps.steps {
            let to = step.up_to_kwh.map_or(f64::INFINITY, |up_to| up_to * share);
            out[index].push((end.min(to) - start.max(from)).max(0.0));
            from = to;
        }
    }
    out
}
