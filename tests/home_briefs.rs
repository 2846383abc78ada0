//! The shipped brief with rooms, set-back and meter readings, through the real binary; and homes that cannot be used.
#![cfg(test)]

use std::fs;
use std::path::Path;

use assert_cmd::Command;
use serde_json::Value;
use winterledger::brief::Brief;
use winterledger::chart::{ColdHour, ColdestDays, Marks, coldest_days};
use winterledger::year::{Flags, Ledger};

fn root() -> &'static Path {
    Path::new(env!("CARGO_MANIFEST_DIR"))
}

fn winterledger(arguments: &[&str]) -> std::process::Output {
    Command::cargo_bin("winterledger")
        .unwrap()
        .current_dir(root())
        .args(arguments)
        .output()
        .unwrap()
}

fn rooms() -> Value {
    let output = winterledger(&[
        "estimate",
        "briefs/rooms.toml",
        "--format",
        "json",
        "--patterns",
    ]);
    assert!(
        output.status.success(),
        "{}",
        String::from_utf8_lossy(&output.stderr)
    );
    serde_json::from_slice(&output.stdout).unwrap()
}

fn number(value: &Value, field: &str) -> f64 {
    value[field]
        .as_f64()
        .unwrap_or_else(|| panic!("{field} is missing in {value}"))
}

#[test]
fn the_worst_room_its_remedy_the_pattern_and_the_meter_are_told() {
    let answer = rooms();
    let systems = answer["systems"].as_array().unwrap();
    let (today, one, larger) = (&systems[0], &systems[1], &systems[2]);
    // The living room sets the flow; by EN 442 1.392 kW from 2.0 kW at ΔT 50 K need mean water 37.9 K above 21 °C, and half the
    // spread of 8 K more.
    let rooms = &today["rooms"];
    assert_eq!(rooms["worst_room"], "Living room");
    let expected = 21.0 + 50.0 * (58.0 * 0.024 / 2.0_f64).powf(1.0 / 1.3) + 4.0;
    assert!((number(rooms, "flow_c") - expected).abs() < 1e-9);
    assert!((number(&today["design"], "flow_c") - expected).abs() < 1e-9);
    // With the radiator of the first choice another room sets the flow.
    assert_eq!(one["rooms"]["worst_room"], rooms["next_room"]);
    assert!(number(&one["rooms"], "flow_c") < number(rooms, "flow_c") - 3.0);
    // A chosen flow names the radiators it needs.
    let needed = larger["rooms"]["rooms"].as_array().unwrap();
    assert!(
        needed
            .iter()
            .filter(|room| room["needed_kw"].is_f64())
            .count()
            >= 5
    );
    // Two choices that differ only in radiators differ in performance, not in demand.
    assert!((number(one, "space_heat_kwh") / number(larger, "space_heat_kwh") - 1.0).abs() < 0.01);
    assert!(number(larger, "spf_h4") > number(one, "spf_h4") + 0.3);
    assert_eq!(number(&one["capital_parts"], "radiators"), 450.0);
    assert_eq!(number(one, "capital"), 9850.0);
    // Common practice, no source: the pattern moves the bill, by 5 to 17 % of heat.
    let share = number(larger, "pattern_heat_kwh")
        / (number(larger, "space_heat_kwh") - number(larger, "pattern_heat_kwh"));
    assert!((0.04..0.17).contains(&share), "{share}");
    assert!(systems[3]["pattern_heat_kwh"].is_null());
    for comparison in answer["patterns"].as_array().unwrap() {
        assert!(
            (4.0..17.0).contains(&number(comparison, "more_heat_percent")),
            "{comparison}"
        );
    }
    // Losses apart, and the meter beside the model.
    let home = &answer["home"];
    assert!((number(home, "transmission_w_per_k") - 171.0).abs() < 1e-9);
    assert!((number(home, "ventilation_w_per_k") - 40.8).abs() < 1e-9);
    let metered = &home["metered"];
    let difference = number(metered, "modelled_kwh") / number(metered, "metered_kwh") - 1.0;
    assert!((number(metered, "difference_percent") / 100.0 - difference).abs() < 1e-9);
    assert!(metered["scaled_by"].is_null());
    // Hygiene by the immersion heater: 52 Sundays, about 2.3 kWh each for 200 L from 50 to 60 °C.
    let immersion = number(one, "backup_kwh");
    assert!((80.0..180.0).contains(&immersion), "{immersion}");
}

