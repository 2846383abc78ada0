//! From a system's table to a contender of the case.

use std::sync::Arc;

use super::bills::BillsMade;
use super::capital::capital;
use super::defaults;
use super::energy::{Energy, Supply};
use super::files::Folder;
use super::ground::whole_within;
use super::heating::heating;
use super::home::{WeatherFacts, warm_side};
use super::lifetime::outlay;
use super::notes::Notes;
use super::own_fields::only_its_own_fields;
use super::raw::{Home, SystemTable};
use super::shifting::{shifted, shifting};
use super::supplies::{expected_kwh, supplies};
use crate::answer::RoomsAnswer;
use crate::bounds;
use crate::carbon::Leakage;
use crate::document::{Check, Section};
use crate::plan::{Ability, following};
use crate::problem::Finding;
use crate::source::Memory;
use crate::study::{Contender, SHOWN_YEAR, design_point};
use crate::units::{TemperatureDifference, parse};
use crate::year::{MachineSystem, Site, System};

/// What a system is put into.
pub(super) struct Surroundings<'a> {
    pub home: &'a Section<Home>,
    pub facts: &'a WeatherFacts,
    pub bills: Option<&'a BillsMade>,
    pub site: Option<&'a Site>,
    pub energy: Option<&'a Energy>,
    pub folder: &'a Folder,
    pub today: bool,
}

/// A contender and what there is to tell about it.
pub(super) struct Made {
    pub contender: Contender,
    /// Its machine, where it has one.
    pub machine: Option<String>,
    /// The room table's verdict, where there is one.
    pub rooms: Option<RoomsAnswer>,
    /// Transmission and ventilation, W/K, where they are known apart.
    pub parts_w_per_k: Option<(f64, f64)>,
    pub findings: Vec<Finding>,
}

/// Makes a contender; nothing when something is wrong with its table or its surroundings.
pub(super) fn contender(
    table: &Section<SystemTable>,
    around: &Surroundings<'_>,
    check: &mut Check,
    notes: &mut Notes,
) -> Option<Made> {
    let header = if around.today { "today" } else { "choice" };
    let label = check.required(
        &table.label,
        &table.span(),
        &format!("{header}.label"),
        "\"Air source\"",
    );
    let kind = check.required(
        &table.kind,
        &table.span(),
        &format!("{header}.kind"),
        "\"air-source\"",
    );
    let kind = kind.map(|(kind,)| kind);
    let warm = warm_side(
        around.home,
        table,
        kind,
        around.facts,
        around.bills,
        check,
        notes,
    );
    let capital = capital(table, around.energy, check);
    let currency = around.energy.map(|energy| energy.currency);
    let outlay = outlay(
        table,
        capital.as_ref(),
        (kind, around.today),
        currency,
        check,
        notes,
    );
    let shown_year = shown_year(table, check);
    let kind = kind?;
    only_its_own_fields(table, kind, check);
    let shifting = table
        .shifting
        .as_ref()
        .map(|table| shifting(table, check, notes));
    let heating = heating(table, kind, around, warm.as_ref(), check, notes);
    let burnt = heating
        .as_ref()
        .and_then(|(heating, _)| heating.boiler())
        .map(|boiler| boiler.fuel)
        .or(kind.burns());
    let supplies = supplies(table, burnt, around, check);
    let (heating, made) = heating?;
    let (warm, label, energy, site) = (warm?, label?, around.energy?, around.site?);
    let mut supplies = supplies?;
    let band_k = parse::<TemperatureDifference>(defaults::BACKUP_BAND.value)
        .ok()?
        .k();
    if heating.machine().is_some() {
        notes.used(&defaults::BACKUP_BAND);
    }
    let (machine, mut findings) =
        made.map_or((None, Vec::new()), |made| (Some(made.label), made.findings));
    findings.extend(warm.findings);
    findings.append(&mut supplies.findings);
    let system = System {
        label,
        home: warm.home,
        heating,
    };
    let design = design_point(
        &system,
        warm.indoor_c,
        warm.design_outdoor_c,
        warm.design_load_kw,
        Memory::default(),
    );
    let ability = Ability {
        output_kw: design.carried_kw(),
        backup_band_k: band_k,
    };
    let fuel_signal = supplies.fuel.as_ref().map(|fuel| fuel.signal.clone());
    let plan = |electricity: &Supply| {
        following(
            &warm.pattern,
            &site.civil,
            ability,
            electricity.signal.clone(),
            fuel_signal.clone(),
        )
    };
    if supplies.electricity.has_steps() {
        // What the steps depend on is what a first run reads.
        let kwh = expected_kwh(
            &supplies.electricity,
            energy,
            site,
            &system,
            &plan,
            warm.indoor_c,
        );
        supplies.electricity = supplies.electricity.expecting(kwh);
    }
    let asked = plan(&supplies.electricity);
    let (plan, unshifted, shift_rule) = match shifting {
        None => (asked, None, None),
        Some(shifting) => {
            let shifting = shifting?;
            let plan = shifted(&shifting, &asked, site, &system, warm.indoor_c);
            (plan, Some(asked), Some(shifting.0))
        }
    };
    let leakage = leakage(table, system.heating.machine(), check, notes);
    let capital = capital?;
    Some(Made {
        contender: Contender {
            kind: kind.word(),
            today: around.today,
            system,
            plan: Arc::new(plan),
            electricity: supplies.electricity.account,
            fuel: supplies.fuel.map(|supply| supply.account),
            beside: supplies.beside,
            household: Arc::clone(&energy.household),
            unshifted: unshifted.map(Arc::new),
            shift_rule,
            leakage,
            indoor_c: warm.indoor_c,
            design_outdoor_c: warm.design_outdoor_c,
            design_load_kw: warm.design_load_kw,
            pattern: warm.pattern,
            ability,
            capital: capital.whole,
            capital_parts: capital.parts,
            outlay: outlay?,
            shown_year: shown_year?,
            aged: None,
            life: None,
        },
        machine,
        rooms: warm.rooms,
        parts_w_per_k: warm.parts_w_per_k,
        findings,
    })
}

/// What escapes of a machine's refrigerant, where its charge is given.
fn leakage(
    table: &SystemTable,
    machine: Option<&MachineSystem>,
    check: &mut Check,
    notes: &mut Notes,
) -> Option<Leakage> {
    table.refrigerant_charge.as_ref()?;
    let charge = check.within(&table.refrigerant_charge, &bounds::REFRIGERANT_KG);
    let per_year = notes.quantity(check, &table.leakage, &bounds::SHARE, &defaults::LEAKAGE);
    let at_end = notes.quantity(
        check,
        &table.leakage_at_end,
        &bounds::SHARE,
        &defaults::LEAKAGE_AT_END,
    );
    let facts = machine?.machine.refrigerant().facts();
    let gwp100 = facts.gwp100_ar5.or(facts.gwp100_ar4)?;
    notes.used(&defaults::LEAKAGE_LIFE);
    notes.add(
        format!("global warming potential of {}", facts.substance),
        format!("{gwp100}"),
        facts.gwp_source,
    );
    Some(Leakage {
        charge_kg: charge?.kg(),
        gwp100,
        per_year: per_year?.fraction(),
        at_end: at_end?.fraction(),
    })
}

/// Year of a buried loop's life that is shown.
fn shown_year(table: &SystemTable, check: &mut Check) -> Option<u32> {
    if table.shown_year.is_none() {
        return Some(SHOWN_YEAR);
    }
    whole_within(check, &table.shown_year, &bounds::LOOP_YEAR).map(|year| year as u32)
}
