//! Levers, break-even, emitters, sizes and swings of the demonstration home.
#![cfg(test)]

use std::path::Path;
use std::sync::OnceLock;

use assert_cmd::Command;
use winterledger::brief::Brief;
use winterledger::study::{
    CHOICE, Case, Lever, Measure, Outcome, Pair, break_even, break_even_spf, emitter_sizes,
    machine_sizes, swings, two_levers,
};

fn demonstration() -> &'static (Case, Vec<Outcome>) {
    static RUN: OnceLock<(Case, Vec<Outcome>)> = OnceLock::new();
    RUN.get_or_init(|| {
        let case = Brief::demonstration().unwrap().case;
        let outcomes = case.run().unwrap();
        (case, outcomes)
    })
}

fn pair(choice: usize) -> Pair {
    let (case, outcomes) = demonstration();
    Pair::new(case, outcomes, choice).unwrap()
}

/// Same radiators, larger radiators, ground.
const AIR: usize = 1;
const GROUND: usize = 3;

/// A value of every lever that is not where it stands.
fn elsewhere(lever: Lever, pair: &Pair) -> Option<(f64, f64)> {
    let now = lever.now(pair.case(), CHOICE)?;
    let range = lever.range(pair.case(), CHOICE)?;
    let value = range.low + 0.37 * (range.high - range.low);
    assert_ne!(value, now);
    Some((now, value))
}

#[test]
fn a_lever_moved_and_moved_back_leaves_the_case_bit_identical() {
    for choice in [AIR, GROUND] {
        let pair = pair(choice);
        let written = |case: &Case| format!("{:?}", case.contenders);
        let before = written(pair.case());
        let mut case = pair.case().clone();
        let mut moved = Vec::new();
        for &lever in Lever::ALL {
            let Some((now, value)) = elsewhere(lever, &pair) else {
                continue;
            };
            case.apply(CHOICE, &[(lever, value)]).unwrap();
            assert_eq!(lever.now(&case, CHOICE), Some(value), "{}", lever.name());
            assert_ne!(written(&case), before, "{} does nothing", lever.name());
            case.apply(CHOICE, &[(lever, now)]).unwrap();
            assert!(
                written(&case) == before,
                "{} does not go back",
                lever.name()
            );
            moved.push((lever, now, value));
        }
        // All at once, and back one by one in another order.
        let all: Vec<_> = moved
            .iter()
            .map(|&(lever, _, value)| (lever, value))
            .collect();
        case.apply(CHOICE, &all).unwrap();
        for &(lever, now, _) in &moved {
            case.apply(CHOICE, &[(lever, now)]).unwrap();
        }
        assert!(written(&case) == before);
        assert!(moved.len() >= 11, "{}", moved.len());
    }
}

/// What is counted again from readings is what a run makes, to the last bit for money.
#[test]
fn prices_and_carbon_counted_again_agree_with_a_run() {
    let pair = pair(AIR);
    for lever in [
        Lever::ElectricityRate,
        Lever::FuelRate,
        Lever::ElectricityCarbon,
    ] {
        let quick = pair.at(&[(lever, 1.3)]).unwrap();
        let mut case = pair.case().clone();
        case.apply(CHOICE, &[(lever, 1.3)]).unwrap();
        let run = case.run().unwrap();
        for (quick, run) in quick.outcomes.iter().zip(&run) {
            assert_eq!(quick.costs, run.costs, "{}", lever.name());
            // Sums of products against products of sums.
            assert!((quick.carbon_kg() - run.carbon_kg()).abs() < 1e-9 * run.carbon_kg());
        }
    }
}

