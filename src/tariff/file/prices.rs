//! One price list of a tariff file.

use std::ops::Range;
use std::path::Path;

use rust_decimal::Decimal;
use rust_decimal::prelude::FromPrimitive;

use super::fields::{
    BandFields, Date, DemandFields, HourlyFields, LaterFields, StepFields, TariffFields, TaxFields,
};
use super::pricing::Pricing;
use super::{DOCUMENT, parsed, zone};
use crate::bounds;
use crate::document::{Check, Leaf, Section};
use crate::series::{Layout, WithinHour, read_csv};
use crate::tariff::{
    Band, Covers, Days, Demand, Flaw, Hourly, Prices, Season, Span, Step, Steps, Tax, When, Window,
    flaws, parse_clock,
};
use crate::units::UnitProblem;

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
        let steps = self.steps(check, pricing);
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
        self.never_negative(check, &bands, steps.as_ref(), hourly.is_some());
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
            tax: self.tax(check, before),
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

    fn steps(&self, check: &mut Check, pricing: &mut Pricing) -> Option<Steps> {
        let (first, rest) = self.step.split_first()?;
        let every = check.value(&first.per).map(|(span,)| span);
        for fields in rest {
            let own = check.value(&fields.per).map(|(span,)| span);
            if let (Some(leaf), true) = (&fields.per, own.is_some_and(|own| Some(own) != every)) {
                let expected = every.unwrap_or(Span::Month).name();
                check.refuse(
                    &leaf.span(),
                    "steps counted over different periods".to_owned(),
                    format!("the same period in all steps, here \"{expected}\""),
                    "write per = in the first step only",
                );
            }
        }
        let mut steps = Vec::new();
        let mut reached = Some(0.0);
        for (i, fields) in self.step.iter().enumerate() {
            let up_to_kwh = pricing.amount(check, &fields.up_to);
            let last = i + 1 == self.step.len();
            match (&fields.up_to, last) {
                (Some(leaf), true) => {
                    let text = leaf.value().map_or("", String::as_str);
                    check.refuse(
                        &leaf.span(),
                        format!("no price above {text}"),
                        "a last step without up_to",
                        "remove up_to here, or add a [[step]] for what is above",
                    );
                }
                (None, false) => check.missing(&fields.span(), "step.up_to", "\"600 kWh\""),
                _ => {}
            }
            if let (Some(leaf), Some(up_to), Some(before)) = (&fields.up_to, up_to_kwh, reached)
                && up_to <= before
            {
                let text = leaf.value().map_or("", String::as_str);
                check.refuse(
                    &leaf.span(),
                    format!("{text} is not above the step before it"),
                    "steps in rising order",
                    "sort the steps by up_to",
                );
            }
            reached = up_to_kwh.or(reached);
            if fields.rate.is_none() {
                check.missing(&fields.span(), "step.rate", "\"13.2 p/kWh\"");
            }
            let rate = pricing.rate(check, &fields.rate);
            let label = check.value(&fields.label);
            if let Some(rate) = rate {
                let label = label.unwrap_or_else(|| step_label(self.step, i));
                steps.push(Step {
                    label,
                    up_to_kwh: up_to_kwh.filter(|_| !last),
                    rate,
                });
            }
        }
        Some(Steps {
            every: every.unwrap_or(Span::Month),
            steps,
        })
    }

    /// A step may lower a band's price, but not below nothing.
    fn never_negative(
        &self,
        check: &mut Check,
        bands: &[Band],
        steps: Option<&Steps>,
        hourly: bool,
    ) {
        let Some(steps) = steps.filter(|_| !hourly) else {
            return;
        };
        let rates = bands.iter().map(|band| band.rate.per_gross_kwh());
        let lowest = rates.reduce(f64::min).unwrap_or(0.0);
        for (fields, step) in self.step.iter().zip(&steps.steps) {
            let sum = lowest + step.rate.per_gross_kwh();
            // A hair below 0 from binary fractions is 0.
            if let (Some(leaf), true) = (&fields.rate, sum < -1e-9) {
                check.refuse(
                    &leaf.span(),
                    format!("with the lowest band this step comes to {sum:.4} for a kWh"),
                    "prices from 0",
                    "check the sign; only an [hourly] series may make a price negative",
                );
            }
        }
    }

    fn tax(&self, check: &mut Check, before: Option<&Prices>) -> Tax {
        let included = check.value(self.rates_include_tax);
        let Some(fields) = self.tax else {
            return match (included, before) {
                (Some(true), _) => Tax::INCLUDED,
                (None, Some(before)) => before.tax,
                (Some(false), Some(before)) if before.tax.share.is_some() => Tax {
                    included: false,
                    ..before.tax
                },
                _ => {
                    // A leaf that was refused was already told.
                    if self.rates_include_tax.is_none() || included.is_some() {
                        let span = self.rates_include_tax.as_ref().map(Leaf::span);
                        check.refuse(
                            &span.unwrap_or(self.span.clone()),
                            "nothing says what tax there is",
                            "rates_include_tax = true, or a [tax]",
                            "write rates_include_tax = true, or [tax] with share = \"5 %\"; \"0 %\" where there is none",
                        );
                    }
                    Tax::INCLUDED
                }
            };
        };
        let share = check.required(&fields.share, &fields.span(), "tax.share", "\"5 %\"");
        if let (Some(share), Some(leaf)) = (share, &fields.share)
            && !bounds::SHARE.holds(share.fraction())
        {
            check.refuse(
                &leaf.span(),
                format!("{} %", share.fraction() * 100.0),
                "a tax from 0 to 100 % of the price without it",
                "check the number",
            );
        }
        Tax {
            share: share.and_then(|share| Decimal::from_f64(share.fraction())),
            covers: covers(fields, check),
            included: included.unwrap_or(false),
        }
    }
}

