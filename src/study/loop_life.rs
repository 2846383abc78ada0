//! The life of a ground source year by year, and the shortest loop that keeps its brine above a floor.

use std::ops::Range;

use super::ageing::settled;
use super::case::{Case, Contender};
use crate::source::{BuriedLoop, NoResponse, Source};
use crate::year::{Flags, MachineSystem, Row, State, Sums, Unwatched, step};

/// Lengths between which the shortest loop is looked for, as shares of the described one.
const STRETCH: (f64, f64) = (0.2, 6.0);
/// The shortest loop is solved to this share of its length, and the most halvings that takes.
const LENGTH_TOLERANCE: f64 = 2e-3;
const MOST_HALVINGS: usize = 20;

/// Temperatures of the brine in an hour, °C.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct BrineHour {
    /// Entering the machine.
    pub entering_c: f64,
    /// Mean of entering and leaving.
    pub mean_c: f64,
    /// Leaving the machine.
    pub leaving_c: f64,
    /// Heat drawn while running, kW.
    pub draw_kw: f64,
}

/// One year of a ground source.
#[derive(Debug, Clone, PartialEq)]
pub struct LoopYear {
    /// Year of its life, from 1.
    pub year: u32,
    /// Brine or water in the hour in which it entered coldest; nothing when the machine never ran.
    pub coldest: Option<BrineHour>,
    /// Mean entering temperature while running, °C; not a number when it never ran.
    pub average_brine_c: f64,
    /// Mean of the wall of bores or pipes over the year, °C, where there is one.
    pub average_wall_c: Option<f64>,
    /// Lowest temperature of the wall, °C, where there is one.
    pub lowest_wall_c: Option<f64>,
    /// Hours in which the wall was below 0 °C.
    pub hours_wall_frozen: u32,
    /// Hours in which the machine stood because its source was outside its limits.
    pub hours_stopped: u32,
    /// Hours in which it was turned down so that its source would not fall below its limit.
    pub hours_turned_down: u32,
    /// Hours in which backup or immersion heater ran.
    pub hours_backup: u32,
    /// Hours that ended short of heat.
    pub hours_short: u32,
    /// Greatest draw of an hour, kW.
    pub greatest_draw_kw: f64,
    /// Sums of the year.
    pub sums: Sums,
}

/// A year while it is being gone through.
struct Tally {
    year: LoopYear,
    hours: f64,
    entering_sum: f64,
    wall_sum: f64,
}

impl Tally {
    fn new(year: u32) -> Self {
        let year = LoopYear {
            year,
            coldest: None,
            average_brine_c: f64::NAN,
            average_wall_c: None,
            lowest_wall_c: None,
            hours_wall_frozen: 0,
            hours_stopped: 0,
            hours_turned_down: 0,
            hours_backup: 0,
            hours_short: 0,
            greatest_draw_kw: 0.0,
            sums: Sums::default(),
        };
        Self {
            year,
            hours: 0.0,
            entering_sum: 0.0,
            wall_sum: 0.0,
        }
    }

    fn take(&mut self, row: &Row, brine: Option<BrineHour>, wall_c: Option<f64>) {
        let year = &mut self.year;
        self.hours += 1.0;
        year.sums.add(row);
        if let Some(brine) = brine {
            self.entering_sum += brine.entering_c * row.running_hours;
            year.greatest_draw_kw = year.greatest_draw_kw.max(brine.draw_kw);
            if year
                .coldest
                .is_none_or(|coldest| brine.entering_c < coldest.entering_c)
            {
                year.coldest = Some(brine);
            }
        }
        if let Some(wall_c) = wall_c {
            self.wall_sum += wall_c;
            year.lowest_wall_c = Some(
                year.lowest_wall_c
                    .map_or(wall_c, |lowest| lowest.min(wall_c)),
            );
            year.hours_wall_frozen += u32::from(wall_c < 0.0);
        }
        year.hours_stopped += u32::from(row.flags.has(Flags::MACHINE_STOPPED));
        year.hours_turned_down += u32::from(row.flags.has(Flags::TURNED_DOWN));
        year.hours_backup +=
            u32::from(row.flags.has(Flags::BACKUP) || row.flags.has(Flags::IMMERSION));
        year.hours_short += u32::from(row.flags.has(Flags::SHORT));
    }

    fn finish(mut self) -> LoopYear {
        self.year.average_brine_c = self.entering_sum / self.year.sums.running_hours;
        self.year.average_wall_c = self.year.lowest_wall_c.map(|_| self.wall_sum / self.hours);
        self.year
    }
}

/// Goes through the years of a heat pump's source from fresh ground; `watch` sees the year (from 1), the hour of the axis and
/// the brine of every hour. Nothing for a system without a machine.
pub fn loop_life(
    case: &Case,
    contender: &Contender,
    years: u32,
    mut watch: impl FnMut(u32, usize, Option<BrineHour>),
) -> Vec<LoopYear> {
    let Some(machine) = contender.system.heating.machine() else {
        return Vec::new();
    };
    let mut state = State::at_rest(&contender.system, contender.indoor_c);
    let weather = (0..years).filter_map(|i| Some((i + 1, case.weather_year(i)?.1)));
    weather
        .map(|(year, hours)| {
            one_year(
                case, contender, machine, year, hours, &mut state, &mut watch,
            )
        })
        .collect()
}

