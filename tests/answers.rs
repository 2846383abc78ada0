//! What a fresh reader must not be misled by, through the real binary.
#![cfg(test)]

use std::fmt::Write as _;
use std::fs;
use std::path::Path;

use assert_cmd::Command;
use serde_json::Value;
use tempfile::TempDir;

/// The brief that `init` writes, with its files, changed by replacements.
fn home(changes: &[(&str, &str)]) -> TempDir {
    let folder = tempfile::tempdir().unwrap();
    run(folder.path(), &["init", "."]);
    let path = folder.path().join("brief.toml");
    let mut text = fs::read_to_string(&path).unwrap();
    for (from, to) in changes {
        assert!(text.contains(from), "{from} is not in the brief");
        text = text.replace(from, to);
    }
    fs::write(path, text).unwrap();
    folder
}

fn output(folder: &Path, arguments: &[&str]) -> std::process::Output {
    Command::cargo_bin("winterledger")
        .unwrap()
        .current_dir(folder)
        .args(arguments)
        .output()
        .unwrap()
}

/// Stdout and stderr of a run that must succeed, each as one line of words.
fn run(folder: &Path, arguments: &[&str]) -> (String, String) {
    let output = output(folder, arguments);
    let words = |bytes: &[u8]| {
        let text = String::from_utf8_lossy(bytes);
        text.split_whitespace().collect::<Vec<_>>().join(" ")
    };
    let (out, err) = (words(&output.stdout), words(&output.stderr));
    assert!(output.status.success(), "{err}");
    (out, err)
}

/// The report as a page; a number is held to its unit there by a space that does not break.
fn report(folder: &Path) -> String {
    let page = fs::read_to_string(folder.join("out/report.html")).unwrap();
    page.replace('\u{a0}', " ")
}

fn json(folder: &Path) -> Value {
    let arguments = [
        "estimate",
        "brief.toml",
        "--samples",
        "0",
        "--format",
        "json",
    ];
    serde_json::from_slice(&output(folder, &arguments).stdout).unwrap()
}

fn found<'a>(result: &'a Value, what: &str) -> &'a Value {
    let findings = result["findings"].as_array().unwrap();
    let found = findings
        .iter()
        .find(|f| f["what"].as_str().unwrap().contains(what));
    found.unwrap_or_else(|| panic!("no finding says {what}: {findings:#?}"))
}

fn no_finding(result: &Value, what: &str) {
    let findings = result["findings"].as_array().unwrap();
    assert!(
        !findings
            .iter()
            .any(|f| f["what"].as_str().unwrap().contains(what)),
        "{what}"
    );
}

const SMALL: &[(&str, &str)] = &[(
    "machine = \"machines/air-r290-small.toml\"   # the data sheet; or a typical_machine with its rated_output\nbackup = \"3 kW\"",
    "typical_machine = \"air, R290, variable speed\"\nrated_output = \"2.5 kW\"",
)];

/// A machine of half the load without backup is cheap because the rooms are cold: no output may call it cheaper without saying so, and
/// the other choice, which keeps the home warm, is the cheapest.
#[test]
fn a_cold_home_is_no_yes() {
    let folder = home(SMALL);
    let at = folder.path();
    let (text, _) = run(
        at,
        &["estimate", "brief.toml", "--samples", "20", "--out", "out"],
    );
    let result: Value =
        serde_json::from_str(&fs::read_to_string(at.join("out/result.json")).unwrap()).unwrap();
    let cold = &result["systems"][1];
    assert!(cold["hours_short"].as_f64().unwrap() > 1000.0);
    assert!(cold["saving"].as_f64().unwrap() > 100.0, "it is cheap");
    let why = cold["leaves_cold"].as_str().unwrap();
    let coldest = format!("down to {:.1} °C", cold["min_indoor_c"].as_f64().unwrap());
    assert!(
        why.starts_with("it does not keep the home warm (") && why.contains(&coldest),
        "{why}"
    );
    assert!(result["systems"][2]["leaves_cold"].is_null());
    assert!(result["systems"][0]["leaves_cold"].is_null());
    assert_eq!(result["odds"]["choices"][0]["leaves_cold"], why);
    assert!(
        text.contains(&format!("Air source, same radiators: no, {why}.")),
        "{text}"
    );
    assert!(
        text.contains("left as cold as that"),
        "the odds say it too: {text}"
    );

    let page = report(at);
    let first = &page[page.find("id=\"answer\"").unwrap()..page.find("id=\"next\"").unwrap()];
    assert!(first.contains(why), "the first page says why");
    assert!(first.contains("is passed over"));
    assert!(!first.contains("<strong>Air source, same radiators</strong> would cost about"));

    // The only choice: the verdict itself is No, and the box of the coldest room is a caution.
    let folder = home(SMALL);
    let path = folder.path().join("brief.toml");
    let text = fs::read_to_string(&path).unwrap();
    let second = text.rfind("[[choice]]").unwrap();
    fs::write(&path, &text[..second]).unwrap();
    run(
        folder.path(),
        &["estimate", "brief.toml", "--samples", "0", "--out", "out"],
    );
    let page = report(folder.path());
    let answer = &page[page.find("id=\"answer\"").unwrap()..];
    assert!(answer.contains(&format!("<strong>No: {why}.</strong>")));
    assert!(answer.contains("<strong>Caution: "));
    assert!(!answer.contains("<strong>Yes"));
}