fn covers(fields: &TaxFields, check: &mut Check) -> Covers {
    let Some(names) = check.value(&fields.covers) else {
        return Covers::ALL;
    };
    let mut covers = Covers {
        energy: false,
        standing: false,
        demand: false,
    };
    for name in names {
        match name.as_str() {
            "energy" => covers.energy = true,
            "standing" => covers.standing = true,
            "demand" => covers.demand = true,
            other => {
                let span = fields.covers.as_ref().map_or(DOCUMENT, Leaf::span);
                check.refuse(
                    &span,
                    format!("\"{other}\" is nothing that a tax covers"),
                    "\"energy\", \"standing\", \"demand\"",
                    "leave covers out when the tax is taken of everything",
                );
            }
        }
    }
    covers
}

/// Clock times, days and season of `from`, `to`, `days`, `season`.
fn when(check: &mut Check, [from, to, days, season]: [&Option<Leaf<String>>; 4]) -> Option<When> {
    let problem = |found: String, allowed: &str, remedy: &str| UnitProblem {
        found,
        allowed: allowed.to_owned(),
        remedy: remedy.to_owned(),
    };
    let clock = |text: &str| {
        parse_clock(text).ok_or_else(|| {
            let allowed = "a clock time from 00:00 to 24:00";
            problem(
                format!("\"{text}\""),
                allowed,
                "write for example \"07:30\"",
            )
        })
    };
    // Every field is looked at before any is given up, so that all problems come at once.
    let mut right = true;
    let mut read = |check: &mut Check, leaf: &Option<Leaf<String>>, missing| {
        let minute = parsed(check, leaf, clock);
        right &= leaf.is_none() || minute.is_some();
        minute.unwrap_or(missing)
    };
    let (from_minute, to_minute) = (read(check, from, 0), read(check, to, 24 * 60));
    let window = Window::new(from_minute, to_minute);
    if let (None, Some(leaf), true) = (window, to.as_ref().or(from.as_ref()), right) {
        check.refuse(
            &leaf.span(),
            "from and to are the same time",
            "two clock times",
            "leave both out for the whole day",
        );
    }
    let held_days = parsed(check, days, |text| {
        Days::parse(text).ok_or_else(|| {
            let allowed = "\"every day\", \"weekdays\", \"weekends\", or names of days";
            problem(
                format!("\"{text}\""),
                allowed,
                "write for example \"Sat, Sun\"",
            )
        })
    });
    let held_season = parsed(check, season, |text| {
        Season::parse(text).ok_or_else(|| {
            let allowed = "a first and a last day, or whole months";
            let remedy = "write for example \"1 Nov to 31 Mar\" or \"Nov to Mar\"";
            problem(format!("\"{text}\""), allowed, remedy)
        })
    });
    right &= days.is_none() || held_days.is_some();
    right &= season.is_none() || held_season.is_some();
    right.then_some(When {
        window: window?,
        days: held_days.unwrap_or(Days::ALL),
        season: held_season.unwrap_or(Season::ALL_YEAR),
    })
}

/// What the bill calls a step that has no label.
fn step_label(steps: &[Section<StepFields>], i: usize) -> String {
    let up_to = |i: usize| {
        let leaf = steps.get(i)?.up_to.as_ref()?;
        leaf.value().ok().map(String::as_str)
    };
    match (i.checked_sub(1).and_then(up_to), up_to(i)) {
        (None, Some(text)) => format!("first {text}"),
        (Some(_), Some(text)) => format!("up to {text}"),
        (Some(text), None) => format!("above {text}"),
        (None, None) => "unit rate".to_owned(),
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
    let mut series = check.take(read_csv(&folder.join(file?), &layout))?;
    series.scale(one?);
    Some(Hourly {
        per_kwh: series,
        every_year: every_year.unwrap_or(false),
    })
}
