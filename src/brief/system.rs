//! From a system's table to a contender of the case.

use std::sync::Arc;

use rust_decimal::prelude::ToPrimitive as _;

use super::bills::BillsMade;
use super::boiler::{Kept, boiler, kept};
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
use super::shifting::{shifted, shifting};
use crate::answer::RoomsAnswer;
use crate::bounds;
use crate::carbon::Leakage;
use crate::document::{Check, Leaf, Section};
use crate::plan::{Ability, following};
use crate::problem::Finding;
use crate::source::{Memory, Source};
use crate::study::{Beside, Contender, SHOWN_YEAR, design_point};
use crate::tariff::Metering;
use crate::units::{Fuel, Money, TemperatureDifference, parse};
use crate::year::{Heating, HybridSystem, MachineSystem, Metered, Plan, Site, State, System, run};

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
    let heating = match kind.burns() {
        Some(fuel) => boiler(table, fuel, check, notes).map(|(boiler, fixed_flow_c)| {
            let heating = Heating::Boiler {
                boiler,
                fixed_flow_c,
            };
            (heating, None)
        }),
        None if kind == SystemKind::DirectElectric => {
            direct_electric(table, check).map(|heating| (heating, None))
        }
        None => heat_pump(table, kind, around, warm.as_ref(), check, notes),
    };
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

/// What a system is supplied with.
struct Supplies {
    electricity: Supply,
    fuel: Option<Supply>,
    beside: Vec<Beside>,
    findings: Vec<Finding>,
}

/// The tariffs of a system: its own where it names them, else the home's; and what goes on beside it.
fn supplies(
    table: &Section<SystemTable>,
    burnt: Option<Fuel>,
    around: &Surroundings<'_>,
    check: &mut Check,
) -> Option<Supplies> {
    let (energy, site) = (around.energy?, around.site?);
    let before = check.problems().len();
    let mut findings = Vec::new();
    let mut own = |leaf: &Option<Leaf<String>>, fuel: Fuel, check: &mut Check| {
        let supply = energy.of_choice(leaf, fuel, around.folder, site, check)?;
        findings.extend(supply.findings.iter().cloned());
        Some(supply)
    };
    let electricity = own(&table.electricity, Fuel::Electricity, check);
    let fuel =
        burnt.and_then(|fuel| own(&table.fuel, fuel, check).or_else(|| energy.fuel(fuel).cloned()));
    if let (Some(burnt), None, None) = (burnt, &fuel, &table.fuel) {
        let field = format!("energy.{}", burnt.name().replace('-', "_"));
        let example = format!("\"../tariffs/….toml\", a tariff of {burnt}, which its boiler needs");
        check.missing(&table.span(), &field, &example);
    }
    let mut beside = Vec::new();
    if let Some(own) = &electricity
        && own.account.tariff.metering == Metering::HeatPump
    {
        let account = energy.electricity.account.clone();
        let reading = energy.household.reading(&account.meter);
        beside.push(Beside { account, reading });
    }
    let keeps_gas = check.value(&table.keeps_gas).unwrap_or(false);
    if keeps_gas && burnt != Some(Fuel::Gas) {
        if let Some(gas) = energy.fuel(Fuel::Gas) {
            let account = gas.account.clone();
            let reading = account.meter.zero();
            beside.push(Beside { account, reading });
        } else {
            check.missing(
                &table.span(),
                "energy.gas",
                "\"../tariffs/flat_gas.toml\", whose standing charge keeps_gas keeps",
            );
        }
    }
    if check.problems().len() > before {
        return None;
    }
    Some(Supplies {
        electricity: electricity.unwrap_or_else(|| energy.electricity.clone()),
        fuel,
        beside,
        findings,
    })
}

/// What the electricity meter of a system reads in a mean year.
fn expected_kwh(
    electricity: &Supply,
    energy: &Energy,
    site: &Site,
    system: &System,
    plan: &impl Fn(&Supply) -> Plan,
    indoor_c: f64,
) -> f64 {
    let account = &electricity.account;
    let metering = account.tariff.metering;
    let mut metered = Metered::new(metering, &energy.household, &account.meter, None);
    let mut state = State::at_rest(system, indoor_c);
    let hours = 0..site.outdoor_c.len();
    run(
        site,
        system,
        &plan(electricity),
        hours,
        &mut state,
        &mut metered,
    );
    let read_kwh: f64 = metered.electricity.import_kwh.iter().sum();
    read_kwh / site.years.len() as f64
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
    let kept = table.boiler.as_ref().map(|table| kept(table, check, notes));
    if let Some(made) = &mut made {
        made.findings.append(&mut findings);
    }
    let (source, made) = (source?, made?);
    // The pump of a described loop is computed with it; the machine keeps what its tested points hold.
    let machine = match &source {
        Source::Buried(_) | Source::Water(_) => made.machine.without_outside_pump(),
        Source::OutdoorAir | Source::Ground(_) => made.machine.clone(),
    };
    let system = MachineSystem {
        machine,
        source,
        backup_kw: backup?.kw(),
        immersion_kw: immersion?.kw(),
        circulation_kw: pump?.kw(),
    };
    let heating = match kept {
        None => Heating::HeatPump(Box::new(system)),
        Some(kept) => {
            let Kept {
                boiler,
                fixed_flow_c,
                rule,
            } = kept?;
            Heating::Hybrid(Box::new(HybridSystem {
                machine: system,
                boiler,
                fixed_flow_c,
                rule,
            }))
        }
    };
    Some((heating, Some(made)))
}

/// A field's name and its place, where the field is given.
type Given = (&'static str, Option<std::ops::Range<usize>>);

fn given<T>(name: &'static str, leaf: &Option<Leaf<T>>) -> Given {
    (name, leaf.as_ref().map(Leaf::span))
}

/// Refuses fields that belong to another kind of system: they would be ignored without a word.
fn only_its_own_fields(table: &SystemTable, kind: SystemKind, check: &mut Check) {
    let is_machine = kind.is_heat_pump();
    let is_boiler = kind.burns().is_some();
    let groups: [(bool, &str, Vec<Given>); 6] = [
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
                given("refrigerant_charge", &table.refrigerant_charge),
                given("leakage", &table.leakage),
                given("leakage_at_end", &table.leakage_at_end),
                ("boiler", table.boiler.as_ref().map(Section::span)),
            ],
        ),
        (
            !is_boiler,
            "a heat pump or an electric heater",
            vec![("shifting", table.shifting.as_ref().map(Section::span))],
        ),
        (
            is_boiler || table.boiler.is_some(),
            "a boiler",
            vec![given("fuel", &table.fuel)],
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
            is_boiler,
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