/// The shipped brief with a change, in a folder of its own.
fn changed(from: &str, to: &str) -> Brief {
    try_changed(from, to).unwrap()
}

fn try_changed(from: &str, to: &str) -> Result<Brief, String> {
    let text = fs::read_to_string(root().join("briefs/rooms.toml")).unwrap();
    assert!(text.contains(from), "{from}");
    let mut text = text.replacen(from, to, 1);
    let briefs = root().join("briefs");
    for (relative, folder) in [
        ("\"../", root()),
        ("\"machines/", &briefs.join("machines")),
        ("\"meter-", &briefs),
    ] {
        let name = relative
            .trim_start_matches(['"', '.', '/'])
            .trim_start_matches("machines/");
        text = text.replace(relative, &format!("\"{}/{name}", folder.display()));
    }
    let folder = tempfile::tempdir().unwrap();
    let path = folder.path().join("changed.toml");
    fs::write(&path, text).unwrap();
    Brief::read(&path).map_err(|problems| problems.to_string())
}

#[test]
fn scaling_meets_the_meter_and_leaves_the_design_alone() {
    let plain = Brief::read(&root().join("briefs/rooms.toml")).unwrap();
    let scaled = changed(
        "file = \"meter-readings.csv\"",
        "file = \"meter-readings.csv\"\nscale = true",
    );
    let factor = scaled.told.bills.as_ref().unwrap().scaled_by.unwrap();
    assert!((0.8..1.0).contains(&factor), "{factor}");
    for (a, b) in plain.case.contenders.iter().zip(&scaled.case.contenders) {
        assert_eq!(a.design_load_kw, b.design_load_kw);
        let ratio =
            b.system.home.fabric.heat_loss_w_per_k() / a.system.home.fabric.heat_loss_w_per_k();
        assert!((ratio - factor).abs() < 1e-12);
    }
    let today = scaled
        .case
        .run_one(&scaled.case.contenders[0], None)
        .unwrap();
    let days = winterledger::signature::DailyWeather::of_hours(
        &scaled.case.site.civil,
        &scaled.case.site.outdoor_c,
    );
    let metered = scaled
        .told
        .bills
        .unwrap()
        .signature
        .fuel_kwh(days.all())
        .value;
    assert!((today.mean_sums().fuel_kwh / metered - 1.0).abs() < 2e-4);
}

/// The coldest night of a heat pump with a set-back: it rests, begins before dawn, arrives in time and leaves backup alone.
#[test]
fn a_cold_night_recovers_without_backup() {
    let brief = Brief::read(&root().join("briefs/rooms.toml")).unwrap();
    let case = &brief.case;
    let contender = &case.contenders[3];
    let mut ledger = Ledger::default();
    case.run_one(contender, Some(&mut ledger)).unwrap();
    let rows = &ledger.rows;
    let day_mean = |day: usize| {
        rows[day * 24..day * 24 + 24]
            .iter()
            .map(|row| row.outdoor_c)
            .sum::<f64>()
    };
    let coldest = (1..364)
        .min_by(|&a, &b| day_mean(a).total_cmp(&day_mean(b)))
        .unwrap();
    let day = &rows[coldest * 24 - 24..coldest * 24 + 24];
    // The demonstration's weather is on UTC and so is its winter clock.
    let warming: Vec<_> = (0..48)
        .filter(|&hour| day[hour].flags.has(Flags::RECOVERY))
        .collect();
    assert!(!warming.is_empty());
    for &hour in &warming {
        assert_eq!(
            day[hour].backup_kwh, 0.0,
            "backup ran in a warm-up, hour {hour}"
        );
    }
    // Before the first hour of the day's first spell the rooms are back within half a kelvin.
    assert!(
        day[29].set_point_c < 17.0 && day[30].set_point_c > 19.0
            || day[30].set_point_c < 17.0 && day[31].set_point_c > 19.0
    );
    let begins = (24..40).find(|&hour| day[hour].set_point_c > 19.0).unwrap();
    assert!(
        day[begins - 1].indoor_c > 19.0,
        "{}",
        day[begins - 1].indoor_c
    );
    // At the start of the night it rests.
    assert_eq!(day[22].machine_space_kwh, 0.0);
    // Over the whole year no warm-up fires the backup.
    assert!(
        rows.iter()
            .all(|row| !(row.flags.has(Flags::RECOVERY) && row.backup_kwh > 0.0))
    );
    let hours = day
        .iter()
        .map(|row| ColdHour {
            outdoor_c: row.outdoor_c,
            demand_kw: row
                .space_wanted_kwh
                .min(contender.system.home.emitters.greatest_output_kw()),
            main_kw: row.machine_space_kwh,
            backup_kw: row.backup_kwh,
            electricity_kw: row.electricity_kwh(),
            indoor_c: Some(row.indoor_c),
        })
        .collect();
    let date = |i: usize| {
        case.site.civil[(coldest - 1 + i) * 24]
            .date
            .format("%a %-d %b")
            .to_string()
    };
    let data = ColdestDays {
        system: contender.system.label.clone(),
        main_heater: "heat pump".into(),
        first_hour: 0,
        days: vec![date(0), date(1)],
        hours,
        set_point_c: Some(20.0),
    };
    let picture = coldest_days(&data, &Marks::default()).unwrap();
    let path = Path::new(env!("CARGO_TARGET_TMPDIR")).join("cold-night-recovery.png");
    fs::write(path, picture.png().unwrap()).unwrap();
}

