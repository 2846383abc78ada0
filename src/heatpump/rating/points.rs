//! Where the points of a rating come from: declared on the sheet, or given by the fitted machine.

use std::fmt;

use super::bins::{Rating, RatingCase, RatingPoint, rate};
use super::climate::{Application, Climate};
use crate::heatpump::duty::{ColdSide, Duty};
use crate::heatpump::heat_pump::HeatPump;
use crate::heatpump::sheet::{Sheet, SourceKind, default_spread_k};
use crate::problem::{Finding, Severity};

/// A declared point of a seasonal rating, from a sheet.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct DeclaredPoint {
    /// Climate.
    pub climate: Climate,
    /// Application.
    pub application: Application,
    /// Outdoor temperature, °C.
    pub outdoor_c: f64,
    /// Declared capacity, kW.
    pub output_kw: f64,
    /// Declared COP.
    pub cop: f64,
}

/// Where the points of a rating came from.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum RatedFrom {
    /// Declared on the sheet.
    Declared,
    /// Given by the fitted machine.
    Fitted,
}

/// A rating with what it was made for.
#[derive(Debug, Clone, PartialEq)]
pub struct Rated {
    /// The seasonal figures.
    pub rating: Rating,
    /// What they are for.
    pub case: RatingCase,
    /// Bivalent temperature: below it the heater helps, °C.
    pub bivalent_c: f64,
    /// Where the points came from.
    pub from: RatedFrom,
    /// What is outside the regulation's frame.
    pub findings: Vec<Finding>,
}

/// Why a machine cannot be rated.
#[derive(Debug, Clone, PartialEq)]
pub enum RatingError {
    /// The machine's highest flow temperature is below that of the application everywhere.
    FlowTooHot {
        /// Flow temperature of the application at the design temperature, °C.
        flow_c: f64,
        /// Highest of the machine there, °C.
        highest_c: f64,
    },
    /// Fewer than two points are declared for this climate and application.
    TooFewPoints {
        /// How many there are.
        count: usize,
    },
}

impl fmt::Display for RatingError {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match self {
            Self::FlowTooHot { flow_c, highest_c } => write!(
                f,
                "the application asks for {flow_c} °C of flow and the machine reaches {highest_c} °C"
            ),
            Self::TooFewPoints { count } => write!(
                f,
                "{count} declared point(s) for this climate and application; the method joins at least two"
            ),
        }
    }
}

impl std::error::Error for RatingError {}

/// Outdoor temperatures of the test conditions A to D, °C, those at or above the design temperature.
const TEST_CONDITIONS_C: [f64; 4] = [-7.0, 2.0, 7.0, 12.0];
/// Test condition G of the colder climate, °C.
const CONDITION_G_C: f64 = -15.0;
/// Entering brine and ground water, °C (EN 14825: rated at 0 and 10 °C whatever the season).
const BRINE_C: f64 = 0.0;
const GROUND_WATER_C: f64 = 10.0;
/// Error of the bivalent temperature, K, and the halvings that reach it from any bracket in use.
const BIVALENT_TOLERANCE_K: f64 = 1e-6;
const MOST_HALVINGS: usize = 60;

/// Bivalent temperature that sizes a machine when no design load is given, °C: a usual declaration; common practice, no source.
fn usual_bivalent_c(climate: Climate) -> f64 {
    match climate {
        Climate::Average => -7.0,
        Climate::Colder => -15.0,
        Climate::Warmer => 2.0,
    }
}

/// The heat pump in its laboratory at an outdoor temperature of a rating.
struct Bench {
    machine: HeatPump,
    climate: Climate,
    application: Application,
    source: SourceKind,
}

impl Bench {
    fn cold(&self, outdoor_c: f64) -> ColdSide {
        ColdSide {
            open_c: match self.source {
                SourceKind::Air => outdoor_c,
                SourceKind::Brine => BRINE_C,
                SourceKind::Water => GROUND_WATER_C,
            },
            k_per_kw: 0.0,
            relative_humidity: None,
        }
    }

    fn flow_c(&self, outdoor_c: f64) -> f64 {
        self.application.flow_c(self.climate, outdoor_c)
    }

