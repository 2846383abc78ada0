//! Each trap put into the program on purpose: a row must go red.

use std::fmt::Write as _;
use std::path::Path;

use winterledger::fault::{Fault, seed};

use crate::table::Row;
use crate::{ROOMS, TURN};

/// The part of the page whose rows are looked at for a trap.
fn watchers(fault: Fault) -> (&'static str, fn() -> Vec<Row>) {
    let title = match fault {
        Fault::OneFlowForBothDuties
        | Fault::BaseForPeak
        | Fault::EmittersResized
        | Fault::MixedBoundary
        | Fault::FirstYearLoop
        | Fault::BillsForSizing => "The year",
        Fault::HotWaterAllDay => "Hot water",
        Fault::CyclingAtMeanFlow
        | Fault::DefrostTwice
        | Fault::PumpTwice
        | Fault::LaboratoryMachine
        | Fault::MeanForSupply => "Machine",
        Fault::FlowForMean | Fault::RunLikeBoiler => "Home and emitters",
        Fault::NetForGross | Fault::IdealBoiler => "Boiler",
        Fault::TaxTwice => "Bill",
        Fault::ScopesMixed => "Carbon",
        Fault::HourEndingStamps => "Weather: degree-days and typical year",
    };
    *ROOMS.iter().find(|(room, _)| *room == title).unwrap()
}

fn red(rows: &[Row]) -> Vec<&str> {
    rows.iter()
        .filter(|row| !row.is_green())
        .map(|row| row.what.as_str())
        .collect()
}

/// One test, because a fault is switched on for all threads. `UPDATE_VALIDATION=1` writes which rows went red.
#[test]
fn every_seeded_fault_turns_a_row_red() {
    let _turn = TURN.lock();
    let mut text = String::from("| fault put in | rows that go red |\n|---|---|\n");
    let (mut unnoticed, mut green) = (Vec::new(), Vec::new());
    for fault in Fault::ALL {
        let (room, rows) = watchers(fault);
        seed(None);
        if !green.contains(&room) {
            let rows = rows();
            assert!(
                red(&rows).is_empty(),
                "red without a fault: {:?}",
                red(&rows)
            );
            green.push(room);
        }
        seed(Some(fault));
        let found = rows();
        seed(None);
        if red(&found).is_empty() {
            unnoticed.push(fault);
        }
        let _ = writeln!(text, "| {fault:?} | {} |", red(&found).join("; "));
    }
    assert!(unnoticed.is_empty(), "no row notices {unnoticed:?}");
    let path = Path::new(env!("CARGO_MANIFEST_DIR")).join("tests/validation/seeded_faults.md");
    if std::env::var_os("UPDATE_VALIDATION").is_some() {
        std::fs::write(&path, &text).unwrap();
    }
    assert_eq!(
        std::fs::read_to_string(&path).unwrap_or_default(),
        text,
        "UPDATE_VALIDATION=1 cargo test --features seeded-faults --test validation writes the list anew"
    );
}
