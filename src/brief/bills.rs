//! From meter readings and the brief to the home's energy signature.

use std::borrow::Cow;
use std::path::Path;

use chrono_tz::Tz;

use super::defaults;
use super::files::Folder;
use super::home::WeatherFacts;
use super::leaves::HeatLossSource;
use super::notes::Notes;
use super::own_home::{Today, Within, doubt, line, through_own_home};
use super::raw;
use crate::bounds;
use crate::document::{Check, Document, Leaf, Section, read_text};
use crate::problem::{Finding, Place, Problem, Problems, Severity};
use crate::signature::{Conversion, DailyWeather, FitProblem, Readings, Signature, Stated};
use crate::units::{CalorificValue, Fuel, Temperature, parse};
use crate::weather::{ReadOptions, Weather, read_bytes};

/// What readings say and what there is to tell about them.
#[derive(Debug, Clone, PartialEq)]
pub struct BillsMade {
    /// File as messages name it.
    pub file: String,
    /// What they say.
    pub signature: Signature,
    /// Whether the estimate is to be scaled to them.
    pub scale: bool,
    /// What was odd.
    pub findings: Vec<Finding>,
    /// Heat-loss coefficient that the brief states, W/K.
    pub survey_w_per_k: Option<f64>,
}

/// What readings are laid over.
pub(super) struct Over<'a> {
    pub home: Option<&'a Section<raw::Home>>,
    pub today: Today<'a>,
    pub weather: &'a Weather,
    pub facts: &'a WeatherFacts,
    pub zone: Tz,
    pub folder: &'a Folder,
}

impl Over<'_> {
    fn table(&self) -> Option<&Section<raw::BillsTable>> {
        self.home?.bills.as_ref()
    }

    /// Whether an efficiency is stated for the readings, in place of that of today's boiler.
    pub fn states_efficiency(&self) -> bool {
        self.table().is_some_and(|table| table.efficiency.is_some())
    }
}

/// The readings that a brief names, in its heat_loss or under home.bills; inner nothing when it names none.
#[allow(
    clippy::option_option,
    reason = "outer: could not be read; inner: no readings are named"
)]
pub(super) fn named(
    over: &Over<'_>,
    check: &mut Check,
    notes: &mut Notes,
) -> Option<Option<BillsMade>> {
    let Some(home) = over.home else {
        return Some(None);
    };
    let in_loss = match home.heat_loss.as_ref().map(Leaf::value) {
        Some(Ok(HeatLossSource::Bills(path))) => Some(path.clone()),
        _ => None,
    };
    let in_table = home
        .bills
        .as_ref()
        .map(|table| (table, check.value(&table.file)));
    let path = match (in_loss, in_table) {
        (None, None) => return Some(None),
        (Some(path), _) => path,
        (None, Some((_, Some(path)))) => path,
        (None, Some((table, None))) => {
            if table.file.is_none() {
                check.missing(&table.span(), "home.bills.file", "\"meter-readings.csv\"");
            }
            return None;
        }
    };
    let text = check.take(over.folder.text(&path))?;
    made(&over.folder.name(&path), &text, over, check, notes).map(Some)
}

/// Makes the signature of a file of readings.
pub(super) fn made(
    name: &str,
    text: &str,
    over: &Over<'_>,
    check: &mut Check,
    notes: &mut Notes,
) -> Option<BillsMade> {
    let table = over.table();
    let conversion = conversion(table, check, notes);
    let stated = stated(table, over, check, notes);
    let doubt = doubt(table, check);
    let scale = table
        .and_then(|table| check.value(&table.scale))
        .unwrap_or(false);
    let weather = own_weather(table, over, check);
    let readings = check.take(Readings::read(name, text, &conversion?));
    let (readings, stated, doubt, weather) = (readings?, stated?, doubt?, weather?);
    let civil = weather.axis.civil(over.zone);
    let days = DailyWeather::of_hours(&civil, &weather.outdoor_c);
    let survey_w_per_k = over
        .home
        .and_then(|home| match home.heat_loss.as_ref()?.value() {
            Ok(HeatLossSource::Stated(loss)) => Some(loss.w_per_k()),
            _ => None,
        });
    let line = line(&readings.intervals, &days, &stated);
    let (signature, open) = check.take(line.map_err(|why| told(why, name, &days)))?;
    let mut made = BillsMade {
        file: name.to_owned(),
        signature,
        scale,
        findings: Vec::new(),
        survey_w_per_k,
    };
    let within = Within {
        intervals: &readings.intervals,
        days: &days,
        stated,
        doubt,
    };
    check.take(
        through_own_home(&mut made, over, &weather, &within, check, notes)
            .map_err(|why| told(why, name, &days)),
    )?;
    if let (Some(why), None) = (open, &made.signature.own_home) {
        return check.take(Err(told(why, name, &days)));
    }
    let signature = &made.signature;
    let mut findings = readings.findings;
    findings.append(&mut made.findings.clone());
    findings.extend(odd(name, &readings.intervals, signature));
    findings.extend(implausible(name, signature, over, check));
    findings.extend(survey_w_per_k.and_then(|survey| apart(name, signature, survey)));
    made.findings = findings;
    Some(made)
}

