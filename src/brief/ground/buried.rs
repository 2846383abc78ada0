//! Bores and trenches of a brief.

use super::super::defaults;
use super::super::notes::Notes;
use super::{BoreTable, Ground, TrenchTable, wave};
use crate::bounds::{self, Bound};
use crate::document::{Check, Leaf, Section};
use crate::heatpump::{ColdSide, Duty, HeatPump};
use crate::problem::{Finding, Severity};
use crate::source::{
    AnnualSwing, Antifreeze, BRINE_C, Bore, Brine, BuriedLoop, Filling, HOURS_PER_YEAR, Layout,
    LoopDesign, Pipe, Pump, SOILS, Soil, SoilClass, Trench, total_depth_m, total_pipe_m,
};
use crate::units::{Length, TemperatureDifference, parse};

/// Bores of a field: more is no home.
const MOST_BORES: usize = 40;
/// Pipes side by side in all trenches: more is no home.
const MOST_PIPES: usize = 40;

/// Makes bores or trenches.
pub(super) fn buried(
    ground: &Ground<'_>,
    check: &mut Check,
    notes: &mut Notes,
    findings: &mut Vec<Finding>,
) -> Option<BuriedLoop> {
    let table = ground.table;
    let soil = soil(ground, check, notes);
    let surface = surface(ground, check, notes);
    let pipe = pipe(ground, check, notes);
    let layout = if table.bore.is_empty() {
        trenches(&table.trench, check, notes).map(|trenches| Layout::Trenches { trenches })
    } else {
        let filling = filling(ground, check, notes);
        let bores = bores(&table.bore, check, notes);
        bores
            .zip(filling)
            .map(|(bores, filling)| Layout::Bores { bores, filling })
    };
    let ground_table = table.ground.as_deref();
    let none = None;
    let gradient_k_per_m = if table.bore.is_empty() {
        Some(0.0)
    } else {
        let leaf = ground_table.map_or(&none, |table| &table.gradient);
        notes
            .quantity(check, leaf, &bounds::GRADIENT_K_PER_M, &defaults::GRADIENT)
            .map(|g| g.k_per_m())
    };
    let recharge_kwh = match ground_table {
        Some(table) if table.recharge.is_some() => check
            .within(&table.recharge, &bounds::RECHARGE_KWH)
            .map(|energy| energy.kwh()),
        _ => Some(0.0),
    };
    let brine = brine(ground, check, notes, findings);
    let flow_kg_per_s = brine.and_then(|brine| flow_kg_per_s(&brine, ground, check, notes));
    let pump = pump(ground, check, notes);
    let design = LoopDesign {
        layout: layout?,
        pipe: pipe?,
        soil: soil?,
        surface: surface?,
        gradient_k_per_m: gradient_k_per_m?,
        brine: brine?,
        flow_kg_per_s: flow_kg_per_s?,
        pump: pump?,
        recharge_kwh: recharge_kwh?,
    };
    legs_fit(&design, ground, check)?;
    let made = match design.build(ground.around.site?.outdoor_c.len()) {
        Ok(made) => made,
        Err(error) => {
            check.refuse(
                &table.span(),
                error.why,
                "a loop whose response can be computed",
                "check depths, distances and soil",
            );
            return None;
        }
    };
    tell(&made, ground, notes, findings);
    Some(made)
}