/// What the next boiler costs is in the comparison, or the reader is told that it is not.
#[test]
fn the_next_boiler_is_told_as_it_is() {
    let told = |folder: &TempDir| {
        json(folder.path())["lifetime"]["todays_next"]
            .as_str()
            .unwrap()
            .to_owned()
    };
    let with = told(&home(&[]));
    assert!(with.contains("first in year 4"), "{with}");
    let folder = home(&[
        ("capital = \"2800 GBP\"", "#"),
        ("due_in = \"4 years\"", "yearly_maintenance = \"90 GBP\" #"),
    ]);
    let without = told(&folder);
    assert!(without.contains("is not in this") && without.contains("Give capital under [today]"));
    let (study, _) = run(
        folder.path(),
        &[
            "study",
            "brief.toml",
            "--choice",
            "Air source, same radiators",
        ],
    );
    assert!(study.contains(&without), "{study}");
    let late = told(&home(&[("due_in = \"4 years\"", "due_in = \"30 years\"")]));
    assert!(late.contains("lasts longer than the 20 years"), "{late}");
}

/// Four months of weather make no year: refused with what to do, or run as what they are.
#[test]
fn part_of_a_year_is_no_year() {
    let folder = home(&[("weather/morvane_sound.csv\"  ", "weather/winter.csv\"  ")]);
    let weather = folder.path().join("weather");
    let whole = fs::read_to_string(weather.join("morvane_sound.csv")).unwrap();
    let winter: Vec<&str> = whole.lines().take(8764 - 8760 + 125 * 24).collect();
    fs::write(weather.join("winter.csv"), winter.join("\n")).unwrap();
    for command in ["estimate", "study", "odds"] {
        let refused = output(folder.path(), &[command, "brief.toml"]);
        assert_eq!(refused.status.code(), Some(1), "{command}");
        let said = String::from_utf8(refused.stderr).unwrap();
        assert!(
            said.contains("3000 hours, 125 days: no whole year"),
            "{said}"
        );
        assert!(said.contains("twelve months"), "{said}");
    }
    let (text, _) = run(folder.path(), &["estimate", "brief.toml", "--part-year"]);
    assert!(
        text.contains("hot water in these 125 days, no year"),
        "{text}"
    );
    assert!(
        !text.contains(" a year less") && !text.contains("Chance"),
        "{text}"
    );
}

/// A set point is printed with the decimals it was given.
#[test]
fn half_a_degree_is_not_rounded_away() {
    let folder = home(&[("indoor = \"20 °C\"", "indoor = \"20.5 °C\"")]);
    let at = folder.path();
    let (text, _) = run(
        at,
        &[
            "estimate",
            "brief.toml",
            "--samples",
            "0",
            "--assumptions",
            "--out",
            "out",
        ],
    );
    assert!(text.contains("20.5 °C all day"), "{text}");
    let page = report(at);
    assert!(page.contains("set to 20.5 °C"));
    assert!(!page.contains("20 °C all day") && !page.contains("set to 20 °C"));
}

/// Water hotter than the machine makes: the immersion heater's work and its price are told, and the key that helps.
#[test]
fn water_beyond_the_machine_is_told_with_its_price() {
    let folder = home(&[("setpoint = \"50 °C\"", "setpoint = \"70 °C\"")]);
    let result = json(folder.path());
    let finding = found(&result, "the immersion heater lifts the rest");
    let what = finding["what"].as_str().unwrap();
    assert!(
        what.contains("less 5 K of the coil") && what.contains("GBP a year"),
        "{what}"
    );
    assert!(
        finding["done"]
            .as_str()
            .unwrap()
            .contains("hygiene = \"immersion\"")
    );
    let lifted = result["systems"][1]["backup_kwh"].as_f64().unwrap();
    assert!(lifted > 100.0, "{lifted}");
    no_finding(
        &json(home(&[]).path()),
        "the immersion heater lifts the rest",
    );
    let cool = json(home(&[]).path());
    let done = found(&cool, "hot water is stored below 60 °C")["done"]
        .as_str()
        .unwrap();
    assert!(done.contains("hygiene = \"immersion\""), "{done}");
}