/// Each break-even, put back in, gives equality to a cent.
#[test]
fn each_break_even_put_back_gives_equality_to_a_cent() {
    let mut found = 0;
    for choice in [AIR, 2, GROUND] {
        let pair = pair(choice);
        for &lever in Lever::ALL {
            for answer in break_even(&pair, lever, Measure::ALL).unwrap() {
                for crossing in &answer.crossings {
                    let more = pair
                        .at(&[(lever, crossing.value)])
                        .unwrap()
                        .more(answer.measure)
                        .unwrap();
                    // Bills are rounded to a cent; over the years a cent of each of twenty bills can differ.
                    let cents = if answer.measure == Measure::LifetimeCost {
                        20.0
                    } else {
                        1.0
                    };
                    assert_eq!(more, crossing.left);
                    let told = format!(
                        "{} by {}: {more} at {}",
                        lever.name(),
                        answer.measure.name(),
                        crossing.value
                    );
                    if more.abs() <= 0.01 * cents + 1e-9 {
                        found += 1;
                        continue;
                    }
                    // Where a block of hot water moves by an hour, or the brine reaches the machine's limit, the year jumps: then no
                    // value gives equality, and a hundredth of the range to each side lie the two signs with what is left between.
                    let hundredth = 0.01 * (answer.range.high - answer.range.low);
                    let at = |value| {
                        pair.at(&[(lever, value)])
                            .unwrap()
                            .more(answer.measure)
                            .unwrap()
                    };
                    let (below, above) = (
                        at(crossing.value - hundredth),
                        at(crossing.value + hundredth),
                    );
                    assert!((below > 0.0) != (above > 0.0), "{told}: {below} {above}");
                    assert!(
                        (below.min(above)..=below.max(above)).contains(&more),
                        "{told}: {below} {above}"
                    );
                    assert!(
                        answer.lever != Lever::ElectricityRate
                            && answer.lever != Lever::FuelRate
                            && !lever.is_money(),
                        "{told}"
                    );
                }
            }
        }
    }
    assert!(found >= 20, "only {found} crossings were found");
}

/// Hourly prices scale with the level of prices: moved to half, the energy bill is half.
#[test]
fn hourly_prices_break_even_too() {
    let root = Path::new(env!("CARGO_MANIFEST_DIR"));
    let text = std::fs::read_to_string(root.join("briefs/terrace.toml")).unwrap();
    let text = text
        .replace("flat_electricity", "hourly_electricity")
        .replace("flat_gas", "gas_by_volume")
        .replace("GBP", "EUR")
        .replace("\"../", &format!("\"{}/", root.display()))
        .replace(
            "\"machines/",
            &format!("\"{}/briefs/machines/", root.display()),
        );
    let folder = tempfile::tempdir().unwrap();
    let path = folder.path().join("brief.toml");
    std::fs::write(&path, text).unwrap();
    let case = Brief::read(&path).unwrap().case;
    let outcomes = case.run().unwrap();
    let pair = Pair::new(&case, &outcomes, AIR).unwrap();
    let half = pair.at(&[(Lever::ElectricityRate, 0.5)]).unwrap();
    let (whole, half) = (
        outcomes[AIR].costs.electricity_energy,
        half.outcomes[1].costs.electricity_energy,
    );
    // Twelve monthly lines or one yearly, each rounded to a cent.
    assert!((half - whole / 2.0).abs() < 0.13, "{half} {whole}");
    for answer in break_even(&pair, Lever::ElectricityRate, &[Measure::YearlyCost]).unwrap() {
        for crossing in &answer.crossings {
            let more = pair
                .at(&[(Lever::ElectricityRate, crossing.value)])
                .unwrap()
                .more(Measure::YearlyCost)
                .unwrap();
            assert!(more.abs() < 0.011, "{more}");
        }
        assert!(!answer.crossings.is_empty());
    }
}

/// The SPF that is needed, against the SPF that is reached, says the same as the bills.
#[test]
fn the_break_even_spf_agrees_with_the_bills() {
    for choice in [AIR, 2, GROUND] {
        let pair = pair(choice);
        let as_is = pair.as_is();
        let (prices, _) = as_is.break_even_prices().unwrap();
        let needed = break_even_spf(&prices).unwrap().whole_bill;
        let reached = pair.outcomes()[1].mean_sums().spf_h4().unwrap();
        let saving = -as_is.more(Measure::YearlyCost).unwrap();
        // Saving = pe H (1/needed − 1/reached), H the heat of the choice.
        let heat = prices.fuel_kwh * prices.efficiency;
        let expected = prices.electricity_per_kwh * heat * (1.0 / needed - 1.0 / reached);
        // Bills are rounded to the cent, mean prices are made from them.
        assert!((saving - expected).abs() < 0.05, "{saving} {expected}");
    }
}