fn soil(ground: &Ground<'_>, check: &mut Check, notes: &mut Notes) -> Option<Soil> {
    let span = ground.table.span();
    let names = || {
        SOILS
            .iter()
            .map(|class| format!("\"{}\"", class.name))
            .collect::<Vec<_>>()
            .join(", ")
    };
    let Some(table) = &ground.table.ground else {
        check.missing(
            &span,
            "ground",
            &format!("a table [choice.ground] with soil = one of {}", names()),
        );
        return None;
    };
    if let Some(leaf) = &table.soil {
        if table.conductivity.is_some() || table.diffusivity.is_some() {
            check.refuse(
                &leaf.span(),
                "both soil and own conductivity or diffusivity",
                "one of them",
                "remove soil, or remove conductivity and diffusivity",
            );
            return None;
        }
        let name = check.value(&table.soil)?;
        let Some(class) = SoilClass::named(&name) else {
            check.refuse(
                &leaf.span(),
                format!("\"{name}\" is not in the table of soils"),
                names(),
                "write one of them, or give conductivity and diffusivity of your own",
            );
            return None;
        };
        let soil = class.soil();
        notes.add(
            format!("soil \"{}\"", class.name),
            format!(
                "{} W/m/K, {:.2e} m²/s",
                soil.conductivity_w_per_m_k, soil.diffusivity_m2_per_s
            ),
            class.from,
        );
        return Some(soil);
    }
    let conductivity = check.required(
        &table.conductivity,
        &table.span(),
        "ground.conductivity",
        "\"2 W/m/K\", or soil with a name of the table",
    );
    let diffusivity = check.required(
        &table.diffusivity,
        &table.span(),
        "ground.diffusivity",
        "\"9e-7 m²/s\"",
    );
    let conductivity =
        conductivity.and_then(|_| check.within(&table.conductivity, &bounds::GROUND_W_PER_M_K));
    let diffusivity =
        diffusivity.and_then(|_| check.within(&table.diffusivity, &bounds::DIFFUSIVITY_M2_PER_S));
    Some(Soil {
        conductivity_w_per_m_k: conductivity?.w_per_m_k(),
        diffusivity_m2_per_s: diffusivity?.m2_per_s(),
    })
}

fn surface(ground: &Ground<'_>, check: &mut Check, notes: &mut Notes) -> Option<AnnualSwing> {
    let wave = wave(ground, check);
    let table = ground.table.ground.as_deref();
    let given = |there: bool, value: Option<f64>, fitted: fn(&AnnualSwing) -> f64| {
        if there {
            value
        } else {
            wave.as_ref().map(fitted)
        }
    };
    let (mut mean, mut swing, mut day) = (None, None, None);
    if let Some(table) = table {
        mean = check
            .within(&table.surface_mean, &bounds::GROUND_C)
            .map(|t| t.c());
        swing = check
            .within(&table.surface_swing, &bounds::SURFACE_SWING_K)
            .map(|t| t.k());
        day = whole_within(check, &table.coldest_day, &bounds::DAY_OF_YEAR);
    }
    let has = |field: fn(&super::GroundTable) -> bool| table.is_some_and(field);
    let surface = AnnualSwing {
        mean_c: given(has(|t| t.surface_mean.is_some()), mean, |wave| wave.mean_c)?,
        amplitude_k: given(has(|t| t.surface_swing.is_some()), swing, |wave| {
            wave.amplitude_k
        })?,
        coldest_hour: given(
            has(|t| t.coldest_day.is_some()),
            day.map(|day| ((day - 1.0) * 24.0 + 12.0) % HOURS_PER_YEAR),
            |wave| wave.coldest_hour,
        )?,
    };
    if !has(|t| t.surface_mean.is_some()) {
        notes.add(
            "surface of the ground",
            format!("mean {:.1} °C", surface.mean_c),
            "mean of the weather file; under grass and snow ground is often 1 K warmer (common practice, no source)",
        );
    }
    Some(surface)
}

