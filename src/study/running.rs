//! The same system under another running pattern, and a case whose heat loss is scaled to what was metered.

use super::case::{Case, Contender};
use super::outcome::Outcome;
use crate::fault::{self, Fault};
use crate::home::Pattern;
use crate::plan::following;
use crate::problem::{Place, Problem, Problems};

/// Runs a system under another pattern, everything else staying as it is.
///
/// # Errors
/// When a bill cannot be made.
pub fn under_pattern(
    case: &Case,
    contender: &Contender,
    pattern: &Pattern,
) -> Result<Outcome, Problems> {
    let plan = following(
        pattern,
        &case.site.civil,
        contender.ability,
        contender.plan.electricity.clone(),
        contender.plan.fuel.clone(),
    );
    let mut other = Contender {
        plan: plan.into(),
        pattern: pattern.clone(),
        ..contender.clone()
    };
    other.moved();
    case.run_one(&other, None)
}

/// Multiples of the heat loss between which the metered fuel is looked for.
const RANGE: (f64, f64) = (0.3, 3.0);
/// The fuel is met to this share.
const TOLERANCE: f64 = 1e-4;
/// Most steps; false position needs about six.
const MAX_STEPS: usize = 40;

/// The multiple of the heat loss at which today's system uses a fuel (gross kWh in a mean year), applied to every system.
///
/// Emitters and gains stay. Design heat loads stay too: readings size nothing.
///
/// # Errors
/// When no multiple from 0.3 to 3 does, or a bill cannot be made.
pub fn scale_to_fuel(case: &mut Case, fuel_kwh: f64) -> Result<f64, Problems> {
    let off = |factor: f64| -> Result<f64, Problems> {
        let mut today = case.contenders[0].clone();
        let fabric = &mut today.system.home.fabric;
        *fabric = fabric.with_heat_loss(fabric.heat_loss_w_per_k() * factor);
        Ok(case.run_one(&today, None)?.mean_sums().fuel_kwh / fuel_kwh - 1.0)
    };
    let (mut low, mut high) = RANGE;
    let (mut low_off, mut high_off) = (off(low)?, off(high)?);
    let (least, most) = (1.0 + low_off, 1.0 + high_off);
    let refuse = || -> Problems {
        let found = format!(
            "today's system would use {:.0} to {:.0} kWh with 0.3 to 3 times the heat loss, the meter says {fuel_kwh:.0} kWh",
            least * fuel_kwh,
            most * fuel_kwh
        );
        Problem::new(
            Place::field("home.bills.scale"),
            found,
            "readings that the home can explain",
            "check the readings, the heat loss and the running pattern, or remove scale",
        )
        .into()
    };
    if low_off > 0.0 || high_off < 0.0 {
        return Err(refuse());
    }
    for step in 0..MAX_STEPS {
        let middle = if step % 4 == 3 {
            0.5 * (low + high)
        } else {
            (low * high_off - high * low_off) / (high_off - low_off)
        };
        let found = off(middle)?;
        if found.abs() < TOLERANCE {
            for contender in &mut case.contenders {
                let fabric = &mut contender.system.home.fabric;
                *fabric = fabric.with_heat_loss(fabric.heat_loss_w_per_k() * middle);
                if fault::on(Fault::BillsForSizing) {
                    contender.design_load_kw *= middle;
                }
                contender.moved();
            }
            return Ok(middle);
        }
        if found > 0.0 {
            (high, high_off) = (middle, found)
        } else {
            (low, low_off) = (middle, found)
        }
    }
    Err(refuse())
}