/// EN 442: output ∝ ΔT^1.3. Today 55/47 °C in 20 °C: ΔT 31 K; at a flow of 45 °C 21 K, at 60 °C 36 K:
/// (31/21)^1.3 = 1.659, (31/36)^1.3 = 0.823.
#[test]
fn emitters_need_the_output_of_en_442() {
    let sizes = emitter_sizes(&pair(AIR)).unwrap();
    let times = |flow_c: f64| {
        sizes
            .iter()
            .find(|size| size.flow_c == flow_c)
            .unwrap()
            .times_today
    };
    assert!((times(45.0) - 1.659).abs() < 5e-4);
    assert!((times(60.0) - 0.823).abs() < 5e-4);
    assert!((times(55.0) - 1.0).abs() < 1e-12);
    assert_eq!(
        (sizes.len(), sizes[0].flow_c, sizes[12].flow_c),
        (13, 35.0, 65.0)
    );
    let spf: Vec<f64> = sizes.iter().filter_map(|size| size.year?.spf_h4).collect();
    assert!(
        spf.windows(2).all(|pair| pair[0] > pair[1]),
        "hotter water, lower SPF: {spf:?}"
    );
    // The ground machine stops short of the hottest steps, which are told without a year.
    let ground = emitter_sizes(&pair(GROUND)).unwrap();
    assert!(ground.len() == 13 && ground[12].year.is_none() && ground[0].year.is_some());
}

#[test]
fn a_larger_machine_covers_more_and_backs_up_less() {
    for choice in [AIR, GROUND] {
        let sweep = machine_sizes(&pair(choice)).unwrap().unwrap();
        for two in sweep.sizes.windows(2) {
            assert!(two[1].rated_kw > two[0].rated_kw);
            assert!(two[1].coldest_night_cover > two[0].coldest_night_cover);
            assert!(two[1].least_over_mild_load > two[0].least_over_mild_load);
            assert!(two[1].backup_share <= two[0].backup_share);
            assert!(two[1].starts > two[0].starts);
        }
        let (first, last) = sweep.alike_kw.unwrap();
        assert!(first < last);
    }
}

#[test]
fn swings_are_sorted_and_a_grid_holds_its_own_point() {
    let pair = pair(AIR);
    let found = swings(&pair, Measure::YearlyCost).unwrap();
    assert!(found.len() >= 6);
    assert!(
        found
            .windows(2)
            .all(|two| two[0].length() >= two[1].length())
    );
    let grid = two_levers(&pair, Lever::ElectricityRate, Lever::FuelRate, 17).unwrap();
    // 0.4 to 2.0 in 16 steps: the seventh value is 1.
    assert!((grid.x.1[6] - 1.0).abs() < 1e-12);
    let own = -pair.as_is().more(Measure::YearlyCost).unwrap();
    assert!((grid.saving[6][6] - own).abs() < 0.011);
    assert!(grid.saving[6][0] > own && grid.saving[0][6] < own);
}

#[test]
fn what_makes_a_case_impossible_is_explained() {
    let pair = pair(GROUND);
    for (lever, value, said) in [
        (Lever::FlowTemperature, 64.0, "the machine does not reach"),
        (Lever::HeatLoss, -0.5, "heat loss from 0.01"),
        (
            Lever::FieldFactor,
            1.2,
            "share of laboratory performance kept from 0.5 to 1",
        ),
        (Lever::Grant, -1.0, "grant from 0"),
        (Lever::Indoor, f64::NAN, "indoor temperature from 5"),
    ] {
        let told = pair.at(&[(lever, value)]).unwrap_err().to_string();
        assert!(told.contains(said), "{told}");
    }
    let air = self::pair(AIR);
    let told = air
        .at(&[(Lever::LoopResistance, 2.0)])
        .unwrap_err()
        .to_string();
    assert!(
        told.contains("has no loop resistance") && told.contains("\"gas rate\""),
        "{told}"
    );
    // A refused move leaves the case as it was.
    let mut case = pair.case().clone();
    case.apply(CHOICE, &[(Lever::HeatLoss, 1.2)]).unwrap();
    assert!(
        case.apply(CHOICE, &[(Lever::HeatLoss, 1.1), (Lever::Grant, -1.0)])
            .is_err()
    );
    assert_eq!(Lever::HeatLoss.now(&case, CHOICE), Some(1.2));
}

fn study(arguments: &[&str], threads: &str) -> std::process::Output {
    Command::cargo_bin("winterledger")
        .unwrap()
        .current_dir(env!("CARGO_MANIFEST_DIR"))
        .env("RAYON_NUM_THREADS", threads)
        .arg("study")
        .args(arguments)
        .output()
        .unwrap()
}

