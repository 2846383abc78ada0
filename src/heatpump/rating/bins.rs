//! The bin method: points in, seasonal figures out.

use super::climate::{BALANCE_C, Climate};
use crate::heatpump::idle::IdlePower;

/// Efficiency of electricity generation in EU 811/2013 and 813/2013.
const PRIMARY_ENERGY: f64 = 2.5;
/// Deduction for temperature controls, points of percent (Regulation (EU) 813/2013 \[from memory\]).
const CONTROL_PERCENT: f64 = 3.0;
/// Deduction for brine and ground-water pumps, points of percent (Regulation (EU) 813/2013 \[from memory\]).
const GROUND_PUMP_PERCENT: f64 = 5.0;

/// What a machine gives at one outdoor temperature of the rating.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct RatingPoint {
    /// Outdoor temperature, °C.
    pub outdoor_c: f64,
    /// Capacity declared: the load where the machine can match it, else the nearest it can give, kW.
    pub capacity_kw: f64,
    /// COP at that capacity.
    pub cop: f64,
}

/// What the method needs besides the points.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct RatingCase {
    /// Climate.
    pub climate: Climate,
    /// Design load Pdesignh, kW.
    pub design_load_kw: f64,
    /// Operation limit TOL, °C: the machine gives nothing below.
    pub operation_limit_c: f64,
    /// Degradation coefficient Cc.
    pub cycling_coefficient: f64,
    /// Idle powers.
    pub idle: IdlePower,
    /// Whether a brine or ground-water pump belongs to the machine.
    pub ground_pump: bool,
}

/// A point after the correction for cycling.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct RatedPoint {
    /// What was declared.
    pub declared: RatingPoint,
    /// Part-load ratio, 0..1.
    pub part_load_ratio: f64,
    /// Load, kW.
    pub load_kw: f64,
    /// Capacity ratio, ≤ 1.
    pub capacity_ratio: f64,
    /// COP at part load, cycling included.
    pub cop: f64,
}

/// One bin of the sum.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Bin {
    /// Outdoor temperature, °C.
    pub outdoor_c: f64,
    /// Hours.
    pub hours: f64,
    /// Load, kW.
    pub load_kw: f64,
    /// Supplementary heat, kW.
    pub heater_kw: f64,
    /// COP of the machine.
    pub cop: f64,
}

/// Seasonal figures.
#[derive(Debug, Clone, PartialEq)]
pub struct Rating {
    /// Seasonal COP, idle modes included.
    pub scop: f64,
    /// Active mode, supplementary heater included.
    pub scop_on: f64,
    /// Active mode, without the heater.
    pub scop_net: f64,
    /// Seasonal space-heating efficiency ηs on primary energy, percent.
    pub eta_s_percent: f64,
    /// Annual heating demand, kWh.
    pub heat_kwh: f64,
    /// Annual electricity, kWh.
    pub electricity_kwh: f64,
    /// Annual supplementary heat, kWh.
    pub heater_kwh: f64,
    /// The points after correction.
    pub points: Vec<RatedPoint>,
    /// Every bin.
    pub bins: Vec<Bin>,
}

/// COP of a machine that cycles: `COP · CR / (Cc · CR + 1 − Cc)`, EN 14825, hydronic.
pub fn cycling_cop(cop: f64, capacity_ratio: f64, cycling_coefficient: f64) -> f64 {
    cop * capacity_ratio / (cycling_coefficient * capacity_ratio + 1.0 - cycling_coefficient)
}

/// Rates a machine by the bin method of EN 14825 as the regulation's worked example does it: the cycling correction is made
/// at the points, and the corrected COP is joined by straight lines, continued beyond the warmest two; below the coldest point
/// both are level.
///
/// Returns nothing for fewer than two points, which no straight line joins. Points need no order.
pub fn rate(points: &[RatingPoint], case: &RatingCase) -> Option<Rating> {
    let mut declared = points.to_vec();
    // There is no load to match from the balance temperature up.
    declared.retain(|point| point.outdoor_c < BALANCE_C);
    declared.sort_by(|a, b| a.outdoor_c.total_cmp(&b.outdoor_c));
    declared.dedup_by(|a, b| a.outdoor_c == b.outdoor_c);
    if declared.len() < 2 {
        return None;
    }
    let points: Vec<_> = declared
        .iter()
        .map(|&declared| {
            let part_load_ratio = case.climate.part_load_ratio(declared.outdoor_c);
            let load_kw = part_load_ratio * case.design_load_kw;
            let capacity_ratio = (load_kw / declared.capacity_kw).min(1.0);
            RatedPoint {
                declared,
                part_load_ratio,
                load_kw,
                capacity_ratio,
                cop: cycling_cop(declared.cop, capacity_ratio, case.cycling_coefficient),
            }
        })
        .collect();

    let bins: Vec<_> = case
        .climate
        .bins()
        .map(|(outdoor_c, hours)| {
            let load_kw = case.climate.part_load_ratio(outdoor_c) * case.design_load_kw;
            let capacity_kw = if outdoor_c < case.operation_limit_c {
                0.0
            } else {
                line(&points, outdoor_c, |p| p.declared.capacity_kw)
            };
            Bin {
                outdoor_c,
                hours,
                load_kw,
                heater_kw: (load_kw - capacity_kw).max(0.0),
                cop: line(&points, outdoor_c, |p| p.cop),
            }
        })
        .collect();
    let sum = |f: &dyn Fn(&Bin) -> f64| bins.iter().map(|bin| bin.hours * f(bin)).sum::<f64>();
    let heat_kwh = sum(&|bin| bin.load_kw);
    let heater_kwh = sum(&|bin| bin.heater_kw);
    let machine_kwh = sum(&|bin| (bin.load_kw - bin.heater_kw) / bin.cop);
    let scop_on = heat_kwh / (machine_kwh + heater_kwh);
    let modes = case.climate.mode_hours();
    let idle_kwh = modes.thermostat_off * case.idle.thermostat_off_kw
        + modes.standby * case.idle.standby_kw
        + modes.crankcase * case.idle.crankcase_kw
        + modes.off * case.idle.off_kw;
    let electricity_kwh = heat_kwh / scop_on + idle_kwh;
    let scop = heat_kwh / electricity_kwh;
    let pumps = if case.ground_pump {
        GROUND_PUMP_PERCENT
    } else {
        0.0
    };
    Some(Rating {
        scop,
        scop_on,
        scop_net: (heat_kwh - heater_kwh) / machine_kwh,
        eta_s_percent: 100.0 * scop / PRIMARY_ENERGY - CONTROL_PERCENT - pumps,
        heat_kwh,
        electricity_kwh,
        heater_kwh,
        points,
        bins,
    })
}

