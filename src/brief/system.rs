//! From a system's table to a contender of the case.

use std::sync::Arc;

use rust_decimal::prelude::ToPrimitive as _;

use super::bills::BillsMade;
use super::defaults;
use super::energy::{Energy, Supply};
use super::files::Folder;
use super::ground::{Ground, ground, whole_within};
use super::home::{Warm, WeatherFacts, warm_side};
use super::leaves::Capital;
use super::lifetime::outlay;
use super::machine::{MachineMade, machine};
use super::notes::Notes;
use super::raw::{Home, SystemKind, SystemTable};
use crate::answer::RoomsAnswer;
use crate::bounds;
use crate::document::{Check, Leaf, Section};
use crate::heater::{Boiler, BoilerEfficiency};
use crate::plan::{Ability, following};
use crate::problem::Finding;
use crate::source::{Memory, Source};
use crate::study::{Contender, SHOWN_YEAR, design_point};
use crate::units::{Money, TemperatureDifference, parse};
use crate::year::{Heating, MachineSystem, Site, System};

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
    let keeps_gas = check.value(&table.keeps_gas);
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
    let heating = match kind {
        SystemKind::GasBoiler => boiler(table, check, notes).map(|heating| (heating, None)),
        SystemKind::DirectElectric => direct_electric(table, check).map(|heating| (heating, None)),
        SystemKind::AirSource | SystemKind::GroundSource => {
            heat_pump(table, kind, around, warm.as_ref(), check, notes)
        }
    };
    let burns_gas = kind == SystemKind::GasBoiler;
    if burns_gas && around.energy.is_some_and(|energy| energy.gas.is_none()) {
        check.missing(
            &table.span(),
            "energy.gas",
            "\"../tariffs/flat_gas.toml\", which a gas boiler needs",
        );
    }
    let (heating, made) = heating?;
    let (warm, label, energy, site) = (warm?, label?, around.energy?, around.site?);
    let gas = if burns_gas || keeps_gas.unwrap_or(false) {
        energy.gas.as_ref()
    } else {
        None
    };
    if burns_gas && gas.is_none() {
        return None;
    }
    let band_k = parse::<TemperatureDifference>(defaults::BACKUP_BAND.value)
        .ok()?
        .k();
    if matches!(heating, Heating::HeatPump(_)) {
        notes.used(&defaults::BACKUP_BAND);
    }
    let fuel_signal = gas.filter(|_| burns_gas).map(|gas| gas.signal.clone());
    let (machine, mut findings) =
        made.map_or((None, Vec::new()), |made| (Some(made.label), made.findings));
    findings.extend(warm.findings);
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
    let electricity = energy.electricity.signal.clone();
    let plan = following(
        &warm.pattern,
        &site.civil,
        ability,
        electricity,
        fuel_signal,
    );
    let capital = capital?;
    Some(Made {
        contender: Contender {
            kind: kind.word(),
            today: around.today,
            system,
            plan: Arc::new(plan),
            electricity: energy.electricity.account.clone(),
            fuel: gas.map(|Supply { account, .. }| account.clone()),
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
        },
        machine,
        rooms: warm.rooms,
        parts_w_per_k: warm.parts_w_per_k,
        findings,
    })
}

/// What a system costs to put in.
#[derive(Debug, Default)]
pub(super) struct PutIn {
    /// Everything; nothing when it is not given.
    pub whole: Option<f64>,
    /// Part by part, where it is given so.
    pub parts: Vec<(String, f64)>,
}

/// Money for the whole and for the parts; nothing when it is wrong.
fn capital(table: &SystemTable, energy: Option<&Energy>, check: &mut Check) -> Option<PutIn> {
    let Some(leaf) = &table.capital else {
        return Some(PutIn::default());
    };
    let currency = energy?.currency;
    let mut amount = |text: &str| -> Option<f64> {
        let money = match Money::parse(text) {
            Ok(money) => money,
            Err(problem) => {
                check.refuse(&leaf.span(), problem.found, problem.allowed, problem.remedy);
                return None;
            }
        };
        if money.currency != currency {
            check.refuse(
                &leaf.span(),
                format!("{money}"),
                format!("an amount in {currency}, as the tariffs are"),
                "convert it",
            );
            return None;
        }
        money.amount.to_f64()
    };
    match leaf.value() {
        Ok(Capital::Whole(text)) => Some(PutIn {
            whole: Some(amount(text)?),
            parts: Vec::new(),
        }),
        Ok(Capital::Parts(parts)) => {
            let read = parts
                .iter()
                .map(|(name, text)| amount(text).map(|money| (name.clone(), money)));
            let parts = read.collect::<Option<Vec<_>>>()?;
            let whole = Some(parts.iter().map(|part| part.1).sum());
            Some(PutIn { whole, parts })
        }
        Err(_) => {
            check.value(&table.capital);
            None
        }
    }
}

/// Year of a buried loop's life that is shown.
fn shown_year(table: &SystemTable, check: &mut Check) -> Option<u32> {
    if table.shown_year.is_none() {
        return Some(SHOWN_YEAR);
    }
    whole_within(check, &table.shown_year, &bounds::LOOP_YEAR).map(|year| year as u32)
}

