//! The exact machine: refrigerant cycle, compressor and two exchangers solved together.
//!
//! Nothing here knows of frost, cycling, limits or laboratories: it is the machine running steadily at a source
//! temperature, a flow temperature and a speed or an output.

use std::fmt;
use std::sync::Arc;

use super::compressor::{Compressor, Speeds};
use super::exchanger::Exchanger;
use crate::refrigerant::CycleTable;

/// Largest change of evaporating and condensing temperature in the last step of a solution, K: far below any meaning, so
/// that the fit's numerical derivatives are smooth.
const TOLERANCE_K: f64 = 1e-8;
/// Most steps of a solution; five or six are usual.
const MOST_STEPS: usize = 60;
/// Share of full power that a fan or pump keeps however slowly it turns; common practice, no source.
const SOURCE_POWER_FLOOR: f64 = 0.15;

/// A machine with all its parts known.
#[derive(Debug, Clone)]
pub struct Machine {
    /// Refrigerant properties at the machine's superheat and subcooling.
    pub table: Arc<CycleTable>,
    /// Compressor and drive.
    pub compressor: Compressor,
    /// Evaporator against the source.
    pub evaporator: Exchanger,
    /// Condenser against the heating water.
    pub condenser: Exchanger,
    /// Fan, or the share of the brine pump that laboratory points contain, at full speed, kW.
    pub source_power_kw: f64,
    /// What the controller allows.
    pub speeds: Speeds,
}

/// A machine running steadily.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Operation {
    /// Source temperature entering, °C.
    pub source_c: f64,
    /// Flow temperature leaving, °C.
    pub flow_c: f64,
    /// Relative speed, 1 = greatest at 7 °C source and 35 °C flow.
    pub speed: f64,
    /// Evaporating temperature, °C.
    pub evaporating_c: f64,
    /// Condensing temperature, °C.
    pub condensing_c: f64,
    /// Condensing over evaporating pressure.
    pub pressure_ratio: f64,
    /// Isentropic work over work that reaches the refrigerant.
    pub isentropic_efficiency: f64,
    /// Suction volume over swept volume.
    pub volumetric_efficiency: f64,
    /// Refrigerant flow, kg/s.
    pub mass_flow_kg_per_s: f64,
    /// Heat given to the water, kW.
    pub heat_kw: f64,
    /// Heat taken from the source, kW.
    pub extracted_kw: f64,
    /// Electricity of the compressor and its drive, kW.
    pub compressor_kw: f64,
    /// Electricity of the fan or pump, as in a laboratory point, kW.
    pub source_side_kw: f64,
}

impl Operation {
    /// Compressor and fan or pump, kW.
    pub fn electric_kw(&self) -> f64 {
        self.compressor_kw + self.source_side_kw
    }

    /// Heat over electricity.
    pub fn cop(&self) -> f64 {
        self.heat_kw / self.electric_kw()
    }
}

/// Why a machine cannot run at a condition, or was not solved.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum SolveError {
    /// Evaporating or condensing would leave the range of the refrigerant's table.
    OutsideRange {
        /// Which of the two.
        what: &'static str,
        /// Where it would be, °C.
        at_c: f64,
        /// Lowest, °C.
        low_c: f64,
        /// Highest, °C.
        high_c: f64,
    },
    /// The iteration did not settle within its cap.
    NotConverged {
        /// Source temperature, °C.
        source_c: f64,
        /// Flow temperature, °C.
        flow_c: f64,
    },
}

impl fmt::Display for SolveError {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match self {
            Self::OutsideRange {
                what,
                at_c,
                low_c,
                high_c,
            } => write!(
                f,
                "{what} at {at_c:.1} °C lies outside {low_c:.1} to {high_c:.1} °C"
            ),
            Self::NotConverged { source_c, flow_c } => write!(
                f,
                "the machine was not solved at source {source_c:.1} °C and flow {flow_c:.1} °C"
            ),
        }
    }
}

impl std::error::Error for SolveError {}

/// The cycle for one kilogram of refrigerant.
struct PerKilogram {
    ratio_logarithm: f64,
    /// Isentropic work, kJ/kg.
    isentropic: f64,
    /// Suction minus liquid enthalpy, kJ/kg.
    evaporator: f64,
    /// kg/m³ at suction.
    density: f64,
}

