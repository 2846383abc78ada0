//! `tariff`: a tariff in words, and the bill of a load under it.

use std::path::PathBuf;

use chrono::Datelike;
use chrono_tz::Tz;
use clap::ValueEnum;
use comfy_table::{CellAlignment, Table, presets};

use super::{Failure, Format, print, print_json, warn};
use crate::answer::tariff::{LoadAnswer, TariffAnswer};
use crate::bill::{self, Bill, Connection};
use crate::calendar::{CivilHour, HourAxis};
use crate::report::bill_table;
use crate::series::{self, Layout, WithinHour, read_csv};
use crate::tariff::{Band, Prices, StandingSpan, Steps, Tariff, When, clock, clock_days};
use crate::units::{Currency, Fuel};

/// Show what a tariff charges and price a load under it.
///
/// Without --load the bill is an example: a stated amount, the same in every hour of a year.
#[derive(Debug, clap::Args)]
#[command(after_help = "\
Examples:
  winterledger tariff tariffs/cheap_night_electricity.toml
  winterledger tariff tariffs/flat_gas.toml --kwh 12000")]
pub struct Args {
    /// Tariff file (TOML).
    file: PathBuf,
    /// Hourly CSV with a column "time" and one of kWh bought in the hour (gross for fuels that are burnt).
    #[arg(long, value_name = "CSV")]
    load: Option<PathBuf>,
    /// Column of the load, when the file has several.
    #[arg(long, value_name = "NAME", requires = "load")]
    column: Option<String>,
    /// What the times of the load mark.
    #[arg(long, value_enum, default_value_t, requires = "load")]
    stamps: Stamps,
    /// Clock of a tariff that names none, and of times in the load that carry no offset.
    #[arg(long, value_name = "ZONE")]
    time_zone: Option<String>,
    /// Year of the example.
    #[arg(long, value_name = "YEAR", conflicts_with = "load")]
    year: Option<i32>,
    /// Amount of the example, kWh.
    #[arg(long, value_name = "KWH", conflicts_with = "load")]
    kwh: Option<f64>,
    /// How the result is printed.
    #[arg(long, value_enum, default_value_t)]
    format: Format,
}

/// What times mark, as an argument.
#[derive(Debug, Clone, Copy, Default, PartialEq, Eq, ValueEnum)]
enum Stamps {
    /// The beginning of the hour.
    #[default]
    Beginning,
    /// The end of the hour.
    Ending,
}

/// Year of an example when the tariff has no date.
const YEAR: i32 = 2025;
/// Electricity of an example, kWh a year: a home without electric heating (common practice, no source).
const ELECTRICITY_KWH: f64 = 3000.0;
/// Fuel of an example, gross kWh a year: a heated home (common practice, no source).
const FUEL_KWH: f64 = 12_000.0;

/// A load on its clock.
struct Load {
    civil: Vec<CivilHour>,
    kwh: Vec<f64>,
    from: String,
}

/// Reads, prices and prints.
///
/// # Errors
/// A [`Failure`] with every problem of the tariff or the load.
pub fn run(args: &Args) -> Result<(), Failure> {
    let tariff = Tariff::read(&args.file)?;
    let zone = match &args.time_zone {
        Some(name) => Some(zone(name)?),
        None => None,
    };
    let clock = tariff.time_zone.or(zone).unwrap_or(Tz::UTC);
    let load = load(args, &tariff, zone, clock)?;
    let bill = bill::price(&tariff, &load.civil, &load.kwh, Connection::Kept)?;
    let findings = tariff.findings_over(&load.civil);
    match args.format {
        Format::Text => {
            warn(&findings);
            print(&text(&tariff, clock, &load, &bill))
        }
        Format::Json => {
            let priced = LoadAnswer {
                kwh: load.kwh.iter().sum(),
                hours: load.kwh.len(),
                from: load.from,
            };
            print_json(&TariffAnswer::new(&tariff, priced, &bill, findings))
        }
    }
}