    fn greatest_kw(&self, outdoor_c: f64) -> f64 {
        self.machine
            .greatest_output_kw(&self.cold(outdoor_c), self.flow_c(outdoor_c))
    }

    /// Capacity nearest to a load and the COP at it.
    ///
    /// A machine that goes on and off is tested at the hotter flow that it really runs at: EN 14825 sets its outlet so that the
    /// mean over on and off is the application's flow temperature, with the full standard spread while running.
    fn point(&self, outdoor_c: f64, load_kw: f64) -> Option<RatingPoint> {
        let (cold, mean_c) = (self.cold(outdoor_c), self.flow_c(outdoor_c));
        let greatest = self.machine.greatest_output_kw(&cold, mean_c);
        if greatest <= 0.0 {
            return None;
        }
        let spread_k = default_spread_k(mean_c);
        let share = load_kw / self.machine.least_output_kw(&cold, mean_c);
        let duty = |heat_kw: f64, flow_c: f64| Duty {
            heat_kw,
            flow_c,
            spread_k: spread_k * share.min(1.0),
            hours: 1.0,
            at_full_output: false,
        };
        let (capacity_kw, flow_c) = if share < 1.0 {
            let running = self.machine.deliver(&cold, &duty(load_kw, mean_c));
            let flow_c = running.flow_c;
            (self.machine.least_output_kw(&cold, flow_c), flow_c)
        } else {
            (load_kw.min(greatest), mean_c)
        };
        let delivered = self.machine.deliver(&cold, &duty(capacity_kw, flow_c));
        Some(RatingPoint {
            outdoor_c,
            capacity_kw,
            cop: delivered.heat_kwh / delivered.electricity_kwh(),
        })
    }

    /// Outdoor temperature at which the greatest output meets the load, °C; the design temperature when it always does.
    fn bivalent_c(&self, design_load_kw: f64, lowest_c: f64) -> f64 {
        let spare = |outdoor_c: f64| {
            self.greatest_kw(outdoor_c) - self.climate.part_load_ratio(outdoor_c) * design_load_kw
        };
        let (mut low, mut high) = (lowest_c, super::climate::BALANCE_C);
        if spare(low) >= 0.0 {
            return low;
        }
        for _ in 0..MOST_HALVINGS {
            let middle = 0.5 * (low + high);
            if spare(middle) >= 0.0 {
                high = middle;
            } else {
                low = middle;
            }
            if high - low < BIVALENT_TOLERANCE_K {
                break;
            }
        }
        high
    }
}

/// Rates the fitted machine: its own laboratory output and COP at the test conditions of a climate and an application, without
/// the allowance from bench to home. Without a design load the machine is sized to meet the load alone down to −7, −15 or 2 °C.
///
/// # Errors
/// [`RatingError::FlowTooHot`] when the machine cannot reach the application's flow temperature in the cold.
pub fn rate_machine(
    heat_pump: &HeatPump,
    climate: Climate,
    application: Application,
    design_load_kw: Option<f64>,
) -> Result<Rated, RatingError> {
    let bench = Bench {
        machine: heat_pump.at_bench(),
        climate,
        application,
        source: heat_pump.source(),
    };
    let limits = heat_pump.limits();
    let operation_limit_c = match bench.source {
        SourceKind::Air => limits.lowest_source_c.max(climate.design_c()),
        SourceKind::Brine | SourceKind::Water => climate.design_c(),
    };
    // The coldest temperature from there up at which the machine reaches the flow temperature.
    let runs = |outdoor_c: f64| bench.greatest_kw(outdoor_c) > 0.0;
    let operation_limit_c = climate
        .bins()
        .map(|(outdoor_c, _)| outdoor_c)
        .find(|&outdoor_c| outdoor_c >= operation_limit_c && runs(outdoor_c));
    let too_hot = || RatingError::FlowTooHot {
        flow_c: bench.flow_c(climate.design_c()),
        highest_c: limits.highest_flow_at(bench.cold(climate.design_c()).open_c),
    };
    let operation_limit_c = operation_limit_c
        .filter(|limit| {
            *limit <= usual_bivalent_c(climate).max(climate.largest_operation_limit_c())
        })
        .ok_or_else(too_hot)?;
    let design_load_kw = design_load_kw.unwrap_or_else(|| {
        let bivalent_c = usual_bivalent_c(climate).max(operation_limit_c);
        bench.greatest_kw(bivalent_c) / climate.part_load_ratio(bivalent_c)
    });
    let bivalent_c = bench.bivalent_c(design_load_kw, operation_limit_c);
    let mut outdoor: Vec<f64> = TEST_CONDITIONS_C
        .into_iter()
        .chain([operation_limit_c, bivalent_c])
        .chain((climate == Climate::Colder).then_some(CONDITION_G_C))
        .filter(|&outdoor_c| outdoor_c >= operation_limit_c)
        .collect();
    outdoor.sort_by(f64::total_cmp);
    outdoor.dedup_by(|a, b| (*a - *b).abs() < BIVALENT_TOLERANCE_K);
    let points: Vec<_> = outdoor
        .iter()
        .filter_map(|&outdoor_c| {
            bench.point(
                outdoor_c,
                climate.part_load_ratio(outdoor_c) * design_load_kw,
            )
        })
        .collect();
    let case = RatingCase {
        climate,
        design_load_kw,
        operation_limit_c,
        cycling_coefficient: heat_pump.cycling_coefficient(),
        idle: heat_pump.idle(),
        ground_pump: heat_pump.source() != SourceKind::Air,
    };
    let rating = rate(&points, &case).ok_or(RatingError::TooFewPoints {
        count: points.len(),
    })?;
    Ok(Rated {
        rating,
        findings: findings(climate, bivalent_c, operation_limit_c),
        case,
        bivalent_c,
        from: RatedFrom::Fitted,
    })
}