#[test]
fn the_bytes_do_not_depend_on_the_number_of_threads() {
    let arguments = [
        "--choice",
        "Air source, larger radiators",
        "--format",
        "json",
    ];
    let (one, three) = (study(&arguments, "1"), study(&arguments, "3"));
    assert!(one.status.success());
    assert!(one.stdout == three.stdout);
    let json: serde_json::Value = serde_json::from_slice(&one.stdout).unwrap();
    let choice = &json["choices"][0];
    for field in [
        "break_even",
        "break_even_spf",
        "emitters",
        "sizes",
        "two_levers",
        "swings",
    ] {
        assert!(!choice[field].is_null(), "{field}");
    }
    assert_eq!(choice["two_levers"]["saving"].as_array().unwrap().len(), 40);
    assert_eq!(json["lifetime"]["systems"].as_array().unwrap().len(), 4);
}

/// What an adviser would say; looked at when it changes.
#[test]
fn the_demonstration_reads_aloud() {
    let output = study(&[], "2");
    assert!(output.status.success());
    insta::assert_snapshot!(String::from_utf8(output.stdout).unwrap());
}

#[test]
fn arguments_that_are_wrong_are_told_with_what_would_be_right() {
    for (arguments, said) in [
        (&["--over", "heat los"][..], "did you mean \"heat loss\"?"),
        (&["--choice", "nothing"], "\"Air source, same radiators\""),
        (&["--over", "gas rate"], "the same lever twice"),
        (
            &[
                "--choice",
                "Air source, same radiators",
                "--over",
                "loop resistance",
            ],
            "has no loop resistance",
        ),
    ] {
        let output = study(arguments, "2");
        let told = String::from_utf8(output.stderr).unwrap();
        assert_eq!(output.status.code(), Some(1), "{told}");
        assert!(output.stdout.is_empty() && told.contains(said), "{told}");
    }
}

fn odds(arguments: &[&str], threads: &str) -> std::process::Output {
    Command::cargo_bin("winterledger")
        .unwrap()
        .current_dir(env!("CARGO_MANIFEST_DIR"))
        .env("RAYON_NUM_THREADS", threads)
        .arg("odds")
        .args(arguments)
        .output()
        .unwrap()
}

/// The promised names, the same bytes whatever the number of threads, and what must hold of any odds.
#[test]
fn odds_keep_their_promises() {
    let arguments = ["--samples", "200", "--format", "json"];
    let (one, three) = (odds(&arguments, "1"), odds(&arguments, "3"));
    assert!(one.status.success());
    assert!(one.stdout == three.stdout);
    let json: serde_json::Value = serde_json::from_slice(&one.stdout).unwrap();
    assert_eq!(json["samples"], 200);
    let number = |value: &serde_json::Value| value.as_f64().unwrap();
    for choice in json["choices"].as_array().unwrap() {
        for figure in [
            "cost",
            "saving",
            "carbon_kg",
            "spf_h4",
            "hours_backup",
            "min_indoor_c",
        ] {
            let quantiles = &choice[figure];
            assert!(
                number(&quantiles["p10"]) <= number(&quantiles["p50"]),
                "{figure}"
            );
            assert!(
                number(&quantiles["p50"]) <= number(&quantiles["p90"]),
                "{figure}"
            );
        }
        let (chance, error) = (
            number(&choice["chance_cheaper"]),
            number(&choice["chance_error"]),
        );
        assert!((0.0..=1.0).contains(&chance) && (0.0..0.1).contains(&error));
        assert!(number(&choice["saving"]["p10"]) < 0.0 || chance > 0.89);
    }
    let matters = json["what_matters"].as_array().unwrap();
    assert!(matters.len() >= 6);
    for one in matters {
        assert!(
            number(&one["lo"]) <= number(&one["share"])
                && number(&one["share"]) <= number(&one["hi"])
        );
        assert!(!one["lever"].is_null() && !one["from"].is_null());
    }
    let refused = odds(&["--precision", "0.0001"], "2");
    assert_eq!(refused.status.code(), Some(1));
    assert!(String::from_utf8_lossy(&refused.stderr).contains("more than a million samples"));
}

/// Emitters stay while the heat loss varies, so that the SPF falls with it.
#[test]
fn the_spf_falls_with_heat_loss_through_the_same_radiators() {
    let pair = pair(2);
    let spf = |times| {
        let compared = pair.at(&[(Lever::HeatLoss, times)]).unwrap();
        compared.outcomes[1].mean_sums().spf_h4().unwrap()
    };
    assert!(spf(0.85) > spf(1.0) && spf(1.0) > spf(1.15));
}