fn pipe(ground: &Ground<'_>, check: &mut Check, notes: &mut Notes) -> Option<Pipe> {
    let table = ground.table.pipe.as_deref();
    let (no_length, no_conductivity) = (None, None);
    let outside = notes.quantity(
        check,
        table.map_or(&no_length, |t| &t.outside),
        &bounds::PIPE_OUTSIDE_M,
        &defaults::PIPE_OUTSIDE,
    );
    let wall = notes.quantity(
        check,
        table.map_or(&no_length, |t| &t.wall),
        &bounds::PIPE_WALL_M,
        &defaults::PIPE_WALL,
    );
    let conductivity = notes.quantity(
        check,
        table.map_or(&no_conductivity, |t| &t.conductivity),
        &bounds::PIPE_W_PER_M_K,
        &defaults::PIPE_CONDUCTIVITY,
    );
    let pipe = Pipe {
        outside_m: outside?.m(),
        wall_m: wall?.m(),
        conductivity_w_per_m_k: conductivity?.w_per_m_k(),
    };
    // A bore of a fifth of the pipe is no pipe any more.
    if pipe.inside_m() < 0.2 * pipe.outside_m {
        let span = ground
            .table
            .pipe
            .as_ref()
            .map_or_else(|| ground.table.span(), Section::span);
        check.refuse(
            &span,
            format!(
                "a wall of {:.1} mm in a pipe of {:.0} mm",
                pipe.wall_m * 1e3,
                pipe.outside_m * 1e3
            ),
            "a wall below two fifths of the diameter",
            "check outside and wall of the pipe",
        );
        return None;
    }
    Some(pipe)
}

fn filling(ground: &Ground<'_>, check: &mut Check, notes: &mut Notes) -> Option<Filling> {
    let table = ground.table.borehole.as_deref();
    let (no_conductivity, no_length) = (None, None);
    if let Some(table) = table
        && let Some(leaf) = &table.resistance
    {
        if table.grout.is_some() || table.spacing.is_some() {
            check.refuse(
                &leaf.span(),
                "both resistance and grout or spacing",
                "one of them: the resistance holds the others",
                "remove grout and spacing, or remove resistance",
            );
            return None;
        }
        let resistance = check.within(&table.resistance, &bounds::BOREHOLE_M_K_PER_W)?;
        return Some(Filling::Resistance(resistance.m_k_per_w()));
    }
    let grout = notes.quantity(
        check,
        table.map_or(&no_conductivity, |t| &t.grout),
        &bounds::GROUT_W_PER_M_K,
        &defaults::GROUT,
    );
    let leaf = table.map_or(&no_length, |t| &t.spacing);
    let spacing = check.within(leaf, &bounds::LEG_DISTANCE_M);
    if leaf.is_some() && spacing.is_none() {
        return None;
    }
    Some(Filling::Grout {
        w_per_m_k: grout?.w_per_m_k(),
        spacing_m: spacing.map(|s| s.m()),
    })
}

fn bores(tables: &[Section<BoreTable>], check: &mut Check, notes: &mut Notes) -> Option<Vec<Bore>> {
    if tables.len() > MOST_BORES {
        check.refuse(
            &tables[MOST_BORES].span(),
            format!("{} bores", tables.len()),
            format!("at most {MOST_BORES} bores"),
            "a field of this size is designed by specialists",
        );
        return None;
    }
    let mut bores = Vec::with_capacity(tables.len());
    for table in tables {
        bores.extend(bore(table, tables.len() > 1, check, notes));
    }
    if bores.len() < tables.len() {
        return None;
    }
    let mut apart = true;
    for (i, a) in bores.iter().enumerate() {
        for (j, b) in bores[..i].iter().enumerate() {
            let distance_m = (a.x_m - b.x_m).hypot(a.y_m - b.y_m);
            if !bounds::BORE_DISTANCE_M.holds(distance_m) {
                apart = false;
                check.refuse(
                    &tables[i].span(),
                    format!(
                        "bore {} stands {distance_m:.2} m from bore {}",
                        i + 1,
                        j + 1
                    ),
                    bounds::BORE_DISTANCE_M.words(),
                    "check x and y; 6 m and more are usual",
                );
            }
        }
    }
    apart.then_some(bores)
}

