//! The `cycle` command as it is run: what it prints, writes, refuses, and with which exit status.

#![cfg(test)] // so that the lints know the helpers below for test code

use assert_cmd::Command;

fn cycle(arguments: &[&str]) -> Command {
    let mut command = Command::cargo_bin("winterledger").unwrap();
    command.arg("cycle").args(arguments);
    command
}

const PROPANE: [&str; 6] = [
    "--refrigerant",
    "R290",
    "--evaporating",
    "-3",
    "--condensing",
    "40",
];

fn out(command: &mut Command) -> String {
    String::from_utf8(command.assert().success().get_output().stdout.clone()).unwrap()
}

#[test]
fn json_holds_the_published_cop() {
    let text = out(cycle(&PROPANE).args(["--subcooling", "5", "--format", "json"]));
    let answer: serde_json::Value = serde_json::from_str(&text).unwrap();
    // CoolProp 8.0.0, superheat 5 K, subcooling 5 K, isentropic efficiency 0.7
    assert!((answer["cop_heating"].as_f64().unwrap() - 4.625).abs() < 0.0005);
    assert!(
        answer.get("condenser_kw").is_none(),
        "no mass flow, no kilowatts"
    );
    let number = |name: &str| answer[name].as_f64().unwrap();
    let closure =
        number("evaporator_kj_per_kg") + number("work_kj_per_kg") - number("condenser_kj_per_kg");
    assert!(closure.abs() < 1e-9);
}

#[test]
fn text_has_units_and_the_caution() {
    let text = out(cycle(&PROPANE).args(["--mass-flow", "0.02"]));
    for wanted in [
        "°C",
        "kPa",
        "kJ/kg",
        "kJ/kgK",
        "kg/m³",
        "kW",
        "heating COP",
        "highly flammable",
    ] {
        assert!(text.contains(wanted), "{wanted} is not in\n{text}");
    }
    let text = out(&mut cycle(&[
        "--refrigerant",
        "r134a",
        "--evaporating=-5",
        "--condensing=50",
    ]));
    assert!(
        text.contains("does not burn") && !text.contains("flammable:"),
        "{text}"
    );
}

#[test]
fn wrong_input_ends_with_status_1_and_names_every_problem() {
    let wrong = [
        "--refrigerant",
        "R32",
        "--evaporating",
        "nan",
        "--condensing",
        "90",
    ];
    let output = cycle(&wrong).args(["--superheat", "-1"]).assert().code(1);
    let text = String::from_utf8(output.get_output().stderr.clone()).unwrap();
    for wanted in [
        "--evaporating",
        "--condensing",
        "--superheat",
        "critical",
        "3 problems",
    ] {
        assert!(text.contains(wanted), "{wanted} is not in\n{text}");
    }
    let output = cycle(&[
        "--refrigerant",
        "R123yf",
        "--evaporating",
        "0",
        "--condensing",
        "40",
    ])
    .assert()
    .code(1);
    let text = String::from_utf8(output.get_output().stderr.clone()).unwrap();
    assert!(text.contains("did you mean R1234yf?"), "{text}");
    cycle(&["--refrigerant", "R32"]).assert().code(2);
}

#[test]
fn the_picture_is_written_once_and_only_where_it_may() {
    let folder = tempfile::tempdir().unwrap();
    for (name, start) in [("a.svg", &b"<svg"[..]), ("a.png", &b"\x89PNG"[..])] {
        let path = folder.path().join(name);
        let chart = path.to_str().unwrap();
        cycle(&PROPANE).args(["--chart", chart]).assert().success();
        assert!(std::fs::read(&path).unwrap().starts_with(start), "{name}");
        std::fs::write(&path, "kept").unwrap();
        cycle(&PROPANE).args(["--chart", chart]).assert().code(3);
        assert_eq!(std::fs::read(&path).unwrap(), b"kept");
        cycle(&PROPANE)
            .args(["--chart", chart, "--force"])
            .assert()
            .success();
        assert!(std::fs::read(&path).unwrap().starts_with(start), "{name}");
    }
    let path = folder.path().join("a.jpeg");
    cycle(&PROPANE)
        .args(["--chart", path.to_str().unwrap()])
        .assert()
        .code(1);
    assert!(!path.exists());
}