fn one_year(
    case: &Case,
    contender: &Contender,
    machine: &MachineSystem,
    year: u32,
    hours: Range<usize>,
    state: &mut State,
    watch: &mut impl FnMut(u32, usize, Option<BrineHour>),
) -> LoopYear {
    let mut tally = Tally::new(year);
    for hour in hours {
        let row = step(
            hour,
            &case.site,
            &contender.system,
            &contender.plan,
            state,
            &mut Unwatched,
        );
        let brine = brine_hour(machine, &row);
        let wall_c = match &machine.source {
            Source::Buried(buried) => Some(buried.wall_c(hour, &state.ground)),
            _ => None,
        };
        tally.take(&row, brine, wall_c);
        watch(year, hour, brine);
    }
    tally.finish()
}

/// The brine of an hour in which the machine ran.
fn brine_hour(machine: &MachineSystem, row: &Row) -> Option<BrineHour> {
    let entering_c = row.source_c?;
    let draw_kw = row.extracted_kwh / row.running_hours;
    let leaving_c = match &machine.source {
        Source::Buried(buried) => entering_c - draw_kw / buried.circuit.capacity_kw_per_k(),
        // Behind an exchanger the machine's own circuit is taken to flow as the water does.
        Source::Water(water) => entering_c - water.cooling_k(draw_kw),
        Source::OutdoorAir | Source::Ground(_) => f64::NAN,
    };
    Some(BrineHour {
        entering_c,
        mean_c: (entering_c + leaving_c) / 2.0,
        leaving_c,
        draw_kw,
    })
}

/// The shortest loop that keeps the brine entering the machine at or above a floor.
#[derive(Debug, Clone, PartialEq)]
pub struct ShortestLoop {
    /// The floor, °C.
    pub floor_c: f64,
    /// Length that takes heat, m.
    pub length_m: f64,
    /// The year that decided, gone through hour by hour from fresh ground at that length.
    pub year: LoopYear,
}

/// Why there is no shortest loop.
#[derive(Debug, Clone, PartialEq)]
pub enum NoShortest {
    /// Even this length, m, lets the brine fall below the floor.
    BelowFloorAt(f64),
    /// A loop could not be computed.
    Response(NoResponse),
    /// Its source is no buried loop.
    NotBuried,
}

/// Searches the shortest loop that keeps the brine entering the machine at or above a floor (°C) through a year of its life, with
/// the machine never standing or turned down for want of source.
///
/// The number of bores or trenches, their places and the flow stay; their length changes. Each trial lets the ground settle to the
/// history that its own draws make; the loop that is found is then gone through from fresh ground, year by year, as every other.
///
/// # Errors
/// When no length does, or the source is no buried loop.
pub fn shortest_loop(
    case: &Case,
    contender: &Contender,
    floor_c: f64,
    year: u32,
) -> Result<ShortestLoop, NoShortest> {
    let Some(machine) = contender.remembering() else {
        return Err(NoShortest::NotBuried);
    };
    let Source::Buried(buried) = &machine.source else {
        return Err(NoShortest::NotBuried);
    };
    let stands = |length_m: f64| -> Result<bool, NoShortest> {
        let trial = with_length(contender, machine, buried, length_m)?;
        let Some(coldest) = coldest_settled(case, &trial, year) else {
            return Ok(false);
        };
        Ok(coldest >= floor_c)
    };
    let (mut short_m, mut long_m) = (buried.length_m() * STRETCH.0, buried.length_m() * STRETCH.1);
    if !stands(long_m)? {
        return Err(NoShortest::BelowFloorAt(long_m));
    }
    if stands(short_m)? {
        long_m = short_m;
    }
    for _ in 0..MOST_HALVINGS {
        if long_m - short_m < LENGTH_TOLERANCE * long_m {
            break;
        }
        let middle_m = (short_m * long_m).sqrt();
        if stands(middle_m)? {
            long_m = middle_m;
        } else {
            short_m = middle_m;
        }
    }
    let found = with_length(contender, machine, buried, long_m)?;
    let life = loop_life(case, &found, year, |_, _, _| {});
    let last = life.into_iter().last().ok_or(NoShortest::NotBuried)?;
    Ok(ShortestLoop {
        floor_c,
        length_m: long_m,
        year: last,
    })
}

/// The contender with a loop of another length.
fn with_length(
    contender: &Contender,
    machine: &MachineSystem,
    buried: &BuriedLoop,
    length_m: f64,
) -> Result<Contender, NoShortest> {
    let hours = buried.undisturbed().len();
    let other = buried
        .design
        .with_length(length_m)
        .build(hours)
        .map_err(NoShortest::Response)?;
    let mut contender = contender.clone();
    contender.aged = None;
    let longer = MachineSystem {
        source: Source::Buried(Box::new(other)),
        ..machine.clone()
    };
    if let Some(system) = contender.system.heating.machine_mut() {
        *system = longer;
    }
    Ok(contender)
}

/// Coldest brine entering in a year of the settled ground; nothing when the machine stands or turns down for want of source.
fn coldest_settled(case: &Case, contender: &Contender, year: u32) -> Option<f64> {
    let machine = contender.remembering()?;
    let memory = settled(case, contender, year)?;
    let mut state = State {
        ground: memory,
        ..State::at_rest(&contender.system, contender.indoor_c)
    };
    let (_, hours) = case.weather_year(year.saturating_sub(1))?;
    let lived = one_year(
        case,
        contender,
        machine,
        year,
        hours,
        &mut state,
        &mut |_, _, _| {},
    );
    if lived.hours_stopped + lived.hours_turned_down > 0 {
        None
    } else {
        lived.coldest.map(|coldest| coldest.entering_c)
    }
}
