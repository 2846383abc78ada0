//! From the emitter tables, or the room table, to emitters at their design point.

use std::ops::Range;

use super::by_rooms::{by_rooms, to_reach};
use super::defaults;
use super::emitter_findings::{floor_surface, pipe, short_of_load};
use super::envelope::Envelope;
use super::notes::Notes;
use super::raw::{EmitterTable, GroupTable};
use crate::answer::RoomsAnswer;
use crate::bounds;
use crate::document::{Check, Leaf, Section};
use crate::home::{Control, Emitters, Group, MOST_GROUPS, Room, worst_room};
use crate::problem::Finding;
use crate::units::{Area, TemperatureDifference, as_set, parse};

/// What emitters are made from.
pub(super) struct Emitting<'a> {
    /// The home's own table.
    pub home: Option<&'a Section<EmitterTable>>,
    /// The system's table.
    pub own: Option<&'a Section<EmitterTable>>,
    /// The rooms, where they are given.
    pub rooms: Option<&'a [Room]>,
    /// Floor area of the home.
    pub floor_area: &'a Option<Leaf<Area>>,
}

/// Emitters and what there is to tell about them.
pub(super) struct EmittersMade {
    pub emitters: Emitters,
    pub rooms: Option<RoomsAnswer>,
    pub findings: Vec<Finding>,
}

/// Makes the emitters of a system: those of the home were sized for the home as it is, those a choice brings for the choice.
pub(super) fn emitters(
    home_span: &Range<usize>,
    from: &Emitting<'_>,
    as_is: &Envelope,
    own: &Envelope,
    check: &mut Check,
    notes: &mut Notes,
) -> Option<EmittersMade> {
    let Some(table) = from.own.or(from.home) else {
        if let Some(rooms) = from.rooms {
            return by_rooms(None, rooms, own, check, notes);
        }
        check.missing(
            home_span,
            "home.emitters",
            "a table [home.emitters] with flow = \"50 °C\", or a room table",
        );
        return None;
    };
    let says_flow = table.flow.is_some() || !table.group.is_empty();
    if let (Some(rooms), false) = (from.rooms, says_flow) {
        return by_rooms(Some(table), rooms, own, check, notes);
    }
    if let (Some(rooms), Some(leaf), None) = (from.rooms, &table.flow, from.own) {
        let worst = worst_room(rooms, 0.0)?;
        check.refuse(
            &leaf.span(),
            format!(
                "a flow temperature beside a room table, whose room \"{}\" sets it",
                rooms[worst.place].name
            ),
            "one of them",
            "remove flow and return (spread may stay), or the room table",
        );
        return None;
    }
    let envelope = if from.own.is_some() { own } else { as_is };
    let groups = groups(table, from.home, envelope, check, notes)?;
    let leading_c = groups
        .iter()
        .map(|group| group.flow_c)
        .fold(f64::NEG_INFINITY, f64::max);
    let greatest_flow_c = greatest_flow_c(table, leading_c, check, notes)?;
    let load_kw = envelope.design_load_kw();
    let emitters = Emitters::of_groups(&groups, load_kw, envelope.indoor_c, greatest_flow_c)?;
    let emitters = controlled(emitters, table, check)?;
    let rooms = from
        .rooms
        .map(|rooms| to_reach(rooms, leading_c, emitters.design_spread_k()));
    let mut findings = Vec::new();
    findings.extend(floor_surface(
        &groups,
        table,
        from.floor_area,
        envelope,
        check,
    ));
    findings.extend(short_of_load(&emitters, own));
    findings.extend(pipe(&emitters));
    Some(EmittersMade {
        emitters,
        rooms,
        findings,
    })
}

/// Flow minus return where the return is not given, K: 5, 8 and 10 K at up to 45, 55 and above.
///
/// EN 14511's rating conditions by application; the trade's usual spreads (common practice, no source).
fn usual_spread_k(flow_c: f64) -> f64 {
    if flow_c <= 45.0 {
        5.0
    } else if flow_c <= 55.0 {
        8.0
    } else {
        10.0
    }
}

fn groups(
    table: &Section<EmitterTable>,
    home: Option<&Section<EmitterTable>>,
    envelope: &Envelope,
    check: &mut Check,
    notes: &mut Notes,
) -> Option<Vec<Group>> {
    if table.group.is_empty() {
        let kind_leaf = if table.kind.is_some() {
            &table.kind
        } else {
            home.map_or(&table.kind, |home| &home.kind)
        };
        let kind = notes.word(check, kind_leaf, &defaults::EMITTER_KIND);
        let water = Water {
            flow: &table.flow,
            return_: &table.return_,
            spread: &table.spread,
            span: table.span(),
        };
        let (flow_c, return_c) = water.read(envelope, check, notes)?;
        return Some(vec![Group {
            kind: kind?.0,
            share: 1.0,
            flow_c,
            return_c,
        }]);
    }
    let before = check.problems().len();
    if table.flow.is_some() || table.kind.is_some() {
        check.refuse(
            &table.span(),
            "kind or flow beside groups",
            "one of them",
            "give both in every group instead",
        );
    }
    if table.group.len() > MOST_GROUPS {
        check.refuse(
            &table.span(),
            format!("{} groups", table.group.len()),
            format!("at most {MOST_GROUPS}"),
            "join alike groups",
        );
    }
    let groups: Vec<_> = table
        .group
        .iter()
        .filter_map(|one| group(one, envelope, check, notes))
        .collect();
    let sum: f64 = groups.iter().map(|group| group.share).sum();
    if check.problems().len() == before && (sum - 1.0).abs() > 0.01 {
        check.refuse(
            &table.span(),
            format!("shares of {:.0} % together", sum * 100.0),
            "100 %",
            "let the groups carry the whole design heat load",
        );
    }
    (check.problems().len() == before).then_some(groups)
}