impl Machine {
    /// The machine at a relative speed.
    ///
    /// # Errors
    /// [`SolveError`] when it would leave the refrigerant's range or does not settle.
    pub fn at_speed(
        &self,
        source_c: f64,
        flow_c: f64,
        speed: f64,
    ) -> Result<Operation, SolveError> {
        // Two unknowns (evaporating, condensing), each told by the heat the other side gives: Broyden's method, which
        // begins as plain substitution and learns the slopes on the way.
        let answer = |te: f64, tc: f64| {
            let cycle = self.per_kilogram(te, tc);
            let flow = self.mass_flow(&cycle, speed);
            let work = cycle.isentropic
                / self
                    .compressor
                    .isentropic_efficiency(cycle.ratio_logarithm, speed);
            let extracted = flow * cycle.evaporator;
            (
                source_c - self.evaporator.approach_k(extracted) - te,
                flow_c + self.condenser.approach_k(extracted + flow * work) - tc,
            )
        };
        let (mut te, mut tc) = self.inside(source_c - self.evaporator.floor_k - 3.0, flow_c + 2.0);
        // Inverse Jacobian of the residuals, begun as that of plain substitution.
        let (mut a, mut b, mut c, mut d) = (-1.0, 0.0, 0.0, -1.0);
        let (mut re, mut rc) = answer(te, tc);
        for _ in 0..MOST_STEPS {
            let wanted = (te - (a * re + b * rc), tc - (c * re + d * rc));
            let next = self.inside(wanted.0, wanted.1);
            let (step_e, step_c) = (next.0 - te, next.1 - tc);
            (te, tc) = next;
            let (new_e, new_c) = answer(te, tc);
            if new_e.abs().max(new_c.abs()) < TOLERANCE_K {
                return Ok(self.operation(source_c, flow_c, te, tc, speed));
            }
            let (dre, drc) = (new_e - re, new_c - rc);
            (re, rc) = (new_e, new_c);
            let (hy_e, hy_c) = (a * dre + b * drc, c * dre + d * drc);
            let below = step_e * hy_e + step_c * hy_c;
            if step_e.abs() + step_c.abs() < f64::EPSILON || !below.is_finite() || below == 0.0 {
                break;
            }
            let (left_e, left_c) = ((step_e - hy_e) / below, (step_c - hy_c) / below);
            let (right_e, right_c) = (step_e * a + step_c * c, step_e * b + step_c * d);
            a += left_e * right_e;
            b += left_e * right_c;
            c += left_c * right_e;
            d += left_c * right_c;
        }
        Err(self.refusal(source_c, flow_c, te, tc))
    }

    /// The machine giving an output, at whatever relative speed that takes.
    ///
    /// # Errors
    /// [`SolveError`] when it would leave the refrigerant's range or does not settle.
    pub fn at_output(
        &self,
        source_c: f64,
        flow_c: f64,
        heat_kw: f64,
    ) -> Result<Operation, SolveError> {
        let condensing = flow_c + self.condenser.approach_k(heat_kw);
        let extracted = |te: f64| {
            let cycle = self.per_kilogram(te, condensing);
            // Speed and efficiency depend on each other so weakly that substitution settles at once.
            let mut speed = 1.0;
            let mut work = 0.0;
            for _ in 0..MOST_STEPS {
                work = cycle.isentropic
                    / self
                        .compressor
                        .isentropic_efficiency(cycle.ratio_logarithm, speed);
                let flow = heat_kw / (cycle.evaporator + work);
                let next = flow / self.mass_flow(&cycle, 1.0);
                let change = (next - speed).abs();
                speed = next;
                if change < SPEED_TOLERANCE * speed {
                    break;
                }
            }
            let flow = heat_kw / (cycle.evaporator + work);
            (flow * cycle.evaporator, speed)
        };
        let (mut te, tc) = self.inside(
            source_c - self.evaporator.approach_k(0.75 * heat_kw),
            condensing,
        );
        for _ in 0..MOST_STEPS {
            let (heat, speed) = extracted(te);
            let (next, _) = self.inside(source_c - self.evaporator.approach_k(heat), tc);
            let change = (next - te).abs();
            te = next;
            if change < TOLERANCE_K && (tc - condensing).abs() < TOLERANCE_K {
                let wanted = source_c - self.evaporator.approach_k(heat);
                if (wanted - te).abs() > TOLERANCE_K || !speed.is_finite() {
                    break;
                }
                return Ok(self.operation(source_c, flow_c, te, tc, speed));
            }
        }
        Err(self.refusal(source_c, flow_c, te, condensing))
    }