fn boiler(table: &SystemTable, check: &mut Check, notes: &mut Notes) -> Option<Heating> {
    let output = notes.quantity(
        check,
        &table.output,
        &bounds::OUTPUT_KW,
        &defaults::BOILER_OUTPUT,
    );
    let fixed_flow = check.within(&table.fixed_flow, &bounds::FLOW_C);
    if let (Some(leaf), Some(_)) = (&table.efficiency, &table.field_factor) {
        check.refuse(
            &leaf.span(),
            "both efficiency and field_factor",
            "one of them: a seasonal efficiency already holds what homes lose",
            "remove field_factor",
        );
        return None;
    }
    let efficiency = if table.efficiency.is_some() {
        BoilerEfficiency::Seasonal(check.value(&table.efficiency)?)
    } else {
        let factor = notes.quantity(
            check,
            &table.field_factor,
            &bounds::FIELD_FACTOR,
            &defaults::BOILER_FIELD_FACTOR,
        );
        BoilerEfficiency::FollowingReturn {
            field_factor: factor?.fraction(),
        }
    };
    Some(Heating::Boiler {
        boiler: Boiler::new(output?.kw(), efficiency),
        fixed_flow_c: fixed_flow.map(|flow| flow.c()),
    })
}

fn direct_electric(table: &Section<SystemTable>, check: &mut Check) -> Option<Heating> {
    check.required(&table.output, &table.span(), "output", "\"8 kW\"");
    let output = check.within(&table.output, &bounds::OUTPUT_KW)?;
    Some(Heating::DirectElectric {
        output_kw: output.kw(),
    })
}

fn heat_pump(
    table: &Section<SystemTable>,
    kind: SystemKind,
    around: &Surroundings<'_>,
    warm: Option<&Warm>,
    check: &mut Check,
    notes: &mut Notes,
) -> Option<(Heating, Option<MachineMade>)> {
    let backup = notes.quantity(check, &table.backup, &bounds::HEATER_KW, &defaults::BACKUP);
    let immersion = notes.quantity(
        check,
        &table.immersion,
        &bounds::HEATER_KW,
        &defaults::IMMERSION,
    );
    let pump = notes.quantity(
        check,
        &table.circulation_pump,
        &bounds::AUXILIARY_KW,
        &defaults::CIRCULATION_PUMP,
    );
    let mut made = machine(table, kind, around.folder, warm, check, notes);
    let mut findings = Vec::new();
    let source = match kind {
        SystemKind::GroundSource => {
            let machine = made.as_ref().map(|made| &made.machine);
            ground(
                &Ground {
                    table,
                    around,
                    machine,
                },
                check,
                notes,
                &mut findings,
            )
        }
        _ => Some(Source::OutdoorAir),
    };
    if let Some(made) = &mut made {
        made.findings.append(&mut findings);
    }
    let (source, made) = (source?, made?);
    // The pump of a described loop is computed with it; the machine keeps what its tested points hold.
    let machine = match &source {
        Source::Buried(_) | Source::Water(_) => made.machine.without_outside_pump(),
        Source::OutdoorAir | Source::Ground(_) => made.machine.clone(),
    };
    Some((
        Heating::HeatPump(Box::new(MachineSystem {
            machine,
            source,
            backup_kw: backup?.kw(),
            immersion_kw: immersion?.kw(),
            circulation_kw: pump?.kw(),
        })),
        Some(made),
    ))
}

/// A field's name and its place, where the field is given.
type Given = (&'static str, Option<std::ops::Range<usize>>);

fn given<T>(name: &'static str, leaf: &Option<Leaf<T>>) -> Given {
    (name, leaf.as_ref().map(Leaf::span))
}

/// Refuses fields that belong to another kind of system: they would be ignored without a word.
fn only_its_own_fields(table: &SystemTable, kind: SystemKind, check: &mut Check) {
    let is_machine = matches!(kind, SystemKind::AirSource | SystemKind::GroundSource);
    let groups: [(bool, &str, Vec<Given>); 4] = [
        (
            is_machine,
            "a heat pump",
            vec![
                given("machine", &table.machine),
                given("typical_machine", &table.typical_machine),
                given("rated_output", &table.rated_output),
                given("rated_cop", &table.rated_cop),
                given("rated_at", &table.rated_at),
                given("refrigerant", &table.refrigerant),
                given("backup", &table.backup),
                given("immersion", &table.immersion),
                given("circulation_pump", &table.circulation_pump),
            ],
        ),
        (
            kind == SystemKind::GroundSource,
            "a ground source",
            vec![
                given("loop_depth", &table.loop_depth),
                given("loop_resistance", &table.loop_resistance),
                given("soil_diffusivity", &table.soil_diffusivity),
                given("shown_year", &table.shown_year),
                ("ground", table.ground.as_ref().map(Section::span)),
                ("brine", table.brine.as_ref().map(Section::span)),
                ("pipe", table.pipe.as_ref().map(Section::span)),
                ("borehole", table.borehole.as_ref().map(Section::span)),
                ("bore", table.bore.first().map(Section::span)),
                ("trench", table.trench.first().map(Section::span)),
                ("well", table.well.as_ref().map(Section::span)),
            ],
        ),
        (
            kind == SystemKind::GasBoiler,
            "a boiler",
            vec![
                given("efficiency", &table.efficiency),
                given("fixed_flow", &table.fixed_flow),
            ],
        ),
        (
            !is_machine,
            "a boiler or an electric heater",
            vec![given("output", &table.output)],
        ),
    ];
    for (belongs, owner, fields) in groups {
        for (name, span) in fields {
            if let (false, Some(span)) = (belongs, span) {
                check.refuse(
                    &span,
                    format!("{name} in a table of kind \"{}\"", kind.word()),
                    format!("{name} belongs to {owner}"),
                    "remove it or change kind",
                );
            }
        }
    }
}
