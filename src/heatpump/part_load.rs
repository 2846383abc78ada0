//! Running below the least output: on and off.

use crate::extremes::{greater, lesser};
use crate::fault::{self, Fault};

/// Most starts an hour that a controller allows, once at half load; common practice, no source.
const MOST_STARTS_PER_HOUR: f64 = 3.0;
/// Widest spread of flow and return while running, K: the pump speeds up, or the machine's own protection acts, beyond it. The
/// widest standard spread of EN 14511.
const WIDEST_SPREAD_K: f64 = 10.0;

/// How much hotter the flow is while running than it would be running all the time at the same heat, K.
///
/// The water keeps its flow rate, so its spread grows from `spread_k` (at the mean load) to `spread_k / share` while running, and
/// the flow is hotter by the running spread × (1 − share): 0.31 at a running spread of 5 K is 3.45 K. `share` is the
/// share of the time that it runs, 0..1.
pub fn running_rise_k(spread_k: f64, share: f64) -> f64 {
    if fault::on(Fault::CyclingAtMeanFlow) {
        return 0.0;
    }
    running_spread_k(spread_k, share) * (1.0 - share.clamp(0.0, 1.0))
}

/// How [`running_rise_k`] changes with the share of the time that it runs, K for the whole time.
pub(super) fn rise_per_share_k(spread_k: f64, share: f64) -> f64 {
    if fault::on(Fault::CyclingAtMeanFlow) || share >= 1.0 {
        return 0.0;
    }
    let unheld_k = greater(spread_k, 0.0) / share;
    let widest_k = greater(spread_k, WIDEST_SPREAD_K);
    // A spread that is held stays as the share changes; one that is not grows as its inverse.
    if unheld_k > widest_k {
        -widest_k
    } else {
        -unheld_k / share
    }
}

/// Flow minus return while running, K: the spread at the mean load over the share of the time that it runs, held to what pump
/// and machine allow.
pub fn running_spread_k(spread_k: f64, share: f64) -> f64 {
    let unheld = greater(spread_k, 0.0) / share.clamp(f64::MIN_POSITIVE, 1.0);
    lesser(unheld, greater(spread_k, WIDEST_SPREAD_K))
}

/// Starts an hour of a machine that runs a share of the time: a thermostat's parabola, most at half load.
///
/// Thermostat cycling rate `N = 4 Nmax X (1 − X)` (textbook; behind the cycling coefficients of NEMA and of EN 14825).
pub fn starts_per_hour(share: f64) -> f64 {
    let share = share.clamp(0.0, 1.0);
    4.0 * MOST_STARTS_PER_HOUR * share * (1.0 - share)
}

/// Electricity of starting up, as a mean power over the time in which a machine cycles, kW.
///
/// EN 14825 for hydronic machines, `COPbin = COP · CR/(Cc · CR + 1 − Cc)`, is the same as a loss of (1 − Cc) of the running power
/// for the share of the time that the machine stands. The standard's coefficient holds the machine's thermostat-off power in that
/// time: it is not to be charged besides. `running_kw` is its electricity while running as in the tested points: what a pump takes more at
/// home, and frost, are no part of it.
pub fn start_up_loss_kw(running_kw: f64, share: f64, cycling_coefficient: f64) -> f64 {
    (1.0 - cycling_coefficient) * running_kw * (1.0 - share.clamp(0.0, 1.0))
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::heatpump::rating::cycling_cop;
    use proptest::prelude::*;

    /// By hand, 5 K × (1 − 0.31): running fraction 0.31 at 5 K is +3.5 K.
    #[test]
    fn the_flow_is_hotter_while_running() {
        assert!((running_rise_k(0.31 * 5.0, 0.31) - 3.45).abs() < 1e-12);
        assert_eq!(running_rise_k(5.0, 1.0), 0.0);
        assert!(running_rise_k(5.0, 0.01) < 10.0);
    }

    #[test]
    fn starts_are_most_at_half_load() {
        assert_eq!(starts_per_hour(0.5), MOST_STARTS_PER_HOUR);
        assert_eq!(starts_per_hour(0.0), 0.0);
        assert_eq!(starts_per_hour(1.0), 0.0);
    }

    proptest! {
        /// The loss as a mean power is EN 14825's corrected COP.
        #[test]
        fn the_loss_is_that_of_the_standard(
            share in 0.01..1.0_f64, cop in 1.5..7.0_f64, running in 0.2..5.0_f64, cc in 0.8..1.0_f64,
        ) {
            let heat = share * running * cop;
            let electric = share * running + start_up_loss_kw(running, share, cc);
            prop_assert!((heat / electric - cycling_cop(cop, share, cc)).abs() < 1e-9);
        }
    }
}
