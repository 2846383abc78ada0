//! From the room tables to rooms at the design point.

use super::envelope::Envelope;
use super::notes::Notes;
use super::raw::{Home as HomeTable, RoomTable, SystemTable};
use crate::bounds;
use crate::document::{Check, Section};
use crate::home::Room;

/// The rooms together may differ from the home by this share: rooms also lose heat to one another. Common practice, no source.
const ADDS_UP_WITHIN: f64 = 0.1;

/// The rooms of the home as a system changes them; outer nothing when something is wrong, inner when there is no table.
#[allow(
    clippy::option_option,
    reason = "outer: could not be read; inner: no rooms are given"
)]
pub(super) fn rooms(
    home: &Section<HomeTable>,
    system: &Section<SystemTable>,
    as_is: &Envelope,
    own: &Envelope,
    check: &mut Check,
    notes: &mut Notes,
) -> Option<Option<Vec<Room>>> {
    if home.room.is_empty() {
        if let Some(room) = system.room.first() {
            check.refuse(
                &room.span(),
                "a room of a choice without a room table of the home",
                "rooms that the home's table names",
                "give every room of the home in tables [[home.room]]",
            );
            return None;
        }
        return Some(None);
    }
    let before = check.problems().len();
    let mut rooms = Vec::with_capacity(home.room.len());
    for table in &home.room {
        rooms.extend(room(table, as_is, check));
    }
    for (i, room) in rooms.iter().enumerate() {
        if rooms[..i].iter().any(|other| other.name == room.name) {
            let span = home.room[i].span();
            check.refuse(
                &span,
                format!("a second room \"{}\"", room.name),
                "a name of its own for every room",
                "",
            );
        }
    }
    if check.problems().len() > before {
        return None;
    }
    adds_up(home, &rooms, as_is, check)?;
    // Insulating the home as a whole is taken as insulating every room alike, unless the choice says what its rooms lose.
    let share = own.design_load_kw() / as_is.design_load_kw();
    let says = system
        .room
        .iter()
        .any(|room| room.heat_loss.is_some() || room.heat_load.is_some());
    if !says && (share - 1.0).abs() > 1e-9 {
        for room in &mut rooms {
            room.load_kw *= share;
        }
        notes.add(
            "room loads",
            format!("× {share:.2}"),
            "every room changes as the whole home does",
        );
    }
    for table in &system.room {
        change(table, &mut rooms, own, check);
    }
    (check.problems().len() == before).then_some(Some(rooms))
}

fn room(table: &Section<RoomTable>, envelope: &Envelope, check: &mut Check) -> Option<Room> {
    let span = table.span();
    let name = check.required(&table.name, &span, "name", "\"Living room\"");
    check.required(
        &table.radiator,
        &span,
        "radiator",
        "\"1.4 kW\", its radiators' output at ΔT 50 K",
    );
    let radiator = check.within(&table.radiator, &bounds::RADIATOR_KW);
    let room_c = check.within(&table.temperature, &bounds::INDOOR_C);
    let room_c = room_c.map_or(envelope.indoor_c, |own| own.c());
    let load_kw = load_kw(table, room_c, envelope, check);
    if table.heat_loss.is_none() && table.heat_load.is_none() {
        check.missing(&span, "heat_loss", "\"38 W/K\", or heat_load = \"0.9 kW\"");
    }
    Some(Room {
        name: name?,
        load_kw: load_kw?,
        room_c,
        radiator_kw: radiator?.kw(),
    })
}

fn load_kw(table: &RoomTable, room_c: f64, envelope: &Envelope, check: &mut Check) -> Option<f64> {
    let loss = check.within(&table.heat_loss, &bounds::ROOM_LOSS_W_PER_K);
    let load = check.within(&table.heat_load, &bounds::ROOM_LOAD_KW);
    if let (Some(leaf), Some(_)) = (&table.heat_loss, &table.heat_load) {
        check.refuse(
            &leaf.span(),
            "both heat_loss and heat_load",
            "one of them",
            "keep the one of the survey",
        );
        return None;
    }
    let difference_k = room_c - envelope.design_outdoor_c;
    loss.map(|loss| loss.w_per_k() * difference_k / 1000.0)
        .or(load.map(|load| load.kw()))
}

/// The rooms together are the home.
fn adds_up(
    home: &Section<HomeTable>,
    rooms: &[Room],
    as_is: &Envelope,
    check: &mut Check,
) -> Option<()> {
    let together_kw: f64 = rooms.iter().map(|room| room.load_kw).sum();
    let home_kw = as_is.design_load_kw();
    if (together_kw / home_kw - 1.0).abs() <= ADDS_UP_WITHIN {
        return Some(());
    }
    let span = home.room.first().map_or_else(|| home.span(), Section::span);
    check.refuse(
        &span,
        format!(
            "the {} rooms lose {together_kw:.2} kW together at the design point, the home {home_kw:.2} kW",
            rooms.len()
        ),
        "the two to agree within 10 %",
        "is a room missing, or one there twice? remove the home's heat_loss if the room table is the better survey",
    );
    None
}

/// Changes a room by what a choice says about it.
fn change(table: &Section<RoomTable>, rooms: &mut [Room], own: &Envelope, check: &mut Check) {
    let Some(name) = check.required(&table.name, &table.span(), "name", "\"Living room\"") else {
        return;
    };
    let names: Vec<_> = rooms
        .iter()
        .map(|room| format!("\"{}\"", room.name))
        .collect();
    let Some(room) = rooms.iter_mut().find(|room| room.name == name) else {
        check.refuse(
            &table.span(),
            format!("\"{name}\""),
            format!("a room of the home: {}", names.join(", ")),
            "",
        );
        return;
    };
    if let Some(radiator) = check.within(&table.radiator, &bounds::RADIATOR_KW) {
        room.radiator_kw = radiator.kw();
    }
    if let Some(own_c) = check.within(&table.temperature, &bounds::INDOOR_C) {
        room.room_c = own_c.c();
    }
    if let Some(load_kw) = load_kw(table, room.room_c, own, check) {
        room.load_kw = load_kw;
    }
}
