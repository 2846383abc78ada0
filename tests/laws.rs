//! Laws that hold for every brief, on homes, tariffs and systems drawn at random.
//!
//! CI draws a few dozen; `LAWS_CASES=2000 cargo test --release --test laws` draws more.
#![cfg(test)]

use std::fmt::Write as _;
use std::path::Path;

use proptest::prelude::*;
use rust_decimal::prelude::ToPrimitive;
use winterledger::brief::Brief;
use winterledger::source::Source;
use winterledger::study::{CHOICE, Case, Contender, Lever, Measure, Outcome, Pair, bills, swings};
use winterledger::year::{COLUMNS, Flags, Ledger, Row, State, run};

/// A home, its tariffs and its systems, as the text of a brief and of the files it names.
#[derive(Debug, Clone)]
struct Drawn {
    home: String,
    electricity: String,
    gas: String,
    today: String,
    choices: Vec<String>,
}

impl Drawn {
    /// Reads it with its choices in an order.
    fn brief(&self, choices: impl Iterator<Item = usize>) -> Case {
        let folder = tempfile::tempdir().unwrap();
        let mut text = format!(
            "{}\n[energy]\nelectricity = \"electricity.toml\"\ngas = \"gas.toml\"\n{}",
            self.home, self.today
        );
        for i in choices {
            let _ = write!(text, "\n{}", self.choices[i]);
        }
        let write =
            |name: &str, text: &str| std::fs::write(folder.path().join(name), text).unwrap();
        write("electricity.toml", &self.electricity);
        write("gas.toml", &self.gas);
        write("brief.toml", &text);
        Brief::read(&folder.path().join("brief.toml"))
            .unwrap_or_else(|problems| panic!("{problems}\n{text}\n{}", self.electricity))
            .case
    }

    fn case(&self) -> Case {
        self.brief(0..self.choices.len())
    }
}

fn home() -> impl Strategy<Value = String> {
    (
        (90.0..380.0f64, 17.0..22.0f64, -9.0..0.0f64),
        prop::sample::select(vec!["", "time_constant = \"0 h\"", "time_constant = \"25 h\"", "time_constant = \"90 h\""]),
        (36.0..62.0f64, 3.0..9.0f64),
        prop::option::of((60.0..220.0f64, 120.0..350.0f64, 45.0..55.0f64)),
        any::<bool>(),
        prop::sample::select(vec!["morvane_sound", "ostrel_plain"]),
        prop::option::of(500.0..4000.0f64),
    )
        .prop_map(|((loss, indoor, outdoor), storage, (flow, spread), water, set_back, weather, household)| {
            let mut text = format!(
                "[home]\nlabel = \"Any\"\nheat_loss = \"{loss:.0} W/K\"\nindoor = \"{indoor:.1} °C\"\ndesign_outdoor = \"{outdoor:.1} °C\"\n\
                floor_area = \"90 m²\"\ntime_zone = \"Europe/London\"\n{storage}\n"
            );
            if set_back {
                text += "[home.pattern]\nweekdays = [\"06:00-09:00\", \"16:00-22:00\"]\nweekends = [\"07:00-22:00\"]\nset_back = \"15 °C\"\n";
            }
            let _ = write!(
                text,
                "[home.emitters]\nflow = \"{flow:.1} °C\"\nreturn = \"{:.1} °C\"\n",
                flow - spread
            );
            if let Some((daily, store, set_point)) = water {
                let _ = write!(
                    text,
                    "[home.hot_water]\ndaily = \"{daily:.0} L\"\nstore = \"{store:.0} L\"\nsetpoint = \"{set_point:.0} °C\"\n"
                );
            }
            let root = env!("CARGO_MANIFEST_DIR");
            let _ = write!(text, "[weather]\nfile = \"{root}/weather_samples/{weather}.csv\"\n");
            if let Some(kwh) = household {
                let _ = write!(text, "[household]\nelectricity = \"{kwh:.0} kWh\"\n");
            }
            text
        })
}