fn bore(
    table: &Section<BoreTable>,
    needs_place: bool,
    check: &mut Check,
    notes: &mut Notes,
) -> Option<Bore> {
    let mut place = |leaf: &Option<Leaf<Length>>, name: &str| {
        if leaf.is_none() {
            if needs_place {
                check.missing(&table.span(), name, "\"6 m\"");
            }
            return (!needs_place).then_some(0.0);
        }
        check
            .within(leaf, &bounds::GROUND_PLACE_M)
            .map(|length| length.m())
    };
    let x_m = place(&table.x, "bore.x");
    let y_m = place(&table.y, "bore.y");
    check.required(&table.depth, &table.span(), "bore.depth", "\"100 m\"");
    let depth = check.within(&table.depth, &bounds::BORE_DEPTH_M);
    let buried = notes.quantity(
        check,
        &table.buried,
        &bounds::BORE_BURIED_M,
        &defaults::BURIED,
    );
    let radius = notes.quantity(
        check,
        &table.radius,
        &bounds::BORE_RADIUS_M,
        &defaults::BORE_RADIUS,
    );
    Some(Bore {
        x_m: x_m?,
        y_m: y_m?,
        depth_m: depth?.m(),
        buried_m: buried?.m(),
        radius_m: radius?.m(),
    })
}

fn trenches(
    tables: &[Section<TrenchTable>],
    check: &mut Check,
    notes: &mut Notes,
) -> Option<Vec<Trench>> {
    let mut trenches = Vec::with_capacity(tables.len());
    for table in tables {
        trenches.extend(trench(table, tables.len() > 1, check, notes));
    }
    if trenches.len() < tables.len() {
        return None;
    }
    let pipes: usize = trenches.iter().map(|trench| trench.pipes).sum();
    if pipes > MOST_PIPES {
        check.refuse(
            &tables[0].span(),
            format!("{pipes} pipes side by side"),
            format!("at most {MOST_PIPES} pipes"),
            "a loop of this size is designed by specialists",
        );
        return None;
    }
    let mut apart = true;
    for (i, a) in trenches.iter().enumerate() {
        for b in &trenches[..i] {
            let nearest = places(a)
                .flat_map(|x| places(b).map(move |y| (x - y).abs()))
                .fold(f64::INFINITY, f64::min)
                .hypot(a.depth_m - b.depth_m);
            if nearest < bounds::PIPE_DISTANCE_M.low {
                apart = false;
                check.refuse(
                    &tables[i].span(),
                    format!("its pipes lie {nearest:.2} m from those of another trench"),
                    bounds::PIPE_DISTANCE_M.words(),
                    "check across, pipes and spacing of the trenches",
                );
            }
        }
    }
    apart.then_some(trenches)
}

fn places(trench: &Trench) -> impl Iterator<Item = f64> + Clone + use<> {
    let (from, step) = (trench.across_m, trench.spacing_m);
    (0..trench.pipes).map(move |i| from + step * i as f64)
}

fn trench(
    table: &Section<TrenchTable>,
    needs_place: bool,
    check: &mut Check,
    notes: &mut Notes,
) -> Option<Trench> {
    check.required(&table.length, &table.span(), "trench.length", "\"60 m\"");
    let length = check.within(&table.length, &bounds::TRENCH_LENGTH_M);
    let depth = notes.quantity(
        check,
        &table.depth,
        &bounds::TRENCH_DEPTH_M,
        &defaults::LOOP_DEPTH,
    );
    let pipes = match &table.pipes {
        None => Some(1.0),
        Some(_) => whole_within(check, &table.pipes, &bounds::TRENCH_PIPES),
    };
    let spacing = if pipes.is_some_and(|pipes| pipes > 1.0) || table.spacing.is_some() {
        notes
            .quantity(
                check,
                &table.spacing,
                &bounds::PIPE_DISTANCE_M,
                &defaults::TRENCH_SPACING,
            )
            .map(|spacing| spacing.m())
    } else {
        Some(0.0)
    };
    let across = if table.across.is_none() {
        if needs_place {
            check.missing(&table.span(), "trench.across", "\"4 m\"");
        }
        (!needs_place).then_some(0.0)
    } else {
        check
            .within(&table.across, &bounds::GROUND_PLACE_M)
            .map(|length| length.m())
    };
    Some(Trench {
        length_m: length?.m(),
        depth_m: depth?.m(),
        pipes: pipes? as usize,
        spacing_m: spacing?,
        across_m: across?,
    })
}

