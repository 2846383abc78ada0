//! What tested points cannot be, alone or together.

use super::raw::RawTested;
use super::{Drive, Limits, SpeedAt, TestedPoint};
use crate::document::{Check, Leaf, Section};

/// Share of the Carnot COP that a whole machine reaches at most; 35–50 % is usual \[from memory\].
const GREATEST_CARNOT_SHARE: f64 = 0.70;
/// Share of the Carnot COP below which a number is a slip.
const LEAST_CARNOT_SHARE: f64 = 0.15;
/// Difference of output or COP that printing and measuring can explain (EN 14511 measures output within 5 %), relative.
const MEASURING: f64 = 0.02;

type Read<'a> = (&'a Section<RawTested>, Option<TestedPoint>);

/// Refuses points that physics, the sheet's limits or the other points exclude.
pub(super) fn check_points(
    points: &[Read<'_>],
    drive: Option<Drive>,
    limits: Option<&Limits>,
    check: &mut Check,
) {
    let read: Vec<(&RawTested, &Section<RawTested>, &TestedPoint)> = points
        .iter()
        .filter_map(|(raw, point)| Some((&***raw, *raw, point.as_ref()?)))
        .collect();
    for &(raw, section, point) in &read {
        check_alone(raw, section, point, drive, check);
        if let Some(limits) = limits {
            check_limits(raw, section, point, limits, check);
        }
    }
    for (i, &(raw, section, point)) in read.iter().enumerate() {
        for &(_, _, other) in &read[..i] {
            if let Some((found, allowed)) = contradiction(other, point) {
                let span = span_of(&raw.output, section);
                check.refuse(
                    &span,
                    found,
                    allowed,
                    "check both points against the datasheet",
                );
            }
        }
    }
}

fn span_of<T>(leaf: &Option<Leaf<T>>, section: &Section<RawTested>) -> std::ops::Range<usize> {
    leaf.as_ref().map_or_else(|| section.span(), Leaf::span)
}

fn check_alone(
    raw: &RawTested,
    section: &Section<RawTested>,
    point: &TestedPoint,
    drive: Option<Drive>,
    check: &mut Check,
) {
    if point.flow_c <= point.source_c {
        check.refuse(
            &span_of(&raw.flow, section),
            format!(
                "flow {} °C from a source at {} °C",
                point.flow_c, point.source_c
            ),
            "a flow temperature above the source temperature",
            "are source and flow swapped?",
        );
        return;
    }
    let share = point.cop / point.carnot();
    if !(LEAST_CARNOT_SHARE..=GREATEST_CARNOT_SHARE).contains(&share) {
        let span = if raw.cop.is_some() {
            span_of(&raw.cop, section)
        } else {
            span_of(&raw.input, section)
        };
        let found = if share > 1.0 {
            format!("COP {:.2} is above the Carnot COP", point.cop)
        } else {
            format!(
                "COP {:.2} is {:.0} % of the Carnot COP",
                point.cop,
                share * 100.0
            )
        };
        check.refuse(
            &span,
            found,
            format!(
                "{:.2} to {:.2}: 15 to 70 % of Carnot ({:.2}) between {} and {} °C",
                LEAST_CARNOT_SHARE * point.carnot(),
                GREATEST_CARNOT_SHARE * point.carnot(),
                point.carnot(),
                point.source_c,
                point.flow_c
            ),
            "check the COP and both temperatures; real machines reach 35 to 50 % of Carnot",
        );
    }
    if drive == Some(Drive::Fixed) && matches!(point.at, SpeedAt::Part | SpeedAt::Least) {
        check.refuse(
            &span_of(&raw.at, section),
            format!("a point at \"{}\" speed", point.at.word()),
            "\"maximum\" for a machine of fixed speed",
            "set machine.speed = \"variable\", or at = \"maximum\"",
        );
    }
}

fn check_limits(
    raw: &RawTested,
    section: &Section<RawTested>,
    point: &TestedPoint,
    limits: &Limits,
    check: &mut Check,
) {
    if !limits.allows_source(point.source_c) {
        check.refuse(
            &span_of(&raw.source, section),
            format!("tested at source {} °C", point.source_c),
            format!(
                "the limits of this sheet: {} to {} °C",
                limits.lowest_source_c, limits.highest_source_c
            ),
            "widen [limits], or remove the point",
        );
    } else if point.flow_c > limits.highest_flow_at(point.source_c) + LIMIT_SLACK_K {
        check.refuse(
            &span_of(&raw.flow, section),
            format!("tested at flow {} °C", point.flow_c),
            format!(
                "the limits of this sheet: at most {:.1} °C at source {} °C",
                limits.highest_flow_at(point.source_c),
                point.source_c
            ),
            "raise limits.highest_flow, or remove the point",
        );
    }
    if let Some(greatest) = limits.greatest_output_kw
        && point.heat_kw > greatest * (1.0 + MEASURING)
    {
        check.refuse(
            &span_of(&raw.output, section),
            format!("tested output {} kW", point.heat_kw),
            format!("at most limits.greatest_output, {greatest} kW"),
            "raise the limit, or check the point",
        );
    }
}

/// Rounding of limits that are given as straight lines, K.
const LIMIT_SLACK_K: f64 = 1e-6;

/// What two points say that no one machine can do, in words, and what would be allowed.
fn contradiction(first: &TestedPoint, second: &TestedPoint) -> Option<(String, String)> {
    let same = |a: f64, b: f64| (a - b).abs() < 0.1;
    let differ = |a: f64, b: f64| (a / b - 1.0).abs() > MEASURING;
    let (same_source, same_flow) = (
        same(first.source_c, second.source_c),
        same(first.flow_c, second.flow_c),
    );
    let line = first.place.line.unwrap_or(0);
    let where_ = format!("source {} °C, flow {} °C", second.source_c, second.flow_c);
    if same_source && same_flow {
        return same_condition(first, second, line, &where_);
    }
    // Frost may bend the line at A2; a point with defrosting is not compared across source temperatures.
    let comparable = first.at == SpeedAt::Maximum && second.at == SpeedAt::Maximum;
    if !comparable || first.defrost_included != second.defrost_included {
        return None;
    }
    if same_source && !same_flow {
        let (cool, hot) = if first.flow_c < second.flow_c {
            (first, second)
        } else {
            (second, first)
        };
        if hot.cop > cool.cop && differ(hot.cop, cool.cop) {
            return Some((
                format!(
                    "COP {:.2} at flow {} °C is above {:.2} at {} °C (line {line})",
                    hot.cop, hot.flow_c, cool.cop, cool.flow_c
                ),
                "a COP that falls as the flow gets hotter at the same source and speed".to_owned(),
            ));
        }
    }
    if same_flow && !same_source {
        let (cold, warm) = if first.source_c < second.source_c {
            (first, second)
        } else {
            (second, first)
        };
        if cold.cop > warm.cop && differ(cold.cop, warm.cop) {
            return Some((
                format!(
                    "COP {:.2} at source {} °C is above {:.2} at {} °C (line {line})",
                    cold.cop, cold.source_c, warm.cop, warm.source_c
                ),
                "a COP that rises as the source gets warmer at the same flow and speed".to_owned(),
            ));
        }
    }
    None
}

/// Contradictions of two points at one condition.
fn same_condition(
    first: &TestedPoint,
    second: &TestedPoint,
    line: usize,
    where_: &str,
) -> Option<(String, String)> {
    let rank = |at| match at {
        SpeedAt::Least => Some(0),
        SpeedAt::Part => Some(1),
        SpeedAt::Maximum => Some(2),
        SpeedAt::Unknown => None,
    };
    let (a, b) = (rank(first.at)?, rank(second.at)?);
    let (low, high) = if a <= b {
        (first, second)
    } else {
        (second, first)
    };
    if a == b && first.at != SpeedAt::Part {
        let off = (first.heat_kw / second.heat_kw - 1.0).abs() > MEASURING
            || (first.cop / second.cop - 1.0).abs() > MEASURING;
        return off.then(|| {
            (
                format!(
                    "a second \"{}\" point at {where_} says otherwise than line {line}",
                    first.at.word()
                ),
                format!("{} kW at COP {:.2}, within 2 %", first.heat_kw, first.cop),
            )
        });
    }
    (a != b && low.heat_kw > high.heat_kw * (1.0 + MEASURING)).then(|| {
        (
            format!(
                "at {where_} \"{}\" gives {} kW and \"{}\" {} kW (line {line} and here)",
                low.at.word(),
                low.heat_kw,
                high.at.word(),
                high.heat_kw
            ),
            "least no more than part, part no more than maximum".to_owned(),
        )
    })
}
