//! One hour from weather to money, every line with the name of its formula and its inputs.

use chrono::{SecondsFormat, TimeZone as _};
use serde::Serialize;

use super::cycle::StateAnswer;
use crate::home::Home;
use crate::study::{Case, Contender, Traced, TracedDuty};
use crate::year::{DutyKind, Flags, MachineSystem, Row};

/// One hour of one system, explained.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct Explanation {
    /// The system.
    pub choice: String,
    /// Beginning of the hour in UTC.
    pub time_utc: String,
    /// Beginning of the hour on the wall clock.
    pub time_local: String,
    /// The parts, in the order in which they follow from each other.
    pub parts: Vec<Part>,
}

/// A part of an explanation.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct Part {
    /// What it is about.
    pub title: String,
    /// Its lines.
    pub lines: Vec<Line>,
    /// State points of the refrigerant, where there is a cycle.
    #[serde(skip_serializing_if = "Vec::is_empty")]
    pub states: Vec<StateAnswer>,
}

/// A figure and where it comes from.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct Line {
    /// What it is.
    pub what: String,
    /// How much.
    pub value: f64,
    /// Its unit.
    pub unit: &'static str,
    /// The formula by name with its inputs; empty for what is given.
    pub how: String,
}

/// Collects the lines of a part.
struct Lines(Vec<Line>);

impl Lines {
    fn add(&mut self, what: &str, value: f64, unit: &'static str, how: impl Into<String>) {
        self.0.push(Line {
            what: what.to_owned(),
            value,
            unit,
            how: how.into(),
        });
    }

    fn given(&mut self, what: &str, value: Option<f64>, unit: &'static str, from: &str) {
        if let Some(value) = value {
            self.add(what, value, unit, from);
        }
    }

    fn part(self, title: impl Into<String>) -> Part {
        Part {
            title: title.into(),
            lines: self.0,
            states: Vec::new(),
        }
    }
}

fn lines() -> Lines {
    Lines(Vec::new())
}

impl Explanation {
    /// Explains a traced hour.
    pub fn of(case: &Case, contender: &Contender, traced: &Traced) -> Self {
        let utc = case.site.axis.at(traced.hour);
        let local = case.time_zone.from_utc_datetime(&utc.naive_utc());
        let home = &contender.system.home;
        let mut parts = vec![weather(case, traced), rooms(home, contender, traced)];
        parts.extend(hot_water(
            home,
            usize::from(case.site.month0[traced.hour]),
            traced,
        ));
        if let Some(machine) = contender.system.heating.machine() {
            parts.extend(
                traced
                    .duties
                    .iter()
                    .map(|duty| machine_part(home, machine, traced, duty)),
            );
            parts.extend(rest_of_machine(machine, &traced.row));
        }
        if contender.system.heating.boiler().is_some() {
            parts.push(boiler(&traced.row));
        }
        parts.push(after(home, traced));
        parts.push(money(case, contender, traced));
        Self {
            choice: contender.system.label.clone(),
            time_utc: utc.to_rfc3339_opts(SecondsFormat::Secs, true),
            time_local: local.format("%Y-%m-%dT%H:%M%:z").to_string(),
            parts,
        }
    }
}

fn weather(case: &Case, traced: &Traced) -> Part {
    let site = &case.site;
    let hour = traced.hour;
    let mut part = lines();
    part.add("outdoor air", traced.row.outdoor_c, "°C", "weather file");
    let humidity = site
        .relative_humidity
        .as_ref()
        .map(|column| column[hour] * 100.0);
    part.given("relative humidity", humidity, "%", "weather file");
    let sun = site.global_w_per_m2.as_ref().map(|column| column[hour]);
    part.given("global radiation", sun, "W/m²", "weather file");
    part.part("The weather")
}

fn rooms(home: &Home, contender: &Contender, traced: &Traced) -> Part {
    let row = &traced.row;
    let fabric = &home.fabric;
    let loss = fabric.heat_loss_w_per_k() / 1000.0;
    let mut part = lines();
    part.add("heat-loss coefficient", loss * 1000.0, "W/K", "brief");
    part.add(
        "rooms before",
        traced.before.room_c,
        "°C",
        "end of the hour before",
    );
    part.add("set point", row.set_point_c, "°C", "plan");
    part.add(
        "gains",
        row.gains_kwh,
        "kW",
        format!(
            "internal {:.3} + sun {:.3}",
            fabric.internal_gains_kw(),
            row.gains_kwh - fabric.internal_gains_kw()
        ),
    );
    let (settles, within) = fabric.recovery_heads_for_c(traced.before.room_c, row.set_point_c);
    part.add(
        "temperature to head for",
        settles,
        "°C",
        format!(
            "(set point − before × e^(−{within:.0}h/τ)) / (1 − e^(−{within:.0}h/τ)), τ = {:.1} h",
            fabric.time_constant_h()
        ),
    );
    let now = format!(
        "H (head for − outdoor) − gains = {loss:.3} × ({settles:.2} − {:.2}) − {:.3}, not below 0",
        row.outdoor_c, row.gains_kwh
    );
    let how = if row.flags.has(Flags::RECOVERY) {
        "the even heat that brings the rooms to the next set point in time".to_owned()
    } else {
        now
    };
    part.add("heat wanted", row.space_wanted_kwh, "kWh", how);
    part.add(
        "design heat load",
        fabric.design_load_kw(contender.indoor_c, contender.design_outdoor_c),
        "kW",
        format!(
            "H (set point − design outdoor) = {loss:.3} × ({:.1} − {:.1}), gains not counted",
            contender.indoor_c, contender.design_outdoor_c
        ),
    );
    part.part("What the rooms ask")
}

