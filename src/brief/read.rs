//! Reading a brief into a case, with every problem found in one pass.

use std::collections::HashMap;
use std::path::Path;
use std::sync::Arc;

use chrono_tz::Tz;
use schemars::Schema;

use super::bills::{BillsMade, Over, named, of_file};
use super::carbon::of_another_country;
use super::design_outdoor::design_beside_weather;
use super::energy::{Energy, energy};
use super::files::Folder;
use super::home::WeatherFacts;
use super::lifetime::terms;
use super::locale::locale;
use super::notes::Notes;
use super::odds::said;
use super::raw;
use super::site::{facts, used};
use super::system::{Surroundings, contender};
use super::weather::weather;
use super::{defaults, demo};
use crate::answer::{Assumption, BillsTold, Told};
use crate::document::{Check, Document, Leaf, Section, read_text};
use crate::heatpump::Sheet;
use crate::locale::Locale;
use crate::problem::Problems;
use crate::signature::DailyWeather;
use crate::study::odds::Doubts;
use crate::study::{Case, Contender, scale_to_fuel};

/// A brief that can be run.
#[derive(Debug, Clone)]
pub struct Brief {
    /// The systems side by side.
    pub case: Case,
    /// What the estimate tells beside the figures.
    pub told: Told,
    /// How figures are written.
    pub locale: Locale,
    /// What is not known for certain.
    pub doubts: Doubts,
    /// Standard error to which every chance is to be known, as a fraction; nothing where the brief does not say.
    pub precision: Option<f64>,
}

impl Brief {
    /// Reads a brief and the files it names.
    ///
    /// # Errors
    /// Every problem of the brief and of the files it names.
    pub fn read(path: &Path) -> Result<Self, Problems> {
        let text = read_text(path)?;
        let folder = path.parent().map(Path::to_owned).unwrap_or_default();
        let folder = Folder::disk(folder);
        let name = path.display().to_string();
        folder.note(name.clone(), text.as_bytes());
        Self::parse(&name, &text, &folder)
    }

    /// The demonstration brief that is built in.
    ///
    /// # Errors
    /// As [`Brief::read`]; a test holds that there are none.
    pub fn demonstration() -> Result<Self, Problems> {
        let folder = Folder::embedded(demo::FOLDER);
        let text = folder.text(demo::BRIEF)?;
        Self::parse(&folder.name(demo::BRIEF), &text, &folder)
    }

    /// What a file of meter readings says about the home of a brief, with what was assumed.
    ///
    /// # Errors
    /// Every problem of the file, of the brief's home and weather, and readings that show no heating.
    pub fn bills(file: &Path, brief: &Path) -> Result<(BillsMade, Vec<Assumption>), Problems> {
        of_file(file, brief)
    }

    /// JSON Schema of a brief.
    pub fn schema() -> Schema {
        Document::<raw::Brief>::schema()
    }

    fn parse(file: &str, text: &str, folder: &Folder) -> Result<Self, Problems> {
        let (raw, mut check) = Document::<raw::Brief>::read(file, text)?;
        let brief = build(&raw, folder, &mut check);
        check.finish(brief)
    }
}

/// The machine sheets that the systems name, as far as they can be read.
fn sheets(raw: &raw::Brief, folder: &Folder) -> impl Iterator<Item = Sheet> {
    raw.today.iter().chain(&raw.choice).filter_map(|table| {
        let named = |leaf: &Option<Leaf<String>>| leaf.as_ref()?.value().ok().cloned();
        match named(&table.machine) {
            Some(path) => folder.sheet(&path),
            None => Sheet::typical(&named(&table.typical_machine)?).ok(),
        }
    })
}