    /// The machine at its greatest speed.
    ///
    /// # Errors
    /// As [`Machine::at_speed`].
    pub fn at_greatest(&self, source_c: f64, flow_c: f64) -> Result<Operation, SolveError> {
        self.at_speed(source_c, flow_c, self.speeds.greatest(source_c, flow_c))
    }

    /// The machine at its least speed.
    ///
    /// # Errors
    /// As [`Machine::at_speed`].
    pub fn at_least(&self, source_c: f64, flow_c: f64) -> Result<Operation, SolveError> {
        self.at_speed(source_c, flow_c, self.speeds.least())
    }

    /// Fan or pump power at a speed given as a share of the greatest there, kW: it follows the compressor between the square
    /// and the cube of its speed (fan laws), here as the square above a floor; that of a fixed-speed machine is constant.
    pub fn source_side_kw(&self, share: f64) -> f64 {
        match self.speeds {
            Speeds::Fixed => self.source_power_kw,
            Speeds::Variable { .. } => {
                self.source_power_kw
                    * (SOURCE_POWER_FLOOR + (1.0 - SOURCE_POWER_FLOOR) * share * share)
            }
        }
    }

    fn per_kilogram(&self, te: f64, tc: f64) -> PerKilogram {
        PerKilogram {
            ratio_logarithm: self.table.pressure_ratio_logarithm(te, tc),
            isentropic: self.table.isentropic_work(te, tc),
            evaporator: self.table.suction_enthalpy(te) - self.table.liquid_enthalpy(tc),
            density: self.table.suction_density(te),
        }
    }

    fn mass_flow(&self, cycle: &PerKilogram, speed: f64) -> f64 {
        let volumetric = self
            .compressor
            .volumetric_efficiency(cycle.ratio_logarithm.exp());
        speed * self.compressor.swept_m3_per_s * volumetric * cycle.density
    }

    fn operation(&self, source_c: f64, flow_c: f64, te: f64, tc: f64, speed: f64) -> Operation {
        let cycle = self.per_kilogram(te, tc);
        let ratio = cycle.ratio_logarithm.exp();
        let efficiency = self
            .compressor
            .isentropic_efficiency(cycle.ratio_logarithm, speed);
        let flow = self.mass_flow(&cycle, speed);
        let work = flow * cycle.isentropic / efficiency;
        let extracted = flow * cycle.evaporator;
        Operation {
            source_c,
            flow_c,
            speed,
            evaporating_c: te,
            condensing_c: tc,
            pressure_ratio: ratio,
            isentropic_efficiency: efficiency,
            volumetric_efficiency: self.compressor.volumetric_efficiency(ratio),
            mass_flow_kg_per_s: flow,
            heat_kw: extracted + work,
            extracted_kw: extracted,
            compressor_kw: work / self.compressor.drive_efficiency,
            source_side_kw: self.source_side_kw(speed / self.speeds.greatest(source_c, flow_c)),
        }
    }

    /// Brings a guess into the table's range; condensing stays above evaporating.
    fn inside(&self, te: f64, tc: f64) -> (f64, f64) {
        let (low, high) = self.table.evaporating_range_c();
        let te = te.clamp(low, high);
        let (low, high) = self.table.condensing_range_c();
        (te, tc.clamp(low.max(te + LEAST_LIFT_K).min(high), high))
    }

    fn refusal(&self, source_c: f64, flow_c: f64, te: f64, tc: f64) -> SolveError {
        let (low_e, high_e) = self.table.evaporating_range_c();
        let (low_c, high_c) = self.table.condensing_range_c();
        if te <= low_e || te >= high_e {
            SolveError::OutsideRange {
                what: "evaporating",
                at_c: te,
                low_c: low_e,
                high_c: high_e,
            }
        } else if tc <= low_c || tc >= high_c {
            SolveError::OutsideRange {
                what: "condensing",
                at_c: tc,
                low_c,
                high_c,
            }
        } else {
            SolveError::NotConverged { source_c, flow_c }
        }
    }
}

/// Relative change of speed at which the inner substitution of [`Machine::at_output`] ends.
const SPEED_TOLERANCE: f64 = 1e-9;
/// Least lift tried while solving, K; no solution within a machine's limits comes near it.
const LEAST_LIFT_K: f64 = 1.0;