/// One rate, cheap nights, or steps; tax within or on top; bills by month or year.
fn tariff(fuel: &'static str) -> impl Strategy<Value = String> {
    (0..3u8, 4.0..40.0f64, 0.2..0.9f64, 0.0..90.0f64, any::<bool>(), 60.0..500.0f64).prop_map(
        move |(kind, rate, lower, standing, tax, step)| {
            let mut text = format!(
                "label = \"Any {fuel}\"\nfuel = \"{fuel}\"\ncurrency = \"GBP\"\nstanding = \"{standing:.2} p/day\"\n"
            );
            if fuel == "gas" {
                text += "calorific_basis = \"gross\"\n";
            }
            if !tax {
                text += "rates_include_tax = true\n";
            }
            let cheap = rate * lower;
            text += &match kind {
                0 => format!("[[band]]\nrate = \"{rate:.2} p/kWh\"\n"),
                1 => format!(
                    "[[band]]\nlabel = \"night\"\nfrom = \"00:30\"\nto = \"05:30\"\nrate = \"{cheap:.2} p/kWh\"\n\
                    [[band]]\nlabel = \"day\"\nfrom = \"05:30\"\nto = \"00:30\"\nrate = \"{rate:.2} p/kWh\"\n"
                ),
                _ => format!(
                    "[[step]]\nup_to = \"{step:.0} kWh\"\nper = \"month\"\nrate = \"{cheap:.2} p/kWh\"\n[[step]]\nrate = \"{rate:.2} p/kWh\"\n"
                ),
            };
            if tax {
                text += "[tax]\nshare = \"5 %\"\n";
            }
            text
        },
    )
}

fn today() -> impl Strategy<Value = String> {
    prop::sample::select(vec![
        "",
        "fixed_flow = \"65 °C\"",
        "efficiency = \"81 % gross\"",
    ])
    .prop_map(|more| format!("[today]\nlabel = \"Boiler\"\nkind = \"gas-boiler\"\n{more}\n"))
}

fn air() -> impl Strategy<Value = String> {
    (
        prop::sample::select(vec![
            "air, R290, variable speed",
            "air, R32, variable speed",
            "air, R410A, fixed speed",
        ]),
        4.0..14.0f64,
        0..7u8,
    )
        .prop_map(|(machine, kw, more)| {
            let base = format!(
                "[[choice]]\nkind = \"air-source\"\ntypical_machine = \"{machine}\"\nrated_output = \"{kw:.1} kW\"\n"
            );
            base + match more {
                0 => "[choice.boiler]\nrule = \"by-cost\"\n",
                1 => "[choice.boiler]\nrule = \"by-carbon\"\n",
                2 => "[choice.boiler]\nrule = \"by-outdoor\"\nbelow = \"3 °C\"\n",
                3 => "backup = \"3 kW\"\n[choice.shifting]\nrule = \"timer\"\n",
                4 => "keeps_gas = true\n",
                _ => "backup = \"6 kW\"\n",
            }
        })
}

fn ground() -> impl Strategy<Value = String> {
    (4.0..14.0f64, prop::bool::ANY, 0.5..3.0f64, 60.0..180.0f64).prop_map(
        |(kw, bore, resistance, depth)| {
            let base = format!(
                "[[choice]]\nkind = \"ground-source\"\ntypical_machine = \"ground, R410A, variable speed\"\nrated_output = \"{kw:.1} kW\"\nbackup = \"4 kW\"\n"
            );
            if bore {
                format!("{base}[choice.ground]\nsoil = \"sandstone\"\n[[choice.bore]]\ndepth = \"{depth:.0} m\"\n")
            } else {
                format!("{base}loop_resistance = \"{resistance:.2} K/kW\"\n")
            }
        },
    )
}

fn drawn() -> impl Strategy<Value = Drawn> {
    (
        home(),
        tariff("electricity"),
        tariff("gas"),
        today(),
        air(),
        ground(),
        air(),
    )
        .prop_map(|(home, electricity, gas, today, first, second, third)| {
            let choices = [first, second, third]
                .into_iter()
                .enumerate()
                .map(|(i, text)| {
                    text.replacen(
                        "[[choice]]\n",
                        &format!("[[choice]]\nlabel = \"Choice {i}\"\n"),
                        1,
                    )
                });
            Drawn {
                home,
                electricity,
                gas,
                today,
                choices: choices.collect(),
            }
        })
}