fn hot_water(home: &Home, month0: usize, traced: &Traced) -> Option<Part> {
    let water = home.hot_water.as_ref()?;
    let row = &traced.row;
    let daily_kwh = water.daily_kwh[month0];
    let mut part = lines();
    part.add(
        "drawn at the taps",
        row.water_drawn_kwh,
        "kWh",
        format!("{daily_kwh:.3} kWh a day of the month × share of the clock hour"),
    );
    if let Some(store) = &water.store {
        let before = traced.before.store.mean_c;
        let after_draw =
            before - (row.water_drawn_kwh + row.store_loss_kwh) / store.capacity_kwh_per_k;
        part.add("store before", before, "°C", "end of the hour before");
        part.add(
            "standing loss",
            row.store_loss_kwh,
            "kWh",
            format!(
                "{:.2} W/K × ({before:.1} − {:.0})",
                store.loss_kw_per_k * 1000.0,
                store.surroundings_c
            ),
        );
        part.add(
            "store after draw and loss",
            after_draw,
            "°C",
            format!(
                "before − (drawn + loss) / {:.4} kWh/K; heated from {:.0} °C down, up to {:.0} °C",
                store.capacity_kwh_per_k,
                store.set_point_c - store.hysteresis_k,
                store.set_point_c
            ),
        );
        part.add(
            "heat to the store",
            row.water_heat_kwh(),
            "kWh",
            "a block at full output, before the rooms",
        );
    }
    Some(part.part("What hot water asks"))
}