/// Fifty gaps of an hour are one finding.
#[test]
fn many_single_gaps_are_told_as_one() {
    let folder = home(&[]);
    let path = folder.path().join("weather/morvane_sound.csv");
    let mut kept = String::new();
    for (i, line) in fs::read_to_string(&path).unwrap().lines().enumerate() {
        if i < 100 || i % 100 != 0 || i > 5200 {
            let _ = writeln!(kept, "{line}");
        }
    }
    fs::write(&path, kept).unwrap();
    let result = json(folder.path());
    let gaps = |f: &&Value| {
        f["what"]
            .as_str()
            .unwrap()
            .contains("without a temperature")
    };
    assert_eq!(
        result["findings"]
            .as_array()
            .unwrap()
            .iter()
            .filter(gaps)
            .count(),
        1
    );
    let finding = found(&result, "52 single hours without a temperature");
    assert_eq!(finding["done"], "filled by a straight line");
    assert_eq!(result["weather"]["repaired_hours"], 52);
}

/// Factors of one country for a home in another are told, unless somebody named them.
#[test]
fn carbon_of_another_country_is_told() {
    let abroad = [(
        "time_zone = \"Europe/London\"\n\n",
        "time_zone = \"Europe/Vienna\"\n\n",
    )];
    let result = json(home(&abroad).path());
    found(&result, "factors of the United Kingdom");
    let named = [
        abroad[0],
        (
            "gas = \"tariffs/flat_gas.toml\"",
            "gas = \"tariffs/flat_gas.toml\"\ncarbon = \"uk-2025\"",
        ),
    ];
    no_finding(&json(home(&named).path()), "factors of the United Kingdom");
    no_finding(&json(home(&[]).path()), "factors of the United Kingdom");
}

/// A design temperature without its minus sign stands far from the weather.
#[test]
fn a_lost_minus_sign_is_told() {
    let result = json(home(&[("design_outdoor = \"-3 °C\"", "design_outdoor = \"10 °C\"")]).path());
    assert_eq!(
        found(&result, "design_outdoor 10.0 °C is")["severity"],
        "caution"
    );
    no_finding(&json(home(&[]).path()), "design_outdoor");
}

/// The same threshold as `cycle`: more than 120 °C is more than oil and windings usually stand. At −5 °C outdoors and a flow of 55 °C the
/// cycle of the typical R32 machine ends at 195 °C by `cycle`, that of the R290 machine at 105 °C.
#[test]
fn a_hot_discharge_is_told_by_machine_and_estimate() {
    let (_, told) = run(Path::new("."), &["machine", "air, R32, variable speed"]);
    assert!(
        told.contains("discharge hotter than the equation of R32 reaches"),
        "{told}"
    );
    assert!(told.contains("injects liquid or stops"), "{told}");
    let sheet = "machine = \"machines/air-r290-small.toml\"   # the data sheet; or a typical_machine with its rated_output";
    let typical = "typical_machine = \"air, R32, variable speed\"\nrated_output = \"6 kW\"";
    let result = json(home(&[(sheet, typical)]).path());
    let what = found(&result, "discharge at ")["what"].as_str().unwrap();
    assert!(what.contains("(R32) at full speed, source -5 °C"), "{what}");
    no_finding(&json(home(&[]).path()), "discharge");
}

/// What a design load is limited by, what the odds leave out, and rates before tax, in words.
#[test]
fn words_say_what_the_figures_are() {
    let folder = home(&[]);
    let result = json(folder.path());
    assert_eq!(result["systems"][0]["design"]["limited_by"], "emitters");
    assert_eq!(result["systems"][1]["design"]["limited_by"], "output");
    let (text, _) = run(
        folder.path(),
        &["estimate", "brief.toml", "--samples", "20"],
    );
    assert!(text.contains("limited by emitters"), "{text}");
    assert!(text.contains("Not drawn are another winter"), "{text}");
    let tariff = folder.path().join("tariffs/flat_electricity.toml");
    let rates = fs::read_to_string(&tariff).unwrap();
    assert!(rates.contains("rates_include_tax = true"), "{rates}");
    let taxed = rates.replace("rates_include_tax = true", "") + "\n[tax]\nshare = \"5 %\"\n";
    fs::write(&tariff, taxed).unwrap();
    let levers = json(folder.path())["break_even"]["Air source, same radiators"].to_string();
    assert!(levers.contains("p/kWh before tax)"), "{levers}");
}
