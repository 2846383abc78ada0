//! Reading a sheet's tables.

use super::plausible::check_points;
use super::raw::{RawDeclared, RawHighestFlow, RawIdlePower, RawLimits, RawMachine, RawSheet};
use super::read_point::{TESTED_COP, TESTED_FLOW_C, read_point, source_bound};
use super::{Assumed, Drive, Sheet, SourceKind, TestedPoint};
use crate::bounds::{self, Bound};
use crate::document::{Check, Leaf, Section};
use crate::heatpump::idle::IdlePower;
use crate::heatpump::limits::Limits;
use crate::heatpump::rating::DeclaredPoint;
use crate::refrigerant::Refrigerant;

/// Superheat and subcooling.
const CYCLE_SPREAD_K: Bound = Bound {
    label: "superheat or subcooling",
    low: 0.0,
    high: 15.0,
    unit: "K",
};
/// Degradation coefficient of EN 14825.
const CYCLING_COEFFICIENT: Bound = Bound {
    label: "cycling coefficient Cc",
    low: 0.5,
    high: 1.0,
    unit: "",
};
/// Operating current of a domestic machine.
const CURRENT_A: Bound = Bound {
    label: "greatest current",
    low: 1.0,
    high: 100.0,
    unit: "A",
};

/// Superheat and subcooling of a sheet that states none, K; common practice, no source.
const USUAL_SUPERHEAT_K: f64 = 5.0;
const USUAL_SUBCOOLING_K: f64 = 5.0;
/// Degradation coefficient Cc of a sheet that states none (EN 14825).
const USUAL_CYCLING_COEFFICIENT: f64 = 0.9;

/// Reads and checks everything; nothing when anything needed is missing, in which case `check` knows why.
pub(super) fn read_sheet(file: &str, raw: &RawSheet, check: &mut Check) -> Option<Sheet> {
    let mut assumed = Vec::new();
    let head = match &raw.machine {
        Some(machine) => read_machine(machine, check, &mut assumed),
        None => {
            check.refuse(
                &(0..0),
                "there is no table [machine]",
                "[machine] with label, source, refrigerant and speed",
                "write it at the top of the sheet",
            );
            None
        }
    };
    let kind = head.as_ref().map_or(SourceKind::Air, |head| head.source);
    let points: Vec<_> = raw
        .tested
        .iter()
        .map(|tested| (tested, read_point(tested, kind, check)))
        .collect();
    if points.is_empty() {
        check.refuse(
            &(0..0),
            "there is no table [[tested]]",
            "at least one [[tested]] with source, flow, output and cop or input",
            "copy the points of the datasheet, one table each",
        );
    }
    let limits = read_limits(raw.limits.as_ref(), kind, check);
    let declared = raw
        .declared
        .iter()
        .filter_map(|declared| read_declared(declared, check))
        .collect();
    let idle = raw
        .idle_power
        .as_ref()
        .map(|section| read_idle(section, check));
    let drive = head.as_ref().map(|head| head.drive);
    check_points(&points, drive, limits.as_ref(), check);

    let points: Option<Vec<_>> = points.into_iter().map(|(_, point)| point).collect();
    let points = points.filter(|points| !points.is_empty())?;
    let head = head?;
    let limits = limits.unwrap_or_else(|| {
        let limits = usual_limits(head.source, &points);
        assumed.push(Assumed {
            name: "limits",
            value: format!(
                "source {} to {} °C, flow to {} °C",
                limits.lowest_source_c,
                limits.highest_source_c,
                limits.highest_flow_anywhere()
            ),
            from: "common practice, no source; widened to hold the tested points",
        });
        limits
    });
    let greatest_kw = points.iter().map(|p| p.heat_kw).fold(0.0, f64::max);
    let idle = idle.map_or_else(
        || IdlePower::usual(greatest_kw),
        |idle| idle.complete(IdlePower::usual(greatest_kw)),
    );
    if raw.idle_power.is_none() {
        assumed.push(Assumed {
            name: "idle_power",
            value: format!("{:.0} W in every mode", idle.standby_kw * 1000.0),
            from: "31 W measured on a 5 kW unit, scaled with output: common practice, no source",
        });
    }
    Some(Sheet {
        file: file.into(),
        label: head.label,
        source: head.source,
        refrigerant: head.refrigerant,
        drive: head.drive,
        superheat_k: head.superheat_k,
        subcooling_k: head.subcooling_k,
        source_power_kw: head.source_power_kw,
        source_power_at_home_kw: head.source_power_at_home_kw,
        cycling_coefficient: head.cycling_coefficient,
        greatest_current_a: head.greatest_current_a,
        points,
        limits,
        idle,
        declared,
        assumed,
        typical: false,
    })
}

