//! Every check against the outside in one table, written as `VALIDATION.md`.
//!
//! A room adds a file with `rows()` and a line in [`ROOMS`]. `UPDATE_VALIDATION=1` writes the page; without it the page must be
//! current and every row green. With the feature `seeded-faults` the same rows are asked to go red, trap by trap.
#![cfg(test)]

mod air;
mod bill;
mod boiler;
mod carbon;
mod cycle;
mod frost;
mod ground;
mod home;
mod hot_water;
mod lifetime;
mod machine;
mod odds;
mod rating;
mod refrigerant;
mod reimplemented;
mod signature;
mod table;
mod tariff;
mod units;
mod weather;
mod year;

#[cfg(feature = "seeded-faults")]
mod seeded;

use table::Row;

/// A room and its rows.
type Room = (&'static str, fn() -> Vec<Row>);

/// What the page is made of, in its order.
const ROOMS: &[Room] = &[
    ("Units and fuels", units::rows),
    ("Moist air", air::rows),
    ("Refrigerants", refrigerant::rows),
    ("Refrigerant cycle", cycle::rows),
    ("Machine", machine::rows),
    ("Seasonal rating", rating::rows),
    ("Frost", frost::rows),
    ("Ground", ground::rows),
    ("Home and emitters", home::rows),
    ("Hot water", hot_water::rows),
    ("Boiler", boiler::rows),
    ("Weather: degree-days and typical year", weather::rows),
    ("Tariff", tariff::rows),
    ("Bill", bill::rows),
    ("Years of a system's life", lifetime::rows),
    ("Meter readings", signature::rows),
    ("Odds", odds::rows),
    ("Carbon", carbon::rows),
    ("The year", year::rows),
    (
        "The year of three homes, reimplemented",
        reimplemented::rows,
    ),
];

/// A seeded fault is switched on for the whole process: what makes rows takes turns.
static TURN: std::sync::Mutex<()> = std::sync::Mutex::new(());

#[test]
fn every_row_is_green_and_the_page_is_current() {
    let _turn = TURN.lock();
    let rooms: Vec<_> = ROOMS.iter().map(|(room, rows)| (*room, rows())).collect();
    let now = table::page(&rooms);
    let path = std::path::Path::new(env!("CARGO_MANIFEST_DIR")).join("VALIDATION.md");
    if std::env::var_os("UPDATE_VALIDATION").is_some() {
        std::fs::write(&path, &now).unwrap();
    }
    let red: Vec<_> = rooms
        .iter()
        .flat_map(|(_, rows)| rows)
        .filter(|row| !row.is_green())
        .collect();
    assert!(red.is_empty(), "{red:#?}");
    let page = std::fs::read_to_string(&path).unwrap_or_default();
    let stale = table::is_stale(&page, &now);
    assert!(
        stale.is_none(),
        "VALIDATION.md is not current; UPDATE_VALIDATION=1 cargo test --test validation makes it anew\n{}",
        stale.unwrap_or_default()
    );
}

/// The test above can fail: a value beyond its tolerance or none at all is red, and another figure makes the page stale.
#[test]
fn a_wrong_value_is_red_and_an_old_page_is_stale() {
    let row = |got| Row::new("a", "b", 2.0, got, 0.1, "c");
    assert!(row(2.09).is_green() && !row(2.11).is_green() && !row(f64::NAN).is_green());
    assert!(!Row::new("a", "b", 1.0, 1.0 + 1e-12, 0.0, "c").is_green());
    let at_least = |got| Row::at_least("a", "b", 1.0, got, "c").is_green();
    assert!(at_least(7.0) && at_least(1.0) && !at_least(0.99) && !at_least(f64::NAN));
    let page = |got| table::page(&[("A", vec![row(got)])]);
    assert!(table::is_stale(&page(2.05), &page(2.0501)).is_none());
    assert!(table::is_stale(&page(2.05), &page(2.06)).is_some());
    let empty = table::Worst::relative(1.0).row("a", "b", 1, "c");
    assert!(!empty.is_green());
}