fn conversion(
    table: Option<&Section<raw::BillsTable>>,
    check: &mut Check,
    notes: &mut Notes,
) -> Option<Conversion> {
    let before = check.problems().len();
    let mut value = None;
    if let Some(leaf) = table.and_then(|table| table.calorific_value.as_ref())
        && let Ok(text) = leaf.value()
    {
        match CalorificValue::parse(text) {
            Ok(parsed) => value = Some(parsed),
            Err(problem) => {
                check.refuse(&leaf.span(), problem.found, problem.allowed, problem.remedy)
            }
        }
    }
    let correction = table
        .and_then(|table| check.plain_within(&table.volume_correction, &bounds::VOLUME_CORRECTION));
    let given = table.is_some_and(|table| table.volume_correction.is_some());
    let volume_correction = if given {
        correction?
    } else {
        notes.used(&defaults::VOLUME_CORRECTION);
        defaults::VOLUME_CORRECTION.value.parse().ok()?
    };
    (check.problems().len() == before).then_some(Conversion {
        fuel: Fuel::Gas,
        calorific_value: value,
        volume_correction,
    })
}

fn stated(
    table: Option<&Section<raw::BillsTable>>,
    over: &Over<'_>,
    check: &mut Check,
    notes: &mut Notes,
) -> Option<Stated> {
    let (no_efficiency, no_share) = (None, None);
    let field = |get: fn(&raw::BillsTable) -> &Option<Leaf<crate::units::Share>>| {
        table.map_or(&no_share, |table| get(table))
    };
    let efficiency_leaf = table.map_or(&no_efficiency, |table| &table.efficiency);
    let of_today = over
        .today
        .and_then(|today| today.efficiency.as_ref()?.value().ok().copied());
    let efficiency = match (efficiency_leaf, of_today) {
        (None, Some(today)) => Some(today),
        // Noted once it is known whether today's boiler gives its own.
        _ => Notes::default().word(check, efficiency_leaf, &defaults::BILLS_EFFICIENCY),
    };
    let within = notes.quantity(
        check,
        field(|table| &table.efficiency_within),
        &bounds::SHARE,
        &defaults::BILLS_EFFICIENCY_WITHIN,
    );
    let share = notes.quantity(
        check,
        field(|table| &table.hot_water_share),
        &bounds::SHARE,
        &defaults::HOT_WATER_SHARE,
    );
    let share_within = notes.quantity(
        check,
        field(|table| &table.hot_water_share_within),
        &bounds::SHARE,
        &defaults::HOT_WATER_SHARE_WITHIN,
    );
    let drawn_c = parse::<Temperature>(defaults::DRAWN_AT.value).ok()?.c();
    let swing = over.facts.main_c.map_or(0.0, |main_c| {
        let mean = main_c.iter().sum::<f64>() / 12.0;
        let low = main_c.iter().copied().fold(f64::INFINITY, f64::min);
        (mean - low) / (drawn_c - mean)
    });
    notes.add(
        "swing of hot water",
        format!("{:.0} % about its mean", swing * 100.0),
        "cold water at the temperature of the ground at 1 m, drawn at 40 °C",
    );
    Some(Stated {
        efficiency: efficiency?.of(Fuel::Gas)?.fraction(),
        efficiency_within: within?.fraction(),
        hot_water_share: share?.fraction(),
        hot_water_share_within: share_within?.fraction(),
        hot_water_swing: swing,
    })
}

/// The weather of the same period: the readings' own, else that of the brief.
fn own_weather<'a>(
    table: Option<&Section<raw::BillsTable>>,
    over: &Over<'a>,
    check: &mut Check,
) -> Option<Cow<'a, Weather>> {
    let path = table.and_then(|table| check.value(&table.weather));
    let Some(path) = path else {
        return Some(Cow::Borrowed(over.weather));
    };
    let bytes = check.take(over.folder.bytes(&path))?;
    let name = over.folder.name(&path);
    check
        .take(read_bytes(&name, &bytes, &ReadOptions::default()))
        .map(Cow::Owned)
}