fn brine(
    ground: &Ground<'_>,
    check: &mut Check,
    notes: &mut Notes,
    findings: &mut Vec<Finding>,
) -> Option<Brine> {
    let table = ground.table.brine.as_deref();
    let (no_word, no_share) = (None, None);
    let (fluid,) = notes.word(
        check,
        table.map_or(&no_word, |t| &t.fluid),
        &defaults::ANTIFREEZE,
    )?;
    let share = if fluid == Antifreeze::Water {
        0.0
    } else {
        notes
            .quantity(
                check,
                table.map_or(&no_share, |t| &t.share),
                &bounds::ANTIFREEZE_SHARE,
                &defaults::ANTIFREEZE_SHARE,
            )?
            .fraction()
    };
    let brine = Brine::new(fluid, share)?;
    let lowest_c = ground.machine?.limits().lowest_source_c;
    let freezing_c = brine.freezing_c();
    if freezing_c > lowest_c {
        let span = ground
            .table
            .brine
            .as_ref()
            .map_or_else(|| ground.table.span(), Section::span);
        check.refuse(
            &span,
            format!("{} freezes at {freezing_c:.1} °C", brine.words()),
            format!("a fluid that flows down to {lowest_c:.1} °C, where the machine still runs"),
            "raise the share of antifreeze, or the machine's lowest_source",
        );
        return None;
    }
    // The brine leaves the machine colder than it entered.
    let spread_k = parse::<TemperatureDifference>(defaults::BRINE_SPREAD.value)
        .ok()?
        .k();
    if freezing_c > lowest_c - spread_k {
        findings.push(Finding::new(
            Severity::Warning,
            format!(
                "{} freezes at {freezing_c:.1} °C, and at the machine's lowest source of {lowest_c:.1} °C it leaves about {spread_k:.0} K colder than that",
                brine.words()
            ),
            "ice could close the machine's exchanger; more antifreeze is needed if the brine gets there",
        ));
    }
    Some(brine)
}

/// Flow of the brine: as given, or such that it cools by the spread of the rating point at the machine's rated output.
fn flow_kg_per_s(
    brine: &Brine,
    ground: &Ground<'_>,
    check: &mut Check,
    notes: &mut Notes,
) -> Option<f64> {
    let properties = brine.at(BRINE_C);
    if let Some(table) = &ground.table.brine
        && table.flow.is_some()
    {
        let flow = check.within(&table.flow, &bounds::SOURCE_FLOW_L_PER_S)?;
        return Some(flow.l_per_s() * properties.density_kg_per_m3 / 1000.0);
    }
    let spread_k = parse::<TemperatureDifference>(defaults::BRINE_SPREAD.value)
        .ok()?
        .k();
    let flow = rated_draw_kw(ground.machine?) / (properties.heat_capacity_kj_per_kg_k * spread_k);
    notes.add(
        defaults::BRINE_SPREAD.field,
        format!("{:.2} L/s", flow / properties.density_kg_per_m3 * 1000.0),
        format!("default: {}", defaults::BRINE_SPREAD.from),
    );
    Some(flow)
}

/// What a machine draws from its source at its rating point, kW.
pub(super) fn rated_draw_kw(machine: &HeatPump) -> f64 {
    let (open_c, flow_c) = machine.rated_condition();
    let cold = ColdSide {
        open_c,
        k_per_kw: 0.0,
        relative_humidity: None,
    };
    let heat_kw = machine.rated_output_kw();
    let duty = Duty {
        heat_kw,
        flow_c,
        spread_k: 5.0,
        hours: 1.0,
        at_full_output: true,
    };
    machine.deliver(&cold, &duty).extracted_kwh
}

fn pump(ground: &Ground<'_>, check: &mut Check, notes: &mut Notes) -> Option<Pump> {
    let table = ground.table.brine.as_deref();
    if let Some(table) = table
        && let Some(leaf) = &table.pump
    {
        if table.pump_efficiency.is_some() {
            check.refuse(
                &leaf.span(),
                "both pump and pump_efficiency",
                "one of them: the power holds the efficiency",
                "remove pump_efficiency",
            );
            return None;
        }
        return check
            .within(&table.pump, &bounds::AUXILIARY_KW)
            .map(|power| Pump::Power(power.kw()));
    }
    let none = None;
    let efficiency = notes.quantity(
        check,
        table.map_or(&none, |t| &t.pump_efficiency),
        &bounds::PUMP_EFFICIENCY,
        &defaults::PUMP_EFFICIENCY,
    )?;
    Some(Pump::Efficiency(efficiency.fraction()))
}