/// Sums of a dozen doubles of some kilowatt-hours.
const ROUNDING_KWH: f64 = 1e-9;

/// What may be below nothing: what is given back, temperatures, and losses of what is cooler than around it.
const SIGNED: &[&str] = &[
    "fabric_loss_kwh",
    // Rooms that nothing keeps warm can freeze; the water that comes back is held to be no colder than they were.
    "space_return_c",
    "store_loss_kwh",
    "room_stored_kwh",
    "store_stored_kwh",
    "outdoor_c",
    "source_c",
    "indoor_c",
];

fn hours_hold(rows: &[Row], has_own_pump: bool) -> Result<(), TestCaseError> {
    for (hour, row) in rows.iter().enumerate() {
        let at = |what: &str, off: f64| {
            prop_assert!(
                off.abs() < ROUNDING_KWH,
                "hour {hour}: {what} off by {off}: {row:?}"
            );
            Ok(())
        };
        let rooms = row.space_heat_kwh() + row.gains_kwh;
        at(
            "rooms",
            rooms - row.fabric_loss_kwh - row.aired_kwh - row.room_stored_kwh,
        )?;
        at(
            "water",
            row.water_heat_kwh() - row.water_drawn_kwh - row.store_loss_kwh - row.store_stored_kwh,
        )?;
        if row.fuel_kwh > 0.0 {
            at(
                "fuel",
                row.fuel_kwh - row.fuel_loss_kwh - row.heater_space_kwh - row.heater_water_kwh,
            )?;
        }
        let duties = row.machine_space_electricity_kwh + row.machine_water_electricity_kwh;
        let components =
            row.compressor_kwh + row.source_side_kwh + row.defrost_kwh + row.allowance_kwh;
        // The pump of a described loop or well belongs to the hour, not to a duty.
        let pump = components - duties;
        let own_pump = if has_own_pump {
            row.source_side_kwh
        } else {
            0.0
        };
        prop_assert!(
            (-ROUNDING_KWH..=own_pump + ROUNDING_KWH).contains(&pump),
            "hour {hour}: electricity of the machine off by {pump}: {row:?}"
        );
        let heat = row.machine_space_kwh + row.machine_water_kwh;
        prop_assert!(
            heat <= row.extracted_kwh + components + ROUNDING_KWH,
            "hour {hour}: heat from nothing: {row:?}"
        );
        prop_assert!(
            row.running_hours <= 1.0 + ROUNDING_KWH,
            "hour {hour}: {row:?}"
        );
        if let (Some(return_c), true) = (row.space_return_c, hour > 0) {
            let room_c = rows[hour - 1].indoor_c;
            prop_assert!(
                return_c >= room_c - ROUNDING_KWH,
                "hour {hour}: return at {return_c} from rooms at {room_c}: {row:?}"
            );
        }
        // A home whose machine is far too small may freeze; its water is no colder than its rooms.
        let frozen_c = rows[hour.saturating_sub(1)].indoor_c.min(0.0);
        for (column, value) in COLUMNS.iter().zip(row.values()) {
            let Some(value) = value else { continue };
            prop_assert!(value.is_finite(), "hour {hour}: {} is {value}", column.name);
            let water = ["space_flow_c", "space_return_c", "machine_flow_c"].contains(&column.name);
            let least = if water { frozen_c } else { 0.0 };
            prop_assert!(
                value >= least - ROUNDING_KWH || SIGNED.contains(&column.name),
                "hour {hour}: {} is {value}",
                column.name
            );
        }
    }
    Ok(())
}

/// Every cent of the total stands on a line, and months and years add up to it.
fn cost_is_its_lines(contender: &Contender, outcome: &Outcome) -> Result<(), TestCaseError> {
    /// Sums of cents as doubles.
    const ROUNDING: f64 = 1e-6;
    let costs = &outcome.costs;
    let mut lines = 0.0;
    for account in bills(contender, outcome).unwrap() {
        for line in &account.bill.lines {
            let exact = (line.quantity * line.rate).to_f64().unwrap();
            let amount = line.amount.to_f64().unwrap();
            // A cent, and the six digits of a mean rate.
            let rounding = 0.005 + 1e-6 * line.quantity.to_f64().unwrap().abs();
            prop_assert!((exact - amount).abs() <= rounding + ROUNDING, "{line:?}");
            lines += amount;
        }
    }
    let parts = costs.energy + costs.standing + costs.tax.unwrap_or(0.0);
    for (what, sum) in [
        ("lines", lines),
        ("parts", parts),
        ("fuels", costs.electricity + costs.fuel),
        ("months", costs.months.iter().sum()),
        (
            "years",
            costs.by_year.iter().sum::<f64>() / costs.by_year.len() as f64,
        ),
    ] {
        prop_assert!(
            (sum - costs.total).abs() < ROUNDING,
            "{what}: {sum} and {}",
            costs.total
        );
    }
    Ok(())
}