/// The machine in one duty: temperatures, cycle, heat, electricity.
fn machine_part(home: &Home, system: &MachineSystem, traced: &Traced, duty: &TracedDuty) -> Part {
    let mut part = lines();
    let asked = &duty.duty;
    let exact = &duty.exact;
    let got = &exact.delivered;
    part.add(
        "time it has",
        asked.hours,
        "h",
        "the hour less what hot water took",
    );
    part.add(
        "heat asked",
        asked.heat_kw,
        "kW",
        "heat wanted over the time it has, as far as emitters carry it",
    );
    match duty.kind {
        DutyKind::SpaceHeat => {
            let emitters = &home.emitters;
            let share = asked.heat_kw / emitters.design_load_kw();
            let room = traced.before.room_c;
            let mean = emitters.at_load(asked.heat_kw, room).mean_c();
            let follows = mean + asked.spread_k / 2.0;
            let header = emitters.header_k();
            part.add(
                "mean water needed",
                mean,
                "°C",
                format!(
                    "EN 442: room + ΔT × share^(1/n) = {room:.2} + {:.1} × {share:.3}^(1/{})",
                    emitters.design_excess_k(),
                    emitters.kind().exponent()
                ),
            );
            part.add(
                "spread at that load",
                asked.spread_k,
                "K",
                format!(
                    "design spread × share = {:.1} × {share:.3}",
                    emitters.design_spread_k()
                ),
            );
            part.add(
                "flow needed",
                asked.flow_c,
                "°C",
                if (asked.flow_c - header - follows).abs() < 1e-6 {
                    let half = asked.spread_k / 2.0;
                    let mixed = if header > 0.0 {
                        format!(" + header {header:.1}")
                    } else {
                        String::new()
                    };
                    format!("mean water + half the spread = {mean:.2} + {half:.2}{mixed}")
                } else {
                    format!(
                        "set by the control; {follows:.2} °C would carry it, the valves throttle"
                    )
                },
            );
        }
        DutyKind::HotWater => {
            part.add(
                "flow to the coil",
                asked.flow_c,
                "°C",
                "mean store temperature of the block + coil difference",
            );
        }
    }
    if let (Some(operation), Some(cycle)) = (exact.operation, &duty.cycle) {
        part.add(
            "share of the time it runs",
            exact.running_fraction,
            "",
            "1, or heat asked over its least output, or the block's length",
        );
        part.add(
            "flow while running",
            got.flow_c,
            "°C",
            "flow needed + running spread × (1 − share), as it goes on and off",
        );
        part.add(
            "return while running",
            exact.return_c,
            "°C",
            "flow − running spread",
        );
        part.add(
            "source with nothing drawn",
            duty.cold.open_c,
            "°C",
            "what the source offers",
        );
        part.add(
            "source entering",
            got.source_c,
            "°C",
            format!("offer − {:.3} K/kW × heat drawn", duty.cold.k_per_kw),
        );
        part.add(
            "speed",
            operation.speed,
            "",
            "1 = greatest at 7 °C source and 35 °C flow",
        );
        part.add(
            "evaporating",
            operation.evaporating_c,
            "°C",
            format!(
                "source − approach = {:.2} − {:.2}",
                operation.source_c, exact.evaporator_approach_k
            ),
        );
        part.add(
            "condensing",
            operation.condensing_c,
            "°C",
            format!(
                "flow + approach = {:.2} + {:.2}",
                got.flow_c, exact.condenser_approach_k
            ),
        );
        part.add(
            "pressure ratio",
            cycle.pressure_ratio(),
            "",
            "condensing over evaporating pressure",
        );
        part.add(
            "isentropic efficiency",
            operation.isentropic_efficiency,
            "",
            "curve over pressure ratio and speed",
        );
        part.add(
            "volumetric efficiency",
            operation.volumetric_efficiency,
            "",
            "1.026 − 0.0202 × pressure ratio",
        );
        part.add(
            "refrigerant flow",
            operation.mass_flow_kg_per_s,
            "kg/s",
            "swept volume × speed × suction density × volumetric efficiency",
        );
        let q = cycle.condenser_kj_per_kg();
        part.add(
            "heat of the cycle",
            cycle.condenser_kw().unwrap_or(f64::NAN),
            "kW",
            format!(
                "flow × (h discharge − h liquid) = {:.5} × {q:.2}",
                operation.mass_flow_kg_per_s
            ),
        );
        let work = cycle.work_kw().unwrap_or(f64::NAN);
        part.add(
            "work on the refrigerant",
            work,
            "kW",
            format!(
                "flow × (h discharge − h suction) = {:.5} × {:.2}",
                operation.mass_flow_kg_per_s,
                cycle.work_kj_per_kg()
            ),
        );
        let physical = work / exact.drive_efficiency;
        part.add(
            "compressor by physics",
            physical,
            "kW",
            format!(
                "work over drive efficiency = {work:.4} / {:.3}",
                exact.drive_efficiency
            ),
        );
        part.add(
            "compressor, frost-free",
            operation.compressor_kw,
            "kW",
            format!("(physics + fan or pump) / {:.4} from the sheet's points − fan or pump = ({physical:.4} + {:.4}) / {:.4} − {:.4}", exact.correction, operation.source_side_kw, exact.correction, operation.source_side_kw),
        );
        part.add(
            "fan or brine pump",
            operation.source_side_kw,
            "kW",
            "as in the tested points",
        );
        part.add(
            "COP, frost-free, laboratory",
            operation.cop(),
            "",
            "heat over compressor and fan or pump",
        );
        part.add(
            "Carnot limit",
            cycle.cop_carnot(),
            "",
            "condensing over (condensing − evaporating), in kelvin",
        );
        if exact.frost.cop > 0.0 {
            part.add(
                "humidity ratio outdoors",
                exact.humidity_ratio * 1000.0,
                "g/kg",
                "from temperature and humidity",
            );
            part.add(
                "COP lost to frost",
                exact.frost.cop * 100.0,
                "%",
                "from coil temperature and humidity ratio",
            );
            part.add(
                "output lost to frost",
                exact.frost.output * 100.0,
                "%",
                "share of the COP loss",
            );
        }
    }
    part.add(
        "heat delivered",
        got.heat_kwh,
        "kWh",
        "output less frost × running hours",
    );
    part.add(
        "drawn from the source",
        got.extracted_kwh,
        "kWh",
        "heat − work on the refrigerant",
    );
    part.add(
        "compressor",
        got.compressor_kwh,
        "kWh",
        "start-up losses included",
    );
    part.add("fan or brine pump", got.source_side_kwh, "kWh", "");
    part.add(
        "defrost",
        got.defrost_kwh,
        "kWh",
        "electricity × (1 / (1 − COP lost) − 1)",
    );
    let laboratory = got.compressor_kwh + got.source_side_kwh + got.defrost_kwh;
    let factor = system.machine.field_factor();
    part.add(
        "allowance from laboratory to home",
        got.allowance_kwh,
        "kWh",
        format!("{laboratory:.4} × (1/{factor:.2} − 1)"),
    );
    if got.heat_kwh > 0.0 {
        let total = laboratory + got.allowance_kwh;
        part.add(
            "COP at home",
            got.heat_kwh / total,
            "",
            format!("{:.4} / {total:.4}", got.heat_kwh),
        );
        part.add("map beside exact machine", exact.map_percent, "%", "electricity for the same heat; the figures above are exact, the ledger's come from the map");
    }
    let title = match duty.kind {
        DutyKind::HotWater => "The machine, for hot water",
        DutyKind::SpaceHeat => "The machine, for the rooms",
    };
    let mut part = part.part(title);
    part.states = duty.cycle.as_ref().map_or_else(Vec::new, |cycle| {
        super::cycle::CycleAnswer::from(cycle).states
    });
    part
}

