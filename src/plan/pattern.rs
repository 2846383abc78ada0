//! A plan that follows a running pattern.

use crate::calendar::{CivilHour, HourColumn};
use crate::fault::{self, Fault};
use crate::home::{FROST_C, Pattern, WarmUp};
use crate::year::{Plan, Recovery, Signal};

/// A warm-up is looked ahead for at most this long, h. A choice of ours: a heavy home on its coldest morning.
const LONGEST_WARM_UP_H: u8 = 12;
/// A warm-up in time begins once it would take more than this share of the heat there is: the rest meets colder hours to come.
const RESERVE: f64 = 0.85;
/// For so long after a set point has risen backup leaves a late warm-up to the machine, h. A choice of ours.
const BACKUP_WAITS_H: usize = 3;

/// What a plan has to know about the heating it is for.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Ability {
    /// Heat it can bring the rooms at the design point without backup, kW.
    pub output_kw: f64,
    /// Backup only keeps the rooms within this many kelvins of the set point.
    pub backup_band_k: f64,
}

/// A plan that follows a pattern over the civil clock of an axis.
///
/// Backup follows the lowest set point of the warm-up: a recovery that comes late is left to the machine for a few hours, so
/// that no cold morning is bought at COP 1.
pub fn following(
    pattern: &Pattern,
    civil: &[CivilHour],
    ability: Ability,
    electricity: Signal,
    fuel: Option<Signal>,
) -> Plan {
    let set_point_c: HourColumn = civil
        .iter()
        .map(|hour| match hour.hour {
            0..7 | 9..16 | 23.. if fault::on(Fault::RunLikeBoiler) => FROST_C,
            _ => pattern.set_point_c(hour),
        })
        .collect();
    let backup_below_c = (0..set_point_c.len())
        .map(|hour| {
            let earliest = hour.saturating_sub(BACKUP_WAITS_H);
            let lowest_c = set_point_c[earliest..=hour]
                .iter()
                .copied()
                .fold(f64::INFINITY, f64::min);
            lowest_c - ability.backup_band_k
        })
        .collect();
    let (longest_h, begins_above_kw) = match pattern.warm_up {
        WarmUp::AtTheTime => (0, 0.0),
        WarmUp::InTime => (LONGEST_WARM_UP_H, RESERVE * ability.output_kw),
        WarmUp::Ahead(hours) => (hours.clamp(1, LONGEST_WARM_UP_H), 0.0),
    };
    let recovery = (!pattern.is_continuous()).then(|| {
        let (hours_ahead, target_c) = rises(&set_point_c, longest_h);
        Recovery {
            hours_ahead,
            target_c: target_c.into(),
            begins_above_kw,
            at_the_time: pattern.warm_up == WarmUp::AtTheTime,
        }
    });
    Plan {
        set_point_c,
        backup_below_c,
        asked_c: None,
        store_shift_k: None,
        recovery,
        comfort_c: pattern.comfort_c(),
        electricity,
        fuel,
    }
}

/// For every hour how far ahead the set point next rises (0 where it does not within `longest_h`), and to what.
fn rises(set_point_c: &[f64], longest_h: u8) -> (Vec<u8>, Vec<f64>) {
    let mut hours_ahead = vec![0; set_point_c.len()];
    let mut target_c = set_point_c.to_vec();
    // Backwards: one hour before a rise is one hour ahead of it, the hour before that two.
    for hour in (0..set_point_c.len().saturating_sub(1)).rev() {
        let next = hour + 1;
        if longest_h == 0 {
            break;
        } else if set_point_c[next] > set_point_c[hour] {
            (hours_ahead[hour], target_c[hour]) = (1, set_point_c[next]);
        } else if hours_ahead[next] > 0
            && hours_ahead[next] < longest_h
            && target_c[next] > set_point_c[hour]
        {
            (hours_ahead[hour], target_c[hour]) = (hours_ahead[next] + 1, target_c[next]);
        }
    }
    (hours_ahead, target_c)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn rises_are_seen_from_ahead_and_not_from_behind() {
        let day = [20.0, 20.0, 16.0, 16.0, 16.0, 16.0, 20.0, 20.0];
        let (ahead, target) = rises(&day, 3);
        assert_eq!(ahead, [0, 0, 0, 3, 2, 1, 0, 0]);
        assert_eq!(target[3..6], [20.0; 3]);
        // A comfortable evening is not warmed up for a night that asks for less.
        let (ahead, _) = rises(&[21.0, 16.0, 18.0], 12);
        assert_eq!(ahead, [0, 1, 0]);
    }
}
