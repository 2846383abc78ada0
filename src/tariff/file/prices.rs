//! One price list of a tariff file.

use std::ops::Range;
use std::path::Path;

use super::fields::{
    BandFields, Date, DemandFields, HourlyFields, LaterFields, StepFields, TariffFields, TaxFields,
};
use super::pricing::Pricing;
use super::steps::{never_negative, steps};
use super::tax::tax;
use super::times::when;
use super::{DOCUMENT, parsed, zone};
use crate::document::{Check, Leaf, Section};
use crate::series::{Layout, WithinHour, read_csv};
use crate::tariff::{Band, Demand, Flaw, Hourly, Prices, When, flaws};

/// The fields of one price list, whether it is the first or a later one.
pub(super) struct Given<'a> {
    span: Range<usize>,
    later: bool,
    valid_from: &'a Option<Leaf<Date>>,
    rates_include_tax: &'a Option<Leaf<bool>>,
    tax: &'a Option<Section<TaxFields>>,
    standing: &'a Option<Leaf<String>>,
    export: &'a Option<Leaf<String>>,
    demand: &'a Option<Section<DemandFields>>,
    band: &'a [Section<BandFields>],
    step: &'a [Section<StepFields>],
    hourly: &'a Option<Section<HourlyFields>>,
}

impl<'a> Given<'a> {
    /// The first price list, which stands in the file itself.
    pub(super) fn first(fields: &'a TariffFields) -> Self {
        Self {
            span: DOCUMENT,
            later: false,
            valid_from: &fields.valid_from,
            rates_include_tax: &fields.rates_include_tax,
            tax: &fields.tax,
            standing: &fields.standing,
            export: &fields.export,
            demand: &fields.demand,
            band: &fields.band,
            step: &fields.step,
            hourly: &fields.hourly,
        }
    }

    /// A later price list.
    pub(super) fn later(fields: &'a Section<LaterFields>) -> Self {
        Self {
            span: fields.span(),
            later: true,
            valid_from: &fields.valid_from,
            rates_include_tax: &fields.rates_include_tax,
            tax: &fields.tax,
            standing: &fields.standing,
            export: &fields.export,
            demand: &fields.demand,
            band: &fields.band,
            step: &fields.step,
            hourly: &fields.hourly,
        }
    }

    /// The price list; what it does not say is as before.
    pub(super) fn prices(
        &self,
        check: &mut Check,
        pricing: &mut Pricing,
        before: Option<&Prices>,
        folder: &Path,
    ) -> Option<Prices> {
        if self.later && self.valid_from.is_none() {
            check.missing(&self.span, "later.valid_from", "\"2026-10-01\"");
        }
        let valid_from = check.value(self.valid_from).map(|Date(date)| date);
        let bands = self.bands(check, pricing);
        let steps = steps(self.step, check, pricing);
        let hourly = self.hourly.as_ref();
        let hourly = hourly.and_then(|fields| read_hourly(fields, check, pricing, folder));
        let priced = |before: &Prices| {
            !before.bands.is_empty() || before.steps.is_some() || before.hourly.is_some()
        };
        let none = self.band.is_empty() && self.step.is_empty() && self.hourly.is_none();
        if none && !before.is_some_and(priced) {
            check.refuse(
                &self.span,
                "no price: neither [[band]] nor [[step]] nor [hourly]",
                "at least one of them",
                "write for example [[band]] with rate = \"24.67 p/kWh\"",
            );
        }
        let bands = match (bands, before) {
            (bands, Some(before)) if bands.is_empty() => before.bands.clone(),
            (bands, _) => bands,
        };
        let hourly = hourly.or_else(|| before.and_then(|before| before.hourly.clone()));
        let steps = steps.or_else(|| before.and_then(|before| before.steps.clone()));
        never_negative(self.step, check, &bands, steps.as_ref(), hourly.is_some());
        let standing = pricing.standing(check, self.standing);
        let export = pricing.positive_rate(check, self.export);
        let demand = self.demand.as_ref();
        let demand = demand.and_then(|fields| read_demand(fields, check, pricing));
        Some(Prices {
            valid_from,
            bands,
            steps,
            hourly,
            standing: standing.or(before.and_then(|before| before.standing)),
            demand: demand.or(before.and_then(|before| before.demand)),
            tax: tax(self.rates_include_tax, self.tax, &self.span, check, before),
            export: export.or(before.and_then(|before| before.export)),
        })
    }