fn rest_of_machine(system: &MachineSystem, row: &Row) -> Option<Part> {
    let mut part = lines();
    if row.backup_kwh > 0.0 {
        part.add(
            "backup",
            row.backup_kwh,
            "kWh",
            format!(
                "what keeps the rooms above the point where backup helps, at most {:.1} kW",
                system.backup_kw
            ),
        );
    }
    if row.immersion_kwh > 0.0 {
        part.add(
            "immersion heater",
            row.immersion_kwh,
            "kWh",
            format!(
                "what the machine cannot reach, at most {:.1} kW",
                system.immersion_kw
            ),
        );
    }
    part.add(
        "machine at rest",
        row.idle_kwh,
        "kWh",
        format!("idle power × {:.3} h", (1.0 - row.running_hours).max(0.0)),
    );
    part.add(
        "circulation pump",
        row.circulation_kwh,
        "kWh",
        format!(
            "{:.0} W while the rooms are heated",
            system.circulation_kw * 1000.0
        ),
    );
    Some(part.part("Beside the machine"))
}

fn boiler(row: &Row) -> Part {
    let mut part = lines();
    part.given("flow", row.space_flow_c, "°C", "set, or following the load");
    part.given("return", row.space_return_c, "°C", "flow − spread");
    part.add("heat to rooms", row.heater_space_kwh, "kWh", "heat wanted");
    part.add("heat to hot water", row.heater_water_kwh, "kWh", "");
    part.add(
        "gas, gross",
        row.fuel_kwh,
        "kWh",
        "each heat over its efficiency on gross calorific value",
    );
    part.add("lost", row.fuel_loss_kwh, "kWh", "gas − heat");
    part.add(
        "pump and fan",
        row.heater_electricity_kwh,
        "kWh",
        "share of the heat",
    );
    part.part("The boiler")
}

fn after(home: &Home, traced: &Traced) -> Part {
    let row = &traced.row;
    let mut part = lines();
    let heat = row.space_heat_kwh();
    part.add("heat to the rooms", heat, "kWh", "machine, backup, boiler");
    part.add(
        "rooms after",
        row.indoor_c,
        "°C",
        format!(
            "T∞ + (before − T∞) e^(−1h/τ), T∞ = outdoor + (heat + gains) / H = {:.2}",
            row.outdoor_c + (heat + row.gains_kwh) / home.fabric.heat_loss_w_per_k() * 1000.0
        ),
    );
    part.add(
        "lost through the fabric",
        row.fabric_loss_kwh,
        "kWh",
        "heat + gains − stored − aired",
    );
    part.add(
        "stored in the fabric",
        row.room_stored_kwh,
        "kWh",
        "capacity × (after − before)",
    );
    part.given(
        "store after",
        row.store_c,
        "°C",
        "after draw and loss + heat to the store / capacity",
    );
    part.part("What it did")
}

fn money(case: &Case, contender: &Contender, traced: &Traced) -> Part {
    let row = &traced.row;
    let mut part = lines();
    let electricity = row.electricity_kwh();
    part.add("electricity", electricity, "kWh", "all of the above");
    part.add(
        "price of electricity",
        row.electricity_price,
        "/kWh",
        "tariff, tax included",
    );
    if let Some(price) = row.fuel_price {
        part.add("price of fuel", price, "/kWh", "tariff, tax included");
    }
    let fuel = row.fuel_price.map_or_else(String::new, |price| {
        format!(" + {:.4} × {price:.4}", row.fuel_kwh)
    });
    part.add(
        "cost of the hour's energy",
        row.energy_cost,
        case.currency.code(),
        format!(
            "{electricity:.4} × {:.4}{fuel}; standing charges are the year's",
            row.electricity_price
        ),
    );
    let carbon = contender.plan.electricity.carbon_kg[traced.hour];
    part.add(
        "carbon",
        row.carbon_kg,
        "kg CO2e",
        format!("{electricity:.4} × {carbon:.5}, and that of fuel"),
    );
    part.part("What it cost")
}