fn zone(name: &str) -> Result<Tz, Failure> {
    name.parse().map_err(|_| {
        let allowed = "a name of the IANA time zone database, such as Europe/London";
        Failure::argument("--time-zone", format!("\"{name}\""), allowed)
    })
}

/// The load to price: the file's, or the example.
fn load(args: &Args, tariff: &Tariff, zone: Option<Tz>, clock: Tz) -> Result<Load, Failure> {
    if let Some(path) = &args.load {
        let layout = Layout {
            column: args.column.clone(),
            stamp: match args.stamps {
                Stamps::Beginning => series::Stamp::Beginning,
                Stamps::Ending => series::Stamp::Ending,
            },
            zone: zone.unwrap_or(clock),
            within_hour: WithinHour::Sum,
        };
        let series = read_csv(path, &layout)?;
        let axis = HourAxis {
            start: series.start(),
            hours: series.values().len(),
        };
        return Ok(Load {
            civil: axis.civil(clock),
            kwh: series.values().to_vec(),
            from: path.display().to_string(),
        });
    }
    let year = args.year.unwrap_or_else(|| example_year(tariff));
    let axis = HourAxis::civil_year(year, clock)
        .ok_or_else(|| Failure::argument("--year", year.to_string(), "a year of the calendar"))?;
    let usual = if tariff.fuel == Fuel::Electricity {
        ELECTRICITY_KWH
    } else {
        FUEL_KWH
    };
    let kwh = args.kwh.unwrap_or(usual);
    if !(0.0..=1e9).contains(&kwh) {
        return Err(Failure::argument(
            "--kwh",
            kwh.to_string(),
            "an amount from 0 to 1e9 kWh",
        ));
    }
    Ok(Load {
        civil: axis.civil(clock),
        kwh: vec![kwh / axis.hours as f64; axis.hours],
        from: "the same every hour".to_owned(),
    })
}

/// The year of the tariff's hourly prices, or of its dates.
fn example_year(tariff: &Tariff) -> i32 {
    let first = tariff.prices.first();
    let hourly = first
        .and_then(|prices| prices.hourly.as_ref())
        .map(|hourly| {
            // The middle: a year that begins in another zone begins in the year before.
            let series = &hourly.per_kwh;
            (series.start() + (series.end() - series.start()) / 2).year()
        });
    let dated = first
        .and_then(|prices| prices.valid_from)
        .map(|date| date.year());
    hourly.or(dated).unwrap_or(YEAR)
}

fn text(tariff: &Tariff, clock: Tz, load: &Load, bill: &Bill) -> String {
    let whose = if tariff.time_zone.is_some() {
        "its own clock"
    } else {
        "it names no clock"
    };
    let mut parts = vec![format!(
        "{}: {} in {}, clock of {clock} ({whose})",
        tariff.label, tariff.fuel, tariff.currency
    )];
    for prices in &tariff.prices {
        parts.push(String::new());
        parts.extend(price_list(prices, tariff.currency));
    }
    let kwh: f64 = load.kwh.iter().sum();
    let (first, last) = (load.civil.first(), load.civil.last());
    let date = |hour: Option<&CivilHour>| hour.map_or(String::new(), |hour| hour.date.to_string());
    parts.push(String::new());
    parts.push(format!(
        "Bill of {kwh:.0} kWh, {}, {} to {}",
        load.from,
        date(first),
        date(last)
    ));
    parts.push(bill_table(bill));
    parts.push(months_line(bill));
    parts.join("\n")
}

