//! The balance point: the outdoor temperature below which the machine alone no longer holds the set point.

use argmin::core::{CostFunction, Error, Executor, State as _};
use argmin::solver::brent::BrentRoot;

use crate::heatpump::ColdSide;
use crate::source::Memory;
use crate::year::{MachineSystem, System};

/// Outdoor temperatures between which a balance point is looked for, °C.
const RANGE_C: (f64, f64) = (-35.0, 20.0);
/// The balance point is solved to this many kelvins.
const TOLERANCE_K: f64 = 1e-4;
/// Iterations of Brent's method; each at least halves the interval every second step.
const MAX_ITERATIONS: u64 = 100;

/// Where a machine's greatest output meets the load.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum BalancePoint {
    /// At this outdoor temperature, °C.
    At(f64),
    /// The machine carries the load at every temperature down to this, °C.
    BelowRange(f64),
    /// The machine does not carry the load even at this, °C.
    AboveRange(f64),
}

impl BalancePoint {
    /// The temperature when it was found.
    pub fn c(self) -> Option<f64> {
        match self {
            Self::At(c) => Some(c),
            Self::BelowRange(_) | Self::AboveRange(_) => None,
        }
    }
}

/// Surplus of a machine over the home's load at an outdoor temperature, kW.
struct Surplus<'a> {
    system: &'a System,
    machine: &'a MachineSystem,
    indoor_c: f64,
    water_kw: f64,
    ground: Memory,
}

/// What a machine's source offers on a cold night of an outdoor temperature (°C), ground and water at their coldest.
pub(super) fn cold_side(machine: &MachineSystem, outdoor_c: f64, ground: &Memory) -> ColdSide {
    let offer = machine.source.cold_offer(outdoor_c, ground);
    ColdSide {
        open_c: offer.open_c,
        k_per_kw: offer.k_per_kw,
        relative_humidity: None,
    }
}

impl Surplus<'_> {
    fn at(&self, outdoor_c: f64) -> f64 {
        let (_, greatest_kw) = output_range_kw(
            self.system,
            self.machine,
            self.indoor_c,
            outdoor_c,
            &self.ground,
        );
        greatest_kw - load_kw(self.system, self.indoor_c, outdoor_c) - self.water_kw
    }
}

/// The steady loss without gains, kW.
fn load_kw(system: &System, indoor_c: f64, outdoor_c: f64) -> f64 {
    let fabric = &system.home.fabric;
    fabric.design_load_kw(indoor_c, outdoor_c).max(0.0)
}

/// Whether a machine stops carrying the load at its balance point because the flow that the emitters need there passes its highest.
pub fn limited_by_flow(
    system: &System,
    machine: &MachineSystem,
    indoor_c: f64,
    point: BalancePoint,
    ground: Memory,
) -> bool {
    /// The far side of the point, K: well beyond what it is solved to.
    const BEYOND_K: f64 = 0.01;
    let Some(at_c) = point.c() else { return false };
    let outdoor_c = at_c - BEYOND_K;
    let emitters = &system.home.emitters;
    let load_kw = load_kw(system, indoor_c, outdoor_c);
    let flow_c = emitters.at_load(load_kw, indoor_c).flow_c + emitters.header_k();
    let cold = cold_side(machine, outdoor_c, &ground);
    flow_c > machine.machine.limits().highest_flow_at(cold.open_c)
}

/// Least output without going on and off and greatest output, kW, at an outdoor temperature and the flow temperature that
/// the emitters need for the steady loss there; ground and water at their coldest.
pub fn output_range_kw(
    system: &System,
    machine: &MachineSystem,
    indoor_c: f64,
    outdoor_c: f64,
    ground: &Memory,
) -> (f64, f64) {
    let emitters = &system.home.emitters;
    let load_kw = load_kw(system, indoor_c, outdoor_c);
    let cold = cold_side(machine, outdoor_c, ground);
    let flow_c = emitters.at_load(load_kw, indoor_c).flow_c + emitters.header_k();
    let greatest_kw = machine.machine.greatest_output_kw(&cold, flow_c);
    let least_kw = machine.machine.least_output_kw(&cold, flow_c);
    (least_kw.min(greatest_kw), greatest_kw)
}

impl CostFunction for Surplus<'_> {
    type Param = f64;
    type Output = f64;

    fn cost(&self, outdoor_c: &f64) -> Result<f64, Error> {
        Ok(self.at(*outdoor_c))
    }
}

/// The balance point of a machine: the load is the steady loss from the set point without gains, as for the design heat
/// load; `with_hot_water` adds the mean power of the day's hot water; `ground` is what the ground
/// remembers.
///
/// Nothing when the solver does not converge.
pub fn balance_point(
    system: &System,
    machine: &MachineSystem,
    indoor_c: f64,
    with_hot_water: bool,
    ground: Memory,
) -> Option<BalancePoint> {
    let daily_kwh = system
        .home
        .hot_water
        .as_ref()
        .map_or(0.0, |water| water.mean_daily_kwh());
    let water_kw = if with_hot_water {
        daily_kwh / 24.0
    } else {
        0.0
    };
    let surplus = Surplus {
        system,
        machine,
        indoor_c,
        water_kw,
        ground,
    };
    let (low_c, high_c) = RANGE_C;
    if surplus.at(low_c) >= 0.0 {
        return Some(BalancePoint::BelowRange(low_c));
    }
    if surplus.at(high_c) <= 0.0 {
        return Some(BalancePoint::AboveRange(high_c));
    }
    let solver = BrentRoot::new(low_c, high_c, TOLERANCE_K);
    let solved = Executor::new(surplus, solver)
        .configure(|state| state.param(low_c).max_iters(MAX_ITERATIONS))
        .run()
        .ok()?;
    let state = solved.state();
    let &at_c = state.get_best_param()?;
    (state.get_iter() < MAX_ITERATIONS).then_some(BalancePoint::At(at_c))
}