    fn bands(&self, check: &mut Check, pricing: &mut Pricing) -> Vec<Band> {
        let mut whens = Vec::new();
        let mut bands = Vec::new();
        for fields in self.band {
            let times = [&fields.from, &fields.to, &fields.days, &fields.season];
            let when = when(check, times);
            if fields.rate.is_none() {
                check.missing(&fields.span(), "band.rate", "\"24.67 p/kWh\"");
            }
            let rate = pricing.positive_rate(check, &fields.rate);
            let label = check.value(&fields.label);
            let Some(when) = when else { continue };
            whens.push(when);
            let words = when.words();
            let unnamed = if words.is_empty() {
                "unit rate".to_owned()
            } else {
                words
            };
            if let Some(rate) = rate {
                bands.push(Band {
                    label: label.unwrap_or(unnamed),
                    when,
                    rate,
                });
            }
        }
        // Judged only when all times are right, else every hole would be news of the same slip.
        if !whens.is_empty() && whens.len() == self.band.len() {
            self.covered(check, &whens);
        }
        bands
    }

    /// Refuses holes and overlaps.
    fn covered(&self, check: &mut Check, whens: &[When]) {
        let span = |i: usize| self.band.get(i).map_or(DOCUMENT, Section::span);
        for flaw in flaws(whens) {
            match flaw {
                Flaw::Hole { clock, days } => check.refuse(
                    &span(0),
                    format!("no band covers {clock} on {days}"),
                    "one band for every minute of the year",
                    "add a [[band]] for it, or widen one that is there",
                ),
                Flaw::Overlap {
                    first,
                    second,
                    clock,
                    days,
                } => check.refuse(
                    &span(second),
                    format!(
                        "bands {} and {} both cover {clock} on {days}",
                        first + 1,
                        second + 1
                    ),
                    "one band for every minute of the year",
                    "shorten one of the two",
                ),
            }
        }
    }
}

fn read_demand(
    fields: &Section<DemandFields>,
    check: &mut Check,
    pricing: &Pricing,
) -> Option<Demand> {
    if fields.rate.is_none() {
        check.missing(&fields.span(), "demand.rate", "\"9.20 USD/kW\"");
    }
    let amount = pricing.demand(check, &fields.rate);
    let when = when(
        check,
        [&fields.from, &fields.to, &fields.days, &fields.season],
    );
    Some(Demand {
        amount: amount?,
        when: when?,
    })
}

fn read_hourly(
    fields: &Section<HourlyFields>,
    check: &mut Check,
    pricing: &Pricing,
    folder: &Path,
) -> Option<Hourly> {
    let file = check.required(
        &fields.file,
        &fields.span(),
        "hourly.file",
        "\"prices.csv\"",
    );
    if fields.unit.is_none() {
        check.missing(&fields.span(), "hourly.unit", "\"EUR/MWh\"");
    }
    let one = pricing.unit_rate(check, &fields.unit);
    let column = check.value(&fields.column);
    let stamp = check.value(&fields.stamps).map(|(stamp,)| stamp);
    let zone = parsed(check, &fields.time_zone, zone);
    let every_year = check.value(&fields.every_year);
    let layout = Layout {
        column,
        stamp: stamp.unwrap_or_default(),
        zone: zone.unwrap_or(chrono_tz::Tz::UTC),
        within_hour: WithinHour::Mean,
    };
    let file = file?;
    let mut series = check.take(read_csv(&folder.join(&file), &layout))?;
    series.scale(one?);
    Some(Hourly {
        file,
        per_kwh: series,
        times: 1.0,
        every_year: every_year.unwrap_or(false),
    })
}