/// Rates a sheet by its own declared points, when it has any for the climate and application.
///
/// The operation limit is the coldest declared point, the bivalent temperature where the declared capacity meets the load.
///
/// # Errors
/// [`RatingError::TooFewPoints`] when a single point is declared.
pub fn rate_declared(
    sheet: &Sheet,
    climate: Climate,
    application: Application,
    design_load_kw: f64,
) -> Option<Result<Rated, RatingError>> {
    let points: Vec<_> = sheet
        .declared
        .iter()
        .filter(|p| p.climate == climate && p.application == application)
        .map(|p| RatingPoint {
            outdoor_c: p.outdoor_c,
            capacity_kw: p.output_kw,
            cop: p.cop,
        })
        .collect();
    if points.is_empty() {
        return None;
    }
    let operation_limit_c = points
        .iter()
        .map(|p| p.outdoor_c)
        .fold(f64::INFINITY, f64::min);
    let case = RatingCase {
        climate,
        design_load_kw,
        operation_limit_c,
        cycling_coefficient: sheet.cycling_coefficient,
        idle: sheet.idle,
        ground_pump: sheet.source != SourceKind::Air,
    };
    let Some(rating) = rate(&points, &case) else {
        return Some(Err(RatingError::TooFewPoints {
            count: points.len(),
        }));
    };
    let enough = |p: &&super::bins::RatedPoint| p.declared.capacity_kw >= p.load_kw - 1e-9;
    let bivalent_c = rating
        .points
        .iter()
        .find(enough)
        .map_or(operation_limit_c, |p| p.declared.outdoor_c);
    Some(Ok(Rated {
        rating,
        findings: findings(climate, bivalent_c, operation_limit_c),
        case,
        bivalent_c,
        from: RatedFrom::Declared,
    }))
}

fn findings(climate: Climate, bivalent_c: f64, operation_limit_c: f64) -> Vec<Finding> {
    let mut findings = Vec::new();
    if bivalent_c > climate.largest_bivalent_c() {
        findings.push(Finding::new(
            Severity::Warning,
            format!("bivalent temperature {bivalent_c:.1} °C"),
            format!(
                "the regulation allows at most {} °C in this climate: the machine is small for this load",
                climate.largest_bivalent_c()
            ),
        ));
    }
    if operation_limit_c > climate.largest_operation_limit_c() {
        findings.push(Finding::new(
            Severity::Warning,
            format!("operation limit {operation_limit_c:.1} °C"),
            format!(
                "the regulation allows at most {} °C in this climate",
                climate.largest_operation_limit_c()
            ),
        ));
    }
    findings
}
