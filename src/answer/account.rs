//! The household's account in an estimate: bills, what the meters should read, what shifting does.

use rust_decimal::prelude::ToPrimitive;
use serde::Serialize;

use super::tariff::LineAnswer;
use crate::problem::{Finding, Problems, Severity};
use crate::study::{
    AccountBill, Case, Contender, MeterBand, Outcome, Run, against_unshifted, bills, meter_band,
};

/// The bills of one account.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct BillAnswer {
    /// What people call the tariff.
    pub tariff: String,
    /// What it sells.
    pub fuel: String,
    /// Everything to pay over all years of the weather.
    pub total: f64,
    /// Every line, by billing period.
    pub lines: Vec<LineAnswer>,
}

/// What a meter should read.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct MeterAnswer {
    /// What people call the tariff.
    pub tariff: String,
    /// What the meter counts.
    pub fuel: String,
    /// What the band is made of.
    pub basis: String,
    /// The months that the weather covers.
    pub months: Vec<MeterMonthAnswer>,
}

/// What a meter should read in a month.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct MeterMonthAnswer {
    /// Month from 1.
    pub month: usize,
    /// Lowest reading that would be no surprise.
    pub low_kwh: f64,
    /// Mean of the years of weather.
    pub likely_kwh: f64,
    /// Highest reading that would be no surprise.
    pub high_kwh: f64,
}

/// What shifting does.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct ShiftingAnswer {
    /// Yearly cost without shifting less that with it.
    pub saving: f64,
    /// Whether the saving is an upper bound, because the day ahead is known.
    pub upper_bound: bool,
    /// As the plan has it.
    pub with: RunAnswer,
    /// As it was before shifting.
    pub without: RunAnswer,
    /// The same as a sentence.
    pub sentence: String,
}

/// One way of running a system.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct RunAnswer {
    /// Yearly cost.
    pub cost: f64,
    /// Electricity of the heating.
    pub electricity_kwh: f64,
    /// Seasonal performance factor with all auxiliaries.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub spf_h4: Option<f64>,
    /// Mean indoor temperature over the hours that are heated without shifting.
    pub mean_indoor_c: f64,
    /// Lowest indoor temperature.
    pub min_indoor_c: f64,
    /// Hours in which rooms end more than 0.5 K below what was asked for.
    pub hours_cool: f64,
}

impl From<&Run> for RunAnswer {
    fn from(run: &Run) -> Self {
        Self {
            cost: run.cost,
            electricity_kwh: run.electricity_kwh,
            spf_h4: run.spf_h4,
            mean_indoor_c: run.mean_indoor_c,
            min_indoor_c: run.min_indoor_c,
            hours_cool: run.hours_cool,
        }
    }
}

impl From<&AccountBill> for BillAnswer {
    fn from(account: &AccountBill) -> Self {
        Self {
            tariff: account.tariff.clone(),
            fuel: account.fuel.name().to_owned(),
            total: account.bill.total().to_f64().unwrap_or(f64::NAN),
            lines: account.bill.lines.iter().map(LineAnswer::from).collect(),
        }
    }
}

impl From<&MeterBand> for MeterAnswer {
    fn from(band: &MeterBand) -> Self {
        Self {
            tariff: band.tariff.clone(),
            fuel: band.fuel.name().to_owned(),
            basis: band.basis.clone(),
            months: band
                .months
                .iter()
                .map(|month| MeterMonthAnswer {
                    month: month.month0 + 1,
                    low_kwh: month.low_kwh,
                    likely_kwh: month.likely_kwh,
                    high_kwh: month.high_kwh,
                })
                .collect(),
        }
    }
}

/// The bills of a system, account by account.
///
/// # Errors
/// When a reading cannot be priced.
pub fn bill_answers(contender: &Contender, outcome: &Outcome) -> Result<Vec<BillAnswer>, Problems> {
    let bills = bills(contender, outcome)?;
    Ok(bills.iter().map(BillAnswer::from).collect())
}

/// What the meters of a system should read.
pub fn meter_answers(contender: &Contender, outcome: &Outcome) -> Vec<MeterAnswer> {
    let bands = meter_band(contender, outcome);
    bands.iter().map(MeterAnswer::from).collect()
}

/// What shifting does to a system; nothing where it does not shift.
///
/// # Errors
/// When a bill cannot be made.
pub fn shifting_answer(
    case: &Case,
    contender: &Contender,
) -> Result<Option<ShiftingAnswer>, Problems> {
    let Some((rule, shifted)) = contender
        .shift_rule
        .zip(against_unshifted(case, contender)?)
    else {
        return Ok(None);
    };
    let (with, without) = (
        RunAnswer::from(&shifted.with),
        RunAnswer::from(&shifted.without),
    );
    let saving = without.cost - with.cost;
    let upper_bound = rule.knows_the_day_ahead();
    let money = case.currency.code();
    let told = if saving >= 0.0 {
        format!("saves {saving:.0} {money} a year")
    } else {
        format!("costs {:.0} {money} a year more", -saving)
    };
    let bound = if upper_bound {
        ", an upper bound because it knows the day ahead"
    } else {
        ""
    };
    let spf = match (without.spf_h4, with.spf_h4) {
        (Some(before), Some(after)) => format!("SPF (H4) {before:.2} to {after:.2}, "),
        _ => String::new(),
    };
    let sentence = format!(
        "Shifting ({}) {told}{bound}: {spf}electricity {:.0} to {:.0} kWh, rooms while heated {:.1} to {:.1} °C in the mean, \
         lowest {:.1} to {:.1} °C, {:.0} to {:.0} hours more than 0.5 K too cool.",
        rule.word(),
        without.electricity_kwh,
        with.electricity_kwh,
        without.mean_indoor_c,
        with.mean_indoor_c,
        without.min_indoor_c,
        with.min_indoor_c,
        without.hours_cool,
        with.hours_cool,
    );
    Ok(Some(ShiftingAnswer {
        saving,
        upper_bound,
        with,
        without,
        sentence,
    }))
}

/// How far the price signal of a tariff with steps was from the bill; nothing where it was not.
///
/// # Errors
/// When a reading cannot be priced.
pub fn signal_gap(contender: &Contender, outcome: &Outcome) -> Result<Option<Finding>, Problems> {
    /// Below this share of the bill's energy the gap is not told. A choice of ours.
    const WORTH_TELLING: f64 = 0.005;
    let account = &contender.electricity;
    let Some(expected_kwh) = account.expected_kwh else {
        return Ok(None);
    };
    let years = outcome.years.len() as f64;
    let reading = &outcome.electricity;
    let signal = account
        .meter
        .signal_cost(&account.tariff, reading, Some(expected_kwh))
        / years;
    let bills = bills(contender, outcome)?;
    let tax = account
        .tariff
        .prices
        .first()
        .map_or(1.0, |prices| prices.tax.energy_factor());
    let billed = bills.first().map_or(0.0, |account| {
        account.bill.energy().to_f64().unwrap_or(f64::NAN) * tax / years
    });
    let gap = signal - billed;
    let currency = account.tariff.currency;
    Ok((gap.abs() > WORTH_TELLING * billed.abs()).then(|| {
        Finding::new(
            Severity::Note,
            format!(
                "\"{}\": at its hourly prices the electricity would cost {signal:.0} {currency} a year, on the bill of \"{}\" it costs {billed:.0}",
                contender.system.label, account.tariff.label
            ),
            format!(
                "hours see the step that {expected_kwh:.0} kWh a year reach; costs are those of the bill"
            ),
        )
    }))
}
