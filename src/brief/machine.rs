//! The machine of a choice: from its sheet, a typical one scaled, or one known by a single point.

use std::ops::Range;

use super::defaults;
use super::files::Folder;
use super::home::Warm;
use super::notes::Notes;
use super::raw::{SystemKind, SystemTable};
use crate::bounds;
use crate::document::{Check, Leaf, Section};
use crate::heatpump::{HeatPump, Sheet, SourceKind};
use crate::problem::{Finding, Problem, Problems, Severity};
use crate::refrigerant::Refrigerant;
use crate::units::{Power, Temperature, parse};

/// A fitted machine and what there is to tell about it.
#[derive(Debug, Clone)]
pub(super) struct MachineMade {
    pub machine: HeatPump,
    /// What results call it; says when it is a typical one.
    pub label: String,
    pub findings: Vec<Finding>,
}

/// Makes the machine of a heat pump's table.
pub(super) fn machine(
    table: &Section<SystemTable>,
    kind: SystemKind,
    folder: &Folder,
    warm: Option<&Warm>,
    check: &mut Check,
    notes: &mut Notes,
) -> Option<MachineMade> {
    let rated_output = check.within(&table.rated_output, &bounds::OUTPUT_KW);
    let factor = notes.quantity(
        check,
        &table.field_factor,
        &bounds::FIELD_FACTOR,
        &defaults::MACHINE_FIELD_FACTOR,
    );
    let ways = [
        table.machine.is_some(),
        table.typical_machine.is_some(),
        table.rated_cop.is_some(),
    ];
    if ways.iter().filter(|&&given| given).count() != 1 {
        check.refuse(
            &table.span(),
            "not exactly one of machine, typical_machine and rated_cop",
            "one way to say which machine it is",
            "name a machine sheet, or a typical machine with rated_output, or give rated_output, rated_cop and refrigerant",
        );
        return None;
    }
    if let (Some(_), Some(leaf)) = (&table.machine, &table.rated_output) {
        check.refuse(
            &leaf.span(),
            "rated_output beside machine",
            "the size that the machine sheet tells",
            "remove it; only a typical machine can be scaled",
        );
    }
    let sheet = if table.machine.is_some() {
        let path = check.value(&table.machine)?;
        let text = check.take(folder.text(&path))?;
        check.take(Sheet::parse(&folder.name(&path), &text))
    } else if table.typical_machine.is_some() {
        typical_sheet(table, rated_output, check)
    } else {
        one_point(table, kind, rated_output, check, notes)
    };
    let sheet = sheet?;
    source_agrees(table, kind, &sheet, check)?;
    let fitted = check.take(folder.fitted(&sheet))?;
    let scaled = match rated_output {
        Some(output) if table.typical_machine.is_some() => fitted.heat_pump.scaled_to(output.kw()),
        _ => fitted.heat_pump.clone(),
    };
    let machine = scaled.with_field_factor(factor?.fraction());
    let mut findings = fitted.report.findings.clone();
    let label = label(&machine, table);
    if let Some(warm) = warm {
        findings.extend(smaller_than_design(&machine, &label, warm));
    }
    for assumed in &sheet.assumed {
        notes.add(
            format!("{}: {}", sheet.label, assumed.name),
            assumed.value.clone(),
            assumed.from,
        );
    }
    Some(MachineMade {
        machine,
        label,
        findings,
    })
}

fn label(machine: &HeatPump, table: &SystemTable) -> String {
    let output = format!("{:.1} kW", machine.rated_output_kw());
    let letter = if machine.source() == SourceKind::Air {
        'A'
    } else {
        'B'
    };
    let (source_c, flow_c) = machine.rated_condition();
    let size = format!("{output} at {letter}{source_c:.0}/W{flow_c:.0}");
    if table.typical_machine.is_some() {
        format!("{}, a typical machine, {size}", machine.label())
    } else {
        format!("{}, {size}", machine.label())
    }
}

fn typical_sheet(
    table: &Section<SystemTable>,
    rated_output: Option<Power>,
    check: &mut Check,
) -> Option<Sheet> {
    if table.rated_output.is_none() {
        check.missing(
            &table.span(),
            "rated_output",
            "\"6 kW\", to which the typical machine is scaled",
        );
    }
    let name = check.value(&table.typical_machine)?;
    let sheet = Sheet::typical(&name)
        .map_err(|problems| at_the_table(&problems, &span_of(&table.typical_machine), check));
    let sheet = check.take(sheet);
    rated_output?;
    sheet
}