/// A run that is stopped at any hour and carried on is the run.
fn halves_are_the_year(
    case: &Case,
    contender: &Contender,
    rows: &[Row],
    at: usize,
) -> Result<(), TestCaseError> {
    let hours = case.site.outdoor_c.len();
    let at = at % hours;
    let mut state = State {
        ground: contender.aged.map(|aged| aged.memory).unwrap_or_default(),
        ..State::at_rest(&contender.system, contender.indoor_c)
    };
    let mut ledger = Ledger::default();
    for part in [0..at, at..hours] {
        let mut carried = state;
        run(
            &case.site,
            &contender.system,
            &contender.plan,
            part,
            &mut carried,
            &mut ledger,
        );
        state = carried;
    }
    prop_assert!(
        ledger.rows == rows,
        "stopped at hour {at} the year is another"
    );
    Ok(())
}

/// Better insulation, a higher rate, a lower flow.
fn levers_hold(case: &Case, outcomes: &[Outcome], choice: usize) -> Result<(), TestCaseError> {
    let pair = Pair::new(case, outcomes, choice).unwrap();
    let as_is = pair.as_is();
    let insulated = pair.at(&[(Lever::HeatLoss, 0.85)]).unwrap();
    for (before, after) in as_is.outcomes.iter().zip(&insulated.outcomes) {
        let [before, after] = [before, after].map(|outcome| outcome.mean_sums());
        prop_assert!(
            after.space_wanted_kwh <= before.space_wanted_kwh
                && after.space_heat_kwh() <= before.space_heat_kwh(),
            "insulated: {} after {}",
            after.space_heat_kwh(),
            before.space_heat_kwh()
        );
    }
    for lever in [Lever::ElectricityRate, Lever::FuelRate] {
        let dearer = pair.at(&[(lever, 1.2)]).unwrap();
        for (before, after) in as_is.outcomes.iter().zip(&dearer.outcomes) {
            let same_kwh =
                before.mean_sums().electricity_kwh() == after.mean_sums().electricity_kwh();
            prop_assert!(
                !same_kwh || after.costs.total >= before.costs.total,
                "{} dearer: {} after {}",
                lever.name(),
                after.costs.total,
                before.costs.total
            );
        }
    }
    let Some(range) = lower_flow(case, choice) else {
        return Ok(());
    };
    // A machine that does not reach even that flow on the design day is refused.
    let Ok(cooler) = pair.at(&[(Lever::FlowTemperature, range)]) else {
        return Ok(());
    };
    let hours = |case: &Case| {
        let mut ledger = Ledger::default();
        case.run_one(&case.contenders[CHOICE], Some(&mut ledger))
            .unwrap();
        ledger.rows
    };
    let (before, after) = (hours(&as_is.case), hours(&cooler.case));
    for (hour, (before, after)) in before.iter().zip(&after).enumerate() {
        let odd = [
            Flags::CYCLING,
            Flags::AT_GREATEST_OUTPUT,
            Flags::FLOW_CAPPED,
        ];
        let is_odd = |row: &Row| odd.iter().any(|&flag| row.flags.has(flag));
        let clean = |row: &Row| !is_odd(row) && row.machine_water_kwh == 0.0;
        let same_heat = (before.machine_space_kwh - after.machine_space_kwh).abs() < 1e-6;
        let (Some(was), Some(is)) = (before.space_cop, after.space_cop) else {
            continue;
        };
        let same_source = before
            .source_c
            .zip(after.source_c)
            .is_some_and(|(a, b)| b >= a - 1.0);
        // Rooms with another past can ask for as much heat at hotter water.
        let cooler_water = before
            .machine_flow_c
            .zip(after.machine_flow_c)
            .is_some_and(|(a, b)| b <= a);
        if clean(before)
            && clean(after)
            && same_heat
            && same_source
            && cooler_water
            && before.machine_space_kwh > 0.1
        {
            // The map is monotone at its nodes, and so in between.
            prop_assert!(
                is >= was * (1.0 - 1e-9),
                "hour {hour}: COP {is} after {was} with cooler water: {after:?} after {before:?}"
            );
        }
    }
    Ok(())
}

