//! From a sheet's standard point to the seasonal factor of a home of the trials, step by step, and to the trial's figure.
//!
//! Every step keeps the heat of the hours and changes one thing of the machine that gives it, so that a step is a factor on the
//! seasonal figure. The last steps are those of the ledger itself: the walk ends exactly where the program does.

use std::fmt::Write;

use winterledger::heatpump::{ColdSide, Duty, HeatPump};
use winterledger::source::Source;
use winterledger::study::Case;
use winterledger::year::{Heating, Ledger, Row, Sums};

use super::{
    AIR_R32, AIR_R290, AIR_R410A, EXISTING_BUILDING, GROUND_R134A, GROUND_R410A,
    GROUND_R410A_IN_PLACE, IN_THE_TRIALS_PLACE, SEMI_DETACHED, WARMER_K, case,
};

/// Flow minus return of the standard rating, EN 14511, K.
const STANDARD_SPREAD_K: f64 = 5.0;
/// Flow temperature of the standard rating, °C.
const STANDARD_FLOW_C: f64 = 35.0;

/// Electricity for the same heat after each step, kWh, and what lies beside it.
struct Walk {
    /// Heat of the machine, kWh.
    heat_kwh: f64,
    steps: Vec<(&'static str, f64)>,
    /// Electricity that the allowance was taken of, kWh.
    bench_kwh: f64,
    sums: Sums,
}

/// Laboratory electricity for heat (kWh) at a source and a flow, at greatest output or at a rate (kW) that is at least the machine's least.
fn bench_kwh(
    bench: &HeatPump,
    source_c: f64,
    flow_c: f64,
    heat_kwh: f64,
    rate_kw: Option<f64>,
) -> f64 {
    let cold = ColdSide {
        open_c: source_c,
        k_per_kw: 0.0,
        relative_humidity: Some(0.0),
    };
    let greatest_kw = bench.greatest_output_kw(&cold, flow_c);
    let least_kw = bench.least_output_kw(&cold, flow_c) * (1.0 + 1e-9);
    // A machine of one speed has nothing between.
    let rate_kw = rate_kw.filter(|_| least_kw < greatest_kw);
    let kw = rate_kw.map_or(greatest_kw, |kw| kw.clamp(least_kw, greatest_kw));
    let duty = Duty {
        heat_kw: kw,
        flow_c,
        spread_k: STANDARD_SPREAD_K,
        hours: 1.0,
        at_full_output: rate_kw.is_none(),
    };
    let given = bench.deliver(&cold, &duty);
    assert!(
        !given.flags.cycling && given.defrost_kwh == 0.0,
        "{given:?}"
    );
    heat_kwh * (given.compressor_kwh + given.source_side_kwh) / given.heat_kwh
}

fn walk(case: &Case) -> Walk {
    let contender = &case.contenders[1];
    let Heating::HeatPump(system) = &contender.system.heating else {
        panic!()
    };
    let bench = system.machine.at_bench();
    let (standard_c, _) = bench.rated_condition();
    let mut ledger = Ledger::default();
    let outcome = case.run_one(contender, Some(&mut ledger)).unwrap();
    let sums = outcome.mean_sums();
    let heat_kwh = sums.machine_space_kwh + sums.machine_water_kwh;
    let emitters = &contender.system.home.emitters;
    let source_c = |row: &Row| row.source_c.unwrap_or(standard_c);
    let flow_c = |row: &Row| {
        let warm = emitters.supply(row.machine_space_kwh, row.indoor_c, row.outdoor_c);
        warm.water.flow_c + emitters.header_k()
    };
    let of = |hour: &dyn Fn(&Row) -> f64| -> f64 { ledger.rows.iter().map(hour).sum() };
    let full = |source: f64, flow: f64, kwh: f64| {
        if kwh > 0.0 {
            bench_kwh(&bench, source, flow, kwh, None)
        } else {
            0.0
        }
    };
    let both = |row: &Row| row.machine_space_kwh + row.machine_water_kwh;
    let water = |row: &Row| {
        let flow = row.water_flow_c.unwrap_or(STANDARD_FLOW_C);
        full(source_c(row), flow, row.machine_water_kwh)
    };
    let part = |row: &Row| {
        if row.machine_space_kwh > 0.0 {
            let kwh = row.machine_space_kwh;
            bench_kwh(&bench, source_c(row), flow_c(row), kwh, Some(kwh))
        } else {
            0.0
        }
    };
    let loop_pump_kwh = match &system.source {
        Source::Buried(buried) => buried.circuit.pump_kw * sums.running_hours,
        _ => 0.0,
    };
    let ran_kwh = sums.compressor_kwh + sums.source_side_kwh - loop_pump_kwh;
    let bench_kwh = ran_kwh + sums.defrost_kwh;
    let mut steps = vec![
        (
            "standard point at greatest output",
            of(&|row| full(standard_c, STANDARD_FLOW_C, both(row))),
        ),
        (
            "the source of the hours",
            of(&|row| full(source_c(row), STANDARD_FLOW_C, both(row))),
        ),
        (
            "the flow that the rooms need",
            of(&|row| {
                full(source_c(row), flow_c(row), row.machine_space_kwh)
                    + full(source_c(row), STANDARD_FLOW_C, row.machine_water_kwh)
            }),
        ),
        (
            "hot water at its own flow",
            of(&|row| full(source_c(row), flow_c(row), row.machine_space_kwh) + water(row)),
        ),
        (
            "less than the greatest output",
            of(&|row| part(row) + water(row)),
        ),
        ("going on and off", ran_kwh),
        ("frost", bench_kwh),
        ("pump of the loop", bench_kwh + loop_pump_kwh),
        ("standing still", bench_kwh + loop_pump_kwh + sums.idle_kwh),
        (
            "allowance from bench to home",
            bench_kwh + loop_pump_kwh + sums.idle_kwh + sums.allowance_kwh,
        ),
    ];
    let machine_kwh = steps.last().unwrap().1;
    let electric_kwh = sums.backup_kwh + sums.immersion_kwh;
    // Backup brings heat of its own: as electricity for the machine's heat at the seasonal figure that is reached.
    let with_backup = heat_kwh * (machine_kwh + electric_kwh) / (heat_kwh + electric_kwh);
    steps.push(("backup and immersion: H3", with_backup));
    steps.push(("circulation: H4", heat_kwh / sums.spf_h4().unwrap()));
    Walk {
        heat_kwh,
        steps,
        bench_kwh,
        sums,
    }
}

/// What is held of a trial.
enum At {
    H3(f64),
    H4(f64),
}

impl Walk {
    fn factor(&self, step: usize) -> f64 {
        self.steps[step - 1].1 / self.steps[step].1
    }