/// A machine known by one point alone: the fit is then mostly its stated priors.
fn one_point(
    table: &Section<SystemTable>,
    kind: SystemKind,
    rated_output: Option<Power>,
    check: &mut Check,
    notes: &mut Notes,
) -> Option<Sheet> {
    let span = table.span();
    if table.rated_output.is_none() {
        check.missing(&span, "rated_output", "\"6 kW\"");
    }
    let refrigerant = check.required(&table.refrigerant, &span, "refrigerant", "\"R290\"");
    let refrigerant = refrigerant.filter(|name| {
        let held = name.parse::<Refrigerant>();
        if let Err(unknown) = &held {
            check.refuse(
                &span_of(&table.refrigerant),
                unknown.to_string(),
                Refrigerant::names(),
                "",
            );
        }
        held.is_ok()
    });
    let cop = check.plain_within(&table.rated_cop, &bounds::COP);
    let default = match kind {
        SystemKind::GroundSource => defaults::RATED_AT_GROUND,
        _ => defaults::RATED_AT_AIR,
    };
    let rated_at = notes.word(check, &table.rated_at, &default);
    let (source_c, flow_c) = rated_at.and_then(|text: String| {
        let point = rating_point(&text);
        if point.is_none() {
            check.refuse(
                &span_of(&table.rated_at),
                format!("\"{text}\""),
                "a source and a flow temperature",
                "write for example rated_at = \"7 °C / 35 °C\"",
            );
        }
        point
    })?;
    let (output, cop, refrigerant) = (rated_output?, cop?, refrigerant?);
    let source = match kind {
        SystemKind::GroundSource => "brine",
        _ => "air",
    };
    let text = format!(
        "[machine]\nlabel = \"Machine known by one point\"\nsource = \"{source}\"\nrefrigerant = {refrigerant}\n\
         speed = \"variable\"\n[[tested]]\nsource = \"{source_c} °C\"\nflow = \"{flow_c} °C\"\noutput = \"{} kW\"\ncop = {cop}\n\
         at = \"unknown\"\ndefrost_included = false\n",
        output.kw(),
        refrigerant = toml::Value::String(refrigerant),
    );
    let sheet = Sheet::parse("rated point", &text)
        .map_err(|problems| at_the_table(&problems, &span, check));
    check.take(sheet)
}

/// Problems of the one-point sheet, told where its figures stand in the brief.
fn at_the_table(problems: &Problems, span: &Range<usize>, check: &Check) -> Problems {
    let mut told = Problems::new();
    for problem in problems.iter() {
        told.push(Problem {
            place: check.place(span),
            ..problem.clone()
        });
    }
    told
}

/// Reads `"7 °C / 35 °C"`.
fn rating_point(text: &str) -> Option<(f64, f64)> {
    let (source, flow) = text.split_once('/')?;
    Some((
        parse::<Temperature>(source).ok()?.c(),
        parse::<Temperature>(flow).ok()?.c(),
    ))
}

fn source_agrees(
    table: &Section<SystemTable>,
    kind: SystemKind,
    sheet: &Sheet,
    check: &mut Check,
) -> Option<()> {
    let agrees = match kind {
        SystemKind::GroundSource => sheet.source != SourceKind::Air,
        _ => sheet.source == SourceKind::Air,
    };
    if !agrees {
        let leaf = if table.machine.is_some() {
            &table.machine
        } else {
            &table.typical_machine
        };
        let (has, needs) = match kind {
            SystemKind::GroundSource => ("air", "brine or water"),
            _ => ("brine or water", "air"),
        };
        check.refuse(
            &span_of(leaf),
            format!(
                "a machine that draws on {has} in a table of kind \"{}\"",
                kind.word()
            ),
            format!("a machine that draws on {needs}"),
            "name another machine or change kind",
        );
    }
    agrees.then_some(())
}

/// A machine far larger than the design load cycles; one smaller needs backup: both are worth saying before the year is run.
fn smaller_than_design(machine: &HeatPump, label: &str, warm: &Warm) -> Option<Finding> {
    /// Rated output over design load from which a machine is told to be large. Common practice, no source.
    const LARGE: f64 = 2.0;
    let ratio = machine.rated_output_kw() / warm.design_load_kw;
    (ratio > LARGE).then(|| {
        Finding::new(
            Severity::Warning,
            format!("{label}, is {ratio:.1} times the design heat load of {:.1} kW", warm.design_load_kw),
            "a machine this large starts and stops through most of the season; a smaller one may cost less and run better",
        )
    })
}

fn span_of<T>(leaf: &Option<Leaf<T>>) -> Range<usize> {
    leaf.as_ref().map(Leaf::span).unwrap_or_default()
}