/// Builds what can be built and checks everything else all the same, so that no problem waits for another to be mended.
fn build(raw: &raw::Brief, folder: &Folder, check: &mut Check) -> Option<Brief> {
    let mut notes = Notes::default();
    if raw.home.is_none() {
        check.missing_table("[home]", "heat_loss, and a table [home.emitters] with flow");
    }
    if raw.today.is_none() {
        check.missing_table("[today]", "label and kind = \"gas-boiler\"");
    }
    if raw.choice.is_empty() {
        check.missing_table("[[choice]]", "label, kind = \"air-source\" and machine");
    }
    if raw.energy.is_none() {
        check.missing_table("[energy]", "electricity and gas, the files of the tariffs");
    }
    let label = raw.home.as_ref().and_then(|home| check.value(&home.label));
    let zone = time_zone(raw.home.as_ref(), check, &mut notes);
    let mut weather = weather(raw.weather.as_ref(), folder, check, &mut notes);
    // Meter readings are laid over temperature and sun of every hour that was read; what is run are whole years.
    let used = weather.as_mut().map(|read| {
        let whole = read.clone();
        (read.relative_humidity, read.wind_m_per_s) = (None, None);
        used(whole, &mut notes)
    });
    // Without weather the systems are still checked, against a stand-in whose results are thrown away with the case.
    let facts = used.as_ref().map_or(
        WeatherFacts {
            design_c: -5.0,
            has_radiation: true,
            main_c: None,
        },
        |used| facts(&used.weather),
    );
    let mut findings = used
        .as_ref()
        .map_or_else(Vec::new, |used| used.findings.clone());
    let site = used
        .zip(zone)
        .map(|(used, zone)| Arc::new(used.into_site(zone)));
    let energy = energy(raw, folder, site.as_deref(), zone, check, &mut notes);
    labels_differ(raw, check);
    let locale = locale(raw.report.as_ref(), check);

    let mut contenders = Vec::new();
    let mut machines = Vec::new();
    let mut rooms = Vec::new();
    let mut parts_w_per_k = None;
    if let Some(energy) = &energy {
        findings.extend(energy.supplies().flat_map(|supply| supply.findings.clone()));
    }
    let bills = weather.as_ref().zip(zone).and_then(|(weather, zone)| {
        let today = raw.today.as_ref();
        let home = raw.home.as_ref();
        let over = Over {
            home,
            today,
            weather,
            facts: &facts,
            zone,
            folder,
        };
        named(&over, check, &mut notes)
    });
    let bills = bills.flatten();
    findings.extend(bills.iter().flat_map(|bills| bills.findings.clone()));
    folder.fit_ahead(sheets(raw, folder));
    if let Some(home) = &raw.home {
        let systems = raw.today.iter().map(|today| (today, true));
        for (table, today) in systems.chain(raw.choice.iter().map(|choice| (choice, false))) {
            let surroundings = Surroundings {
                home,
                facts: &facts,
                bills: bills.as_ref(),
                site: site.as_deref(),
                energy: energy.as_ref(),
                folder,
                today,
            };
            if let Some(mut made) = contender(table, &surroundings, check, &mut notes) {
                let first: Option<&Contender> = contenders.first();
                if let Some(first) = first {
                    Arc::make_mut(&mut made.contender.plan).share(&first.plan);
                }
                contenders.push(made.contender);
                machines.push(made.machine);
                rooms.push(made.rooms);
                if today {
                    parts_w_per_k = made.parts_w_per_k;
                }
                // What is true of the home is found again with every system: once is enough.
                for finding in made.findings {
                    if !findings.contains(&finding) {
                        findings.push(finding);
                    }
                }
            }
        }
    }
    if let (Some(first), Some(site)) = (contenders.first(), &site) {
        let lowest_c = site.outdoor_c.iter().copied().fold(f64::INFINITY, f64::min);
        findings.extend(design_beside_weather(
            first.design_outdoor_c,
            facts.design_c,
            lowest_c,
        ));
    }
    if let (Some(table), Some(energy), Some(zone)) = (&raw.energy, &energy, zone) {
        findings.extend(of_another_country(table, energy.currency, zone));
    }
    let told = raw
        .choice
        .iter()
        .any(|choice| choice.capital.is_some() || choice.outlay.is_some());
    let unsure = said(raw, check);
    let terms = terms(raw.lifetime.as_ref(), told, check, &mut notes);
    let Energy {
        currency,
        carbon_scope,
        ..
    } = energy?;
    let (weather, site, zone, locale) = (weather?, site?, zone?, locale?);
    let mut case = Case::new(site, zone, currency, terms?, contenders);
    let bills = match bills {
        Some(bills) if check.problems().is_empty() => Some(scaled(bills, &mut case, check)?),
        _ => None,
    };
    case.age_grounds();
    let (price_correlation, precision) = (unsure.price_correlation, unsure.precision);
    // Ranges belong to systems by their place, which is only known when all of them could be read.
    let declared = match check.problems().is_empty() {
        true => unsure.checked(&case, check, &mut notes),
        false => Vec::new(),
    };
    let doubts = Doubts::of(&case, &declared, price_correlation);
    Some(Brief {
        case,
        told: Told {
            home_label: label,
            weather_file: weather.file,
            carbon_scope: Some(carbon_scope),
            assumptions: notes.into_vec(),
            findings,
            machines,
            inputs: folder.inputs(),
            rooms,
            parts_w_per_k,
            bills,
        },
        locale,
        doubts,
        precision,
    })
}

/// What the readings tell, the case scaled to them where the brief asks for it.
fn scaled(bills: BillsMade, case: &mut Case, check: &mut Check) -> Option<BillsTold> {
    let days = DailyWeather::of_hours(&case.site.civil, &case.site.outdoor_c);
    let fuel_kwh = bills.signature.fuel_kwh(days.all()).value / case.site.years.len() as f64;
    let scaled_by = match bills.scale {
        true => Some(check.take(scale_to_fuel(case, fuel_kwh))?),
        false => None,
    };
    Some(BillsTold {
        file: bills.file,
        signature: bills.signature,
        scaled_by,
    })
}

pub(super) fn time_zone(
    home: Option<&Section<raw::Home>>,
    check: &mut Check,
    notes: &mut Notes,
) -> Option<Tz> {
    let Some(leaf) = home.and_then(|home| home.time_zone.as_ref()) else {
        notes.used(&defaults::TIME_ZONE);
        return defaults::TIME_ZONE.value.parse().ok();
    };
    let name = check.value(&home?.time_zone)?;
    let zone = name.parse().ok();
    if zone.is_none() {
        check.refuse(
            &leaf.span(),
            format!("\"{name}\""),
            "a time zone of the tz database, such as \"Europe/London\" or \"Etc/UTC\"",
            "write area and city as the tz database does",
        );
    }
    zone
}

/// Results are named by label: each must be there once.
fn labels_differ(raw: &raw::Brief, check: &mut Check) {
    let mut seen: HashMap<String, usize> = HashMap::new();
    for table in raw.today.iter().chain(&raw.choice) {
        let Some(leaf) = &table.label else { continue };
        let Ok(label) = leaf.value() else { continue };
        let line = check.place(&leaf.span()).line.unwrap_or(0);
        if let Some(first) = seen.get(label) {
            check.refuse(
                &leaf.span(),
                format!("a second system called \"{label}\", the first is in line {first}"),
                "a label of its own for every system",
                "say in the label what makes it different",
            );
        } else {
            seen.insert(label.clone(), line);
        }
    }
}