    /// Allowance at which this home would come to a trial's figure. Heat drawn and brine do not follow the allowance.
    fn allowance_for(&self, trial: &At) -> f64 {
        let (spf, found_kwh) = match trial {
            At::H3(spf) => (spf, self.steps[10].1),
            At::H4(spf) => (spf, self.steps[11].1),
        };
        let electric = self.sums.backup_kwh + self.sums.immersion_kwh;
        let scale = (self.heat_kwh + electric) / self.heat_kwh;
        let more_kwh = (self.heat_kwh / spf - found_kwh) * scale;
        self.bench_kwh / (self.bench_kwh + self.sums.allowance_kwh + more_kwh)
    }

    /// What is charged in its own name between the steady machine and the home, as a share of the machine's electricity on the bench.
    fn charged_beside(&self) -> f64 {
        let steady = self.steps[4].1;
        (self.steps[5].1 - steady + self.steps[8].1 - self.steps[6].1) / steady
    }

    fn words(&self, name: &str, trial: &str, at: &At) -> String {
        let mut text = format!("{name}\n");
        for (i, (what, kwh)) in self.steps.iter().enumerate() {
            let spf = self.heat_kwh / kwh;
            let change = if i == 0 {
                String::new()
            } else {
                format!("{:+.1} %", 100.0 * (self.factor(i) - 1.0))
            };
            let line = format!("  {what:<36} {spf:>6.2} {change:>9}");
            writeln!(text, "{}", line.trim_end()).unwrap();
        }
        let (boundary, spf) = match at {
            At::H3(spf) => ("H3", spf),
            At::H4(spf) => ("H4", spf),
        };
        writeln!(
            text,
            "  {trial}: {boundary} {spf:.2}, met with an allowance of {:.2}; on and off, pump and standing still are {:.1} % of the bench",
            self.allowance_for(at),
            100.0 * self.charged_beside(),
        )
        .unwrap();
        text
    }
}

#[test]
fn from_the_sheet_to_the_trial() {
    let homes = [
        (
            "Air, mild maritime",
            case(SEMI_DETACHED, "morvane_sound", 0.0, AIR_R32),
            "Electrification of Heat",
            At::H4(2.85),
        ),
        (
            "Ground of one speed, mild maritime",
            case(SEMI_DETACHED, "morvane_sound", 0.0, GROUND_R134A),
            "RHPP 2017",
            At::H4(2.71),
        ),
        (
            "Air of one speed, mild maritime",
            case(SEMI_DETACHED, "morvane_sound", 0.0, AIR_R410A),
            "RHPP 2017",
            At::H4(2.44),
        ),
        (
            "Air, inland",
            case(EXISTING_BUILDING, "ostrel_plain", 0.0, AIR_R290),
            "ISE 2020",
            At::H3(3.1),
        ),
        (
            "Ground, inland",
            case(EXISTING_BUILDING, "ostrel_plain", 0.0, GROUND_R410A),
            "ISE 2020",
            At::H3(4.1),
        ),
        (
            "Air, the trial's place",
            case(IN_THE_TRIALS_PLACE, "ostrel_plain", WARMER_K, AIR_R290),
            "ISE 2020",
            At::H3(3.1),
        ),
        (
            "Ground, the trial's place",
            case(
                IN_THE_TRIALS_PLACE,
                "ostrel_plain",
                WARMER_K,
                GROUND_R410A_IN_PLACE,
            ),
            "ISE 2020",
            At::H3(4.1),
        ),
    ];
    let mut text = String::new();
    for (name, case, trial, at) in &homes {
        let walk = walk(case);
        // The walk ends where the program does.
        let h3 = walk.heat_kwh / walk.steps[10].1;
        assert!((h3 / walk.sums.spf_h3().unwrap() - 1.0).abs() < 1e-9);
        // The allowance is taken of what the bench measures and of nothing else: no pump of the loop, no standing still.
        let allowance = walk.bench_kwh * (1.0 / 0.85 - 1.0);
        assert!(
            (walk.sums.allowance_kwh / allowance - 1.0).abs() < 1e-9,
            "{name}"
        );
        text += &walk.words(name, trial, at);
    }
    insta::assert_snapshot!(text);
}
