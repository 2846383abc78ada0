//! Where bores and trenches lie, and what is in the bores.

use super::super::defaults;
use super::super::notes::Notes;
use super::{BoreTable, Ground, TrenchTable, whole_within};
use crate::bounds;
use crate::document::{Check, Leaf, Section};
use crate::source::{Bore, Filling, Layout, LoopDesign, Trench, UTubes};
use crate::units::Length;

/// Bores of a field: more is no home.
const MOST_BORES: usize = 40;
/// Pipes side by side in all trenches: more is no home.
const MOST_PIPES: usize = 40;

/// Part of a millimetre that is rounding.
const ROUNDING_MM: f64 = 1e-6;

pub(super) fn filling(
    ground: &Ground<'_>,
    check: &mut Check,
    notes: &mut Notes,
) -> Option<Filling> {
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

/// U-tubes in each bore.
pub(super) fn u_tubes(ground: &Ground<'_>, check: &mut Check) -> Option<UTubes> {
    let Some(table) = ground.table.borehole.as_deref() else {
        return Some(UTubes::One);
    };
    let Some(leaf) = &table.u_tubes else {
        return Some(UTubes::One);
    };
    match check.value(&table.u_tubes)? {
        1 => Some(UTubes::One),
        2 => Some(UTubes::Two),
        other => {
            check.refuse(
                &leaf.span(),
                format!("{other} U-tubes in a bore"),
                "1 or 2",
                "two U-tubes are the most that are put into a bore; leave u_tubes out for one",
            );
            None
        }
    }
}

pub(super) fn bores(
    tables: &[Section<BoreTable>],
    check: &mut Check,
    notes: &mut Notes,
) -> Option<Vec<Bore>> {
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

pub(super) fn trenches(
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

/// Refuses legs of a U-tube that do not fit into their bore.
pub(super) fn legs_fit(design: &LoopDesign, ground: &Ground<'_>, check: &mut Check) -> Option<()> {
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
            let (nearest_m, widest_m) = tube.spacing_between_m();
            let allowed = if nearest_m <= widest_m {
                format!(
                    "a distance from {:.0} mm to {:.0} mm between the middles of the legs",
                    (nearest_m * 1e3 - ROUNDING_MM).ceil(),
                    (widest_m * 1e3 + ROUNDING_MM).floor()
                )
            } else {
                "a wider bore or narrower pipes: they do not fit at any distance".to_owned()
            };
            check.refuse(
                &table.span(),
                format!(
                    "{} legs of {outside_mm:.0} mm, those of a U-tube {:.0} mm apart, in a bore of {:.0} mm",
                    2 * tube.count.number(),
                    tube.spacing_m * 1e3,
                    bore.radius_m * 2e3
                ),
                allowed,
                "check bore.radius, pipe.outside and borehole.spacing",
            );
        }
    }
    fit.then_some(())
}
