//! A plain timer.

use super::Shifting;
use crate::calendar::CivilHour;
use crate::year::Plan;

/// Days whose prices differ by less than this share of the dearest are left as they are. A choice of ours.
const WORTH_IT: f64 = 0.05;

/// The plan with rooms and store at the top of their latitude in cheap hours, and at the bottom in all others.
///
/// An hour is cheap when its price is nearer to the lowest of its civil day than to the highest. The backup heater does not
/// preheat: it keeps to the plan's own threshold, lowered by what the rooms may be cooler.
pub fn timer(plan: &Plan, civil: &[CivilHour], shifting: &Shifting) -> Plan {
    let mut shifted = plan.clone();
    shifted.asked_c = Some(plan.set_point_c.clone());
    let mut store_shift_k = vec![0.0; civil.len()];
    let mut first = 0;
    for day in civil.chunk_by(|a, b| a.date == b.date) {
        let hours = first..first + day.len();
        first = hours.end;
        let prices = &plan.electricity.price[hours.clone()];
        let low = prices.iter().copied().fold(f64::INFINITY, f64::min);
        let high = prices.iter().copied().fold(f64::NEG_INFINITY, f64::max);
        if high - low <= WORTH_IT * high.abs() {
            continue;
        }
        for hour in hours {
            let cheap = plan.electricity.price[hour] < f64::midpoint(low, high);
            let (rooms_k, store_k) = if cheap {
                (shifting.rooms.above_k, shifting.store.above_k)
            } else {
                (-shifting.rooms.below_k, -shifting.store.below_k)
            };
            shifted.set_point_c[hour] += rooms_k;
            shifted.backup_below_c[hour] -= shifting.rooms.below_k;
            store_shift_k[hour] = store_k;
        }
    }
    shifted.store_shift_k = Some(store_shift_k.into());
    shifted
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::calendar::HourAxis;
    use crate::home::Pattern;
    use crate::plan::shift::Latitude;
    use crate::plan::{Ability, following};
    use crate::year::Signal;

    fn shifted(price: impl Fn(usize) -> f64) -> Plan {
        let axis = HourAxis {
            start: "2023-01-09T00:00:00Z".parse().unwrap(),
            hours: 48,
        };
        let signal = Signal::bought((0..48).map(price).collect(), vec![0.2; 48]);
        let ability = Ability {
            output_kw: 6.0,
            backup_band_k: 0.5,
        };
        let civil = axis.civil(chrono_tz::Tz::UTC);
        let plan = following(&Pattern::continuous(20.0), &civil, ability, signal, None);
        let shifting = Shifting {
            rooms: Latitude {
                above_k: 1.5,
                below_k: 0.5,
            },
            store: Latitude {
                above_k: 5.0,
                below_k: 0.0,
            },
        };
        timer(&plan, &civil, &shifting)
    }

    #[test]
    fn cheap_hours_are_warm_and_the_others_coast() {
        let plan = shifted(|hour| if hour % 24 < 5 { 0.09 } else { 0.30 });
        let store = plan.store_shift_k.unwrap();
        for (hour, store_k) in store.iter().enumerate() {
            let cheap = hour % 24 < 5;
            assert_eq!(plan.set_point_c[hour], if cheap { 21.5 } else { 19.5 });
            assert_eq!(*store_k, if cheap { 5.0 } else { 0.0 });
            assert_eq!(plan.backup_below_c[hour], 19.0);
        }
    }

    #[test]
    fn a_flat_price_shifts_nothing() {
        let plan = shifted(|_| 0.25);
        assert!(plan.set_point_c.iter().all(|&c| c == 20.0));
        assert!(plan.store_shift_k.unwrap().iter().all(|&k| k == 0.0));
    }
}