/// What is wrong with a home is told with its place and a remedy.
#[test]
fn homes_that_cannot_be_used_are_refused_with_what_to_write() {
    let cases: &[(&str, &str, &[&str])] = &[
        (
            "[[home.room]]\nname = \"Kitchen\"\nheat_loss = \"37 W/K\"\nradiator = \"1.9 kW\"\n",
            "",
            &[
                "the 5 rooms lose 3.97 kW together at the design point, the home 4.87 kW",
                "is a room missing, or one there twice?",
            ],
        ),
        (
            "floor_area = \"96 m²\"",
            "floor_area = \"960 m²\"",
            &[
                "home.floor_area: 212 W/K over 960 m² are 0.22 W/K per m²",
                "heat loss per floor area from 0.3 to 8 W/K per m²",
            ],
        ),
        (
            "greatest_flow = \"70 °C\"",
            "greatest_flow = \"50 °C\"",
            &[
                "greatest flow 50.0 °C, but the emitters need 62.8 °C for the design heat load",
                "larger emitters",
            ],
        ),
        (
            "radiator = \"3.2 kW\"",
            "radiator = \"3.2\"",
            &["\"3.2\" has no unit", "write \"3.2 kW\""],
        ),
        (
            "name = \"Living room\"\nradiator = \"3.2 kW\"",
            "name = \"Parlour\"\nradiator = \"3.2 kW\"",
            &["\"Parlour\"", "a room of the home: \"Living room\""],
        ),
        (
            "weekends = [\"07:00-22:00\"]",
            "weekends = [\"07:30-22:00\"]",
            &["\"07:30-22:00\"", "spells of whole clock hours"],
        ),
        (
            "set_back = \"16 °C\"",
            "set_back = \"22 °C\"",
            &["a set-back to 22.0 °C from 20.0 °C"],
        ),
        (
            "warm_up = \"in time\"",
            "warm_up = \"20 h\"",
            &["20 h", "whole hours from 1 to 12"],
        ),
        (
            "transmission = \"171 W/K\"",
            "transmission = \"171 W/K\"\nheat_loss = \"212 W/K\"",
            &["transmission beside heat_loss"],
        ),
        ("volume = \"240 m³\"\n", "", &["home.volume is missing"]),
        (
            "spread = \"8 K\"",
            "flow = \"50 °C\"",
            &["a flow temperature beside a room table, whose room \"Living room\" sets it"],
        ),
        (
            "hygiene_hour = \"13:00\"",
            "hygiene_temperature = \"45 °C\"",
            &["a hygiene cycle to 45.0 °C of a store at 50.0 °C"],
        ),
        (
            "profile = \"M\"",
            "profile = \"S\"",
            &["a tapping profile: \"m\", \"l\", \"xl\""],
        ),
        (
            "file = \"meter-readings.csv\"",
            "file = \"no-such.csv\"",
            &["no-such.csv"],
        ),
        (
            "capital = { machine = \"9400 GBP\", radiators = \"450 GBP\" }",
            "capital = { machine = 9400 }",
            &["machine = 9400", "an amount of money, or one for each part"],
        ),
    ];
    let mut wrong = String::new();
    for (from, to, parts) in cases {
        let message = try_changed(from, to)
            .err()
            .unwrap_or_else(|| "was not refused".to_owned());
        for part in parts.iter().filter(|part| !message.contains(**part)) {
            wrong += &format!("=== {part}\nis not in\n{message}\n");
        }
    }
    assert!(wrong.is_empty(), "{wrong}");
}