/// A price list in words, with a clock table of its bands.
fn price_list(prices: &Prices, currency: Currency) -> Vec<String> {
    let mut lines = Vec::new();
    if let Some(from) = prices.valid_from {
        lines.push(format!("Prices from {from}"));
    }
    let say = |amount, per: &str| currency.price_words(amount, per);
    match &prices.standing {
        Some(standing) => {
            let per = match standing.per {
                StandingSpan::Day => "day",
                StandingSpan::Month => "month",
                StandingSpan::Year => "year",
            };
            lines.push(format!("Standing charge {}", say(standing.amount, per)));
        }
        None => lines.push("No standing charge".to_owned()),
    }
    if let Some(demand) = &prices.demand {
        lines.push(format!(
            "Highest hour of each month {}{}",
            say(demand.amount, "kW"),
            in_words(&demand.when)
        ));
    }
    if let Some(export) = &prices.export {
        let rate = say(export.amount, export.unit.symbol);
        lines.push(format!("Fed back {rate}"));
    }
    lines.push(tax(prices));
    if let Some(hourly) = &prices.hourly {
        let values = hourly.per_kwh.values();
        let mean = values.iter().sum::<f64>() / values.len() as f64;
        let low = values.iter().copied().fold(f64::INFINITY, f64::min);
        let high = values.iter().copied().fold(f64::NEG_INFINITY, f64::max);
        lines.push(format!(
            "Hourly price, {}: mean {mean:.4}, from {low:.4} to {high:.4} {currency}/kWh",
            hourly.per_kwh.covers()
        ));
    }
    lines.extend(
        prices
            .steps
            .as_ref()
            .map(|steps| steps_table(steps, currency)),
    );
    if !prices.bands.is_empty() {
        lines.push(clock_table(&prices.bands, currency));
    }
    lines
}

fn in_words(when: &When) -> String {
    match when.words() {
        words if words.is_empty() => String::new(),
        words => format!(" ({words})"),
    }
}

fn tax(prices: &Prices) -> String {
    let share = prices.tax.share.map(|share| {
        let percent = (share * rust_decimal::Decimal::ONE_HUNDRED).normalize();
        format!("{percent} %")
    });
    match (share, prices.tax.included) {
        (Some(share), true) => format!("Rates include {share} tax"),
        (None, true) => "Rates include tax".to_owned(),
        (Some(share), false) => {
            let covers = prices.tax.covers;
            let names: Vec<_> = [
                (covers.energy, "energy"),
                (covers.standing, "standing charge"),
                (covers.demand && prices.demand.is_some(), "demand charge"),
            ]
            .iter()
            .filter(|(covered, _)| *covered)
            .map(|(_, name)| *name)
            .collect();
            format!("Tax of {share} is added to {}", names.join(", "))
        }
        (None, false) => "No tax".to_owned(),
    }
}

fn plain_table(header: &[&str]) -> Table {
    let mut table = Table::new();
    table.load_style(presets::NOTHING);
    table.set_header(header);
    table
}

fn align_right(table: &mut Table, columns: &[usize]) {
    for &index in columns {
        if let Some(column) = table.column_mut(index) {
            column.set_cell_alignment(CellAlignment::Right);
        }
    }
}

fn steps_table(steps: &Steps, currency: Currency) -> String {
    let mut table = plain_table(&["each", "amount", "rate"]);
    for step in &steps.steps {
        table.add_row([
            steps.every.name(),
            &step.label,
            &currency.price_words(step.rate.amount, step.rate.unit.symbol),
        ]);
    }
    align_right(&mut table, &[2]);
    table.to_string()
}

/// When each band holds, day kind by day kind.
fn clock_table(bands: &[Band], currency: Currency) -> String {
    let whens: Vec<_> = bands.iter().map(|band| band.when).collect();
    let mut table = plain_table(&["days", "from", "to", "band", "rate"]);
    for day in clock_days(&whens) {
        let mut days = day.days.as_str();
        for &(from, to, band) in &day.stretches {
            let Some(band) = bands.get(band) else {
                continue;
            };
            table.add_row([
                days,
                &clock(from),
                &clock(to),
                &band.label,
                &currency.price_words(band.rate.amount, band.rate.unit.symbol),
            ]);
            days = "";
        }
    }
    align_right(&mut table, &[4]);
    table.to_string()
}

fn months_line(bill: &Bill) -> String {
    let months: Vec<_> = bill
        .months
        .iter()
        .map(|month| format!("{}-{:02} {}", month.year, month.month0 + 1, month.amount))
        .collect();
    format!("By month: {}", months.join(", "))
}