struct Head {
    label: String,
    source: SourceKind,
    refrigerant: Refrigerant,
    drive: Drive,
    superheat_k: f64,
    subcooling_k: f64,
    source_power_kw: Option<f64>,
    source_power_at_home_kw: Option<f64>,
    cycling_coefficient: f64,
    greatest_current_a: Option<f64>,
}

fn read_machine(
    raw: &Section<RawMachine>,
    check: &mut Check,
    assumed: &mut Vec<Assumed>,
) -> Option<Head> {
    let span = raw.span();
    let label = check.required(&raw.label, &span, "machine.label", "\"A small machine\"");
    let source = check.required(&raw.source, &span, "machine.source", "\"air\"");
    let drive = check.required(&raw.speed, &span, "machine.speed", "\"variable\"");
    let refrigerant = check.required(&raw.refrigerant, &span, "machine.refrigerant", "\"R290\"");
    let refrigerant = refrigerant.and_then(|text| {
        text.parse::<Refrigerant>()
            .map_err(|unknown| {
                let span = raw.refrigerant.as_ref().map_or(span.clone(), Leaf::span);
                check.refuse(
                    &span,
                    format!("refrigerant \"{}\" is not held", unknown.found),
                    format!("one of {}", Refrigerant::names()),
                    unknown.nearest.map_or_else(
                        || "a machine with another refrigerant cannot be modelled; a typical machine of its rated output may stand in".to_owned(),
                        |nearest| format!("did you mean \"{nearest}\"?"),
                    ),
                );
            })
            .ok()
    });
    let mut usual = |name, value: f64, unit: &str, from| {
        assumed.push(Assumed {
            name,
            value: format!("{value}{unit}"),
            from,
        });
        value
    };
    let superheat = check.within(&raw.superheat, &CYCLE_SPREAD_K);
    let subcooling = check.within(&raw.subcooling, &CYCLE_SPREAD_K);
    let cycling = check.plain_within(&raw.cycling_coefficient, &CYCLING_COEFFICIENT);
    let source_power = check.within(&raw.source_power, &bounds::AUXILIARY_KW);
    let at_home = check.within(&raw.source_power_at_home, &bounds::AUXILIARY_KW);
    if let (Some(tested), Some(home), Some(leaf)) =
        (source_power, at_home, &raw.source_power_at_home)
        && home.kw() < tested.kw()
    {
        check.refuse(
            &leaf.span(),
            format!("{} W at home", home.kw() * 1000.0),
            format!(
                "at least the {} W contained in the tested points",
                tested.kw() * 1000.0
            ),
            "the pump at home overcomes the loop besides the machine",
        );
    }
    // What the points hold is scaled to what the pump takes at home: nothing cannot be.
    if let (Some(tested), Some(_), Some(leaf)) = (source_power, at_home, &raw.source_power)
        && tested.kw() <= 0.0
    {
        check.refuse(
            &leaf.span(),
            format!("{} W in the tested points", tested.kw() * 1000.0),
            "more than 0 W where source_power_at_home is given",
            "leave source_power_at_home out where the points hold no pump",
        );
    }
    let current = check.within(&raw.greatest_current, &CURRENT_A);
    Some(Head {
        label: label?,
        source: source?.0,
        refrigerant: refrigerant?,
        drive: drive?.0,
        superheat_k: superheat.map_or_else(
            || {
                usual(
                    "superheat",
                    USUAL_SUPERHEAT_K,
                    " K",
                    "common practice, no source",
                )
            },
            |k| k.k(),
        ),
        subcooling_k: subcooling.map_or_else(
            || {
                usual(
                    "subcooling",
                    USUAL_SUBCOOLING_K,
                    " K",
                    "common practice, no source",
                )
            },
            |k| k.k(),
        ),
        source_power_kw: source_power.map(|p| p.kw()),
        source_power_at_home_kw: at_home.map(|p| p.kw()),
        cycling_coefficient: cycling.unwrap_or_else(|| {
            usual(
                "cycling_coefficient",
                USUAL_CYCLING_COEFFICIENT,
                "",
                "EN 14825 default",
            )
        }),
        greatest_current_a: current.map(|a| a.a()),
    })
}
fn read_limits(
    raw: Option<&Section<RawLimits>>,
    kind: SourceKind,
    check: &mut Check,
) -> Option<Limits> {
    let raw = raw?;
    let span = raw.span();
    let bound = source_bound(kind);
    for (absent, field, example) in [
        (raw.lowest_source.is_none(), "lowest_source", "\"-20 °C\""),
        (raw.highest_source.is_none(), "highest_source", "\"35 °C\""),
        (
            raw.highest_flow.is_empty(),
            "highest_flow",
            "[{ source = \"-20 °C\", flow = \"55 °C\" }, { source = \"-5 °C\", flow = \"65 °C\" }]",
        ),
    ] {
        if absent {
            check.missing(&span, &format!("limits.{field}"), example);
        }
    }
    let low = check.within(&raw.lowest_source, bound);
    let high = check.within(&raw.highest_source, bound);
    let greatest = check.within(&raw.greatest_output, &bounds::OUTPUT_KW);
    let flows: Vec<_> = raw
        .highest_flow
        .iter()
        .map(|entry| read_highest_flow(entry, bound, check))
        .collect();
    for (pair, entry) in flows.windows(2).zip(raw.highest_flow.iter().skip(1)) {
        if let [(Some(first), _), (Some(second), _)] = pair
            && second <= first
        {
            check.refuse(
                &entry.span(),
                format!("source {second} °C after {first} °C"),
                "source temperatures that rise from entry to entry",
                "sort the entries of highest_flow by source",
            );
        }
    }
    if let (Some(low), Some(high), Some(leaf)) = (low, high, &raw.highest_source)
        && high.c() <= low.c()
    {
        check.refuse(
            &leaf.span(),
            format!("highest source {} °C", high.c()),
            format!("above the lowest source, {} °C", low.c()),
            "are the two swapped?",
        );
    }
    let highest_flow_c: Option<Vec<_>> = flows
        .into_iter()
        .map(|(source, flow)| source.zip(flow))
        .collect();
    Some(Limits {
        lowest_source_c: low?.c(),
        highest_source_c: high?.c(),
        highest_flow_c: highest_flow_c.filter(|flows| !flows.is_empty())?,
        greatest_output_kw: greatest.map(|p| p.kw()),
    })
}

