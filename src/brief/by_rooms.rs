//! From the room table to emitters: the worst room sets the flow, or a chosen flow says which radiators must grow.

use super::defaults;
use super::emitter_findings::pipe;
use super::emitters::{EmittersMade, controlled, greatest_flow_c};
use super::envelope::Envelope;
use super::notes::Notes;
use super::raw::EmitterTable;
use crate::answer::{RoomAnswer, RoomsAnswer};
use crate::bounds;
use crate::document::{Check, Section};
use crate::home::{EmitterKind, Emitters, Room, worst_room};
use crate::units::{TemperatureDifference, parse};

/// The worst room sets the flow of all.
pub(super) fn by_rooms(
    table: Option<&Section<EmitterTable>>,
    rooms: &[Room],
    own: &Envelope,
    check: &mut Check,
    notes: &mut Notes,
) -> Option<EmittersMade> {
    let none = None;
    let spread_leaf = table.map_or(&none, |table| &table.spread);
    let spread_k = notes
        .quantity(
            check,
            spread_leaf,
            &bounds::SPREAD_K,
            &defaults::ROOM_SPREAD,
        )?
        .k();
    let worst = worst_room(rooms, spread_k)?;
    let room = &rooms[worst.place];
    let flow_c = worst.flow_c;
    if !bounds::FLOW_C.holds(flow_c) {
        let span = table.map_or(0..0, Section::span);
        check.refuse(
            &span,
            format!("room \"{}\" needs a flow of {flow_c:.0} °C for its {:.2} kW from radiators of {:.2} kW", room.name, room.load_kw, room.radiator_kw),
            bounds::FLOW_C.words(),
            "check its heat loss and its radiators, whose output is meant at ΔT 50 K",
        );
        return None;
    }
    let greatest_flow_c = match table {
        Some(table) => greatest_flow_c(table, flow_c, check, notes)?,
        None => {
            flow_c
                + parse::<TemperatureDifference>(defaults::GREATEST_FLOW_ABOVE_DESIGN.value)
                    .ok()?
                    .k()
        }
    };
    let return_c = (flow_c - spread_k).max(own.indoor_c + 1.0);
    let emitters = Emitters::new(
        EmitterKind::Radiators,
        own.design_load_kw(),
        flow_c,
        return_c,
        own.indoor_c,
        greatest_flow_c,
    );
    let emitters = match table {
        Some(table) => controlled(emitters, table, check)?,
        None => emitters,
    };
    let mut answer = RoomsAnswer {
        flow_c,
        worst_room: Some(room.name.clone()),
        remedy_kw: worst.remedy_kw,
        next_room: worst.next.map(|(place, _)| rooms[place].name.clone()),
        next_flow_c: worst.next.map(|(_, flow_c)| flow_c),
        rooms: rooms.iter().map(|room| answer(room, spread_k)).collect(),
        sentence: String::new(),
    };
    answer.sentence = answer.words();
    let findings = pipe(&emitters).into_iter().collect();
    Some(EmittersMade {
        emitters,
        rooms: Some(answer),
        findings,
    })
}

fn answer(room: &Room, spread_k: f64) -> RoomAnswer {
    RoomAnswer {
        name: room.name.clone(),
        temperature_c: room.room_c,
        heat_load_kw: room.load_kw,
        radiator_kw: room.radiator_kw,
        flow_c: room.flow_needed_c(spread_k),
        needed_kw: None,
    }
}

/// Which radiators have to grow so that a flow is enough in every room.
pub(super) fn to_reach(rooms: &[Room], flow_c: f64, spread_k: f64) -> RoomsAnswer {
    let each = rooms.iter().map(|room| {
        let needed_kw = room.radiator_needed_kw(flow_c, spread_k);
        RoomAnswer {
            needed_kw: needed_kw.filter(|&kw| kw > room.radiator_kw),
            ..answer(room, spread_k)
        }
    });
    let mut answer = RoomsAnswer {
        flow_c,
        worst_room: None,
        remedy_kw: None,
        next_room: None,
        next_flow_c: None,
        rooms: each.collect(),
        sentence: String::new(),
    };
    answer.sentence = answer.words();
    answer
}