fn group(
    table: &Section<GroupTable>,
    envelope: &Envelope,
    check: &mut Check,
    notes: &mut Notes,
) -> Option<Group> {
    let kind = check.required(&table.kind, &table.span(), "kind", "\"underfloor\"");
    check.required(&table.share, &table.span(), "share", "\"40 %\"");
    let share = check.within(&table.share, &bounds::SHARE);
    let water = Water {
        flow: &table.flow,
        return_: &table.return_,
        spread: &None,
        span: table.span(),
    };
    let (flow_c, return_c) = water.read(envelope, check, notes)?;
    Some(Group {
        kind: kind?.0,
        share: share?.fraction(),
        flow_c,
        return_c,
    })
}

/// Water temperatures as a table gives them.
struct Water<'a> {
    flow: &'a Option<Leaf<crate::units::Temperature>>,
    return_: &'a Option<Leaf<crate::units::Temperature>>,
    spread: &'a Option<Leaf<TemperatureDifference>>,
    span: Range<usize>,
}

impl Water<'_> {
    fn read(
        &self,
        envelope: &Envelope,
        check: &mut Check,
        notes: &mut Notes,
    ) -> Option<(f64, f64)> {
        check.required(self.flow, &self.span, "flow", "\"50 °C\"");
        let flow = check.within(self.flow, &bounds::FLOW_C);
        let return_ = check.value(self.return_);
        let spread = check.within(self.spread, &bounds::SPREAD_K);
        if let (Some(leaf), Some(_)) = (self.spread, self.return_) {
            check.refuse(
                &leaf.span(),
                "both return and spread",
                "one of them",
                "remove one",
            );
            return None;
        }
        let flow_c = flow?.c();
        let return_c = match (self.return_, self.spread) {
            (Some(_), _) => return_?.c(),
            (None, Some(_)) => flow_c - spread?.k(),
            (None, None) => {
                let return_c = flow_c - usual_spread_k(flow_c);
                notes.add(
                    "emitters.return",
                    format!("{} °C at a flow of {} °C", as_set(return_c), as_set(flow_c)),
                    "default: usual spread, common practice, no source",
                );
                return_c
            }
        };
        if return_c >= flow_c || return_c <= envelope.indoor_c {
            let span = self
                .return_
                .as_ref()
                .or(self.flow.as_ref())
                .map_or(self.span.clone(), Leaf::span);
            check.refuse(
                &span,
                format!("return {return_c:.1} °C at a flow of {flow_c:.1} °C"),
                format!(
                    "below the flow and above the set point of {:.1} °C",
                    envelope.indoor_c
                ),
                "give the water temperatures at the design heat load",
            );
            return None;
        }
        Some((flow_c, return_c))
    }
}

pub(super) fn greatest_flow_c(
    table: &EmitterTable,
    flow_c: f64,
    check: &mut Check,
    notes: &mut Notes,
) -> Option<f64> {
    let greatest = check.within(&table.greatest_flow, &bounds::FLOW_C);
    let Some(leaf) = &table.greatest_flow else {
        notes.used(&defaults::GREATEST_FLOW_ABOVE_DESIGN);
        let above =
            parse::<TemperatureDifference>(defaults::GREATEST_FLOW_ABOVE_DESIGN.value).ok()?;
        return Some(flow_c + above.k());
    };
    let greatest_c = greatest?.c();
    if greatest_c < flow_c {
        check.refuse(
            &leaf.span(),
            format!("greatest flow {greatest_c:.1} °C, but the emitters need {flow_c:.1} °C for the design heat load"),
            "at least the flow of the design point",
            "raise it, lower flow with larger emitters, or lower the heat loss",
        );
        return None;
    }
    Some(greatest_c)
}

/// Emitters under the control and behind the header of a table.
pub(super) fn controlled(
    emitters: Emitters,
    table: &EmitterTable,
    check: &mut Check,
) -> Option<Emitters> {
    let header = check.within(&table.header, &bounds::HEADER_K);
    let fixed = check.within(&table.fixed_flow, &bounds::FLOW_C);
    let line = check.value(&table.line);
    if let (Some(leaf), Some(_)) = (&table.line, &table.fixed_flow) {
        check.refuse(
            &leaf.span(),
            "both line and fixed_flow",
            "one control",
            "remove one",
        );
        return None;
    }
    let control = match (&table.line, &table.fixed_flow) {
        (Some(leaf), _) => {
            let line = line?;
            for flow_c in [line.cold.1, line.mild.1] {
                if !bounds::FLOW_C.holds(flow_c) {
                    check.refuse(
                        &leaf.span(),
                        format!("{flow_c} °C"),
                        bounds::FLOW_C.words(),
                        "check the line",
                    );
                    return None;
                }
            }
            Control::Line {
                cold: line.cold,
                mild: line.mild,
            }
        }
        (_, Some(_)) => Control::Fixed(fixed?.c()),
        _ => Control::FollowingLoad,
    };
    let header_k = match &table.header {
        Some(_) => header?.k(),
        None => 0.0,
    };
    Some(emitters.with_control(control).with_header(header_k))
}
