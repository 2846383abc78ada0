//! Reading one tested point.

use super::raw::RawTested;
use super::{SourceKind, SpeedAt, TestedPoint, carnot, default_spread_k};
use crate::bounds::{self, Bound};
use crate::document::{Check, Leaf, Section};
use crate::fault::{self, Fault};
use crate::units::Power;

/// Entering brine or ground water.
const GROUND_SOURCE_C: Bound = Bound {
    label: "entering brine or ground water",
    low: -20.0,
    high: 35.0,
    unit: "°C",
};
/// Flow temperature of a tested point.
pub(super) const TESTED_FLOW_C: Bound = Bound {
    label: "flow temperature",
    low: 20.0,
    high: 80.0,
    unit: "°C",
};
/// COP of a tested point; the Carnot bound of its own temperatures is checked besides.
pub(super) const TESTED_COP: Bound = Bound {
    label: "COP",
    low: 1.0,
    high: 12.0,
    unit: "",
};
/// Flow minus return of a tested point.
const TESTED_SPREAD_K: Bound = Bound {
    label: "spread of flow and return",
    low: 2.0,
    high: 20.0,
    unit: "K",
};
/// Largest disagreement of two ways to say one thing (COP and input, return and spread), relative or in K.
const AGREEMENT: f64 = 0.02;

/// What the entering source can be.
pub(super) fn source_bound(kind: SourceKind) -> &'static Bound {
    match kind {
        SourceKind::Air => &bounds::OUTDOOR_C,
        SourceKind::Brine | SourceKind::Water => &GROUND_SOURCE_C,
    }
}

/// Reads a point; nothing when anything needed is missing.
pub(super) fn read_point(
    raw: &Section<RawTested>,
    kind: SourceKind,
    check: &mut Check,
) -> Option<TestedPoint> {
    let span = raw.span();
    for (absent, field, example) in [
        (raw.source.is_none(), "source", "\"7 °C\""),
        (raw.flow.is_none(), "flow", "\"35 °C\""),
        (raw.output.is_none(), "output", "\"5.4 kW\""),
        (raw.cop.is_none() && raw.input.is_none(), "cop", "4.6"),
    ] {
        if absent {
            check.missing(&span, &format!("tested.{field}"), example);
        }
    }
    let source = check.within(&raw.source, source_bound(kind));
    let flow = check.within(&raw.flow, &TESTED_FLOW_C);
    let heat = read_output(&raw.output, check);
    let input = check.value(&raw.input);
    let cop = check.plain_within(&raw.cop, &TESTED_COP);
    let at = check.value(&raw.at).map_or(SpeedAt::Unknown, |at| at.0);
    let defrost_included = check.value(&raw.defrost_included).unwrap_or(true);
    let spread = check.within(&raw.spread, &TESTED_SPREAD_K);
    let back = check.value(&raw.return_);
    let (source_c, flow_c, heat_kw) = (source?.c(), flow?.c(), heat?.kw());

    let spread_k = match (spread, back, &raw.return_) {
        (Some(spread), None, _) => Some(spread.k()),
        (None, None, _) => Some(default_spread_k(flow_c)),
        (spread, Some(back), Some(leaf)) => {
            let found = flow_c - back.c();
            if !TESTED_SPREAD_K.holds(found) {
                check.refuse(
                    &leaf.span(),
                    format!("return {} °C with flow {flow_c} °C", back.c()),
                    TESTED_SPREAD_K.words(),
                    "give the water entering the machine, or leave it out",
                );
                None
            } else if spread.is_some_and(|spread| (spread.k() - found).abs() > AGREEMENT) {
                check.refuse(
                    &leaf.span(),
                    format!("return {} °C contradicts the spread", back.c()),
                    format!("{} °C", flow_c - spread.map_or(found, |s| s.k())),
                    "give one of return and spread",
                );
                None
            } else {
                Some(found)
            }
        }
        _ => None,
    };
    let cop = match (cop, input, &raw.input) {
        (Some(cop), None, _) => Some(cop),
        (cop, Some(input), Some(leaf)) => {
            let found = heat_kw / input.kw();
            if found < 1.0 || found > carnot(source_c, flow_c).abs() {
                check.refuse(
                    &leaf.span(),
                    format!("input {} kW for {heat_kw} kW of heat", input.kw()),
                    format!(
                        "{:.3} to {heat_kw} kW: between the Carnot bound and a direct heater",
                        heat_kw / carnot(source_c, flow_c).abs()
                    ),
                    "are kW and W swapped?",
                );
                None
            } else if cop.is_some_and(|cop| (cop / found - 1.0).abs() > AGREEMENT) {
                check.refuse(
                    &leaf.span(),
                    format!("input {} kW means COP {found:.2}", input.kw()),
                    format!("the COP {} given besides, within 2 %", cop.unwrap_or(found)),
                    "give one of cop and input",
                );
                None
            } else {
                Some(cop.unwrap_or(found))
            }
        }
        _ => None,
    };
    Some(TestedPoint {
        place: check.place(&span),
        source_c,
        flow_c,
        return_c: flow_c - spread_k?,
        heat_kw,
        cop: cop?,
        at,
        // Only an outdoor coil frosts.
        defrost_included: defrost_included
            && kind == SourceKind::Air
            && !fault::on(Fault::DefrostTwice),
    })
}

/// The output within its bound, with an eye for kW and W.
fn read_output(leaf: &Option<Leaf<Power>>, check: &mut Check) -> Option<Power> {
    let output = check.value(leaf)?;
    let (kw, bound) = (output.kw(), &bounds::OUTPUT_KW);
    if bound.holds(kw) {
        return Some(output);
    }
    let remedy = [kw * 1000.0, kw / 1000.0]
        .into_iter()
        .find(|other| bound.holds(*other))
        .map_or_else(
            || "check the number and its unit".to_owned(),
            |other| format!("are kW and W swapped? {other} kW would be allowed"),
        );
    let span = leaf.as_ref().map(Leaf::span).unwrap_or_default();
    check.refuse(&span, format!("output {kw} kW"), bound.words(), remedy);
    None
}