/// A design flow 4 K lower, where there is room for it.
fn lower_flow(case: &Case, choice: usize) -> Option<f64> {
    let contender = &case.contenders[choice];
    contender.system.heating.machine()?;
    let lower = contender.system.home.emitters.design_flow_c() - 4.0;
    (lower >= 35.0 && contender.system.heating.boiler().is_none()).then_some(lower)
}

fn outcomes_by_label(case: &Case) -> Vec<(String, String)> {
    let mut told: Vec<_> = case
        .contenders
        .iter()
        .map(|contender| {
            let outcome = case.run_one(contender, None).unwrap();
            (contender.system.label.clone(), format!("{outcome:?}"))
        })
        .collect();
    told.sort();
    told
}

fn cases() -> u32 {
    let asked = std::env::var("LAWS_CASES").ok();
    asked.and_then(|text| text.parse().ok()).unwrap_or(12)
}

proptest! {
    #![proptest_config(ProptestConfig { cases: cases(), max_shrink_iters: 60, failure_persistence: None, ..ProptestConfig::default() })]

    #[test]
    fn laws_hold_on_any_brief(drawn in drawn(), at in 1..8760usize, choice in 1..4usize) {
        let case = drawn.case();
        let mut outcomes = Vec::new();
        for contender in &case.contenders {
            let mut ledger = Ledger::with_capacity(case.site.outdoor_c.len());
            let outcome = case.run_one(contender, Some(&mut ledger)).unwrap();
            let machine = contender.system.heating.machine();
            let has_own_pump =
                machine.is_some_and(|machine| !matches!(machine.source, Source::OutdoorAir | Source::Ground(_)));
            hours_hold(&ledger.rows, has_own_pump)?;
            cost_is_its_lines(contender, &outcome)?;
            halves_are_the_year(&case, contender, &ledger.rows, at)?;
            outcomes.push(outcome);
        }
        levers_hold(&case, &outcomes, choice)?;
        // The order of choices does not matter.
        let turned = drawn.brief((0..drawn.choices.len()).rev());
        prop_assert_eq!(outcomes_by_label(&case), outcomes_by_label(&turned));
    }
}

proptest! {
    #![proptest_config(ProptestConfig { cases: cases().div_ceil(8), failure_persistence: None, ..ProptestConfig::default() })]

    /// The same bytes on one thread and on many.
    #[test]
    fn threads_do_not_matter(drawn in drawn(), choice in 1..4usize) {
        let told = |threads: usize| {
            let pool = rayon::ThreadPoolBuilder::new().num_threads(threads).build().unwrap();
            pool.install(|| {
                let case = drawn.case();
                let outcomes = case.run().unwrap();
                let pair = Pair::new(&case, &outcomes, choice).unwrap();
                format!("{outcomes:?}{:?}", swings(&pair, Measure::YearlyCost).unwrap())
            })
        };
        let (one, many) = (told(1), told(4));
        prop_assert!(one == many);
    }
}

/// The drawn briefs are not all refused or all alike: what is needed for the laws to mean something.
#[test]
fn drawn_briefs_differ() {
    assert!(
        Path::new(env!("CARGO_MANIFEST_DIR"))
            .join("weather_samples/ostrel_plain.csv")
            .exists()
    );
    let mut runner = proptest::test_runner::TestRunner::deterministic();
    let texts: std::collections::BTreeSet<String> = (0..20)
        .map(|_| {
            let tree = drawn().new_tree(&mut runner).unwrap();
            format!("{:?}", proptest::strategy::ValueTree::current(&tree))
        })
        .collect();
    assert_eq!(texts.len(), 20);
}