fn read_highest_flow(
    raw: &Section<RawHighestFlow>,
    bound: &Bound,
    check: &mut Check,
) -> (Option<f64>, Option<f64>) {
    let span = raw.span();
    if raw.source.is_none() {
        check.missing(&span, "limits.highest_flow.source", "\"-20 °C\"");
    }
    if raw.flow.is_none() {
        check.missing(&span, "limits.highest_flow.flow", "\"55 °C\"");
    }
    let source = check.within(&raw.source, bound);
    let flow = check.within(&raw.flow, &TESTED_FLOW_C);
    (source.map(|t| t.c()), flow.map(|t| t.c()))
}

/// The stated idle powers, in the order of [`IdlePower`]'s fields.
struct StatedIdle([Option<f64>; 4]);

impl StatedIdle {
    fn complete(self, usual: IdlePower) -> IdlePower {
        let [standby, thermostat_off, crankcase, off] = self.0;
        // Where one mode is stated, an unstated one is no worse than it.
        let standby_kw = standby.or(thermostat_off).unwrap_or(usual.standby_kw);
        IdlePower {
            standby_kw,
            thermostat_off_kw: thermostat_off.unwrap_or(standby_kw),
            crankcase_kw: crankcase.unwrap_or(usual.crankcase_kw),
            off_kw: off.unwrap_or(standby_kw),
        }
    }
}

fn read_idle(raw: &Section<RawIdlePower>, check: &mut Check) -> StatedIdle {
    StatedIdle(
        [&raw.standby, &raw.thermostat_off, &raw.crankcase, &raw.off]
            .map(|leaf| check.within(leaf, &bounds::AUXILIARY_KW).map(|p| p.kw())),
    )
}

fn read_declared(raw: &Section<RawDeclared>, check: &mut Check) -> Option<DeclaredPoint> {
    let span = raw.span();
    for (absent, field, example) in [
        (raw.climate.is_none(), "climate", "\"average\""),
        (raw.application.is_none(), "application", "\"low\""),
        (raw.outdoor.is_none(), "outdoor", "\"-7 °C\""),
        (raw.output.is_none(), "output", "\"5.4 kW\""),
        (raw.cop.is_none(), "cop", "3.1"),
    ] {
        if absent {
            check.missing(&span, &format!("declared.{field}"), example);
        }
    }
    let climate = check.value(&raw.climate);
    let application = check.value(&raw.application);
    let outdoor = check.within(&raw.outdoor, &bounds::OUTDOOR_C);
    let output = check.within(&raw.output, &bounds::OUTPUT_KW);
    let cop = check.plain_within(&raw.cop, &TESTED_COP);
    Some(DeclaredPoint {
        climate: climate?.0,
        application: application?.0,
        outdoor_c: outdoor?.c(),
        output_kw: output?.kw(),
        cop: cop?,
    })
}

/// Usual limits, widened to hold the tested points.
fn usual_limits(kind: SourceKind, points: &[TestedPoint]) -> Limits {
    /// Highest flow temperature of a usual machine, °C; common practice, no source.
    const USUAL_HIGHEST_FLOW_C: f64 = 55.0;
    let hottest = points
        .iter()
        .map(|p| p.flow_c)
        .fold(USUAL_HIGHEST_FLOW_C, f64::max);
    let mut limits = Limits::usual(kind, hottest);
    for point in points {
        limits.lowest_source_c = limits.lowest_source_c.min(point.source_c);
        limits.highest_source_c = limits.highest_source_c.max(point.source_c);
    }
    limits
}