/// Straight lines through points in rising order; level below the first, continued above the last.
fn line(points: &[RatedPoint], at: f64, value: impl Fn(&RatedPoint) -> f64) -> f64 {
    let after = points
        .iter()
        .position(|p| p.declared.outdoor_c >= at)
        .unwrap_or(points.len() - 1);
    if after == 0 {
        return value(&points[0]);
    }
    let (a, b) = (&points[after - 1], &points[after]);
    let share = (at - a.declared.outdoor_c) / (b.declared.outdoor_c - a.declared.outdoor_c);
    value(a) + share * (value(b) - value(a))
}

#[cfg(test)]
mod tests {
    use super::*;

    /// The regression example of EN 14825 for a fixed-capacity machine (inputs \[from memory\], result computed).
    /// Its COP is corrected at the points; bin by bin would give 3.625 and 3.674 (`tests/reference/rating.py`).
    #[test]
    fn the_worked_example_comes_out_to_its_printed_digits() {
        let declared = [
            (-10.0, 7.80, 2.60),
            (-7.0, 9.55, 3.26),
            (-6.0, 9.70, 3.30),
            (2.0, 11.17, 4.00),
            (7.0, 12.66, 4.91),
            (12.0, 14.30, 5.50),
        ]
        .map(|(outdoor_c, capacity_kw, cop)| RatingPoint {
            outdoor_c,
            capacity_kw,
            cop,
        });
        let case = RatingCase {
            climate: Climate::Average,
            design_load_kw: 11.46,
            operation_limit_c: -10.0,
            cycling_coefficient: 0.9,
            idle: IdlePower::usual(0.0),
            ground_pump: false,
        };
        let rating = rate(&declared, &case).unwrap();
        let near = |found: f64, printed: f64, digit: f64| {
            assert!(
                (found - printed).abs() < 0.5 * digit,
                "{found} against {printed}"
            );
        };
        let cop_at = |outdoor_c| {
            let point = rating
                .points
                .iter()
                .find(|p| p.declared.outdoor_c == outdoor_c);
            point.unwrap().cop
        };
        near(cop_at(2.0), 3.700, 0.001);
        near(cop_at(7.0), 4.027, 0.001);
        near(cop_at(12.0), 3.214, 0.001);
        near(rating.heat_kwh, 23672.0, 1.0);
        near(rating.heater_kwh, 120.7, 0.1);
        near(rating.scop_on, 3.598, 0.001);
        near(rating.scop_net, 3.646, 0.001);
        // Without idle power the seasonal figure is that of the active mode.
        assert!((rating.scop - rating.scop_on).abs() < 1e-12);
        near(rating.eta_s_percent, 100.0 * 3.59757 / 2.5 - 3.0, 0.001);
    }

    #[test]
    fn a_machine_that_matches_its_load_has_its_own_cop() {
        let points = [-10.0, 15.0].map(|outdoor_c| RatingPoint {
            outdoor_c,
            capacity_kw: 100.0,
            cop: 4.0,
        });
        let case = |cycling_coefficient| RatingCase {
            climate: Climate::Average,
            design_load_kw: 5.0,
            operation_limit_c: -20.0,
            cycling_coefficient,
            idle: IdlePower::usual(5.0),
            ground_pump: true,
        };
        // So large a machine cycles all the time; without the cycling loss its COP is its own.
        let rating = rate(&points, &case(1.0)).unwrap();
        assert!((rating.scop_on - 4.0).abs() < 1e-12 && (rating.scop_net - 4.0).abs() < 1e-12);
        assert!(rating.scop < rating.scop_on && rating.heater_kwh == 0.0);
        let cycling = rate(&points, &case(0.9)).unwrap();
        assert!(cycling.scop_on < rating.scop_on);
        assert!(rate(&points[..1], &case(0.9)).is_none());
    }

    #[test]
    fn cycling_costs_nothing_at_full_capacity_and_all_at_none() {
        assert!((cycling_cop(4.0, 1.0, 0.9) - 4.0).abs() < 1e-12);
        assert_eq!(cycling_cop(4.0, 0.0, 0.9), 0.0);
        assert!((cycling_cop(4.0, 0.3, 1.0) - 4.0).abs() < 1e-12);
    }
}