/// "Insulate first and fit a smaller machine": the load falls by the walls alone, every room with it, and the old radiators do with
/// cooler water.
#[test]
fn insulation_moves_load_rooms_and_flow() {
    let choice = "[[choice]]\nlabel = \"Insulated, smaller\"\nkind = \"air-source\"\ntypical_machine = \"air, R290, variable speed\"\n\
        rated_output = \"4.5 kW\"\ntransmission = \"110 W/K\"\n\
        capital = { machine = \"7900 GBP\", insulation = \"6200 GBP\" }\n[[choice]]\nlabel = \"Same, with the set-back\"";
    let brief = changed("[[choice]]\nlabel = \"Same, with the set-back\"", choice);
    let (today, insulated) = (&brief.case.contenders[0], &brief.case.contenders[3]);
    assert!((insulated.design_load_kw - (110.0 + 40.8) * 0.023).abs() < 1e-9);
    let flow =
        |contender: &winterledger::study::Contender| contender.system.home.emitters.design_flow_c();
    assert!(
        flow(insulated) < flow(today) - 5.0,
        "{} {}",
        flow(insulated),
        flow(today)
    );
    assert_eq!(insulated.capital, Some(14_100.0));
    let capacity = |contender: &winterledger::study::Contender| {
        contender.system.home.fabric.capacity_kwh_per_k()
    };
    assert_eq!(capacity(insulated), capacity(today));
}

/// A coefficient from bills is used, told with its limits, and never used for sizing without a caution.
#[test]
fn heat_loss_from_bills_carries_its_caution() {
    let text = "transmission = \"171 W/K\"          # from a survey, the two parts apart\nair_changes = \"0.5 1/h\"\nvolume = \"240 m³\"\n";
    let brief = changed(text, "heat_loss = { bills = \"meter-readings.csv\" }\n");
    let loss = brief.case.contenders[0]
        .system
        .home
        .fabric
        .heat_loss_w_per_k();
    assert!((180.0..215.0).contains(&loss), "{loss}");
    let caution = brief
        .told
        .findings
        .iter()
        .find(|finding| finding.what.contains("from meter readings alone"));
    assert!(caution.unwrap().done.contains("room-by-room"));
}

/// Control, header and groups reach the machine: a hotter flow than the load needs costs performance, not heat.
#[test]
fn control_and_header_cost_performance() {
    let spf = |brief: &Brief| {
        let outcome = brief.case.run_one(&brief.case.contenders[2], None).unwrap();
        (
            outcome.mean_sums().spf_h4().unwrap(),
            outcome.mean_sums().space_heat_kwh(),
        )
    };
    let emitters = "[choice.emitters]\nflow = \"42 °C\"\n";
    let with = |more: &str| spf(&changed(emitters, &format!("{emitters}{more}\n")));
    let follows = with("");
    let line = with("line = [\"-5 °C / 45 °C\", \"15 °C / 32 °C\"]");
    let fixed = with("fixed_flow = \"45 °C\"");
    let header = with("header = \"3 K\"");
    for (spf, heat) in [line, fixed, header] {
        assert!(spf < follows.0 - 0.03, "{spf} {}", follows.0);
        assert!(
            (heat / follows.1 - 1.0).abs() < 0.02,
            "{heat} {}",
            follows.1
        );
    }
    assert!(fixed.0 < line.0);
    let groups = "[choice.emitters]\n[[choice.emitters.group]]\nkind = \"underfloor\"\nshare = \"40 %\"\nflow = \"35 °C\"\n\
        [[choice.emitters.group]]\nkind = \"radiators\"\nshare = \"60 %\"\nflow = \"42 °C\"\n";
    let mixed = spf(&changed(emitters, groups));
    assert!(
        (mixed.0 / follows.0 - 1.0).abs() < 0.05,
        "{} {}",
        mixed.0,
        follows.0
    );
    let small_floor = groups.replace(
        "[choice.emitters]\n",
        "[choice.emitters]\nfloor = \"15 m²\"\n",
    );
    let brief = changed(emitters, &small_floor);
    let warned = brief
        .told
        .findings
        .iter()
        .find(|finding| finding.what.contains("the heated floor of 15 m²"));
    assert!(warned.unwrap().done.contains("EN 1264 allows 29 °C"));
}