/// Refuses legs of a U-tube that do not fit into their bore.
fn legs_fit(design: &LoopDesign, ground: &Ground<'_>, check: &mut Check) -> Option<()> {
    let Layout::Bores { bores, .. } = &design.layout else {
        return Some(());
    };
    let mut fit = true;
    for (bore, table) in bores.iter().zip(&ground.table.bore) {
        let Some(tube) = design.u_tube(bore) else {
            continue;
        };
        if !tube.fits() {
            fit = false;
            let outside_mm = design.pipe.outside_m * 1e3;
            check.refuse(
                &table.span(),
                format!(
                    "two legs of {outside_mm:.0} mm, {:.0} mm apart, in a bore of {:.0} mm",
                    tube.spacing_m * 1e3,
                    bore.radius_m * 2e3
                ),
                format!(
                    "a distance from {outside_mm:.0} mm to {:.0} mm between the middles of the legs",
                    bore.radius_m * 2e3 - outside_mm
                ),
                "check bore.radius, pipe.outside and borehole.spacing",
            );
        }
    }
    fit.then_some(())
}

/// Notes what was computed and tells what is odd about the loop.
fn tell(made: &BuriedLoop, ground: &Ground<'_>, notes: &mut Notes, findings: &mut Vec<Finding>) {
    let label = ground
        .table
        .label
        .as_ref()
        .and_then(|leaf| leaf.value().ok())
        .map_or("", String::as_str);
    let design = &made.design;
    let (name, method) = match &design.layout {
        Layout::Bores {
            filling: Filling::Grout { .. },
            bores,
        } => (
            format!("{} bore(s), {:.0} m", bores.len(), total_depth_m(bores)),
            "first-order multipoles, legs exchanging heat",
        ),
        Layout::Bores { bores, .. } => (
            format!("{} bore(s), {:.0} m", bores.len(), total_depth_m(bores)),
            "as given",
        ),
        Layout::Trenches { trenches } => (
            format!(
                "{} trench(es), {:.0} m of pipe",
                trenches.len(),
                total_pipe_m(trenches)
            ),
            "pipe wall and film",
        ),
    };
    notes.add(
        format!("\"{label}\": {name}: resistance from wall to brine"),
        format!("{:.3} m K/W", made.resistance_m_k_per_w()),
        method,
    );
    let circuit = &made.circuit;
    if let Some(pressure_kpa) = circuit.pressure_kpa {
        notes.add(
            format!("\"{label}\": pump of the loop"),
            format!("{:.0} W against {pressure_kpa:.0} kPa, beyond the machine's own exchanger", circuit.pump_kw * 1e3),
            "Darcy and Weisbach, a quarter added for bends and manifolds; the machine's tested points hold the rest",
        );
    }
    if circuit.is_laminar() {
        findings.push(Finding::new(
            Severity::Warning,
            format!("the brine of \"{label}\" flows at a Reynolds number of {:.0}: laminar", circuit.in_pipe.reynolds),
            "laminar flow passes heat poorly, which is counted; a larger flow, fewer ways side by side or less antifreeze would help",
        ));
    }
}

/// A whole number within a bound, when it is there and right.
pub(in crate::brief) fn whole_within(
    check: &mut Check,
    leaf: &Option<Leaf<i64>>,
    bound: &Bound,
) -> Option<f64> {
    let value = check.value(leaf)? as f64;
    if let (false, Some(leaf)) = (bound.holds(value), leaf) {
        check.refuse(
            &leaf.span(),
            format!("{value}"),
            bound.words(),
            "check the number",
        );
        return None;
    }
    Some(value)
}