/// Why there is no signature, as a problem of the file.
fn told(why: FitProblem, name: &str, days: &DailyWeather) -> Problems {
    let place = Place::file(name);
    let problem = match why {
        FitProblem::TooFew { found } => Problem::new(
            place,
            format!("{found} intervals between readings"),
            "at least 4 intervals; 6 to find where heating begins",
            "add readings, best of a whole year with summer and winter",
        ),
        FitProblem::OutsideWeather { from, to, line } => Problem::new(
            place.at_line(line),
            format!(
                "{from} to {to} is not inside the weather, which covers {}",
                days.covers()
            ),
            "readings inside the weather",
            "name the weather of the same period: weather = \"….csv\" under [home.bills]",
        ),
        FitProblem::NoHeating => Problem::new(
            place,
            "fuel does not rise when it is colder",
            "readings that show heating",
            "check that the readings are of the heating, and their dates; a whole year with summer and winter is best",
        ),
        FitProblem::BaseTemperatureOpen { at_c } => Problem::new(
            place,
            format!(
                "the readings do not show where heating begins: the search ended at {at_c:.0} °C"
            ),
            "a base temperature between 8 and 22 °C",
            "add readings of the months without heating, or of winter where those are missing",
        ),
        FitProblem::NotConverged => Problem::new(
            place,
            "the search for the base temperature did not converge",
            "",
            "please report this file as a fault of the program",
        ),
    };
    problem.into()
}

/// Readings that are too far off for chance.
fn odd<'a>(
    name: &'a str,
    intervals: &'a [crate::signature::Interval],
    signature: &'a Signature,
) -> impl Iterator<Item = Finding> + 'a {
    signature
        .points
        .iter()
        .zip(intervals)
        .filter(|(point, _)| point.odd)
        .map(move |(point, interval)| {
            Finding::new(
            Severity::Warning,
            format!(
                "{} to {}: {:.0} kWh a day where the fit says {:.0}, {:.1} standard deviations off",
                point.from, point.to, point.kwh_per_day, point.fitted_kwh_per_day, point.off
            ),
            "it was kept; a misread register, days away or another use can be behind it",
        )
        .at(&Place::file(name).at_line(interval.line))
        })
}

/// A coefficient that no home of this floor area has.
fn implausible(
    name: &str,
    signature: &Signature,
    over: &Over<'_>,
    check: &mut Check,
) -> Option<Finding> {
    let area_m2 = check.value(&over.home?.floor_area)?.m2();
    let loss = signature.heat_loss().value;
    let each = loss / area_m2;
    (!bounds::HEAT_LOSS_W_PER_K_M2.holds(each)).then(|| {
        Finding::new(
            Severity::Warning,
            format!("{loss:.0} W/K over {area_m2:.0} m² are {each:.2} W/K per m²"),
            "hardly any home is like that: check unit and calorific value of the readings, and the floor area",
        )
        .at(&Place::file(name))
    })
}

/// A survey outside the limits of the readings.
fn apart(name: &str, signature: &Signature, survey_w_per_k: f64) -> Option<Finding> {
    let loss = signature.heat_loss();
    let inside = (loss.low..=loss.high).contains(&survey_w_per_k);
    (!inside).then(|| {
        Finding::new(
            Severity::Warning,
            format!(
                "the survey's {survey_w_per_k:.0} W/K is outside what the readings show, {:.0} W/K ({:.0} to {:.0})",
                loss.value, loss.low, loss.high
            ),
            "the estimate uses the survey; cold rooms, hours without heating, a wrong efficiency or a wrong survey can be behind it",
        )
        .at(&Place::file(name))
    })
}

/// The readings of a file laid over the home and the weather of a brief, for the command that looks at them alone.
///
/// # Errors
/// Every problem of the file, the brief's tables that matter here, and the weather.
pub(super) fn of_file(
    file: &Path,
    brief: &Path,
) -> Result<(BillsMade, Vec<crate::answer::Assumption>), Problems> {
    let text = read_text(brief)?;
    let folder = Folder::disk(brief.parent().map(Path::to_owned).unwrap_or_default());
    let (raw, mut check) = Document::<raw::Brief>::read(&brief.display().to_string(), &text)?;
    let mut notes = Notes::default();
    let zone = super::read::time_zone(raw.home.as_ref(), &mut check, &mut notes);
    let weather = super::weather::weather(raw.weather.as_ref(), &folder, &mut check, &mut notes);
    let readings = check.take(read_text(file));
    let found = match (zone, weather, readings) {
        (Some(zone), Some(weather), Some(readings)) => {
            let facts = super::site::facts(&weather);
            let home = raw.home.as_ref();
            let over = Over {
                home,
                today: raw.today.as_ref(),
                weather: &weather,
                facts: &facts,
                zone,
                folder: &folder,
            };
            made(
                &file.display().to_string(),
                &readings,
                &over,
                &mut check,
                &mut notes,
            )
        }
        _ => None,
    };
    check.finish(found.map(|found| (found, notes.into_vec())))
}
